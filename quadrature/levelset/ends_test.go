package levelset

import (
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// The disc that a ball cuts out of a plane. A cell ends next to the place where the
// circle is parallel to the inner direction, which no row of nodes shows.
func TestEndsNextToATangent(t *testing.T) {
	phi := plane(4.0/3, 2.8, 0.5, 1+1.0/24)
	ball := quadric{a: []float64{-1, -1, -1}, b: zero3, c: []float64{0, 0.1, -0.2}, d: 0.64}
	d := phi.Value(ball.c) / norm(phi.b)
	exact := math.Pi * (0.64 - d*d)
	for _, rel := range []float64{1e-7, 1e-8, 1e-9, 1e-10, 1e-11, 1e-12} {
		r, err := run(phi, []Function{ball}, [][2]float64{{-0.8, 0.8}, {-0.7, 0.9}, {-1, 0.6}}, Options{Rel: rel})
		require.NoError(t, err)
		assert.LessOrEqual(t, math.Abs(r.Value[0]-exact), r.Error[0], "%g", rel)
	}
}
