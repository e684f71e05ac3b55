package run

import (
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"sync"
	"testing"

	"creaseproof/cases"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// coqWorkers is how many files Coq checks at once.
const coqWorkers = 2

// unproved are words with which a file would assume what it is to prove.
var unproved = regexp.MustCompile(`(?i)\b(admitted|admit|axioms?|parameters?|hypothes[ie]s|abort|conjecture|give_up)\b`)

// theorems of a file, each of which needs a proof.
var (
	theorem = regexp.MustCompile(`(?m)^(Theorem|Lemma) `)
	qed     = regexp.MustCompile(`Qed\.`)
)

// libraryEvidence writes the evidence of the built-in library and lists its files
// for Coq.
func libraryEvidence(t *testing.T) []string {
	t.Helper()
	list, failed := cases.Load(nil, strings.NewReader(""))
	require.Empty(t, failed)
	require.NotEmpty(t, list)
	dir := t.TempDir()
	e := NewEvidence(dir)
	Check(t.Context(), list, Options{Options: identity.DefaultOptions(), Report: func(r *Result) { e.Claim(t.Context(), r, 1) }})
	_, err := e.Written()
	require.NoError(t, err)
	files, err := filepath.Glob(filepath.Join(dir, "*.v"))
	require.NoError(t, err)
	slices.Sort(files)
	return files
}

// The whole built-in library passes Coq: every proof that is exported is
// complete, and none assumes anything but what its theorem states.
func TestCoqAcceptsTheLibrary(t *testing.T) {
	if testing.Short() {
		t.Skip("runs coqc on every file of the library")
	}
	files := libraryEvidence(t)
	require.Greater(t, len(files), 100)
	for _, f := range files {
		data, err := os.ReadFile(f)
		require.NoError(t, err)
		text, name := string(data), filepath.Base(f)
		assert.NotRegexp(t, unproved, text, name)
		assert.Contains(t, text, "\nTheorem ", name)
		assert.Equal(t, len(theorem.FindAllString(text, -1)), len(qed.FindAllString(text, -1)), "%s: proofs", name)
	}
	coqc, err := exec.LookPath("coqc")
	if err != nil {
		require.Empty(t, os.Getenv("CREASEPROOF_CI"), "coqc has to be there")
		t.Skip("skipped: coqc is not installed, so no exported file was checked by Coq (Debian: apt-get install coq)")
	}
	next := make(chan string)
	var wait sync.WaitGroup
	for range coqWorkers {
		wait.Go(func() {
			for f := range next {
				out, err := exec.CommandContext(t.Context(), coqc, "-q", "-noglob", f).CombinedOutput()
				assert.NoError(t, err, "%s: %s", filepath.Base(f), out)
			}
		})
	}
	for _, f := range files {
		next <- f
	}
	close(next)
	wait.Wait()
}
