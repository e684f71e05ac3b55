package adaptive

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"testing"
)

var closedForms = []struct {
	name   string
	f      func(float64) float64
	lo, hi float64
	want   float64
	within float64 // relative
	most   int     // evaluations
}{
	{"constant", func(x float64) float64 { return 3 }, -1, 4, 15, 1e-14, 17},
	{"reciprocal", func(x float64) float64 { return 1 / x }, 0.5, 3, math.Log(6), 1e-12, 48},
	{"Runge", func(x float64) float64 { return 1 / (1 + 25*x*x) }, -1, 1, 2.0 / 5 * math.Atan(5), 1e-11, 400},
	{"exponential", math.Exp, 0, 1, math.E - 1, 1e-14, 17},
	{"root", math.Sqrt, 0, 2, 2.0 / 3 * 2 * math.Sqrt2, 1e-11, 250},
	{"root at the right", func(x float64) float64 { return math.Sqrt(1 - x) }, 0, 1, 2.0 / 3, 1e-11, 250},
	{"inverse root", func(x float64) float64 { return 1 / math.Sqrt(x) }, 0, 1, 2, 1e-11, 250},
	{"inverse root at the right", func(x float64) float64 { return 1 / math.Sqrt(1-x) }, 0, 1, 2, 1e-11, 250},
	{"half circle", func(x float64) float64 { return math.Sqrt(1 - x*x) }, -1, 1, math.Pi / 2, 1e-11, 500},
	{"arc length of the half circle", func(x float64) float64 { return 1 / math.Sqrt(1-x*x) }, -1, 1, math.Pi, 1e-11, 500},
	{"logarithm", math.Log, 0, 1, -1, 1e-11, 900},
	{"power -0.7", func(x float64) float64 { return math.Pow(x, -0.7) }, 0, 1, 1 / 0.3, 1e-10, 1200},
	{"power 1/3", math.Cbrt, 0, 1, 0.75, 1e-11, 900},
	{"kink", func(x float64) float64 { return math.Abs(x - 0.3) }, 0, 1, 0.3*0.3/2 + 0.7*0.7/2, 1e-11, 1200},
	{"jump", func(x float64) float64 {
		if x < 1/math.Pi {
			return 1
		}
		return 2
	}, 0, 1, 2 - 1/math.Pi, 1e-11, 1500},
	{"oscillation", func(x float64) float64 { return 1 + math.Sin(1000*x) }, 0, 1, 1 + (1-math.Cos(1000))/1000, 1e-11, 8000},
	{"narrow bump", func(x float64) float64 { return 1e-3 / (1e-6 + (x-0.3)*(x-0.3)) }, 0, 1, math.Atan(700) + math.Atan(300), 1e-11, 1500},
	{"interior root", func(x float64) float64 { return math.Sqrt(math.Abs(x - 0.3)) }, 0, 1, 2.0 / 3 * (math.Pow(0.3, 1.5) + math.Pow(0.7, 1.5)), 1e-11, 1500},
	{"odd", func(x float64) float64 { return x * x * x }, -1, 1, 0, 0, 17},
}

func TestClosedForms(t *testing.T) {
	for _, c := range closedForms {
		t.Run(c.name, func(t *testing.T) {
			v, e, n, err := Integrate(context.Background(), c.f, c.lo, c.hi, 1e-11, 0)
			if err != nil {
				t.Error(err)
			}
			miss := math.Abs(v - c.want)
			t.Logf("true %.1e, reported %.1e, %d evaluations", miss, e, n)
			if miss > e+4e-15*math.Abs(c.want) {
				t.Errorf("the reported error %g is less than the true one, %g", e, miss)
			}
			if miss > c.within*math.Abs(c.want)+1e-16 {
				t.Errorf("got %v, want %v", v, c.want)
			}
			if n > c.most {
				t.Errorf("%d evaluations, expected at most %d", n, c.most)
			}
		})
	}
}

// TestHiddenPlaces puts kinks and jumps everywhere, next to the points of
// subdivision and to the ends too, where they fall between nodes.
func TestHiddenPlaces(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	lies, missed := 0, 0
	const n = 3000
	for i := range n {
		c := rng.Float64()
		switch i % 4 {
		case 1:
			c = float64(1+rng.IntN(15))/16 + (rng.Float64()-0.5)*math.Pow(2, -float64(4+rng.IntN(20)))
		case 2:
			c = 0.02 * rng.Float64()
		case 3:
			c = 1 - 0.02*rng.Float64()
		}
		a, b := rng.Float64()*2-1, rng.Float64()
		f := func(x float64) float64 { return math.Exp(a*x) + b*math.Abs(x-c) }
		want := math.Expm1(a)/a + b*(c*c+(1-c)*(1-c))/2
		if i%8 >= 4 {
			f = func(x float64) float64 {
				if x < c {
					return math.Cos(3*x) + 2 + b
				}
				return math.Cos(3*x) + 2
			}
			want = math.Sin(3)/3 + 2 + b*c
		}
		v, e, _, err := Integrate(context.Background(), f, 0, 1, 1e-11, 0)
		if err != nil {
			t.Errorf("c = %v: %v", c, err)
		}
		if math.Abs(v-want) > e+4e-15*want {
			lies++
			if lies < 20 {
				t.Logf("c = %.17g, b = %.17g, case %d: true %.2g, reported %.2g", c, b, i%8, math.Abs(v-want), e)
			}
		}
		if math.Abs(v-want) > 1e-10*want {
			missed++
		}
	}
	// An estimate from finitely many nodes cannot be right always.
	if lies > n/500 || missed > 0 {
		t.Errorf("%d of %d reported errors too small, %d values beyond 1e-10", lies, n, missed)
	}
}

func TestPeriodic(t *testing.T) {
	// (1/2pi) ∫ exp(cos x) = I_0(1), DLMF 10.32.1.
	const i0 = 1.2660658777520083356
	for _, c := range []struct {
		name string
		f    func(float64) float64
		want float64
		most int
	}{
		{"exp(cos)", func(x float64) float64 { return math.Exp(math.Cos(x)) }, 2 * math.Pi * i0, 40},
		{"exp(cos 3x)", func(x float64) float64 { return math.Exp(math.Cos(3 * x)) }, 2 * math.Pi * i0, 140},
		{"constant", func(x float64) float64 { return 2 }, 4 * math.Pi, 12},
		{"Poisson kernel", func(x float64) float64 { return 1 / (1.25 - math.Cos(x)) }, 2 * math.Pi / 0.75, 140},
		{"aliased", func(x float64) float64 { return 2 + math.Cos(16*x) }, 4 * math.Pi, 150},
		{"kinks", func(x float64) float64 { return math.Abs(math.Sin(x - 1)) }, 4, 2000},
		{"jump", func(x float64) float64 { return x }, 2 * math.Pi * math.Pi, 400},
	} {
		w := &Work{Max: 100000}
		task := Task{Lo: 0, Hi: 2 * math.Pi, Rel: 1e-11, Periodic: true, Probe: true, Phase: 0.3, Work: w, F: func(s float64, out *Sample) error {
			w.Used++
			out.Value[0], out.Size[0] = c.f(s), math.Abs(c.f(s))
			out.Noise[0] = 4 * epsilon * out.Size[0]
			return nil
		}}
		r, err := task.Run()
		if err != nil {
			t.Fatal(err)
		}
		miss := math.Abs(r.Value[0] - c.want)
		t.Logf("%s: true %.1e, reported %.1e, %d evaluations", c.name, miss, r.Error[0], w.Used)
		if miss > r.Error[0]+4e-15*c.want || r.Error[0] > 1e-10*c.want || !r.Converged || w.Used > c.most {
			t.Errorf("%s: %v, want %v, error %v, %d evaluations", c.name, r.Value[0], c.want, r.Error[0], w.Used)
		}
	}
}

func TestStops(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, _, _, err := Integrate(ctx, math.Exp, 0, 1, 1e-11, 0); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
	if _, _, _, err := Integrate(context.Background(), math.Log, -1, 1, 1e-11, 0); !errors.Is(err, ErrNotFinite) {
		t.Errorf("logarithm of negative numbers: %v", err)
	}
	v, e, n, err := Integrate(context.Background(), func(x float64) float64 { return math.Abs(math.Sin(1000 * x)) }, 0, 1, 1e-11, 500)
	if !errors.Is(err, ErrTolerance) || n < 500 || n > 1000 || math.Abs(v-(2*318+1-math.Cos(1000-318*math.Pi))/1000) > e {
		t.Errorf("budget: %v ± %v, %d evaluations, %v", v, e, n, err)
	}
	if _, _, _, err := Integrate(context.Background(), func(x float64) float64 { return 1 / x }, 0, 1, 1e-11, 0); !errors.Is(err, ErrTolerance) {
		t.Errorf("not integrable: %v", err)
	}
}

// TestNoise integrates values that are wrong by much more than they say.
func TestNoise(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	v, e, n, err := Integrate(context.Background(), func(x float64) float64 { return math.Exp(x) * (1 + 1e-9*(rng.Float64()-0.5)) }, 0, 1, 1e-11, 0)
	if !errors.Is(err, ErrTolerance) || n > 4000 || math.Abs(v-math.E+1) > e || e > 1e-7 {
		t.Errorf("%v ± %v, %d evaluations, %v", v, e, n, err)
	}
}
