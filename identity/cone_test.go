package identity_test

import (
	"testing"

	"creaseproof/identity"
	"creaseproof/identity/certificate"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// A target that divides what is assumed; beside each true claim a false one.
func TestTargetsThatDivideAnAssumption(t *testing.T) {
	for _, c := range []struct {
		states string
		assume []string
		want   identity.Verdict
	}{
		{"u_x >= 1", []string{"u_x^2 >= 1", "u_x >= 0"}, identity.Proved},
		{"u_x >= 1", []string{"u_x^2 >= 1"}, identity.Refuted},
		{"u_x >= 1", []string{"u_x^2 >= 999999/1000000", "u_x >= 0"}, identity.Refuted},
		{"u_x >= 0", []string{"u_x^3 >= 0"}, identity.Proved},
		{"u_x >= 0", []string{"u_x^3 >= -1/10^12"}, identity.Refuted},
		{"u_x >= 0", []string{"u_x^4 >= 0"}, identity.Refuted},
		{"u_x <= 1", []string{"u_x^3 <= 1"}, identity.Proved},
		{"u_x <= u_y", []string{"u_x^3 <= u_y^3"}, identity.Proved},
		{"u_x >= u_y", []string{"u_x^2 >= u_y^2", "u_x >= 0"}, identity.Proved},
		{"u_x >= u_y", []string{"u_x^2 >= u_y^2", "u_x >= -1/1000000"}, identity.Refuted},
		{"u_x >= 0", []string{"u_x u_y >= 0", "u_y > 0"}, identity.Proved},
		{"u_x >= 0", []string{"u_x u_y >= 0", "u_y >= 0"}, identity.Refuted},
		{"u_x >= 0", []string{"u_x^5 (1 + u_y^2) >= 0"}, identity.Proved},
		{"u_x >= 0", []string{"u_x^5 u_y^2 >= 0"}, identity.Refuted},
	} {
		rec := decide(t, state(t, plane, c.states, assuming(t, c.assume...)))
		assert.Equal(t, c.want, rec.Verdict, "%s: %v: %+v", c.states, c.assume, rec)
		if rec.Verdict == identity.Proved {
			require.NotNil(t, rec.Certificate, c.states)
			assert.NoError(t, certificate.Check(rec.Reduced, rec.Certificate), c.states)
		}
	}
}

// Equations that are assumed hold with all their real consequences, and false
// claims are refuted at real algebraic points of them.
func TestRealConsequencesOfAssumptions(t *testing.T) {
	for _, c := range []struct {
		states string
		assume []string
		want   identity.Verdict
	}{
		{"u_x = 0", []string{"u_x^2 = 0"}, identity.Proved},
		{"u_x = 0", []string{"u_x^3 = 0"}, identity.Proved},
		{"u_x = 1", []string{"u_x^2 = 0"}, identity.Refuted},
		{"u_x = 0", []string{"u_x^2 + u_y^2 = 0"}, identity.Proved},
		{"u_x = 0", []string{"u_x^2 + u_y^2 <= 0"}, identity.Proved},
		{"u_x = 0", []string{"-u_x^2 - u_y^2 >= 0"}, identity.Proved},
		{"u_x = 0", []string{"u_x^2 - u_y^2 <= 0"}, identity.Refuted},
		{"u_x = 0", []string{"u_x^2 + u_y^2 >= 0"}, identity.Refuted},
		{"u_x = u_y", []string{"(u_x - u_y)^2 + a^2 <= 0"}, identity.Proved},
		{"u_x = u_y", []string{"u_x^2 + a^2 = -1"}, identity.Open},
		{"u_x = u_y", []string{"u_x^2 + a^2 <= -1"}, identity.Open},
		{"u_x <= 1", []string{"u_x^2 = 2"}, identity.Refuted},
		{"u_x = 1", []string{"u_x^2 = 2"}, identity.Refuted},
		{"u_x^2 = 2", []string{"u_x^2 = 2"}, identity.Proved},
		{"a <= 1", []string{"a^2 = 2"}, identity.Refuted},
		{"a <= 3/2", []string{"a^2 = 2"}, identity.Proved},
		{"u_x <= 0", []string{"u_x^2 = 2", "u_x <= 0"}, identity.Proved},
		{"u_x >= -1", []string{"u_x^2 = 2", "u_x <= 0"}, identity.Refuted},
		{"u_x >= u_y", []string{"u_x^2 = 2", "u_y^2 = 3"}, identity.Refuted},
		{"u_x + u_y <= 7/5", []string{"u_x^2 + u_y^2 = 1"}, identity.Refuted},
		{"u_x + u_y <= 3/2", []string{"u_x^2 + u_y^2 = 1"}, identity.Proved},
		{"u_x = u_y", []string{"u_x^2 + u_y^2 = 1"}, identity.Refuted},
	} {
		rec := decide(t, state(t, plane, c.states, assuming(t, c.assume...)))
		assert.Equal(t, c.want, rec.Verdict, "%s: %v: %+v", c.states, c.assume, rec)
	}
}

// Sums of even powers and of products are read off as they are written.
func TestSquaresAsTheyAreWritten(t *testing.T) {
	for states, want := range map[string]identity.Verdict{
		"(u_x + u_y + a + b + u_xx + u_yy + u_xy)^8 >= 0":                                       identity.Proved,
		"(u_x + u_y + a + b + u_xx + u_yy + u_xy)^6 + 3 (u_x - u_y)^2 (a - b + u_xx)^4 >= 0":    identity.Proved,
		"(u_x + u_y + a + b + u_xx)^4 + (u_x^2 + 1)^3 (u_y + u_x + b)^4 >= -1":                  identity.Proved,
		"-(u_x + u_y + a + b + u_xx)^4 <= (u_x^2 - u_x u_y + u_y^2) (u_y + u_x + b)^4/3":        identity.Proved,
		"(u_x + u_y + a + b + u_xx)^4 >= 1/10^9":                                                identity.Refuted,
		"(u_x + u_y + a + b + u_xx)^5 >= 0":                                                     identity.Refuted,
		"(u_x + u_y + a + b + u_xx)^4 >= (u_x + u_y + a + b + u_xy)^4":                          identity.Refuted,
		"(u_x^2 - 1/10^9) (u_x + u_y + a + b + u_xx)^4 >= 0":                                    identity.Refuted,
		"(-u_x^2 - 1) (u_x + u_y + a + b + u_xx)^4 (-1 - u_y^2) >= 0":                           identity.Proved,
		"(-u_x^2 - 1) (u_x + u_y + a + b + u_xx)^4 (1 + u_y^2) >= 0":                            identity.Refuted,
		"(u_x + u_y + a + b + u_xx)^4/(-2) >= 0":                                                identity.Refuted,
		"(u_x + u_y + a + b + u_xx)^4 - 1/10^9 + (u_x + u_y + a + b + u_xx - 1/1000)^4/1 >= 0 ": identity.Refuted,
	} {
		rec := decide(t, state(t, plane, states))
		assert.Equal(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
}
