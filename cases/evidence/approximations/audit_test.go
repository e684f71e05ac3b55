package approximations_test

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"maps"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"creaseproof/cases"
	"creaseproof/cases/evidence/approximations"
	"creaseproof/cases/evidence/tamper"
	"creaseproof/cases/limits"
	"creaseproof/cases/run"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

const planar = `[space]
coordinates = ["x", "y"]
unknowns = ["u"]
constants = ["eps", "k"]
[model]
residual = "(1 - u_x^2 - u_y^2)/2"
bending = "u_xx + u_yy"
energy = "(1 - u_x^2 - u_y^2)^2/(8 eps) + eps (u_xx + u_yy)^2/2"
`

// roof is a front between two half planes, and cone is the distance from a point
// inside the domain.
const (
	roof = `[[limit]]
name = "roof"
values = { k = ["1", "2"] }
approximation = "front"
branches = ["x", "-x"]
combine = "min"
box = { x = ["-1", "1"], y = ["0", "k"] }
eps = ["1/2", "1/4", "1/8"]
within = 1e-2
`
	cone = `[[limit]]
name = "cone"
approximation = "front"
branches = ["sqrt(x^2 + y^2)", "x + 1/4"]
combine = "min"
box = { x = ["-1", "1"], y = ["-1", "1"] }
eps = ["1/10"]
energy = "1/24"
expect = "infinite"
`
)

func small(t testing.TB) *cases.Case {
	t.Helper()
	c, err := cases.Parse("small", []byte(planar+roof+strings.Replace(roof, "roof", "claimed", 1)+"energy = \"k/2\"\n"+cone))
	require.NoError(t, err)
	return c
}

func written(t testing.TB, list ...*cases.Case) map[string][]byte {
	t.Helper()
	dir := t.TempDir()
	e := run.NewEvidence(dir)
	run.Limit(context.Background(), list, run.LimitOptions{Report: e.Limit})
	n, err := e.Written()
	require.NoError(t, err)
	files, err := filepath.Glob(filepath.Join(dir, "*.limit.json"))
	require.NoError(t, err)
	require.Equal(t, n, len(files))
	out := map[string][]byte{}
	for _, f := range files {
		data, err := os.ReadFile(f)
		require.NoError(t, err)
		out[filepath.Base(f)] = data
	}
	return out
}

func decoded(t testing.TB, data []byte) *approximations.File {
	t.Helper()
	f, err := approximations.Decode(data)
	require.NoError(t, err)
	return f
}

func audit(t testing.TB, f *approximations.File) error {
	t.Helper()
	data, err := f.Encode()
	require.NoError(t, err)
	_, err = approximations.Audit(context.Background(), data)
	return err
}

func forged(t testing.TB, text []byte) (*approximations.File, error) {
	t.Helper()
	f := &approximations.File{}
	if err := json.Unmarshal(text, f); err != nil {
		return f, fmt.Errorf("not read: %w", err)
	}
	return f, audit(t, f)
}

func TestIndependence(t *testing.T) {
	out, err := exec.Command("go", "list", "-deps", "creaseproof/cases/evidence/approximations").Output()
	require.NoError(t, err)
	for _, d := range strings.Fields(string(out)) {
		assert.NotContains(t, []string{"creaseproof/identity", "creaseproof/identity/gram", "creaseproof/identity/squares", "creaseproof/identity/sample",
			"creaseproof/identity/adversary", "creaseproof/identity/semidefinite", "creaseproof/identity/statement"}, d)
		assert.NotContains(t, d, "gonum/optimize")
	}
}

func TestWritten(t *testing.T) {
	list, failed := cases.Load([]string{"limit-eikonal"}, nil)
	require.Empty(t, failed)
	files := written(t, append(list, small(t))...)
	require.Greater(t, len(files), 5)
	outcomes := map[string]int{}
	for name, data := range files {
		f, err := approximations.Audit(context.Background(), data)
		if assert.NoError(t, err, name) {
			outcomes[f.Outcome]++
			assert.Equal(t, approximations.Numerical, f.Kind)
			assert.False(t, f.Unfinished)
		}
		_, err = approximations.Audit(context.Background(), bytes.Replace(data, []byte(`"source": "`), []byte(`"source": "#`), 1))
		assert.ErrorContains(t, err, "digest", name)
	}
	for _, o := range []string{limits.Sharp, limits.Above, limits.Infinite} {
		assert.Positive(t, outcomes[o], o)
	}
}

// TestEveryValueCounts changes every value of files, one at a time, with a digest
// that fits. Accepted all the same are the name of the case, a sign of space at the
// end of it, and numbers within the errors that are stated.
func TestEveryValueCounts(t *testing.T) {
	files := written(t, small(t))
	require.Equal(t, 5, len(files))
	tried, kept := 0, 0
	for _, name := range slices.Sorted(maps.Keys(files)) {
		if testing.Short() && !strings.Contains(name, "k_1.") {
			continue
		}
		f := decoded(t, files[name])
		changes, err := tamper.Changes(files[name])
		require.NoError(t, err)
		for _, c := range changes {
			if c.Path == "digest" || c.Path == "case" {
				continue
			}
			tried++
			g, err := forged(t, c.Text)
			if err != nil {
				continue
			}
			list, place, _ := strings.Cut(c.Path, ".")
			i := 0
			_, _ = fmt.Sscan(place, &i)
			kept++
			switch list {
			case "source":
				assert.Equal(t, f.Source+" ", g.Source)
			case "energy", "compression", "bending", "curvature":
				assert.InDelta(t, c.Old, c.New, 2*f.Error[i], "%s: %s", name, c.Path)
			case "error":
				assert.InEpsilon(t, f.Error[i], g.Error[i], 3, "%s: %s", name, c.Path)
			case "target_error":
				assert.InEpsilon(t, *f.TargetError, *g.TargetError, 3, "%s: %s", name, c.Path)
			case "target":
				assert.InDelta(t, *f.Target, *g.Target, 2**f.TargetError+1e-14, "%s: %s", name, c.Path)
			case "gap", "relative_gap", "rate", "rate_error", "limit", "limit_error", "equipartition":
				assert.InEpsilon(t, c.Old, c.New, 2e-9, "%s: %s", name, c.Path)
			default:
				t.Errorf("%s: %s may be %v in place of %v", name, c.Path, c.New, c.Old)
			}
		}
	}
	t.Logf("%d changes, %d within the errors", tried, kept)
	assert.Greater(t, tried, 150)
	assert.Less(t, kept, tried/8)
}

// What was done when a run was interrupted is evidence of that much.
func TestUnfinished(t *testing.T) {
	c := small(t)
	l := &c.File.Limits[1]
	whole, err := limits.At(t.Context(), c, l, map[string]string{"k": "2"}, 0)
	require.NoError(t, err)
	require.True(t, whole.Complete)
	for n := 1; n <= 2; n++ {
		v, err := limits.At(t.Context(), c, l, map[string]string{"k": "2"}, n)
		require.NoError(t, err)
		require.Len(t, v.Eps, n)
		v.Reason = "not computed within the 3s allowed"
		f, err := approximations.New(c, v)
		require.NoError(t, err)
		assert.True(t, f.Unfinished)
		assert.Empty(t, f.Outcome+f.Reason)
		require.NoError(t, audit(t, f))

		g := *f
		g.Unfinished = false
		assert.Error(t, audit(t, &g), "passed off as finished")
		g = *f
		g.Outcome = limits.Sharp
		assert.ErrorContains(t, audit(t, &g), "unfinished")
		g = *f
		g.Gap = whole.Gap
		assert.ErrorContains(t, audit(t, &g), "unfinished")
		g = *f
		g.Energy = slices.Clone(f.Energy)
		g.Energy[0] *= 1.001
		assert.ErrorContains(t, audit(t, &g), "they differ")
		g.Energy = g.Energy[:0]
		assert.ErrorContains(t, audit(t, &g), "length")
	}
	// All of it passed off as a part, or a part as all.
	f, err := approximations.New(c, whole)
	require.NoError(t, err)
	require.NoError(t, audit(t, f))
	f.Unfinished = true
	assert.ErrorContains(t, audit(t, f), "unfinished")
	_, err = approximations.New(c, &limits.Value{Approximation: "roof"})
	assert.ErrorIs(t, err, approximations.ErrNone)
}

func TestOtherLimitValuesSource(t *testing.T) {
	c := small(t)
	for name, data := range written(t, c) {
		f := decoded(t, data)
		for _, l := range c.File.Limits {
			g := *f
			g.Approximation = l.Name
			assert.Equal(t, l.Name == f.Approximation, audit(t, &g) == nil, "%s as %s", name, l.Name)
		}
		for _, values := range []map[string]string{nil, {"k": "1"}, {"k": "2"}, {"k": "4/2"}, {"K": "1"}} {
			g := *f
			g.Values = values
			assert.Equal(t, maps.Equal(values, f.Values), audit(t, &g) == nil, "%s for %s", name, values)
		}
		for _, old := range []string{`coordinates = ["x", "y"]`, `bending = "u_xx`, `residual = "(1`, `[model]`} {
			g := *f
			g.Source = strings.Replace(f.Source, old, old+" ", 1)
			assert.NoError(t, audit(t, &g))
			g.Source = strings.Replace(f.Source, old, strings.TrimSuffix(old, `"`)+"2", 1)
			assert.Error(t, audit(t, &g), "%s: %s", name, old)
		}
		g := *f
		g.Kind = "proof"
		assert.ErrorContains(t, audit(t, &g), "kind")
	}
}
