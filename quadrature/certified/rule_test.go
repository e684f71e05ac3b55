package certified

import (
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/interval"
)

// The rule with n nodes is exact up to degree 2n-1, and off by the remainder for
// x^(2n): on [-1, 1] that is 2^(2n+1) γ_n.
func TestGauss(t *testing.T) {
	for n := 1; n <= 16; n++ {
		g, err := newGauss(n)
		require.NoError(t, err)
		for k := 0; k <= 2*n; k++ {
			sum := zero
			for i, x := range g.nodes {
				sum = sum.Add(g.weights[i].Mul(x.Pown(k)))
			}
			want := zero
			if k%2 == 0 {
				want = two.Div(whole(k + 1))
			}
			if k == 2*n {
				want = want.Sub(two.Pown(2*n + 1).Mul(g.gamma))
			}
			assert.False(t, sum.Disjoint(want), "n = %d, x^%d: %v, %v", n, k, sum, want)
			assert.Less(t, sum.Wid(), 1e-14)
			if k == 2*n {
				plain := two.Div(whole(k + 1))
				assert.True(t, sum.Disjoint(plain), "n = %d: the remainder is not seen", n)
			}
		}
	}
}

// Nodes of P_2 and P_3 by their closed forms.
func TestNodes(t *testing.T) {
	g, err := newGauss(3)
	require.NoError(t, err)
	root := whole(3).Div(whole(5)).Sqrt()
	for i, want := range []interval.Interval{root.Neg(), zero, root} {
		assert.False(t, g.nodes[i].Disjoint(want))
		assert.LessOrEqual(t, g.nodes[i].Wid(), 0x1p-52)
	}
}
