package levelset

import (
	"context"
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func one(_, _, out []float64) { out[0] = 1 }

// paraboloidal is the sharp density of the layered model, |q_perp|⁴/(12 |q|),
// across the front between -(x²+y²)/(2z) and a constant.
func paraboloidal(x, _, out []float64) {
	r := x[0]*x[0] + x[1]*x[1]
	p, q := r/(x[2]*x[2]), r/(2*x[2]*x[2])
	out[0] = p * p / (12 * math.Sqrt(p+q*q))
}

func cube(a, b float64) [][2]float64 { return [][2]float64{{a, b}, {a, b}, {a, b}} }

func squares(a, b, c float64, centre ...float64) quadric {
	return quadric{a: []float64{1 / (a * a), 1 / (b * b), 1 / (c * c)}, b: zero3, c: centre, d: -1}
}

// hyperbola is the branch of x²/a² - y²/b² = 1, reached by phi = x²/a² - y²/b² - 1.
func hyperbola(a, b float64) quadric {
	return quadric{a: []float64{1 / (a * a), -1 / (b * b)}, b: []float64{0, 0}, c: []float64{0, 0}, d: -1}
}

type example struct {
	name  string
	exact float64
	phi   Function
	trims []Function
	box   [][2]float64
	f     func(x, n, out []float64)
}

func examples() []example {
	const k = 0.7
	para := quadric{a: []float64{1, 1, 0}, b: []float64{0, 0, -2 * k}, c: zero3}
	front := 2 * math.Pi * k * k / 3 * math.Log(6)
	b := cube(-1.5, 1.5)
	ball := sphere(1, 0, 0, 0)
	cap := 2 * math.Pi * (1 - 0.6)
	return []example{
		{"paraboloid", front, para, nil, [][2]float64{{-2.5, 2.5}, {-2.5, 2.5}, {0.5, 3}}, paraboloidal},
		{"paraboloid, another box", front, para, nil, [][2]float64{{-2.53, 2.7}, {-2.2, 2.51}, {0.5, 3}}, paraboloidal},
		{"sphere", 4 * math.Pi, ball, nil, b, one},
		{"sphere off the centre", 4 * math.Pi, sphere(1, 0.1, 0.2, 0.033), nil, b, one},
		{"sphere far away", 4 * math.Pi, sphere(1, 100.1, 0.2, 0.033), nil, [][2]float64{{98, 102}, {-1.5, 1.5}, {-1.5, 1.5}}, one},
		{"eighth of a sphere", math.Pi / 2, ball, nil, cube(0, 1.5), one},
		{"sphere in a box, one face", 4*math.Pi - cap, ball, nil, [][2]float64{{-1.5, 1.5}, {-1.5, 0.6}, {-1.5, 1.5}}, one},
		{"sphere in a box, one corner cut", 4*math.Pi - 3*cap + 3*lens(0.6), ball, nil, cube(-1.5, 0.6), one},
		{"sphere trimmed by a plane", cap, ball, []Function{plane(-0.6, 0, 0, 1)}, b, one},
		{"sphere trimmed by an oblique plane", cap, ball, []Function{plane(-0.6, 0.6, 0.48, 0.64)}, b, one},
		{"sphere trimmed by two planes", lens(0.6), ball, []Function{plane(-0.6, 1, 0, 0), plane(-0.6, 0, 1, 0)}, b, one},
		{"sphere trimmed by a sphere", 2 * math.Pi * (1 - 0.625), ball, []Function{quadric{a: []float64{-1, -1, -1}, b: zero3, c: []float64{1, 0, 0}, d: 0.75}}, b, one},
		{"ellipsoid", ellipsoid(1, 1./2, 1./3), squares(1, 1./2, 1./3, 0, 0, 0), nil, b, one},
		{"ellipsoid off the centre", ellipsoid(1, 1./2, 1./3), squares(1, 1./2, 1./3, .1, .2, .3), nil, b, one},
		{"flat ellipsoid", ellipsoid(1, 1, .05), squares(1, 1, .05, 0, 0, 0), nil, b, one},
		{"slender ellipsoid", ellipsoid(1, .1, .05), squares(1, .1, .05, 0, 0, 0), nil, b, one},
		{"torus", 4 * math.Pi * math.Pi * .4, torus{1, .4, [3]float64{}}, nil, [][2]float64{{-2, 2}, {-2, 2}, {-1, 1}}, one},
		{"plane", math.Sqrt(3) / 2, plane(-1, 1, 1, 1), nil, cube(0, 1), one},
		{"hexagon", 3 * math.Sqrt(3) / 4, plane(-1.5, 1, 1, 1), nil, cube(0, 1), one},
		{"plane on a face", 1, plane(0, 1, 0, 0), nil, cube(0, 1), one},
		{"two spheres, one of them small", 4 * math.Pi * (1 + 1./40000), product{sphere(1, 0, 0, 0), sphere(0.005, 0.3, 0.21, 0.13)}, nil, b, one},
		{"circle", 2 * math.Pi, sphere(1, .1, .2), nil, b[:2], one},
		{"ellipse", ellipse(2, 1), quadric{a: []float64{0.25, 1}, b: []float64{0, 0}, c: []float64{0.05, 0}, d: -1}, nil, [][2]float64{{-3, 3}, {-2, 2}}, one},
		{"half a circle by a trim", math.Pi, sphere(1, 0, 0), []Function{plane(0, 0.6, 0.8)}, b[:2], one},
		{"rectangular hyperbola", 2 * hyperbolaLength, hyperbola(1, 1), nil, [][2]float64{{-3, 3}, {-1, 1}}, one},
	}
}

// hyperbolaLength is the length of x = cosh t, |t| ≤ asinh 1, the integral of
// √cosh 2t; computed by Gauss–Legendre quadrature of 32 nodes on 8 panels.
var hyperbolaLength = func() (sum float64) {
	end := math.Asinh(1)
	r := newGauss(32)
	for i := range 8 {
		for j, x := range r.x {
			t := end * (float64(i) + x) / 8
			sum += 2 * end / 8 * r.w[j] * math.Sqrt(math.Cosh(2*t))
		}
	}
	return sum
}()

func TestKnownIntegrals(t *testing.T) {
	for _, e := range examples() {
		t.Run(e.name, func(t *testing.T) {
			for _, rel := range []float64{1e-3, 1e-5, 1e-7, 1e-9, 1e-11} {
				r, err := Integrate(context.Background(), e.phi, e.trims, e.box, e.f, Options{Parts: 1, Rel: rel})
				require.NoError(t, err, "%g", rel)
				diff := math.Abs(r.Value[0] - e.exact)
				assert.LessOrEqual(t, diff, r.Error[0]+2e-15*e.exact, "%g: error estimate", rel)
				assert.LessOrEqual(t, diff, rel*e.exact, "%g: error", rel)
				assert.LessOrEqual(t, r.Error[0], max(2*rel, 5e-11)*e.exact, "%g: estimate within the tolerance", rel)
				if rel == 1e-9 {
					t.Logf("nodes %d, cells %d, sheets %d, error %.1e, estimate %.1e, undecided %d of %.1e", r.Nodes, r.Cells, r.Sheets, diff/e.exact, r.Error[0]/e.exact, r.Undecided, r.Resolution)
				}
			}
		})
	}
}

func TestNodes(t *testing.T) {
	for _, e := range examples() {
		limit, rel := 0, 0.0
		switch e.name {
		case "paraboloid", "paraboloid, another box":
			limit, rel = 2500, 1e-9
		case "ellipsoid", "ellipsoid off the centre":
			limit, rel = 14000, 1e-8
		default:
			continue
		}
		r, err := Integrate(context.Background(), e.phi, nil, e.box, e.f, Options{Parts: 1, Rel: rel})
		require.NoError(t, err)
		assert.InEpsilon(t, e.exact, r.Value[0], rel)
		assert.LessOrEqual(t, r.Nodes, limit, e.name)
	}
}
