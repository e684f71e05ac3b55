package identity_test

import (
	"testing"

	"creaseproof/entropy"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
)

var planarAngles = theory{
	coordinates: []string{"x", "y"}, unknowns: []string{"u"}, constants: []string{"a", "b"},
	frame: &entropy.Frame{Plane: [2]int{0, 1}, Axes: [2]string{"xi", "eta"}, Angle: "theta"},
	fields: map[string]map[string]string{"S": {
		"xi":  "u_xi (1-u_eta^2) - u_xi^3/3",
		"eta": "-u_eta (1-u_xi^2) + u_eta^3/3",
	}},
	residual: "1 - u_x^2 - u_y^2", bending: "u_xx + u_yy", energy: "u_x^2",
}

// A number that is zero without its normal form showing it.
const hidden = "(sqrt(2)+sqrt(3)-sqrt(5+2 sqrt(6)))"

// Nothing is proved or refuted by dividing by a zero that does not show.
func TestHiddenZeros(t *testing.T) {
	for _, c := range []struct {
		states string
		solve  []string
		want   identity.Verdict
	}{
		{hidden + "/" + hidden + " = 1", nil, identity.Open},
		{"u_x " + hidden + "/" + hidden + " = u_x", nil, identity.Open},
		{hidden + " u_x/(" + hidden + " u_x) = 1", nil, identity.Open},
		{"1/" + hidden + " >= 0", nil, identity.Open},
		{"u_x^2/" + hidden + " >= 0", nil, identity.Open},
		{"log(" + hidden + ") = log(" + hidden + ")", nil, identity.Open},
		{"c " + hidden + " = 1", []string{"c"}, identity.Open},
		{"c u_x " + hidden + " = u_x", []string{"c"}, identity.Open},
		{"sqrt(" + hidden + " - 2) >= 0", nil, identity.Open},
		{"sqrt(-1-u_x^2) >= 0", nil, identity.Open},
		{"1/(sqrt(2)-1) = sqrt(2)+1", nil, identity.Proved},
		{"1/(sqrt(2)-1) = sqrt(2)+101/100", nil, identity.Refuted},
		{"c (sqrt(2)-1) = 1", []string{"c"}, identity.Proved},
		{"c (a-b) = 1", []string{"c"}, identity.Proved},
		{"1/(exp(1)-2) >= 1", nil, identity.Proved},
		// Zeros in cosines of fractions of π show.
		{"c (16 cos(pi/10)^4 - 20 cos(pi/10)^2 + 5) = 1", []string{"c"}, identity.Refuted},
		{"span(S(pi/5), S(7 pi/10)) = S", nil, identity.Refuted},
		{"span(S(pi/5), S(9 pi/20)) = S", nil, identity.Proved},
		{"span(S(pi/7), S(pi/7 + pi/4)) = S", nil, identity.Proved},
		{"span(S(1), S(2)) = S", nil, identity.Proved},
		{"cos(pi/5) - cos(2 pi/5) = 1/2", nil, identity.Proved},
		{"cos(pi/7) - cos(2 pi/7) + cos(3 pi/7) = 1/2", nil, identity.Proved},
		{"cos(pi/7) - cos(2 pi/7) + cos(3 pi/7) = 51/100", nil, identity.Refuted},
		{"sin(pi/18) sin(5 pi/18) sin(7 pi/18) = 1/8", nil, identity.Proved},
	} {
		rec := decide(t, state(t, planarAngles, c.states, solving(c.solve...)))
		assert.Equal(t, c.want, rec.Verdict, "%s: %+v", c.states, rec)
	}
	// Too fine an angle for a minimal polynomial: S(a + pi/2) = -S(a).
	rec := decide(t, state(t, planarAngles, "span(S(pi/97), S(pi/97 + pi/2)) = S"))
	assert.NotEqual(t, identity.Proved, rec.Verdict, "%+v", rec)
}

// The unit normal has two orientations, and absolute values of it one sign.
func TestAbsoluteValuesOfTheNormal(t *testing.T) {
	for states, want := range map[string]identity.Verdict{
		"abs(nu_x) >= 0": identity.Proved, "abs(nu_x) <= 1": identity.Proved, "abs(nu_x)^2 + nu_y^2 = 1": identity.Proved,
		"sqrt(nu_x^2) = abs(nu_x)": identity.Proved, "abs(-2 nu_x) = 2 abs(nu_x)": identity.Proved,
		"abs(nu_x) = nu_x": identity.Refuted, "nu_x >= 0": identity.Refuted, "abs(nu_x) = 0": identity.Refuted,
	} {
		rec := decide(t, state(t, planarAngles, states, atJump))
		assert.Equal(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
}

// The Euler operator says nothing where a root is not smooth: |u_x| is no
// divergence although its Euler expression is zero where u_x is not.
func TestDivergencesOfRoots(t *testing.T) {
	for _, c := range []struct {
		states, assume string
		want           identity.Verdict
	}{
		{"abs(u_x) = 0", "", identity.Open},
		{"abs(u_x) = 0", "u_x > 0", identity.Proved},
		{"sqrt((u_xx u_yy - u_xy^2)^2) = 0", "", identity.Open},
		{"abs(x) u_xx = 0", "", identity.Open},
		{"abs(x) u_xx = 0", "x > 0", identity.Proved},
		{"sqrt(x) u_x = -u/(2 sqrt(x))", "", identity.Proved},
		{"sqrt(1+u_x^2) = 0", "", identity.Refuted},
		{"sqrt(a) u_x = 0", "", identity.Proved},
		{"sqrt(2) (u_xx u_yy - u_xy^2) = 0", "", identity.Proved},
	} {
		cl := state(t, planarAngles, c.states, divergence)
		if c.assume != "" {
			cl.Assume = append(cl.Assume, assumption(t, cl.Setting, c.assume))
		}
		rec := decide(t, cl)
		assert.Equal(t, c.want, rec.Verdict, "%s: %+v", c.states, rec)
	}
}

// The supremum over an angle does not depend on which multiple of it is read
// first.
func TestSupremaInMultiplesOfTheAngle(t *testing.T) {
	for _, angle := range []string{"theta", "2 theta", "3 theta", "theta/2", "2 theta/3", "theta + 1", "theta + u_x", "theta/2 + pi/5"} {
		for _, c := range []struct {
			right string
			want  identity.Verdict
		}{{"norm(a, b)", identity.Proved}, {"norm(a, 2 b)", identity.Refuted}} {
			states := "sup(theta, a cos(" + angle + ") + b sin(" + angle + ")) = " + c.right
			rec := decide(t, state(t, planarAngles, states))
			assert.Equal(t, c.want, rec.Verdict, "%s: %+v", states, rec)
		}
	}
	rec := decide(t, state(t, planarAngles, "sup(theta, cos(theta + 1) cos(theta)) = (1 + cos(1))/2"))
	assert.Equal(t, identity.Proved, rec.Verdict, "%+v", rec)
}

// What both sides need to be defined is known in a second look, and listed.
func TestSignsFromDefinedness(t *testing.T) {
	for _, c := range []struct {
		states string
		want   identity.Verdict
		rests  []string
	}{
		{"sqrt(1/u_x) = 1/sqrt(u_x)", identity.Proved, []string{"u_x > 0"}},
		{"sqrt(1/u_x) = 2/sqrt(u_x)", identity.Refuted, nil},
		{"sqrt(u_x^3) = u_x sqrt(u_x)", identity.Proved, []string{"u_x >= 0"}},
		{"sqrt(u_x^3) = -u_x sqrt(u_x)", identity.Refuted, nil},
		{"sqrt(-u_x^3) = -u_x sqrt(-u_x)", identity.Proved, []string{"-u_x >= 0"}},
		{"(u_x^3)^(1/3) = u_x", identity.Proved, []string{"u_x >= 0"}},
		{"log(u_x a) = log(u_x) + log(a)", identity.Proved, []string{"u_x > 0", "a > 0"}},
		{"log(u_x a) = log(u_x) - log(a)", identity.Refuted, nil},
		{"log(x y) = log(-x) + log(-y)", identity.Proved, []string{"-x > 0", "-y > 0"}},
		{"log(x/y) = log(-x) - log(-y)", identity.Proved, []string{"-x > 0", "-y > 0"}},
		{"log(x y) = log(-x) - log(-y)", identity.Refuted, nil},
		{"log(x^2) = 2 log(-x)", identity.Proved, []string{"-x > 0"}},
		{"abs(cos(pi/5) - 1) = 1 - cos(pi/5)", identity.Proved, nil},
		{"abs(sqrt(2) - 3/2) = sqrt(2) - 3/2", identity.Refuted, nil},
		{"log(cosh(u_x)^2) = 2 log(cosh(u_x))", identity.Proved, nil},
		{"abs(u_x/(1/(u_y+a)^2)) = abs(u_x) (u_y+a)^2", identity.Proved, nil},
		// u_x = 0 leaves the sign of u_y open.
		{"sqrt(u_x^2 u_y) = abs(u_x) sqrt(abs(u_y))", identity.Open, nil},
		{"sqrt(u_x^2 u_y) = abs(u_x) sqrt(u_y)", identity.Proved, []string{"u_y >= 0"}},
		{"sqrt(u_x^2 u_y) + u_y >= 0", identity.Refuted, nil},
	} {
		rec := decide(t, state(t, planarAngles, c.states))
		assert.Equal(t, c.want, rec.Verdict, "%s: %+v", c.states, rec)
		for _, a := range c.rests {
			assert.Contains(t, rec.Assumptions, a, c.states)
		}
	}
}

// A claim about no jet at all is neither proved nor refuted.
func TestConditionsAgainstAssumptions(t *testing.T) {
	half := restricting(t, 0, byX, "1/2")
	for _, c := range []struct {
		states string
		assume []string
		edit   func(*identity.Claim)
		want   identity.Verdict
	}{
		{"u_x/(a-b) - u_x/(a-b) = 0", []string{"a = b"}, nil, identity.Open},
		{"u_x/(a-b) - u_x/(a-b) = 0", []string{"a = 2 b"}, nil, identity.Proved},
		{"u_x/(a-b) - u_x/(a-b) = 0", []string{"a^2 = 2 a b - b^2"}, nil, identity.Open},
		{"u_x/(a-b) - u_x/(a-b) = 0", []string{"a + u_x = 0", "u_x = -b"}, nil, identity.Open},
		{"u_x/a = u_x/a", []string{"a = 0"}, nil, identity.Open},
		{"log(a) = log(a)", []string{"a < 0"}, nil, identity.Open},
		{"1/(u_x-u_y)^2 >= 0", []string{"u_x = u_y"}, nil, identity.Open},
		{"1/(u_x-u_y)^2 >= 0", []string{"u_x >= u_y"}, nil, identity.Proved},
		{"u_x >= 1", []string{"u_x > 3/4"}, half, identity.Open},
		{"u_x >= 1", []string{"u_x > 1/4"}, half, identity.Refuted},
		{"u_x >= 1/4", []string{"u_x > 3/4"}, half, identity.Open},
	} {
		cl := state(t, planarAngles, c.states)
		if c.edit != nil {
			c.edit(cl)
		}
		for _, a := range c.assume {
			cl.Assume = append(cl.Assume, assumption(t, cl.Setting, a))
		}
		rec := decide(t, cl)
		assert.Equal(t, c.want, rec.Verdict, "%s, %v: %+v", c.states, c.assume, rec)
	}
}

// Exponentials of numbers are powers of one.
func TestExponentialsOfNumbers(t *testing.T) {
	for states, want := range map[string]identity.Verdict{
		"exp(1000000) >= exp(999999)":    identity.Proved,
		"exp(1000000) <= exp(999999)":    identity.Refuted,
		"exp(3/2) exp(-1/2) = exp(1)":    identity.Proved,
		"exp(3) + exp(2) >= 27":          identity.Proved,
		"exp(3) + exp(2) >= 28":          identity.Refuted,
		"exp(u_x + 2) = exp(u_x) exp(2)": identity.Proved,
		"log(exp(-7) exp(5)) = -2":       identity.Proved,
	} {
		rec := decide(t, state(t, planarAngles, states))
		assert.Equal(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
}

// A condition that singles out a direction of the plane is not turned with the
// frame: at angle 0 it would be one on the derivatives along the axes.
func TestConditionsDoNotTurn(t *testing.T) {
	for _, c := range []struct {
		states string
		want   identity.Verdict
	}{
		{"u_xi >= 0*sqrt(u_x)", identity.Refuted},
		{"u_xi >= 0/sqrt(u_x)", identity.Refuted},
		{"u_xi^3 >= 0*sqrt(u_x)", identity.Refuted},
		{"u_xi >= 0*log(u_x)", identity.Refuted},
		{"u_xi + 1 >= 0*sqrt(u_x + 1)", identity.Refuted},
		{"u_xi^2 <= (u_x^2 + u_y^2) (1 + 0*sqrt(u_x))", identity.Proved},
		{"u_xi^2/(u_x^2 + u_y^2) <= 1", identity.Proved},
	} {
		rec := decide(t, state(t, planarAngles, c.states))
		assert.Equal(t, c.want, rec.Verdict, "%s: %+v", c.states, rec)
	}
}
