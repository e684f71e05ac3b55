package quadrature

import (
	"context"
	"errors"
	"fmt"
	"math"
	"testing"
)

// A dent in a paraboloid, where u is discontinuous, with a radius of a
// twentieth of the ranges of its parameters.
func TestFaultsOnASmallPart(t *testing.T) {
	for i := range 40 {
		_, a := math.Modf(0.5 + golden*float64(i))
		_, b := math.Modf(0.5 + 0.7548776662466927*float64(i))
		a, b = 0.1+0.8*a, 0.1+0.8*b
		c := paraboloid(2, 1, 2)
		p := c.surface.(Patch)
		in := p.Map
		p.Map = func(s, x []float64, jac [][]float64) {
			in(s, x, jac)
			u, v := (s[0]-p.Params[0].Lo)/(p.Params[0].Hi-p.Params[0].Lo)-a, (s[1]-p.Params[1].Lo)/(p.Params[1].Hi-p.Params[1].Lo)-b
			if d := 0.0025 - u*u - v*v; d > 0 {
				x[0] *= 1 + 1000*d*d*d
			}
		}
		_, err := Integrate(context.Background(), p, Traces{Plus: c.plus, Minus: c.minus, HasValue: true}, layeredDensity, Options{Well: layeredWell})
		var place *PlaceError
		if !errors.As(err, &place) {
			t.Errorf("a dent at %.3f, %.3f: %v", a, b, err)
		}
	}
}

// However large u is, it may not jump by more than a small part of what it
// varies by.
func TestDiscontinuityOfALargeFunction(t *testing.T) {
	for _, c := range []struct {
		constant, jump float64
		refused        bool
	}{{1e6, 1e-6, true}, {1e6, 1e-4, true}, {1e8, 1e-3, true}, {1e6, 0, false}, {1e10, 0, false}, {1e6, 1e-9, false}} {
		_, err := Integrate(context.Background(), wallTriangle, Traces{Plus: linear(c.constant, 1, 0, 0.5), Minus: linear(c.constant+c.jump, -1, 0, 0.5), HasValue: true}, layeredDensity, Options{Well: layeredWell})
		var place *PlaceError
		if errors.As(err, &place) != c.refused {
			t.Errorf("a jump of %g of u = %g + ...: %v", c.jump, c.constant, err)
		}
	}
}

// Very far from the origin positions are too coarse for the tolerance of the
// checks, and the error says so.
func TestVeryFarFromTheOrigin(t *testing.T) {
	for _, far := range []float64{1e4, 1e6, 1e7, 1e8} {
		at := [3]float64{far, -2 * far, 3 * far}
		move := func(f func(x, g []float64) float64) func(x, g []float64) float64 {
			return func(x, g []float64) float64 { return f([]float64{x[0] - at[0], x[1] - at[1], x[2] - at[2]}, g) }
		}
		c := paraboloid(1.25, 1, 2)
		p := c.surface.(Patch)
		in := p.Map
		p.Map = func(s, x []float64, jac [][]float64) {
			in(s, x, jac)
			for k := range x {
				x[k] += at[k]
			}
		}
		tr := Traces{Plus: move(c.plus), Minus: move(c.minus), HasValue: true}
		r, err := Integrate(context.Background(), p, tr, layeredDensity, Options{Well: layeredWell, MaxEvaluations: 20000})
		if err != nil && !errors.Is(err, ErrAccuracy) && !errors.Is(err, ErrBudget) {
			t.Errorf("%g away: %v", far, err)
		} else if miss := math.Abs(r.Energy - c.want); miss > r.Error || r.Error > 1e-14*far*c.want {
			t.Errorf("%g away: reported error %.3g, true error %.3g", far, r.Error, miss)
		}
		// Faults of a millionth are still seen.
		for name, f := range map[string]float64{"map": 1e-6, "larger": 1e-4} {
			q := p
			q.Map = func(s, x []float64, jac [][]float64) {
				p.Map(s, x, jac)
				x[0] += f * math.Sin(3*s[0])
			}
			_, err = Integrate(context.Background(), q, tr, layeredDensity, Options{Well: layeredWell, MaxEvaluations: 20000})
			var place *PlaceError
			if far < 1e8 && !errors.As(err, &place) {
				t.Errorf("%g away, %s off by %g: %v", far, name, f, err)
			}
		}
	}
}

// The ends of ranges and the vertices are rounded, and a narrow surface is
// wider or narrower by that.
func TestRoundingOfEnds(t *testing.T) {
	one := func(_, _, _, _ []float64) float64 { return 1 }
	for _, width := range []float64{1e-3, 1e-6, 1e-9} {
		lo, hi := 1.1, 1.1+width
		for _, c := range []struct {
			s    Surface
			want float64
		}{
			{Graph{Over: Rectangle{Range{lo, hi}, Range{0, 1}}, F: flat}, width},
			{Graph{Over: Triangle{{lo, 0}, {hi, 0}, {lo, 1}}, F: flat}, width / 2},
			{Polygon{[][]float64{{lo, 0, 0}, {hi, 0, 0}, {hi, 1, 0}, {lo, 1, 0}}}, width},
			{Polygon{[][]float64{{lo, 0}, {hi, 0}}}, width},
			{Graph{Over: Interval{lo, hi}, F: flat}, width},
		} {
			r, err := Integrate(context.Background(), c.s, Traces{}, one, Options{Rel: 1e-4})
			if err != nil {
				t.Errorf("%T of width %g: %v", c.s, width, err)
			}
			if miss := math.Abs(r.Energy - c.want); !(miss <= r.Error) || r.Error > 1e-14/width*c.want {
				t.Errorf("%s of width %g: reported error %.3g, true error %.3g", fmt.Sprintf("%T", c.s), width, r.Error, miss)
			}
		}
	}
}

func flat(_, g []float64) float64 {
	clear(g)
	return 0
}

func TestOverflow(t *testing.T) {
	one := func(_, _, _, _ []float64) float64 { return 1 }
	for _, s := range []Surface{
		Graph{Over: Rectangle{Range{0, 1e200}, Range{0, 1e200}}, F: flat},
		Graph{Over: Disc{Radius: 1e200}, F: flat},
		Polygon{[][]float64{{0, 0, 0}, {1e160, 0, 0}, {0, 1e160, 0}}},
	} {
		r, err := Integrate(context.Background(), s, Traces{}, one, Options{})
		if err == nil || r.Energy != 0 || errors.Is(err, ErrAccuracy) {
			t.Errorf("%T: %v, %v", s, r.Energy, err)
		}
	}
	r, err := Integrate(context.Background(), Graph{Over: Rectangle{Range{0, 1e150}, Range{0, 1e150}}, F: flat}, Traces{}, one, Options{})
	if err != nil || math.Abs(r.Energy-1e300) > 1e286 {
		t.Errorf("1e300: %v, %v", r.Energy, err)
	}
}

// At a kink of u on the surface itself the derivative is neither limit.
func TestKinksOnTheSurface(t *testing.T) {
	wall := Polygon{[][]float64{{0, -1, 0}, {0, 1, 0}, {0, 1, 1}, {0, -1, 1}}}
	sign := func(v float64) float64 {
		switch {
		case v > 0:
			return 1
		case v < 0:
			return -1
		}
		return 0
	}
	bent := func(x, g []float64) float64 { // |x|
		copy(g, []float64{sign(x[0]), 0, 0})
		return math.Abs(x[0])
	}
	partly := func(x, g []float64) float64 { // max(0, y) x + |x| where y < 0
		w := math.Max(0, x[1])
		copy(g, []float64{w + sign(x[0])*math.Max(0, -sign(x[1])), 0, 0})
		return w*x[0] + math.Max(0, -sign(x[1]))*math.Abs(x[0])
	}
	across := func(x, g []float64) float64 { // |y|, a kink that only crosses the surface
		copy(g, []float64{0, sign(x[1]), 0})
		return math.Abs(x[1])
	}
	root := func(x, g []float64) float64 { // a gradient like the root of the distance
		d := math.Max(0, x[0])
		copy(g, []float64{1 + math.Sqrt(d), 0, 0})
		return d + d*math.Sqrt(d)/1.5
	}
	for _, c := range []struct {
		name        string
		plus, minus func(x, g []float64) float64
		refused     bool
	}{
		{"both", bent, bent, true},
		{"plus", bent, linear(0, -1, 0, 0), true},
		{"minus", linear(0, 1, 0, 0), bent, true},
		{"on a half", partly, linear(0, -1, 0, 0), true},
		{"across", across, across, false},
		{"root", root, linear(0, -1, 0, 0), false},
		{"none", linear(0, 1, 0, 0), linear(0, -1, 0, 0), false},
	} {
		_, err := Integrate(context.Background(), wall, Traces{Plus: c.plus, Minus: c.minus, HasValue: true}, layeredDensity, Options{})
		var place *PlaceError
		if errors.As(err, &place) != c.refused || c.refused && place.Reason != NotSmooth {
			t.Errorf("%s: %v", c.name, err)
		}
	}
}

// A surface that reaches over many orders of magnitude is smooth on the scale
// of the place.
func TestManyOrdersOfMagnitude(t *testing.T) {
	c := paraboloid(2, 0.5, 3)
	in := c.surface.(Patch)
	p := Patch{Dim: 3, Params: []Range{{-18, 18}, {0, 2 * math.Pi}}, Map: func(s, x []float64, jac [][]float64) {
		e := math.Exp(s[0])
		in.Map([]float64{e, s[1]}, x, jac)
		for k := range 3 {
			jac[0][k] *= e
		}
	}}
	r, err := Integrate(context.Background(), p, Traces{Plus: c.plus, Minus: c.minus, HasValue: true}, layeredDensity, Options{Well: layeredWell})
	if err != nil {
		t.Fatal(err)
	}
	honest(t, "paraboloid", r.Energy, r.Error, 2*math.Pi*4/3*36)
}

// Far from the origin the positions beside the tip of a cone round to the tip,
// where the traces have no gradient.
func TestTipReachedByRounding(t *testing.T) {
	at := [3]float64{3, -7, 1}
	cone := func(x, g []float64) float64 { // rho + z/2 from the tip
		u, v := x[0]-at[0], x[1]-at[1]
		rho := math.Sqrt(u*u + v*v)
		copy(g, []float64{u / rho, v / rho, 0.5})
		return rho + (x[2]-at[2])/2
	}
	p := Patch{Dim: 3, Params: []Range{{0, 1}, {0, 2 * math.Pi}}, Map: func(s, x []float64, jac [][]float64) {
		sin, cos := math.Sincos(s[1])
		r, d := s[0]*s[0]*s[0], 3*s[0]*s[0]
		x[0], x[1], x[2] = at[0]+r*cos/2, at[1]+r*sin/2, at[2]-r
		jac[0][0], jac[0][1], jac[0][2] = d*cos/2, d*sin/2, -d
		jac[1][0], jac[1][1], jac[1][2] = -r*sin/2, r*cos/2, 0
	}}
	r, err := Integrate(context.Background(), p, Traces{Plus: linear(0, 0, 0, 0), Minus: cone, HasValue: true}, layeredDensity, Options{Well: layeredWell})
	if err != nil {
		t.Fatal(err)
	}
	honest(t, "cone", r.Energy, r.Error, math.Pi/24)
}
