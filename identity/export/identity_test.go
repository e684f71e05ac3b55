package export_test

import (
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity/certificate"
	"creaseproof/identity/export"
)

func v(name string) export.Expr            { return export.Variable(name) }
func num(s string) export.Expr             { return export.Number(s) }
func sum(x ...export.Expr) export.Expr     { return export.Sum(x) }
func times(x ...export.Expr) export.Expr   { return export.Product(x) }
func neg(x export.Expr) export.Expr        { return export.Negation{X: x} }
func pow(x export.Expr, n int) export.Expr { return export.Power{Base: x, Exp: n} }
func over(x, y export.Expr) export.Expr    { return export.Quotient{Num: x, Den: y} }
func minus(x, y export.Expr) export.Expr   { return sum(x, neg(y)) }
func relation(s ...string) (out []certificate.Polynomial) {
	for _, p := range s {
		out = append(out, poly(p))
	}
	return out
}

// identities are true, each of another kind.
func identities() []*export.Identity {
	c, s, r := v("cos(theta)"), v("sin(theta)"), v("sqrt(u^2+1)")
	x, y, e := v("x"), v("y"), v("eps")
	circle := "cos(theta)^2 + sin(theta)^2 - 1"
	quotient := func() (left, right export.Expr) {
		// 1/(x + y) + 1/(eps y) - 1/(2 eps (x + y)²), over a common denominator
		left = sum(over(num("1"), sum(x, y)), over(num("1"), times(e, y)),
			neg(over(num("1"), times(num("2"), e, pow(sum(x, y), 2)))))
		right = over(sum(times(num("2"), e, y, sum(x, y)), times(num("2"), pow(sum(x, y), 2)), neg(y)),
			times(num("2"), e, y, pow(sum(y, x), 2)))
		return left, right
	}
	left, right := quotient()
	xi, eta := v("u_xi"), v("u_eta")
	return []*export.Identity{
		{
			Name: "binomial", Variables: []string{"x", "y"},
			Equalities: []export.Equality{{Left: pow(sum(x, y), 3), Right: sum(pow(x, 3),
				times(num("3"), pow(x, 2), y), times(num("3"), x, pow(y, 2)), pow(y, 3))}},
		},
		{
			Name: "quotients", Variables: []string{"x", "y", "eps"},
			NonZero:    append(export.Denominators(left), export.Denominators(right)...),
			Equalities: []export.Equality{{Left: left, Right: right}},
		},
		{
			Name: "nested quotients", Variables: []string{"x", "y", "eps"},
			NonZero: []export.Expr{x, minus(x, y), over(minus(x, y), x)},
			Equalities: []export.Equality{{
				Left: over(num("3/2"), over(minus(x, y), x)), Right: times(num("3/2"), x, pow(minus(x, y), -1))}},
		},
		{
			Name: "rotated gradient", Variables: []string{"u_x", "u_y", "cos(theta)", "sin(theta)"},
			Relations: relation(circle),
			Equalities: []export.Equality{{
				Left: sum(pow(sum(times(v("u_x"), c), times(v("u_y"), s)), 2),
					pow(minus(times(v("u_y"), c), times(v("u_x"), s)), 2)),
				Right: sum(pow(v("u_x"), 2), pow(v("u_y"), 2))}},
		},
		{
			Name: "rationalised root", Variables: []string{"u", "sqrt(u^2+1)"},
			Relations: relation("sqrt(u^2+1)^2 - u^2 - 1"),
			NonZero:   []export.Expr{minus(r, v("u")), r},
			Equalities: []export.Equality{
				{Left: over(num("1"), minus(r, v("u"))), Right: sum(r, v("u"))},
				{Left: over(sum(pow(v("u"), 2), num("1")), r), Right: r},
			},
		},
		{
			// A root over a circle: r² = 1 + c s with c² + s² = 1.
			Name: "root over an angle", Variables: []string{"cos(theta)", "sin(theta)", "r"},
			Relations: relation(circle, "2 r^2 - 2 - 2 cos(theta) sin(theta)"),
			Equalities: []export.Equality{{
				Left: times(num("2"), pow(v("r"), 2)), Right: sum(pow(sum(c, s), 2), num("1"))}},
		},
		{
			// The planar components of the layered fields are spanned by those at 0
			// and pi/4, in the frame's own coordinates at angle 0.
			Name: "spanning pair", Comment: "Sigma(theta) = cos(2 theta) Sigma(0) + sin(2 theta) Sigma(pi/4), the last component",
			Variables: []string{"u_x", "u_y", "cos(theta)", "sin(theta)"}, Relations: relation(circle),
			Equalities: []export.Equality{
				{
					Label: "Sigma_z",
					Left: over(minus(pow(minus(times(v("u_y"), c), times(v("u_x"), s)), 2),
						pow(sum(times(v("u_x"), c), times(v("u_y"), s)), 2)), num("2")),
					Right: sum(times(minus(pow(c, 2), pow(s, 2)), over(minus(pow(v("u_y"), 2), pow(v("u_x"), 2)), num("2"))),
						times(num("2"), s, c, neg(times(v("u_x"), v("u_y"))))),
				},
				{Label: "norm", Left: pow(sum(pow(c, 2), pow(s, 2)), 3), Right: num("1")},
			},
		},
		{
			Name: "jumps and means", Variables: []string{"u_xi(+)", "u_xi(-)", "[u_xi]", "{u_xi}", "u_xi", "u_eta"},
			Relations: relation("[u_xi] - u_xi(+) + u_xi(-)", "{u_xi} - 1/2 u_xi(+) - 1/2 u_xi(-)"),
			Equalities: []export.Equality{
				{Left: minus(pow(v("u_xi(+)"), 2), pow(v("u_xi(-)"), 2)), Right: times(num("2"), v("{u_xi}"), v("[u_xi]"))},
				{Left: minus(pow(xi, 2), pow(eta, 2)), Right: times(minus(xi, eta), sum(xi, eta))},
			},
		},
	}
}

func TestCoqAcceptsIdentities(t *testing.T) {
	var all []export.Statement
	for _, s := range identities() {
		all = append(all, s)
	}
	text, err := export.Coq("identities of each kind", all...)
	require.NoError(t, err)
	out, err := coqc(t, text)
	require.NoError(t, err, "%s\n%s", out, text)
}

func TestStatementsKeepTheirTrees(t *testing.T) {
	x, y := v("x"), v("y")
	text, err := export.Coq("", &export.Identity{
		Name: "kept", Variables: []string{"x", "y"}, NonZero: []export.Expr{times(num("2"), x)},
		Equalities: []export.Equality{{
			Left:  over(times(x, minus(sum(x, y), y)), times(num("2"), x)),
			Right: minus(x, minus(over(x, num("2")), neg(num("-0/1")))),
		}},
	})
	require.NoError(t, err)
	assert.Contains(t, text, "2 * x <> 0 ->\n  x * ((x + y) - y) / (2 * x) = x - (x / 2 - (- 0)).\n")
	out, err := coqc(t, text)
	require.NoError(t, err, out)
}

func TestFalseIdentitiesAreRefused(t *testing.T) {
	x := v("x")
	c, s := v("c"), v("s")
	modulo := &export.Identity{Name: "off", Variables: []string{"c", "s"}, Relations: relation("c^2 + s^2 - 1"),
		Equalities: []export.Equality{{Left: sum(pow(c, 2), pow(s, 2)), Right: num("2")}}}
	_, err := export.Coq("", modulo)
	require.ErrorContains(t, err, "modulo the equations")

	for _, q := range []*export.Identity{
		{Name: "plainly false", Variables: []string{"x"}, Equalities: []export.Equality{{Left: pow(x, 2), Right: x}}},
		{Name: "denominator may vanish", Variables: []string{"x"}, Equalities: []export.Equality{{Left: over(x, x), Right: num("1")}}},
		{Name: "other denominator", Variables: []string{"x"}, NonZero: []export.Expr{minus(x, num("1"))},
			Equalities: []export.Equality{{Left: over(x, x), Right: num("1")}}},
		{Name: "second of two", Variables: []string{"x"}, Equalities: []export.Equality{{Left: x, Right: x}, {Left: x, Right: neg(x)}}},
	} {
		text, err := export.Coq("", q)
		require.NoError(t, err)
		out, err := coqc(t, text)
		assert.Error(t, err, "%s was accepted\n%s", q.Name, text)
		assert.Contains(t, out, "Error", q.Name)
	}
}

func TestCofactors(t *testing.T) {
	names := []string{"c", "s", "r"}
	relations := relation("c^2 + s^2 - 1", "r^2 - s")
	p := poly("r^4 + c^2")
	cofactors, rest, err := export.Cofactors(names, p, relations)
	require.NoError(t, err)
	assert.Equal(t, poly("1"), rest)
	require.Len(t, cofactors, 2)
	// r⁴ + c² - 1 = 1·(c² + s² - 1) + (r² + s)(r² - s)
	assert.Equal(t, poly("1"), cofactors[0])
	assert.Equal(t, poly("r^2 + s"), cofactors[1])

	_, _, err = export.Cofactors(names, p, relation("c s - 1"))
	require.ErrorIs(t, err, export.ErrUnsupported)
}
