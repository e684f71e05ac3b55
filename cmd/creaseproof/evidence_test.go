package main

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestEvidenceAndAudit(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "evidence")
	text := space + yes + plane + wall
	for _, c := range []struct {
		args []string
		says string
	}{
		{[]string{"check"}, "evidence for 1 verdict in "},
		{[]string{"energy", "--certify"}, "evidence for 1 energy in "},
		{[]string{"limit"}, "evidence for 1 approximation in "},
	} {
		code, out, errs := call(t, text, append(c.args, "-", "--evidence", dir)...)
		assert.Equal(t, 0, code, out+errs)
		assert.Equal(t, c.says+dir+"\n", errs)
		assert.Contains(t, out, "all as expected")
	}
	code, out, errs := call(t, "", "audit", dir)
	assert.Equal(t, 0, code, out)
	assert.Empty(t, errs)
	assert.Contains(t, out, "c___plane.energy.json: -, plane: proved, enclosed in [0.66666666666")
	assert.Contains(t, out, "verified  ")
	assert.Contains(t, out, "repeated  "+filepath.Join(dir, "c___wall.limit.json")+": -, wall: sharp")
	assert.Contains(t, out, "no proof")
	assert.True(t, strings.HasSuffix(out, "3 files: 2 verified, 1 repeated, 0 refused\n"), out)

	// A number changed by hand, then with a digest that fits.
	path := filepath.Join(dir, "c___plane.energy.json")
	data, err := os.ReadFile(path)
	require.NoError(t, err)
	var doc struct{ Enclosure []string }
	require.NoError(t, json.Unmarshal(data, &doc))
	changed := strings.Replace(string(data), doc.Enclosure[0]+"\",", "0.6\",", 1)
	require.NotEqual(t, string(data), changed)
	for _, c := range []struct{ text, says string }{{changed, "digest"}, {redigested(t, changed), "as wide"}} {
		require.NoError(t, os.WriteFile(path, []byte(c.text), 0o666))
		code, out, _ = call(t, "", "audit", path)
		assert.Equal(t, 1, code)
		assert.Contains(t, out, c.says)
		assert.Contains(t, out, "1 file: 0 verified, 1 refused")
	}
}

// redigested computes the digest as the documentation says: over the document
// without it, as compact JSON in the same order.
func redigested(t *testing.T, text string) string {
	t.Helper()
	at := strings.Index(text, `"digest": "`) + len(`"digest": "`)
	blank := text[:at] + text[strings.Index(text[at:], `"`)+at:]
	var compact strings.Builder
	dec := json.NewDecoder(strings.NewReader(blank))
	dec.UseNumber()
	var raw json.RawMessage
	require.NoError(t, dec.Decode(&raw))
	data, err := json.Marshal(raw)
	require.NoError(t, err)
	compact.Write(data)
	sum := sha256.Sum256([]byte(compact.String()))
	return text[:at] + hex.EncodeToString(sum[:]) + text[strings.Index(text[at:], `"`)+at:]
}

// Where no evidence can be written the results are there all the same.
func TestNoPlaceForEvidence(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	require.NoError(t, os.WriteFile(file, nil, 0o666))
	for command, result := range map[string]string{"check": "proved     yes", "energy": "supported  plane", "limit": "sharp      wall"} {
		code, out, errs := call(t, space+yes+plane+wall, command, "-", "--evidence", filepath.Join(file, "below"))
		assert.Equal(t, 2, code)
		assert.Contains(t, out, result)
		assert.Contains(t, out, "all as expected")
		assert.Contains(t, errs, "creaseproof: evidence is missing: the folder for evidence: ")
		assert.Equal(t, 1, strings.Count(errs, "\n"), errs)
	}
	code, out, _ := call(t, space+plane, "energy", "-", "--json", "--evidence", file)
	assert.Equal(t, 2, code)
	assert.True(t, json.Valid([]byte(out)))
}

// The built program, interrupted while it writes evidence: what is computed is
// there, and can be verified.
func TestInterruptedEvidence(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the program")
	}
	bin := filepath.Join(t.TempDir(), "creaseproof")
	out, err := exec.Command("go", "build", "-o", bin, ".").CombinedOutput()
	require.NoError(t, err, string(out))
	// Energies of curves that pass through a cell after the other.
	slow := "[[surface]]\nname = \"slow\"\nvalues = { s = [" + strings.Repeat("\"1\", ", 9999) + "\"1\"] }\n" + plane[strings.Index(plane, "plus"):]
	far := strings.NewReplacer("name = \"wall\"", "name = \"far\"", "eps = [\"1/10\", \"1/40\"]", "values = { s = ["+strings.Repeat("\"1\", ", 9999)+"\"1\"] }\neps = [\"1/10\"]\nwithin = 1e-1").Replace(wall)
	for _, c := range []struct {
		command, text string
		stop          []string
		want          int
	}{
		{"energy", plane + slow, nil, 3},
		{"energy", plane + slow, []string{"--timeout", "5"}, 1},
		{"limit", wall + far, nil, 3},
		{"limit", wall + far, []string{"--timeout", "5"}, 1},
	} {
		dir := t.TempDir()
		cmd := exec.Command(bin, append([]string{c.command, "-", "--evidence", dir}, c.stop...)...)
		cmd.Stdin = strings.NewReader(space + c.text)
		var o, e strings.Builder
		cmd.Stdout, cmd.Stderr = &o, &e
		require.NoError(t, cmd.Start())
		if c.stop == nil {
			require.Eventually(t, func() bool {
				files, err := filepath.Glob(filepath.Join(dir, "*"+c.command+".json"))
				return err == nil && len(files) > 0
			}, 2*time.Minute, 20*time.Millisecond, c.command)
			time.Sleep(time.Second)
			require.NoError(t, cmd.Process.Signal(syscall.SIGINT))
		}
		timer := time.AfterFunc(2*time.Minute, func() { _ = cmd.Process.Kill() })
		_ = cmd.Wait()
		timer.Stop()
		assert.Equal(t, c.want, cmd.ProcessState.ExitCode(), e.String())
		files, err := filepath.Glob(filepath.Join(dir, "*"+c.command+".json"))
		require.NoError(t, err)
		assert.Greater(t, len(files), 1, c.command)
		assert.Contains(t, e.String(), "evidence for ")
		hidden, err := filepath.Glob(filepath.Join(dir, ".*"))
		require.NoError(t, err)
		assert.Empty(t, hidden)
		code, out, _ := call(t, "", append([]string{"audit"}, files[:min(9, len(files))]...)...)
		assert.Equal(t, 0, code, out)
	}
}
