package identity_test

import (
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// A well or an equation written with a norm is the one without its root.
func TestWellsWithRoots(t *testing.T) {
	proved, refuted, open, supported := identity.Proved, identity.Refuted, identity.Open, identity.Supported
	field := map[string]map[string]string{"S": {
		"x": "u_x (1 - u_y^2) - u_x^3/3", "y": "-u_y (1 - u_x^2) + u_y^3/3",
	}}
	for _, c := range []struct {
		residual, states string
		want             []identity.Verdict
	}{
		{"norm(u_x, u_y) - 1", "entropy(S)", []identity.Verdict{proved}},
		{"1 - norm(u_x, u_y)", "entropy(S)", []identity.Verdict{proved}},
		{"norm(u_x, u_y) - 2", "entropy(S)", []identity.Verdict{refuted}},
		{"norm(u_x, u_y) + 1", "entropy(S)", []identity.Verdict{open, proved}}, // no zeros
	} {
		rec, err := decided(t, state(t, wellOf(c.residual, field), c.states))
		require.NoError(t, err)
		assert.Contains(t, c.want, rec.Verdict, "%s: %s: %+v", c.residual, c.states, rec)
	}
	for _, c := range []struct {
		residual, states string
		want             []identity.Verdict
	}{
		{"norm(u_x, u_y) - 1", "{u_x} [u_x] + {u_y} [u_y] = 0", []identity.Verdict{proved}},
		{"norm(u_x, u_y) - 1", "[u_x] = 0", []identity.Verdict{refuted}},
		{"norm(u_x, u_y) - 1", "[u_x]^2 + [u_y]^2 <= 3", []identity.Verdict{refuted}},
		{"norm(u_x, u_y) - 1", "[u_x]^2 + [u_y]^2 <= 4", []identity.Verdict{proved, supported}},
		{"norm(u_x, u_y) - sqrt(2)", "[u_x]^2 + [u_y]^2 <= 7", []identity.Verdict{refuted}},
		{"abs(u_x) - 1", "[u_x] = 2", []identity.Verdict{refuted}},
		{"abs(u_x) - 1", "[u_x^2] = 0", []identity.Verdict{proved}},
		{"norm(u_x, u_y) - u_x", "[u_y] = 0", []identity.Verdict{open, proved}},
		{"norm(u_x, u_y) + u_x", "{u_x} <= 0", []identity.Verdict{open, proved, supported}},
	} {
		rec, err := decided(t, state(t, wellOf(c.residual, nil), c.states, atJump))
		require.NoError(t, err)
		assert.Contains(t, c.want, rec.Verdict, "%s: %s: %+v", c.residual, c.states, rec)
	}
	for _, c := range []struct {
		modulo, states string
		want           []identity.Verdict
	}{
		{"sqrt(u_x^2 + u_y^2) - 1", "u_xx u_yy = u_xy^2", []identity.Verdict{proved}},
		{"sqrt(u_x^2 + u_y^2) - 1", "u_xx u_yy = 2 u_xy^2", []identity.Verdict{refuted}},
		{"sqrt(u_x^2 + u_y^2) - 1", "u_x u_xx + u_y u_xy = 0", []identity.Verdict{proved}},
		{"sqrt(u_x^2 + u_y^2) - 1", "u_x^2 + u_y^2 <= 1", []identity.Verdict{proved}},
		{"abs(u_x) - abs(u_y)", "u_x^2 = u_y^2", []identity.Verdict{proved}},
		{"abs(u_x) - u_y^3", "(u_x^2 - u_y^6) (1 + u_xx^2) = 0", []identity.Verdict{proved, open}},
		{"(abs(u_x) - abs(u_y)) (1 + u)", "(u_x^2 - u_y^2) (1 + u) = 0", []identity.Verdict{proved, open}},
		{"(abs(u_x) - abs(u_y)) (1 + u)", "(u_x^2 - u_y^2) (1 + u) (1 + u_xx^2) = 0", []identity.Verdict{proved, open}},
		{"abs(u_x) - u_y^3", "u_x^2 = u_y^6", []identity.Verdict{proved, open}},
		{"abs(u_x) - u_y^3 - u_y", "u_y >= 0", []identity.Verdict{proved, open, supported}},
		{"abs(u_x) + abs(u_y) - abs(u_x u_y + u_y)", "u_x u_xx = 0", []identity.Verdict{refuted, open}},
		{"abs(u_x) - abs(u_y) - abs(u) + abs(u + 1)", "abs(u_x) - abs(u_y) + 1 >= 0", []identity.Verdict{proved, open, supported}},
		{"u_x + abs(u_x) - u_y", "u_y >= 0", []identity.Verdict{proved, open, supported}},
		{"u_x + abs(u_x) - u_y", "u_y (u_y - 2 u_x) = 0", []identity.Verdict{proved, open}},
		{"u_x u_y + abs(u_x) - u_y", "abs(u_x) = (1 - u_x) u_y", []identity.Verdict{proved, open}},
		{"abs(u_x) - abs(u_y)", "u_x = u_y", []identity.Verdict{refuted}},
		{"sqrt(u_x^2 + 1) - u_y", "u_y^2 = u_x^2 + 1", []identity.Verdict{proved}},
		{"sqrt(u_x^2 + 1) - u_y", "u_y >= 0", []identity.Verdict{proved, open}},
		{"sqrt(u_x^2 + 1) + u_y", "u_y <= 0", []identity.Verdict{proved, open}},
	} {
		rec, err := decided(t, state(t, plane, c.states, modulo(t, c.modulo)))
		require.NoError(t, err)
		assert.Contains(t, c.want, rec.Verdict, "%s: %s: %+v", c.modulo, c.states, rec)
	}
}

// A factor that may vanish does not leave a root alone: where it does, the
// rest under the root may be negative.
func TestRootsOfProductsThatVanish(t *testing.T) {
	for _, c := range []struct {
		assume, states string
		holds          bool
	}{
		{"u_x >= 0", "u_y + sqrt(u_x u_y) >= 0", false},
		{"u_x >= 0", "u_y >= 0*sqrt(u_x u_y)", false},
		{"u_x >= 0", "u_y >= 0*sqrt(u_x^3 u_y)", false},
		{"u_x >= 0", "u_y >= 0*(u_x u_y)^(1/3)", false},
		{"u_x >= 0", "u_y >= 0*(u_x u_y)^(1/4)", false},
		{"u_x >= 0", "abs(u_y) = u_y + 0*sqrt(u_x u_y)", false},
		{"u_x >= 0", "u_y + a >= 0*sqrt(u_x u_y + a u_x)", false},
		{"u_x <= 0", "u_y <= 0*sqrt(u_x u_y)", false},
		{"eps > 0", "u_y >= 0*sqrt(abs(u_x) u_y)", false},
		{"eps > 0", "u_y >= 0*sqrt(norm(u_x, a) u_y)", false},
		{"u_x > 0", "u_y + sqrt(u_x u_y) >= 0", true},
		{"u_x > 0", "abs(u_y) = u_y + 0*sqrt(u_x u_y)", true},
		{"u_x >= 0", "sqrt(u_x u_y) = sqrt(u_x) sqrt(u_y)", true}, // the right side asks for u_y >= 0
		{"u_x >= 0", "sqrt(u_x u_y^2) = sqrt(u_x) abs(u_y)", true},
	} {
		rec, err := decided(t, state(t, plane, c.states, assuming(t, c.assume)))
		require.NoError(t, err)
		assert.Equal(t, c.holds, rec.Verdict == identity.Proved, "%s: %s: %+v", c.assume, c.states, rec)
	}
}
