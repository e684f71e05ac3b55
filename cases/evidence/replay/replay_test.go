package replay_test

import (
	"context"
	"errors"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/cases/evidence/replay"
	"creaseproof/cases/run"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

const text = `[space]
coordinates = ["x", "y", "z"]
unknowns = ["u"]
constants = ["eps"]
assume = ["eps > 0"]
[let]
R = "u_z - (u_x^2 + u_y^2)/2"
L = "u_xx + u_yy"
[model]
residual = "R"
bending = "L"
energy = "R^2/(2 eps) + eps L^2/2"

[[claim]]
name = "square"
states = "u_x^2 + u_y^2 >= 2 u_x u_y"

[[surface]]
name = "wall"
plus = "x + z/2"
minus = "-x + z/2"
polygon = [["0", "0", "0"], ["0", "1", "0"], ["0", "1", "1"], ["0", "0", "1"]]
energy = "2/3"

[[surface]]
name = "ridge"
branches = ["x + z/2", "-x + z/2"]
combine = "max"
box = { x = ["-1", "1"], y = ["0", "1"], z = ["0", "1"] }
energy = "2/3"

[[surface]]
name = "mesh"
plus = "x + z/2"
minus = "-x + z/2"
mesh = "wall.stl"
energy = "2/3"

[[limit]]
name = "front"
approximation = "front"
branches = ["x + z/2", "-x + z/2"]
combine = "max"
box = { x = ["-1", "1"], y = ["0", "1"], z = ["0", "1"] }
eps = ["1/10", "1/20"]
within = 1e-2
`

const stl = `solid wall
facet normal 1 0 0
outer loop
vertex 0 0 0
vertex 0 1 0
vertex 0 1 1
endloop
endfacet
facet normal 1 0 0
outer loop
vertex 0 0 0
vertex 0 1 1
vertex 0 0 1
endloop
endfacet
endsolid wall
`

// folder writes evidence of every kind.
func folder(t *testing.T) string {
	t.Helper()
	in, out := t.TempDir(), t.TempDir()
	require.NoError(t, os.WriteFile(filepath.Join(in, "all.toml"), []byte(text), 0o666))
	require.NoError(t, os.WriteFile(filepath.Join(in, "wall.stl"), []byte(stl), 0o666))
	list, failed := cases.Load([]string{filepath.Join(in, "all.toml")}, nil)
	require.Empty(t, failed)
	ctx := context.Background()
	e := run.NewEvidence(out)
	run.Check(ctx, list, run.Options{Options: identity.DefaultOptions(), Report: func(r *run.Result) { e.Claim(ctx, r, 1) }})
	run.Energy(ctx, list, run.EnergyOptions{Options: creases.Options{Certify: true}, Report: func(r *run.EnergyResult) {
		require.NoError(t, r.Err)
		e.Surface(ctx, r, true)
	}})
	run.Limit(ctx, list, run.LimitOptions{Report: e.Limit})
	n, err := e.Written()
	require.NoError(t, err)
	require.Equal(t, 5, n)
	return out
}

func opener(dir string) replay.Open {
	return func(name string) (io.ReadCloser, error) { return os.Open(filepath.Join(dir, name)) }
}

func TestEveryKind(t *testing.T) {
	dir := folder(t)
	for name, want := range map[string]replay.Report{
		"all__square.json":       {Case: "all", Name: "square", States: "proved"},
		"all__wall.energy.json":  {Case: "all", Name: "wall", States: "proved, enclosed in ["},
		"all__ridge.energy.json": {Case: "all", Name: "ridge", States: "proved, by exact arithmetic"},
		"all__mesh.energy.json":  {Case: "all", Name: "mesh", States: "supported, 0.66666666666666", Numerical: true},
		"all__front.limit.json":  {Case: "all", Name: "front", States: "sharp", Numerical: true},
	} {
		data, err := os.ReadFile(filepath.Join(dir, name))
		require.NoError(t, err)
		r, err := replay.File(t.Context(), data, opener(dir))
		require.NoError(t, err, name)
		assert.True(t, strings.HasPrefix(r.States, want.States), r.States)
		assert.Equal(t, want.Name != "square", strings.Contains(r.States, ", claimed 0.66666666666666") || strings.Contains(r.States, ", jump energy 0.66666666666666"), r.States)
		r.States = want.States
		assert.Equal(t, want, r)

		// One kind is not read as another.
		for _, key := range []string{"claim", "surface", "approximation"} {
			_, err = replay.File(t.Context(), []byte(strings.Replace(string(data), `"schema"`, `"`+key+`": "x", "schema"`, 1)), opener(dir))
			assert.Error(t, err, "%s with %s", name, key)
		}
		cancelled, cancel := context.WithCancel(t.Context())
		cancel()
		_, err = replay.File(cancelled, data, opener(dir))
		assert.Error(t, err, name)
	}
}

// A mesh is taken from beside the evidence, and has to be the recorded one.
func TestMesh(t *testing.T) {
	dir := folder(t)
	data, err := os.ReadFile(filepath.Join(dir, "all__mesh.energy.json"))
	require.NoError(t, err)
	_, err = replay.File(t.Context(), data, nil)
	assert.ErrorContains(t, err, "not at hand")
	_, err = replay.File(t.Context(), data, func(string) (io.ReadCloser, error) { return nil, errors.New("gone") })
	assert.ErrorContains(t, err, "gone")
	files, err := filepath.Glob(filepath.Join(dir, "*.mesh"))
	require.NoError(t, err)
	require.Len(t, files, 1)
	require.NoError(t, os.WriteFile(files[0], []byte(strings.Replace(stl, "vertex 0 0 1", "vertex 0 0 2", 1)), 0o666))
	_, err = replay.File(t.Context(), data, opener(dir))
	assert.ErrorContains(t, err, "not the recorded one")
}

func TestNoEvidence(t *testing.T) {
	for _, s := range []string{"", "null", "{}", "[]", `{"schema":1}`, `{"surface":null}`, `{"surface":"a","surface":"b"}`, `{"surface":"a"} {}`, `{"approximation":1}`, `{"claim":{}}`, "\x00"} {
		_, err := replay.File(t.Context(), []byte(s), nil)
		assert.Error(t, err, s)
	}
	deep := strings.Repeat(`{"surface":`, 1<<20)
	start := time.Now()
	_, err := replay.File(t.Context(), []byte(deep), nil)
	assert.Error(t, err)
	assert.Less(t, time.Since(start), 2*time.Minute)
}

// No kind of audit links the search for proofs and counterexamples.
func TestIndependence(t *testing.T) {
	out, err := exec.Command("go", "list", "-deps", "creaseproof/cases/evidence/replay").Output()
	require.NoError(t, err)
	deps := strings.Fields(string(out))
	require.Contains(t, deps, "creaseproof/identity/certificate")
	for _, d := range deps {
		assert.NotContains(t, []string{"creaseproof/identity", "creaseproof/identity/gram", "creaseproof/identity/squares", "creaseproof/identity/sample",
			"creaseproof/identity/adversary", "creaseproof/identity/semidefinite", "creaseproof/identity/statement", "creaseproof/identity/export", "creaseproof/cases/run"}, d)
		assert.NotContains(t, d, "gonum/optimize")
	}
}
