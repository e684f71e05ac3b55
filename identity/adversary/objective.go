package adversary

import (
	"context"
	"math"
)

// large stands for values that are not finite.
const large = 1e100

// objective counts and guards the evaluations of one trial.
type objective struct {
	ctx         context.Context
	p           *Problem
	scratch     []float64
	best        float64
	bestPoint   []float64
	evaluations int
}

func (p *Problem) bounds(i int) (lo, hi float64) {
	lo, hi = math.Inf(-1), math.Inf(1)
	if p.Lower != nil {
		lo = p.Lower[i]
	}
	if p.Upper != nil {
		hi = p.Upper[i]
	}
	return lo, hi
}

func (p *Problem) scale(i int) float64 {
	if p.Scale == nil {
		return 1
	}
	return p.Scale[i]
}

func finite(v float64) bool { return v-v == 0 }

func (o *objective) value(x []float64) float64 {
	o.evaluations++
	v := o.p.Value(x)
	if !finite(v) || v > large {
		return large
	}
	if v < o.best {
		o.best = v
		o.bestPoint = append(o.bestPoint[:0], x...)
	}
	return v
}

// gradient stores the gradient; components that are not finite become 0.
func (o *objective) gradient(g, x []float64) {
	if o.p.Gradient == nil {
		o.differences(g, x)
		return
	}
	o.evaluations++
	o.p.Gradient(g, x)
	for i, v := range g {
		if !finite(v) {
			g[i] = 0
		}
	}
}

func (o *objective) differences(g, x []float64) {
	y := append(o.scratch[:0], x...)
	o.scratch = y
	for i, v := range x {
		h := 1e-5 * math.Max(math.Abs(v), 1e-3*o.p.scale(i))
		y[i] = v + h
		up := o.value(y)
		y[i] = v - h
		down := o.value(y)
		y[i] = v
		g[i] = 0
		if up < large && down < large {
			g[i] = (up - down) / (2 * h)
		}
	}
}

// view is the objective as a function of some coordinates, the others fixed, in
// unbounded scaled variables y:
//
//	x = s y                        without bounds,
//	x = lo + s (sqrt(1+y²) - 1)    with a lower bound, and likewise an upper,
//	x = mid + half sin y           with both.
//
// The last two are those of James and Roos, Computer Physics Communications 10
// (1975) 343.
type view struct {
	*objective
	free  []int
	s     []float64 // of the free coordinates
	x, gx []float64 // of all coordinates
}

// newView takes a copy of x, whose entries outside free stay fixed.
func newView(o *objective, x []float64, free []int, relative bool) *view {
	v := &view{objective: o, free: free, x: append([]float64(nil), x...), gx: make([]float64, len(x))}
	for _, i := range free {
		s := o.p.scale(i)
		if a := math.Abs(x[i]); relative && a > 1e-9*s || a > s {
			s = a
		}
		v.s = append(v.s, s)
	}
	return v
}

// inside moves a coordinate within its bounds, off the bounds themselves, where
// the derivative by y vanishes.
func (p *Problem) inside(i int, x float64) float64 {
	lo, hi := p.bounds(i)
	const off = 1e-3
	width := math.Min(hi-lo, p.scale(i))
	if x <= lo {
		return lo + off*width
	}
	if x >= hi {
		return hi - off*width
	}
	return x
}

// variables returns y for the point held.
func (v *view) variables() []float64 {
	y := make([]float64, len(v.free))
	for k, i := range v.free {
		lo, hi := v.p.bounds(i)
		x := v.p.inside(i, v.x[i])
		root := func(d float64) float64 { // d = sqrt(1+y²) - 1
			return math.Sqrt(d * (d + 2))
		}
		switch {
		case finite(lo) && finite(hi):
			y[k] = math.Asin((2*x - lo - hi) / (hi - lo))
		case finite(lo):
			y[k] = root((x - lo) / v.s[k])
		case finite(hi):
			y[k] = root((hi - x) / v.s[k])
		default:
			y[k] = x / v.s[k]
		}
	}
	return y
}

// set stores the point of y and returns it.
func (v *view) set(y []float64) []float64 {
	for k, i := range v.free {
		v.x[i], _ = v.coordinate(k, y[k])
	}
	return v.x
}

// coordinate returns x and dx/dy for variable k.
func (v *view) coordinate(k int, y float64) (x, dx float64) {
	lo, hi := v.p.bounds(v.free[k])
	r := math.Hypot(1, y)
	d := y * y / (1 + r) // sqrt(1+y²) - 1 without cancellation
	switch {
	case finite(lo) && finite(hi):
		sin, cos := math.Sincos(y)
		return math.Min(math.Max((lo+hi)/2+(hi-lo)/2*sin, lo), hi), (hi - lo) / 2 * cos
	case finite(lo):
		return lo + v.s[k]*d, v.s[k] * y / r
	case finite(hi):
		return hi - v.s[k]*d, -v.s[k] * y / r
	}
	return v.s[k] * y, v.s[k]
}

func (v *view) at(y []float64) float64 { return v.value(v.set(y)) }

func (v *view) gradientAt(g, y []float64) {
	v.gradient(v.gx, v.set(y))
	for k, i := range v.free {
		_, dx := v.coordinate(k, y[k])
		g[k] = v.gx[i] * dx
	}
}
