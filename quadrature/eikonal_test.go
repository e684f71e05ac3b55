package quadrature

import (
	"context"
	"math"
	"testing"
)

// eikonalDensity is |q|^3/12, the cubic line energy of the planar eikonal
// model with R = (1 - |p|^2)/2: Jin and Kohn, Singular perturbation and the
// energy of folds, J. Nonlinear Sci. 10 (2000); Ambrosio, De Lellis,
// Mantegazza, Line energies for gradient vector fields in the plane, Calc. Var.
// 9 (1999).
func eikonalDensity(_, plus, minus, _ []float64) float64 {
	q := math.Hypot(plus[0]-minus[0], plus[1]-minus[1])
	return q * q * q / 12
}

func eikonalWell(p []float64) (float64, float64) {
	s := p[0]*p[0] + p[1]*p[1]
	return (1 - s) / 2, (1 + s) / 2
}

// ridge is a part of the ridge of a distance function with its traces.
type ridge struct {
	surface     Surface
	plus, minus func(x, grad []float64) float64
	gradients   bool
}

// rectangle gives the ridges of the distance to the boundary of [0,a] × [0,b].
func rectangle(a, b float64) []ridge {
	left, right := linear(0, 1, 0), linear(a, -1, 0)
	down, up := linear(0, 0, 1), linear(b, 0, -1)
	h := b / 2
	// The normal of a segment from p to q is (q_y - p_y, -(q_x - p_x)).
	rs := []ridge{
		{Polygon{[][]float64{{0, 0}, {h, h}}}, down, left, false},
		{Polygon{[][]float64{{a, 0}, {a - h, h}}}, right, down, false},
		{Polygon{[][]float64{{a, b}, {a - h, h}}}, up, right, false},
		{Polygon{[][]float64{{0, b}, {h, h}}}, left, up, false},
	}
	if a > b {
		rs = append(rs, ridge{Polygon{[][]float64{{h, h}, {a / 2, h}, {a - h, h}}}, down, up, false})
	}
	return rs
}

// ellipse is the ridge of the distance to the ellipse x²/4 + y² = 1. The inward
// normal at (X, Y) meets the axis at 3X/4, so the feet of (x, 0) are at
// X = 4x/3, Y = ±sqrt(1 - X²/4), and the ridge is |x| <= 3/2.
func ellipse() []ridge {
	trace := func(side float64) func(x, grad []float64) float64 {
		return func(x, grad []float64) float64 {
			X := 4 * x[0] / 3
			Y := side * math.Sqrt((2-X)*(2+X)) / 2
			d := math.Hypot(x[0]-X, Y)
			grad[0], grad[1] = (x[0]-X)/d, -Y/d
			return math.NaN()
		}
	}
	axis := Patch{Dim: 2, Params: []Range{{-1.5, 1.5}}, Map: func(s, x []float64, jac [][]float64) {
		x[0], x[1], jac[0][0], jac[0][1] = s[0], 0, 1, 0
	}}
	return []ridge{{axis, trace(-1), trace(1), true}} // the normal is (0, -1)
}

// turn rotates a ridge.
func (r ridge) turn(angle float64) ridge {
	s, c := math.Sincos(angle)
	trace := func(f func(x, g []float64) float64) func(x, g []float64) float64 {
		h := make([]float64, 2)
		return func(x, g []float64) float64 {
			u := f([]float64{c*x[0] + s*x[1], c*x[1] - s*x[0]}, h)
			g[0], g[1] = c*h[0]-s*h[1], s*h[0]+c*h[1]
			return u
		}
	}
	r.plus, r.minus = trace(r.plus), trace(r.minus)
	switch v := r.surface.(type) {
	case Polygon:
		var w [][]float64
		for _, x := range v.Vertices {
			w = append(w, []float64{c*x[0] - s*x[1], s*x[0] + c*x[1]})
		}
		r.surface = Polygon{w}
	case Patch:
		old := v.Map
		v.Map = func(p, x []float64, jac [][]float64) {
			old(p, x, jac)
			x[0], x[1] = c*x[0]-s*x[1], s*x[0]+c*x[1]
			jac[0][0], jac[0][1] = c*jac[0][0]-s*jac[0][1], s*jac[0][0]+c*jac[0][1]
		}
		r.surface = v
	}
	return r
}

func TestEikonalClosedForms(t *testing.T) {
	for _, c := range []struct {
		name   string
		ridges []ridge
		want   float64
	}{
		{"square of side 1", rectangle(1, 1), 2.0 / 3},
		{"square of side 7/3", rectangle(7.0/3, 7.0/3), 14.0 / 9},
		{"rectangle 3 x 2", rectangle(3, 2), 2},
		{"rectangle 10 x 1/10", rectangle(10, 0.1), 20.0 / 3},
		// The integral of (2 Y/d)^3/12 over the ridge, in 40-digit arithmetic.
		{"ellipse 2 x 1", ellipse(), 1.548665638082676580569301777905999},
	} {
		for _, angle := range []float64{0, 0.4, 2.5} {
			for _, swap := range []bool{false, true} {
				var energy, reported float64
				for _, r := range c.ridges {
					if angle != 0 {
						r = r.turn(angle)
					}
					if swap {
						r.plus, r.minus = r.minus, r.plus
					}
					v, err := Integrate(context.Background(), r.surface, Traces{Plus: r.plus, Minus: r.minus, HasValue: !r.gradients},
						eikonalDensity, Options{Well: eikonalWell})
					if err != nil {
						t.Errorf("%s: %v", c.name, err)
					}
					energy += v.Energy
					reported += v.Error
				}
				honest(t, c.name, energy, reported, c.want)
			}
		}
	}
}
