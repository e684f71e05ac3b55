package branches_test

import (
	"context"
	"math/rand/v2"
	"testing"

	"creaseproof/quadrature/branches"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// What is known of a pair holds wherever its two branches are equal in its box:
// also where another branch is ahead of both, and there is no sheet.
func TestKnownRelationsHold(t *testing.T) {
	rng := rand.New(rand.NewPCG(2, 71))
	box := [][2]float64{{-1, 1}, {-1, 1}, {-1, 1}}
	checked := 0
	for range 300 {
		n := 3 + rng.IntN(3)
		u := make([][4]float64, n)
		args := make([]*branches.Tree, n)
		for k := range u {
			for i := range u[k] {
				u[k][i] = 2*rng.Float64() - 1
			}
			args[k] = &branches.Tree{Op: branches.Leaf, Branch: k}
		}
		tree := &branches.Tree{Op: branches.Min, Args: args}
		if rng.IntN(2) == 0 {
			tree.Op = branches.Max
		}
		value := func(k int, x [3]float64) float64 {
			return u[k][0]*x[0] + u[k][1]*x[1] + u[k][2]*x[2] + u[k][3]
		}
		ranges := func(b [][2]float64, out []branches.Range) {
			for k := range out {
				r := branches.Range{Lo: u[k][3] - 1e-12, Hi: u[k][3] + 1e-12}
				for i := range 3 {
					p, q := u[k][i]*b[i][0], u[k][i]*b[i][1]
					r.Lo, r.Hi = r.Lo+min(p, q), r.Hi+max(p, q)
				}
				out[k] = r
			}
		}
		list, err := branches.Pairs(context.Background(), tree, n, box, ranges, branches.PairOptions{})
		require.NoError(t, err)
		for _, p := range list {
			for range 200 {
				var x [3]float64
				for i, side := range p.Box {
					x[i] = side[0] + rng.Float64()*(side[1]-side[0])
				}
				slope := u[p.First][2] - u[p.Second][2]
				x[2] -= (value(p.First, x) - value(p.Second, x)) / slope
				if x[2] < p.Box[2][0] || x[2] > p.Box[2][1] {
					continue
				}
				for k, r := range p.Known {
					if d := value(k, x) - value(p.First, x); k != p.First && k != p.Second && r != branches.Open {
						checked++
						assert.Equal(t, r == branches.Above, d > 0)
					}
				}
			}
		}
	}
	assert.Greater(t, checked, 1000)
}
