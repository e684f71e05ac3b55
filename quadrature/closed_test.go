package quadrature

import (
	"context"
	"fmt"
	"math"
	"testing"
)

// A crease is one of the layered model whose energy is known in closed
// form (derived from the slice formula, energy = ∫ |[grad_perp u]|^3/12 dl dz).
type crease struct {
	name        string
	surface     Surface
	plus, minus func(x, grad []float64) float64
	gradients   bool // only the gradients are known
	want        float64
}

// layeredDensity is |q_perp|^4/(12 |q|).
func layeredDensity(_, plus, minus, _ []float64) float64 {
	var perp, all float64
	for k := range plus {
		q := plus[k] - minus[k]
		all += q * q
		if k < len(plus)-1 {
			perp += q * q
		}
	}
	if all == 0 {
		return 0
	}
	return perp * perp / (12 * math.Sqrt(all))
}

// layeredWell is u_z - |grad_perp u|^2/2.
func layeredWell(p []float64) (float64, float64) {
	r, s := p[len(p)-1], math.Abs(p[len(p)-1])
	for _, v := range p[:len(p)-1] {
		r -= v * v / 2
		s += v * v / 2
	}
	return r, s
}

func constant(k float64) func(x, g []float64) float64 {
	return func(x, g []float64) float64 {
		clear(g)
		return k
	}
}

func linear(k float64, p ...float64) func(x, g []float64) float64 {
	return func(x, g []float64) float64 {
		copy(g, p)
		u := k
		for i := range x {
			u += p[i] * x[i]
		}
		return u
	}
}

// focus is -|x_perp|^2/(2 (z + c)) - k.
func focus(c, k float64) func(x, g []float64) float64 {
	return func(x, g []float64) float64 {
		z := x[2] + c
		r := x[0]*x[0] + x[1]*x[1]
		g[0], g[1], g[2] = -x[0]/z, -x[1]/z, r/(2*z*z)
		return -r/(2*z) - k
	}
}

// cone is m |x_perp| + m^2 z/2.
func cone(m float64) func(x, g []float64) float64 {
	return func(x, g []float64) float64 {
		r := math.Hypot(x[0], x[1])
		g[0], g[1], g[2] = m*x[0]/r, m*x[1]/r, m*m/2
		return m*r + m*m*x[2]/2
	}
}

// revolution is the surface of revolution with radius f(t) at height t; df is
// the derivative.
func revolution(t0, t1 float64, f, df func(float64) float64) Patch {
	return Patch{Dim: 3, Params: []Range{{t0, t1}, {0, 2 * math.Pi}}, Map: func(s, x []float64, jac [][]float64) {
		sin, cos := math.Sincos(s[1])
		r, d := f(s[0]), df(s[0])
		x[0], x[1], x[2] = r*cos, r*sin, s[0]
		jac[0][0], jac[0][1], jac[0][2] = d*cos, d*sin, 1
		jac[1][0], jac[1][1], jac[1][2] = -r*sin, r*cos, 0
	}}
}

func paraboloid(k, t0, t1 float64) crease {
	return crease{
		name: fmt.Sprintf("paraboloid k=%g", k),
		surface: revolution(t0, t1,
			func(t float64) float64 { return math.Sqrt(2 * k * t) },
			func(t float64) float64 { return math.Sqrt(2*k*t) / (2 * t) }),
		plus: focus(0, 0), minus: constant(-k),
		want: 2 * math.Pi * k * k / 3 * math.Log(t1/t0),
	}
}

// focal is the front -rho^2/(2t) = -rho^2/(2(t+c)) - k, so
// rho^2 = 2 k t (t+c)/c.
func focal(k, c, t0, t1 float64) crease {
	f := func(t float64) float64 { return math.Sqrt(2 * k * t * (t + c) / c) }
	return crease{
		name:    fmt.Sprintf("two focal fronts k=%g c=%g", k, c),
		surface: revolution(t0, t1, f, func(t float64) float64 { return k * (2*t + c) / c / f(t) }),
		plus:    focus(0, 0), minus: focus(c, k),
		want: 2 * math.Pi * k * k / 3 * math.Log(t1*(t0+c)/(t0*(t1+c))),
	}
}

func cones(m1, m2, h float64) crease {
	m := (m1 + m2) / 2
	return crease{
		name:    fmt.Sprintf("two cones %g, %g", m1, m2),
		surface: revolution(-h, 0, func(t float64) float64 { return -m * t }, func(float64) float64 { return -m }),
		plus:    cone(m1), minus: cone(m2),
		want: math.Pi * math.Pow(math.Abs(m1-m2), 3) * (m1 + m2) * h * h / 24,
	}
}

// wall is a flat crease between a·x + |a|^2 z/2 and b·x + |b|^2 z/2 over the
// polygon that the corners (along the horizontal direction of the wall, z)
// describe.
func wall(a, b [2]float64, corners [][2]float64) crease {
	q := [2]float64{a[0] - b[0], a[1] - b[1]}
	n2 := q[0]*q[0] + q[1]*q[1]
	qz := (a[0]*a[0] + a[1]*a[1] - b[0]*b[0] - b[1]*b[1]) / 2
	l := math.Sqrt(n2)
	v := make([][]float64, len(corners))
	var area float64 // in (l, z)
	for i, c := range corners {
		j := (i + 1) % len(corners)
		area += (c[0]*corners[j][1] - c[1]*corners[j][0]) / 2
		// q·x_perp + qz z = 0
		v[i] = []float64{-q[1]/l*c[0] - q[0]*qz/n2*c[1], q[0]/l*c[0] - q[1]*qz/n2*c[1], c[1]}
	}
	return crease{
		name:    fmt.Sprintf("wall %v %v", a, b),
		surface: Polygon{v},
		plus:    linear(0, a[0], a[1], (a[0]*a[0]+a[1]*a[1])/2), minus: linear(0, b[0], b[1], (b[0]*b[0]+b[1]*b[1])/2),
		want: l * l * l / 12 * math.Abs(area),
	}
}

func layeredCreases() []crease {
	var cs []crease
	for _, k := range []float64{0.5, 0.7, 3} {
		cs = append(cs, paraboloid(k, 0.5, 3), paraboloid(k, 1.25, 4.5), paraboloid(k, 1, 1e4))
		cs = append(cs, focal(k, 0.75, 0.5, 2), focal(k, 10, 0.01, 1))
	}
	for _, m := range [][2]float64{{1, 0}, {2, -1}, {3, -0.5}, {0.25, 1}} {
		cs = append(cs, cones(m[0], m[1], 1), cones(m[0], m[1], 2.75))
	}
	arrow := [][2]float64{{0, 0}, {2, 1}, {0, 3}, {0.5, 1}}
	square := [][2]float64{{0, 0}, {1, 0}, {1, 1}, {0, 1}}
	cs = append(cs, wall([2]float64{1, 0}, [2]float64{-1, 0}, square), wall([2]float64{1, 0.5}, [2]float64{-0.25, 2}, arrow))
	return cs
}

// swapped exchanges the traces.
func (c crease) swapped() crease {
	c.plus, c.minus = c.minus, c.plus
	c.name += ", traces swapped"
	return c
}

// moved maps the surface by the linear map m (rows) and the traces by
// u'(x) = u(m^-1 x) + extra, with inv the inverse of m.
func (c crease) moved(name string, m, inv [3][3]float64, extra [3]float64) crease {
	apply := func(a [3][3]float64, v []float64) [3]float64 {
		var o [3]float64
		for i := range 3 {
			for j := range 3 {
				o[i] += a[i][j] * v[j]
			}
		}
		return o
	}
	trace := func(f func(x, g []float64) float64) func(x, g []float64) float64 {
		h := make([]float64, 3)
		return func(x, g []float64) float64 {
			y := apply(inv, x)
			u := f(y[:], h)
			for j := range 3 {
				g[j] = extra[j]
				u += extra[j] * x[j]
				for i := range 3 {
					g[j] += h[i] * inv[i][j]
				}
			}
			return u
		}
	}
	c.plus, c.minus = trace(c.plus), trace(c.minus)
	switch s := c.surface.(type) {
	case Polygon:
		var v [][]float64
		for _, x := range s.Vertices {
			y := apply(m, x)
			v = append(v, y[:])
		}
		c.surface = Polygon{v}
	case Patch:
		old := s.Map
		s.Map = func(p, x []float64, jac [][]float64) {
			old(p, x, jac)
			for _, w := range append([][]float64{x}, jac...) {
				y := apply(m, w)
				copy(w, y[:])
			}
		}
		c.surface = s
	}
	c.name += ", " + name
	return c
}

// rotated turns everything about the z axis.
func (c crease) rotated(angle float64) crease {
	s, k := math.Sincos(angle)
	return c.moved("rotated", [3][3]float64{{k, -s, 0}, {s, k, 0}, {0, 0, 1}}, [3][3]float64{{k, s, 0}, {-s, k, 0}, {0, 0, 1}}, [3]float64{})
}

// galilean applies u(x_perp + a z, z) + a·x_perp + |a|^2 z/2.
func (c crease) galilean(a, b float64) crease {
	return c.moved("Galilean", [3][3]float64{{1, 0, -a}, {0, 1, -b}, {0, 0, 1}}, [3][3]float64{{1, 0, a}, {0, 1, b}, {0, 0, 1}},
		[3]float64{a, b, (a*a + b*b) / 2})
}

// honest checks a value against the closed form and against its own error.
func honest(t *testing.T, what string, got, reported, want float64) {
	t.Helper()
	miss := math.Abs(got - want)
	if !(miss <= reported+4e-15*math.Abs(want)) {
		t.Errorf("%s: reported error %.3g, true error %.3g", what, reported, miss)
	}
	if !(miss <= 1e-10*math.Abs(want)) {
		t.Errorf("%s: got %.17g, want %.17g (relative error %.2g)", what, got, want, miss/math.Abs(want))
	}
	if !(reported <= 1e-10*math.Abs(want)+1e-300) {
		t.Errorf("%s: reported error %.3g of %.3g", what, reported, want)
	}
}

func TestLayeredClosedForms(t *testing.T) {
	ctx := context.Background()
	for _, base := range layeredCreases() {
		for _, c := range []crease{base, base.swapped(), base.rotated(0.7), base.galilean(0.3, -1.2), base.rotated(2).galilean(-0.5, 0.25).swapped()} {
			o := Options{Well: layeredWell}
			r, err := Integrate(ctx, c.surface, Traces{Plus: c.plus, Minus: c.minus, HasValue: !c.gradients}, layeredDensity, o)
			if err != nil {
				t.Errorf("%s: %v", c.name, err)
				continue
			}
			t.Logf("%s: true %.1e reported %.1e area %.1e, %d evaluations", c.name, math.Abs(r.Energy-c.want)/c.want, r.Error/c.want, r.AreaError/r.Area, r.Evaluations)
			honest(t, c.name, r.Energy, r.Error, c.want)
		}
	}
}

func TestParaboloidIsCheap(t *testing.T) {
	c := paraboloid(0.7, 0.5, 3)
	r, err := Integrate(context.Background(), c.surface, Traces{Plus: c.plus, Minus: c.minus, HasValue: true}, layeredDensity, Options{Well: layeredWell})
	if err != nil {
		t.Fatal(err)
	}
	honest(t, c.name, r.Energy, r.Error, c.want)
	if r.Evaluations > 400 {
		t.Errorf("%d evaluations", r.Evaluations)
	}
}

func BenchmarkParaboloid(b *testing.B) {
	c := paraboloid(0.7, 0.5, 3)
	for b.Loop() {
		if _, err := Integrate(context.Background(), c.surface, Traces{Plus: c.plus, Minus: c.minus, HasValue: true}, layeredDensity, Options{Well: layeredWell}); err != nil {
			b.Fatal(err)
		}
	}
}
