package formula

import (
	"strings"
	"testing"
	"unicode/utf8"

	"creaseproof/entropy/source"

	"github.com/stretchr/testify/require"
)

// FuzzParse checks that no input panics, that an error is short and valid
// UTF-8, and that what parses is printed and parsed again to an equal tree.
func FuzzParse(f *testing.F) {
	for _, s := range []string{
		"u_z - (u_x^2 + u_y^2)/2", "-(u_z u_eta - u_eta u_xi^2/2 - u_eta^3/6)",
		"div(Sigma) <= e - 2 eps K", `sup(theta, [Sigma]·ν) = norm([u_x], {u_y})^4/(12 norm([u_x]))`,
		`\frac{u_{\xi \eta}^{-1/2}}{\sqrt{\varepsilon}} \cdot 2e-3`, "span(Sigma(0), F) = Sigma", "Sigma in L^{3/2}",
		"x^1/2", "1/2 x", "u_\\xi\\eta", "|a|", "d_{xi eta}(f) x²", "[[{x}.nu]^(1/2)]", "2e3", "\theta", `\left\{x\right\}`,
		"Sigma (x + y)", "x (2^3)", "((((", "−x × y · nu_x", "\\mathit{x1} \\operatorname{erf}(x)",
	} {
		f.Add(s)
	}
	scope := wide(f)
	plain, err := NewScope(ScopeConfig{Coordinates: []string{"x"}, Unknowns: []string{"u"}})
	require.NoError(f, err)
	f.Fuzz(func(t *testing.T, s string) {
		src := source.Text{File: "case.toml", Line: 3, Col: 4, S: s}
		short := func(err error) {
			require.Less(t, len(err.Error()), source.MaxMessage)
			require.True(t, utf8.ValidString(err.Error()))
		}
		again := func(printed string) (Node, bool) {
			n, err := scope.ParseExpr(source.Text{S: printed})
			if err != nil && strings.Contains(err.Error(), "nested more than") {
				return nil, false // printing may add brackets
			}
			require.NoError(t, err, printed)
			return n, true
		}
		if n, err := scope.ParseExpr(src); err != nil {
			short(err)
		} else {
			if m, ok := again(Text(n)); ok {
				require.True(t, Same(n, m), "%s reads as %s", Text(n), Text(m))
				require.Equal(t, Text(n), Text(m))
			}
			if m, ok := again(TeX(n)); ok {
				require.True(t, Same(n, m), "%s reads as %s", TeX(n), Text(m))
			}
			wellFormed(t, MathML(n))
		}
		if st, err := scope.ParseStatement(src); err != nil {
			short(err)
		} else if again, err := scope.ParseStatement(source.Text{S: st.TeX()}); err == nil {
			require.True(t, st.Same(again), st.Text())
		} else {
			require.ErrorContains(t, err, "nested more than", st.TeX())
		}
		if _, err := plain.ParseExpr(src); err != nil {
			short(err)
		}
	})
}

func BenchmarkParse(b *testing.B) {
	s := layered(b)
	src := source.Text{S: "-(u_z u_eta - u_eta u_xi^2/2 - u_eta^3/6)"}
	b.SetBytes(int64(len(src.S)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := s.ParseExpr(src); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkText(b *testing.B) {
	n := parse(b, layered(b), "-(u_z u_eta - u_eta u_xi^2/2 - u_eta^3/6)")
	b.ReportAllocs()
	for b.Loop() {
		Text(n)
	}
}
