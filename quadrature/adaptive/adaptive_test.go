package adaptive

import (
	"context"
	"math"
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
	{"constant", func(x float64) float64 { return 3 }, -1, 4, 15, 1e-14, 15},
	{"reciprocal", func(x float64) float64 { return 1 / x }, 0.5, 3, math.Log(6), 1e-12, 46},
	{"Runge", func(x float64) float64 { return 1 / (1 + 25*x*x) }, -1, 1, 2.0 / 5 * math.Atan(5), 1e-11, 400},
	{"exponential", math.Exp, 0, 1, math.E - 1, 1e-14, 15},
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
	{"oscillation", func(x float64) float64 { return 1 + math.Sin(1000*x) }, 0, 1, 1 + (1-math.Cos(1000))/1000, 1e-11, 7000},
	{"narrow bump", func(x float64) float64 { return 1e-3 / (1e-6 + (x-0.3)*(x-0.3)) }, 0, 1, math.Atan(700) + math.Atan(300), 1e-11, 1500},
	{"interior root", func(x float64) float64 { return math.Sqrt(math.Abs(x - 0.3)) }, 0, 1, 2.0 / 3 * (math.Pow(0.3, 1.5) + math.Pow(0.7, 1.5)), 1e-11, 1500},
	{"odd", func(x float64) float64 { return x * x * x }, -1, 1, 0, 0, 15},
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
