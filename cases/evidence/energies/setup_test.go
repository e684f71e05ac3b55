package energies_test

import (
	"context"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"testing"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/cases/evidence/energies"
	"creaseproof/cases/run"

	"github.com/stretchr/testify/require"
)

// written is the evidence of the surfaces of some cases, by the name of its file.
func written(t testing.TB, certify bool, list ...*cases.Case) map[string][]byte {
	t.Helper()
	dir := t.TempDir()
	e := run.NewEvidence(dir)
	run.Energy(context.Background(), list, run.EnergyOptions{
		Options: creases.Options{Certify: certify},
		Report:  func(r *run.EnergyResult) { e.Surface(context.Background(), r, certify) },
	})
	n, err := e.Written()
	require.NoError(t, err)
	files, err := filepath.Glob(filepath.Join(dir, "*.energy.json"))
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

func builtIn(t testing.TB, names ...string) []*cases.Case {
	t.Helper()
	list, failed := cases.Load(names, nil)
	require.Empty(t, failed)
	return list
}

// layered is a case of the layered model with the given surfaces.
func layered(t testing.TB, surfaces string) *cases.Case {
	t.Helper()
	c, err := cases.Parse("small", []byte(space+surfaces))
	require.NoError(t, err)
	return c
}

const space = `[space]
coordinates = ["x", "y", "z"]
unknowns = ["u"]
constants = ["eps", "k"]
assume = ["eps > 0"]
[let]
R = "u_z - (u_x^2 + u_y^2)/2"
L = "u_xx + u_yy"
[model]
residual = "R"
bending = "L"
energy = "R^2/(2 eps) + eps L^2/2"
`

const square = `polygon = [["0", "0", "0"], ["0", "1", "0"], ["0", "1", "1"], ["0", "0", "1"]]
`

// wall has the energy 2 k^3/3.
const wall = `[[surface]]
name = "wall"
values = { k = ["1", "1/2"] }
plus = "k x + k^2 z/2"
minus = "-k x + k^2 z/2"
` + square

// front has the energy (2 pi k^2/3) log 2.
const front = `[[surface]]
name = "front"
values = { k = ["1/3"] }
plus = "-k"
minus = "-(x^2 + y^2)/(2 z)"
patch = { map = ["sqrt(2 k t) cos(a)", "sqrt(2 k t) sin(a)", "t"], over = { t = ["1/2", "1"], a = ["0", "2 pi"] } }
`

// ridge is a maximum of affine branches.
const ridge = `[[surface]]
name = "ridge"
branches = ["x + z/2", "-x + z/2", "y + z/2"]
combine = "max"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["0", "1"] }
`

// level is a level set.
const level = `[[surface]]
name = "level"
plus = "x + z/2"
minus = "-x + z/2"
level = "x"
box = { x = ["-1", "1"], y = ["0", "1"], z = ["0", "1"] }
`

const all = wall + "energy = \"2 k^3/3\"\n" + front + "energy = \"(2 pi k^2/3) log(2)\"\n" + ridge + level + "energy = \"2/3\"\n"

func decoded(t testing.TB, data []byte) *energies.File {
	t.Helper()
	f, err := energies.Decode(data)
	require.NoError(t, err)
	return f
}

// audit encodes a file, with a digest that fits, and audits that.
func audit(t testing.TB, f *energies.File) error {
	t.Helper()
	data, err := f.Encode()
	require.NoError(t, err)
	_, err = energies.Audit(context.Background(), data, nil)
	return err
}

// forged is the file with a text in its place, and what an audit says of it, with
// a digest that fits. An error to read the text counts as one of the audit.
func forged(t testing.TB, text []byte) (*energies.File, error) {
	t.Helper()
	f := &energies.File{}
	if err := json.Unmarshal(text, f); err != nil {
		return f, fmt.Errorf("not read: %w", err)
	}
	return f, audit(t, f)
}
