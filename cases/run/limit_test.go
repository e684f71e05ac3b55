package run

import (
	"context"
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"

	"creaseproof/cases"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/casefile"
	"creaseproof/cases/limits"
)

const layeredCase = `[space]
coordinates = ["x", "y", "z"]
unknowns = ["u"]
constants = ["eps", "m"]
[let]
R = "u_z - (u_x^2 + u_y^2)/2"
L = "u_xx + u_yy"
[model]
residual = "R"
bending = "L"
energy = "R^2/(2 eps) + eps L^2/2"
`

const limitWall = `[[limit]]
name = "wall"
values = { m = ["1", "1/2"] }
approximation = "profile"
plus = "m x + m^2 z/2"
minus = "-m x + m^2 z/2"
box = { x = ["-1", "1"], y = ["0", "1"], z = ["0", "1"] }
eps = ["1/20", "1/40", "1/80"]
`

const unitBox = "box = { x = ['-1', '1'], y = ['0', '1'], z = ['0', '1'] }\n"

func limitOfText(t *testing.T, text string) *LimitResult {
	t.Helper()
	out := Limit(t.Context(), []*cases.Case{parsed(t, layeredCase+text)}, LimitOptions{Jobs: 1})
	require.Len(t, out.Results, 1)
	return out.Results[0]
}

func TestLimitOfAWall(t *testing.T) {
	r := limitOfText(t, limitWall)
	require.NoError(t, r.Err)
	require.Len(t, r.Values, 2)
	assert.True(t, r.Met())
	for i, want := range []float64{2. / 3, 1. / 12} {
		v := r.Values[i]
		assert.Equal(t, limits.Sharp, v.Outcome)
		assert.InEpsilon(t, want, *v.Target, 1e-13)
		assert.InEpsilon(t, want, v.Energy[2], 1e-9)
		assert.InEpsilon(t, 1, *v.Equipartition, 1e-9)
		assert.False(t, v.TargetClaimed)
	}
	assert.True(t, r.Values[0].BelowRounding)
	assert.Nil(t, r.Values[0].Rate)
}

func TestLimitsThatAreNotSharp(t *testing.T) {
	for name, c := range map[string]struct {
		text    string
		outcome string
		says    string
	}{
		"wrong profile": {limitWall + "profile = '(1 + tanh(s))/2'\n", limits.Above, "above the jump energy by 0.1667 (25%)"},
		"claimed less":  {limitWall + "energy = '3 m^3/5'\n", limits.Above, "above the jump energy"},
		"claimed more":  {limitWall + "energy = '3 m^3/4'\n", limits.Below, "below the jump energy"},
		"claimed limit": {limitWall + "profile = '(1 + tanh(s))/2'\nenergy = '5 m^3/6'\n", limits.Undecided, "but the integral over the jumps is 0.666666666"},
		"cone":          {"[[limit]]\nname='cone'\napproximation='front'\nbranches=['sqrt(x^2 + y^2) + z/2', '1/4']\ncombine='max'\nbox={x=['-1','1'],y=['-1','1'],z=['0','1']}\neps=['1/10']\nenergy='1/24'\n", limits.Infinite, "the branch sqrt(x^2 + y^2) + z/2 is not smooth"},
		"mollified":     {"[[limit]]\nname='m'\napproximation='mollified'\nbranches=['x + z/2', '-x + z/2']\ncombine='max'\neps=['1/20','1/40']\nwidth='20'\n" + unitBox, limits.Above, "above the jump energy"},
		"too few":       {"[[limit]]\nname='m'\napproximation='front'\nbranches=['x + z/2', '-x + z/2']\ncombine='max'\neps=['1']\n" + unitBox, limits.Undecided, "add smaller eps"},
	} {
		r := limitOfText(t, c.text)
		require.NoError(t, r.Err, name)
		assert.Equal(t, c.outcome, r.Values[0].Outcome, name)
		assert.Contains(t, r.Values[0].Reason, c.says, name)
		assert.False(t, r.Met(), name)
		if c.outcome != limits.Undecided && c.outcome != limits.Below {
			assert.True(t, limitOfText(t, c.text+"expect='"+c.outcome+"'\n").Met(), name)
		}
	}
}

func TestLimitMistakes(t *testing.T) {
	front := func(branches, rest string) string {
		return "[[limit]]\nname='f'\napproximation='front'\nbranches=" + branches + "\ncombine='max'\n" + rest
	}
	for name, c := range map[string]struct{ text, says string }{
		"off the well":      {front("['x + z/3', '0']", "eps=['1/5']\n"+unitBox), "the branch is off the well"},
		"eps rises":         {front("['x + z/2', '0']", "eps=['1/10','1/5']\n"+unitBox), "eps does not fall"},
		"eps of 0":          {front("['x + z/2', '0']", "eps=['0']\n"+unitBox), "not positive"},
		"no value":          {front("['m x + m^2 z/2', '0']", "eps=['1/5']\n"+unitBox), "m has no value"},
		"not affine":        {"[[limit]]\nname='p'\napproximation='profile'\nplus='-(x^2 + y^2)/(2 (z + 2))'\nminus='0'\neps=['1/5']\n" + unitBox, "not affine"},
		"no such name":      {front("['q', '0']", "eps=['1/5']\n"+unitBox), "q"},
		"box without z":     {front("['x + z/2', '0']", "eps=['1/5']\nbox={x=['0','1'],y=['0','1']}\n"), "no interval for z"},
		"empty box":         {front("['x + z/2', '0']", "eps=['1/5']\nbox={x=['1','0'],y=['0','1'],z=['0','1']}\n"), "empty"},
		"no profile":        {limitWall + "profile = 's'\n", "the profile is -1e+04 at s = -10000"},
		"region of two":     {front("['x + z/2', '0']", "eps=['1/5']\nregion={map=['s','t'],over={s=['0','1'],t=['0','1']}}\n"), "in 3 dimensions"},
		"no crease":         {front("['x + z/2', '-x + z/2']", "eps=['1/5']\nbox={x=['1','2'],y=['0','1'],z=['0','1']}\n"), "no crease was found inside"},
		"on the boundary":   {front("['x + z/2', '-x + z/2']", "eps=['1/5']\nbox={x=['0','2'],y=['0','1'],z=['0','1']}\n"), "on its boundary"},
		"a stop in between": {"[[limit]]\nname='p'\napproximation='profile'\nplus='x + z/2'\nminus='y + z/2'\neps=['1/5']\nball={center=['0','0'],radius='1'}\n", "a centre of 2 coordinates"},
	} {
		r := limitOfText(t, c.text)
		assert.ErrorContains(t, r.Err, c.says, name)
		assert.False(t, r.Met(), name)
	}
}

func TestLimitDomains(t *testing.T) {
	if testing.Short() {
		t.Skip("integrates over many domains")
	}
	// A wall through the middle of each domain: its area times 2/3.
	for domain, area := range map[string]float64{
		"ball={center=['0','0','0'],radius='1'}":                                     math.Pi,
		"cylinder={center=['0','0'],radius='1',heights=['0','2']}":                   4,
		"cylinder={center=['0','0'],radius='1',axis='x',heights=['-1','2']}":         math.Pi,
		"region={map=['a','b - a','c'],over={a=['-1','1'],b=['0','1'],c=['0','3']}}": 3,
	} {
		r := limitOfText(t, "[[limit]]\nname='f'\napproximation='front'\nbranches=['x + z/2','-x + z/2']\ncombine='max'\neps=['1/40','1/100']\nwithin=1e-2\n"+domain+"\n")
		require.NoError(t, r.Err, domain)
		v := r.Values[0]
		assert.InEpsilon(t, 2./3*area, *v.Target, 1e-7, domain)
		assert.Equal(t, limits.Sharp, v.Outcome, domain)
	}
}

func TestLimitInterruptedAndTimeout(t *testing.T) {
	list := []*cases.Case{parsed(t, layeredCase+limitWall)}
	ctx, cancel := context.WithCancel(t.Context())
	half := func(ctx context.Context, _ *cases.Case, l *casefile.Limit) ([]limits.Value, error) {
		cancel()
		<-ctx.Done()
		return []limits.Value{limits.Empty(l)}, ctx.Err()
	}
	out := integrateLimits(ctx, list, LimitOptions{}, half)
	assert.True(t, out.Interrupted)
	require.Len(t, out.Results, 1)
	assert.Equal(t, "interrupted", out.Results[0].Values[0].Reason)
	assert.False(t, out.Met())
	one := func(context.Context, *cases.Case, *casefile.Limit) ([]limits.Value, error) {
		v := limits.Empty(&list[0].File.Limits[0])
		v.Eps, v.Energy = []float64{.05}, []float64{1}
		return []limits.Value{v}, context.Canceled
	}
	ctx, cancel = context.WithCancel(t.Context())
	out = integrateLimits(ctx, list, LimitOptions{Jobs: 1}, func(ctx context.Context, c *cases.Case, l *casefile.Limit) ([]limits.Value, error) {
		cancel()
		return one(ctx, c, l)
	})
	assert.True(t, out.Interrupted)
	assert.Equal(t, "interrupted, after 1 of 3 eps", out.Results[0].Values[0].Reason)
	assert.Equal(t, []float64{1}, out.Results[0].Values[0].Energy)
	out = integrateLimits(t.Context(), list, LimitOptions{Timeout: 20 * time.Millisecond}, half)
	assert.False(t, out.Interrupted)
	assert.Equal(t, "not computed within the 20ms allowed", out.Results[0].Values[0].Reason)
	assert.False(t, out.Met())
	out = integrateLimits(t.Context(), list, LimitOptions{}, func(context.Context, *cases.Case, *casefile.Limit) ([]limits.Value, error) { panic("odd") })
	assert.True(t, out.Results[0].Failed)
	assert.False(t, out.Met())
}

func TestLimitDocument(t *testing.T) {
	list := []*cases.Case{parsed(t, layeredCase+limitWall)}
	data, err := json.Marshal(Limit(t.Context(), list, LimitOptions{}).Document(list))
	require.NoError(t, err)
	var doc struct {
		Schema int
		Cases  []struct {
			Case   string
			Limits []map[string]any
		}
	}
	require.NoError(t, json.Unmarshal(data, &doc))
	assert.Equal(t, 1, doc.Schema)
	l := doc.Cases[0].Limits[0]
	for _, k := range []string{"eps", "energy", "compression", "bending", "curvature"} {
		assert.Len(t, l[k], 3, k)
	}
	assert.Equal(t, "wall", l["approximation"])
	assert.NotContains(t, l, "rate")
	assert.Equal(t, true, l["below_rounding"])
}

func TestLimitOfValuesThatBreakAnAssumption(t *testing.T) {
	for name, c := range map[string]struct{ assume, text, says string }{
		"a value":       {`"m > 1"`, limitWall, `the assumption "m > 1" of the case does not hold for m = 1, eps = 1/20`},
		"an eps":        {`"eps < 1/50"`, limitWall, `the assumption "eps < 1/50" of the case does not hold`},
		"a coordinate":  {`"x > 0"`, limitWall, `the assumption "x > 0" of the case does not hold at (x, y, z) = (`},
		"no such value": {`"m > 0", "x < 2", "eps > 0"`, limitWall, ""},
	} {
		text := strings.Replace(layeredCase, "[let]", "assume = ["+c.assume+"]\n[let]", 1)
		out := Limit(t.Context(), []*cases.Case{parsed(t, text+c.text)}, LimitOptions{})
		if c.says == "" {
			assert.NoError(t, out.Results[0].Err, name)
			assert.True(t, out.Met(), name)
			continue
		}
		assert.ErrorContains(t, out.Results[0].Err, c.says, name)
		assert.True(t, out.Faulty(), name)
		assert.Empty(t, out.Results[0].Values, name)
	}
}

const mollified = `[[limit]]
name = "fronts"
approximation = "mollified"
branches = ["x + z/2", "-x + z/2", "y + z/2", "-y + z/2"]
combine = "max(min(1, 3), 2, 4)"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["0", "1/10"] }
eps = ["1/10", "1/12"]
width = "2"
energy = "1/10"
within = 1e-1
`

func TestJobsDoNotChangeLimits(t *testing.T) {
	list := []*cases.Case{parsed(t, layeredCase+"[[limit]]\nname='m'\napproximation='mollified'\nbranches=['x + z/2', '-x + z/2']\ncombine='max'\neps=['1/20','1/40','1/80']\n"+unitBox)}
	one := Limit(t.Context(), list, LimitOptions{Jobs: 1}).Results[0]
	two := Limit(t.Context(), list, LimitOptions{Jobs: 2}).Results[0]
	require.NoError(t, one.Err)
	require.NoError(t, two.Err)
	assert.Equal(t, one.Values, two.Values)
	assert.Len(t, one.Values[0].Energy, 3)
}

func TestMistakesOfMollifiedLimits(t *testing.T) {
	nested := strings.Replace(mollified, `"mollified"`, `"front"`, 1)
	for name, c := range map[string]struct{ text, says string }{
		"a nested front":    {strings.Replace(nested, "width = \"2\"\n", "", 1), "a front of a nested combination"},
		"a branch left out": {strings.Replace(mollified, "2, 4)", "2)", 1), "branch 4 is not used"},
		"no such branch":    {strings.Replace(mollified, "2, 4)", "2, 7)", 1), "there is no branch 7"},
	} {
		r := limitOfText(t, c.text)
		assert.ErrorContains(t, r.Err, c.says, name)
	}
}
