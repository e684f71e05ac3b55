package identity_test

import (
	"math/big"
	"testing"

	"creaseproof/entropy/jet"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Roots, logarithms and absolute values of what may have either sign.
func TestRootsAndSigns(t *testing.T) {
	proved, refuted, open := identity.Proved, identity.Refuted, identity.Open
	for _, c := range []struct {
		states string
		edits  []edit
		want   []identity.Verdict
	}{
		{"sqrt(u_x^2) = abs(u_x)", nil, []identity.Verdict{proved}},
		{"sqrt(u_x^2) = u_x", nil, []identity.Verdict{refuted}},
		{"sqrt(u_x^2) = u_x", []edit{assuming(t, "u_x >= 0")}, []identity.Verdict{proved}},
		{"sqrt(u_x^2) = -u_x", []edit{assuming(t, "u_x <= 0")}, []identity.Verdict{proved}},
		{"sqrt((u_x - u_y)^2) = abs(u_y - u_x)", nil, []identity.Verdict{proved}},
		{"sqrt(u_x)^2 = u_x", nil, []identity.Verdict{proved}},
		{"sqrt(u_x^4) = u_x^2", nil, []identity.Verdict{proved}},
		{"(u_x^4)^(1/4) = abs(u_x)", nil, []identity.Verdict{proved}},
		{"(u_x^6)^(1/2) = u_x^3", nil, []identity.Verdict{refuted}},
		{"(u_x^6)^(1/3) = u_x^2", nil, []identity.Verdict{proved}},
		{"(u_x^3)^(1/3) = u_x", nil, []identity.Verdict{proved, open}}, // u_x >= 0 is asked for
		{"u_x (u_x^3 u_y)^(1/3) >= 0", nil, []identity.Verdict{refuted}},
		{"(u_y/u_x^3)^(1/3) u_x >= 0", nil, []identity.Verdict{refuted}},
		{"(u_y/u_x^3)^(1/3) >= 0", nil, []identity.Verdict{proved}},
		{"(u_x^3 u_y)^(1/3) >= 0", nil, []identity.Verdict{proved}},
		{"sqrt(u_x^2 u_y) = abs(u_x) sqrt(u_y)", nil, []identity.Verdict{proved}},
		{"sqrt(u_x^2/u_y^2) = abs(u_x)/abs(u_y)", nil, []identity.Verdict{proved}},
		{"sqrt(u_x^2/u_y^2) = u_x/u_y", nil, []identity.Verdict{refuted}},
		{"abs(u_x u_y) = abs(u_x) abs(u_y)", nil, []identity.Verdict{proved}},
		{"abs(u_x + u_y) = abs(u_x) + abs(u_y)", nil, []identity.Verdict{refuted}},
		{"abs(a u_x) = -a abs(u_x)", []edit{assuming(t, "a < 0")}, []identity.Verdict{proved}},
		{"abs(-3 u_x) = 3 abs(u_x)", nil, []identity.Verdict{proved}},
		{"abs(u_x)^3 = u_x^2 abs(u_x)", nil, []identity.Verdict{proved}},
		{"d_x(abs(u)) = u u_x/abs(u)", nil, []identity.Verdict{proved}},
		{"sqrt(2) sqrt(3) = sqrt(6)", nil, []identity.Verdict{proved}},
		{"sqrt(8) = 2 sqrt(2)", nil, []identity.Verdict{proved}},
		{"sqrt(1/2) = sqrt(2)/2", nil, []identity.Verdict{proved}},
		{"sqrt(2) + sqrt(3) = sqrt(5)", nil, []identity.Verdict{refuted}},
		{"sqrt(5 + 2 sqrt(6)) = sqrt(2) + sqrt(3)", nil, []identity.Verdict{open, proved}},
		{"2^(1/3)*4^(1/3) = 2", nil, []identity.Verdict{proved}},
		{"1/(sqrt(2) - 1) = sqrt(2) + 1", nil, []identity.Verdict{proved}},
		{"sqrt(a b) = sqrt(a) sqrt(b)", []edit{assuming(t, "a > 0", "b > 0")}, []identity.Verdict{proved}},
		{"log(a b) = log(a) + log(b)", []edit{assuming(t, "a > 0", "b > 0")}, []identity.Verdict{proved}},
		{"log(a) + log(b) = log(a b)", nil, []identity.Verdict{proved}}, // a > 0 and b > 0 are asked for
		{"log(a b) = log(a) + log(b)", nil, []identity.Verdict{open, proved}},
		{"log(a/b) = log(a) - log(b)", []edit{assuming(t, "a > 0", "b > 0")}, []identity.Verdict{proved}},
		{"log(a + b) = log(a) + log(b)", []edit{assuming(t, "a > 0", "b > 0")}, []identity.Verdict{refuted}},
		{"log(u_x^2) = 2 log(abs(u_x))", nil, []identity.Verdict{proved}},
		{"log(u_x^2) = 2 log(u_x)", nil, []identity.Verdict{open, proved}}, // u_x > 0 is asked for
		{"log(sqrt(u_x)) = log(u_x)/2", nil, []identity.Verdict{proved}},
		{"log(8) = 3 log(2)", nil, []identity.Verdict{proved}},
		{"log(6) = log(2) + log(3)", nil, []identity.Verdict{proved}},
		{"exp(log(u_x)) = u_x", nil, []identity.Verdict{proved}},
		{"log(exp(u_x)) = u_x", nil, []identity.Verdict{proved}},
		{"exp(log(u_x)/2) = sqrt(u_x)", nil, []identity.Verdict{proved}},
		{"exp(u_x + u_y) = exp(u_x) exp(u_y)", nil, []identity.Verdict{proved}},
		{"exp(u_x)^2 = exp(2 u_x)", nil, []identity.Verdict{proved}},
		{"exp(2 u_x) = exp(u_x)^2 + 1/1000000000000", nil, []identity.Verdict{refuted}},
		{"sqrt(exp(u_x)) = exp(u_x/2)", nil, []identity.Verdict{proved}},
		{"exp(u_x) exp(-u_x) = 1", nil, []identity.Verdict{proved}},
		{"exp(u_x) = 1 + u_x", nil, []identity.Verdict{refuted}},
		{"exp(u_x) >= 0", nil, []identity.Verdict{proved}},
		{"exp(u_x) <= 0", nil, []identity.Verdict{refuted}},
		{"cosh(u_x)^2 - sinh(u_x)^2 = 1", nil, []identity.Verdict{proved}},
		{"tanh(u_x + u_y) = (tanh(u_x) + tanh(u_y))/(1 + tanh(u_x) tanh(u_y))", nil, []identity.Verdict{proved}},
		{"tanh(u_x + u_y) = (tanh(u_x) + tanh(u_y))/(1 - tanh(u_x) tanh(u_y))", nil, []identity.Verdict{refuted}},
		{"d_x(tanh(u)) = (1 - tanh(u)^2) u_x", nil, []identity.Verdict{proved}},
		{"sinh(3 u) = 3 sinh(u) + 4 sinh(u)^3", nil, []identity.Verdict{proved}},
		{"cosh(3 u) = 4 cosh(u)^3 + 3 cosh(u)", nil, []identity.Verdict{refuted}},
		{"erf(-u_x) = -erf(u_x)", nil, []identity.Verdict{proved}},
		{"erf(u_y - u_x) + erf(u_x - u_y) = 0", nil, []identity.Verdict{proved}},
		{"erf(u_x) = erf(-u_x)", nil, []identity.Verdict{refuted}},
		{"d_x(erf(u)) = 2/sqrt(pi)*exp(-u^2) u_x", nil, []identity.Verdict{proved}},
		{"d_x(erf(u)) = exp(-u^2) u_x", nil, []identity.Verdict{refuted}},
		{"cos(a + b) = cos(a) cos(b) - sin(a) sin(b)", nil, []identity.Verdict{proved}},
		{"cos(a + b) = cos(a) cos(b) + sin(a) sin(b)", nil, []identity.Verdict{refuted}},
		{"sin(a - b) = sin(a) cos(b) - cos(a) sin(b)", nil, []identity.Verdict{proved}},
		{"cos(3 u) = 4 cos(u)^3 - 3 cos(u)", nil, []identity.Verdict{proved}},
		{"cos(3 u) = 4 cos(u)^3 - 2 cos(u)", nil, []identity.Verdict{refuted}},
		{"tan(a + b) = (tan(a) + tan(b))/(1 - tan(a) tan(b))", nil, []identity.Verdict{proved}},
		{"tan(a + b) = (tan(a) + tan(b))/(1 + tan(a) tan(b))", nil, []identity.Verdict{refuted}},
		{"cos(u + pi/2) = -sin(u)", nil, []identity.Verdict{proved}},
		{"cos(u + pi/3) = cos(u)/2 - sqrt(3)/2*sin(u)", nil, []identity.Verdict{proved}},
		{"sin(pi/12) = (sqrt(6) - sqrt(2))/4", nil, []identity.Verdict{proved}},
		{"cos(7 pi/12) = (sqrt(2) - sqrt(6))/4", nil, []identity.Verdict{proved}},
		{"cos(pi/5) = (1 + sqrt(5))/4", nil, []identity.Verdict{open, proved}},
		{"cos(pi/5) = (1 + sqrt(5))/5", nil, []identity.Verdict{refuted}},
		{"cos(pi/5)^2 + sin(6 pi/5)^2 = 1", nil, []identity.Verdict{proved}},
		{"cos(pi/5) = 2 cos(pi/10)^2 - 1", nil, []identity.Verdict{proved}},
		{"cos(2 pi/7) + cos(5 pi/7) = 0", nil, []identity.Verdict{proved}},
		{"sin(11 pi/7) = -sin(3 pi/7)", nil, []identity.Verdict{open, proved}},
		{"sin(11 pi/7) = -cos(pi/14)", nil, []identity.Verdict{open, proved}},
		{"sin(11 pi/7) = sin(4 pi/7)", nil, []identity.Verdict{refuted}},
		{"cos(u) = 1 - 2 sin(u/2)^2", nil, []identity.Verdict{proved}},
		{"cos(u/2) cos(u/3) = (cos(5/6*u) + cos(u/6))/2", nil, []identity.Verdict{proved}},
		{"cos(a u + u) = cos(a u) cos(u) - sin(u) sin(a u)", nil, []identity.Verdict{proved}},
		{"tan(a/2) = sin(a)/(1 + cos(a))", nil, []identity.Verdict{proved}},
		{"tan(a/2) = sin(a)/(1 - cos(a))", nil, []identity.Verdict{refuted}},
		{"sqrt(1 - cos(a)^2) = abs(sin(a))", nil, []identity.Verdict{proved}},
		{"sqrt(1 - cos(a)^2) = sin(a)", nil, []identity.Verdict{refuted}},
		{"norm(cos(a), sin(a)) = 1", nil, []identity.Verdict{proved}},
		{"norm(u_x, u_y)^2 = u_x^2 + u_y^2", nil, []identity.Verdict{proved}},
		{"norm(u_x, u_y) = abs(u_x) + abs(u_y)", nil, []identity.Verdict{refuted}},
	} {
		t.Run(c.states, func(t *testing.T) {
			rec, err := decided(t, state(t, plane, c.states, c.edits...))
			require.NoError(t, err)
			assert.Contains(t, c.want, rec.Verdict, "%+v", rec)
			if rec.Verdict == refuted {
				assert.NotNil(t, rec.Witness)
			}
		})
	}
}

// What a root or a logarithm asks for must be among the assumptions.
func TestConditionsAreRecorded(t *testing.T) {
	for states, want := range map[string]string{
		"log(u_x^2) = 2 log(u_x)":         "u_x > 0",
		"sqrt(u_x)^2 = u_x":               "u_x >= 0",
		"u_x/u_x = 1":                     "u_x != 0",
		"exp(log(u_x)) = u_x":             "u_x > 0",
		"(u_x^2 - 1)/(u_x - 1) = u_x + 1": "u_x - 1 != 0",
	} {
		rec := decide(t, state(t, plane, states))
		if rec.Verdict == identity.Proved {
			assert.Contains(t, rec.Assumptions, want, states)
		}
	}
	// sqrt(u_x^2 u_y) = |u_x| sqrt(u_y) holds where u_y >= 0, which does not
	// follow from u_x^2 u_y >= 0 where u_x is zero.
	rec := decide(t, state(t, plane, "sqrt(u_x^2 u_y) + u_y - sqrt(u_x^2 u_y) >= 0"))
	if rec.Verdict == identity.Proved {
		assert.Contains(t, rec.Assumptions, "u_y >= 0")
	}
}

func TestMeaninglessFormulas(t *testing.T) {
	for _, states := range []string{"log(-1) = 0", "log(0) = 0", "sqrt(-2) = 0", "(-8)^(1/3) = -2", "1/(u_x - u_x) = 0", "1/(cos(a)^2 + sin(a)^2 - 1) = 0"} {
		_, err := decided(t, state(t, plane, states))
		assert.Error(t, err, states)
	}
}

func TestUnknownGivenByItself(t *testing.T) {
	_, err := decided(t, state(t, pair, "u_x = 0", given(t, 0, "u + 1")))
	require.ErrorContains(t, err, "defined by itself")
	_, err = decided(t, state(t, pair, "u_x = 0", given(t, 0, "v_x"), given(t, 1, "u_x")))
	require.ErrorContains(t, err, "defined by itself")
}

// Hölder's inequality on monomials bounds nothing whose coefficient is
// unbounded.
func TestIntegrabilityOfUnboundedCoefficients(t *testing.T) {
	for text, want := range map[string]identity.Verdict{
		"u_x":              identity.Proved,
		"cos(1/x) u_x":     identity.Proved,
		"exp(x) u_x":       identity.Proved,
		"log(x) u_x":       identity.Open,
		"exp(1/x) u_x":     identity.Open,
		"u_x/x":            identity.Open,
		"u_x^2":            identity.Open,
		"exp(u_x)":         identity.Open,
		"log(eps) sin(u)":  identity.Proved,
		"cos(u_y) u_x + 1": identity.Proved,
	} {
		th := plane
		th.fields = map[string]map[string]string{"S": {"x": text}}
		rec := decide(t, state(t, th, "S in L^2", func(c *identity.Claim) {
			c.Integrability = []identity.Exponent{{Node: expr(t, c.Setting, "u_x"), P: big.NewRat(2, 1)}}
		}))
		assert.Equal(t, want, rec.Verdict, "%s: %+v", text, rec)
	}
}

func TestEntropyOfAWell(t *testing.T) {
	field := func(residual string, comps map[string]string) theory {
		th := plane
		th.residual, th.bending, th.energy = residual, "u_xx", "u_x^2"
		th.fields = map[string]map[string]string{"S": comps}
		return th
	}
	jinKohn := map[string]string{"x": "u_x/2 - u_x u_y^2/2 - u_x^3/6", "y": "-(u_y/2 - u_y u_x^2/2 - u_y^3/6)"}
	for _, c := range []struct {
		name string
		th   theory
		want []identity.Verdict
	}{
		{"planar", field("(1 - u_x^2 - u_y^2)/2", jinKohn), []identity.Verdict{identity.Proved}},
		{"planar, coefficient 1/5", field("(1 - u_x^2 - u_y^2)/2", map[string]string{"x": "u_x/2 - u_x u_y^2/2 - u_x^3/5", "y": jinKohn["y"]}), []identity.Verdict{identity.Refuted}},
		{"the residual squared has the same well", field("(1 - u_x^2 - u_y^2)^2", jinKohn), []identity.Verdict{identity.Proved}},
		{"the residual cubed and doubled", field("2 (1 - u_x^2 - u_y^2)^3", jinKohn), []identity.Verdict{identity.Proved}},
		{"a multiple of the residual with a positive factor", field("(1 - u_x^2 - u_y^2) (1 + u_x^2)", jinKohn), []identity.Verdict{identity.Proved, identity.Open}},
		{"a larger well", field("(1 - u_x^2 - u_y^2) u_x", jinKohn), []identity.Verdict{identity.Refuted}},
		{"another radius", field("(2 - u_x^2 - u_y^2)/2", jinKohn), []identity.Verdict{identity.Refuted}},
		{"no real zeros: everything is an entropy", field("1 + u_x^2 + u_y^2", map[string]string{"x": "u_x^3"}), []identity.Verdict{identity.Proved}},
		{"R e_x is none", field("(1 - u_x^2 - u_y^2)/2", map[string]string{"x": "(1 - u_x^2 - u_y^2)/2"}), []identity.Verdict{identity.Refuted}},
		{"R^2 times anything", field("(1 - u_x^2 - u_y^2)/2", map[string]string{"x": "(1 - u_x^2 - u_y^2)^2 u_y", "y": "(1 - u_x^2 - u_y^2)^2 exp(u_x)"}), []identity.Verdict{identity.Proved}},
		{"infinitesimal rotation", field("(1 - u_x^2 - u_y^2)/2", map[string]string{"x": "u_y", "y": "-u_x"}), []identity.Verdict{identity.Proved}},
		{"quartic well, no entropy", field("1 - u_x^4 - u_y^4", jinKohn), []identity.Verdict{identity.Refuted}},
		{"quartic well, R^2", field("1 - u_x^4 - u_y^4", map[string]string{"x": "(1 - u_x^4 - u_y^4)^2"}), []identity.Verdict{identity.Proved}},
		{"quartic well without rational points on it", field("3 - u_x^4 - u_y^4", map[string]string{"x": "u_x"}), []identity.Verdict{identity.Refuted}},
	} {
		t.Run(c.name, func(t *testing.T) {
			rec, err := decided(t, state(t, c.th, "entropy(S)"))
			require.NoError(t, err)
			assert.Contains(t, c.want, rec.Verdict, "%+v", rec)
		})
	}
	_, err := decided(t, state(t, eikonal, "entropy(Sigma)", given(t, 0, "x")))
	assert.Error(t, err, "a claim about every gradient")
	// With u_z held constant the layered field is an entropy of what is left.
	rec := decide(t, state(t, layered, "entropy(Sigma)", restricting(t, 0, jet.Index{0, 0, 1}, "1/2")))
	assert.Equal(t, identity.Proved, rec.Verdict, "%+v", rec)
}
