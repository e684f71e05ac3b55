package formula

import (
	"strings"
	"testing"
	"time"

	"creaseproof/entropy/source"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// refused checks that err points at the column (counted from 1 in the formula)
// and holds every part.
func refused(t *testing.T, f string, err error, col int, parts ...string) {
	t.Helper()
	var e *source.Error
	if !assert.ErrorAs(t, err, &e, f) {
		return
	}
	assert.Equal(t, 7, e.Line, f)
	assert.Equal(t, 10+col, e.Col, "%s: %v", f, e)
	assert.Less(t, len(e.Error()), source.MaxMessage, f)
	for _, p := range parts {
		assert.Contains(t, e.Error(), p, f)
	}
}

func TestRefusals(t *testing.T) {
	s := layered(t)
	for _, c := range []struct {
		f     string
		col   int
		parts []string
	}{
		// Two readings.
		{`1/2 x`, 2, []string{`"(1/2) x"`, `"1/(2 x)"`}},
		{`a/b c`, 2, []string{`"(a/b) c"`, `"a/(b c)"`}},
		{`a b/c eps x`, 4, []string{`"(a b/c) eps x"`, `"a b/(c eps x)"`}},
		{`c + a*b/c x`, 8, []string{`"(a*b/c) x"`, `"a*b/(c x)"`}},
		{`1/2(x+y)`, 2, []string{`"(1/2) (x + y)"`, `"1/(2 (x + y))"`}},
		{`x^y^z`, 4, []string{`"(x^y)^z"`, `"x^(y^z)"`}},
		{`u_x^2^3`, 6, []string{`"(u_x^2)^3"`, `"u_x^(2^3)"`}},
		{`x²^3`, 3, []string{`"(x^2)^3"`, `"x^(2^3)"`}},
		{`x^1/2`, 4, []string{`"x^(1/2)"`, `"(x^1)/2"`}},
		{`x^-1/2`, 5, []string{`"x^(-1/2)"`, `"(x^-1)/2"`}},
		{`u^2_x`, 4, []string{`"u_x^2"`, `"d_x(u^2)"`}},
		{`u²_x`, 3, []string{`"u_x^2"`, `"d_x(u^2)"`}},
		{`sin x`, 1, []string{`"sin(x)"`, `"sin(x ...)"`}},
		{`sin x y`, 1, []string{`"sin(x) y"`, `"sin(x y)"`}},
		{`2 \sin x`, 3, []string{`"sin(x)"`}},
		{`sin^2(x)`, 1, []string{`"sin(x)^2"`, `"sin(x^2)"`}},
		{`grad u`, 1, []string{`"grad(u)"`}},
		{`|a|`, 1, []string{`"abs(a)"`, `"norm(a, b)"`}},
		{`c \left|a\right|`, 3, []string{`"abs(a)"`, `"norm(a, b)"`}},
		{`x 2`, 3, []string{`"x*2"`, `"x^2"`}},
		{`2 3`, 3, []string{`"2*3"`, `"23"`}},
		{`2(3)`, 2, []string{`"2*3"`, `"2^3"`}},
		{`x (2)`, 3, []string{`"x*2"`, `"x^2"`}},
		{`u_x^2 0.5`, 7, []string{`"u_x^2*0.5"`}},
		{`(x-y)^2 10^2`, 9, []string{`"(x - y)^2*10^2"`, `"(((x - y)^2)^10)^2"`}},
		{`x 10^-3`, 3, []string{`"x*10^(-3)"`, `"(x^10)^(-3)"`}},
		{`2 10^3`, 3, []string{`"2*10^3"`, `"210^3"`}},
		{`x^3 10`, 5, []string{`"x^3*10"`, `"(x^3)^10"`}},
		{`.5`, 1, []string{`"0.5"`, `"*5"`}},
		{`x + .5`, 5, []string{`"0.5"`, `"*5"`}},
		{`u_\xi\eta`, 6, []string{`"_{xi eta}"`, `"_{xi} eta"`}},
		{`Sigma_z(x + y)`, 8, []string{`"Sigma(...)_z"`, `"Sigma_z*(...)"`}},
		{`u^2.nu`, 4, []string{`"(u^2).nu"`, `"(u.nu)^2"`}},
		{`√2`, 1, []string{`"sqrt(x) y"`, `"sqrt(x y)"`}},

		// Names.
		{`uK`, 1, []string{`"u K"`}},
		{`2 cx`, 3, []string{`"c x"`}},
		{`ux`, 1, []string{`"u x"`, `"u_x"`}},
		{`u2`, 1, []string{`"u^2"`, `"2 u"`}},
		{`lamda`, 1, []string{`did you mean "lambda"`}},
		{`Simga`, 1, []string{`did you mean "Sigma"`}},
		{`q`, 1, []string{`unknown name "q"`}},
		{`ln(x)`, 1, []string{`"log(x)"`}},
		{`Δu`, 1, []string{`"u_xx + u_yy + u_zz`}},
		{`\Delta u`, 1, []string{`"u_xx + u_yy + u_zz`}},
		{`DeltaR`, 1, []string{`"R_xx + R_yy + R_zz`}},
		{`∆u`, 1, []string{`"u_xx + u_yy + u_zz`}},
		{`\xix`, 1, []string{`\xi x`}},
		{`\lamda`, 1, []string{`\lambda`}},
		{`xi`, 1, []string{"frame axis"}},
		{`nu`, 1, []string{"X.nu", "nu_x"}},
		{`span`, 1, []string{"claims only"}},
		{`é`, 1, []string{"ASCII or Greek"}},

		// Subscripts.
		{`c_x`, 2, []string{`constant "c"`}},
		{`x_y`, 2, []string{`coordinate "x"`}},
		{`theta_x`, 6, []string{`frame angle "theta"`}},
		{`pi_x`, 3, []string{"pi"}},
		{`u_q`, 3, []string{"x, y, z, xi, eta"}},
		{`u_x2`, 3, []string{`"_x^2"`}},
		{`u_x_y`, 4, []string{`"u_xy"`}},
		{`(u v)_x`, 6, []string{`"d_x(u v)"`}},
		{`d_x(u)_y`, 7, []string{`"d_y(d_x(u))"`}},
		{`d_x(u)_{y}`, 7, []string{`"d_y(d_x(u))"`}},
		{`grad(u)_z`, 8, []string{`"d_z(u)"`}},
		{`div(Sigma)_z`, 11, []string{`"d_z(div(Sigma))"`}},
		{`Sigma_x_y`, 8, []string{`"d_y(Sigma_x)"`}},
		{`u_{}`, 4, []string{"empty"}},
		{`u_{x,y}`, 5, []string{"u_{x y}"}},
		{`u_`, 3, []string{"u_x"}},
		{`u_{x`, 3, []string{"never closed"}},
		{`Sigma_xy`, 6, []string{`"d_y(Sigma_x)"`}},
		{`d_x u`, 1, []string{`"d_x(f)"`}},
		{`d_(u)`, 3, []string{"subscript"}},

		// Calls.
		{`sin(x, y)`, 1, []string{"one argument, not 2"}},
		{`norm()`, 6, []string{"no argument"}},
		{`sup(x, u)`, 5, []string{"a frame angle"}},
		{`sup(theta)`, 1, []string{"two arguments, not 1"}},
		{`euler(u, x)`, 10, []string{"an unknown"}},

		// Powers.
		{`x^eps`, 3, []string{`"exp(eps*log(x))"`}},
		{`x^(a+b)`, 3, []string{`"exp((a + b)*log(x))"`}},
		{`x^{n}`, 4, []string{`unknown name "n"`}},
		{`x^(1/0)`, 3, []string{"division by zero"}},
		{`x^999999999`, 2, []string{"1000000"}},
		{`x^(1/1000001)`, 2, []string{"1000000"}},
		{`x^`, 3, []string{"ends"}},
		{`x^-y`, 4, []string{"number"}},
		{`x**2`, 2, []string{`"^"`}},

		// Brackets and signs.
		{`[u]`, 1, []string{"jump", `"(f)"`}},
		{`{u}`, 1, []string{"average", `"(f)"`}},
		{`(x`, 1, []string{"never closed"}},
		{`x)`, 2, []string{"closes nothing"}},
		{`(x]`, 3, []string{"column 11"}},
		{`(x, y)`, 3, []string{"list"}},
		{`x + -y`, 5, []string{"two signs", "a - (-b)"}},
		{`x*-y`, 3, []string{"a*(-b)"}},
		{`x +`, 4, []string{"too early"}},
		{`* x`, 1, []string{"no factor"}},
		{`x.y`, 2, []string{"full stop"}},
		{`x = y`, 3, []string{"claim"}},
		{`x := y`, 3, []string{`":="`, `"="`, "[let]"}},
		{`x : y`, 3, []string{`"/"`}},
		{`x" + y`, 2, []string{"quotation mark"}},
		{`“x”`, 1, []string{"quotation mark"}},
		{`5% x`, 2, []string{`"/100"`}},
		{`x # y`, 3, []string{"comment"}},
		{`x & y`, 3, []string{"two claims"}},
		{`x + 0x1F`, 5, []string{"decimal", `"31"`}},
		{`0b101`, 1, []string{"decimal", `"5"`}},
		{`x < y`, 3, []string{"<="}},
		{`$x$`, 1, []string{"dollar"}},
		{`x \\ y`, 3, []string{"two backslashes"}},
		{`\frac12`, 1, []string{`\frac{a}{b}`}},
		{`\sqrt[3]{x}`, 6, []string{"x^(1/3)"}},
		{`\partial u`, 1, []string{"u_x"}},
		{"x\u200by", 2, []string{"U+200B"}},
		{``, 1, []string{"empty"}},
		{`  `, 1, []string{"empty"}},

		// Control characters.
		{"x + \theta", 5, []string{"U+0009", "single quotes", `\theta`, "heta"}},
		{"\nu_x", 1, []string{"U+000A", "single quotes", `\nu`}},
		{"\frac{a}{b}", 1, []string{"U+000C", `\frac`}},
		{"\beta", 1, []string{"U+0008", `\beta`}},
		{"x\x00", 2, []string{"U+0000"}},
		{"\xff", 1, []string{"UTF-8"}},
	} {
		_, err := s.ParseExpr(source.Text{File: "case.toml", Line: 7, Col: 11, S: c.f})
		refused(t, c.f, err, c.col, c.parts...)
	}
}

// Where d is an unknown or a named formula, d_x(f) could be its derivative
// times f.
func TestNameOfTheTotalDerivative(t *testing.T) {
	for _, c := range []ScopeConfig{
		{Coordinates: []string{"x", "y"}, Unknowns: []string{"d"}},
		{Coordinates: []string{"x", "y"}, Unknowns: []string{"u"}, Lets: []string{"d"}},
	} {
		s, err := NewScope(c)
		require.NoError(t, err)
		for _, f := range []string{`d_x(d_y)`, `d_x (d_y)`, `d_{x}\left(d_y\right)`, `d_x(x + 1)`} {
			_, err := s.ParseExpr(source.Text{Line: 7, Col: 11, S: f})
			refused(t, f, err, 1, "two readings", `"d_x*(...)"`, "rename")
		}
		for _, f := range []string{`d_x d_y`, `d_x*(x + 1)`, `(d_x) (x + 1)`, `d_x^2 (x + 1)`} {
			n := parse(t, s, f)
			for _, printed := range []string{Text(n), TeX(n)} {
				require.True(t, Same(n, parse(t, s, printed)), "%s printed as %s", f, printed)
			}
		}
	}
	s, err := NewScope(ScopeConfig{Coordinates: []string{"x"}, Unknowns: []string{"u"}, Constants: []string{"d"}})
	require.NoError(t, err)
	parse(t, s, `d (u_x)`)
}

// What looks like a number in another base may be a product of declared names.
func TestZeroBeforeNames(t *testing.T) {
	s, err := NewScope(ScopeConfig{Coordinates: []string{"x", "x1"}, Constants: []string{"b"}})
	require.NoError(t, err)
	require.Equal(t, "0 x1 + 0 x + 0 b", Text(parse(t, s, `0x1 + 0x + 0b`)))
}

func TestRefusedStatements(t *testing.T) {
	s := layered(t)
	for _, c := range []struct {
		f     string
		col   int
		parts []string
	}{
		{`x`, 2, []string{"relation", "A <= B"}},
		{`x < y`, 3, []string{`"<="`}},
		{`x > y`, 3, []string{`">="`}},
		{`x == y`, 3, []string{`"="`}},
		{`x != y`, 3, []string{"refuted"}},
		{`x ≠ y`, 3, []string{"refuted"}},
		{`x := y`, 3, []string{`"="`}},
		{`a <= b <= c`, 8, []string{"two claims"}},
		{`a = b = c`, 7, []string{"two claims"}},
		{`a = `, 5, []string{"too early"}},
		{`u in L^1`, 1, []string{"field"}},
		{`Sigma in K`, 10, []string{"L^p"}},
		{`Sigma in L`, 10, []string{"L^p"}},
		{`Sigma in L^0`, 12, []string{"positive"}},
		{`Sigma in L^3/2`, 13, []string{"L^(3/...)"}},
		{`Sigma in L^c`, 12, []string{"positive number"}},
		{`entropy(u)`, 9, []string{"field"}},
		{`entropy(Sigma`, 8, []string{"never closed"}},
		{`entropy Sigma`, 9, []string{"out of place"}},
		{`span(Sigma)`, 12, []string{"span(Sigma(0), Sigma(pi/4)) = Sigma"}},
		{`span(Sigma) = u`, 15, []string{"field"}},
	} {
		_, err := s.ParseStatement(source.Text{File: "case.toml", Line: 7, Col: 11, S: c.f})
		refused(t, c.f, err, c.col, c.parts...)
	}
}

func TestExponentMarkOfNumbers(t *testing.T) {
	s := layered(t) // e2 is a named formula, e is not declared
	require.Equal(t, "0.002", Text(parse(t, s, "2e-3")))
	require.Equal(t, "2000", Text(parse(t, s, "2E+3")))
	withE, err := s.With("e")
	require.NoError(t, err)
	require.Equal(t, "2 e - 3", Text(parse(t, withE, "2e - 3")))
	for _, c := range []struct {
		scope *Scope
		f     string
		parts []string
	}{
		{withE, "2e-3", []string{`"2*10^-3"`, `"2*e - 3"`}},
		{withE, "2e3", []string{`"2*10^3"`, `"2*e*3"`}},
		{s, "2e2", []string{`"2*10^2"`, `"2*e2"`}},
	} {
		_, err := c.scope.ParseExpr(source.Text{Line: 7, Col: 11, S: c.f})
		refused(t, c.f, err, 1, c.parts...)
	}
}

func TestLimits(t *testing.T) {
	s := layered(t)
	nested := func(n int) string { return strings.Repeat("(", n) + "x" + strings.Repeat(")", n) }
	parse(t, s, nested(maxDepth))
	parse(t, s, strings.Repeat("9", maxDigits))
	parse(t, s, "1e-999")
	parse(t, s, "x^1000000 + x^(-1/1000000)")
	parse(t, s, strings.Repeat("x+", 100000)+"x")
	start := time.Now()
	for _, c := range []struct {
		f    string
		part string
	}{
		{nested(maxDepth + 1), "nested"},
		{nested(100000), "nested"},
		{strings.Repeat("[", 100000), "jump"},
		{strings.Repeat(`\frac{`, 100000), "nested"},
		{strings.Repeat(`x^{`, 100000), "nested"},
		{strings.Repeat(`sin(`, 100000), "nested"},
		{strings.Repeat(`-`, 100000), "two signs"},
		{strings.Repeat("9", maxDigits+1), "1000 digits"},
		{"1e1000", "1000 digits"},
		{"1e99999999999999999999", "1000 digits"},
		{strings.Repeat("x", maxLength+1), "longer"},
		{strings.Repeat("x", maxLength), "unknown name"},
		{"u_" + strings.Repeat("x", maxLength-3) + "q", "subscript"},
	} {
		_, err := s.ParseExpr(source.Text{S: c.f})
		require.ErrorContains(t, err, c.part)
		require.Less(t, len(err.Error()), source.MaxMessage)
	}
	require.Less(t, time.Since(start), 2*time.Minute)
}

func TestAccepted(t *testing.T) {
	s := layered(t)
	for f, want := range map[string]string{
		`u_x^2/2`:                   `u_x^2/2`,
		`1/(2 x)`:                   `1/(2 x)`,
		`1/{2 x}`:                   ``,
		`\frac{1}{2 x} y`:           `(1/(2 x)) y`,
		`(2^3) x`:                   `2^3 x`,
		`2x(y+1)`:                   `2 x (y + 1)`,
		`R(y+1)`:                    `R (y + 1)`,
		`(a)(b)`:                    `a b`,
		`+x`:                        `x`,
		`-x - (y - z)`:              `-x - (y - z)`,
		`Sigma·ν`:                   `Sigma.nu`,
		`Sigma \cdot \nu`:           `Sigma.nu`,
		`c·nu_x`:                    `c*nu_x`,
		`Sigma(0)_z`:                `Sigma(0)_z`,
		`a div(Sigma(θ + π/4))_z`:   ``,
		`x^{2}`:                     `x^2`,
		`x^0.25 + x^(6/4)`:          `x^(1/4) + x^(3/2)`,
		`u_x\xi`:                    ``,
		`c\,x\;y\!z~u\quad v`:       `c x y z u v`,
		`\varepsilon\lambda`:        `eps lambda`,
		`3x^2y`:                     `3 x^2 y`,
		`euler(u_x^2)`:              `euler(u_x^2)`,
		`d_{xi eta}(u) + d_ξ(R)`:    `d_xieta(u) + d_xi(R)`,
		`0.1 + 1.50`:                `0.1 + 1.5`,
		`x^(1)`:                     `x^(1)`,
		`grad(u).nu`:                `grad(u).nu`,
		`x/y/z*c`:                   `x/y/z*c`,
		`\frac{a}{b} \cdot c`:       `a/b*c`,
		`\left(\frac{a}{b}\right)c`: `(a/b) c`,
	} {
		n, err := s.ParseExpr(source.Text{S: f})
		if want == "" {
			require.Error(t, err, f)
			continue
		}
		require.NoError(t, err, f)
		require.Equal(t, want, Text(n))
	}
	jump := s.AtJump()
	require.Equal(t, "[Sigma].nu", Text(parse(t, jump, `[Σ]·ν`)))
	require.Equal(t, "{u} [u_x]", Text(parse(t, jump, `\left\{u\right\} \left[u_x\right]`)))
	_, err := s.ParseExpr(source.Text{S: "[u]"})
	require.Error(t, err, "AtJump leaves its receiver alone")
}

func TestStatements(t *testing.T) {
	s := layered(t).AtJump()
	for f, want := range map[string]string{
		`div(Sigma) = R (u_xixi - u_etaeta)`:      ``,
		`a ≤ b`:                                   `a <= b`,
		`a \geq b`:                                `a >= b`,
		`Sigma in L^1`:                            ``,
		`\Sigma(0) \in L^{3/2}`:                   `Sigma(0) in L^(3/2)`,
		`Sigma ∈ L^2.5`:                           `Sigma in L^(5/2)`,
		`entropy(Sigma)`:                          ``,
		`span(Sigma(0), Sigma(pi/4)) = Sigma`:     ``,
		`sup(theta, [Sigma].nu) = norm([u_x])^4`:  ``,
		`L = L`:                                   ``,
		`2 R L = c u K`:                           ``,
		`[u_x]^4/(12 norm([u_x], [u_y])) >= -c/2`: ``,
	} {
		st, err := s.ParseStatement(source.Text{S: f})
		require.NoError(t, err, f)
		if want == "" {
			want = f
		}
		require.Equal(t, want, st.Text())
	}
}

func TestPositions(t *testing.T) {
	s := layered(t)
	n, err := s.ParseExpr(source.Text{Line: 3, Col: 5, S: `ε u_x - sin(θ y)`})
	require.NoError(t, err)
	var got []int
	Walk(n, func(n Node) bool {
		require.Equal(t, 3, n.At().Line)
		got = append(got, n.At().Col)
		return true
	})
	require.Equal(t, []int{5, 5, 5, 7, 13, 17, 17, 19}, got)
}
