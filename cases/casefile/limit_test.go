package casefile

import (
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

const wall = "[[limit]]\nname='w'\napproximation='profile'\nplus='x'\nminus='-x'\nbox={x=['-1','1'],y=['0','1']}\neps=['1/5']\n"

func TestLimit(t *testing.T) {
	f, err := Decode("t.toml", []byte(head+wall+"energy='2/3'\nexpect='above'\nwithin=1e-2\nvalues={m=['1','2']}\nprofile='(1 + tanh(s))/2'\n"))
	require.NoError(t, err)
	l := f.Limits[0]
	assert.Equal(t, "profile", l.Approximation)
	assert.Equal(t, "above", l.Expect)
	assert.Equal(t, "x", l.Plus.S)
	assert.Equal(t, "1/100", l.Within.RatString())
	assert.Len(t, l.Box, 2)
	assert.Len(t, l.Values[0].List, 2)
}

func TestLimitMistakes(t *testing.T) {
	const front = "[[limit]]\nname='f'\napproximation='front'\nbranches=['x','-x']\ncombine='max'\n"
	for name, c := range map[string]struct{ text, says string }{
		"unknown key":    {wall + "colour='red'\n", "a [[limit]] has the keys"},
		"unknown kind":   {"[[limit]]\nname='w'\napproximation='smooth'\neps=['1']\n", `write approximation = "profile" or "front" or "mollified"`},
		"no eps":         {front + "box={x=['0','1'],y=['0','1']}\n", `has no "eps"`},
		"no domain":      {front + "eps=['1']\n", `has no "box"`},
		"two domains":    {wall + "ball={center=['0','0'],radius='1'}\n", "more than one domain"},
		"no branches":    {"[[limit]]\nname='f'\napproximation='front'\neps=['1']\n", `has no "branches"`},
		"foreign key":    {wall + "combine='max'\n", `has no "combine"`},
		"width of front": {front + "width='3'\neps=['1']\n", `has no "width"`},
		"named twice":    {wall + wall, `the limit "w" is already on line 5`},
		"rough":          {wall + "within=0.5\n", "at most 1/10"},
		"no expectation": {wall + "expect='proved'\n", `write expect = "sharp"`},
		"half a region":  {front + "eps=['1']\nregion={map=['s','t']}\n", `has no "over"`},
	} {
		_, err := Decode("t.toml", []byte(head+c.text))
		assert.ErrorContains(t, err, c.says, name)
	}
	_, err := Decode("t.toml", []byte(wall))
	assert.ErrorContains(t, err, "no [space]")
}
