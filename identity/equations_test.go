package identity_test

import (
	"context"
	"testing"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

type edit = func(*identity.Claim)

func modulo(t testing.TB, formulas ...string) edit {
	return func(c *identity.Claim) {
		for _, f := range formulas {
			c.Modulo = append(c.Modulo, expr(t, c.Setting, f))
		}
	}
}

func assuming(t testing.TB, list ...string) edit {
	return func(c *identity.Claim) {
		for _, f := range list {
			c.Assume = append(c.Assume, assumption(t, c.Setting, f))
		}
	}
}

func given(t testing.TB, unknown int, text string) edit {
	return func(c *identity.Claim) {
		if c.Given == nil {
			c.Given = map[int]formula.Node{}
		}
		c.Given[unknown] = expr(t, c.Setting, text)
	}
}

func restricting(t testing.TB, unknown int, j jet.Index, text string) edit {
	return func(c *identity.Claim) {
		c.Restrict = append(c.Restrict, identity.Restriction{Unknown: unknown, Index: j, Value: expr(t, c.Setting, text)})
	}
}

// decided is a record, or the error that the claim gave.
func decided(t testing.TB, c *identity.Claim) (*identity.Record, error) {
	t.Helper()
	rec, err := identity.Decide(context.Background(), c, identity.DefaultOptions())
	if err == nil {
		require.NotEmpty(t, rec.Verdict)
	}
	return rec, err
}

var (
	plane = theory{coordinates: []string{"x", "y"}, unknowns: []string{"u"}, constants: []string{"eps", "a", "b"}, assume: []string{"eps > 0"}}
	pair  = theory{coordinates: []string{"x", "y"}, unknowns: []string{"u", "v"}, constants: []string{"eps", "a", "b"}, assume: []string{"eps > 0"}}
)

// Claims on the zeros of equations and of all their derivatives. A true claim
// must not be refuted, however well it hides.
func TestModuloEquations(t *testing.T) {
	for _, c := range []struct {
		name   string
		th     theory
		states string
		edits  []edit
		want   []identity.Verdict
	}{
		{"assumption on a derivative that the equation determines", plane, "abs(u_x^2 - 1) = u_x^2 - 1",
			[]edit{modulo(t, "u_y - u_x^2 + 1"), assuming(t, "u_y > 0")}, []identity.Verdict{identity.Proved, identity.Open}},
		{"the same, false without the assumption", plane, "abs(u_x^2 - 1) = u_x^2 - 1",
			[]edit{modulo(t, "u_y - u_x^2 + 1")}, []identity.Verdict{identity.Refuted}},
		{"hidden consequence: u_xy = u^2 = 2 u^2", plane, "u = 0",
			[]edit{modulo(t, "u_x - u", "u_y - u^2")}, []identity.Verdict{identity.Open, identity.Proved}},
		{"compatible equations of one unknown", plane, "u_xy = a^2 u",
			[]edit{modulo(t, "u_x - a u", "u_y - a u")}, []identity.Verdict{identity.Proved}},
		{"compatible equations of one unknown, false", plane, "u_xy = a u",
			[]edit{modulo(t, "u_x - a u", "u_y - a u")}, []identity.Verdict{identity.Refuted}},
		{"a square: D(D(u_x^2)) forces u_xx = 0", plane, "u_xx = 0",
			[]edit{modulo(t, "u_x^2")}, []identity.Verdict{identity.Proved}},
		{"a sum of squares: singular real zeros", plane, "u_xx = 0",
			[]edit{modulo(t, "u_x^2 + u_y^2")}, []identity.Verdict{identity.Open, identity.Proved}},
		{"degenerate Hessian on the eikonal equation", plane, "u_xx u_yy - u_xy^2 = 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - 1")}, []identity.Verdict{identity.Proved}},
		{"the same with an irrational radius", plane, "u_xx u_yy - u_xy^2 = 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - sqrt(2)")}, []identity.Verdict{identity.Open, identity.Proved}},
		{"the same with a symbolic radius", plane, "a (u_xx u_yy - u_xy^2) = 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - a")}, []identity.Verdict{identity.Proved}},
		{"the same with a slip", plane, "u_xx u_yy - 2 u_xy^2 = 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - 1")}, []identity.Verdict{identity.Refuted}},
		{"two values of a derivative", plane, "u_xx = 0",
			[]edit{modulo(t, "(u_x - 1) (u_x - 2)")}, []identity.Verdict{identity.Proved}},
		{"product that vanishes", plane, "u_xy = 0",
			[]edit{modulo(t, "u_x u_y")}, []identity.Verdict{identity.Open, identity.Proved}},
		{"on a surface of the gradient and u", plane, "u_x = 0",
			[]edit{modulo(t, "u^2 - u_y^2")}, []identity.Verdict{identity.Refuted}},
		{"eikonal of two unknowns", pair, "u_x = v_x",
			[]edit{modulo(t, "u_x^2 + u_y^2 - 1", "v_x^2 + v_y^2 - 1")}, []identity.Verdict{identity.Refuted}},
		{"one unknown a function of the other", pair, "v_x = u u_x",
			[]edit{modulo(t, "v - u^2")}, []identity.Verdict{identity.Refuted}},
		{"one unknown a function of the other: the Jacobian", pair, "u_x v_y - u_y v_x = 0",
			[]edit{modulo(t, "v - u^2")}, []identity.Verdict{identity.Proved, identity.Open}},
		{"a finite set of values", pair, "u_x = v_x",
			[]edit{modulo(t, "u_x^2 - v_x", "u_x - v_x^2")}, []identity.Verdict{identity.Open, identity.Proved}},
		{"Hessian times gradient", plane, "u_x u_xx + u_y u_xy = 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - 1")}, []identity.Verdict{identity.Proved}},
		{"Hessian times gradient as an inequality", plane, "u_x u_xx + u_y u_xy <= 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - 1")}, []identity.Verdict{identity.Proved}},
		{"Hessian determinant as an inequality", plane, "u_xx u_yy - u_xy^2 <= 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - 1")}, []identity.Verdict{identity.Supported, identity.Open, identity.Proved}},
		{"Laplacian on the eikonal equation", plane, "u_xx + u_yy = 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - 1")}, []identity.Verdict{identity.Refuted}},
		{"Laplacian on the eikonal equation, inequality", plane, "u_xx + u_yy <= 0",
			[]edit{modulo(t, "u_x^2 + u_y^2 - 1")}, []identity.Verdict{identity.Refuted}},
		{"quartic, no rational points but the axes", plane, "u_x^2 u_y^2 = 0",
			[]edit{modulo(t, "u_x^4 + u_y^4 - 1")}, []identity.Verdict{identity.Refuted}},
		{"quartic", plane, "u_x^8 = (1 - u_y^4)^2",
			[]edit{modulo(t, "u_x^4 + u_y^4 - 1")}, []identity.Verdict{identity.Proved}},
		{"quartic, derivative", plane, "u_x^3 u_xy + u_y^3 u_yy = 0",
			[]edit{modulo(t, "u_x^4 + u_y^4 - 1")}, []identity.Verdict{identity.Proved}},
		{"two equations, the second read after the first is solved", pair, "u_xy = u",
			[]edit{modulo(t, "u_y - v", "v_x + u_xy - 2 u")}, []identity.Verdict{identity.Proved}},
		{"Cauchy-Riemann: harmonic", pair, "u_xx + u_yy = 0",
			[]edit{modulo(t, "u_x - v_y", "u_y + v_x")}, []identity.Verdict{identity.Proved}},
		{"Cauchy-Riemann: not constant", pair, "u_xx = 0",
			[]edit{modulo(t, "u_x - v_y", "u_y + v_x")}, []identity.Verdict{identity.Refuted, identity.Open}},
		{"no zeros at all", plane, "u_x = 1",
			[]edit{modulo(t, "u_x^2 + 1")}, []identity.Verdict{identity.Open, identity.Proved}},
		{"an equation in coordinates alone has no zeros with its derivatives", plane, "u_x = 1",
			[]edit{modulo(t, "x - 1")}, []identity.Verdict{identity.Open, identity.Proved}},
		{"an equation of constants", plane, "a^2 u = u",
			[]edit{modulo(t, "a^2 - 1")}, []identity.Verdict{identity.Proved}},
	} {
		t.Run(c.name, func(t *testing.T) {
			rec, err := decided(t, state(t, c.th, c.states, c.edits...))
			require.NoError(t, err)
			assert.Contains(t, c.want, rec.Verdict, "%+v", rec)
		})
	}
}

func TestModuloIsRefusedWhereItMeansNothing(t *testing.T) {
	_, err := decided(t, state(t, eikonal, "[u_x] = 0", atJump, modulo(t, "u_x")))
	require.Error(t, err)
	_, err = decided(t, state(t, plane, "u_x = 0", divergence, modulo(t, "u_x")))
	require.Error(t, err)
}

// With u_y held constant u_x^2 = D_y(y u_x^2): the Euler expression does not
// exclude a divergence there.
func TestDivergenceUnderARestriction(t *testing.T) {
	c := state(t, plane, "u_x^2 = 0", divergence, restricting(t, 0, jet.Index{0, 1}, "1/2"))
	assert.Equal(t, identity.Open, decide(t, c).Verdict)
	c = state(t, plane, "u_x u_xx = 0", divergence, restricting(t, 0, jet.Index{0, 1}, "1/2"))
	assert.Equal(t, identity.Proved, decide(t, c).Verdict)
}

// An Euler expression of an order that jets do not reach is a limit, no fault
// of the claim.
func TestDivergenceBeyondTheOrderOfJets(t *testing.T) {
	rec := decide(t, state(t, plane, "u_xxxxxxxx^2 = 0", divergence))
	assert.Equal(t, identity.Refuted, rec.Verdict)
	rec = decide(t, state(t, plane, "euler(u_xxxxxxxx^2)^2 = 0", divergence))
	assert.Equal(t, identity.Open, rec.Verdict)
	assert.Contains(t, rec.Reason, "order 24")
}

// A trace that equals the other is no jump: on the well u_x = ±1 every jump
// has [u_x]^2 = 4.
func TestTracesDiffer(t *testing.T) {
	line := theory{coordinates: []string{"x"}, unknowns: []string{"u"}, residual: "(1 - u_x^2)/2", bending: "u_xx", energy: "u_x^2"}
	assert.NotEqual(t, identity.Refuted, decide(t, state(t, line, "[u_x]^2 = 4", atJump)).Verdict)
	assert.NotEqual(t, identity.Refuted, decide(t, state(t, line, "[u_x]^2 >= 4", atJump)).Verdict)
	assert.Equal(t, identity.Refuted, decide(t, state(t, line, "[u_x] = 2", atJump)).Verdict)
}
