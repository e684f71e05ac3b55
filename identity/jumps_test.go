package identity_test

import (
	"math"
	"testing"

	"creaseproof/entropy/source"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func wellOf(residual string, fields map[string]map[string]string) theory {
	th := plane
	th.residual, th.bending, th.energy = residual, "u_xx + u_yy", "u_x^2"
	th.fields = fields
	return th
}

func TestJumps(t *testing.T) {
	proved, refuted, supported, open := identity.Proved, identity.Refuted, identity.Supported, identity.Open
	one := map[string]map[string]string{"S": {"x": "u_x^2"}}
	for _, c := range []struct {
		name   string
		th     theory
		states string
		want   []identity.Verdict
	}{
		{"production at angle 0", layered, "[Sigma(0)].nu norm([u_x], [u_y], [u_z]) = norm([u_x], [u_y])^2 ([u_x]^2 - [u_y]^2)/12", []identity.Verdict{refuted}}, // one orientation only
		{"production squared at angle 0", layered, "([Sigma(0)].nu)^2 norm([u_x], [u_y], [u_z])^2 = (([u_x]^2 + [u_y]^2) ([u_x]^2 - [u_y]^2)/12)^2", []identity.Verdict{proved}},
		{"production squared at angle pi/4", layered, "([Sigma(pi/4)].nu)^2 norm([u_x], [u_y], [u_z])^2 = (([u_x]^2 + [u_y]^2) [u_x] [u_y]/6)^2", []identity.Verdict{proved}},
		{"production squared, wrong constant", layered, "([Sigma(pi/4)].nu)^2 norm([u_x], [u_y], [u_z])^2 = (([u_x]^2 + [u_y]^2) [u_x] [u_y]/5)^2", []identity.Verdict{refuted}},
		{"planar production squared", eikonal, "([Sigma(0)].nu)^2 = (norm([u_x], [u_y]) ([u_x]^2 - [u_y]^2)/12)^2", []identity.Verdict{proved, open}},
		{"planar production squared, wrong", eikonal, "([Sigma(0)].nu)^2 = (norm([u_x], [u_y]) ([u_x]^2 - [u_y]^2)/6)^2", []identity.Verdict{refuted}},
		{"the orientation drops out of an even power", layered, "([u_x] nu_x + [u_y] nu_y + [u_z] nu_z)^2 = [u_x]^2 + [u_y]^2 + [u_z]^2", []identity.Verdict{proved}},
		{"the normal has length one", layered, "nu_x^2 + nu_y^2 + nu_z^2 = 1", []identity.Verdict{proved}},
		{"the gradient jumps along the normal", layered, "[u_x] nu_y = [u_y] nu_x", []identity.Verdict{proved}},
		{"the well fixes the vertical part", layered, "[u_z] = {u_x} [u_x] + {u_y} [u_y]", []identity.Verdict{proved}},
		{"a horizontal wall carries no jump", layered, "nu_z = nu_x {u_x} + nu_y {u_y}", []identity.Verdict{proved}},
		{"average against jump", layered, "[u_x^2] = 2 {u_x} [u_x]", []identity.Verdict{proved}},
		{"average of a product", layered, "{u_x u_y} = {u_x} {u_y}", []identity.Verdict{refuted}},
		{"average of a product, corrected", layered, "{u_x u_y} = {u_x} {u_y} + [u_x] [u_y]/4", []identity.Verdict{proved}},
		{"means on the circle are orthogonal to jumps", eikonal, "{u_x} [u_x] + {u_y} [u_y] = 0", []identity.Verdict{proved}},
		{"a chord of the circle", eikonal, "[u_x]^2 + [u_y]^2 + 4 {u_x}^2 + 4 {u_y}^2 = 4", []identity.Verdict{proved}},
		{"a chord is no longer than the diameter", eikonal, "[u_x]^2 + [u_y]^2 <= 4", []identity.Verdict{supported, proved}},
		{"a chord may be long", eikonal, "[u_x]^2 + [u_y]^2 <= 39/10", []identity.Verdict{refuted}},
		{"quartic well", wellOf("1 - u_x^4 - u_y^4", one), "[u_x^4 + u_y^4] = 0", []identity.Verdict{proved}},
		{"quartic well: the residual", wellOf("1 - u_x^4 - u_y^4", one), "{u_x^4} + {u_y^4} = 1", []identity.Verdict{proved}},
		{"quartic well, irrational witness", wellOf("1 - u_x^4 - u_y^4", one), "[u_x^2 + u_y^2] = 0", []identity.Verdict{refuted}},
		{"quartic well without rational points, irrational witness", wellOf("3 - u_x^4 - u_y^4", one), "[u_x^2 + u_y^2] = 0", []identity.Verdict{refuted}},
		{"quartic well without rational points", wellOf("3 - u_x^4 - u_y^4", one), "{u_x^4} + {u_y^4} = 3", []identity.Verdict{proved}},
		{"two points", wellOf("(u_x^2 - 1)^2 + u_y^2", one), "[u_x]^2 = 4", []identity.Verdict{proved, open}},
		{"two points, as an inequality", wellOf("(u_x^2 - 1)^2 + u_y^2", one), "[u_x]^2 >= 4", []identity.Verdict{proved, open, supported}},
		{"a double well", wellOf("(1 - u_x^2 - u_y^2)^2", one), "{u_x} [u_x] + {u_y} [u_y] = 0", []identity.Verdict{proved, open}},
	} {
		t.Run(c.name, func(t *testing.T) {
			rec, err := decided(t, state(t, c.th, c.states, atJump))
			require.NoError(t, err)
			assert.Contains(t, c.want, rec.Verdict, "%+v", rec)
			if rec.Verdict == refuted {
				checkTraces(t, c.th, rec)
			}
		})
	}
}

// checkTraces looks, with plain arithmetic, whether the witness is a jump: the
// traces on the well and different, the normal of length one along their
// difference.
func checkTraces(t *testing.T, th theory, rec *identity.Record) {
	t.Helper()
	require.NotNil(t, rec.Witness)
	w := rec.Witness
	set := th.build(t)
	for _, side := range []map[string]string{w.Plus, w.Minus} {
		r := &recheck{t, &identity.Claim{Setting: set}, &identity.Witness{Jet: side}}
		for _, c := range th.coordinates {
			require.Contains(t, side, "u_"+c)
		}
		assert.InDelta(t, 0, r.eval(set.Model.Residual), 1e-12, "%+v", w)
	}
	var q, nu []float64
	size, length := 0.0, 0.0
	for _, c := range th.coordinates {
		q = append(q, number(t, w.Plus["u_"+c])-number(t, w.Minus["u_"+c]))
		nu = append(nu, number(t, w.Normal[c]))
		size, length = math.Hypot(size, q[len(q)-1]), math.Hypot(length, nu[len(nu)-1])
	}
	assert.Positive(t, size)
	assert.InDelta(t, 1, length, 1e-12)
	for i := range q {
		for k := range q {
			assert.InDelta(t, q[i]*nu[k], q[k]*nu[i], 1e-9*size)
		}
	}
}

func TestBothOrientationsAreTried(t *testing.T) {
	// True for one orientation only: [S].nu is odd in the normal.
	rec := decide(t, state(t, layered, "[u_x] nu_x >= 0", atJump))
	assert.Equal(t, identity.Refuted, rec.Verdict)
	rec = decide(t, state(t, layered, "[u_x] nu_x <= 0", atJump))
	assert.Equal(t, identity.Refuted, rec.Verdict)
	rec = decide(t, state(t, layered, "([u_x] nu_x)^2 >= 0", atJump))
	assert.Equal(t, identity.Proved, rec.Verdict)
}

func TestJumpsThatAreRefused(t *testing.T) {
	for _, states := range []string{"u_x = 0", "[u_xx] = 0", "[[u_x]] = 0", "d_x([u_x]) = 0"} {
		claim, ok := tryState(t, layered, states, atJump)
		if !ok {
			continue // the parser refuses it
		}
		rec, err := decided(t, claim)
		if err == nil {
			assert.Equal(t, identity.Open, rec.Verdict, states)
		}
	}
	noWell := layered
	noWell.residual = ""
	_, err := decided(t, state(t, noWell, "[u_x] = 0", atJump))
	assert.Error(t, err)
	second := wellOf("u_xx", nil)
	rec, err := decided(t, state(t, second, "[u_x] = 0", atJump))
	require.NoError(t, err)
	assert.Equal(t, identity.Open, rec.Verdict)
}

func tryState(t testing.TB, th theory, states string, edits ...edit) (*identity.Claim, bool) {
	t.Helper()
	c := &identity.Claim{Name: states, Setting: th.build(t)}
	for _, f := range edits {
		f(c)
	}
	sc, err := c.Setting.Scope(c.Jump)
	require.NoError(t, err)
	c.Statement, err = sc.ParseStatement(source.Text{S: states})
	return c, err == nil
}

// Wells that are some points: what holds where the traces differ.
func TestWellsOfPoints(t *testing.T) {
	for residual, claims := range map[string]map[string]identity.Verdict{
		"(u_x^2 - 1)^2 + (u_y - u_x)^2": {
			"[u_x] = 2": identity.Refuted, "[u_x]^2 = 4": identity.Proved, "[u_x] = [u_y]": identity.Proved, "[u_x]^2 = 3": identity.Refuted,
			"{u_x} = 0": identity.Proved, "[u_x]^2 + [u_y]^2 >= 8": identity.Proved, "[u_x]^2 + [u_y]^2 >= 8.0001": identity.Refuted, "[u_x] = 0": identity.Refuted,
		},
		"(u_x^2 - 1)^2 + u_y^2": {
			"[u_x]^2 = 4": identity.Proved, "[u_x] = 2": identity.Refuted, "nu_y = 0": identity.Proved, "nu_x = 1": identity.Refuted, "[u_x]^2 <= 4": identity.Proved,
		},
		"(u_x^2 - 2)^2 + (u_y - u_x)^2": {
			"[u_x]^2 = 8": identity.Proved, "[u_x]^2 = 4": identity.Refuted, "[u_x] <= 2.8": identity.Refuted,
		},
		// Four points: the traces may agree in one component.
		"(u_x^2 - 1)^2 + (u_y^2 - 1)^2": {
			"[u_x]^2 = 4": identity.Refuted, "[u_x] [u_y] ([u_x]^2 - 4) = 0": identity.Proved, "[u_x]^3 = 4 [u_x]": identity.Proved, "([u_x]^2 - 4) ([u_y]^2 - 4) = 0": identity.Proved,
		},
	} {
		for states, want := range claims {
			rec := decide(t, state(t, theory{coordinates: []string{"x", "y"}, unknowns: []string{"u"}, residual: residual, bending: "u_xx", energy: "u_xx^2"}, states, atJump))
			assert.Equal(t, want, rec.Verdict, "%s: %s: %+v", residual, states, rec)
		}
	}
}
