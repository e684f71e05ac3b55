package semidefinite

import (
	"bytes"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestSDPARoundTrip(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 1))
	for range 20 {
		p := randomFeasible(rng, []int{4, -3, 2}, 1+rng.IntN(5), 0, 0.5)
		var file bytes.Buffer
		require.NoError(t, WriteSDPA(&file, p))
		got, err := ReadSDPA(&file)
		require.NoError(t, err)
		want, _ := p.merged()
		want.Free = nil
		assert.Equal(t, want, got)
	}
}

func TestSDPAFreeVariable(t *testing.T) {
	p := lowest([]float64{1, -1, 0, 0, 2})
	var file bytes.Buffer
	require.NoError(t, WriteSDPA(&file, p))
	split, err := ReadSDPA(&file)
	require.NoError(t, err)
	assert.Equal(t, []int{3, -2}, split.Blocks)
	assert.Empty(t, split.Free)
	want := solve(t, p, Options{})
	got := solve(t, split, Options{})
	assert.InDelta(t, want.PrimalObjective, got.PrimalObjective, 1e-6)
}

func TestReadSDPA(t *testing.T) {
	const file = `"An example in the style of the description of the format
* and a comment of another kind
 2 = mDIM
 2 = nBLOCK
 {2, -3} = bLOCKsTRUCT
`
	// What follows the block sizes is not a comment in this reader.
	_, err := ReadSDPA(strings.NewReader(file))
	assert.Error(t, err)

	p, err := ReadSDPA(strings.NewReader(`"comment
* comment

2 = mDIM
2 = nBLOCK
{2, -3}
{+1.0e1, -2}
0 1 1 2 1.5
1 1 1 1 1
1 2 3 3 -1
2,1,2,2,+3
`))
	require.NoError(t, err)
	assert.Equal(t, Problem{
		Blocks: []int{2, -3},
		C:      SparseSym{{0, 0, 1, -1.5}},
		A:      []SparseSym{{{0, 0, 0, 1}, {1, 2, 2, -1}}, {{0, 1, 1, 3}}},
		B:      []float64{10, -2},
	}, p)
}

func TestReadSDPARejects(t *testing.T) {
	for name, file := range map[string]string{
		"nothing":         "",
		"comments":        "* a\n\" b\n",
		"word":            "two\n1\n2\n1 2\n",
		"negative count":  "-1\n1\n2\n",
		"huge count":      "999999999999\n1\n2\n",
		"no right side":   "2\n1\n2\n1\n",
		"many rows":       "2000000000\n1\n2\n1 1 1\n",
		"many blocks":     "1\n2000000000\n2\n1 1 1\n",
		"order 0":         "1\n1\n0\n1\n1 1 1 1 1\n",
		"matrix":          "1\n1\n2\n1\n2 1 1 1 1\n",
		"negative matrix": "1\n1\n2\n1\n-1 1 1 1 1\n",
		"block":           "1\n1\n2\n1\n1 2 1 1 1\n",
		"index":           "1\n1\n2\n1\n1 1 0 1 1\n",
		"diagonal":        "1\n1\n-2\n1\n1 1 1 2 1\n",
		"truncated":       "1\n1\n2\n1\n1 1 1 1\n",
		"nan":             "1\n1\n2\nNaN\n",
		"inf":             "1\n1\n2\n1\n1 1 1 1 Inf\n",
		"overflow":        "1\n1\n2\n1\n1 1 1 1 1e999\n",
		"fraction":        "1\n1\n2\n1\n1 1 1.5 1 1\n",
	} {
		p, err := ReadSDPA(strings.NewReader(file))
		assert.Error(t, err, name)
		assert.Empty(t, p, name)
	}
}

func FuzzReadSDPA(f *testing.F) {
	f.Add("1\n1\n2\n1\n0 1 1 1 1\n1 1 1 2 1\n")
	f.Add("* c\n2 m\n2\n{2,-1}\n(1,2)\n0 1 1 1 1e3\n1 1 1 2 1\n2 2 1 1 -1\n")
	f.Add("1\n1\n1 0 0 1 1 1 0 1 1 1 1 0")
	f.Add("1\n1\n1\n1\n1 1 1 1 1.7e308\n1 1 1 1 1.7e308\n")
	f.Fuzz(func(t *testing.T, file string) {
		p, err := ReadSDPA(strings.NewReader(file))
		if err != nil {
			return
		}
		var out bytes.Buffer
		if err := WriteSDPA(&out, p); err != nil {
			require.ErrorIs(t, err, ErrInvalid) // Sums that overflow.
			return
		}
		q, err := ReadSDPA(&out)
		require.NoError(t, err)
		want, _ := p.merged()
		got, _ := q.merged()
		assert.Equal(t, want.B, got.B)
		assert.Equal(t, want.C, got.C)
	})
}
