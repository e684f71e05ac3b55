package statement_test

import (
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/identity"
	"creaseproof/identity/export"
	"creaseproof/identity/statement"
)

// Up to a divergence the sides stand in the theorem, with N, and N is a
// divergence by another one.
func TestInequalitiesUpToADivergence(t *testing.T) {
	s, err := builtIn(t, "young-bounds", "up to a divergence")
	require.NoError(t, err)
	text := accepted(t, s)
	for _, want := range []string{
		"- 2 * eps * (u_xixi * u_etaeta - u_xieta^2).",
		"- (2 * eps * (u_xx * u_yy - u_xy^2)) = ",
		"is a divergence",
		"along the axes",
	} {
		assert.Contains(t, text, want)
	}

	// The Laplacian and the Hessian have the same integral of the square, and for
	// two functions the Jacobian is a divergence.
	for text, want := range map[string]string{
		`states = "2 u_xy^2 + u_xx^2 + u_yy^2 <= (u_xx + u_yy)^2"`: "2 * u_xy^2 + u_xx^2 + u_yy^2 <= (u_xx + u_yy)^2 - 2 * (- u_xy^2 + u_xx * u_yy).",
		`states = "-u_x^2 - u_xx u_yy <= -u_xy^2"`:                 "- u_x^2 - u_xx * u_yy <=",
		`states = "u_x^2 >= -u_y^2"`:                               "- u_y^2 <= u_x^2",
		`states = "u_x^2/eps^2 >= (u_xx u_yy - u_xy^2)/eps"`:       "/ eps",
	} {
		s, err := of(t, claimOf(text+"\nmodulo = \"divergence\""), "claim")
		require.NoError(t, err, text)
		assert.Contains(t, accepted(t, s), want, text)
	}
}

// The coefficients of a record are not believed.
func TestOtherNullLagrangiansAreNotExported(t *testing.T) {
	c, err := cases.BuiltIn("young-bounds")
	require.NoError(t, err)
	for _, cl := range c.Claims {
		if cl.Name != "up to a divergence" {
			continue
		}
		for _, change := range []func(r *identity.Record){
			func(r *identity.Record) { r.Null[0] += "1" },
			func(r *identity.Record) { r.Null = append(r.Null, "1") },
			func(r *identity.Record) { r.Null[0] = "x" },
			func(r *identity.Record) { r.Solution = "N = 0" },
			func(r *identity.Record) { r.Certificate, r.Reduced = nil, nil },
		} {
			r, err := identity.Decide(t.Context(), cl.Claim, identity.DefaultOptions())
			require.NoError(t, err)
			require.NotEmpty(t, r.Null)
			change(r)
			s, err := statement.Of(t.Context(), cl.Claim, r)
			if err != nil {
				require.ErrorIs(t, err, export.ErrUnsupported)
				continue
			}
			q, ok := s.(*export.Inequality)
			require.True(t, ok, "the certificate alone is exported")
			assert.Nil(t, q.Left)
		}
	}
}

// A target that is a multiple of the gap says so.
func TestOriginsOfTargets(t *testing.T) {
	s, err := of(t, head+"[[claim]]\nname = \"claim\"\nexpect = \"proved\"\nstates = \"u_x^2/(u_x + u_y)^2 >= -1/eps\"\n", "claim")
	require.NoError(t, err)
	q, ok := s.(*export.Inequality)
	require.True(t, ok)
	require.Nil(t, q.Left)
	text, err := export.TeX(s, export.TeXOptions{})
	require.NoError(t, err)
	assert.Regexp(t, `^% claim: .* gap .* multiplied by .*eps.*u_x.*\n`, text)

	s, err = of(t, claimOf(`states = "u_x^2/eps >= -u_y^2/eps^3"`), "claim")
	require.NoError(t, err)
	text, err = export.TeX(s, export.TeXOptions{})
	require.NoError(t, err)
	assert.NotContains(t, text, "%")
}
