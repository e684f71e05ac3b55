package export_test

import (
	"fmt"
	"strings"

	"creaseproof/identity/certificate"
	"creaseproof/identity/export"
)

// The inequality 2 a b <= eps a² + b²/eps, proved by one square.
func Example() {
	monomial := func(c string, m map[string]int) certificate.Term { return certificate.Term{C: c, M: m} }
	a, b, eps := export.Variable("a"), export.Variable("b"), export.Variable("eps")
	s := &export.Inequality{
		Name: "young",
		Claim: &certificate.Claim{
			Variables: []string{"eps", "a", "b"},
			Positive:  []certificate.Constraint{{Poly: certificate.Polynomial{monomial("1", map[string]int{"eps": 1})}, Strict: true}},
			Target: certificate.Polynomial{
				monomial("1", map[string]int{"eps": 2, "a": 2}),
				monomial("-2", map[string]int{"eps": 1, "a": 1, "b": 1}),
				monomial("1", map[string]int{"b": 2}),
			},
		},
		Certificate: &certificate.Certificate{Squares: []certificate.Square{{Weight: "1", Base: certificate.Polynomial{
			monomial("1", map[string]int{"eps": 1, "a": 1}), monomial("-1", map[string]int{"b": 1}),
		}}}},
		Left: export.Product{export.Number("2"), a, b},
		Right: export.Sum{
			export.Product{eps, export.Power{Base: a, Exp: 2}},
			export.Quotient{Num: export.Power{Base: b, Exp: 2}, Den: eps},
		},
		Scale: [][]certificate.Square{{{Weight: "1", Factors: []int{0}, Base: certificate.Polynomial{monomial("1", nil)}}}},
	}

	tex, err := export.TeX(s, export.TeXOptions{})
	fmt.Print(tex)
	fmt.Println(err)

	text, err := export.Coq("A bound of Young type.", s)
	_, theorem, _ := strings.Cut(text, "Theorem young :")
	statement, _, _ := strings.Cut(theorem, "Proof.")
	fmt.Println(strings.TrimSpace(statement))
	fmt.Println(err)
	// Output:
	// \begin{align}
	// \varepsilon a^{2} + \frac{b^{2}}{\varepsilon} - 2 a b &= \frac{1}{\varepsilon} \bigl(\varepsilon a - b\bigr)^{2}
	// \end{align}
	// <nil>
	// forall eps a b : R,
	//   0 < eps ->
	//   2 * a * b <= eps * a^2 + b^2 / eps.
	// <nil>
}
