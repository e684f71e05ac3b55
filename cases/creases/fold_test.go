package creases_test

import (
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/cases/creases"
)

// Differences of close constants in traces, maps, heights and densities cost no
// accuracy. The ridge of an ellipse whose semi-axes a > b are almost equal, of
// length 2 (a^2 - b^2)/a, has the energy (pi/4) (1 - b^2/a^2) in the limit; the
// value here is by 40 digits.
func TestConstantsAreExact(t *testing.T) {
	for _, test := range []struct {
		head, surface string
		want          float64
	}{
		{eikonalHead, `values = { a = "1.0001", c2 = "a^2 - 1" }
plus_gradient  = ["-t/(c2 sqrt(1 - t^2/c2))", "sqrt(1 - a^2 t^2/c2^2)/sqrt(1 - t^2/c2)"]
minus_gradient = ["-t/(c2 sqrt(1 - t^2/c2))", "-sqrt(1 - a^2 t^2/c2^2)/sqrt(1 - t^2/c2)"]
patch = { map = ["t", "0"], over = { t = ["-c2/a", "c2/a"] } }
`, 0.00015707963263040719},
		{eikonalHead, `values = { a = "1.0001" }
plus_gradient  = ["-t/((a^2 - 1) sqrt(1 - t^2/(a^2 - 1)))", "sqrt(1 - a^2 t^2/(a^2 - 1)^2)/sqrt(1 - t^2/(a^2 - 1))"]
minus_gradient = ["-t/((a^2 - 1) sqrt(1 - t^2/(a^2 - 1)))", "-sqrt(1 - a^2 t^2/(a^2 - 1)^2)/sqrt(1 - t^2/(a^2 - 1))"]
patch = { map = ["t", "0"], over = { t = ["-(a^2 - 1)/a", "(a^2 - 1)/a"] } }
`, 0.00015707963263040719},
		{eikonalHead, `density = "(3 - x^2) (sqrt(10^20 + 1) - 10^10)"
polygon = [["-1", "0"], ["1", "0"]]
`, 5e-11 * 16 / 3},
		{eikonalHead, `density = "1"
patch = { map = ["(1/3 + 10^9 - 10^9) t", "0"], over = { t = ["0", "1"] } }
`, 1.0 / 3},
		{layeredHead, `density = "z"
values = { k = "1 - cos(1/10^8)" }
graph = { of = "k", over = { x = ["0", "1"], y = ["0", "1"] } }
`, 5e-17},
		{layeredHead, `density = "z nu_z"
graph = { of = "x y (pi - 355/113)", over = { x = ["0", "1"], y = ["0", "1"] } }
`, -2.6676418906242231e-7 / 4},
	} {
		c, err := cases.Parse("case.toml", []byte(test.head+test.surface))
		require.NoError(t, err)
		results, err := creases.New(c.Setting, "case.toml").Evaluate(t.Context(), &c.File.Surfaces[0], creases.Options{})
		require.NoError(t, err, test.surface)
		require.Len(t, results, 1)
		r := results[0]
		if assert.NotNil(t, r.Energy, "%s: %s", test.surface, r.Reason) {
			assert.LessOrEqual(t, math.Abs(*r.Energy-test.want), *r.Error+4e-15*math.Abs(test.want), test.surface)
			assert.LessOrEqual(t, *r.Error, 1e-10*math.Abs(test.want), test.surface)
		}
	}
}
