package adaptive

import (
	"context"
	"errors"
	"fmt"
	"math"
	"testing"
)

// The work and the relative error do not depend on the unit of length, also
// where the end panels are substituted.
func TestScaleInvariance(t *testing.T) {
	for name, f := range map[string]func(s float64) float64{
		"half-integer powers": func(s float64) float64 { return math.Pow((1-s)*(1+s), 1.5) },
		"root":                func(s float64) float64 { return math.Sqrt(1 + s) },
		"inverse root":        func(s float64) float64 { return 1 / math.Sqrt(1-s) },
		"logarithm":           func(s float64) float64 { return math.Log(2 + 2*s) },
		"kink beside an end":  func(s float64) float64 { return math.Sqrt(1+s) + math.Abs(s+0.997) },
	} {
		var evaluations int
		var relative float64
		for i, e := range []int{0, -40, 40, -200, 200} {
			scale := math.Ldexp(1, e)
			v, est, n, err := Integrate(context.Background(), func(s float64) float64 { return f(s / scale) }, -scale, scale, 1e-11, 0)
			what := fmt.Sprintf("%s, scale 2^%d", name, e)
			if err != nil {
				t.Errorf("%s: %v", what, err)
			}
			if i == 0 {
				evaluations, relative = n, est/v
			} else if n != evaluations || math.Abs(est/v-relative) > 1e-3*math.Abs(relative) {
				t.Errorf("%s: %d evaluations, relative error %.3g; at scale 1 %d, %.3g", what, n, est/v, evaluations, relative)
			}
		}
	}
}

// A singularity at an end that is not 0 comes with a kink inside, so that all
// panels are cut finely; nodes that are rounded to the end are no failure.
func TestSingularEndOffTheOrigin(t *testing.T) {
	for name, c := range map[string]struct {
		f    func(d float64) float64 // of the distance from the end
		want float64                 // of f over [0, 2]
	}{
		"logarithm":    {func(d float64) float64 { return math.Log(d) }, 2*math.Log(2) - 2},
		"small power":  {func(d float64) float64 { return math.Pow(d, -0.1) }, math.Pow(2, 0.9) / 0.9},
		"inverse root": {func(d float64) float64 { return 1 / math.Sqrt(d) }, 2 * math.Sqrt2},
	} {
		for _, end := range []float64{-1, 1} {
			for _, kink := range []float64{-0.772, 0.4, 0.833} {
				v, est, _, err := Integrate(context.Background(), func(s float64) float64 { return c.f(math.Abs(s-end)) + math.Abs(s-kink) }, -1, 1, 1e-11, 0)
				want := c.want + 1 + kink*kink
				if err != nil && !errors.Is(err, ErrTolerance) || math.Abs(v-want) > est || est > 1e-7 {
					t.Errorf("%s at %g, kink at %g: %v ± %.3g, want %v: %v", name, end, kink, v, est, want, err)
				}
			}
		}
	}
}
