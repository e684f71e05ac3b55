package identity_test

import (
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Equations are solved together: what one determines is put into the others,
// and where they determine a derivative twice the difference is an equation.
func TestSystemsAreCompleted(t *testing.T) {
	three := pair
	three.unknowns = []string{"u", "v", "w"}
	proved, refuted, open := identity.Proved, identity.Refuted, identity.Open
	for _, c := range []struct {
		th     theory
		states string
		modulo []string
		want   []identity.Verdict
	}{
		{plane, "u_x = 0", []string{"u_x - u_y", "u_x + u_y"}, []identity.Verdict{proved}},
		{plane, "u_yy = 0", []string{"u_x - u_y", "u_x + u_y"}, []identity.Verdict{proved}},
		{plane, "u = 0", []string{"u_x - u_y", "u_x + u_y"}, []identity.Verdict{refuted}},
		{three, "u_xy = w_yy", []string{"u_x - v_y", "v_x - w_y"}, []identity.Verdict{open, refuted}},
		{three, "u_xx = w_yy", []string{"u_x - v_y", "v_x - w_y"}, []identity.Verdict{proved}},
		{three, "v_y = w_x", []string{"u_x - v", "u_y - w"}, []identity.Verdict{proved}},
		{three, "v_y = 0", []string{"u_x - v", "u_y - w"}, []identity.Verdict{refuted}},
		{three, "u_xy = v", []string{"u_x - v", "u_y - w"}, []identity.Verdict{refuted}},
		{three, "v_y <= 0", []string{"u_x - v", "u_y - w"}, []identity.Verdict{refuted}},
		{plane, "u = 0", []string{"u_x - u", "u_y - u^2"}, []identity.Verdict{proved}},
		{plane, "u_xy = 0", []string{"u_x - u", "u_y - u^2"}, []identity.Verdict{proved}},
		{plane, "u = 1", []string{"u_x - u", "u_y - u^2"}, []identity.Verdict{refuted, open}},
		{plane, "u = 0", []string{"u_x - y", "u_y + x"}, []identity.Verdict{open}}, // no solutions at all
		{plane, "u_x = x", []string{"u_y - x y", "u_x - y^2/2"}, []identity.Verdict{refuted}},
		{plane, "u_x = y^2/2", []string{"u_y - x y", "u_x - y^2/2"}, []identity.Verdict{proved}},
		{plane, "u_x = 0", []string{"u^2 - 9"}, []identity.Verdict{proved}},
		{plane, "u_xx = 0", []string{"u_x^2 - 1"}, []identity.Verdict{proved}},
		{plane, "u_xx = 0", []string{"u_x^3 - u_x"}, []identity.Verdict{proved}},
		{plane, "u_xx u_yy = u_xy^2", []string{"(u_x^2 + u_y^2 - 1)^2"}, []identity.Verdict{proved}},
		{plane, "u_xx u_yy = u_xy^2", []string{"u_x^4 + u_y^4 - 1"}, []identity.Verdict{proved}},
		{plane, "a b (u_xx u_yy - u_xy^2) = 0", []string{"a u_x^2 + b u_y^2 - 1"}, []identity.Verdict{proved}},
		{plane, "u_xx u_yy = 2 u_xy^2", []string{"u_x^4 + u_y^4 - 1"}, []identity.Verdict{refuted}},
		{pair, "u_xx + u_yy = 0", []string{"u_x - v_y", "u_y + v_x"}, []identity.Verdict{proved}},
		{pair, "u_xx = u", []string{"u_x - v", "v_x - u"}, []identity.Verdict{proved}},
		{pair, "u = 0", []string{"u_x - v", "v_x - u"}, []identity.Verdict{refuted}},
		{plane, "u_yy = u", []string{"u_y - u_xx", "u_x - u"}, []identity.Verdict{proved}},
		{plane, "u = 0", []string{"u_y - u_xx", "u_x - u"}, []identity.Verdict{refuted}},
		{plane, "u_yyy = 0", []string{"u_xx - u_yy", "u_xy"}, []identity.Verdict{proved}},
		{plane, "u_xx = 0", []string{"u_xx - u_yy", "u_xy"}, []identity.Verdict{refuted}},
		{pair, "v_yy = 0", []string{"u_x + v_y", "v_x + u_y", "u_y - v_x"}, []identity.Verdict{proved}},
		{pair, "v_y = 0", []string{"u_x + v_y", "v_x + u_y", "u_y - v_x"}, []identity.Verdict{refuted}},
		{plane, "u = 0", []string{"u_x - 1", "u_x - 2"}, []identity.Verdict{open}},
		{plane, "u_x = 0", []string{"u_x - a", "u_x - b"}, []identity.Verdict{refuted}}, // at a = b = u_x
		{plane, "u_x = a", []string{"u_x - a y", "u_y - b x"}, []identity.Verdict{open}},
		{pair, "v_x = 2 u u_x", []string{"v - u^2"}, []identity.Verdict{proved}},
		{pair, "v_x = u u_x", []string{"v - u^2"}, []identity.Verdict{refuted}},
		{pair, "v_x = u_x exp(u)", []string{"v - exp(u)", "u_y - v"}, []identity.Verdict{proved}},
		{pair, "u_yy = v^2", []string{"v - exp(u)", "u_y - v"}, []identity.Verdict{proved}},
		{pair, "u_yy = v", []string{"v - exp(u)", "u_y - v"}, []identity.Verdict{refuted}},
		{pair, "v_xx + v_yy = 0", []string{"u_x - v_y", "u_y + v_x"}, []identity.Verdict{proved}},
	} {
		rec, err := decided(t, state(t, c.th, c.states, modulo(t, c.modulo...)))
		require.NoError(t, err)
		assert.Contains(t, c.want, rec.Verdict, "%s modulo %v: %+v", c.states, c.modulo, rec)
	}
}
