package main

import (
	"bytes"
	"context"
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

	"creaseproof/cases/library"
)

// call runs a command as a user would, with nothing on the terminal.
func call(t *testing.T, stdin string, args ...string) (code int, out, errs string) {
	t.Helper()
	var o, e bytes.Buffer
	code = execute(t.Context(), args, streams{in: strings.NewReader(stdin), out: &o, err: &e, width: defaultWidth})
	return code, o.String(), e.String()
}

const space = `title = "a small case"
[space]
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
`

const (
	yes     = "[[claim]]\nname = \"yes\"\nstates = \"u_xy = u_yx\"\n"
	no      = "[[claim]]\nname = \"no\"\nstates = \"2 u_x = u_x\"\n"
	mistake = "[[claim]]\nname = \"zero\"\nstates = \"1/(u_x - u_x) = 0\"\n"
	plane   = "[[surface]]\nname = \"plane\"\nplus = \"x + z/2\"\nminus = \"-x + z/2\"\npolygon = [[\"0\", \"0\", \"0\"], [\"0\", \"1\", \"0\"], [\"0\", \"1\", \"1\"], [\"0\", \"0\", \"1\"]]\nenergy = \"2/3\"\n"
)

func TestExitStatus(t *testing.T) {
	for name, c := range map[string]struct {
		stdin string
		args  []string
		code  int
		out   []string
		err   string
	}{
		"met":             {space + yes, []string{"check", "-"}, 0, []string{"ok   proved     yes", "1 claim: 1 proved, all as expected"}, ""},
		"expected false":  {space + no + "expect = \"refuted\"\n", []string{"check", "-"}, 0, []string{"ok   refuted    no", "u_x = ", "left side", "remainder u_x"}, ""},
		"not met":         {space + yes + no, []string{"check", "-"}, 1, []string{"NOT  refuted    no", "expected proved", "2 claims: 1 proved, 1 refuted, 1 not as expected"}, ""},
		"mistake":         {space + mistake + yes, []string{"check", "-"}, 2, []string{"ok   proved     yes", "NOT  -          zero  without meaning", "2 claims: 1 proved, 1 without meaning, the others as expected"}, "-:16:14: division by zero"},
		"bad file":        {"colour = 1\n", []string{"check", "-"}, 2, nil, "colour"},
		"no such file":    {"", []string{"check", "no-such.toml"}, 2, nil, "no-such.toml: there is no such file"},
		"one of two":      {space + yes, []string{"check", "no-such.toml", "-"}, 2, []string{"ok   proved     yes", "1 claim: 1 proved, 1 case not read, the others as expected"}, "no-such.toml"},
		"unknown flag":    {"", []string{"check", "--colour"}, 2, nil, "unknown flag: --colour"},
		"unknown command": {"", []string{"chekc", "--json"}, 2, nil, `unknown command "chekc"`},
		"no command":      {"", nil, 0, []string{"Usage:"}, ""},
		"bad timeout":     {"", []string{"check", "--timeout", "-3"}, 2, nil, "positive number of seconds"},
		"bad jobs":        {"", []string{"check", "--jobs", "-3"}, 2, nil, `"-3" for "--jobs" flag: write a whole number, at least 0`},
		"bad seed":        {"", []string{"check", "--seed", "-1"}, 2, nil, `"-1" for "--seed" flag: write a whole number, at least 0`},
		"seed of words":   {"", []string{"check", "--seed", "1.5"}, 2, nil, "write a whole number"},
		"huge seed":       {"", []string{"check", "--seed", "99999999999999999999"}, 2, nil, "too large"},
		"huge samples":    {"", []string{"check", "--samples", "9999999999999999999"}, 2, nil, "too large"},
		"bad samples":     {"", []string{"check", "--samples", "0"}, 2, nil, `"--samples" flag: write a whole number, at least 1`},
		"nothing of that": {space + yes, []string{"check", "-", "--only", "young"}, 2, nil, "no claim has a name"},
		"only":            {space + yes + no, []string{"check", "-", "--only", "ye"}, 0, []string{"1 claim"}, ""},
		"no claims":       {space, []string{"check", "-"}, 0, []string{"no claims"}, ""},
		"solution":        {space + "[[claim]]\nname = \"c\"\nstates = \"c u_x = 2 u_x\"\nsolve = [\"c\"]\nexpect = \"c = 3\"\n", []string{"check", "-"}, 1, []string{"solution c = 2", "expected proved with c = 3"}, ""},

		"energy":               {space + plane, []string{"energy", "-"}, 0, []string{"ok   supported  plane", "0.6666666666", "as claimed", "1 energy of 1 surface: 1 supported, all as expected"}, ""},
		"wrong energy":         {space + strings.Replace(plane, "2/3", "1/3", 1), []string{"energy", "-"}, 1, []string{"NOT  open       plane", "expected supported"}, ""},
		"off the well":         {space + strings.Replace(plane, "-x + z/2", "-x + z/3", 1), []string{"energy", "-"}, 2, []string{"NOT  open", "off the well"}, "-:15:9: \"plane\" has no energy: "},
		"refused as expected":  {space + strings.Replace(plane, "-x + z/2", "-x + z/3", 1) + "expect = \"open\"\n", []string{"energy", "-"}, 0, []string{"ok   open", "off the well"}, ""},
		"degenerate":           {space + strings.NewReplacer("\"1\", \"1\"", "\"2\", \"0\"", "\"0\", \"1\"]", "\"3\", \"0\"]").Replace(plane), []string{"energy", "-"}, 2, []string{"NOT  open"}, "has no energy"},
		"not a number":         {space + strings.Replace(plane, "-x + z/2", "sqrt(x - 1)", 1), []string{"energy", "-"}, 2, []string{"NOT  open"}, "has no energy"},
		"mistake in a surface": {space + strings.Replace(plane, "-x + z/2", "-x + foo", 1), []string{"energy", "-"}, 2, []string{"NOT  -          plane  not read", "0 energies of 1 surface: 1 surface not read"}, `-:17:15: unknown name "foo"`},
		"mistake in a value":   {space + plane + "values = { k = [\"1\", \"1/(1 - 1)\"] }\n", []string{"energy", "-"}, 2, []string{"ok   supported  plane", "1 energy of 1 surface: 1 supported, 1 surface not read, the others as expected"}, "division by zero"},
		"another is not read":  {space + plane, []string{"energy", "no-such.toml", "-"}, 2, []string{"1 case not read, the others as expected"}, "no-such.toml"},
		"no surfaces":          {space + yes, []string{"energy", "-"}, 0, []string{"no surfaces"}, ""},
		"no such surface":      {space + plane, []string{"energy", "-", "--only", "front"}, 2, nil, "no surface has a name"},

		"show":            {"", []string{"cases", "show", "bps"}, 0, []string{"[space]", "curvature coefficient"}, ""},
		"show nothing":    {"", []string{"cases", "show", "bpz"}, 2, nil, `no built-in case "bpz"`},
		"cases nonsense":  {"", []string{"cases", "lst"}, 2, nil, "unknown command"},
		"completion":      {"", []string{"completion", "bash"}, 0, []string{"complete"}, ""},
		"complete a case": {"", []string{"__complete", "check", ""}, 0, []string{"layered-rotated"}, ""},
		"complete a name": {"", []string{"__complete", "cases", "show", ""}, 0, []string{"layered-rotated"}, ""},
	} {
		t.Run(name, func(t *testing.T) {
			code, out, errs := call(t, c.stdin, c.args...)
			assert.Equal(t, c.code, code, out+errs)
			for _, part := range c.out {
				assert.Contains(t, out, part)
			}
			assert.Contains(t, errs, c.err)
			if c.err == "" && !strings.HasPrefix(name, "complete a") {
				assert.Empty(t, errs)
			}
			assert.NotContains(t, out, "\x1b", "no colour away from a terminal")
		})
	}
}

func TestCheckDocument(t *testing.T) {
	code, out, errs := call(t, space+no+yes+mistake, "check", "-", "--json")
	assert.Equal(t, 2, code)
	assert.Contains(t, errs, "division by zero")
	var doc struct {
		Schema int
		Cases  []struct {
			Case   string
			Claims []struct {
				Claim, Verdict, Expected, Reason string
				Met                              bool
				Witness                          *struct{ Jet map[string]string }
			}
		}
	}
	require.NoError(t, json.Unmarshal([]byte(out), &doc))
	assert.Equal(t, 1, doc.Schema)
	require.Len(t, doc.Cases, 1)
	require.Len(t, doc.Cases[0].Claims, 3)
	assert.Equal(t, "no", doc.Cases[0].Claims[0].Claim)
	assert.NotNil(t, doc.Cases[0].Claims[0].Witness)
	assert.False(t, doc.Cases[0].Claims[0].Met)
	assert.True(t, doc.Cases[0].Claims[1].Met)
	assert.Equal(t, "open", doc.Cases[0].Claims[2].Verdict, "without meaning")
	assert.False(t, doc.Cases[0].Claims[2].Met)
	assert.Contains(t, doc.Cases[0].Claims[2].Reason, "without meaning: line ")

	_, out, _ = call(t, space+strings.Replace(plane, "-x + z/2", "-x + foo", 1), "energy", "-", "--json")
	assert.Contains(t, out, `"reason": "without meaning: line 17, column 15: unknown name \"foo\""`)
}

func TestEnergyDocument(t *testing.T) {
	code, out, errs := call(t, space+strings.Replace(plane, "name =", "values = { a = [\"1\", \"2\"] }\nname =", 1), "energy", "-", "--json")
	assert.Equal(t, 0, code, errs)
	var doc struct {
		Schema int
		Cases  []struct {
			Case     string
			Surfaces []map[string]any
		}
	}
	require.NoError(t, json.Unmarshal([]byte(out), &doc))
	require.Len(t, doc.Cases, 1)
	require.Len(t, doc.Cases[0].Surfaces, 2)
	s := doc.Cases[0].Surfaces[1]
	assert.Equal(t, "plane", s["surface"])
	assert.Equal(t, map[string]any{"a": "2"}, s["values"])
	assert.InDelta(t, 2.0/3, s["energy"], 1e-14) // |q_perp|^4/(12 |q|) with q = (2, 0, 0), on the unit square
	assert.InDelta(t, 1, s["area"], 1e-14)
	assert.Equal(t, "supported", s["verdict"])
	assert.Equal(t, true, s["met"])
}

// Everything built in is as it expects, and the parts that do not measure time
// do not depend on the number of jobs.
func TestLibrary(t *testing.T) {
	for _, command := range []string{"check", "energy"} {
		code, one, errs := call(t, "", command, "--jobs", "1")
		require.Equal(t, 0, code, one+errs)
		require.Empty(t, errs)
		require.NotContains(t, one, "NOT")
		_, two, _ := call(t, "", command, "--jobs", "2")
		require.Equal(t, one, two)
	}
}

func TestCasesNew(t *testing.T) {
	path := filepath.Join(t.TempDir(), "mine.toml")
	code, _, errs := call(t, "", "cases", "new", path)
	assert.Equal(t, 0, code, errs)
	data, err := os.ReadFile(path)
	require.NoError(t, err)
	assert.Equal(t, library.Template(), data)
	for _, command := range []string{"check", "energy"} {
		code, out, errs := call(t, "", command, path)
		assert.Equal(t, 0, code, out+errs)
	}

	require.NoError(t, os.WriteFile(path, []byte("mine"), 0o644))
	code, _, errs = call(t, "", "cases", "new", path)
	assert.Equal(t, 2, code)
	assert.Contains(t, errs, "is there already")
	data, _ = os.ReadFile(path)
	assert.Equal(t, "mine", string(data), "a file is not overwritten")
	code, _, errs = call(t, "", "cases", "new", filepath.Join(path, "below"))
	assert.Equal(t, 2, code)
	assert.NotEmpty(t, errs)
}

func TestCasesList(t *testing.T) {
	code, out, _ := call(t, "", "cases", "list")
	assert.Equal(t, 0, code)
	lines := strings.Split(strings.TrimSpace(out), "\n")
	assert.Len(t, lines, len(library.Names())+1)
	for _, l := range lines[1:] {
		assert.Equal(t, len([]rune(lines[0])), len([]rune(l)), l)
	}
	_, same, _ := call(t, "", "cases")
	assert.Equal(t, out, same)
}

func TestHelpHasExamples(t *testing.T) {
	for _, args := range [][]string{{}, {"check"}, {"energy"}, {"cases"}, {"cases", "list"}, {"cases", "show"}, {"cases", "new"}} {
		code, out, _ := call(t, "", append(args, "--help")...)
		assert.Equal(t, 0, code)
		assert.Contains(t, out, "Examples:", args)
	}
}

func TestManyMistakesAreShort(t *testing.T) {
	text := space
	for range 9 {
		text += strings.Replace(yes, "u_xy =", "foo"+strings.Repeat("é ", 3000)+" =", 1)
	}
	code, _, errs := call(t, text, "check", "-")
	assert.Equal(t, 2, code)
	assert.Less(t, len(errs), 2500)

	// Mistakes that are found while claims are decided count as well.
	text = space
	for i := range 200 {
		text += strings.Replace(mistake, "zero", "zero"+strings.Repeat("o", i), 1)
	}
	code, _, errs = call(t, text, "check", "-")
	assert.Equal(t, 2, code)
	assert.Less(t, len(errs), 2500)
	assert.Contains(t, errs, "and more of this file")
}

func TestColour(t *testing.T) {
	var o, e bytes.Buffer
	code := execute(t.Context(), []string{"check", "-"}, streams{in: strings.NewReader(space + yes + no), out: &o, err: &e, width: 80, colour: true, progress: true})
	assert.Equal(t, 1, code)
	assert.Contains(t, o.String(), "\x1b[32mproved")
	assert.Contains(t, o.String(), "\x1b[1;31mNOT")
}

func TestWaitingForInputCanBeInterrupted(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	r, w, err := os.Pipe()
	require.NoError(t, err)
	defer w.Close()
	time.AfterFunc(20*time.Millisecond, cancel)
	assert.Equal(t, 3, execute(ctx, []string{"check", "-"}, streams{in: r, out: &bytes.Buffer{}, err: &bytes.Buffer{}}))
}

// The built program, interrupted: what is decided is printed, soon.
func TestInterrupt(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the program")
	}
	bin := filepath.Join(t.TempDir(), "creaseproof")
	out, err := exec.Command("go", "build", "-o", bin, ".").CombinedOutput()
	require.NoError(t, err, string(out))
	slow := "[[claim]]\nname = \"slow\"\nstates = \"exp(sin(u_x u_yy)) + cos(u_xx u_y) >= exp(-1) - 1\"\n"
	for _, flags := range [][]string{{"--json"}, {}, {"--timeout", "2"}} {
		cmd := exec.Command(bin, append([]string{"check", "-", "--samples", "200000000000"}, flags...)...)
		cmd.Stdin = strings.NewReader(space + yes + slow)
		var o, e bytes.Buffer
		cmd.Stdout, cmd.Stderr = &o, &e
		require.NoError(t, cmd.Start())
		want := 1 // the timeout
		start := time.Now()
		if len(flags) < 2 {
			want = 3
			time.Sleep(2 * time.Second)
			start = time.Now()
			require.NoError(t, cmd.Process.Signal(syscall.SIGINT))
		}
		timer := time.AfterFunc(20*time.Second, func() { _ = cmd.Process.Kill() })
		_ = cmd.Wait()
		timer.Stop()
		assert.Equal(t, want, cmd.ProcessState.ExitCode(), e.String())
		assert.Less(t, time.Since(start), 20*time.Second, "a hang, not a benchmark")
		assert.Contains(t, o.String(), "yes")
		assert.Contains(t, o.String(), "proved")
		if want == 3 {
			assert.Contains(t, e.String(), "interrupted")
			assert.NotContains(t, o.String(), "slow")
		} else {
			assert.Contains(t, o.String(), "not decided within the 2s allowed")
		}
	}
}
