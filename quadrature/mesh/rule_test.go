package mesh

import (
	"math"
	"math/big"
	"testing"

	"github.com/stretchr/testify/assert"
)

// The mean of x^i y^j over the triangle (0,0), (1,0), (0,1) is
// 2 i! j!/(i+j+2)!.
func TestRulesIntegrateMonomials(t *testing.T) {
	fact := func(n int) *big.Int { return new(big.Int).MulRange(1, int64(n)) }
	for _, r := range rules {
		worst := 0.0
		beyond := 0.0 // of the next degree
		nodes := r.nodes()
		for _, n := range nodes {
			assert.Positive(t, n.weight)
			for _, l := range n.at {
				assert.Positive(t, l)
			}
		}
		for i := range r.degree + 2 {
			for j := 0; i+j <= r.degree+1; j++ {
				num := new(big.Int).Mul(fact(i), fact(j))
				exact, _ := new(big.Rat).SetFrac(num.Lsh(num, 1), fact(i+j+2)).Float64()
				var sum float64
				for _, n := range nodes {
					sum += n.weight * math.Pow(n.at[0], float64(i)) * math.Pow(n.at[1], float64(j))
				}
				rel := math.Abs(sum-exact) / exact
				if i+j <= r.degree {
					worst = math.Max(worst, rel)
				} else {
					beyond = math.Max(beyond, rel)
				}
			}
		}
		assert.Less(t, worst, 1e-14, "degree %d", r.degree)
		assert.Greater(t, beyond, 1e-6, "degree %d is not one more", r.degree)
	}
	var sizes []int
	for _, r := range rules {
		sizes = append(sizes, len(r.nodes()))
	}
	assert.Equal(t, []int{1, 3, 6, 7, 12, 16, 25, 33}, sizes)
}
