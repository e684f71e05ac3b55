package creases_test

import (
	"fmt"
	"math/big"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
	"creaseproof/cases/creases"
	"creaseproof/cases/library"
	"creaseproof/identity"
)

// certified evaluates all surfaces of a case with enclosures.
func certified(t testing.TB, name, text string, which func(*casefile.Surface) bool) []creases.Result {
	t.Helper()
	c, err := cases.Parse(name, []byte(text))
	require.NoError(t, err)
	ev := creases.New(c.Setting, name)
	var all []creases.Result
	for i := range c.File.Surfaces {
		if which != nil && !which(&c.File.Surfaces[i]) {
			continue
		}
		rs, err := ev.Evaluate(t.Context(), &c.File.Surfaces[i], creases.Options{Certify: true, NoSlices: true})
		require.NoError(t, err)
		all = append(all, rs...)
	}
	return all
}

func ends(t testing.TB, r creases.Result) (lo, hi *big.Rat) {
	t.Helper()
	require.Len(t, r.Enclosure, 2, "%s: %s", r.Surface, r.Reason)
	lo, ok := new(big.Rat).SetString(r.Enclosure[0])
	require.True(t, ok)
	hi, ok = new(big.Rat).SetString(r.Enclosure[1])
	require.True(t, ok)
	require.LessOrEqual(t, lo.Cmp(hi), 0)
	return lo, hi
}

// near reports whether an enclosure contains a number known to float64, and how
// wide it is relative to that.
func near(t testing.TB, r creases.Result, want float64) (contains bool, width float64) {
	t.Helper()
	lo, hi := ends(t, r)
	x := new(big.Rat).SetFloat64(want)
	slack := new(big.Rat).Mul(new(big.Rat).Abs(x), big.NewRat(1, 1<<52))
	contains = lo.Cmp(new(big.Rat).Add(x, slack)) <= 0 && hi.Cmp(new(big.Rat).Sub(x, slack)) >= 0
	width, _ = new(big.Rat).Quo(new(big.Rat).Sub(hi, lo), new(big.Rat).Abs(x)).Float64()
	return contains, width
}

func explicit(s *casefile.Surface) bool {
	return s.Polygon != nil || s.Patch != nil || s.Graph != nil
}

// Every polygon, patch and graph of the library has a narrow enclosure that
// contains the closed form.
func TestCertifiedLibrary(t *testing.T) {
	count := 0
	for _, name := range library.Names() {
		data, ok := library.Source(name)
		require.True(t, ok)
		for _, r := range certified(t, name, string(data), explicit) {
			require.NotNil(t, r.Claimed)
			contains, width := near(t, r, *r.Claimed)
			assert.True(t, contains, "%s: %s %v: %v", name, r.Surface, r.Values, r.Enclosure)
			assert.LessOrEqual(t, width, 1e-11, "%s: %s %v: %v", name, r.Surface, r.Values, r.Enclosure)
			assert.Equal(t, identity.Proved, r.Verdict, "%s: %s: %s", name, r.Surface, r.Reason)
			assert.True(t, r.Met)
			count++
		}
	}
	assert.Greater(t, count, 100)
}

// The same with every claim off by 1e-7 of it.
func TestCertifiedRefutes(t *testing.T) {
	for _, name := range []string{"areas", "crease-cones", "crease-eikonal", "crease-focal", "crease-paraboloid", "crease-planes", "crease-sphere"} {
		data, ok := library.Source(name)
		require.True(t, ok)
		var lines []string
		for _, l := range strings.Split(string(data), "\n") {
			if f, ok := strings.CutPrefix(l, "energy  = \""); ok && !strings.HasPrefix(l, "energy  = \"R") {
				l = "energy  = \"1.0000001*(" + strings.TrimSuffix(f, "\"") + ")\""
			}
			lines = append(lines, l)
		}
		changed := strings.Join(lines, "\n")
		changed = strings.ReplaceAll(changed, "energy  = \"1.0000001*(e)\"", "energy  = \"e\"")
		for _, r := range certified(t, name, changed, explicit) {
			assert.Equal(t, identity.Refuted, r.Verdict, "%s: %s %v: %s", name, r.Surface, r.Values, r.Reason)
			assert.False(t, r.Met)
			assert.Contains(t, r.Reason, "misses the claimed value")
		}
	}
}

func TestCertifiedRandom(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 7))
	q := func() string { return fmt.Sprintf("%d/%d", 1+rng.IntN(40), 1+rng.IntN(12)) }
	for range 8 {
		text := layeredHead + fmt.Sprintf(`values = { k = "%s", p = "%s", d = "%s" }
plus = "-(x^2 + y^2)/(2 z)"
minus = "-k"
patch = { map = ["sqrt(2 k t) cos(a)", "sqrt(2 k t) sin(a)", "t"], over = { t = ["p", "p + d"], a = ["0", "2 pi"] } }
energy = "(2 pi k^2/3) log((p + d)/p)"
`, q(), q(), q())
		r := certified(t, "case.toml", text, nil)[0]
		assert.Equal(t, identity.Proved, r.Verdict, "%v: %s", r.Values, r.Reason)

		text = layeredHead + fmt.Sprintf(`values = { m = "%s", n = "%s", h = "%s" }
plus = "n sqrt(x^2 + y^2) + n^2 z/2"
minus = "-m sqrt(x^2 + y^2) + m^2 z/2"
patch = { map = ["((m - n)/2) t cos(a)", "((m - n)/2) t sin(a)", "t"], over = { t = ["-h", "0"], a = ["0", "2 pi"] } }
energy = "pi (m + n)^3 abs(m - n) h^2/24"
`, q(), q(), q())
		if r := certified(t, "case.toml", text, nil)[0]; r.Energy != nil { // the cone may point the wrong way
			assert.Equal(t, identity.Proved, r.Verdict, "%v: %s", r.Values, r.Reason)
		}
	}
}

const areaHead = `
[space]
coordinates = ["x", "y", "z"]
unknowns    = ["u"]
[[surface]]
name = "s"
`

// What does not come down to integrals in one parameter, against values from
// elsewhere.
func TestCertifiedTwoParameters(t *testing.T) {
	for name, c := range map[string]struct {
		text string
		want float64
	}{
		// DLMF 19.33.2, the elliptic integrals to 30 digits by mpmath.
		"ellipsoid": {`density = "1"
patch = { map = ["sin(b) cos(a)", "sin(b) sin(a)/2", "cos(b)/3"], over = { b = ["0", "pi"], a = ["0", "2 pi"] } }
`, 4.400809564664970},
		"kink inside": {`density = "abs(x - 1/3)"
graph = { of = "x", over = { x = ["0", "1"], y = ["0", "1"] } }
`, 0.39283710065919303},
		"root at an end": {`density = "sqrt(1 - x)"
graph = { of = "y", over = { x = ["0", "1"], y = ["0", "1"] } }
`, 0.94280904158206337},
		"divided by what vanishes on a line": {`density = "abs(x - 1/3)^2/abs(x - 1/3) + (abs(x - 1/3) + x - 1/3 + y)/(abs(x - 1/3) + x - 1/3 + y)"
graph = { of = "x", over = { x = ["0", "1"], y = ["0", "1"] } }
`, 1.8070506630322882},
		"half angles": {`density = "cos(a/2)^2"
patch = { map = ["sin(b) cos(a)", "sin(b) sin(a)", "cos(b)"], over = { b = ["0", "pi"], a = ["0", "2 pi"] } }
`, 6.2831853071795865},
		// The density is y^2 on a polygon of the plane z = y: 5/2, times the root of 2.
		"quadratic on a pentagon": {`density = "z^2"
polygon = [["0", "0", "0"], ["2", "0", "0"], ["2", "1", "1"], ["1", "2", "2"], ["0", "1", "1"]]
`, 3.5355339059327378},
	} {
		r := certified(t, "case.toml", areaHead+c.text, nil)[0]
		contains, width := near(t, r, c.want)
		assert.True(t, contains, "%s: %v", name, r.Enclosure)
		assert.LessOrEqual(t, width, 1e-11, "%s: %v", name, r.Enclosure)
		assert.Empty(t, r.Verdict)
	}
}

// Densities that are enclosed as they are written: their normal forms multiply
// out what then cancels.
func TestCertifiedAsWritten(t *testing.T) {
	const head = `
[space]
coordinates = ["x", "y"]
unknowns    = ["u"]
[[surface]]
name = "s"
polygon = [["0", "0"], ["1", "0"]]
`
	for _, c := range []struct{ density, energy, within string }{
		{"abs(abs(x - 1/3) - 1/5)", "71/450", ""},
		{"abs(sin(10 x))", "(7 + cos(10))/10", ""},
		{"sin(300 x)", "(1 - cos(300))/300", ""},
		{"1/(1 + 10^14*(x - 123457/1000000)^2)", "", ""},
		{"tanh(1000*(x - 1/3))", "log(cosh(2000/3)/cosh(1000/3))/1000", ""},
		{"sinh(x - 1/2) + cosh(x - 1/2)", "2 sinh(1/2)", ""},
		{"tan(x) + erf(x) - norm(x, 1)^(3/2)", "", ""},
		// Narrower than what quadrature finds without being told.
		{"exp(-10^14*(x - 123457/1000000)^2)", "sqrt(pi)/10^7", "1e-8"},
	} {
		text := head + fmt.Sprintf("density = %q\n", c.density)
		if c.energy != "" {
			text += fmt.Sprintf("energy = %q\n", c.energy)
		}
		if c.within != "" {
			text += "within = " + c.within + "\n"
		}
		r := certified(t, "case.toml", text, nil)[0]
		lo, hi := ends(t, r)
		width, _ := new(big.Rat).Quo(new(big.Rat).Sub(hi, lo), new(big.Rat).Abs(hi)).Float64()
		assert.LessOrEqual(t, width, 1e-8, "%s: %v", c.density, r.Enclosure)
		if c.energy != "" {
			assert.Equal(t, identity.Proved, r.Verdict, "%s: %v: %s", c.density, r.Enclosure, r.Reason)
		}
		assert.Equal(t, c.within != "", strings.Contains(r.Reason, "has missed something"), "%s: %s", c.density, r.Reason)
	}
}

// Where there is no enclosure the claim stays as it was, and the reason says
// why.
func TestNotCertified(t *testing.T) {
	for name, c := range map[string]struct{ text, want string }{
		"integrable singularity": {areaHead + `density = "1/sqrt(x)"
graph = { of = "y", over = { x = ["0", "1"], y = ["0", "1"] } }
energy = "2 sqrt(2)"
`, "could not be bounded"},
		"off the well by less than a float shows": {layeredHead + `plus_gradient = ["1", "0", "1/2"]
minus_gradient = ["-1", "0", "1/2 + 1/10^20"]
polygon = [["0", "0", "0"], ["0", "1", "0"], ["0", "1", "1"]]
energy = "1/3"
`, "exact arithmetic"},
		"not normal by less than a float shows": {layeredHead + `plus_gradient = ["1", "0", "1/2"]
minus_gradient = ["-1", "0", "1/2"]
polygon = [["0", "0", "0"], ["1/10^20", "1", "0"], ["0", "1", "1"]]
energy = "1/3"
`, "normal to the surface"},
		// Both vanish on a short segment, and 0/0 is no number there.
		"divided by what vanishes between two points": {areaHead + `density = "(abs(x - 1/3) + abs(x - 1/3 - 1/10^9) - 1/10^9)/(abs(x - 1/3) + abs(x - 1/3 - 1/10^9) - 1/10^9)"
graph = { of = "y", over = { x = ["0", "1"], y = ["0", "1"] } }
energy = "sqrt(2)"
`, "may vanish on a part"},
		"divided by what vanishes between two points, inside a function": {areaHead + `density = "log(1 + abs(x - 1/3) + abs(x - 1/3 - 1/10^9) - 1/10^9)/log(1 + abs(x - 1/3) + abs(x - 1/3 - 1/10^9) - 1/10^9)"
graph = { of = "y", over = { x = ["0", "1"], y = ["0", "1"] } }
energy = "sqrt(2)"
`, "may vanish on a part"},
		"a vertex out of the plane by less than a float shows": {areaHead + `density = "1"
polygon = [["0", "0", "0"], ["1", "0", "0"], ["1", "1", "1/10^20"], ["0", "1", "0"]]
energy = "1"
`, "not flat"},
	} {
		r := certified(t, "case.toml", c.text, nil)[0]
		assert.Empty(t, r.Enclosure, name)
		assert.Equal(t, identity.Supported, r.Verdict, "%s: %s", name, r.Reason)
		assert.True(t, r.Met, name)
		assert.Contains(t, r.Reason, "no enclosure: ", name)
		assert.Contains(t, r.Reason, c.want, name)
	}
}

// A claim is allowed what the case allows; a rounded claim is not the energy,
// and the reason says that.
func TestCertifiedWithin(t *testing.T) {
	text := areaHead + `density = "1"
graph = { of = "x", over = { x = ["0", "1"], y = ["0", "1"] } }
energy = "1.414213562"
`
	r := certified(t, "case.toml", text, nil)[0]
	assert.Equal(t, identity.Refuted, r.Verdict, r.Reason)
	r = certified(t, "case.toml", text+"within = 1e-9\n", nil)[0]
	assert.Equal(t, identity.Proved, r.Verdict, r.Reason)
	assert.Contains(t, r.Reason, "not the claimed value itself")
	r = certified(t, "case.toml", text+"within = 1e-10\n", nil)[0]
	assert.Equal(t, identity.Refuted, r.Verdict, r.Reason)
	r = certified(t, "case.toml", text+"within = 1e-10\nexpect = \"refuted\"\n", nil)[0]
	assert.True(t, r.Met)
	r = certified(t, "case.toml", strings.Replace(text, `"1.414213562"`, `"sqrt(2)"`, 1)+"expect = \"supported\"\n", nil)[0]
	assert.Equal(t, identity.Proved, r.Verdict)
	assert.True(t, r.Met)
}

// A profile cost that is not that of a quadratic residual: R = p (1 - p²) and
// the traces ±1 are two jumps in one, R changes its sign between them; from 0 to
// 1 it does not.
func TestCertifiedProfile(t *testing.T) {
	head := `
[space]
coordinates = ["x", "y"]
unknowns = ["u"]
constants = ["c"]
[let]
R = "u_x (1 - u_x^2)"
L = "u_xx + u_yy"
[model]
residual = "R"
bending = "L"
energy = "R^2/(2 c) + c L^2/2"
[[surface]]
name = "s"
polygon = [["0", "0"], ["0", "2"]]
`
	r := certified(t, "case.toml", head+"plus = \"x\"\nminus = \"0\"\nenergy = \"1/2\"\n", nil)[0]
	assert.Equal(t, identity.Proved, r.Verdict, r.Reason) // 2 ∫ (s - s³) ds
	r = certified(t, "case.toml", head+"plus = \"x\"\nminus = \"-x\"\nenergy = \"2\"\n", nil)[0]
	assert.Empty(t, r.Enclosure)
	assert.Contains(t, r.Reason, "keep its sign")

	// Not a polynomial on the segment.
	for _, residual := range []string{"sqrt(1 + u_x^2 + u_y^2) - sqrt(2)", "exp(u_x^2) - exp(1)", "1/(2 + u_x^2) - 1/3"} {
		r = certified(t, "case.toml", strings.Replace(head, "u_x (1 - u_x^2)", residual, 1)+"plus = \"x\"\nminus = \"-x\"\n", nil)[0]
		require.NotNil(t, r.Energy, "%s: %s", residual, r.Reason)
		assert.Empty(t, r.Enclosure, residual)
		assert.Contains(t, r.Reason, "not polynomial", residual)
	}
}

// The supremum of a family of fields is the profile cost of the layered model.
func TestCertifiedSupremum(t *testing.T) {
	const paraboloid = `plus = "-(x^2 + y^2)/(2 z)"
minus = "-k"
values = { k = ["2/3", "2"] }
patch = { map = ["sqrt(2 k t) cos(a)", "sqrt(2 k t) sin(a)", "t"], over = { t = ["1", "2"], a = ["0", "2 pi"] } }
energy = "(2 pi k^2/3) log(2)"
`
	for _, density := range []string{"", "density = \"sup(theta, [Sigma].nu)\"\n", "density = \"norm([u_x], [u_y])^4/(12 norm([u_x], [u_y], [u_z]))\"\n"} {
		for _, r := range certified(t, "case.toml", layeredHead+density+paraboloid, nil) {
			assert.Equal(t, identity.Proved, r.Verdict, "%s: %s", density, r.Reason)
		}
	}
}
