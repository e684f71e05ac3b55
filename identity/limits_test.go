package identity_test

import (
	"context"
	"runtime"
	"strings"
	"testing"
	"time"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Formulas that would explode end with an open verdict or an error, and
// without much memory.
func TestExplosions(t *testing.T) {
	const ten = "(u + u_x + u_y + u_xx + u_xy + u_yy + x + y + a + b)"
	for _, states := range []string{
		ten + "^60 = u_y",
		ten + "^60 >= u_y",
		"1/" + ten + "^60 = u_y",
		"(u_x + 1)^100000 = u_y",
		"(u_x + cos(a))^5000 = u_y",
		"(u_x + sqrt(u_y))^100000 = u_y",
		"(u_x + 1)^(1/2) (u_y + 1)^(99/2) = u_y",
		"cos(1000 a) = u_y",
		"cos(1001 a) cos(a) = u_y",
		"cos(a/999) cos(a/1000) = u_y",
		"cos(pi/997) cos(pi/991) = u_y",
		"exp(100000 a) = u_y",
		"exp(exp(exp(exp(u_x)))) = u_y",
		"sqrt(" + ten + "^40) = u_y",
		"abs(" + ten + "^41) = u_y",
		"log(" + ten + "^41) = u_y",
		strings.Repeat("1/(1 + ", 60) + "u_x" + strings.Repeat(")", 60) + " = u_y",
		strings.Repeat("sqrt(1 + ", 60) + "u_x" + strings.Repeat(")", 60) + " = u_y",
		strings.Repeat("sin(1 + ", 60) + "u_x" + strings.Repeat(")", 60) + " = u_y",
		strings.Repeat("abs(u_y - ", 40) + "u_x" + strings.Repeat(")", 40) + " = u_y",
		"d_{xxxxxxxx}(1/" + ten + ") = u_y",
		"d_{xxxxxxxx}(sqrt(" + ten + ") exp(" + ten + ")) = u_y",
		"euler(sqrt(1 + u_xx^2 + u_yy^2 + u_xy^2)/(1 + u_x^2)) = u_y",
		"c^999999 u_x = u_x",
	} {
		claim, ok := tryState(t, plane, states)
		if !ok {
			continue
		}
		start := time.Now()
		var before, after runtime.MemStats
		runtime.ReadMemStats(&before)
		rec, err := decided(t, claim)
		runtime.ReadMemStats(&after)
		assert.Less(t, after.HeapSys, uint64(1<<30), states)
		if err == nil && rec.Verdict == identity.Proved {
			t.Errorf("%s is proved", states)
		}
		t.Logf("%v %.60s: %v", time.Since(start).Round(time.Millisecond), states, verdictOf(rec, err))
	}
}

func verdictOf(rec *identity.Record, err error) string {
	if err != nil {
		return err.Error()
	}
	return string(rec.Verdict) + " " + rec.Reason
}

func TestDecideStopsWithItsContext(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	for _, states := range []string{"u_x = u_y", "u_x^2 >= u_y", "u_x^2 = 0"} {
		_, err := identity.Decide(ctx, state(t, plane, states), identity.DefaultOptions())
		require.ErrorIs(t, err, context.Canceled, states)
	}
	ctx, cancel = context.WithTimeout(context.Background(), 50*time.Millisecond)
	defer cancel()
	c := state(t, plane, "(u + u_x + u_y + u_xx + u_xy + 1)^14 (u - u_x + 2)^9 + d_{xxx}((u + u_x + u_y)^12) = 0")
	done := make(chan error, 1)
	go func() {
		_, err := identity.Decide(ctx, c, identity.DefaultOptions())
		done <- err
	}()
	select {
	case <-done:
	case <-time.After(2 * time.Minute):
		t.Fatal("a cancelled decision goes on")
	}
}

// The name of a function holds those inside it, twice for a hyperbolic one: it
// stays short all the same.
func TestNestedFunctionsStaySmall(t *testing.T) {
	for _, f := range []string{"sinh", "cosh", "tanh", "exp", "log", "erf", "sqrt"} {
		text := "u_x"
		for range 40 {
			text = f + "(" + text + ")"
		}
		rec, err := decided(t, state(t, plane, text+" = u_y"))
		require.NoError(t, err, f)
		assert.NotEqual(t, identity.Proved, rec.Verdict, f)
		assert.Less(t, len(rec.Reason)+len(rec.Remainder), 10_000, f)
	}
}
