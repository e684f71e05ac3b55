package run

import (
	"runtime"
	"strings"
	"testing"
	"time"

	"creaseproof/cases"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Every kind of bad input ends soon, in bounded memory, with a short error at
// its place, or with an honest verdict where it is a hard claim rather than a
// mistake.
func TestBadInput(t *testing.T) {
	claim := func(states string) string {
		return space + "[[claim]]\nname = 'c'\nstates = '" + states + "'\n"
	}
	lots := strings.Builder{}
	lots.WriteString(space + "[let]\n")
	for range 40000 {
		lots.WriteString("A = 'u_x'\n")
	}
	binary := make([]byte, 4096)
	for i := range binary {
		binary[i] = byte(i*i*31 + i)
	}
	for name, c := range map[string]struct {
		text    string
		want    string // of the error; "" where a verdict is as good
		verdict identity.Verdict
	}{
		"unknown key":          {claim("u_x = u_x") + "colour = 'red'\n", "colour", ""},
		"wrong type":           {"title = 3\n", "must be a string", ""},
		"undeclared name":      {claim("foo = u_x"), `unknown name "foo"`, ""},
		"zero polynomial":      {claim("1/(u_x - u_x) = 0"), "division by zero", ""},
		"zero square":          {claim("u_y/((u_x + 1)^2 - u_x^2 - 2 u_x - 1) = 0"), "division by zero", ""},
		"nesting":              {claim(strings.Repeat("(", 100000) + "u_x" + strings.Repeat(")", 100000) + " = 0"), "nested", ""},
		"minus signs":          {claim(strings.Repeat("-(", 100000) + "u_x" + strings.Repeat(")", 100000) + " = 0"), "nested", ""},
		"power":                {claim("u_x^999999999 = 0"), "exponent", ""},
		"tower":                {claim("u_x^9^9 = 0"), "", ""},
		"explosion":            {claim("(u_x + u_y + u_z + u_xx + u_xy + u_yy + u_xz + u_yz + u_zz + 1)^60 = 0"), "", identity.Open},
		"explosion of numbers": {claim("((2^999999)^999999)^999999 = 1"), "", identity.Open},
		"explosion of lets": {space + "[let]\na = '(u_x + u_y + u_z)^9'\nb = '(a + u_xx)^9'\nc = '(b + u_yy)^9'\nd = '(c + u_zz)^9'\n[[claim]]\nname = 'c'\nstates = 'd = 0'\n",
			"", identity.Open},
		"ambiguous division": {claim("1/2 u_x = u_x/2"), "two readings", ""},
		"empty":              {"", "empty", ""},
		"binary":             {string(binary), "binary", ""},
		"latin-1":            {"title = \"\xe9\"\n", "UTF-8", ""},
		"not TOML":           {"[[[", "invalid character", ""},
		"nested tables":      {strings.Repeat("[", 100000) + "a" + strings.Repeat("]", 100000), "", ""},
		"nested arrays":      {"title = " + strings.Repeat("[", 100000), "", ""},
		"same key":           {lots.String(), "", ""},
		"long line":          {claim(strings.Repeat("u_x + ", 150000) + "foo = 0"), "foo", ""},
		"long number":        {claim("u_x = " + strings.Repeat("9", 100000)), "digits", ""},
		"vector and number":  {space + "[field.F]\nx = 'u'\n[[claim]]\nname = 'c'\nstates = 'F = 1'\n", "vector", ""},
		"nothing said":       {"title = 'a'\n", "holds no case", ""},
	} {
		t.Run(name, func(t *testing.T) {
			var before, after runtime.MemStats
			runtime.ReadMemStats(&before)
			start := time.Now()
			list, failed := cases.Load([]string{"-"}, strings.NewReader(c.text))
			out := Check(t.Context(), list, Options{Options: identity.DefaultOptions()})
			for _, r := range out.Results {
				if r.Err != nil {
					failed = append(failed, r.Err)
				}
			}
			spent := time.Since(start)
			runtime.ReadMemStats(&after)
			assert.Less(t, spent, time.Minute, "a hang, not a benchmark")
			assert.Less(t, after.TotalAlloc-before.TotalAlloc, uint64(4<<30))
			assert.Less(t, after.HeapSys, uint64(1<<30))
			if len(failed) == 0 {
				require.Empty(t, c.want, "an error was expected")
				require.Equal(t, c.verdict, out.Results[0].Record.Verdict)
				require.NotEmpty(t, out.Results[0].Record.Reason)
				return
			}
			require.Len(t, failed, 1)
			msg := failed[0].Error()
			assert.LessOrEqual(t, len(msg), 2500)
			assert.Contains(t, msg, c.want)
			assert.True(t, strings.HasPrefix(msg, "-:"), msg)
			assert.NotContains(t, msg, "goroutine")
		})
	}
}
