package adaptive

import (
	"context"
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
