package export_test

import (
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity/export"
)

// twoSquares is x² + y² >= lambda x y, which holds for |lambda| <= 2 and fails above 2
// at x = y = 1 and below -2 at x = 1, y = -1.
func twoSquares(upper bool) *export.Beyond {
	v := func(s string) export.Expr { return export.Variable(s) }
	s := &export.Beyond{
		Name: "two squares", Constant: "lambda", Value: "2", Upper: true,
		At:    map[string]string{"x": "1", "y": "1", "eps": "3/2"},
		Left:  export.Quotient{Num: export.Product{v("lambda"), v("x"), v("y")}, Den: v("eps")},
		Right: export.Quotient{Num: export.Sum{export.Power{Base: v("x"), Exp: 2}, export.Power{Base: v("y"), Exp: 2}}, Den: v("eps")},
	}
	if !upper {
		s.Upper, s.Value, s.At["y"] = false, "-2", "-1"
	}
	return s
}

func TestCoqAcceptsFailuresBeyondAnEnd(t *testing.T) {
	group := &export.Group{Name: "best values", Comment: "-2 <= lambda <= 2", Statements: []export.Statement{twoSquares(true), twoSquares(false)}}
	text, err := export.Coq("", group)
	require.NoError(t, err)
	assert.Contains(t, text, "2 < lambda ->")
	assert.Contains(t, text, "lambda < (-2) ->")
	assert.Contains(t, text, "(x^2 + y^2) / eps < lambda * x * y / eps")
	out, err := coqc(t, text)
	require.NoError(t, err, "%s\n%s", out, text)
}

// The point is one at which the assumptions hold, by the theorem too.
func TestAssumptionsBeyondAnEnd(t *testing.T) {
	v := func(s string) export.Expr { return export.Variable(s) }
	zero := export.Number("0")
	s := twoSquares(true)
	s.At["r"] = "2"
	s.Assumed = []export.Comparison{
		{Left: v("eps"), Relation: ">", Right: zero},
		{Left: zero, Relation: "<", Right: export.Quotient{Num: v("x"), Den: export.Product{v("eps"), v("y")}}},
		{Left: v("x"), Relation: "=", Right: v("y")},
		{Left: export.Power{Base: v("r"), Exp: 2}, Relation: "=", Right: export.Number("4")},
		{Left: v("r"), Relation: ">=", Right: export.Number("2")},
		{Left: v("x"), Relation: "<=", Right: v("eps")},
	}
	text, err := export.Coq("", s)
	require.NoError(t, err)
	for _, want := range []string{"eps > 0 /\\", "x = y", "r^2 = 4", "r = 2 ->"} {
		assert.Contains(t, text, want)
	}
	out, err := coqc(t, text)
	require.NoError(t, err, "%s\n%s", out, text)

	for name, c := range map[string]export.Comparison{
		"one that is false":       {Left: v("eps"), Relation: "<", Right: zero},
		"an equation off by some": {Left: v("x"), Relation: "=", Right: export.Number("1000001/1000000")},
		"a strict one":            {Left: v("x"), Relation: "<", Right: v("y")},
		"one on the constant":     {Left: v("lambda"), Relation: ">", Right: zero},
		"a pole":                  {Left: export.Quotient{Num: v("x"), Den: export.Sum{v("x"), export.Negation{X: v("y")}}}, Relation: ">", Right: zero},
		"an unknown name":         {Left: v("w"), Relation: ">", Right: zero},
		"no relation":             {Left: v("x"), Relation: "!=", Right: zero},
		"no side":                 {Left: v("x"), Relation: ">"},
	} {
		s := twoSquares(true)
		s.Assumed = []export.Comparison{c}
		_, err := export.Coq("", s)
		require.Error(t, err, name)
	}
}

func TestTeXOfFailuresBeyondAnEnd(t *testing.T) {
	text, err := export.TeX(&export.Group{Statements: []export.Statement{twoSquares(true), twoSquares(false)}}, export.TeXOptions{Width: 500})
	require.NoError(t, err)
	assert.Equal(t, `\begin{align}
\Bigl(\frac{x^{2} + y^{2}}{\varepsilon} - \frac{\lambda x y}{\varepsilon}\Bigr)\big|_{\varepsilon = \tfrac{3}{2}, x = 1, y = 1} &= \tfrac{2}{3} \bigl(2 - \lambda\bigr) \\
\Bigl(\frac{x^{2} + y^{2}}{\varepsilon} - \frac{\lambda x y}{\varepsilon}\Bigr)\big|_{\varepsilon = \tfrac{3}{2}, x = 1, y = -1} &= \tfrac{2}{3} \bigl(\lambda + 2\bigr)
\end{align}
`, text)
}

func TestFailuresThatAreNone(t *testing.T) {
	for name, change := range map[string]func(s *export.Beyond){
		"another end":            func(s *export.Beyond) { s.Value = "3" },
		"the other side":         func(s *export.Beyond) { s.Upper = false },
		"no equality there":      func(s *export.Beyond) { s.At["x"] = "2" },
		"a slope of zero":        func(s *export.Beyond) { s.At["x"], s.At["y"] = "0", "0" },
		"a denominator of zero":  func(s *export.Beyond) { s.At["eps"] = "0" },
		"a name without a value": func(s *export.Beyond) { delete(s.At, "eps") },
		"no number":              func(s *export.Beyond) { s.At["x"] = "1.5" },
		"the square":             func(s *export.Beyond) { s.Left = export.Power{Base: s.Left, Exp: 2} },
		"no side":                func(s *export.Beyond) { s.Right = nil },
	} {
		s := twoSquares(true)
		change(s)
		_, err := export.Coq("", s)
		require.Error(t, err, name)
		_, err = export.TeX(s, export.TeXOptions{})
		require.Error(t, err, name)
	}
	_, err := export.Coq("", &export.Group{})
	require.Error(t, err)
}

// A side whose denominator is not known to be positive is refused: the difference
// alone does not show that the sides have values.
func TestSidesNeedPositiveDenominators(t *testing.T) {
	s := layered()
	extra := export.Quotient{Num: export.Variable("R"), Den: export.Variable("u_xieta")}
	s.Left, s.Right = export.Sum{s.Left, extra}, export.Sum{s.Right, extra}
	_, err := export.Coq("", s)
	require.ErrorIs(t, err, export.ErrUnsupported)
}
