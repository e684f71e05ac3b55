package creases

import (
	"errors"
	"math"

	"creaseproof/quadrature"
)

// loose is the relative tolerance of the checks on a surface that comes so
// near to a singular point of a trace that the rounding of positions shows.
const loose = 1e-7

// integrate is quadrature.Integrate. Where a check fails and the rounding of
// the position explains it, as happens beside the tip of a cone, the checks
// are made once more with the loose tolerance.
func (c *combination) integrate(s quadrature.Surface, tr quadrature.Traces, d quadrature.Density, o quadrature.Options) (quadrature.Result, error) {
	r, err := quadrature.Integrate(c.ctx, s, tr, d, o)
	var p *quadrature.PlaceError
	if errors.As(err, &p) && rounded(p, tr, o.Well) {
		o.Tolerance = loose
		return quadrature.Integrate(c.ctx, s, tr, d, o)
	}
	return r, err
}

// rounded reports whether moving the place of a failure by a few units in the
// last place of its coordinates changes what failed by as much as it failed.
func rounded(p *quadrature.PlaceError, tr quadrature.Traces, well func([]float64) (float64, float64)) bool {
	const units, most = 4 * 0x1p-52, 16
	if tr.Plus == nil || p.Reason != quadrature.NotNormal && (p.Reason != quadrature.OffWell || well == nil) {
		return false
	}
	n := len(p.Point)
	plus, minus := make([]float64, n), make([]float64, n)
	// What is measured: the jump of the gradient, or the two residuals.
	measure := func(x []float64) []float64 {
		tr.Plus(x, plus)
		tr.Minus(x, minus)
		if p.Reason == quadrature.OffWell {
			a, _ := well(plus)
			b, _ := well(minus)
			return []float64{a, b}
		}
		q := make([]float64, n)
		for i := range q {
			q[i] = plus[i] - minus[i]
		}
		return q
	}
	var far float64
	for _, v := range p.Point {
		far = math.Max(far, math.Abs(v))
	}
	here := measure(p.Point)
	var change float64
	for i := range p.Point {
		x := append([]float64(nil), p.Point...)
		x[i] += units * far
		for k, v := range measure(x) {
			change = math.Max(change, math.Abs(v-here[k]))
		}
	}
	return math.Abs(p.Residual) <= most*change
}
