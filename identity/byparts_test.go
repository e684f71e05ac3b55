package identity_test

import (
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
)

// Terms are integrated by parts, and gaps that are divergences found. What is
// not proved is false: for u of compact support the integral of u u_xx is minus
// that of u_x^2, and that of u_x u_xx is zero.
func TestIntegrationsByParts(t *testing.T) {
	th := theory{coordinates: []string{"x", "y"}, unknowns: []string{"u", "v"}, constants: []string{"a"}}
	for states, holds := range map[string]bool{
		"u_x u_xx <= u_x^2":                true,
		"u_x u_xx <= -u_x^2":               false,
		"u_x u_xx <= 0":                    true,
		"u_x v_y - u_y v_x <= 0":           true,
		"u_x v_y - u_y v_x >= 0":           true,
		"u_x v_y - 2 u_y v_x <= 0":         false,
		"u u_xx <= 0":                      true,
		"u u_xx >= 0":                      false,
		"u u_xx + u_x^2/2 <= 0":            true,
		"u u_xx + 2 u_x^2 <= 0":            false,
		"u u_xx + v v_yy <= 0":             true,
		"u u_xx - v v_yy <= 0":             false,
		"u u_xx + v v_yy <= (u_x - v_y)^2": true,
		"a u u_xx <= 0":                    false,
		"a^2 u u_xx <= 0":                  true,
		"u_xx + u_xxy + u_y u_xy <= u_x^2": true,
		"x u_x <= -u":                      true,
		"x u_x + u <= -1":                  false,
	} {
		rec := decide(t, state(t, th, states, divergence))
		if holds {
			assert.Equal(t, identity.Proved, rec.Verdict, "%s: %+v", states, rec)
			assert.NotEmpty(t, rec.Solution, states)
		} else {
			assert.Equal(t, identity.Open, rec.Verdict, "%s: %+v", states, rec)
		}
	}
}
