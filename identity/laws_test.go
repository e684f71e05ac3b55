package identity_test

import (
	"fmt"
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// The Korteweg–de Vries equation u_t + u u_x + u_xxx = 0 and its first
// conserved densities (Miura, Gardner, Kruskal, J. Math. Phys. 9 (1968)
// 1204–1209). On solutions D_t T + D_x X = 0, which is so exactly where the
// Euler expression of D_t T in u vanishes: then a flux X exists.
var kdv = theory{coordinates: []string{"x", "t"}, unknowns: []string{"u"}}

const kdvEquation = "u_t + u u_x + u_xxx"

var kdvDensities = []string{
	"u",
	"u^2/2",
	"u^3/3 - u_x^2",
	"u^4/4 - 3 u u_x^2 + 9/5*u_xx^2",
	"u^5/5 - 6 u^2 u_x^2 + 36/5*u u_xx^2 - 108/35*u_xxx^2",
}

func TestKdVFluxes(t *testing.T) {
	for _, c := range []struct{ density, flux string }{
		{kdvDensities[0], "u^2/2 + u_xx"},
		{kdvDensities[1], "u^3/3 + u u_xx - u_x^2/2"},
		{kdvDensities[2], "u^4/4 + u^2 u_xx - 2 u u_x^2 - 2 u_x u_xxx + u_xx^2"},
	} {
		claim := func(flux string) *identity.Claim {
			return state(t, kdv, fmt.Sprintf("d_t(%s) + d_x(%s) = 0", c.density, flux), modulo(t, kdvEquation))
		}
		assert.Equal(t, identity.Proved, decide(t, claim(c.flux)).Verdict, c.density)
		wrong := claim(c.flux + " + u^2/1000")
		rec := decide(t, wrong)
		assert.Equal(t, identity.Refuted, rec.Verdict, c.density)
		assert.Contains(t, rec.Witness.Jet, "u_t", "the derivative that the equation determines")
	}
}

// With u_t replaced by the equation the time derivative of each density is a
// divergence in x; densities with a slip in one coefficient are not conserved.
func TestKdVDensities(t *testing.T) {
	space := theory{coordinates: []string{"x"}, unknowns: []string{"u"}, lets: map[string]string{"F": "-(u u_x + u_xxx)"}}
	// D_t T = T'[F] = Σ ∂T/∂u_k D_x^k F, equal to euler(T) F up to D_x.
	for i, density := range kdvDensities {
		rec, err := decided(t, state(t, space, fmt.Sprintf("euler(%s) F = 0", density), divergence))
		require.NoError(t, err)
		assert.Equal(t, identity.Proved, rec.Verdict, "density %d: %s", i+1, rec.Reason)
	}
	for _, density := range []string{
		"u^3/3 + u_x^2",
		"u^3/3 - 2 u_x^2",
		"u^4/4 - 3 u u_x^2 + 8/5*u_xx^2",
		"u^5/5 - 6 u^2 u_x^2 + 36/5*u u_xx^2 - 107/35*u_xxx^2",
		"u_x^2",
		"u^6",
	} {
		rec, err := decided(t, state(t, space, fmt.Sprintf("euler(%s) F = 0", density), divergence))
		require.NoError(t, err)
		assert.Equal(t, identity.Refuted, rec.Verdict, density)
	}
	// The coefficients follow from the claim.
	rec := decide(t, state(t, space, "euler(u^4/4 + b u u_x^2 + c u_xx^2) F = 0", divergence, solving("b", "c")))
	assert.Equal(t, identity.Proved, rec.Verdict)
	assert.Equal(t, "b = -3, c = 9/5", rec.Solution)
}

// Burgers' equation: every power of u is a conserved density of the inviscid
// equation, and only u of the viscous one; the Hopf–Cole map is common
// practice (Hopf, Comm. Pure Appl. Math. 3 (1950) 201–230).
func TestBurgers(t *testing.T) {
	burgers := theory{coordinates: []string{"x", "t"}, unknowns: []string{"u", "w"}, constants: []string{"m"}, assume: []string{"m > 0"}}
	for n := 1; n <= 5; n++ {
		law := fmt.Sprintf("d_t((u^%d)/%d) + d_x((u^%d)/%d) = 0", n, n, n+1, n+1)
		assert.Equal(t, identity.Proved, decide(t, state(t, burgers, law, modulo(t, "u_t + u u_x"))).Verdict)
		claim := state(t, burgers, law, modulo(t, "u_t + u u_x - m u_xx"))
		rec := decide(t, claim)
		assert.Equal(t, identity.Refuted, rec.Verdict)
	}
	assert.Equal(t, identity.Proved, decide(t, state(t, burgers, "d_t(u) + d_x(u^2/2 - m u_x) = 0", modulo(t, "u_t + u u_x - m u_xx"))).Verdict)
	hopfCole := func(factor string) *identity.Claim {
		return state(t, burgers, "d_t(v) + v d_x(v) = m d_{xx}(v)", modulo(t, "w_t - m w_xx"), func(c *identity.Claim) {
			c.Setting.Lets["v"] = expr(t, c.Setting, factor+" m w_x/w")
		})
	}
	assert.Equal(t, identity.Proved, decide(t, hopfCole("-2")).Verdict)
	assert.Equal(t, identity.Refuted, decide(t, hopfCole("-1")).Verdict)
}

// Shallow water with two unknowns: mass, momentum and energy; the energy flux
// is u (u^2 h/2 + h^2) (Whitham, Linear and Nonlinear Waves, Wiley 1974,
// section 13.10, with g = 1; from memory).
func TestShallowWater(t *testing.T) {
	water := theory{coordinates: []string{"x", "t"}, unknowns: []string{"h", "u"}}
	eqs := modulo(t, "h_t + d_x(h u)", "u_t + u u_x + h_x")
	for law, want := range map[string]identity.Verdict{
		"d_t(h u) + d_x(h u^2 + h^2/2) = 0":                             identity.Proved,
		"d_t(h u^2/2 + h^2/2) + d_x(h u^3/2 + h^2 u) = 0":               identity.Proved,
		"d_t(u) + d_x(u^2/2 + h) = 0":                                   identity.Proved,
		"d_t(h u) + d_x(h u^2 + h^2) = 0":                               identity.Refuted,
		"d_t(h u^2/2 + h^2/2) + d_x(h u^3/2 + h^2 u/2) = 0":             identity.Refuted,
		"d_t(h^2) + d_x(h^2 u) = 0":                                     identity.Refuted,
		"d_t(u^3/3 + 2 h u) + d_x(u^4/4 + 2 h u^2 + h^2) = 0":           identity.Refuted,
		"d_t(h u^3/3 + h^2 u) + d_x(h u^4/3 + 3/2*h^2 u^2 + h^3/3) = 0": identity.Proved,
	} {
		claim := state(t, water, law, eqs)
		rec, err := decided(t, claim)
		require.NoError(t, err)
		assert.Equal(t, want, rec.Verdict, "%s: %+v", law, rec)
	}
}

// Jacobians are divergences for two unknowns, their squares are not (Olver,
// Applications of Lie Groups to Differential Equations, 2nd ed., Springer
// 1993, section 4.1).
func TestJacobians(t *testing.T) {
	for states, want := range map[string]identity.Verdict{
		"u_x v_y - u_y v_x = 0":                        identity.Proved,
		"u (u_x v_y - u_y v_x) = 0":                    identity.Proved,
		"u_x v_y - u_y v_x + u_x^2 = 0":                identity.Refuted,
		"(u_x v_y - u_y v_x)^2 = 0":                    identity.Refuted,
		"u_x v_y + u_y v_x = 0":                        identity.Refuted,
		"x (u_x v_y - u_y v_x) = 0":                    identity.Refuted,
		"(u_x v_y - u_y v_x) cos(u) exp(v) = 0":        identity.Proved,
		"u_x v_y - u_y v_x = d_x(u v_y) - d_y(u v_x)":  identity.Proved,
		"u_xx v_y - u_xy v_x = -(u_x v_xy - u_x v_xy)": identity.Proved,
		"u_xx u_yy - u_xy^2 = 0":                       identity.Proved,
		"u_xx v_yy - 2 u_xy v_xy + u_yy v_xx = 0":      identity.Proved,
		"u_xx v_yy - u_xy v_xy + u_yy v_xx = 0":        identity.Refuted,
		"u_x/(1 + u^2) + v_y exp(v) = 0":               identity.Proved,
		"sqrt(1 + u_x^2 + u_y^2) = 0":                  identity.Refuted,
		"u_x u_xx/sqrt(1 + u_x^2) = 0":                 identity.Proved,
	} {
		rec, err := decided(t, state(t, pair, states, divergence))
		require.NoError(t, err)
		assert.Equal(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
}

// Solutions in closed form.
func TestGivenSolutions(t *testing.T) {
	for _, c := range []struct {
		u, states string
		want      identity.Verdict
	}{
		{"-(x^2 + y^2)/(2 z)", "R = 0", identity.Proved},
		{"-(x^2 + y^2)/(2 z)", "R = 1", identity.Refuted},
		{"delta sqrt(x^2 + y^2) + delta^2 z/2", "R = 0", identity.Proved},
		{"delta sqrt(x^2 + y^2) + delta^2 z/3", "R = 0", identity.Refuted},
		{"2 eps log(exp(x/(2 eps) + z/(4 eps)) + exp(-x/(2 eps) + z/(4 eps)))", "R = eps L", identity.Proved},
		{"2 eps log(exp(x/(2 eps) + z/(4 eps)) + exp(-x/(2 eps) + z/(4 eps)))", "R = -eps L", identity.Refuted},
		{"-2 eps log(exp(-(x + z/2)/(2 eps)) + exp(-(-y + z/2)/(2 eps)))", "R = -eps L", identity.Proved},
		{"2 eps log(1 + delta (1 + erf(x/(2 sqrt(eps z)))))", "R = eps L", identity.Proved},
		{"2 eps log(1 + delta (1 + erf(x/(3 sqrt(eps z)))))", "R = eps L", identity.Refuted},
	} {
		rec, err := decided(t, state(t, layered, c.states, given(t, 0, c.u)))
		require.NoError(t, err)
		assert.Equal(t, c.want, rec.Verdict, "%s: %+v", c.u, rec)
	}
}
