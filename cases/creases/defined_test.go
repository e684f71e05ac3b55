package creases_test

import (
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity/claim"
)

// plain is a surface without a model, whose energy is its area.
func plain(coordinates, branches, combine, domain string) string {
	return `[space]
coordinates = [` + coordinates + `]
unknowns = ["u"]
[[surface]]
name = "s"
density = "1"
branches = [` + branches + `]
combine = "` + combine + `"
` + domain + "\n"
}

const (
	inPlane = `"x", "y"`
	inSpace = `"x", "y", "z"`
	square  = `box = { x = ["-2", "2"], y = ["-2", "2"] }`
	cube    = `box = { x = ["-1", "1"], y = ["-1", "1"], z = ["-1", "1"] }`
)

func TestBranchesWithoutValues(t *testing.T) {
	for _, v := range []struct{ text, want string }{
		{layeredHead + `branches = ["x + z/2", "-x + z/2", "-(x^2 + y^2)/(2*z) - 5"]
combine = "max"
box = { x = ["-2", "2"], y = ["-1", "1"], z = ["-1", "1"] }
`, "branch 3, -(x^2 + y^2)/(2*z) - 5, is infinite at (x, y, z)"},
		{plain(inPlane, `"norm(x,y)", "-x", "sqrt(x^2-1/4)-100"`, "max", square), "branch 3, sqrt(x^2-1/4)-100, is not defined at (x, y)"},
		{plain(inSpace, `"log(x)", "y"`, "max", cube), "branch 1, log(x), is not defined"},
		{plain(inSpace, `"x", "y", "1/(x^2 + y^2 - 1/2)^2"`, "max", cube), "branch 3, 1/(x^2 + y^2 - 1/2)^2, is infinite"},
		// Neither side has it, but the two are not the same.
		{plain(inSpace, `"x", "-x", "1/z"`, "max(min(1, 3), 2)", cube), "branch 3, 1/z, is infinite"},
	} {
		r := one(t, v.text)
		assert.Equal(t, claim.Open, r.Verdict)
		assert.Nil(t, r.Energy)
		assert.Contains(t, r.Reason, v.want)
		assert.Contains(t, r.Reason, "inside the domain")
	}
}

// A pole that does not matter, one that cancels, one in the boundary, and a place
// of no value beyond other branches.
func TestBranchesWithoutValuesThatDoNotMatter(t *testing.T) {
	const half = `box = { x = ["-1", "1"], y = ["-1", "1"], z = ["0", "1"] }`
	for _, v := range []struct {
		text string
		want float64
	}{
		{plain(inSpace, `"x", "-x", "-1/z^2 - 5"`, "max", cube), 4},
		{plain(inSpace, `"x", "-x", "(z^2 - 1)/(z - 1) - 5"`, "max", cube), 4},
		{plain(inSpace, `"x", "-x", "-1/z - 5"`, "max", half), 2},
		{plain(inSpace, `"x", "-x", "1/(z + 2) - 5"`, "max", half), 2},
	} {
		r := one(t, v.text)
		require.NotNil(t, r.Energy, r.Reason)
		assert.InEpsilon(t, v.want, *r.Energy, 1e-9, v.text)
	}
	// The denominator changes its sign, and the numerator vanishes with it.
	r := one(t, plain(inPlane, `"x", "-x", "(sqrt(1 + y^2) - 1)/y - 5"`, "max", square))
	assert.NotContains(t, r.Reason, "infinite")
}

// Where a cone touches a tangent plane, or a distance a tangent line, there is no
// crease, and the one is no condition on the creases of the other.
func TestBranchesThatTouch(t *testing.T) {
	const disc = `ball = { center = ["0", "0"], radius = "2" }`
	for _, v := range []struct {
		text string
		want float64
	}{
		{plain(inPlane, `"norm(x,y)", "-x"`, "max", square), 0},
		{plain(inPlane, `"norm(x,y)", "-x"`, "min", square), 0},
		{plain(inPlane, `"norm(x,y)", "-(3/5) x - (4/5) y", "1/2"`, "max", disc), math.Pi},
		{plain(inPlane, `"norm(x,y)", "-(3/5) x - (4/5) y", "1/2"`, "max(min(1, 2), 3)", disc), 2 * math.Sqrt(4-0.25)},
		{plain(inPlane, `"-norm(x - 1,y)", "x - 1", "-1/2"`, "min", disc), math.Pi},
		{layeredHead + `branches = ["norm(x, y) + z/2", "x + z/2"]
combine = "max"
cylinder = { center = ["0", "0"], radius = "1", heights = ["0", "1"] }
`, 0},
	} {
		r := one(t, v.text)
		require.NotNil(t, r.Energy, r.Reason)
		assert.Empty(t, r.Reason)
		assert.InDelta(t, v.want, *r.Energy, 1e-9, v.text)
	}
	// A plane that cuts the cone, and a root that has a kink of its own.
	r := one(t, plain(inPlane, `"norm(x,y)", "-2 x - 1"`, "max", square))
	require.NotNil(t, r.Energy, r.Reason)
	assert.Greater(t, *r.Energy, 1.0)
	r = one(t, plain(inPlane, `"sqrt(x^2)", "0"`, "max", square))
	assert.False(t, r.Energy != nil && *r.Energy == 0 && r.Verdict != claim.Open, "a kink taken for no crease")
}
