package identity_test

import (
	"testing"

	"creaseproof/entropy/jet"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestSolve(t *testing.T) {
	const none = "none"
	signed := plane
	signed.constants, signed.assume = []string{"c", "eps"}, []string{"c > 0", "eps > 0"}
	for _, c := range []struct {
		name     string
		th       theory
		states   string
		solve    []string
		edits    []edit
		want     identity.Verdict
		solution string // "" where it does not matter
	}{
		{"linear", plane, "c (u_x + u_y) = 3 u_x + 3 u_y", []string{"c"}, nil, identity.Proved, "c = 3"},
		{"none", plane, "c (u_x + u_y) = 3 u_x + 2 u_y", []string{"c"}, nil, identity.Refuted, none},
		{"none, for no multiple of zero is one", plane, "c u_x - c u_x = u_x", []string{"c"}, nil, identity.Refuted, none},
		{"free", plane, "c u_x = u_x c", []string{"c"}, nil, identity.Proved, "c free"},
		{"free beside determined", plane, "c u_x + d u_y - c u_x = 2 u_y", []string{"c", "d"}, nil, identity.Proved, "c free, d = 2"},
		{"several", plane, "(u_x + u_y)^2 = c u_x^2 + d u_x u_y + f u_y^2", []string{"c", "d", "f"}, nil, identity.Proved, "c = 1, d = 2, f = 1"},
		{"other constants", plane, "c eps u_x = a u_x + eps b u_x", []string{"c"}, nil, identity.Proved, ""},
		{"a root of a number", plane, "c u_x = sqrt(2) u_x", []string{"c"}, nil, identity.Proved, "c = sqrt(2)"},
		{"pi", plane, "c u_x = pi u_x", []string{"c"}, nil, identity.Proved, "c = pi"},
		{"a function of a constant", plane, "c u_x = exp(eps) u_x", []string{"c"}, nil, identity.Proved, "c = exp(eps)"},
		{"a function of a jet", plane, "c u_x = exp(u)", []string{"c"}, nil, identity.Refuted, none},
		{"two angles", layered, "c cos(theta) u_x = cos(theta) u_x", []string{"c"}, nil, identity.Proved, "c = 1"},
		{"no constant for every angle", layered, "c u_x = cos(theta) u_x", []string{"c"}, nil, identity.Refuted, none},
		{"no constant for every angle, the angle itself", layered, "c u_x = theta u_x", []string{"c"}, nil, identity.Refuted, none},
		{"nonlinear", plane, "c^2 u_x = 4 u_x", []string{"c"}, nil, identity.Proved, "c = 2 or c = -2"},
		{"nonlinear, one common root", plane, "c^2 u_x + c u_y = 4 u_x + 2 u_y", []string{"c"}, nil, identity.Proved, "c = 2"},
		{"nonlinear, none", plane, "c^2 u_x + c u_y = 4 u_x + 3 u_y", []string{"c"}, nil, identity.Refuted, none},
		{"nonlinear, no real root", plane, "(c^2 + 1) u_x = 0", []string{"c"}, nil, identity.Refuted, none},
		{"nonlinear, irrational", plane, "c^2 u_x = 2 u_x", []string{"c"}, nil, identity.Open, ""},
		{"an assumption leaves one root", signed, "c^2 u_x = 4 u_x", []string{"c"}, nil, identity.Proved, "c = 2"},
		{"an assumption leaves none", signed, "c u_x = -4 u_x", []string{"c"}, nil, identity.Refuted, none},
		{"an assumption leaves none, symbolic", signed, "c u_x = -eps u_x", []string{"c"}, nil, identity.Refuted, none},
		{"an assumption that the solution satisfies", signed, "c u_x = eps u_x", []string{"c"}, nil, identity.Proved, "c = eps"},
		{"cubic", plane, "c^3 u_x = 8 u_x", []string{"c"}, nil, identity.Proved, "c = 2"},
		{"curvature coefficient", layered, "2 R L = c u K", []string{"c"}, []edit{divergence}, identity.Proved, "c = 4/3"},
		{"curvature coefficient, none", layered, "2 R L + u_x^4 = c u K", []string{"c"}, []edit{divergence}, identity.Refuted, none},
		{"on the eikonal equation, anything", plane, "c (u_x u_xx + u_y u_xy) = 0", []string{"c"}, []edit{modulo(t, "u_x^2 + u_y^2 - 1")}, identity.Proved, "c free"},
		{"on the eikonal equation, none", plane, "u_xx = c", []string{"c"}, []edit{modulo(t, "u_x^2 + u_y^2 - 1")}, identity.Refuted, none},
		{"sharp density", layered, "sup(theta, [Sigma].nu) = c norm([u_x], [u_y])^4/norm([u_x], [u_y], [u_z])", []string{"c"}, []edit{atJump}, identity.Proved, "c = 1/12"},
		{"sharp density, wrong power", layered, "sup(theta, [Sigma].nu) = c norm([u_x], [u_y])^5/norm([u_x], [u_y], [u_z])", []string{"c"}, []edit{atJump}, identity.Refuted, none},
		{"planar density", eikonal, "sup(theta, [Sigma].nu) = c norm([u_x], [u_y])^3", []string{"c"}, []edit{atJump}, identity.Proved, "c = 1/12"},
	} {
		t.Run(c.name, func(t *testing.T) {
			rec, err := decided(t, state(t, c.th, c.states, append(c.edits, solving(c.solve...))...))
			require.NoError(t, err)
			assert.Equal(t, c.want, rec.Verdict, "%+v", rec)
			if c.solution != "" {
				assert.Equal(t, c.solution, rec.Solution)
			}
		})
	}
}

// A constant that a true claim asks for must not be reported as impossible
// because the normal form does not see that kernels depend on each other.
func TestSolveWithDependentKernels(t *testing.T) {
	for _, states := range []string{
		"c (sqrt(2) + sqrt(3)) u_x = sqrt(5 + 2 sqrt(6)) u_x",
		"c u_x sqrt(u) + u_x = u_x + sqrt(u) u_x",
		"c (log(u_x) + log(u_y)) = log(u_x u_y)",
		"c cos(pi/5) = 1/2 + 2 cos(pi/5)^2 + c u_x - c u_x",
		"c abs(u_x u_y) = abs(u_x) abs(u_y)",
	} {
		rec, err := decided(t, state(t, plane, states, solving("c")))
		require.NoError(t, err, states)
		assert.NotEqual(t, identity.Refuted, rec.Verdict, "%s: %+v", states, rec)
	}
}

// On what assumptions that are equations say, different monomials may agree.
func TestSolveUnderEquations(t *testing.T) {
	for _, c := range []struct {
		states, assume string
	}{
		{"c u_x = 1", "u_x = 1"},
		{"c u_x = u_x + (a - 2) u_y", "a = 2"},
		{"c^2 u_x = u_x^2", "u_x = 1"},
	} {
		rec, err := decided(t, state(t, plane, c.states, solving("c"), assuming(t, c.assume)))
		require.NoError(t, err)
		assert.NotEqual(t, identity.Refuted, rec.Verdict, "%s: %+v", c.states, rec)
	}
	rec, err := decided(t, state(t, plane, "u_y^2 = 0", divergence, assuming(t, "u_x = 1")))
	require.NoError(t, err)
	assert.NotEqual(t, identity.Refuted, rec.Verdict, "u_y^2 = D_x(x u_y^2) where u_xy vanishes")
}

func TestSolveOnARestriction(t *testing.T) {
	rec := decide(t, state(t, layered, "R = c (1 - u_x^2 - u_y^2)", solving("c"), restricting(t, 0, jet.Index{0, 0, 1}, "1/2")))
	assert.Equal(t, identity.Proved, rec.Verdict)
	assert.Equal(t, "c = 1/2", rec.Solution)
}
