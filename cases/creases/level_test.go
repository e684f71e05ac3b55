package creases_test

import (
	"fmt"
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// outward is a density that tells the side to which the normal points: on a
// sphere of radius r about the origin it is 2 + r or 2 - r.
const outward = "2 + nu_x x + nu_y y + nu_z z"

// Level functions that are products, roots or quotients, or have kinks, against
// closed forms.
func TestLevelFunctionsTakenApart(t *testing.T) {
	pi := math.Pi
	// A half of the spheroid with semi-axes 1, 1, 2, by the textbook formula.
	e := math.Sqrt(0.75)
	spheroid := pi * (1 + 2/e*math.Asin(e))
	// The plane z = x + y above the part of the square where |x + y| < 1.
	strip := 3 * math.Sqrt(3)
	for _, test := range []struct {
		phi, density string
		side         int
		want         float64
	}{
		{"x^4 + y^4 - 1", "1", 2, 4 * 7.017697943564},
		{"x y", "1", 1, 8},
		{"x y", "2 + nu_x y", 1, 18},
		{"-x y", "2 + nu_x y", 1, 14},
		{"x/y", "2 + nu_x y", 1, 10},
		{"x y z", "2 + nu_x y z", 1, 25},
		{"(x - 1/10)*(y - 1/5)*(z + 1/7)", "1", 1, 12},
		{"x y - x/5 - y/10 + 1/50", "1", 1, 8},
		{"2 x^2 - 2 y^2", "1", 1, 8 * math.Sqrt2},
		{"(x - 1/3)^3", "2 + nu_x", 1, 12},
		{"-(x - 1/3)^3", "2 + nu_x", 1, 4},
		{"(x^2 + y^2 + z^2 - 1)^3", outward, 2, 12 * pi},
		{"(x^2 + y^2 + z^2 - 1)*(x^2 + y^2 + z^2 - 3)", outward, 2, 4*pi + 12*pi*(2+math.Sqrt(3))},
		{"(x^2 + y^2 + z^2 - 1)*(x^2 + y^2 + z^2 - (1 + 1/100000)^2)", outward, 2, 4*pi + 4*pi*1.00001*1.00001*3.00001},
		{"(x^2 + y^2 + z^2 - 1)*(x - 1/2)", outward, 2, (8+1-3)*pi + 2*16 + (16-2*0.75*pi)/2},
		{"exp(x)*(x^2 + y^2 + z^2 - 1)", outward, 2, 12 * pi},
		{"x^(-1) - 1", "2 + nu_x", 2, 16},
		{"1 - 1/x", "2 + nu_x", 2, 48},
		{"sqrt(1 - x^2 - y^2) - z", outward, 2, 2 * pi},
		{"z - sqrt(1 - x^2 - y^2)", outward, 2, 6 * pi},
		{"z + sqrt(1 - x^2 - y^2)", outward, 2, 2 * pi},
		{"z - 2*sqrt(1 - x^2 - y^2)", "1", 2, spheroid},
		{"z - sqrt(x^2 + y^2)", "1", 1, pi * math.Sqrt2},
		{"norm(x, y, z) - 1", outward, 2, 12 * pi},
		{"abs(x + y) + abs(x - y) + 0*z - 2", "1", 2, 32},
		{"abs(x) + abs(y) + abs(z) - 1", "2 + nu_x x + nu_y y + nu_z z", 2, 4 * math.Sqrt(3) * (2 + 1/math.Sqrt(3))},
		{"sin(100 x)", "1", 1, 252},
		{"(x - y)*(x + y - z)*z + 0", "1", 1, 4 + 4*math.Sqrt2 + strip},
		{"6 x^2 - 5 x y + y^2 + 0 z", "1", 1, 2 * (math.Sqrt(5) + 2*math.Sqrt(10)/3)},
	} {
		t.Run(test.phi+", "+test.density, func(t *testing.T) {
			b := fmt.Sprintf(`["-%d", "%d"]`, test.side, test.side)
			r := one(t, layeredHead+fmt.Sprintf("density = %q\nlevel = %q\nbox = { x = %s, y = %s, z = %s }\n", test.density, test.phi, b, b, b))
			require.NotNil(t, r.Energy, r.Reason)
			assert.InEpsilon(t, test.want, *r.Energy, 1e-9)
			assert.LessOrEqual(t, math.Abs(*r.Energy-test.want), *r.Error+1e-12*test.want)
			assert.LessOrEqual(t, *r.Error, 1e-9*test.want)
			assert.Empty(t, r.Reason)
		})
	}
}

// A level function without a change of sign has no plus side.
func TestLevelFunctionsWithoutSides(t *testing.T) {
	const b = `"-2", "2"`
	for phi, want := range map[string]string{
		"(x^2 + y^2 + z^2 - 1)^2":                           `write level = "x^2 + y^2 + z^2 - 1"`,
		"x^4 - 2 x^2 + 1 + 0 y":                             `even power`,
		"x^2 (y - 1/2)":                                     `its factor x vanishes`,
		"(x^2 + y^2 + z^2 - 1)*(2 - 2 x^2 - 2 y^2 - 2 z^2)": `even power`,
		"abs(x)*y":           "its factor x vanishes",
		"abs(x) + x^2 + 0 y": "has a kink",
		"sqrt(x^2 - 1)*y":    "a root",
		"(x - 1)^(3/2)":      "its factor x - 1 vanishes",
		"sin(x)*sin(2 x)":    "vanishes on the level set of",
	} {
		r := level(t, phi, b, b, b)
		assert.Nil(t, r.Energy, phi)
		assert.Contains(t, r.Reason, want, phi)
	}
	// A square that vanishes nowhere only counts by its sign.
	r := level(t, "(x^2 + 1)^2*(x^2 + y^2 + z^2 - 1)", b, b, b)
	require.NotNil(t, r.Energy, r.Reason)
	assert.InEpsilon(t, 4*math.Pi, *r.Energy, 1e-9)
}

// A cusp at the origin: y = ±x^(3/2) to x = 1 has the length
// 2 (13^(3/2) - 8)/27.
func TestCusp(t *testing.T) {
	r := one(t, eikonalHead+"density = \"1\"\nlevel = \"y^2 - x^3\"\nbox = { x = [\"-1\", \"1\"], y = [\"-1\", \"1\"] }\n")
	require.NotNil(t, r.Energy, r.Reason)
	want := 2 * (13*math.Sqrt(13) - 8) / 27
	assert.InEpsilon(t, want, *r.Energy, 1e-10)
	assert.LessOrEqual(t, math.Abs(*r.Energy-want), *r.Error)
	assert.Empty(t, r.Reason)
}

// What is left undecided about a sphere of 1/2000 of the box.
func TestSmallSphere(t *testing.T) {
	const b = `"-2", "2"`
	r := level(t, "x^2 + y^2 + z^2 - 1/1000000", b, b, b)
	require.NotNil(t, r.Energy, r.Reason)
	want := 4 * math.Pi / 1e6
	assert.InEpsilon(t, want, *r.Energy, 1e-9)
	assert.LessOrEqual(t, *r.Error, 4e-9*want)
	assert.Empty(t, r.Reason)
	assert.False(t, r.Unsettled)
}

// Densities that are not bounded on the unit sphere: with the distance r from a
// point of it, ∫ 1/r dA = 4 π. At a pole, where three heights end, rounding
// remains, and the error says of what size.
func TestUnboundedDensity(t *testing.T) {
	for _, test := range []struct {
		density    string
		want, most float64
	}{
		{"1/sqrt((1-z)/2)", 8 * math.Pi, 10},
		{"1/norm(x - 3/5, y - 4/5, z)", 4 * math.Pi, 1e-7},
		{"sqrt((1-z)/2)", 8 * math.Pi / 3, 1e-9},
	} {
		r := one(t, layeredHead+fmt.Sprintf("density = %q\nlevel = \"x^2 + y^2 + z^2 - 1\"\nbox = { x = [\"-2\", \"2\"], y = [\"-2\", \"2\"], z = [\"-2\", \"2\"] }\n", test.density))
		require.NotNil(t, r.Energy, r.Reason)
		assert.LessOrEqual(t, math.Abs(*r.Energy-test.want), *r.Error, test.density)
		assert.LessOrEqual(t, *r.Error, test.most, test.density)
	}
}
