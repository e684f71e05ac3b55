package levelset

import (
	"context"
	"fmt"
	"math"
	"testing"
)

// BenchmarkConvergence is the table of errors, as decimal digits, against nodes over
// the tolerances.
func BenchmarkConvergence(b *testing.B) {
	for _, e := range examples() {
		for _, rel := range []float64{1e-3, 1e-6, 1e-8, 1e-9, 1e-11} {
			b.Run(fmt.Sprintf("%s/%.0e", e.name, rel), func(b *testing.B) {
				var r Result
				var err error
				for b.Loop() {
					r, err = Integrate(context.Background(), e.phi, e.trims, e.box, e.f, Options{Parts: 1, Rel: rel})
					if err != nil {
						b.Fatal(err)
					}
				}
				digits := func(x float64) float64 { return -math.Log10(max(x, 1e-16)) }
				b.ReportMetric(digits(math.Abs(r.Value[0]/e.exact-1)), "digits")
				b.ReportMetric(digits(r.Error[0]/e.exact), "digits-estimated")
				b.ReportMetric(float64(r.Nodes), "nodes")
			})
		}
	}
}
