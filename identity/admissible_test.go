package identity_test

import (
	"math/big"
	"testing"

	"creaseproof/entropy/jet"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

var (
	byX  = jet.Index{1}
	byXY = jet.Index{1, 1}
)

func boxed(t testing.TB, name string, lo, hi int64) edit {
	return func(c *identity.Claim) {
		c.Box = append(c.Box, identity.Bound{Node: expr(t, c.Setting, name), Lo: big.NewRat(lo, 1), Hi: big.NewRat(hi, 1)})
	}
}

// A witness at a jump has two different traces. All traces below differ, or
// make the claim true.
func TestWitnessesJump(t *testing.T) {
	for _, c := range []struct {
		residual, states string
		want             []identity.Verdict
	}{
		{"(u_x^2 - 1)^2 + u_y^2", "[u_x]^2 = 4", []identity.Verdict{identity.Proved, identity.Open}},
		{"(u_x^2 - 1)^2 + u_y^2", "[u_x] = 2", []identity.Verdict{identity.Refuted}},
		{"u_x^2 + (u_y^2 - 1)^2 (u_y - 3)^2", "[u_y]^2 >= 4", []identity.Verdict{identity.Proved, identity.Open, identity.Supported}},
		{"u_x^2 + (u_y^2 - 1)^2 (u_y - 3)^2", "abs([u_y]) >= 2", []identity.Verdict{identity.Proved, identity.Open, identity.Supported}},
		{"u_x^2 + (u_y^2 - 1)^2 (u_y - 3)^2", "[u_y]^2 <= 4", []identity.Verdict{identity.Refuted}},
		{"(u_x^2 - 1)^2 + (u_y^2 - 1)^2", "[u_x]^2 + [u_y]^2 >= 5", []identity.Verdict{identity.Refuted}},
		{"(u_x^2 - 1)^2 + (u_y^2 - 1)^2", "[u_x] = 0", []identity.Verdict{identity.Refuted}},
		{"(u_x^2 - 1)^2 + (u_y^2 - 1)^2", "[u_x]^2 + [u_y]^2 >= 4", []identity.Verdict{identity.Proved, identity.Open, identity.Supported}},
		{"u_x^4 + u_y^4 - 1", "[u_x]^2 + [u_y]^2 <= 4", []identity.Verdict{identity.Refuted}},
		{"u_x^4 + u_y^4 - 1", "[u_x]^2 + [u_y]^2 <= 6", []identity.Verdict{identity.Proved, identity.Open, identity.Supported}},
		{"u_x^4 + u_y^4 - 3", "[u_x]^2 + [u_y]^2 <= 4", []identity.Verdict{identity.Refuted}},
		{"(u_x^2 + u_y^2 - 1)^2", "[u_x^2] + [u_y^2] = 0", []identity.Verdict{identity.Proved}},
		{"(u_x^2 + u_y^2 - 1)^2", "[u_x^2] = 0", []identity.Verdict{identity.Refuted}},
		{"(u_x^2 + u_y^2 - 1)^2", "[u_x]^2 + [u_y]^2 <= 3", []identity.Verdict{identity.Refuted}},
		{"(u_x^2 + u_y^2 - 1)^2", "[u_x]^2 + [u_y]^2 <= 4", []identity.Verdict{identity.Proved, identity.Supported}},
		{"(u_y - u_x^2)^2", "[u_y] = 2 {u_x} [u_x]", []identity.Verdict{identity.Proved}},
		{"u_x^2 - 1", "[u_x] = 1", []identity.Verdict{identity.Refuted}}, // u_y may jump alone
	} {
		rec, err := decided(t, state(t, wellOf(c.residual, nil), c.states, atJump))
		require.NoError(t, err)
		assert.Contains(t, c.want, rec.Verdict, "%s: %s: %+v", c.residual, c.states, rec)
	}
}

// No jet at all satisfies these assumptions.
func TestNothingRefutesAClaimAboutNoJets(t *testing.T) {
	for _, states := range []string{"u_x >= 1", "u_x = 1", "u_x <= 1/4"} {
		rec, err := decided(t, state(t, plane, states, restricting(t, 0, byX, "1/2"), assuming(t, "u_x > 3/4")))
		if err == nil {
			assert.Equal(t, identity.Open, rec.Verdict, "%s: %+v", states, rec)
		}
	}
	bare := plane
	bare.assume = nil
	for _, e := range []edit{assuming(t, "u_x > 3/4"), boxed(t, "u_x", 1, 2)} {
		for _, states := range []string{"u_x >= 1", "u_x = 1", "u_x <= 1/4"} {
			rec, err := decided(t, state(t, bare, states, restricting(t, 0, byX, "1/2"), e))
			if err == nil {
				assert.Equal(t, identity.Open, rec.Verdict, "%s: %+v", states, rec)
			}
		}
	}
	rec, err := decided(t, state(t, bare, "u_x >= 1", restricting(t, 0, byX, "1/2"), assuming(t, "u_x > 1/4")))
	require.NoError(t, err)
	assert.Equal(t, identity.Refuted, rec.Verdict)
	rec, err = decided(t, state(t, plane, "u_x >= 1", restricting(t, 0, byX, "1/2"), assuming(t, "u_x > 1/4")))
	require.NoError(t, err)
	assert.Equal(t, identity.Refuted, rec.Verdict)
	rec, err = decided(t, state(t, plane, "c + u_x = 0", solving("c"), assuming(t, "u_x >= 0", "u_x <= 0")))
	require.NoError(t, err)
	assert.NotEqual(t, identity.Refuted, rec.Verdict, "c = 0: %+v", rec)
}

// u_x^2 = D_y(y u_x^2) where u_xy vanishes.
func TestSolveUpToADivergenceOnARestriction(t *testing.T) {
	for _, states := range []string{"u_x^2 = c", "c u_x^2 = 0", "c u_x^2 + u_x^2 = 0"} {
		for _, e := range []edit{restricting(t, 0, byXY, "0"), assuming(t, "u_xy = 0")} {
			rec, err := decided(t, state(t, plane, states, solving("c"), divergence, e))
			require.NoError(t, err)
			assert.Equal(t, identity.Open, rec.Verdict, "%s: %+v", states, rec)
		}
	}
}

// Solutions that divide by what the assumptions say is zero, and solutions
// that the assumptions make one of many.
func TestSolveChecksItsConditionsAgainstTheAssumptions(t *testing.T) {
	proved, refuted, open := identity.Proved, identity.Refuted, identity.Open
	for _, c := range []struct {
		states, assume string
		want           []identity.Verdict
		solution       string
	}{
		{"c (a - b) u_x = u_x", "a = b", []identity.Verdict{refuted, open}, ""},
		{"c (a - b) u_x = u_x", "a^2 + b^2 = 2 a b", []identity.Verdict{refuted, open}, ""},
		{"c (a - b) u_x = (a - b) u_x", "a = b", []identity.Verdict{proved}, "c free"},
		{"c (a - b) u_x = u_x", "a = 2 b", []identity.Verdict{proved}, ""},
		{"c u_x + a u_y = 0", "a = 0", []identity.Verdict{proved}, "c = 0"},
		{"c u_x = u_y", "u_x = u_y", []identity.Verdict{proved}, "c = 1"},
		{"c u_x^2 = 0", "u_x = 0", []identity.Verdict{proved}, "c free"},
		{"c u_x = 0", "u_x^2 = 0", []identity.Verdict{proved}, "c free"},
		{"c u_x = 0", "u_x^2 + u_y^2 <= 0", []identity.Verdict{proved}, "c free"},
		{"a u_x = b u_x + c", "a = b", []identity.Verdict{proved}, "c = 0"},
	} {
		rec, err := decided(t, state(t, plane, c.states, solving("c"), assuming(t, c.assume)))
		require.NoError(t, err)
		assert.Contains(t, c.want, rec.Verdict, "%s, %s: %+v", c.states, c.assume, rec)
		if c.solution != "" {
			assert.Equal(t, c.solution, rec.Solution, "%s, %s", c.states, c.assume)
		}
	}
	rec, err := decided(t, state(t, plane, "a u_x = b u_x", assuming(t, "a = b")))
	require.NoError(t, err)
	assert.Equal(t, proved, rec.Verdict)
}

// Zeros of the equations that are not rational, and what follows from them
// linearly.
func TestAlgebraicWitnesses(t *testing.T) {
	for _, c := range []struct {
		states, modulo string
		want           []identity.Verdict
	}{
		{"u_x^2 + u_y^2 <= 1", "u_x^4 + u_y^4 - 1", []identity.Verdict{identity.Refuted}},
		{"u_x^2 + u_y^2 >= 1", "u_x^4 + u_y^4 - 1", []identity.Verdict{identity.Proved, identity.Supported, identity.Open}},
		{"u_x^2 + u_y^2 <= 2", "u_x^4 + u_y^4 - 1", []identity.Verdict{identity.Proved, identity.Supported, identity.Open}},
		{"u_x^3 u_xx + u_y^3 u_yy = 0", "u_x^4 + u_y^4 - 1", []identity.Verdict{identity.Refuted}},
		{"u_x^3 u_xx + u_y^3 u_yy <= 0", "u_x^4 + u_y^4 - 1", []identity.Verdict{identity.Refuted}},
		{"u_x^3 u_xx + u_y^3 u_xy <= 0", "u_x^4 + u_y^4 - 1", []identity.Verdict{identity.Proved}},
		{"u_x^3 u_xx + u_y^3 u_xy = 0", "u_x^4 + u_y^4 - 3", []identity.Verdict{identity.Proved}},
		{"u_x u_xxx <= 0", "u_x^4 + u_y^4 - 3", []identity.Verdict{identity.Refuted}},
	} {
		rec, err := decided(t, state(t, plane, c.states, modulo(t, c.modulo)))
		require.NoError(t, err)
		assert.Contains(t, c.want, rec.Verdict, "%s modulo %s: %+v", c.states, c.modulo, rec)
	}
	rec, err := decided(t, state(t, plane, "u_x^2 + u_y^2 <= 1", modulo(t, "u_x^4 + u_y^4 - 1"), assuming(t, "u_x > 1")))
	require.NoError(t, err)
	assert.NotEqual(t, identity.Refuted, rec.Verdict, "no jets: %+v", rec)
}
