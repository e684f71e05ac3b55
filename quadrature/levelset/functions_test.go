package levelset

import (
	"math"

	"creaseproof/entropy/interval"
)

// quadric is Σ a_i (x_i - c_i)² + b_i x_i + d.
type quadric struct {
	a, b, c []float64
	d       float64
}

func (q quadric) Value(x []float64) float64 {
	s := q.d
	for i, v := range x {
		t := v - q.c[i]
		s += q.a[i]*t*t + q.b[i]*v
	}
	return s
}

func (q quadric) Gradient(g, x []float64) {
	for i, v := range x {
		g[i] = 2*q.a[i]*(v-q.c[i]) + q.b[i]
	}
}

func (q quadric) Range(box []Interval) Interval {
	s := interval.Point(q.d)
	for i, v := range box {
		t := v.Sub(interval.Point(q.c[i]))
		s = s.Add(interval.Point(q.a[i]).Mul(t.Sqr())).Add(interval.Point(q.b[i]).Mul(v))
	}
	return s
}

func (q quadric) GradientRange(g, box []Interval) {
	for i, v := range box {
		g[i] = interval.Point(2 * q.a[i]).Mul(v.Sub(interval.Point(q.c[i]))).Add(interval.Point(q.b[i]))
	}
}

var zero3 = []float64{0, 0, 0}

func sphere(r float64, c ...float64) quadric {
	return quadric{a: []float64{1, 1, 1}[:len(c)], b: zero3[:len(c)], c: c, d: -r * r}
}

func plane(d float64, b ...float64) quadric {
	return quadric{a: zero3[:len(b)], b: b, c: zero3[:len(b)], d: d}
}

// torus is (√(x²+y²) - R)² + z² - r² about the centre c.
type torus struct {
	R, r float64
	c    [3]float64
}

func (q torus) Value(x []float64) float64 {
	rho := math.Hypot(x[0]-q.c[0], x[1]-q.c[1])
	z := x[2] - q.c[2]
	return (rho-q.R)*(rho-q.R) + z*z - q.r*q.r
}

func (q torus) Gradient(g, x []float64) {
	rho := math.Hypot(x[0]-q.c[0], x[1]-q.c[1])
	g[0] = 2 * (rho - q.R) * (x[0] - q.c[0]) / rho
	g[1] = 2 * (rho - q.R) * (x[1] - q.c[1]) / rho
	g[2] = 2 * (x[2] - q.c[2])
}

func (q torus) rho(box []Interval) (x, y, rho Interval) {
	x, y = box[0].Sub(interval.Point(q.c[0])), box[1].Sub(interval.Point(q.c[1]))
	return x, y, x.Sqr().Add(y.Sqr()).Sqrt()
}

func (q torus) Range(box []Interval) Interval {
	_, _, rho := q.rho(box)
	return rho.Sub(interval.Point(q.R)).Sqr().Add(box[2].Sub(interval.Point(q.c[2])).Sqr()).Sub(interval.Point(q.r).Sqr())
}

func (q torus) GradientRange(g, box []Interval) {
	x, y, rho := q.rho(box)
	two := interval.Point(2)
	if rho.Inf() <= 0 {
		g[0], g[1], g[2] = interval.Entire(), interval.Entire(), interval.Entire()
		return
	}
	s := interval.Point(1).Sub(interval.Point(q.R).Div(rho))
	g[0], g[1] = two.Mul(x).Mul(s), two.Mul(y).Mul(s)
	g[2] = two.Mul(box[2].Sub(interval.Point(q.c[2])))
}

// product is f g.
type product struct{ f, g Function }

func (q product) Value(x []float64) float64 { return q.f.Value(x) * q.g.Value(x) }

func (q product) Gradient(g, x []float64) {
	h := make([]float64, len(x))
	q.f.Gradient(g, x)
	q.g.Gradient(h, x)
	a, b := q.f.Value(x), q.g.Value(x)
	for i := range g {
		g[i] = g[i]*b + h[i]*a
	}
}

func (q product) Range(box []Interval) Interval { return q.f.Range(box).Mul(q.g.Range(box)) }

func (q product) GradientRange(g, box []Interval) {
	h := make([]Interval, len(box))
	q.f.GradientRange(g, box)
	q.g.GradientRange(h, box)
	a, b := q.f.Range(box), q.g.Range(box)
	for i := range g {
		g[i] = g[i].Mul(b).Add(h[i].Mul(a))
	}
}
