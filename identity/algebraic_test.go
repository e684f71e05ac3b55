package identity_test

import (
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
)

// Algebraic numbers are compared with zero by a polynomial that vanishes at
// their difference. The radicals are elementary, from memory.
func TestAlgebraicNumbers(t *testing.T) {
	for states, want := range map[string]identity.Verdict{
		"sin(pi/5)^2 = (5 - sqrt(5))/8":                                  identity.Proved,
		"sin(pi/5)^2 = (5 + sqrt(5))/8":                                  identity.Refuted,
		"tan(pi/8) = sqrt(2) - 1":                                        identity.Proved,
		"cos(pi/5) = (1 + sqrt(5))/4":                                    identity.Proved,
		"sin(pi/10) = (sqrt(5) - 1)/4":                                   identity.Proved,
		"sin(pi/10) <= (sqrt(5) - 1)/4":                                  identity.Proved,
		"sin(pi/10) >= (sqrt(5) - 1)/4":                                  identity.Proved,
		"u_x sin(pi/10) = u_x (sqrt(5) - 1)/4":                           identity.Proved,
		"(2 + sqrt(5))^(1/3) + (sqrt(5) - 2)^(1/3) = sqrt(5)":            identity.Proved,
		"(2 + sqrt(5))^(1/3) + (sqrt(5) - 2)^(1/3) = -sqrt(5)":           identity.Refuted,
		"sqrt(2 + sqrt(3)) = (sqrt(6) + sqrt(2))/2":                      identity.Proved,
		"sqrt(2 + sqrt(3)) = (sqrt(6) - sqrt(2))/2":                      identity.Refuted,
		"u_x sin(pi/10) + u_y sqrt(2) = u_x (sqrt(5) - 1)/4 + 99/70*u_y": identity.Refuted,
	} {
		rec := decide(t, state(t, planarAngles, states))
		assert.Equal(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
	// Far beyond the digits that enclosures have.
	rec := decide(t, state(t, planarAngles, "sin(pi/5)^2 = (5 - sqrt(5))/8 + 1/10^300"))
	assert.NotEqual(t, identity.Proved, rec.Verdict, "%+v", rec)
}
