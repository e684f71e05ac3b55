package quadrature

import (
	"context"
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/mathext"
)

// ellipsoid with the given semi-axes, by polar angle and azimuth.
func ellipsoid(a, b, c float64) Patch {
	return Patch{Dim: 3, Params: []Range{{0, math.Pi}, {0, 2 * math.Pi}}, Map: func(s, x []float64, jac [][]float64) {
		st, ct := math.Sincos(s[0])
		sp, cp := math.Sincos(s[1])
		x[0], x[1], x[2] = a*st*cp, b*st*sp, c*ct
		jac[0][0], jac[0][1], jac[0][2] = a*ct*cp, b*ct*sp, -c*st
		jac[1][0], jac[1][1], jac[1][2] = -a*st*sp, b*st*cp, 0
	}}
}

// ellipsoidArea is DLMF 19.33.1, S = 3 V R_G(a^-2, b^-2, c^-2), with R_G from
// DLMF 19.21.10.
func ellipsoidArea(a, b, c float64) float64 {
	x, y, z := 1/(a*a), 1/(b*b), 1/(c*c)
	g := (z*mathext.EllipticRF(x, y, z) - (x-z)*(y-z)*mathext.EllipticRD(x, y, z)/3 + math.Sqrt(x*y/z)) / 2
	return 4 * math.Pi * a * b * c * g
}

func torus(R, r float64) Patch {
	return Patch{Dim: 3, Params: []Range{{0, 2 * math.Pi}, {0, 2 * math.Pi}}, Map: func(s, x []float64, jac [][]float64) {
		su, cu := math.Sincos(s[0])
		sv, cv := math.Sincos(s[1])
		w := R + r*cv
		x[0], x[1], x[2] = w*cu, w*su, r*sv
		jac[0][0], jac[0][1], jac[0][2] = -w*su, w*cu, 0
		jac[1][0], jac[1][1], jac[1][2] = -r*sv*cu, -r*sv*su, r*cv
	}}
}

func dome(r float64) func(x, g []float64) float64 {
	return func(x, g []float64) float64 {
		z := math.Sqrt((r - math.Hypot(x[0], x[1])) * (r + math.Hypot(x[0], x[1])))
		g[0], g[1] = -x[0]/z, -x[1]/z
		return z
	}
}

// plainDome is the same, with the cancellation that a formula has.
func plainDome(r float64) func(x, g []float64) float64 {
	return func(x, g []float64) float64 {
		z := math.Sqrt(r*r - x[0]*x[0] - x[1]*x[1])
		g[0], g[1] = -x[0]/z, -x[1]/z
		return z
	}
}

func bowl(x, g []float64) float64 {
	g[0], g[1] = x[0], x[1]
	return (x[0]*x[0] + x[1]*x[1]) / 2
}

func tilted(x, g []float64) float64 {
	g[0], g[1] = 2, -2
	return 2*x[0] - 2*x[1] + 1
}

func TestAreas(t *testing.T) {
	// Spheroids: elementary formulas, as in DLMF 19.33 for two equal axes.
	oblate := func(a, c float64) float64 {
		e := math.Sqrt(1 - c*c/(a*a))
		return 2*math.Pi*a*a + math.Pi*c*c/e*math.Log((1+e)/(1-e))
	}
	prolate := func(a, c float64) float64 {
		e := math.Sqrt(1 - a*a/(c*c))
		return 2*math.Pi*a*a + 2*math.Pi*a*c/e*math.Asin(e)
	}
	helicoid := Patch{Dim: 3, Params: []Range{{-2, 2}, {0, 3}}, Map: func(s, x []float64, jac [][]float64) {
		sin, cos := math.Sincos(s[1])
		x[0], x[1], x[2] = s[0]*cos, s[0]*sin, s[1]
		jac[0][0], jac[0][1], jac[0][2] = cos, sin, 0
		jac[1][0], jac[1][1], jac[1][2] = -s[0]*sin, s[0]*cos, 1
	}}
	cases := []struct {
		name    string
		surface Surface
		want    float64
	}{
		{"sphere", ellipsoid(1.5, 1.5, 1.5), 9 * math.Pi},
		{"oblate spheroid", ellipsoid(2, 2, 1), oblate(2, 1)},
		{"flat spheroid", ellipsoid(1, 1, 0.05), oblate(1, 0.05)},
		{"prolate spheroid", ellipsoid(1, 1, 3), prolate(1, 3)},
		{"torus", torus(2, 0.5), 4 * math.Pi * math.Pi},
		{"fat torus", torus(1, 0.99), 4 * math.Pi * math.Pi * 0.99},
		{"helicoid", helicoid, 3 * (2*math.Sqrt(5) + math.Asinh(2))},
		{"double cone through its tip", revolution(-1, 2, func(t float64) float64 { return t }, func(float64) float64 { return 1 }), 5 * math.Pi * math.Sqrt2},
		{"dome over a disc", Graph{Over: Disc{Radius: 2}, F: dome(2)}, 8 * math.Pi},
		{"dome over a disc, as a formula", Graph{Over: Disc{Radius: 0.7}, F: plainDome(0.7)}, 2 * math.Pi * 0.49},
		{"dome over a disc off the origin", Graph{Over: Disc{Center: [2]float64{0.25, 1}, Radius: 3}, F: func(x, g []float64) float64 {
			return plainDome(3)([]float64{x[0] - 0.25, x[1] - 1}, g)
		}}, 18 * math.Pi},
		{"bowl over a disc", Graph{Over: Disc{Radius: 2}, F: bowl}, 2 * math.Pi / 3 * (5*math.Sqrt(5) - 1)},
		{"plane over a shifted disc", Graph{Over: Disc{Center: [2]float64{3, -1}, Radius: 0.5}, F: tilted}, 3 * math.Pi / 4},
		{"plane over a triangle", Graph{Over: Triangle{{0, 0}, {1, 3}, {2, 0}}, F: tilted}, 9},
		{"plane over a rectangle", Graph{Over: Rectangle{Range{-1, 2}, Range{0, 4}}, F: tilted}, 36},
		{"arc over an interval", Graph{Over: Interval{0, 2}, F: func(x, g []float64) float64 { g[0] = x[0]; return x[0] * x[0] / 2 }}, (2*math.Sqrt(5) + math.Asinh(2)) / 2},
		{"circle", Patch{Dim: 2, Params: []Range{{0, 2 * math.Pi}}, Map: circleMap}, 2 * math.Pi},
		{"closed chain", Polygon{[][]float64{{0, 0}, {3, 0}, {3, 4}, {0, 0}}}, 12},
		{"star", Polygon{star(7, 2, 0.5)}, 7 * math.Sin(math.Pi/7)},
	}
	for _, v := range [][3]float64{{1, 2, 3}, {1, 1.1, 0.3}, {5, 0.5, 1}} {
		cases = append(cases, struct {
			name    string
			surface Surface
			want    float64
		}{fmt.Sprintf("ellipsoid %v", v), ellipsoid(v[0], v[1], v[2]), ellipsoidArea(v[0], v[1], v[2])})
	}
	for _, c := range cases {
		r, err := Integrate(context.Background(), c.surface, Traces{}, func(_, _, _, _ []float64) float64 { return 2 }, Options{})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		t.Logf("%s: true %.1e reported %.1e, %d evaluations", c.name, math.Abs(r.Area/c.want-1), r.AreaError/c.want, r.Evaluations)
		honest(t, c.name, r.Area, r.AreaError, c.want)
		honest(t, c.name+", energy", r.Energy, r.Error, 2*c.want)
	}
}

// star is a star with n points, of radii R and r, in a plane that is not level.
func star(n int, R, r float64) [][]float64 {
	var v [][]float64
	for i := range 2 * n {
		rad := R
		if i%2 == 1 {
			rad = r
		}
		s, c := math.Sincos(math.Pi * float64(i) / float64(n))
		// orthonormal directions (2, 2, 1)/3 and (-2, 1, 2)/3
		a, b := rad*c/3, rad*s/3
		v = append(v, []float64{1 + 2*a - 2*b, 2*a + b, a + 2*b})
	}
	return v
}

func TestSphereDensity(t *testing.T) {
	// q = lambda nu, density |q_perp|^4/(12 |q|).
	for _, lambda := range []float64{-1, 0.5, 3} {
		for _, r := range []float64{0.5, 2} {
			res, err := Integrate(context.Background(), ellipsoid(r, r, r), Traces{}, func(_, _, _, nu []float64) float64 {
				p := nu[0]*nu[0] + nu[1]*nu[1]
				return math.Pow(math.Abs(lambda), 3) * p * p / 12
			}, Options{})
			if err != nil {
				t.Fatal(err)
			}
			honest(t, "sphere", res.Energy, res.Error, 8*math.Pi*math.Pow(math.Abs(lambda), 3)*r*r/45)
		}
	}
}

func TestNormals(t *testing.T) {
	// The flux of the position through a closed surface is d times its volume,
	// with the sign of the normal.
	flux := func(x, _, _, nu []float64) float64 {
		var s float64
		for k := range x {
			s += x[k] * nu[k]
		}
		return s
	}
	for _, c := range []struct {
		name    string
		surface Surface
		want    float64
	}{
		{"sphere", ellipsoid(1, 1, 1), 4 * math.Pi},
		{"circle", Patch{Dim: 2, Params: []Range{{0, 2 * math.Pi}}, Map: circleMap}, 2 * math.Pi},
		{"triangle", Polygon{[][]float64{{0, 0, 2}, {1, 0, 2}, {0, 1, 2}}}, 1},
		{"triangle the other way", Polygon{[][]float64{{0, 0, 2}, {0, 1, 2}, {1, 0, 2}}}, -1},
		{"chain", Polygon{[][]float64{{1, -1}, {1, 1}, {-1, 1}, {-1, -1}, {1, -1}}}, 8},
		{"graph in the plane", Graph{Over: Interval{0, 3}, F: func(_, g []float64) float64 { g[0] = 0; return 2 }}, 6},
		{"graph over a triangle", Graph{Over: Triangle{{0, 0}, {0, 1}, {1, 0}}, F: func(_, g []float64) float64 { clear(g); return 2 }}, 1},
		{"graph over a disc", Graph{Over: Disc{Radius: 1}, F: func(_, g []float64) float64 { clear(g); return 2 }}, 2 * math.Pi},
	} {
		r, err := Integrate(context.Background(), c.surface, Traces{}, flux, Options{})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if math.Abs(r.Energy-c.want) > r.Error+4e-15*math.Abs(c.want) {
			t.Errorf("%s: %v, want %v", c.name, r.Energy, c.want)
		}
	}
}
