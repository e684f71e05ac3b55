package quadrature

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"
)

// wallTriangle lies in the plane x = 0 with the normal +x.
var wallTriangle = Polygon{[][]float64{{0, 0, 0}, {0, 1, 0}, {0, 0, 1}}}

func TestRefusals(t *testing.T) {
	good := [2]func(x, g []float64) float64{linear(0, 1, 0, 0.5), linear(0, -1, 0, 0.5)}
	nanGradient := func(x, g []float64) float64 {
		u := good[0](x, g)
		if x[2] > 0.5 {
			g[1] = math.NaN()
		}
		return u
	}
	for _, c := range []struct {
		name        string
		surface     Surface
		plus, minus func(x, g []float64) float64
		reason      Reason
		says        string
	}{
		{"plus off the well", wallTriangle, linear(0, 1, 0, 1.0/3), good[1], OffWell, "the plus trace is off the well at (0, "},
		{"minus off the well", wallTriangle, good[0], linear(0, -1, 0, 0.500001), OffWell, "minus trace"},
		{"slightly off the well", wallTriangle, linear(0, 1, 0, 0.5+1e-8), good[1], OffWell, "plus trace"},
		{"off the well at a large scale", wallTriangle, linear(0, 1e6, 0, 0.5e12*(1+1e-8)), linear(0, -1e6, 0, 0.5e12), OffWell, "plus trace"},
		{"off the well at a small scale", wallTriangle, linear(0, 1e-6, 0, 0.5e-12*(1+1e-8)), linear(0, -1e-6, 0, 0.5e-12), OffWell, "plus trace"},
		{"discontinuous", wallTriangle, good[0], linear(1, -1, 0, 0.5), Discontinuous, "u is discontinuous"},
		{"discontinuous, small", wallTriangle, linear(0, 1e-6, 0, 0.5e-12), linear(1e-12, -1e-6, 0, 0.5e-12), Discontinuous, ""},
		{"not normal", Polygon{[][]float64{{0, 0, 0}, {1, 1, 0}, {0, 0, 1}}}, func(x, g []float64) float64 { copy(g, []float64{1, 0, 0.5}); return x[2] / 2 },
			func(x, g []float64) float64 { copy(g, []float64{-1, 0, 0.5}); return x[2] / 2 }, NotNormal, "not normal"},
		{"NaN", wallTriangle, nanGradient, good[1], NotFinite, "gradient of the plus trace is not a real number"},
		{"NaN value", wallTriangle, func(x, g []float64) float64 { good[0](x, g); return math.NaN() }, good[1], NotFinite, "the plus trace is not a real number"},
		{"all on a line", Patch{Dim: 3, Params: []Range{{0, 1}, {0, 1}}, Map: func(s, x []float64, jac [][]float64) {
			for k := range 3 {
				x[k], jac[0][k], jac[1][k] = s[0]+2*s[1], 1, 2
			}
		}}, good[0], good[1], Degenerate, "degenerate"},
		{"one point", Patch{Dim: 2, Params: []Range{{0, 1}}, Map: func(s, x []float64, jac [][]float64) { clear(x); clear(jac[0]) }},
			linear(0, 1, 0.5), linear(0, -1, 0.5), Degenerate, "degenerate"},
		{"degenerate on a part", Patch{Dim: 3, Params: []Range{{-1, 1}, {0, 1}}, Map: func(s, x []float64, jac [][]float64) {
			w := math.Max(0, s[0]*s[0]*s[0])
			x[0], x[1], x[2] = 0, s[1], w
			clear(jac[0])
			clear(jac[1])
			jac[0][2], jac[1][1] = math.Max(0, 3*s[0]*math.Abs(s[0])), 1
		}}, good[0], good[1], Degenerate, "degenerate"},
		{"map is NaN", Patch{Dim: 3, Params: []Range{{-1, 1}, {0, 1}}, Map: func(s, x []float64, jac [][]float64) {
			x[0], x[1], x[2] = 0, s[1], math.Sqrt(s[0])
			clear(jac[0])
			clear(jac[1])
			jac[0][2], jac[1][1] = 0.5/x[2], 1
		}}, good[0], good[1], NotFinite, "surface is not finite"},
	} {
		r, err := Integrate(context.Background(), c.surface, Traces{Plus: c.plus, Minus: c.minus, HasValue: true}, layeredDensity, Options{Well: layeredWell})
		var p *PlaceError
		if !errors.As(err, &p) {
			t.Errorf("%s: %v, %v", c.name, r, err)
			continue
		}
		if p.Reason != c.reason || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: %v", c.name, err)
		}
		if len(p.Point) != c.surface.Dimension() || r.Energy != 0 {
			t.Errorf("%s: point %v, energy %v", c.name, p.Point, r.Energy)
		}
	}
	_, err := Integrate(context.Background(), wallTriangle, Traces{}, func(x, _, _, _ []float64) float64 { return 1 / (x[0] * x[1]) }, Options{})
	var p *PlaceError
	if !errors.As(err, &p) || p.Reason != NotFinite || p.What != "density" {
		t.Errorf("infinite density: %v", err)
	}
}

func TestMalformedSurfaces(t *testing.T) {
	flat := func(s, x []float64, jac [][]float64) {}
	for name, s := range map[string]Surface{
		"no vertices":          Polygon{},
		"two vertices":         Polygon{[][]float64{{0, 0, 0}, {1, 0, 0}}},
		"on a line":            Polygon{[][]float64{{0, 0, 0}, {1, 1, 1}, {2, 2, 2}}},
		"on a line, nearly":    Polygon{[][]float64{{0, 0, 0}, {0.1, 0.3, 0.7}, {0.2, 0.6, 1.4}, {0.3, 0.9, 2.1}}},
		"not flat":             Polygon{[][]float64{{0, 0, 0}, {1, 0, 0}, {1, 1, 1e-3}, {0, 1, 0}}},
		"bow tie":              Polygon{[][]float64{{0, 0, 0}, {2, 0, 0}, {0, 1, 0}, {2, 3, 0}}},
		"touches itself":       Polygon{[][]float64{{0, 0, 0}, {2, 0, 0}, {2, 2, 0}, {1, 0, 0}, {0, 2, 0}}},
		"spike":                Polygon{[][]float64{{0, 0, 0}, {3, 0, 0}, {2, 0, 0}, {2, 2, 0}}},
		"repeated vertex":      Polygon{[][]float64{{0, 0, 0}, {1, 0, 0}, {1, 0, 0}, {0, 1, 0}}},
		"closed in space":      Polygon{[][]float64{{0, 0, 0}, {1, 0, 0}, {0, 1, 0}, {0, 0, 0}}},
		"NaN vertex":           Polygon{[][]float64{{0, 0, 0}, {1, 0, math.NaN()}, {0, 1, 0}}},
		"mixed dimensions":     Polygon{[][]float64{{0, 0, 0}, {1, 0}, {0, 1, 0}}},
		"four dimensions":      Polygon{[][]float64{{0, 0, 0, 0}, {1, 0, 0, 0}, {0, 1, 0, 0}}},
		"crossing chain":       Polygon{[][]float64{{0, 0}, {2, 2}, {2, 0}, {0, 2}}},
		"chain of one":         Polygon{[][]float64{{0, 0}}},
		"patch of one in 3":    Patch{Dim: 3, Params: []Range{{0, 1}}, Map: flat},
		"patch, no map":        Patch{Dim: 2, Params: []Range{{0, 1}}},
		"patch, empty range":   Patch{Dim: 2, Params: []Range{{1, 1}}, Map: flat},
		"patch, infinite":      Patch{Dim: 2, Params: []Range{{0, math.Inf(1)}}, Map: flat},
		"disc of no radius":    Graph{Over: Disc{}, F: bowl},
		"triangle without":     Graph{Over: Triangle{{0, 0}, {1, 1}, {2, 2}}, F: bowl},
		"graph over nothing":   Graph{F: bowl},
		"reversed rectangle":   Graph{Over: Rectangle{Range{1, 0}, Range{0, 1}}, F: bowl},
		"graph, no function":   Graph{Over: Disc{Radius: 1}},
		"five dimensional map": Patch{Dim: 5, Params: []Range{{0, 1}}, Map: flat},
	} {
		_, err := Integrate(context.Background(), s, Traces{}, func(_, _, _, _ []float64) float64 { return 1 }, Options{})
		if !errors.Is(err, ErrShape) {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func TestIsolatedZerosOfTheAreaElement(t *testing.T) {
	// A cone's tip at the middle node of the first rule.
	c := revolution(-1, 1, func(t float64) float64 { return t }, func(float64) float64 { return 1 })
	r, err := Integrate(context.Background(), c, Traces{}, func(_, _, _, _ []float64) float64 { return 1 }, Options{})
	if err != nil {
		t.Fatal(err)
	}
	honest(t, "cone", r.Area, r.AreaError, 2*math.Pi*math.Sqrt2)
}

func TestBudget(t *testing.T) {
	rough := func(x, _, _, _ []float64) float64 { return 1 + math.Abs(math.Sin(300*x[1])*math.Sin(200*x[2])) }
	square := Polygon{[][]float64{{0, 0, 0}, {0, 1, 0}, {0, 1, 1}, {0, 0, 1}}}
	r, err := Integrate(context.Background(), square, Traces{}, rough, Options{MaxEvaluations: 20000})
	if !errors.Is(err, ErrBudget) {
		t.Fatal(err)
	}
	want := 1 + abssin(300)*abssin(200)
	if math.Abs(r.Energy-want) > r.Error || r.Energy == 0 || r.Area == 0 {
		t.Errorf("%+v, want %v", r, want)
	}
	if r.Evaluations < 20000 || r.Evaluations > 40000 {
		t.Errorf("%d evaluations", r.Evaluations)
	}
}

// abssin is the integral of |sin(k x)| over [0, 1].
func abssin(k float64) float64 {
	n := math.Floor(k / math.Pi)
	return (2*n + 1 - math.Cos(k-n*math.Pi)) / k
}

func TestNotIntegrable(t *testing.T) {
	curve := Polygon{[][]float64{{0, 0}, {1, 0}}}
	r, err := Integrate(context.Background(), curve, Traces{}, func(x, _, _, _ []float64) float64 { return 1 / x[0] }, Options{})
	if !errors.Is(err, ErrAccuracy) && !errors.Is(err, ErrBudget) {
		t.Errorf("%+v, %v", r, err)
	}
}

func TestCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	c := paraboloid(1, 1, 2)
	if _, err := Integrate(ctx, c.surface, Traces{Plus: c.plus, Minus: c.minus}, layeredDensity, Options{}); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v", err)
	}
	if _, err := Slice(ctx, c.surface, Traces{Plus: c.plus, Minus: c.minus}, layeredLine, Options{}); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v", err)
	}
}

func TestBadOptions(t *testing.T) {
	for _, o := range []Options{{Rel: -1}, {Abs: math.NaN()}, {MaxEvaluations: -1}} {
		if _, err := Integrate(context.Background(), wallTriangle, Traces{}, func(_, _, _, _ []float64) float64 { return 1 }, o); err == nil {
			t.Errorf("%+v is accepted", o)
		}
	}
	if _, err := Integrate(context.Background(), wallTriangle, Traces{Plus: constant(0)}, layeredDensity, Options{}); err == nil {
		t.Error("one trace is accepted")
	}
}
