package identity_test

import (
	"testing"

	"creaseproof/entropy/jet"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Equations hold on their real zeros, which may be fewer than the polynomial
// shows, or singular points of it.
func TestRealZeros(t *testing.T) {
	proved, refuted, open, supported := identity.Proved, identity.Refuted, identity.Open, identity.Supported
	for _, c := range []struct {
		modulo, states string
		want           []identity.Verdict
	}{
		{"u_x^2 + u_y^2", "u_x = 0", []identity.Verdict{proved}},
		{"u_x^2 + u_y^2", "u_xx = 0", []identity.Verdict{proved}},
		{"u_x^2 + u_y^2", "u_x = 1", []identity.Verdict{refuted}},
		{"u_x^2 + u_y^2", "u = 0", []identity.Verdict{refuted}},
		{"u_x^2 + u_y^2", "u_x >= 1/1000", []identity.Verdict{refuted}},
		{"(u_x^2 - 1)^2 + u_y^2", "u_x^2 = 1", []identity.Verdict{proved}},
		{"(u_x^2 - 1)^2 + u_y^2", "u_xx = 0", []identity.Verdict{proved, open}},
		{"(u_x^2 - 1)^2 + u_y^2", "u_x = 1", []identity.Verdict{refuted}},
		{"(u_x^2 - 2)^2 + u_y^2", "u_x = 1", []identity.Verdict{refuted}},
		{"u_y^2 + u_x^2 (u_x^2 - 1)^2", "u_x <= 1/2", []identity.Verdict{refuted}},
		{"u_y^2 + u_x^2 (u_x^2 - 1)^2", "u_x^2 <= 1", []identity.Verdict{proved, open, supported}},
		{"eps u_x^2 + u_y^2", "u_x = 0", []identity.Verdict{proved}},
		{"a u_x^2 + u_y^2", "u_x = 0", []identity.Verdict{refuted}}, // a = 0, or negative
		{"a^2 u_x^2 + u_y^2", "u_x = 0", []identity.Verdict{refuted}},
		{"a^2 u_x^2 + u_y^2", "u_y = 0", []identity.Verdict{proved}},
		{"a^2 u_x^2 + u_y^2", "a u_xx = 0", []identity.Verdict{proved}},
		{"u_x^2 + u_x u_y + u_y^2", "u_x = 0", []identity.Verdict{proved}},
		{"u_x^2 + 2 u_x u_y + u_y^2", "u_x = 0", []identity.Verdict{refuted}},
		{"u_x^2 + 3 u_x u_y + u_y^2", "u_x = 0", []identity.Verdict{refuted}},
		{"u_x^2 + 1", "u_x = 1", []identity.Verdict{open}}, // about no jets
		{"u_x^2 + u_x + 1", "u_x >= 1", []identity.Verdict{open}},
		{"u_xx^2 + u_xy^2", "u_xxy = 0", []identity.Verdict{proved}},
		{"u_xx^2 + u_xy^2", "u_yy = 0", []identity.Verdict{refuted}},
		{"u_x^2 + u_y^2 + x^2", "u_x = 1", []identity.Verdict{open}}, // at one place, so about no jets
		{"x^2 u_x^2 + u_y^2", "u_y = 0", []identity.Verdict{proved}},
		{"u_x^2 + x u_y^2", "u_y = 0", []identity.Verdict{refuted, open}},
		{"u_x^2 - u_y^4", "u_xx = 0", []identity.Verdict{refuted}},
		// An isolated point and a cusp.
		{"u_y^2 - u_x^2 (u_x - 1)", "u_x >= 1", []identity.Verdict{refuted}},
		{"u_y^2 - u_x^2 (u_x - 1)", "u_x^2 (u_x - 1) >= 0", []identity.Verdict{proved, supported}},
		{"u_x^2 - u_y^3", "u_y <= 100", []identity.Verdict{refuted}},
		{"u_x^2 - u_y^3", "u_y >= 0", []identity.Verdict{proved, supported}},
		{"u_x u_y", "u_xy = 0", []identity.Verdict{proved, open}},
		{"u_x u_y", "u_x = 0", []identity.Verdict{refuted}},
	} {
		rec, err := decided(t, state(t, plane, c.states, modulo(t, c.modulo)))
		require.NoError(t, err)
		assert.Contains(t, c.want, rec.Verdict, "%s: %s: %+v", c.modulo, c.states, rec)
	}
	// What is not negative at the jet alone may be so nearby: u_x = -u_y^2
	// where u_x = 0 says that u_y = 0 at the jet, so that u_xxx = 4 D_x(u_y^2 u_yy)
	// vanishes, and nothing of u_yy.
	for states, want := range map[string][]identity.Verdict{
		"u_xxx = 0": {proved}, "u_yy = 0": {refuted, open}, "u_xyy = 0": {refuted, open}, "u_xyy = -2 u_yy^2": {proved, open},
	} {
		rec := decide(t, state(t, plane, states, modulo(t, "u_x + u_y^2"), assuming(t, "u_x >= 0")))
		assert.Contains(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
	rec := decide(t, state(t, plane, "u_y = 1", modulo(t, "u_x^2 + u_y^2 - 1"), restricting(t, 0, jet.Index{1}, "1/2")))
	assert.Equal(t, refuted, rec.Verdict, "%+v", rec)

	for _, c := range []struct {
		residual, x string
		want        identity.Verdict
	}{
		{"(u_x^2 - 2)^2 + u_y^2", "u_x^3/3 - 2 u_x", proved},
		{"(u_x^2 - 2)^2 + u_y^2", "u_x^3/3 - 3 u_x", refuted},
		{"u_x^2 + (u_x u_y - 1)^2", "u_x", proved}, // no zeros
		{"u_x^2 + (u_x u_y - 1)^2 - 1", "u_x", refuted},
		{"u_x^2 + u_y^2", "u_x^2", proved},
		{"u_x^2 + u_y^2", "u_x^2 + u_x", refuted},
	} {
		rec := decide(t, state(t, wellOf(c.residual, map[string]map[string]string{"S": {"x": c.x, "y": "0"}}), "entropy(S)"))
		assert.Equal(t, c.want, rec.Verdict, "%s: %s: %+v", c.residual, c.x, rec)
	}
	for _, c := range []struct {
		residual, states string
		want             []identity.Verdict
	}{
		{"(u_x^2 - 1)^2 + u_y^2", "[u_y] = 0", []identity.Verdict{proved}},
		{"(u_x^2 - 1)^2 + u_y^2", "abs(nu_x) = 1", []identity.Verdict{proved, open}},
		{"(u_x^2 - 1)^2 + u_y^2", "[u_x]^2 <= 4", []identity.Verdict{proved}},
		{"(u_x^2 - 1)^2 + u_y^2", "[u_x]^2 <= 3", []identity.Verdict{refuted}},
		{"(u_x^2 - 2)^2 + (u_y^2 - 3)^2", "[u_x]^2 <= 7", []identity.Verdict{refuted}},
		{"u_x^2 + 1", "[u_x] = 3", []identity.Verdict{open}},
		{"u_x^2 + u_y^2", "nu_x >= 5", []identity.Verdict{open}}, // the well is a point
		{"(u_x - 1)^2 + u_y^2", "[u_x] = 0", []identity.Verdict{open}},
		{"(u_x^2 - 1)^2 + (u_y - u_x)^2", "nu_x = nu_y", []identity.Verdict{proved}},
		{"(u_x^2 - 1)^2 + (u_y - u_x)^2", "nu_x >= 0", []identity.Verdict{refuted}},
	} {
		rec := decide(t, state(t, wellOf(c.residual, nil), c.states, atJump))
		assert.Contains(t, c.want, rec.Verdict, "%s: %s: %+v", c.residual, c.states, rec)
	}
}

// What is divided by must not vanish on all zeros of the equations.
func TestDivisionByAnEquation(t *testing.T) {
	for _, c := range []struct{ modulo, states string }{
		{"u_x^2 - u_y^2", "1/(u_x^2 - u_y^2) >= 0"},
		{"u_x^2 - u_y^2", "(u_x^2 - u_y^2)/(u_x^2 - u_y^2) = 1"},
		{"(u_x^2 - u_y^2) u_x", "(u_x^3 - u_x u_y^2)/(u_x^3 - u_x u_y^2) = 1"},
		{"u_x^2 + u_y^2 - 1", "log((u_x^2 + u_y^2 - 1)^2) = 2 log(abs(u_x^2 + u_y^2 - 1))"},
	} {
		rec, err := decided(t, state(t, plane, c.states, modulo(t, c.modulo)))
		if err == nil {
			assert.Equal(t, identity.Open, rec.Verdict, "%s: %s: %+v", c.modulo, c.states, rec)
		}
	}
}
