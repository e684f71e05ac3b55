package formula

import (
	"math/big"
	"testing"

	"creaseproof/entropy/source"

	"github.com/stretchr/testify/require"
)

// layered is a scope like that of the layered model.
func layered(t testing.TB) *Scope {
	s, err := NewScope(ScopeConfig{
		Coordinates: []string{"x", "y", "z"},
		Axes:        []string{"xi", "eta"},
		Unknowns:    []string{"u", "v"},
		Constants:   []string{"eps", "c", "lambda", "a", "b"},
		Angles:      []string{"theta"},
		Lets:        []string{"R", "L", "K", "e2", "f"},
		Fields:      []string{"Sigma", "F"},
	})
	require.NoError(t, err)
	return s
}

func parse(t testing.TB, s *Scope, f string) Node {
	n, err := s.ParseExpr(source.Text{S: f})
	require.NoError(t, err, f)
	return n
}

func TestEqualSpellings(t *testing.T) {
	s := layered(t)
	for _, group := range [][]string{
		{`u_xixi`, `u_{xi xi}`, `u_{xixi}`, `u_ξξ`, `u_{\xi\xi}`, `u_{\xi \xi}`, `u_ξxi`, `u _ { ξ ξ }`},
		{`u_xieta`, `u_{xi eta}`, `u_ξη`, `u_{\xi\eta}`, `u_{\xi \eta}`},
		{`eps K`, `ε K`, `ϵ K`, `epsilon K`, `\epsilon K`, `\varepsilon K`, `\varepsilon\,K`, `\mathit{eps} K`},
		{`u_x^2/2`, `(u_x)^2/2`, `u_{x}^{2}/2`, `\frac{u_x^2}{2}`, `u_x²/2`, `\tfrac{u_{x}^2}{2}`},
		{`3/2*eps K`, `3/2 × ε K`, `\frac{3}{2} \cdot \varepsilon K`, `3/2\times\epsilon K`},
		{`(3/2) eps K`, `\frac{3}{2} \varepsilon K`},
		{`sqrt(x + y)`, `\sqrt{x+y}`, `√(x+y)`, `\operatorname{sqrt}(x+y)`},
		{`sin(theta)`, `\sin(\theta)`, `\sin\left(\vartheta\right)`, `sin(θ)`, `sin(ϑ)`},
		{`x - y`, `x − y`, `x-y`},
		{`x(y+1)`, `x (y + 1)`, `x\,\left(y+1\right)`, `x \bigl( y + 1 \bigr)`},
		{`x^(-1/2)`, `x^{-1/2}`, `x^{\frac{-1}{2}}`, `x^-0.5`, `x^{-0.5}`, `x^(-2/4)`},
		{`x^-2`, `x^{-2}`, `x^(-2)`, `x⁻²`},
		{`2e-3 x`, `0.002 x`, `2E-3x`, `0.0020x`},
		{`Sigma(pi/4)`, `Σ(π/4)`, `\Sigma(\pi/4)`, `\Sigma\left(\pi/4\right)`},
	} {
		want := parse(t, s, group[0])
		for _, f := range group[1:] {
			require.True(t, Same(want, parse(t, s, f)), "%s and %s", group[0], f)
		}
	}
}

func TestText(t *testing.T) {
	s := layered(t)
	for _, f := range []string{
		"u_z - (u_x^2 + u_y^2)/2", "u_xx u_yy - u_xy^2", "R^2/(2 eps) + eps L^2/2",
		"-(u_z u_eta - u_eta u_xi^2/2 - u_eta^3/6)", "a/b*c", "3/2*eps K", "(3/2) eps K",
		"div(Sigma)", "Sigma(0)_z", "Sigma.nu", "d_x(u_y + d_xieta(v))", "norm(u_x, u_y)^4/(12 norm(u_x, u_y, u_z))",
		"cos(2 theta) Sigma(0) + sin(2 theta) Sigma(pi/4)", "x^(1)/2", "x^(1/2)", "(x^2)^3", "(Sigma) (x + y)",
		"euler(R, u)", "sup(theta, Sigma.nu)", "nu_x u", "R_xixi", "x (2^3)", "0.5 x", "(a/b)*c",
	} {
		require.Equal(t, f, Text(parse(t, s, f)))
	}
}

// The formulas of the layered model, its jumps, its profiles and its crease
// energies print and parse, in TeX too.
func TestModelFormulas(t *testing.T) {
	s, err := NewScope(ScopeConfig{
		Coordinates: []string{"x", "y", "z"},
		Axes:        []string{"xi", "eta"},
		Unknowns:    []string{"u", "v"},
		Constants:   []string{"eps", "c", "lambda", "k", "t", "a", "A"},
		Angles:      []string{"theta"},
		Lets:        []string{"R", "L", "K", "e", "s1", "s2", "s3"},
		Fields:      []string{"Sigma"},
		Jump:        true,
	})
	require.NoError(t, err)
	for _, f := range []string{
		"div(Sigma) = R (u_xixi - u_etaeta)", "div(Sigma) <= e - 2 eps K", "entropy(Sigma)",
		"span(Sigma(0), Sigma(pi/4)) = Sigma", "2 R L = c u K", "Sigma in L^1", "c = 4/3",
		`\frac{1}{2} u_{\xi\xi} + u_ηη/2 = L/2`,
		"sup(theta, [Sigma].nu) = norm([u_x], [u_y])^4/(12 norm([u_x], [u_y], [u_z]))",
		"Sigma = cos(2 theta) Sigma(0) + sin(2 theta) Sigma(pi/4)",
		"e - 2 eps K - div(Sigma) = (R - eps (u_xixi - u_etaeta))^2/(2 eps) + 2 eps u_xieta^2",
		"div(Sigma) <= e - 3/2*eps K", "div(Sigma) <= e - 201/100*eps K",
		"div(Sigma) <= e - 2 eps K - eps u_xx^2/1000000000", "(u_xx - 1000 u_yy)^2 >= u_yy^2/1000000",
		"u = 2 eps log(exp((x + z/2)/(2 eps)) + exp((y + z/2)/(2 eps)) + exp((-x - y + z + 1)/(2 eps)))",
		"u = 2 eps log(1 + A (1 + erf(x/(2 sqrt(eps z)))))",
		"s1^2 >= (3 + 1/1000000) s2", "s2^2 >= 301/100*s1 s3", "x = sqrt(2*(3/4)*t) cos(a)", "u = -(7/12)",
		"u = (17/12) sqrt(x^2 + y^2) + (17/12)^2 z/2", "x = -(1/2) t cos(a)", "c = (2 pi k^2/3) log(6)",
		"R = (1 - u_x^2 - u_y^2)/2", "euler(2 R L, u) = 4 K", "exp(sin(u_x u_yy)) + cos(u_xx u_y) >= exp(-1) - 1",
	} {
		st, err := s.ParseStatement(source.Text{S: f})
		require.NoError(t, err, f)
		for _, printed := range []string{st.Text(), st.TeX()} {
			again, err := s.ParseStatement(source.Text{S: printed})
			require.NoError(t, err, printed)
			require.True(t, st.Same(again), printed)
		}
	}
}

// Constructors make the trees that the parser makes.
func TestConstructors(t *testing.T) {
	s := layered(t)
	num, u, x := NewInt, NewName("u"), NewName("x")
	half := big.NewRat(1, 2)
	for want, n := range map[string]Node{
		"0":                 NewSum(),
		"1":                 NewProduct(),
		"0.5":               NewNum(half),
		"1/3":               NewNum(big.NewRat(1, 3)),
		"-1/3":              NewNum(big.NewRat(-1, 3)),
		"u":                 NewPower(u, big.NewRat(1, 1)),
		"u^(1/2)":           NewPower(u, half),
		"u_xx - x":          NewSum(Term{X: NewDeriv("u", "x", "x")}, Term{X: NewNeg(x), Neg: false}),
		"-x":                NewNeg(x),
		"u - 2":             NewSum(Term{X: u}, Term{X: num(-2)}),
		"u*x/2":             NewQuotient(NewProduct(u, x), num(2)),
		"u x":               NewJuxt(u, x),
		"u*2":               NewJuxt(u, num(2)),
		"2 u x":             NewJuxt(num(2), u, x),
		"(1/3) u":           NewJuxt(NewNum(big.NewRat(1, 3)), u),
		"u/(2 x)":           NewQuotient(u, NewJuxt(num(2), x)),
		"Sigma(pi/4).nu":    NewDotNu(NewField("Sigma", NewQuotient(NewName("pi"), num(4)))),
		"Sigma_z":           NewComponent("Sigma", nil, "z"),
		"d_xy(u x)":         NewTotalDeriv(NewJuxt(u, x), "x", "y"),
		"norm([u], {u}, 3)": NewCall("norm", NewJump(u), NewAverage(u), num(3)),
	} {
		require.Equal(t, want, Text(n))
		require.True(t, Same(parse(t, s.AtJump(), want), n), want)
	}
}

func TestSameTellsTreesApart(t *testing.T) {
	s := wide(t)
	different := []string{
		"u", "v", "2", "3", "u_x", "u_y", "u_xx", "R_x", "Sigma", "F", "Sigma(0)", "Sigma(1)", "Sigma_x", "Sigma_y",
		"Sigma(0)_x", "nu_x", "d_x(u)", "d_y(u)", "d_x(v)", "sin(u)", "cos(u)", "norm(u)", "norm(u, v)", "u + v", "u - v",
		"v + u", "u + v + 2", "-u", "u*v", "u/v", "u v", "v u", "u v x", "u^2", "u^3", "v^2", "u.nu", "v.nu", "[u]", "[v]", "{u}", "{v}",
		"(u + v) + 2", "(u*v)*2", "u*v*2", "(u v) x",
	}
	for i, a := range different {
		for j, b := range different {
			require.Equal(t, i == j, Same(parse(t, s, a), parse(t, s, b)), "%s and %s", a, b)
		}
	}
}
