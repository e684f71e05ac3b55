package creases_test

import (
	"encoding/json"
	"fmt"
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/creases"
)

// level is the area of a level set in a box.
func level(t *testing.T, phi, x, y, z string) creases.Result {
	t.Helper()
	return one(t, layeredHead+fmt.Sprintf("density = \"1\"\nlevel = %q\nbox = { x = [%s], y = [%s], z = [%s] }\n", phi, x, y, z))
}

// Where phi is not defined in a part of the box, or has poles, no sheet gets
// lost, and the error stands.
func TestLevelSetOfAPartialFunction(t *testing.T) {
	const b = `"-2", "2"`
	line := func(f func(y float64) float64, lo, hi float64) float64 {
		sum, n := 0.0, 4000
		for i := range n {
			sum += f(lo+(hi-lo)*(float64(i)+0.5)/float64(n)) * (hi - lo) / float64(n)
		}
		return sum
	}
	for _, test := range []struct {
		phi, x string
		want   float64
		slack  float64 // of want
	}{
		{"sqrt(x) - 1/2", b, 16, 0},
		{"sqrt(x + 1) - 1", b, 16, 0},
		{"log(x) - 1/2", b, 16, 0},
		{"log(x) + y", b, 4 * line(func(y float64) float64 { return math.Sqrt(1 + math.Exp(-2*y)) }, -math.Ln2, 2), 1e-6},
		{"1/x - 1", `"0", "2"`, 16, 0},
		{"x^(1/3) - 1", b, 16, 0},
		{"x^(-1/2) - 1", b, 16, 0},
		{"x^2/x - 1", b, 16, 0},
		{"sqrt(1 - x^2 - y^2) - z", b, 2 * math.Pi, 0},
		{"x^(-1) - 1", b, 16, 0},
		{"1/x - 1", b, 16, 0},
		{"tan(x) - 1/3", `"-5", "5"`, 48, 0},
	} {
		r := level(t, test.phi, test.x, b, b)
		require.NotNil(t, r.Energy, "%s: %s", test.phi, r.Reason)
		assert.LessOrEqual(t, math.Abs(*r.Energy-test.want), *r.Error+test.slack, test.phi)
		assert.LessOrEqual(t, *r.Error, 1e-9**r.Energy, test.phi)
		assert.Empty(t, r.Reason, test.phi)
	}
}

// A surface tangent to a face of the box from within, given in a form whose
// rounding errors hide it.
func TestTangentToTheBox(t *testing.T) {
	for _, phi := range []string{"x^2 + y^2 + (z - 1)^2 - 1", "x^2 + y^2 + z^2 - 2*z", "1/3*(x^2 + y^2 + (z - 1)^2) - 1/3"} {
		r := level(t, phi, `"-2", "2"`, `"-2", "2"`, `"0", "2"`)
		require.NotNil(t, r.Energy, r.Reason)
		assert.InEpsilon(t, 4*math.Pi, *r.Energy, 1e-11, phi)
		assert.LessOrEqual(t, *r.Error, 1e-9, phi)
	}
}

// Where the only points of a crease are tangent to the domain or to each other,
// what the undecided cells can hold is judged by the density about them, and
// the document can be written.
func TestTouching(t *testing.T) {
	for _, text := range []string{
		`branches = ["x + z/2", "-x + z/2"]
combine = "max"
ball = { center = ["1", "0", "0"], radius = "1" }
`, `branches = ["-(x^2 + y^2)/(2 (z + 3))", "0"]
combine = "max"
box = { x = ["-2", "2"], y = ["-2", "2"], z = ["-2", "2"] }
`} {
		r := one(t, layeredHead+text)
		require.NotNil(t, r.Energy, r.Reason)
		assert.Zero(t, *r.Energy)
		assert.Less(t, *r.Error, 1e-12)
	}
	_, err := json.Marshal(creases.Pair{Error: math.Inf(1)})
	assert.NoError(t, err)
	text, err := json.Marshal(creases.Pair{Branches: [2]int{1, 2}, Energy: 2, Error: 0.5})
	require.NoError(t, err)
	assert.JSONEq(t, `{"branches": [1, 2], "energy": 2, "error": 0.5, "area": 0}`, string(text))
}

// Next to the tip of a cone that a sheet passes through Newton's method is not
// quadratic, and the traces have kinks that are not those of the surface.
func TestTipsOnSheets(t *testing.T) {
	for _, test := range []struct {
		text string
		want float64 // found by scanning along lines, 90² in each direction
	}{
		{`branches=["-2*x + 3/2*y + 25/8*z - 2", "7/5*x + 1/10*y + 197/200*z - 1/2", "-2*x + y + 5/2*z + 1", "-1/2*norm(x - 1, y - 1) + 1/8*z + 2", "-((x + 2/5)^2 + (y + 3/10)^2)/(2*(z + 3/2)) + 17/10"]
combine="min(max(2, min(5, 1)), min(4, 3))"
box={x=["-3/2","2"], y=["-3/2","5/4"], z=["0","3/2"]}
`, 33.568},
		{`branches=["3/2*norm(x, y - 1) + 9/8*z + 2", "-((x - 1/5)^2 + (y - 1/5)^2)/(2*(z + 1)) + 11/10", "-((x + 5/7)^2 + (y + 3/7)^2)/(2*(z + 2)) - 6/7", "1/2*norm(x - 1, y + 1) + 1/8*z + 1/2"]
combine="min(1, max(2, 3, 4))"
ball={center=["-1/4","-1/4","1"],radius="7/4"}
`, 0.0006864},
	} {
		r := one(t, layeredHead+test.text)
		require.NotNil(t, r.Energy, r.Reason)
		assert.InEpsilon(t, test.want, *r.Energy, 1e-3)
		assert.LessOrEqual(t, *r.Error, 1e-9**r.Energy)
	}
}

// Two branches that touch along a line make no crease there, and do not keep
// the others from being known.
func TestTouchingBesideACrease(t *testing.T) {
	r := one(t, layeredHead+`branches=["-((x + 7/10)^2 + y^2)/(2*(z + 1)) - 6/5", "-((x + 1)^2 + y^2)/(2*(z + 2)) + 1", "-(x^2 + (y + 1)^2)/(2*(z + 3/2))", "-(x^2 + (y + 1)^2)/(2*(z + 2))"]
combine="min(max(1, 2), 3, 4)"
box={x=["-1","7/4"], y=["-2","5/4"], z=["0","3/2"]}
`)
	require.NotNil(t, r.Energy, r.Reason)
	assert.Empty(t, r.Reason)
	assert.InEpsilon(t, 0.01303154, *r.Energy, 1e-6)
	assert.LessOrEqual(t, *r.Error, 1e-9**r.Energy)
}

// The size of phi does not matter.
func TestScaleOfALevelSet(t *testing.T) {
	for _, factor := range []string{"10^(-300)", "10^(-200)", "10^200", "10^300"} {
		r := level(t, factor+"*(x^2 + y^2 + z^2 - 1)", `"-2", "2"`, `"-2", "2"`, `"-2", "2"`)
		require.NotNil(t, r.Energy, "%s: %s", factor, r.Reason)
		assert.InEpsilon(t, 4*math.Pi, *r.Energy, 1e-11, factor)
	}
}

// Curves with nodes and cusps.
func TestSingularCurves(t *testing.T) {
	for _, test := range []struct {
		phi  string
		want float64
	}{
		{"x*y", 8},
		{"(x^2 + y^2)^2 - x^2 + y^2", math.Pow(math.Gamma(0.25), 2) / math.Sqrt(2*math.Pi)},
		{"(x^2 + y^2 - 1)^3 + 27*x^2*y^2", 6},
		{"y^2 - x^3", 2 * (math.Pow(4+9*math.Cbrt(4), 1.5) - 8) / 27}, // to y = 2
	} {
		r := one(t, eikonalHead+fmt.Sprintf("density = \"1\"\nlevel = %q\nbox = { x = [\"-2\", \"2\"], y = [\"-2\", \"2\"] }\n", test.phi))
		require.NotNil(t, r.Energy, "%s: %s", test.phi, r.Reason)
		assert.LessOrEqual(t, math.Abs(*r.Energy-test.want), *r.Error, test.phi)
		assert.InDelta(t, test.want, *r.Energy, 1e-7, test.phi)
	}
}
