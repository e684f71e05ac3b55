package creases_test

import (
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/cases/library"
	"creaseproof/identity"
)

// evaluate integrates every surface of a case.
func evaluate(t testing.TB, name, text string) []creases.Result {
	t.Helper()
	c, err := cases.Parse(name, []byte(text))
	require.NoError(t, err)
	ev := creases.New(c.Setting, name)
	var all []creases.Result
	for i := range c.File.Surfaces {
		rs, err := ev.Evaluate(t.Context(), &c.File.Surfaces[i], creases.Options{})
		require.NoError(t, err)
		all = append(all, rs...)
	}
	return all
}

func TestLibrary(t *testing.T) {
	worst, count, sliced := 0.0, 0, 0
	for _, name := range library.Names() {
		data, ok := library.Source(name)
		require.True(t, ok)
		for _, r := range evaluate(t, name, string(data)) {
			what := []any{"%s: %s %v: %s", name, r.Surface, r.Values, r.Reason}
			if !assert.NotNil(t, r.Energy, what...) || !assert.NotNil(t, r.Claimed, what...) {
				continue
			}
			count++
			off := math.Abs(*r.Energy - *r.Claimed)
			worst = max(worst, off/math.Abs(*r.Claimed))
			assert.True(t, r.Met, what...)
			if r.Verdict == identity.Refuted {
				assert.Greater(t, off, *r.Error, what...)
				continue
			}
			assert.LessOrEqual(t, off, 1e-10*math.Abs(*r.Claimed), what...)
			assert.LessOrEqual(t, off, *r.Error+4e-15*math.Abs(*r.Claimed), what...)
			want := identity.Supported
			if r.AreaRoots != nil { // in exact arithmetic
				want = identity.Proved
			}
			assert.Equal(t, want, r.Verdict, what...)
			if r.Slices != nil {
				sliced++
			}
		}
	}
	t.Logf("%d surfaces, %d of them by slices too, worst relative error %.2g", count, sliced, worst)
	assert.Greater(t, count, 100)
	assert.Greater(t, sliced, 60)
}
