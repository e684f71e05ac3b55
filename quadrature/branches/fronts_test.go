package branches_test

import (
	"math"
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"

	"creaseproof/quadrature/branches"
)

// The upper envelope of 128 fronts tangent to a paraboloid.
func BenchmarkFronts(b *testing.B) {
	var list []branches.Affine
	for k := range 128 {
		r, t := math.Sqrt((float64(k)+0.5)/128), 2.399963*float64(k)
		p, q := big.NewRat(int64(math.Round(1000*r*math.Cos(t))), 1000), big.NewRat(int64(math.Round(1000*r*math.Sin(t))), 1000)
		s := new(big.Rat).Add(new(big.Rat).Mul(p, p), new(big.Rat).Mul(q, q))
		s.Mul(s, big.NewRat(1, 2))
		list = append(list, branches.Affine{Gradient: []*big.Rat{p, q, s}, Constant: new(big.Rat).Neg(s)})
	}
	tree, err := branches.Parse("max", len(list))
	require.NoError(b, err)
	box := branches.Box{Lo: rats("-51/50", "-51/50", "0"), Hi: rats("51/50", "51/50", "1")}
	for b.Loop() {
		fs, err := branches.Faces(b.Context(), list, tree, box)
		require.NoError(b, err)
		branches.Connected(fs, nil)
	}
}
