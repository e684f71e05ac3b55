package creases_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/creases"
	"creaseproof/identity/claim"
)

// sheets checks that the sheets of each pair, or of a level set, add up to it,
// and that the point of each is in its box; it returns them all.
func sheets(t *testing.T, r creases.Result) (all []creases.Sheet) {
	t.Helper()
	require.NotNil(t, r.Energy, r.Reason)
	total := 0.0
	add := func(energy, area float64, list []creases.Sheet) {
		e, a := 0.0, 0.0
		for _, s := range list {
			e += s.Energy
			a += s.Area
			require.Len(t, s.Box, len(s.Point))
			for k, x := range s.Point {
				assert.True(t, x >= s.Box[k][0]-1e-9 && x <= s.Box[k][1]+1e-9, "%v in %v", s.Point, s.Box)
			}
		}
		total += e
		assert.InDelta(t, energy, e, 1e-14*math.Abs(energy))
		assert.InDelta(t, area, a, 1e-14*area)
		all = append(all, list...)
	}
	if len(r.Pairs) == 0 {
		add(*r.Energy, *r.Area, r.Sheets)
	}
	for _, p := range r.Pairs {
		add(p.Energy, p.Area, p.Sheets)
	}
	assert.InDelta(t, *r.Energy, total, 1e-13*math.Abs(total))
	return all
}

// settled is sheets where their number is settled.
func settled(t *testing.T, text string) []creases.Sheet {
	t.Helper()
	r := one(t, text)
	assert.False(t, r.Unsettled, text)
	for _, p := range r.Pairs {
		assert.False(t, p.Unsettled, text)
	}
	return sheets(t, r)
}

// of checks energies against their values, within the errors.
func of(t *testing.T, list []creases.Sheet, rel float64, want ...float64) {
	t.Helper()
	require.Len(t, list, len(want))
	for i, w := range want {
		assert.InEpsilon(t, w, list[i].Energy, rel, "sheet %d", i+1)
		assert.LessOrEqual(t, math.Abs(list[i].Energy-w), list[i].Error+4e-15*w, "sheet %d", i+1)
	}
}

func TestSheetsOfLevelSets(t *testing.T) {
	const b = `box = { x = ["-2", "2"], y = ["-2", "2"], z = ["-2", "2"] }
density = "1"
`
	// Two spheres as one level set, one of 1/200 of the box.
	of(t, settled(t, layeredHead+b+`level = "(x^2 + y^2 + z^2 - 1)*((x - 13/10)^2 + (y - 1/5)^2 + (z + 1/7)^2 - 1/2500)"
`), 1e-6, 4*math.Pi, 4*math.Pi/2500)
	// A torus cut by the box into two.
	const torus = `level = "(sqrt(x^2 + y^2) - 1)^2 + z^2 - 1/9"
density = "1"
`
	list := settled(t, layeredHead+torus+`box = { x = ["-1/2", "1/2"], y = ["-2", "2"], z = ["-1", "1"] }
`)
	require.Len(t, list, 2)
	assert.InEpsilon(t, list[0].Energy, list[1].Energy, 1e-9)
	assert.Negative(t, list[0].Point[1]*list[1].Point[1])
	require.Len(t, settled(t, layeredHead+torus+`box = { x = ["-2", "2"], y = ["-2", "2"], z = ["-1", "1"] }
`), 1)
	// Rings: the inner and the outer part of it.
	require.Len(t, settled(t, layeredHead+torus+`box = { x = ["-2", "2"], y = ["-2", "2"], z = ["1/20", "1/4"] }
`), 2)
	// A wave that leaves the domain and comes back, three times.
	of(t, settled(t, eikonalHead+`level = "y - cos(x)"
box = { x = ["-10", "10"], y = ["1/2", "2"] }
density = "norm(nu_y)"
`), 1e-9, 2*math.Pi/3, 2*math.Pi/3, 2*math.Pi/3)
}

func TestSheetsOfBranches(t *testing.T) {
	// The ridge between two points, cut by the domain into two arcs.
	const foci = `branches = ["norm(x - 1, y)", "norm(x + 1, y) + 1"]
combine = "min"
`
	whole := settled(t, eikonalHead+foci+`box = { x = ["-2", "2"], y = ["-2", "2"] }
`)
	require.Len(t, whole, 1)
	cut := settled(t, eikonalHead+foci+`box = { x = ["-2", "-3/5"], y = ["-2", "2"] }
`)
	require.Len(t, cut, 2)
	assert.InEpsilon(t, cut[0].Energy, cut[1].Energy, 1e-9)
	assert.Less(t, cut[0].Energy, whole[0].Energy/2)

	// Turned about the axis in space: a domain that leaves two pieces of it.
	space := strings.Replace(strings.Replace(eikonalHead, `["x", "y"]`, `["x", "y", "z"]`, 1), "u_x^2 - u_y^2)/2\"\nL = \"u_xx + u_yy", "u_x^2 - u_y^2 - u_z^2)/2\"\nL = \"u_xx + u_yy + u_zz", 1)
	const ridge = `branches = ["norm(x - 1, y, z)", "norm(x + 1, y, z) + 1"]
combine = "min"
`
	require.Len(t, settled(t, space+ridge+`box = { x = ["-2", "2"], y = ["-2", "2"], z = ["-2", "2"] }
`), 1)
	list := settled(t, space+ridge+`box = { x = ["-2", "-3/5"], y = ["-2", "2"], z = ["-1/4", "1/4"] }
`)
	require.Len(t, list, 2)
	assert.InEpsilon(t, list[0].Energy, list[1].Energy, 1e-9)

	// A third branch cuts the paraboloid front into two, and there is a sheet of
	// its own with each.
	r := one(t, layeredHead+`branches = ["-(x^2 + y^2)/(2 z)", "-1/2", "x/4 + z/32 - 3/5"]
combine = "max"
box = { x = ["-5/2", "5/2"], y = ["-5/2", "5/2"], z = ["1/2", "3"] }
`)
	sheets(t, r)
	assert.Len(t, r.Pairs, 3)

	// The whole front beside a thin tube: a pair with two sheets.
	tube := `branches = ["-(x^2 + y^2)/(2 z)", "-1/20000", "x + z/2 - 3"]
combine = "max"
box = { x = ["-5/2", "5/2"], y = ["-5/2", "5/2"], z = ["1/2", "3"] }
`
	r = one(t, layeredHead+tube)
	sheets(t, r)
	require.NotEmpty(t, r.Pairs[0].Sheets)
	assert.Less(t, r.Pairs[0].Sheets[0].Box[0][1], 0.02)
}

// Conditions that exclude each other meet where the combination does not change:
// the front is one sheet there.
func TestSheetAcrossSystems(t *testing.T) {
	want := 2 * math.Pi * 0.25 / 3 * math.Log(6)
	list := settled(t, layeredHead+`branches = ["-(x^2 + y^2)/(2 z)", "-1/2", "x + z/2 - 1", "-20 + z*0"]
combine = "max(1, 2, min(3, 4))"
`+wide)
	of(t, list, 1e-9, want)
}

// Three branches that agree on one surface: they are ordered beside it where
// exact arithmetic finds how, and the surface is refused where not.
func TestCoincidentBranches(t *testing.T) {
	head := strings.SplitN(layeredHead, "[let]", 2)[0] + "[[surface]]\nname = \"s\"\n"
	const b = `density = "norm([u_x], [u_y], [u_z])"
box = { x = ["-2", "2"], y = ["-2", "2"], z = ["-2", "2"] }
`
	const s = "(x^2 + y^2 + z^2 - 1)"
	list := func(factors ...string) string {
		var out []string
		for _, f := range factors {
			out = append(out, fmt.Sprintf("%q", strings.ReplaceAll(f, "S", s)))
		}
		return "branches = [" + strings.Join(out, ", ") + "]\n"
	}
	for _, test := range []struct {
		branches, combine string
		jump              float64 // of the factor of S
		pair              [2]int
	}{
		{list("-S", "S", "2*S"), "max", 3, [2]int{1, 3}},
		{list("S", "-S", "2*S"), "max", 3, [2]int{2, 3}},
		{list("2*S", "S", "-S"), "min", 3, [2]int{1, 3}},
		{list("-S", "S", "2*S"), "max(min(1, 2), 3)", 1, [2]int{2, 3}},
		{list("-S", "S", "2*S"), "min(max(1, 2), 3)", 1, [2]int{2, 3}},
		{list("-S", "S", "(3 + x^2/9)*S"), "max(min(1, 2), 3)", 2 + 1.0/27, [2]int{2, 3}},
		{list("-S", "S", "2*S"), "max(min(1, 3), 2)", 0, [2]int{}},
		{list("-S", "S", "2*S", "z/9 - 1"), "max", 3, [2]int{1, 3}},
		{list("-sqrt(2)*S", "S", "sqrt(3)*S"), "max", math.Sqrt2 + math.Sqrt(3), [2]int{1, 3}},
	} {
		r := one(t, head+b+test.branches+fmt.Sprintf("combine = %q\n", test.combine))
		if test.jump == 0 {
			assert.Zero(t, *r.Energy)
			continue
		}
		of(t, sheets(t, r), 1e-9, 8*math.Pi*test.jump)
		require.Len(t, r.Pairs, 1)
		assert.Equal(t, test.pair, r.Pairs[0].Branches, test.combine)
	}
	for branches, says := range map[string]string{
		list("-S", "S", "x^2 + y^2 + z^2 - 1"): "branches 2 and 3 are the same function",
		list("-S", "S", "(x - 1/3)*S"):         "branches 1, 2 and 3 agree on a part of the surface at (x, y, z) = (",
		list("-S", "S", "exp(S) - 1"):          "branches 1, 2 and 3 agree on a part of the surface at (x, y, z) = (",
		list("0", "S*(x - 1/3)", "S*(y - z)"):  "branches 1, 2 and 3 agree on a part of the surface at (x, y, z) = (",
	} {
		r := one(t, head+b+branches+"combine = \"max\"\n")
		assert.Nil(t, r.Energy, branches)
		assert.Equal(t, claim.Open, r.Verdict)
		assert.Contains(t, r.Reason, says)
	}
	// A level set that is the boundary of the domain.
	r := one(t, head+`density = "1"
level = "x^2 + y^2 + z^2 - 4"
ball = { center = ["0", "0", "0"], radius = "2" }
`)
	assert.Nil(t, r.Energy)
	assert.Contains(t, r.Reason, "the surface runs along the boundary of the domain")
}

// Round domains whose centre or axis lies on the line where branches meet: the
// boundary is parallel to sides of boxes just there. Rays from the axis to
// the boundary, and |q|^3/12 for each; in a ball the half discs of area pi/2.
func TestTripleLineThroughTheCentre(t *testing.T) {
	const (
		regular  = `branches = ["x + z/2", "-x/2 + sqrt(3) y/2 + z/2", "-x/2 - sqrt(3) y/2 + z/2"]`
		rational = `branches = ["x + z/2", "-(3/5) x + (4/5) y + z/2", "-(3/5) x - (4/5) y + z/2"]`
		four     = `branches = ["x + z/2", "-x + z/2", "y + z/2", "-y + z/2"]`
		cylinder = `cylinder = { center = ["0", "0"], radius = "1", heights = ["0", "1"] }`
		ball     = `ball = { center = ["0", "0", "0"], radius = "1" }`
	)
	cube := func(q float64) float64 { return q * q * q / 12 }
	for _, test := range []struct {
		branches string
		density  float64
		sheets   int
	}{
		{regular, 3 * cube(math.Sqrt(3)), 3},
		{rational, 2*cube(math.Sqrt(3.2)) + cube(1.6), 3},
		{four, 4 * cube(math.Sqrt2), 4},
	} {
		for domain, area := range map[string]float64{cylinder: 1, ball: math.Pi / 2} {
			r := agrees(t, test.density*area, layeredHead+test.branches+"\ncombine = \"max\"\n"+domain+"\n")
			assert.Len(t, sheets(t, r), test.sheets)
		}
	}
	// A curved front and a wall that meet on a curve through the same places.
	for _, domain := range []string{
		`cylinder = { center = ["0", "0"], radius = "2", heights = ["1/2", "3"] }`,
		`ball = { center = ["0", "0", "3"], radius = "2" }`,
	} {
		r := one(t, layeredHead+`branches = ["-(x^2 + y^2)/(2 z)", "-1/2", "x/4 + z/32 - 3/5"]
combine = "max"
`+domain+"\n")
		assert.Empty(t, r.Reason)
		assert.LessOrEqual(t, *r.Error, 1e-9**r.Energy)
		sheets(t, r)
	}
}
