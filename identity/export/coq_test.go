package export_test

import (
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/stretchr/testify/require"

	"creaseproof/identity/certificate"
)

// poly reads a polynomial such as "3/2 x^2 y - z + 1".
func poly(s string) certificate.Polynomial {
	var out certificate.Polynomial
	sign := ""
	c, m := "", map[string]int{}
	flush := func() {
		if c == "" && len(m) == 0 {
			return
		}
		if c == "" {
			c = "1"
		}
		out = append(out, certificate.Term{C: sign + c, M: m})
		sign, c, m = "", "", map[string]int{}
	}
	for _, w := range strings.Fields(s) {
		switch {
		case w == "+":
			flush()
		case w == "-":
			flush()
			sign = "-"
		case w[0] >= '0' && w[0] <= '9':
			c = w
		default:
			name, n := w, 1
			if i := strings.LastIndexByte(w, '^'); i > 0 {
				if k, err := strconv.Atoi(w[i+1:]); err == nil {
					name, n = w[:i], k
				}
			}
			m[name] += n
		}
	}
	flush()
	return out
}

func square(weight string, base string, factors ...int) certificate.Square {
	return certificate.Square{Weight: weight, Factors: factors, Base: poly(base)}
}

// coqc compiles a file and reports what Coq says where it refuses it.
func coqc(t *testing.T, text string) (string, error) {
	t.Helper()
	path, err := exec.LookPath("coqc")
	if err != nil {
		t.Skip("skipped: coqc is not installed, so no exported file was checked by Coq (Debian: apt-get install coq)")
	}
	file := filepath.Join(t.TempDir(), "exported.v")
	require.NoError(t, os.WriteFile(file, []byte(text), 0o644))
	ctx, cancel := context.WithTimeout(context.Background(), 5*time.Minute)
	defer cancel()
	out, err := exec.CommandContext(ctx, path, "-q", "-noglob", file).CombinedOutput()
	return string(out), err
}
