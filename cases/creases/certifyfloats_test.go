package creases_test

import (
	"fmt"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/interval"
)

// agree compares the enclosure of an energy with the number, which is computed
// by other means.
func agree(t *testing.T, name, text string) interval.Interval {
	t.Helper()
	r := certified(t, "case.toml", text, nil)[0]
	require.NotNil(t, r.Energy, "%s: %s", name, r.Reason)
	lo, hi := ends(t, r)
	a, _ := lo.Float64()
	b, _ := hi.Float64()
	assert.LessOrEqual(t, a, *r.Energy+1e-12, name)
	assert.GreaterOrEqual(t, b, *r.Energy-1e-12, name)
	assert.Less(t, b-a, 1e-10, name)
	x, err := interval.New(a, b)
	require.NoError(t, err)
	return x
}

// The normal has the same sense on every kind of surface.
func TestCertifiedNormals(t *testing.T) {
	for _, shape := range []string{
		`graph = { of = "x + y^2/2", over = { x = ["0", "1"], y = ["1", "2"] } }`,
		`graph = { of = "x + z^2/2", over = { x = ["0", "1"], z = ["1", "2"] } }`,
		`graph = { of = "y + z^2/2", over = { z = ["0", "1"], y = ["1", "2"] } }`,
		`graph = { of = "x + y^2/2", disc = { center = ["1/3", "0"], radius = "1/2" } }`,
		`graph = { of = "x + y^2/2", triangle = [["0", "0"], ["1", "0"], ["0", "1"]] }`,
		`graph = { of = "x + y^2/2", triangle = [["0", "0"], ["0", "1"], ["1", "0"]] }`,
		`polygon = [["0", "0", "0"], ["1", "0", "1"], ["0", "1", "0"]]`,
		`polygon = [["0", "0", "0"], ["0", "1", "0"], ["1", "0", "1"]]`,
		`patch = { map = ["s", "a", "s a"], over = { s = ["0", "1"], a = ["0", "2"] } }`,
		`patch = { map = ["s", "a", "s a"], over = { a = ["0", "2"], s = ["0", "1"] } }`,
		`patch = { map = ["sin(b) cos(a)", "sin(b) sin(a)/2", "cos(b)/3"], over = { b = ["0", "pi"], a = ["0", "1"] } }`,
		`patch = { map = ["cosh(s)", "exp(a) - s", "tanh(s) + log(2 + a)"], over = { a = ["0", "1"], s = ["-1", "1"] } }`,
	} {
		agree(t, shape, areaHead+"density = \"1 + nu_x/2 + nu_y/3 + nu_z/5\"\n"+shape+"\n")
	}
	plane := `
[space]
coordinates = ["x", "y"]
unknowns    = ["u"]
[[surface]]
name = "s"
density = "1 + nu_x/2 + nu_y/3"
`
	for _, shape := range []string{
		`graph = { of = "x^2", over = { x = ["0", "1"] } }`,
		`graph = { of = "y^2", over = { y = ["0", "1"] } }`,
		`polygon = [["0", "0"], ["1", "2"], ["3", "1"]]`,
		`patch = { map = ["cos(a)", "sin(a)"], over = { a = ["0", "1"] } }`,
	} {
		agree(t, shape, plane+shape+"\n")
	}
}

// Gradients of traces by exact differentiation on the surface, for every
// function of the language.
func TestCertifiedGradients(t *testing.T) {
	for _, f := range []string{
		"sin(%s)", "cos(%s)", "tan(%s)", "sinh(%s)", "cosh(%s)", "tanh(%s)", "exp(%s)", "log(1 + %s)", "sqrt(1 + %s)", "erf(%s)",
		"abs(%s + 2)", "(%s)^3", "(1 + %s)^(1/3)", "(1 + %s)^(-2)", "1/(2 + %s)", "norm(1, %s)",
	} {
		at := func(x string) string { return fmt.Sprintf(f, x) }
		x := agree(t, f, areaHead+fmt.Sprintf(`plus = "%s - %s"
minus = "0"
density = "[u_z] + 2 [u_x] + 3 [u_y]"
graph = { of = "1/3", over = { x = ["1/2", "1"], y = ["0", "1/4"] } }
`, at("z x"), at("x/3")))
		assert.False(t, x.Contains(0), f)
	}
}
