package creases_test

import (
	"errors"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/entropy/source"
	"creaseproof/identity"
)

const layeredHead = `
[space]
coordinates = ["x", "y", "z"]
unknowns    = ["u"]
constants   = ["eps"]
assume      = ["eps > 0"]
[frame]
plane = ["x", "y"]
axes  = ["xi", "eta"]
angle = "theta"
[let]
R = "u_z - (u_x^2 + u_y^2)/2"
L = "u_xx + u_yy"
e = "R^2/(2 eps) + eps L^2/2"
[model]
residual = "R"
bending  = "L"
energy   = "e"
[field.Sigma]
xi  = "u_z u_xi - u_xi u_eta^2/2 - u_xi^3/6"
eta = "-(u_z u_eta - u_eta u_xi^2/2 - u_eta^3/6)"
z   = "(u_eta^2 - u_xi^2)/2"
[[surface]]
name = "s"
`

const eikonalHead = `
[space]
coordinates = ["x", "y"]
unknowns    = ["u"]
constants   = ["eps", "c"]
[let]
R = "(1 - u_x^2 - u_y^2)/2"
L = "u_xx + u_yy"
e = "R^2/(2 eps) + eps L^2/2"
[model]
residual = "R"
bending  = "L"
energy   = "e"
[[surface]]
name = "s"
`

// run evaluates the one surface of a case.
func run(t *testing.T, text string) ([]creases.Result, error) {
	t.Helper()
	c, err := cases.Parse("case.toml", []byte(text))
	require.NoError(t, err)
	return creases.New(c.Setting, "case.toml").Evaluate(t.Context(), &c.File.Surfaces[0], creases.Options{})
}

func one(t *testing.T, text string) creases.Result {
	t.Helper()
	rs, err := run(t, text)
	require.NoError(t, err)
	require.Len(t, rs, 1)
	return rs[0]
}

const wall = `polygon = [["0", "0", "0"], ["0", "1", "0"], ["0", "0", "1"]]
`

// What fails a check has no energy, is open, and names the place.
func TestRefused(t *testing.T) {
	for _, test := range []struct {
		name, head, surface string
		want                []string
	}{
		{"off the well", layeredHead, `plus = "x + z/3"
minus = "-x + z/2"
` + wall, []string{"plus trace is off the well", "at (x, y, z) = (0, ", "residual is -0.166667"}},
		{"off the well by less than rounding can tell", layeredHead, `plus = "x + z/2"
minus = "-x + z/2 + z/1000000000000"
` + wall, []string{"minus trace is off the well", "residual is 1e-12"}},
		{"off the well somewhere else", layeredHead, `plus = "x + z/2"
minus = "-x + z/2 + z y^2/1000000"
` + wall, []string{"minus trace is off the well", "at (x, y, z) = "}},
		{"off the well on a patch", layeredHead, `plus = "-(x^2 + y^2)/(2 z)"
minus = "-k + z/100000"
values = { k = "3/2" }
patch = { map = ["sqrt(2 k t) cos(a)", "sqrt(2 k t) sin(a)", "t"], over = { t = ["1/2", "3"], a = ["0", "2 pi"] } }
`, []string{"minus trace is off the well", "(t, a) = (", "k = 3/2", "residual is 1e-05"}},
		{"the kink of a trace on the surface", eikonalHead, `plus = "abs(x)"
minus = "abs(x)"
polygon = [["0", "-1"], ["0", "1"]]
`, []string{"plus trace has a kink on the surface", "at (x, y) = (0, "}},
		{"such a kink on one side", layeredHead, `plus = "x + z/2"
minus = "-abs(x) + z/2"
` + wall, []string{"minus trace has a kink on the surface"}},
		{"gradient off the well", eikonalHead, `plus_gradient = ["t/2", "-1"]
minus_gradient = ["0", "1"]
patch = { map = ["t", "0"], over = { t = ["0", "1"] } }
`, []string{"plus trace is off the well", "at (x, y) = (", "(t) = ("}},
		{"discontinuous", layeredHead, `plus = "x + z/2"
minus = "-x + z/2 + 1"
` + wall, []string{"u is discontinuous", "jumps by -1"}},
		{"slightly discontinuous", layeredHead, `plus = "x + z/2"
minus = "-x + z/2 + 1/1000000"
` + wall, []string{"u is discontinuous", "jumps by -1e-06"}},
		{"discontinuous by less than a gradient's rounding", eikonalHead, `plus = "-x"
minus = "x + 10^(-14)"
polygon = [["0", "0"], ["0", "1"]]
`, []string{"u is discontinuous", "by an enclosure"}},
		{"discontinuous far from zero", eikonalHead, `plus = "-x + 10^6"
minus = "x + 10^6 + 10^(-12)"
polygon = [["0", "0"], ["0", "1"]]
`, []string{"u is discontinuous", "by an enclosure"}},
		{"discontinuous away from the samples", layeredHead, `plus = "x + z/2 + (abs(y - 9/10) + y - 9/10)^2/10^9"
minus = "-x + z/2"
density = "1"
` + strings.Replace(wall, `"1", "1"`, `"1", "1"`, 1), []string{"u is discontinuous"}},
		{"a trace that is nowhere real", eikonalHead, `plus = "sqrt(-1 - x^2)"
minus = "x"
density = "1"
polygon = [["0", "0"], ["0", "1"]]
`, []string{"the plus trace is not a real number"}},
		{"a trace that is not real with a real gradient", eikonalHead, `plus = "log(-1 - x^2)"
minus = "x"
density = "1"
polygon = [["0", "0"], ["0", "1"]]
`, []string{"the plus trace is not a real number"}},
		{"not normal", layeredHead, `plus_gradient = ["1", "0", "1/2"]
minus_gradient = ["-1", "0", "1/2"]
polygon = [["0", "0", "0"], ["1", "1", "0"], ["0", "0", "1"]]
`, []string{"not normal to the surface", "tangential part is"}},
		{"slightly not normal", layeredHead, `plus_gradient = ["1", "0", "1/2"]
minus_gradient = ["-1", "0", "1/2"]
polygon = [["0", "0", "0"], ["1/100000", "1", "0"], ["0", "0", "1"]]
`, []string{"not normal to the surface"}},
		{"a trace that is no number", layeredHead, `plus = "sqrt(x - 1) + z/2"
minus = "0"
` + wall, []string{"the plus trace is not a real number", "at (x, y, z) = (0, "}},
		{"a gradient that is no number", eikonalHead, `plus_gradient = ["0", "log(t - 1/2)/log(t - 1/2)"]
minus_gradient = ["0", "-1"]
patch = { map = ["t", "0"], over = { t = ["0", "1"] } }
`, []string{"the gradient of the plus trace is not a real number", "(t) = ("}},
		{"a map that is no number", layeredHead, `density = "1"
patch = { map = ["sqrt(t)", "a", "t"], over = { t = ["-1", "1"], a = ["0", "1"] } }
`, []string{"position or tangent of the surface is not finite"}},
		{"a density that is no number", layeredHead, `density = "sqrt(nu_x)"
patch = { map = ["cos(a)", "sin(a)", "t"], over = { t = ["0", "1"], a = ["0", "2 pi"] } }
`, []string{"density is not a real number", "(t, a) = ("}},
		{"a degenerate patch", layeredHead, `density = "1"
patch = { map = ["t", "t", "t"], over = { t = ["0", "1"], a = ["0", "1"] } }
`, []string{"degenerate", "at (x, y, z) = "}},
		{"a degenerate polygon", layeredHead, `density = "1"
polygon = [["0", "0", "0"], ["1", "1", "1"], ["2", "2", "2"]]
`, []string{"no area"}},
		{"a polygon that is not flat", layeredHead, `density = "1"
polygon = [["0", "0", "0"], ["1", "0", "0"], ["1", "1", "1"], ["0", "1", "0"]]
`, []string{"not flat"}},
		{"an empty range", layeredHead, `density = "1"
patch = { map = ["t", "a", "0"], over = { t = ["1", "0"], a = ["0", "1"] } }
`, []string{"increasing order"}},
		{"a value against an assumption", layeredHead, `density = "1"
values = { eps = "sqrt(2) - 3/2" }
` + wall, []string{`"eps > 0"`, "eps = sqrt(2) - 3/2"}},
		{"a value that cannot be told from zero", layeredHead, `density = "1"
values = { eps = "sqrt(3 + 2 sqrt(2)) - 1 - sqrt(2)" }
` + wall, []string{`"eps > 0"`, "cannot be decided"}},
		{"a place against an assumption", strings.Replace(eikonalHead, "[let]", "assume = [\"y > 0\"]\n[let]", 1), `density = "1"
polygon = [["0", "1"], ["0", "-8"]]
`, []string{`"y > 0"`, "does not hold at (x, y) = (0, "}},
	} {
		rs, err := run(t, test.head+test.surface)
		require.NoError(t, err, test.name)
		r := rs[0]
		assert.Nil(t, r.Energy, test.name)
		assert.Nil(t, r.Error, test.name)
		assert.Equal(t, identity.Open, r.Verdict, test.name)
		assert.False(t, r.Met, test.name)
		for _, w := range test.want {
			assert.Contains(t, r.Reason, w, test.name)
		}
	}
}

// One choice of values may be refused and another not.
func TestRefusedForOneValue(t *testing.T) {
	rs, err := run(t, layeredHead+`values = { m = ["1", "2"] }
plus = "m x + m^2 z/2"
minus = "0"
polygon = [["0", "0", "0"], ["0", "1", "0"], ["-1/2", "1", "1"], ["-1/2", "0", "1"]]
energy = "1/12"
`)
	require.NoError(t, err)
	require.Len(t, rs, 2)
	assert.True(t, rs[0].Met, rs[0].Reason)
	assert.False(t, rs[1].Met)
	assert.Nil(t, rs[1].Energy)
	assert.Contains(t, rs[1].Reason, "discontinuous")
	assert.Contains(t, rs[1].Reason, "for m = 2")
}

// Mistakes in the file are errors with their place.
func TestFaults(t *testing.T) {
	for _, test := range []struct {
		head, surface string
		line          int // in the surface, from 1
		want          string
	}{
		{layeredHead, `plus = "u + x"
minus = "0"
` + wall, 1, "the unknown u has no value"},
		{layeredHead, `plus = "x + eps"
minus = "0"
` + wall, 1, "the constant eps has no value"},
		{layeredHead, `plus = "x + q"
minus = "0"
` + wall, 1, "q"},
		{layeredHead, `plus = "t"
minus = "0"
patch = { map = ["t", "a", "t"], over = { t = ["0", "1"], a = ["0", "1"] } }
`, 1, "t"},
		{layeredHead, `density = "[u_x]"
` + wall, 1, ""},
		{layeredHead, `density = "u_x"
` + wall, 1, "the derivative u_x has no value"},
		{layeredHead, `density = "theta"
` + wall, 1, "the angle theta has no value"},
		{layeredHead, `density = "sup(theta, [Sigma].nu) + [Sigma].nu"
plus = "x + z/2"
minus = "-x + z/2"
` + wall, 1, "angle theta has no value"},
		{layeredHead, `density = "sup(theta, [Sigma].nu + ([Sigma].nu)^2)"
plus = "x + z/2"
minus = "-x + z/2"
` + wall, 1, "2 harmonics at once"},
		{layeredHead, `density = "u_x"
plus = "x + z/2"
minus = "-x + z/2"
` + wall, 1, "two traces"},
		{layeredHead, `density = "1/(nu_x - nu_x)"
` + wall, 1, "vanishes identically"},
		{layeredHead, `density = "1"
energy = "log(0)"
` + wall, 2, ""},
		{layeredHead, `density = "1"
energy = "x"
` + wall, 2, "x has no value here"},
		{layeredHead, `density = "1"
energy = "1/(k - 1)"
values = { k = "1" }
` + wall, 2, "vanishes identically"},
		{layeredHead, `density = "1"
values = { x = "1" }
` + wall, 2, "coordinate"},
		{layeredHead, `density = "1"
values = { k = "x" }
` + wall, 2, "x"},
		{layeredHead, `density = "k"
values = { k = ["1", "1/(1 - 1)"] }
` + wall, 2, "vanishes identically"},
		{layeredHead, `density = "k"
values = { k = "log(-1)" }
` + wall, 2, "log of the negative number -1"},
		{layeredHead, `density = "k"
values = { k = "j", j = "k" }
` + wall, 2, "defined by itself"},
		{layeredHead, `density = "1"
patch = { map = ["t", "x", "0"], over = { t = ["0", "1"], x = ["0", "1"] } }
`, 2, "coordinate"},
		{layeredHead, `density = "1"
patch = { map = ["t", "eps", "0"], over = { t = ["0", "1"], eps = ["0", "1"] } }
`, 2, "constant"},
		{layeredHead, `density = "1"
patch = { map = ["t", "a", "x"], over = { t = ["0", "1"], a = ["0", "1"] } }
`, 2, "the coordinate x has no value"},
		{layeredHead, `density = "1"
patch = { map = ["t", "0"], over = { t = ["0", "1"] } }
`, 2, "components"},
		{layeredHead, `density = "1"
graph = { of = "x^2", over = { x = ["0", "1"], x = ["0", "1"] } }
`, -1, ""},
		{layeredHead, `density = "1"
graph = { of = "z", over = { x = ["0", "1"], y = ["0", "1"] } }
`, 2, "the coordinate z has no value"},
		{layeredHead, `plus = "0"
minus = "0"
level = "x"
box = { x = ["-1", "1"], y = ["-1", "1"] }
`, 4, "the box has no range of z"},
		{layeredHead, `plus = "0"
minus = "0"
level = "x"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["1", "1"] }
`, 4, "the range of z is empty"},
		{layeredHead, `branches = ["x", "-x", "y"]
combine = "max(min(1, 2), 4)"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["-1", "1"] }
`, 2, "there is no branch 4"},
		{layeredHead, `branches = ["abs(x) + z/2", "0"]
combine = "max"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["-1", "1"] }
`, 1, "a kink of its own"},
		{layeredHead, `branches = ["x + z/2", "0", "x + 1/2 z"]
combine = "max"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["-1", "1"] }
`, 1, ""},
		{layeredHead, `branches = ["x + z/2", "0", "(2 x + z)/2"]
combine = "max"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["-1", "1"] }
`, 1, "branches 1 and 3 are the same function"},
		{layeredHead, `branches = ["x + z/2", "0"]
combine = "max"
ball = { center = ["0", "0"], radius = "1" }
`, 3, "a centre of 2 coordinates in 3 dimensions"},
		{layeredHead, `branches = ["x + z/2", "0"]
combine = "max"
ball = { center = ["0", "0", "0"], radius = "-1" }
`, 3, "must be positive"},
		{layeredHead, `branches = ["x + z/2", "0"]
combine = "max"
cylinder = { center = ["0", "0"], radius = "1", axis = "w", heights = ["0", "1"] }
`, 3, "is no coordinate"},
		{strings.Replace(layeredHead, "eps L^2/2", "eps L^2", 1), `plus = "x + z/2"
minus = "-x + z/2"
` + wall, 0, "no profile cost: the energy is not"},
		{strings.Replace(eikonalHead, "(1 -", "(c -", 1), `plus = "y"
minus = "-y"
polygon = [["0", "0"], ["1", "0"]]
`, 0, `the residual of the model has the constant c, which has no value here
    s
    ^
    give it one: values = { c = "1" }`},
		{eikonalHead, `plus = "c y"
minus = "-y"
polygon = [["0", "0"], ["1", "0"]]
`, 1, `give it one: values = { c = "1" }`},
		{strings.Replace(eikonalHead, "[model]", "A = \"2 c\"\n[model]", 1), `density = "1"
patch = { map = ["t", "0"], over = { t = ["0", "A"] } }
`, 2, `give it one: values = { c = "1" }`},
		{strings.Replace(eikonalHead, "[model]", "A = \"2 c\"\n[model]", 1), `density = "A"
patch = { map = ["t", "0"], over = { t = ["0", "1"] } }
`, 1, `give it one: values = { c = "1" }`},
	} {
		text := test.head + test.surface
		c, err := cases.Parse("case.toml", []byte(text))
		if err != nil {
			assert.True(t, test.line < 0 || test.want == "", "%s: %v", test.surface, err)
			continue
		}
		_, err = creases.New(c.Setting, "case.toml").Evaluate(t.Context(), &c.File.Surfaces[0], creases.Options{})
		if !assert.Error(t, err, test.surface) {
			continue
		}
		assert.ErrorContains(t, err, test.want, test.surface)
		var e *source.Error
		if assert.True(t, errors.As(err, &e), "%s: %v", test.surface, err) {
			assert.Equal(t, strings.Count(test.head, "\n")+test.line, e.Line, "%s: %v", test.surface, err)
			assert.Equal(t, "case.toml", e.File)
		}
	}
}
