package creases

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"
)

// The decimals are exact numbers on the right side, at least 17 digits near.
func TestDecimal(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	list := []float64{0, 1, -1, 0.1, 1.0 / 3, math.Pi, -math.Pi, 1e22, 1e-30, math.MaxFloat64, math.SmallestNonzeroFloat64}
	for range 2000 {
		list = append(list, math.Ldexp(rng.Float64()-0.5, rng.IntN(200)-100))
	}
	for _, x := range list {
		exact := new(big.Rat).SetFloat64(x)
		unit := new(big.Rat).Mul(new(big.Rat).Abs(exact), big.NewRat(1, 1e16))
		for _, side := range []int{-1, 1} {
			y, ok := new(big.Rat).SetString(decimal(x, side))
			require.True(t, ok)
			require.NotEqual(t, -side, y.Cmp(exact), "%v: %s", x, decimal(x, side))
			require.LessOrEqual(t, new(big.Rat).Abs(new(big.Rat).Sub(y, exact)).Cmp(unit), 0, "%v: %s", x, decimal(x, side))
		}
	}
}
