package creases_test

import (
	"fmt"
	"math"
	"math/big"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/creases"
	"creaseproof/identity"
)

const rectangle = `branches = ["1 - x", "1 + x", "1/2 - y", "1/2 + y"]
combine = "min"
box = { x = ["-1", "1"], y = ["-1/2", "1/2"] }
`

// Affine branches have exact energies, and claims are decided.
func TestAffineBranches(t *testing.T) {
	three := `branches = ["x + z/2", "-(3/5) x + (4/5) y + z/2", "-(3/5) x - (4/5) y + z/2"]
combine = "max"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["0", "1"] }
`
	for _, test := range []struct {
		name, head, surface, claim string
		verdict                    identity.Verdict
		exact, says                string
	}{
		{"rectangle", eikonalHead, rectangle, "4/3", identity.Proved, "4/3", ""},
		{"wrong by a little", eikonalHead, rectangle, "4/3 + 10^(-40)", identity.Refuted, "4/3", "the energy is 4/3 by exact arithmetic"},
		{"wrong by much", eikonalHead, rectangle, "1", identity.Refuted, "4/3", "differ by 0.333"},
		{"irrational claim", eikonalHead, rectangle, "sqrt(16/9)", identity.Proved, "4/3", ""},
		{"irrational and wrong", eikonalHead, rectangle, "sqrt(2)", identity.Refuted, "4/3", ""},
		{"rounded", eikonalHead, rectangle + "within = 1e-6\n", "1.3333333", identity.Proved, "4/3", ""},
		{"rounded too far", eikonalHead, rectangle + "within = 1e-9\n", "1.3333333", identity.Refuted, "4/3", ""},
		{"rounded to the limit", eikonalHead, rectangle + "within = 1e-3\n", "4000/3003", identity.Proved, "4/3", ""},
		// Three rays of lengths √5/2, √5/2 and 1: |q|³/12 times the length is
		// 8/15, 8/15 and 128/375.
		{"three fronts on a line", layeredHead, three, "176/125", identity.Proved, "176/125", ""},
		{"lengths", eikonalHead, rectangle + "density = \"1\"\n", "1 + 2 sqrt(2)", identity.Proved, "", ""},
		{"lengths in another form", eikonalHead, rectangle + "density = \"1\"\n", "1 + sqrt(8)", identity.Proved, "", ""},
		{"wrong lengths", eikonalHead, rectangle + "density = \"1\"\n", "1 + 2 sqrt(2) + 10^(-30)", identity.Refuted, "", ""},
		{"no crease", eikonalHead, strings.Replace(rectangle, `y = ["-1/2", "1/2"]`, `y = ["1/4", "3/8"]`, 1), "0", identity.Refuted, "1/12", ""},
		{"none at all", eikonalHead, "branches = [\"x\", \"y\"]\ncombine = \"max\"\nbox = { x = [\"2\", \"3\"], y = [\"0\", \"1\"] }\n", "0", identity.Proved, "0", "no crease in the domain"},
	} {
		r := one(t, test.head+test.surface+fmt.Sprintf("energy = %q\n", test.claim))
		assert.Equal(t, test.verdict, r.Verdict, "%s: %s", test.name, r.Reason)
		assert.Equal(t, identity.Proved, r.Expected, test.name)
		assert.Equal(t, test.exact, r.Exact, test.name)
		assert.Contains(t, r.Reason, test.says, test.name)
	}
}

func TestSquares(t *testing.T) {
	rs, err := run(t, eikonalHead+`values = { s = ["1", "5/3", "4"] }
branches = ["s/2 - x", "s/2 + x", "s/2 - y", "s/2 + y"]
combine = "min"
box = { x = ["-s/2", "s/2"], y = ["-s/2", "s/2"] }
energy = "2 s/3"
`)
	require.NoError(t, err)
	require.Len(t, rs, 3)
	for _, r := range rs {
		assert.Equal(t, identity.Proved, r.Verdict, r.Reason)
		assert.Len(t, r.Pairs, 4)
		var sum float64
		for _, p := range r.Pairs {
			sum += p.Energy
			require.Len(t, p.Sheets, 1)
			assert.Len(t, p.Sheets[0].Vertices, 2)
		}
		assert.InDelta(t, *r.Energy, sum, 1e-15)
	}
}

// The upper envelope of the 64 planes a·x + |a|²(z - 1)/2 with a on a grid is a
// sum of two envelopes in one direction each: 7 walls in each direction between
// neighbours 1/4 apart, 4 wide and 3/4 high, of energy (1/4)³/12 each.
func TestEnvelope(t *testing.T) {
	var list []string
	for i := range 8 {
		for j := range 8 {
			a, b := 2*i-7, 2*j-7
			list = append(list, fmt.Sprintf(`"(%d) x/8 + (%d) y/8 + %d (z - 1)/128"`, a, b, a*a+b*b))
		}
	}
	r := one(t, layeredHead+"branches = ["+strings.Join(list, ", ")+`]
combine = "max"
box = { x = ["-2", "2"], y = ["-2", "2"], z = ["0", "3/4"] }
energy = "7/128"
`)
	assert.Equal(t, identity.Proved, r.Verdict, r.Reason)
	assert.Len(t, r.Pairs, 112)
	for _, root := range r.AreaRoots {
		_, ok := new(big.Rat).SetString(root)
		assert.True(t, ok, root)
	}
}

// Affine branches in a round domain, and branches with irrational
// coefficients, are integrated numerically.
func TestRoundDomain(t *testing.T) {
	const third = `branches = ["x + z/2", "-x/2 + sqrt(3) y/2 + z/2", "-x/2 - sqrt(3) y/2 + z/2"]
combine = "max"
`
	r := one(t, layeredHead+third+`box = { x = ["-1", "1"], y = ["-1", "1"], z = ["0", "1"] }
`)
	// Rays to (1/√3, 1), (1/√3, -1) and (-1, 0), |q|³/12 = √27/12.
	want := math.Sqrt(27) / 12 * (1 + 2*2/math.Sqrt(3))
	require.NotNil(t, r.Energy, r.Reason)
	assert.InDelta(t, want, *r.Energy, math.Max(*r.Error, 4e-16))
	assert.Less(t, *r.Error, 1e-9*want)
	assert.Empty(t, r.Exact)
	r = one(t, layeredHead+third+`cylinder = { center = ["0", "0"], radius = "1", heights = ["0", "1"] }
energy = "3 sqrt(3)^3/12"
within = 1e-9
`)
	assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
	r = one(t, eikonalHead+`branches = ["x", "-x"]
combine = "min"
ball = { center = ["1/3", "1/7"], radius = "2/3" }
energy = "4 sqrt(3)/9"
within = 1e-9
`)
	assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
}

// agrees checks an energy against its value, to 1e-9 and within its error.
func agrees(t *testing.T, want float64, text string) creases.Result {
	t.Helper()
	r := one(t, text)
	require.NotNil(t, r.Energy, r.Reason)
	assert.LessOrEqual(t, math.Abs(*r.Energy-want), 1e-9*math.Abs(want), r.Reason)
	assert.LessOrEqual(t, math.Abs(*r.Energy-want), *r.Error+4e-15*math.Abs(want), r.Reason)
	assert.LessOrEqual(t, *r.Error, 1e-9*math.Abs(want), r.Reason)
	return r
}

const wide = `box = { x = ["-5/2", "5/2"], y = ["-5/2", "5/2"], z = ["1/2", "3"] }
`

func TestParaboloid(t *testing.T) {
	want := 2 * math.Pi * 0.49 / 3 * math.Log(6)
	for _, text := range []string{
		"plus = \"-k\"\nminus = \"-(x^2 + y^2)/(2 z)\"\nlevel = \"x^2 + y^2 - 2 k z\"\n",
		"plus = \"-(x^2 + y^2)/(2 z)\"\nminus = \"-k\"\nlevel = \"k - (x^2 + y^2)/(2 z)\"\n",
		"branches = [\"-(x^2 + y^2)/(2 z)\", \"-k\"]\ncombine = \"max\"\n",
		"branches = [\"-k\", \"-(x^2 + y^2)/(2 z)\"]\ncombine = \"max(2, 1)\"\n",
		// A third branch that is nowhere the largest changes nothing.
		"branches = [\"-(x^2 + y^2)/(2 z)\", \"-2 k\", \"-k\"]\ncombine = \"max\"\n",
	} {
		agrees(t, want, layeredHead+"values = { k = \"7/10\" }\n"+text+wide)
	}
}

// The foci of a hyperbolic ridge, where the branches are not smooth, lie
// inside the box. The same ridge as a patch: a = 1/2, b = √3/2.
func TestHyperbola(t *testing.T) {
	patch := one(t, eikonalHead+`plus = "sqrt((x - 1)^2 + y^2)"
minus = "sqrt((x + 1)^2 + y^2) + 1"
patch = { map = ["-cosh(t)/2", "sqrt(3) sinh(t)/2"], over = { t = ["-log(4/sqrt(3) + sqrt(19/3))", "log(4/sqrt(3) + sqrt(19/3))"] } }
`)
	require.NotNil(t, patch.Energy, patch.Reason)
	r := agrees(t, *patch.Energy, eikonalHead+`branches = ["sqrt((x - 1)^2 + y^2)", "sqrt((x + 1)^2 + y^2) + 1"]
combine = "min"
box = { x = ["-2", "2"], y = ["-2", "2"] }
`)
	assert.InDelta(t, *patch.Area, *r.Area, 1e-8)
	// Norms are the same functions.
	agrees(t, *patch.Energy, eikonalHead+`branches = ["norm(x - 1, y)", "norm(x + 1, y) + 1"]
combine = "min"
box = { x = ["-2", "2"], y = ["-2", "2"] }
`)
}

// max(2 |x| + 2 z, |x| + z/2) meets on the cone |x| = -3 z/2.
func TestCones(t *testing.T) {
	agrees(t, math.Pi*3/24, layeredHead+`branches = ["2 sqrt(x^2 + y^2) + 2 z", "sqrt(x^2 + y^2) + z/2"]
combine = "max"
box = { x = ["-2", "2"], y = ["-2", "2"], z = ["-1", "-1/8"] }
`+"# the part below the tip is left out\n"+`density = "norm([u_x], [u_y])^4/(12 norm([u_x], [u_y], [u_z]))*64/63"
`)
}

func TestSphereCutByABox(t *testing.T) {
	agrees(t, 3*math.Pi, layeredHead+`density = "1"
level = "x^2 + y^2 + z^2 - 1"
box = { x = ["-2", "1/2"], y = ["-2", "2"], z = ["-2", "2"] }
`)
	agrees(t, math.Pi/2, layeredHead+`density = "1"
level = "x^2 + y^2 + z^2 - 1"
box = { x = ["0", "2"], y = ["0", "2"], z = ["0", "2"] }
`)
	agrees(t, 8*math.Pi*8*4/45, layeredHead+`density = "2^3 norm(nu_x, nu_y)^4/12"
level = "x^2 + y^2 + z^2 - 4"
ball = { center = ["0", "0", "0"], radius = "3" }
`)
}

// A second sheet, a sphere of 1/200 of the box, is found.
func TestThinSheet(t *testing.T) {
	agrees(t, 4*math.Pi*(1+1.0/2500), layeredHead+`density = "1"
level = "(x^2 + y^2 + z^2 - 1)*((x - 13/10)^2 + (y - 1/5)^2 + (z + 1/7)^2 - 1/2500)"
box = { x = ["-2", "2"], y = ["-2", "2"], z = ["-2", "2"] }
`)
	// Branches: a tube of radius up to 1/200 of the box.
	const k = 5e-5
	want := 2 * math.Pi * k * k / 3 * math.Log(6)
	agrees(t, want, layeredHead+`branches = ["-(x^2 + y^2)/(2 z)", "-1/20000"]
combine = "max"
`+wide)
	// Beside a sheet of a much larger energy.
	r := one(t, layeredHead+`branches = ["-(x^2 + y^2)/(2 z)", "-1/20000", "x + z/2 - 3"]
combine = "max"
`+wide)
	require.NotNil(t, r.Energy, r.Reason)
	require.NotEmpty(t, r.Pairs)
	assert.Equal(t, [2]int{1, 2}, r.Pairs[0].Branches)
	assert.InDelta(t, want, r.Pairs[0].Energy, 1e-3*want)
}

func TestImplicitRefusals(t *testing.T) {
	for name, test := range map[string]struct {
		head, surface, says string
	}{
		"branch off the well": {layeredHead, `branches = ["x + z/2", "x + z/3"]
combine = "max"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["-1", "1"] }
`, `branch 2, x + z/3, is off the well at (x, y, z) = (`},
		"level off the well": {layeredHead, `plus = "-7/10"
minus = "-(x^2 + y^2)/(3 z)"
level = "x^2 + y^2 - (21/10) z"
` + wide, "minus trace is off the well"},
		"level misses the box": {layeredHead, `plus = "-7/10"
minus = "-(x^2 + y^2)/(2 z)"
level = "x^2 + y^2 - (7/5) z"
box = { x = ["3", "5"], y = ["-1", "1"], z = ["1", "2"] }
`, "misses the domain"},
		"discontinuous": {layeredHead, `plus = "-7/10"
minus = "-(x^2 + y^2)/(2 z)"
level = "x^2 + y^2 - (14/11) z"
` + wide, "u is discontinuous"},
		"a kink on the level set": {eikonalHead, `plus = "abs(x)"
minus = "abs(x)"
level = "x"
box = { x = ["-1", "1"], y = ["-1", "1"] }
`, "kink on the surface"},
	} {
		r := one(t, test.head+test.surface)
		assert.Nil(t, r.Energy, name)
		assert.Equal(t, identity.Open, r.Verdict, name)
		assert.Contains(t, r.Reason, test.says, name)
	}
}

// A model without an energy takes the one made of its residual and bending.
func TestModelWithoutEnergy(t *testing.T) {
	r := one(t, strings.Replace(eikonalHead, "energy   = \"e\"\n", "", 1)+rectangle+"energy = \"4/3\"\n")
	assert.Equal(t, identity.Proved, r.Verdict, r.Reason)
}
