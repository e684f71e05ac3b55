package levelset_test

import (
	"context"
	"fmt"
	"math"

	"creaseproof/entropy/interval"
	"creaseproof/quadrature/levelset"
)

// foci is |x - a| - |x - b| - d in the plane, whose zero set is a branch of a
// hyperbola with foci a and b. It is not differentiable at the foci.
type foci struct {
	a, b [2]float64
	d    float64
}

func (h foci) Value(x []float64) float64 {
	return math.Hypot(x[0]-h.a[0], x[1]-h.a[1]) - math.Hypot(x[0]-h.b[0], x[1]-h.b[1]) - h.d
}

func (h foci) Gradient(g, x []float64) {
	r, s := math.Hypot(x[0]-h.a[0], x[1]-h.a[1]), math.Hypot(x[0]-h.b[0], x[1]-h.b[1])
	for i := range g {
		g[i] = (x[i]-h.a[i])/r - (x[i]-h.b[i])/s
	}
}

func distance(box []levelset.Interval, a [2]float64) (x, y, r levelset.Interval) {
	x, y = box[0].Sub(interval.Point(a[0])), box[1].Sub(interval.Point(a[1]))
	return x, y, x.Sqr().Add(y.Sqr()).Sqrt()
}

func (h foci) Range(box []levelset.Interval) levelset.Interval {
	_, _, r := distance(box, h.a)
	_, _, s := distance(box, h.b)
	return r.Sub(s).Sub(interval.Point(h.d))
}

func (h foci) GradientRange(g, box []levelset.Interval) {
	x, y, r := distance(box, h.a)
	u, v, s := distance(box, h.b)
	if r.Inf() <= 0 || s.Inf() <= 0 {
		g[0], g[1] = interval.Entire(), interval.Entire()
		return
	}
	g[0], g[1] = x.Div(r).Sub(u.Div(s)), y.Div(r).Sub(v.Div(s))
}

// The ridge between two radial solutions of the eikonal equation, with the
// foci in the box, and the energy density |[grad u]|³/12.
func ExampleIntegrate() {
	phi := foci{a: [2]float64{-0.5, 0}, b: [2]float64{0.5, 0}, d: 0.6}
	density := func(x, n, out []float64) {
		var g [2]float64
		phi.Gradient(g[:], x)
		q := math.Hypot(g[0], g[1])
		out[0] = q * q * q / 12
	}
	r, err := levelset.Integrate(context.Background(), phi, nil, [][2]float64{{-1, 1}, {-1, 1}}, density,
		levelset.Options{Parts: 1, Rel: 1e-10})
	fmt.Printf("%.9f within the tolerance: %t, undecided: %d, error: %v\n", r.Value[0], r.Error[0] <= 1e-10*r.Value[0], r.Undecided, err)
	// Output: 0.432552647 within the tolerance: true, undecided: 0, error: <nil>
}
