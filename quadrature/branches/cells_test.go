package branches

import (
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// random is a tree over branches in random order.
func random(rng *rand.Rand, list []int, op Op) *Tree {
	if len(list) == 1 {
		return &Tree{Branch: list[0]}
	}
	t := &Tree{Op: op}
	parts := 2 + rng.IntN(min(3, len(list)-1))
	at := 0
	for k := range parts {
		n := 1
		if k == parts-1 {
			n = len(list) - at
		} else if room := len(list) - at - (parts - k - 1); room > 1 {
			n += rng.IntN(room)
		}
		t.Args = append(t.Args, random(rng, list[at:at+n], Max+Min-op))
		at += n
	}
	return t
}

// For random trees, values of the other branches and slopes of those that
// coincide with the pair, the systems say what the tree does when it is evaluated
// on the two sides.
func TestCells(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 7))
	creases := 0
	for range 3000 {
		n := 2 + rng.IntN(6)
		tree := random(rng, rng.Perm(n), Max+Op(rng.IntN(2)))
		i, j := 0, 1+rng.IntN(n-1)
		slope := make([]float64, n) // of u_k beside the surface, where it coincides
		value := make([]float64, n)
		known := make([]Relation, n)
		var order []int
		for _, k := range rng.Perm(n) {
			if k == i || k == j || rng.IntN(3) == 0 {
				slope[k] = rng.NormFloat64()
				order = append(order, k)
				continue
			}
			value[k] = rng.NormFloat64()
			if rng.IntN(3) == 0 {
				known[k] = Below
				if value[k] > 0 {
					known[k] = Above
				}
			}
		}
		// The side where u_i > u_j.
		sign := 1.0
		if slope[i] < slope[j] {
			sign = -1
		}
		for a := range order {
			for b := a; b > 0 && sign*slope[order[b]] < sign*slope[order[b-1]]; b-- {
				order[b], order[b-1] = order[b-1], order[b]
			}
		}
		given := order
		if len(order) == 2 && rng.IntN(2) == 0 {
			given = nil
		}
		systems, err := Cells(tree, i, j, known, given)
		require.NoError(t, err)
		beside := func(side float64) int {
			v := make([]float64, n)
			for k := range v {
				v[k] = value[k] + 1e-6*side*sign*slope[k]
			}
			_, active := tree.Eval(v)
			return active
		}
		var op Op
		switch plus, minus := beside(1), beside(-1); {
		case plus == i && minus == j:
			op = Max
		case plus == j && minus == i:
			op = Min
		}
		held := 0
		for _, s := range systems {
			ok := true
			for _, c := range s.Conditions {
				ok = ok && (value[c.Branch] > 0) == (c.Relation == Above)
				assert.Equal(t, Open, known[c.Branch])
				assert.NotContains(t, order, c.Branch)
			}
			if ok {
				held++
				assert.Equal(t, op, s.Op, "%v, pair %d, %d", tree, i+1, j+1)
			}
		}
		want := 0
		if op != Leaf {
			want = 1
			creases++
		}
		assert.Equal(t, want, held, "%v, pair %d, %d, order %v", tree, i+1, j+1, order)
	}
	assert.Greater(t, creases, 300)
}

// A tree with exponentially many ways is given up.
func TestTooManyCells(t *testing.T) {
	tree := &Tree{Op: Max, Args: []*Tree{{Branch: 0}, {Branch: 1}}}
	for k := range 24 {
		tree.Args = append(tree.Args, &Tree{Op: Min, Args: []*Tree{{Branch: 2 + 2*k}, {Branch: 3 + 2*k}}})
	}
	_, err := Cells(tree, 0, 1, nil, nil)
	assert.ErrorIs(t, err, ErrCells)
}
