package evidence_test

import (
	"context"
	"os"
	"path/filepath"
	"testing"

	"creaseproof/cases"
	"creaseproof/cases/evidence"
	"creaseproof/cases/run"
	"creaseproof/identity"

	"github.com/stretchr/testify/require"
)

// written is the evidence of some cases, by the name of its file.
func written(t testing.TB, names ...string) map[string][]byte {
	t.Helper()
	list, failed := cases.Load(names, nil)
	require.Empty(t, failed)
	return writtenFor(t, list...)
}

func writtenFor(t testing.TB, list ...*cases.Case) map[string][]byte {
	t.Helper()
	dir := t.TempDir()
	e := run.NewEvidence(dir)
	run.Check(context.Background(), list, run.Options{Options: identity.DefaultOptions(), Report: func(r *run.Result) { e.Claim(context.Background(), r, 1) }})
	n, err := e.Written()
	require.NoError(t, err)
	files, err := filepath.Glob(filepath.Join(dir, "*.json"))
	require.NoError(t, err)
	require.Len(t, files, n)
	out := map[string][]byte{}
	for _, f := range files {
		data, err := os.ReadFile(f)
		require.NoError(t, err)
		out[filepath.Base(f)] = data
	}
	return out
}

func decoded(t testing.TB, data []byte) *evidence.File {
	t.Helper()
	f, err := evidence.Decode(data)
	require.NoError(t, err)
	return f
}

// audit encodes a file, with a digest that fits, and audits that.
func audit(t testing.TB, f *evidence.File) error {
	t.Helper()
	data, err := f.Encode()
	require.NoError(t, err)
	_, err = evidence.Audit(context.Background(), data)
	return err
}
