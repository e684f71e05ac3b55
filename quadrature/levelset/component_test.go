package levelset

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// minus is -f.
type minus struct{ Function }

func (m minus) Value(x []float64) float64 { return -m.Function.Value(x) }

func (m minus) Gradient(g, x []float64) {
	m.Function.Gradient(g, x)
	for i := range g {
		g[i] = -g[i]
	}
}

func (m minus) Range(box []Interval) Interval { return m.Function.Range(box).Neg() }

func (m minus) GradientRange(g, box []Interval) {
	m.Function.GradientRange(g, box)
	for i := range g {
		g[i] = g[i].Neg()
	}
}

// band is r² - (n·x - d)²: a slab about a plane.
type band struct {
	n []float64
	d float64
	r float64
}

func (b band) at(x []float64) float64 {
	v := -b.d
	for i, c := range b.n {
		v += c * x[i]
	}
	return v
}

func (b band) Value(x []float64) float64 { v := b.at(x); return b.r*b.r - v*v }

func (b band) Gradient(g, x []float64) {
	v := b.at(x)
	for i, c := range b.n {
		g[i] = -2 * v * c
	}
}

func (b band) over(box []Interval) Interval {
	v := span(-b.d, -b.d)
	for i, c := range b.n {
		v = v.Add(span(c, c).Mul(box[i]))
	}
	return v
}

func (b band) Range(box []Interval) Interval {
	return span(b.r, b.r).Sqr().Sub(b.over(box).Sqr())
}

func (b band) GradientRange(g, box []Interval) {
	v := b.over(box)
	for i, c := range b.n {
		g[i] = span(-2*c, -2*c).Mul(v)
	}
}

// areas are those of the components, which have to add up to the whole.
func areas(t *testing.T, r Result) (list []float64) {
	t.Helper()
	sum, value := 0.0, 0.0
	for _, c := range r.Components {
		list = append(list, c.Area)
		sum += c.Area
		value += c.Value[0]
	}
	assert.InEpsilon(t, r.Area, sum, 1e-14)
	assert.InEpsilon(t, r.Value[0], value, 1e-14)
	return list
}

// Every surface of the tests of integrals is one component, but for those that
// have more by construction.
func TestConnected(t *testing.T) {
	several := map[string]int{"two spheres, one of them small": 2, "rectangular hyperbola": 2,
		// The caps beyond the faces overlap and leave a triangle next to the corner.
		"sphere in a box, one corner cut": 2}
	for _, e := range examples() {
		for _, rel := range []float64{1e-4, 1e-9} {
			r, err := Integrate(context.Background(), e.phi, e.trims, e.box, e.f, Options{Parts: 1, Rel: rel})
			require.NoError(t, err)
			assert.Len(t, r.Components, max(1, several[e.name]), e.name)
			assert.True(t, r.Settled || r.Resolution > 0, e.name)
			if rel < 1e-8 {
				assert.True(t, r.Settled, e.name)
			}
			areas(t, r)
		}
	}
}

func TestComponents(t *testing.T) {
	ball, b := sphere(1, 0, 0, 0), cube(-1.5, 1.5)
	for _, c := range []struct {
		name  string
		phi   Function
		trims []Function
		box   [][2]float64
		want  []float64 // areas
	}{
		{"two spheres", product{sphere(1, 0, 0, 0), sphere(0.25, 0.1, 0.2, -1.3)}, nil, [][2]float64{{-1.5, 1.5}, {-1.5, 1.5}, {-2, 1.5}},
			[]float64{4 * math.Pi, math.Pi / 4}},
		{"concentric spheres, close together", product{sphere(1, 0, 0, 0), sphere(0.8, 0, 0, 0)}, nil, b,
			[]float64{4 * math.Pi, 4 * math.Pi * 0.64}},
		{"a sphere and one of 1/200 of the box", product{ball, sphere(0.015, 0.3, 0.21, 0.13)}, nil, b,
			[]float64{4 * math.Pi, 4 * math.Pi * 0.015 * 0.015}},
		{"torus cut by the box into two", torus{1, .4, [3]float64{}}, nil, [][2]float64{{-0.3, 0.3}, {-2, 2}, {-1, 1}}, []float64{-1, -1}},
		{"torus cut by the box into rings", torus{1, .4, [3]float64{}}, nil, [][2]float64{{-2, 2}, {-2, 2}, {0.1, 0.3}}, []float64{-1, -1}},
		{"torus cut by conditions into four", torus{1, .25, [3]float64{}}, []Function{minus{band{[]float64{1, 0, 0}, 0, 0.1}}, minus{band{[]float64{0, 1, 0}, 0, 0.1}}},
			[][2]float64{{-2, 2}, {-2, 2}, {-1, 1}}, []float64{-1, -1, -1, -1}},
		{"two caps of a sphere beyond two planes", ball, []Function{minus{band{[]float64{1, 0, 0}, 0, 0.6}}}, b,
			[]float64{2 * math.Pi * 0.4, 2 * math.Pi * 0.4}},
		{"two caps of a sphere beyond oblique planes", ball, []Function{minus{band{[]float64{0.6, 0, 0.8}, 0, 0.6}}}, b,
			[]float64{2 * math.Pi * 0.4, 2 * math.Pi * 0.4}},
		{"the zone between", ball, []Function{band{[]float64{0.6, 0, 0.8}, 0, 0.6}}, b, []float64{2 * math.Pi * 1.2}},
		{"opposite lunes that touch in two points", ball, []Function{product{plane(0, 1, 0, 0), plane(0, 0, 1, 0)}}, b,
			[]float64{math.Pi, math.Pi}},
		{"plane that leaves and comes back", quadric{a: []float64{1, 0, 0}, b: []float64{0, 0, -1}, c: zero3}, nil,
			[][2]float64{{-1.5, 1.5}, {0, 1}, {0.25, 1}}, []float64{-1, -1}},
		{"circle and the part outside a strip", sphere(1, 0, 0), []Function{minus{band{[]float64{0.6, 0.8}, 0.1, 0.3}}}, b[:2], []float64{-1, -1}},
		{"curve that leaves and comes back", quadric{a: []float64{1, 0}, b: []float64{0, -1}, c: []float64{0, 0}}, nil,
			[][2]float64{{-1.5, 1.5}, {0.25, 1}}, []float64{-1, -1}},
	} {
		t.Run(c.name, func(t *testing.T) {
			r, err := run(c.phi, c.trims, c.box, Options{Rel: 1e-9})
			require.NoError(t, err)
			got := areas(t, r)
			require.Len(t, got, len(c.want))
			for i, a := range c.want {
				if a > 0 {
					assert.InEpsilon(t, a, got[i], 1e-8)
					assert.LessOrEqual(t, math.Abs(a-got[i]), r.Components[i].AreaError)
				}
			}
			assert.True(t, r.Settled)
			for _, p := range r.Components {
				assert.InDelta(t, 0, c.phi.Value(p.Point), 1e-12)
				for k, v := range p.Point {
					assert.True(t, v >= p.Box[k][0]-1e-3 && v <= p.Box[k][1]+1e-3, "%v in %v", p.Point, p.Box)
				}
			}
		})
	}
}

// A plane with slits, and rows of holes: components in random position.
func TestRandomComponents(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for i := range 8 {
		a, b, c := rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()
		n := math.Sqrt(a*a + b*b + c*c)
		d := []float64{a / n, b / n, c / n}
		w := math.Pow(10, -1-2*rng.Float64())
		ball := sphere(1, 0.1*rng.Float64(), 0.1*rng.Float64(), 0.1*rng.Float64())
		at := d[0]*ball.c[0] + d[1]*ball.c[1] + d[2]*ball.c[2] + rng.Float64() - 0.5
		above, below := plane(-at-w, d...), plane(at-w, -d[0], -d[1], -d[2])
		r, err := IntegrateUnion(context.Background(), ball, [][]Function{{above}, {below}}, cube(-1.5, 1.5), one, Options{Parts: 1, Rel: 1e-7})
		require.NoError(t, err)
		assert.Len(t, r.Components, 2, "%d: %v, half width %g", i, d, w)
		r, err = run(ball, []Function{minus{above}, minus{below}}, cube(-1.5, 1.5), Options{Rel: 1e-7})
		require.NoError(t, err)
		assert.Len(t, r.Components, 1, "%d: %v, half width %g", i, d, w)
	}
}

// The same surface in two systems of conditions that exclude each other is one
// component, and where the parts only touch there are two.
func TestUnion(t *testing.T) {
	ball, b := sphere(1, 0, 0, 0), cube(-1.5, 1.5)
	f, g := plane(0.1, 0.6, 0.1, 0.8), plane(0, 1, -0.3, 0.2)
	r, err := IntegrateUnion(context.Background(), ball, [][]Function{{f}, {minus{f}}}, b, one, Options{Parts: 1, Rel: 1e-9})
	require.NoError(t, err)
	require.Len(t, r.Components, 1)
	assert.InEpsilon(t, 4*math.Pi, r.Components[0].Area, 1e-9)
	r, err = IntegrateUnion(context.Background(), ball, [][]Function{{f}, {minus{f}, g}}, b, one, Options{Parts: 1, Rel: 1e-9})
	require.NoError(t, err)
	require.Len(t, r.Components, 1)
	r, err = IntegrateUnion(context.Background(), ball, [][]Function{{f, g}, {minus{f}, minus{g}}}, b, one, Options{Parts: 1, Rel: 1e-9})
	require.NoError(t, err)
	require.Len(t, r.Components, 2)
	r, err = run(ball, nil, b, Options{Rel: 1e-9, Cuts: [][]float64{{-0.1, 0.2}, {0.3}, {5, 0.4}}})
	require.NoError(t, err)
	require.Len(t, r.Components, 1)
	assert.InEpsilon(t, 4*math.Pi, r.Area, 1e-9)
}

// Spheres that touch: undecided cells about the point, and the number of
// components is not settled; those found are the spheres.
func TestTouchingSpheres(t *testing.T) {
	r, err := run(product{sphere(1, 0, 0, 0), sphere(0.5, 0.9, 1.2, 0)}, nil, cube(-2, 2), Options{Rel: 1e-9, MaxCells: 15000})
	require.ErrorIs(t, err, ErrResolution)
	assert.False(t, r.Settled)
	got := areas(t, r)
	require.Len(t, got, 2)
	assert.InDelta(t, 4*math.Pi, got[0], r.Components[0].AreaError)
	assert.InDelta(t, math.Pi, got[1], r.Components[1].AreaError)
}
