package run

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
	"creaseproof/cases/creases"
	"creaseproof/cases/evidence/replay"
	"creaseproof/cases/limits"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func names(t *testing.T, dir string) (list []string) {
	t.Helper()
	entries, err := os.ReadDir(dir)
	require.NoError(t, err)
	for _, e := range entries {
		list = append(list, e.Name())
	}
	return list
}

// Files have names of their own: claims, surfaces and limits of one name, two
// choices that are spelled alike, and two cases of one name.
func TestEvidenceNames(t *testing.T) {
	front := strings.NewReplacer("profile", "front", "plus = \"m x + m^2 z/2\"\nminus = \"-m x + m^2 z/2\"", "branches = ['m x + m^2 z/2', '-m x + m^2 z/2']\ncombine = 'max'").Replace(limitWall)
	text := layeredCase + "[[claim]]\nname = 'wall'\nstates = 'u_xy = u_yx'\n" + front +
		"[[surface]]\nname = 'wall'\nvalues = { m = ['1/2', '-1/2', '2'] }\ndensity = 'm'\npolygon = [['0','0','0'],['1','0','0'],['0','1','0']]\n"
	dir := t.TempDir()
	e := NewEvidence(filepath.Join(dir, "new", "folder"))
	for range 2 {
		list := []*cases.Case{parsed(t, text)}
		Check(t.Context(), list, Options{Report: func(r *Result) { e.Claim(t.Context(), r, 1) }})
		Energy(t.Context(), list, EnergyOptions{Report: func(r *EnergyResult) { e.Surface(t.Context(), r, false) }})
		Limit(t.Context(), list, LimitOptions{Report: e.Limit})
	}
	n, err := e.Written()
	require.NoError(t, err)
	assert.Equal(t, 12, n)
	json := 0
	for _, name := range names(t, filepath.Join(dir, "new", "folder")) {
		assert.NotContains(t, name, "unfinished")
		if strings.HasSuffix(name, ".json") {
			json++
			data, err := os.ReadFile(filepath.Join(dir, "new", "folder", name))
			require.NoError(t, err)
			_, err = replay.File(t.Context(), data, nil)
			assert.NoError(t, err, name)
		}
	}
	assert.Equal(t, 12, json)
	assert.Contains(t, names(t, filepath.Join(dir, "new", "folder")), "case__wall__m_1_2.energy.json")
}

// What is computed before an interruption or the timeout is written.
func TestEvidenceInterrupted(t *testing.T) {
	for _, timeout := range []time.Duration{0, 20 * time.Millisecond} {
		dir := t.TempDir()
		e := NewEvidence(dir)
		ctx, cancel := context.WithCancel(t.Context())
		stop := func() {
			if timeout == 0 {
				cancel()
			}
		}
		surfaces := manySurfaces(t, "a", "half", "never")
		energy(ctx, surfaces, EnergyOptions{Jobs: 1, Timeout: timeout, Report: func(r *EnergyResult) { e.Surface(context.WithoutCancel(ctx), r, false) }},
			func(ctx context.Context, c *cases.Case, s *casefile.Surface) ([]creases.Result, error) {
				v, err := creases.New(c.Setting, c.File.Path).Evaluate(context.WithoutCancel(ctx), s, creases.Options{})
				require.NoError(t, err)
				if s.Name == "half" {
					stop()
					<-ctx.Done()
					return v, ctx.Err()
				}
				return v, nil
			})
		ctx, cancel = context.WithCancel(t.Context())
		wall := []*cases.Case{parsed(t, layeredCase+limitWall)}
		integrateLimits(ctx, wall, LimitOptions{Timeout: timeout, Report: e.Limit},
			func(ctx context.Context, c *cases.Case, l *casefile.Limit) ([]limits.Value, error) {
				v := limits.Empty(l)
				v.Eps, v.Energy, v.Compression, v.Bending, v.Curvature, v.Error = []float64{0.05}, []float64{1}, []float64{1}, []float64{1}, []float64{1}, []float64{1}
				stop()
				<-ctx.Done()
				return []limits.Value{v}, ctx.Err()
			})
		cancel()
		n, err := e.Written()
		require.NoError(t, err)
		assert.Equal(t, 3, n)
		assert.Equal(t, []string{"case__a.energy.json", "case__half.energy.json", "case__wall__m.limit.json"}, names(t, dir))
		data, err := os.ReadFile(filepath.Join(dir, "case__wall__m.limit.json"))
		require.NoError(t, err)
		assert.Contains(t, string(data), `"unfinished": true`)
	}
}

// A folder that cannot be written to is said once, and does not stop anything.
func TestEvidenceUnwritable(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	require.NoError(t, os.WriteFile(file, nil, 0o666))
	e := NewEvidence(file)
	seen := 0
	Energy(t.Context(), manySurfaces(t, "a", "b", "c"), EnergyOptions{Report: func(r *EnergyResult) { seen++; e.Surface(t.Context(), r, false) }})
	assert.Equal(t, 3, seen)
	n, err := e.Written()
	assert.Zero(t, n)
	require.ErrorContains(t, err, "the folder for evidence")
	assert.Equal(t, 1, strings.Count(err.Error(), "folder"))

	// One file that cannot be written is no reason to leave out the others.
	dir := t.TempDir()
	require.NoError(t, os.MkdirAll(filepath.Join(dir, "case__b.energy.json", "in the way"), 0o777))
	e = NewEvidence(dir)
	Energy(t.Context(), manySurfaces(t, "a", "b", "c"), EnergyOptions{Report: func(r *EnergyResult) { e.Surface(t.Context(), r, false) }})
	n, err = e.Written()
	assert.Equal(t, 2, n)
	assert.ErrorContains(t, err, "case__b")
	assert.Equal(t, []string{"case__a.energy.json", "case__b.energy.json", "case__c.energy.json"}, names(t, dir))
}

// A mesh from standard input cannot be read again, and one that is gone neither.
func TestEvidenceOfMeshes(t *testing.T) {
	one := 1.0
	for _, path := range []string{"/dev/stdin", "gone.stl", "."} {
		dir := t.TempDir()
		e := NewEvidence(dir)
		list := manySurfaces(t, "a")
		s := &list[0].File.Surfaces[0]
		s.Mesh = path
		for range 2 {
			e.Surface(t.Context(), &EnergyResult{Case: list[0], Surface: s, Values: []creases.Result{{Surface: "a", Energy: &one}}}, false)
		}
		n, err := e.Written()
		assert.Zero(t, n, path)
		assert.ErrorContains(t, err, "evidence", path)
		assert.Empty(t, names(t, dir))
	}
}
