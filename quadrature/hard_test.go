package quadrature

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// TestHard has densities that are easily got wrong without notice.
func TestHard(t *testing.T) {
	cylinder := Patch{Dim: 3, Params: []Range{{0, 2 * math.Pi}, {0, 1}}, Map: func(s, x []float64, jac [][]float64) {
		sin, cos := math.Sincos(s[0])
		x[0], x[1], x[2] = cos, sin, s[1]
		jac[0][0], jac[0][1], jac[0][2] = -sin, cos, 0
		jac[1][0], jac[1][1], jac[1][2] = 0, 0, 1
	}}
	square := Graph{Over: Rectangle{Range{0, 1}, Range{0, 1}}, F: func(_, g []float64) float64 { clear(g); return 0 }}
	angle := func(x []float64) float64 { return math.Atan2(x[1], x[0]) }
	type hard struct {
		name    string
		surface Surface
		density func(x []float64) float64
		want    float64
	}
	cases := []hard{
		{"|cos| around a cylinder", cylinder, func(x []float64) float64 { return math.Abs(x[0]) }, 4},
		{"sawtooth around a cylinder", cylinder, func(x []float64) float64 { return math.Pi + math.Atan2(x[1], x[0]) }, 2 * math.Pi * math.Pi},
		{"height times |sin| around a cylinder", cylinder, func(x []float64) float64 { return x[2] * math.Abs(x[1]) }, 2},
		{"helix", cylinder, func(x []float64) float64 { return math.Exp(math.Cos(3*angle(x) + 5*x[2])) }, 2 * math.Pi * 1.2660658777520083356},
		{"oblique kink", square, func(x []float64) float64 { return math.Abs(x[0] - x[1]) }, 1.0 / 3},
		{"oblique root", square, func(x []float64) float64 { return math.Sqrt(x[0] + x[1]) }, 4.0 / 15 * (4*math.Sqrt2 - 2)},
		{"logarithm at a corner", square, func(x []float64) float64 { return -math.Log(x[0] * x[1]) }, 2},
		{"inverse root on a side", square, func(x []float64) float64 { return 1 / math.Sqrt(x[1]) }, 2},
		{"disc of a jump", square, func(x []float64) float64 {
			if x[0] < 0.3 {
				return 2
			}
			return 1
		}, 1.3},
		{"sharp ridge", square, func(x []float64) float64 { return 1e-3 / (1e-6 + math.Pow(x[0]-0.37, 2)) }, math.Atan(370) + math.Atan(630)},
	}
	for _, n := range []float64{1, 3, 4, 5, 8, 12, 16, 24, 32, 64} {
		cases = append(cases,
			hard{fmt.Sprintf("harmonic %v around a cylinder", n), cylinder, func(x []float64) float64 { return 2 + math.Cos(n*angle(x)+0.3) }, 4 * math.Pi},
			hard{fmt.Sprintf("small harmonic %v around a cylinder", n), cylinder, func(x []float64) float64 { return 2 + 1e-6*math.Cos(n*angle(x)) }, 4 * math.Pi},
			hard{fmt.Sprintf("harmonic %v growing with height", n), cylinder, func(x []float64) float64 { return 2 + x[2]*math.Cos(n*angle(x)) }, 4 * math.Pi})
	}
	for _, c := range cases {
		r, err := Integrate(context.Background(), c.surface, Traces{}, func(x, _, _, _ []float64) float64 { return c.density(x) }, Options{})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		t.Logf("%s: true %.1e reported %.1e, %d evaluations", c.name, math.Abs(r.Energy/c.want-1), r.Error/c.want, r.Evaluations)
		honest(t, c.name, r.Energy, r.Error, c.want)
	}
}

// TestKinksOnADisc integrates |n·x - c| over the unit disc, where the kink is a
// chord and crosses the rings.
func TestKinksOnADisc(t *testing.T) {
	disc := Graph{Over: Disc{Radius: 1}, F: func(_, g []float64) float64 { clear(g); return 0 }}
	for i := range 12 {
		s, k := math.Sincos(float64(i))
		c := math.Mod(float64(i)*golden, 1)
		// 2 ∫ |t - c| sqrt(1 - t²) dt over [-1, 1]
		want := 2 * (c*math.Asin(c) + math.Sqrt(1-c*c)*(2+c*c)/3)
		r, err := Integrate(context.Background(), disc, Traces{}, func(x, _, _, _ []float64) float64 { return math.Abs(k*x[0] + s*x[1] - c) }, Options{Rel: 1e-8})
		if err != nil {
			t.Errorf("c = %v: %v", c, err)
		}
		t.Logf("c = %v: true %.1e reported %.1e, %d evaluations", c, math.Abs(r.Energy/want-1), r.Error/want, r.Evaluations)
		if miss := math.Abs(r.Energy - want); miss > r.Error || miss > 1e-8*want {
			t.Errorf("c = %v: %v ± %v, want %v", c, r.Energy, r.Error, want)
		}
	}
}

// TestCurvedKinksAndJumps has densities that are rough along curves, some of
// which close between the nodes of the first rules.
func TestCurvedKinksAndJumps(t *testing.T) {
	flat := func(_, g []float64) float64 { clear(g); return 0 }
	disc := Graph{Over: Disc{Radius: 1}, F: flat}
	square := Graph{Over: Rectangle{Range{0, 1}, Range{0, 1}}, F: flat}
	triangle := Graph{Over: Triangle{{0, 0}, {1, 0}, {0, 1}}, F: flat}
	cap := func(x []float64, a, b, r float64) float64 {
		return 1 + math.Max(0, r*r-(x[0]-a)*(x[0]-a)-(x[1]-b)*(x[1]-b))
	}
	rng := rand.New(rand.NewPCG(5, 6))
	for i := range 20 {
		sin, cos := math.Sincos(float64(i))
		c := rng.Float64()
		var density func(x []float64) float64
		var surface Surface
		var want float64
		switch i % 5 {
		case 0: // a chord
			surface, want = disc, math.Pi+math.Acos(c)-c*math.Sqrt(1-c*c)
			density = func(x []float64) float64 {
				if cos*x[0]+sin*x[1] > c {
					return 2
				}
				return 1
			}
		case 1: // a quarter of a disc
			surface, want = square, 1+math.Pi*c*c/4
			density = func(x []float64) float64 {
				if x[0]*x[0]+x[1]*x[1] < c*c {
					return 2
				}
				return 1
			}
		case 2: // a cap
			surface, want = square, 1+math.Pi*math.Pow(c/2, 4)/2
			density = func(x []float64) float64 { return cap(x, 0.5, 0.5, c/2) }
		case 3: // a wedge
			surface, want = triangle, 0.5+c*c*c/6
			density = func(x []float64) float64 { return 1 + math.Max(0, c-x[0]-x[1]) }
		case 4: // a cap off the middle
			surface, want = disc, math.Pi+math.Pi*math.Pow(0.2, 4)/2
			density = func(x []float64) float64 { return cap(x, 0.7*c*cos, 0.7*c*sin, 0.2) }
		}
		r, err := Integrate(context.Background(), surface, Traces{}, func(x, _, _, _ []float64) float64 { return density(x) }, Options{Rel: 1e-7})
		if err != nil {
			t.Errorf("%d: %v", i, err)
		}
		if miss := math.Abs(r.Energy - want); miss > r.Error || miss > 1e-7*want {
			t.Errorf("%d: %v ± %v, want %v", i, r.Energy, r.Error, want)
		}
	}
}

// TestScales moves and scales a wall: the checks and the errors are relative.
func TestScales(t *testing.T) {
	for _, size := range []float64{1e-9, 1e-3, 1, 1e6, 1e12} {
		for _, shift := range []float64{0, 0.3, 100} {
			for _, p := range []float64{1e-5, 1, 1e4} {
				plus, minus := linear(0, p, 0, p*p/2), linear(2*p*shift*size, -p, 0, p*p/2)
				x, y := shift*size, shift*size
				v := [][]float64{{x, y, 0}, {x, y + size, 0}, {x, y + size, size}, {x, y, size}}
				r, err := Integrate(context.Background(), Polygon{v}, Traces{Plus: plus, Minus: minus, HasValue: true}, layeredDensity, Options{Well: layeredWell})
				if err != nil {
					t.Errorf("size %g, shift %g, gradient %g: %v", size, shift, p, err)
					continue
				}
				honest(t, "wall", r.Energy, r.Error, 8*p*p*p/12*size*size)
			}
		}
	}
}

func TestDeterministic(t *testing.T) {
	c := paraboloid(0.7, 0.5, 3).galilean(1, 2)
	var first Result
	for i := range 3 {
		r, err := Integrate(context.Background(), c.surface, Traces{Plus: c.plus, Minus: c.minus}, layeredDensity, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if i == 0 {
			first = r
		}
		if r != first {
			t.Errorf("%v, then %v", first, r)
		}
	}
}
