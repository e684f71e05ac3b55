package creases_test

import (
	"context"
	"fmt"
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/cases/library"
	"creaseproof/identity"
)

const paraboloid = `plus = "-(x^2 + y^2)/(2 z)"
minus = "-k"
patch = { map = ["sqrt(2 k t) cos(a)", "sqrt(2 k t) sin(a)", "t"], over = { t = ["1/2", "3"], a = ["0", "2 pi"] } }
`

// A wrong claim is open, not refuted: the reason states both numbers.
func TestWrongClaim(t *testing.T) {
	for _, test := range []struct {
		claim   string
		verdict identity.Verdict
	}{
		{`energy = "(2 pi k^2/3) log(6)"`, identity.Supported},
		{`energy = "(2 pi k^2/3) log(6) (1 + 1/100000000)"`, identity.Open},
		{`energy = "(pi k^2/3) log(6)"`, identity.Open},
		{`energy = "-(2 pi k^2/3) log(6)"`, identity.Open},
		{`energy = "0"`, identity.Open},
		// Within what is allowed, and not.
		{`energy = "(2 pi k^2/3) log(6) (1 + 1/100000000)"` + "\nwithin = 1e-7", identity.Supported},
		{`energy = "(2 pi k^2/3) log(6) (1 + 1/1000000000000)"` + "\nwithin = 1e-13", identity.Open},
	} {
		r := one(t, layeredHead+`values = { k = "3/2" }`+"\n"+paraboloid+test.claim+"\n")
		assert.Equal(t, test.verdict, r.Verdict, "%s: %s", test.claim, r.Reason)
		assert.Equal(t, test.verdict == identity.Supported, r.Met)
		assert.Equal(t, identity.Supported, r.Expected)
		require.NotNil(t, r.Energy)
		require.NotNil(t, r.Claimed)
		assert.InEpsilon(t, 1.5*math.Pi*math.Log(6), *r.Energy, 1e-14)
		if test.verdict == identity.Open {
			assert.Contains(t, r.Reason, fmt.Sprintf("%.17g", *r.Energy))
			assert.Contains(t, r.Reason, fmt.Sprintf("%.17g", *r.Claimed))
		}
	}
	r := one(t, layeredHead+`values = { k = "3/2" }`+"\n"+paraboloid+"energy = \"1\"\nexpect = \"open\"\n")
	assert.True(t, r.Met)
}

// A jump of zero: claimed values of zero are compared absolutely.
func TestZero(t *testing.T) {
	r := one(t, layeredHead+`plus = "x + z/2"
minus = "x + z/2"
polygon = [["0", "0", "0"], ["0", "1", "0"], ["0", "0", "1"]]
energy = "0"
`)
	assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
	assert.Zero(t, *r.Energy)
	assert.InEpsilon(t, 0.5, *r.Area, 1e-15)
}

// Without a claim there is a number and no verdict.
func TestNoClaim(t *testing.T) {
	r := one(t, layeredHead+`values = { k = "3/2" }`+"\n"+paraboloid)
	assert.Empty(t, r.Verdict)
	assert.Nil(t, r.Claimed)
	assert.True(t, r.Met)
	assert.InEpsilon(t, 1.5*math.Pi*math.Log(6), *r.Energy, 1e-14)
	require.NotNil(t, r.Slices)
	assert.InEpsilon(t, *r.Energy, *r.Slices, 1e-13)
}

// All combinations of values, the first varying slowest; values need not be
// rational.
func TestValues(t *testing.T) {
	rs, err := run(t, layeredHead+`values = { m = ["1", "sqrt(2)"], h = ["1/2", "pi", "m^2"] }
plus = "m x + m^2 z/2"
minus = "0"
polygon = [["0", "0", "0"], ["0", "1", "0"], ["-m h/2", "1", "h"], ["-m h/2", "0", "h"]]
energy = "m^3 h/12"
`)
	require.NoError(t, err)
	require.Len(t, rs, 6)
	var order []string
	for _, r := range rs {
		assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
		order = append(order, r.Values["m"]+" "+r.Values["h"])
	}
	assert.Equal(t, []string{"1 1/2", "1 pi", "1 m^2", "sqrt(2) 1/2", "sqrt(2) pi", "sqrt(2) m^2"}, order)
	assert.InEpsilon(t, 2*math.Sqrt2/12*2, *rs[5].Energy, 1e-14)
}

// The density in a formula: the sharp one written out, two productions that
// span the family, and what it may refer to.
func TestGivenDensity(t *testing.T) {
	want := 1.5 * math.Pi * math.Log(6)
	for _, d := range []string{
		"norm([u_x], [u_y])^4/(12 norm([u_x], [u_y], [u_z]))",
		"norm([Sigma(0)].nu, [Sigma(pi/4)].nu)",
		"sup(theta, [Sigma].nu)",
		"(sup(theta, -[Sigma].nu) + 2 sup(theta, 1 + [Sigma(theta/1)].nu/2) - 2)/2",
		"norm([u_x], [u_y])^3 sqrt(nu_x^2 + nu_y^2)/12",
		"(norm(x, y)/t)^3 sqrt(nu_x^2 + nu_y^2)/12",
	} {
		r := one(t, layeredHead+`values = { k = "3/2" }`+"\n"+paraboloid+"density = \""+d+"\"\nenergy = \"(3 pi/2) log(6)\"\n")
		require.NotNil(t, r.Energy, "%s: %s", d, r.Reason)
		assert.InEpsilon(t, want, *r.Energy, 1e-12, d)
		assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
		assert.Nil(t, r.Slices, "the slices are of the model's own density")
	}
}

// A residual that is no polynomial: R = 1 - |p|, whose profile cost is
// computed by quadrature. Across y = 0, from (0, -1) to (0, 1), it is
// ∫_{-1}^{1} (1 - |p|) dp = 1 per length.
func TestTranscendentalModel(t *testing.T) {
	r := one(t, `
[space]
coordinates = ["x", "y"]
unknowns    = ["u"]
constants   = ["eps"]
[let]
R = "1 - norm(u_x, u_y)"
L = "u_xx + u_yy"
[model]
residual = "R"
bending  = "L"
energy   = "R^2/(2 eps) + eps L^2/2"
[[surface]]
name = "s"
plus = "y"
minus = "-y"
polygon = [["0", "0"], ["3", "0"]]
energy = "3"
`)
	assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
	require.NotNil(t, r.Energy)
	assert.InEpsilon(t, 3, *r.Energy, 1e-12)
}

// Graphs over every coordinate plane, with plus on the side of the greater
// value of the remaining coordinate.
func TestGraphs(t *testing.T) {
	for _, g := range []string{
		`{ of = "x^2/2", over = { x = ["0", "1"], y = ["0", "2"] } }`,
		`{ of = "y^2/2", over = { z = ["0", "2"], y = ["0", "1"] } }`,
		`{ of = "z^2/2", over = { x = ["0", "2"], z = ["0", "1"] } }`,
	} {
		r := one(t, layeredHead+"density = \"1\"\ngraph = "+g+"\nenergy = \"sqrt(2) + log(1 + sqrt(2))\"\n")
		assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
	}
	// The flux of the normal through the graph is the area below it.
	for d, g := range map[string]string{
		"nu_z": `{ of = "x^2 y", over = { x = ["0", "1"], y = ["0", "2"] } }`,
		"nu_x": `{ of = "y^2 z", over = { z = ["0", "2"], y = ["0", "1"] } }`,
		"nu_y": `{ of = "z^2 x", over = { x = ["0", "2"], z = ["0", "1"] } }`,
	} {
		r := one(t, layeredHead+"density = \""+d+"\"\ngraph = "+g+"\nenergy = \"2\"\n")
		assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
	}
	for d, g := range map[string]string{
		"nu_y": `{ of = "x^2", over = { x = ["0", "3"] } }`,
		"nu_x": `{ of = "y^2", over = { y = ["0", "3"] } }`,
	} {
		r := one(t, eikonalHead+"density = \""+d+"\"\ngraph = "+g+"\nenergy = \"3\"\n")
		assert.Equal(t, identity.Supported, r.Verdict, r.Reason)
	}
}

// The plus trace belongs to the side the normal points to: with the density
// [u_x] nu_x an exchange of the traces changes the sign.
func TestOrientation(t *testing.T) {
	for density, want := range map[string]float64{"[u_x] nu_x": 1, "-[u_x] nu_x": -1, "{u_z}": 0.25} {
		r := one(t, layeredHead+`plus = "x + z/2"
minus = "-x + z/2"
polygon = [["0", "0", "0"], ["0", "1", "0"], ["0", "0", "1"]]
density = "`+density+"\"\n")
		require.NotNil(t, r.Energy, r.Reason)
		assert.InEpsilon(t, want, *r.Energy, 1e-14)
	}
}

func TestBudget(t *testing.T) {
	c, err := cases.Parse("case.toml", []byte(layeredHead+`density = "abs(sin(1000 x) - y)"
graph = { of = "x^2", over = { x = ["0", "1"], y = ["0", "2"] } }
energy = "1"
`))
	require.NoError(t, err)
	rs, err := creases.New(c.Setting, "case.toml").Evaluate(t.Context(), &c.File.Surfaces[0], creases.Options{MaxEvaluations: 1000})
	require.NoError(t, err)
	assert.Equal(t, identity.Open, rs[0].Verdict)
	assert.Contains(t, rs[0].Reason, "budget")
	assert.Less(t, rs[0].Evaluations, 5000)
	require.NotNil(t, rs[0].Error)
}

func TestCancelled(t *testing.T) {
	c, err := cases.Parse("case.toml", []byte(layeredHead+`values = { k = "3/2" }`+"\n"+paraboloid))
	require.NoError(t, err)
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	_, err = creases.New(c.Setting, "case.toml").Evaluate(ctx, &c.File.Surfaces[0], creases.Options{})
	assert.ErrorIs(t, err, context.Canceled)
}

// BenchmarkParaboloid is one surface from formulas to verdict.
func BenchmarkParaboloid(b *testing.B) {
	c, err := cases.Parse("case.toml", []byte(layeredHead+`values = { k = "3/2" }`+"\n"+paraboloid+"energy = \"(2 pi k^2/3) log(6)\"\n"))
	require.NoError(b, err)
	ev := creases.New(c.Setting, "case.toml")
	for _, o := range []creases.Options{{}, {NoSlices: true}} {
		b.Run(fmt.Sprintf("slices=%v", !o.NoSlices), func(b *testing.B) {
			var rs []creases.Result
			for b.Loop() {
				if rs, err = ev.Evaluate(b.Context(), &c.File.Surfaces[0], o); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(rs[0].Evaluations), "evaluations")
		})
	}
}

func BenchmarkLibrary(b *testing.B) {
	var list []*cases.Case
	for _, name := range library.Names() {
		data, _ := library.Source(name)
		c, err := cases.Parse(name, data)
		require.NoError(b, err)
		list = append(list, c)
	}
	for b.Loop() {
		for _, c := range list {
			ev := creases.New(c.Setting, c.Name)
			for i := range c.File.Surfaces {
				if _, err := ev.Evaluate(b.Context(), &c.File.Surfaces[i], creases.Options{}); err != nil {
					b.Fatal(err)
				}
			}
		}
	}
}
