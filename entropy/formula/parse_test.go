package formula

import (
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
