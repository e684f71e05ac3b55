package levelset

import (
	"math"
	"testing"

	"creaseproof/entropy/interval"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// form is xᵀ m x - 1 with a symmetric m.
type form [3][3]float64

func (m form) Value(x []float64) float64 {
	s := -1.0
	for i := range 3 {
		for j := range 3 {
			s += m[i][j] * x[i] * x[j]
		}
	}
	return s
}

func (m form) Gradient(g, x []float64) {
	for i := range 3 {
		g[i] = 2 * (m[i][0]*x[0] + m[i][1]*x[1] + m[i][2]*x[2])
	}
}

func (m form) Range(box []Interval) Interval {
	s := interval.Point(-1)
	for i := range 3 {
		s = s.Add(interval.Point(m[i][i]).Mul(box[i].Sqr()))
		for j := range i {
			s = s.Add(interval.Point(2 * m[i][j]).Mul(box[i]).Mul(box[j]))
		}
	}
	return s
}

func (m form) GradientRange(g, box []Interval) {
	for i := range 3 {
		g[i] = interval.Point(0)
		for j := range 3 {
			g[i] = g[i].Add(interval.Point(2 * m[i][j]).Mul(box[j]))
		}
	}
}

// An ellipsoid turned against the axes has the same area; no cut along a
// coordinate plane separates its folds.
func TestRotatedEllipsoid(t *testing.T) {
	c, s := math.Cos(0.7), math.Sin(0.7)
	p, q := math.Cos(0.4), math.Sin(0.4)
	axes := [3][3]float64{{c, s * p, s * q}, {-s, c * p, c * q}, {0, -q, p}}
	var m form
	for k, w := range [3]float64{1, 4, 9} {
		for i := range 3 {
			for j := range 3 {
				m[i][j] += w * axes[k][i] * axes[k][j]
			}
		}
	}
	exact := ellipsoid(1, 1./2, 1./3)
	for _, rel := range []float64{1e-4, 1e-6, 1e-8} {
		r, err := run(m, nil, cube(-1.5, 1.5), Options{Rel: rel})
		require.NoError(t, err)
		assert.InEpsilon(t, exact, r.Value[0], rel)
		assert.LessOrEqual(t, math.Abs(r.Value[0]-exact), r.Error[0])
		t.Logf("%.0e: nodes %d, cells %d, sheets %d, error %.1e of %.1e, undecided %d of %.1e", rel, r.Nodes, r.Cells, r.Sheets, math.Abs(r.Value[0]-exact), r.Error[0], r.Undecided, r.Resolution)
	}
}
