package export_test

import (
	"creaseproof/identity/certificate"
	"creaseproof/identity/export"
)

// layered is the Young bound of the layered model in the frame's coordinates:
// 2 eps (e - 2 eps K - div Sigma) = (R - eps (a - c))² + 4 eps² b², the left side
// being R² + eps² (a + c)² - 4 eps² (a c - b²) - 2 eps R (a - c), with R, a, b, c
// for the residual, u_xixi, u_xieta and u_etaeta.
func layered() *export.Inequality {
	v := func(s string) export.Expr { return export.Variable(s) }
	a, b, c, eps, r := v("u_xixi"), v("u_xieta"), v("u_etaeta"), v("eps"), v("R")
	two := export.Number("2")
	return &export.Inequality{
		Name:    "Young bound",
		Comment: "div(Sigma) <= e - 2 eps K in the layered model",
		Claim: &certificate.Claim{
			Variables: []string{"eps", "R", "u_xixi", "u_xieta", "u_etaeta"},
			Positive:  []certificate.Constraint{{Poly: poly("eps"), Strict: true}},
			Target: poly("R^2 + eps^2 u_xixi^2 + eps^2 u_etaeta^2 - 2 eps^2 u_xixi u_etaeta + 4 eps^2 u_xieta^2" +
				" - 2 eps R u_xixi + 2 eps R u_etaeta"),
		},
		Certificate: &certificate.Certificate{Squares: []certificate.Square{
			square("1", "R - eps u_xixi + eps u_etaeta"), square("4", "eps u_xieta"),
		}},
		Left: export.Product{r, export.Sum{a, export.Negation{X: c}}},
		Right: export.Sum{
			export.Quotient{Num: export.Power{Base: r, Exp: 2}, Den: export.Product{two, eps}},
			export.Quotient{Num: export.Product{eps, export.Power{Base: export.Sum{a, c}, Exp: 2}}, Den: two},
			export.Negation{X: export.Product{two, eps, export.Sum{
				export.Product{a, c}, export.Negation{X: export.Power{Base: b, Exp: 2}}}}},
		},
		Scale: [][]certificate.Square{{square("2", "1", 0)}},
	}
}

// motzkin is the form of Motzkin (1967), with z = 1: not a sum of squares, but
// it becomes one when it is multiplied by x² + y², or by x² + y² + 1.
func motzkin() *export.Inequality {
	return &export.Inequality{
		Name: "Motzkin",
		Claim: &certificate.Claim{
			Variables: []string{"x", "y"},
			Target:    poly("x^4 y^2 + x^2 y^4 - 3 x^2 y^2 + 1"),
		},
		Certificate: &certificate.Certificate{
			Multiplier: []certificate.Square{square("1", "x"), square("1", "y"), square("1", "1")},
			Squares: []certificate.Square{
				square("1", "x^2 y - y"), square("1", "x y^2 - x"), square("1", "x^2 y^2 - 1"),
				square("1/4", "x y^3 - x^3 y"), square("3/4", "x y^3 + x^3 y - 2 x y"),
			},
		},
	}
}

// motzkinSquared has a multiplier that vanishes at the origin:
// (x² + y²)² M = x² y² (x² + y² + 1) (x² + y² - 2)² + (x² - y²)².
func motzkinSquared() *export.Inequality {
	s := motzkin()
	s.Name = "Motzkin, multiplier with a zero"
	s.Certificate = &certificate.Certificate{
		Multiplier: []certificate.Square{square("1", "x^2 + y^2")},
		Squares: []certificate.Square{
			square("1", "x^4 y + x^2 y^3 - 2 x^2 y"), square("1", "x^3 y^2 + x y^4 - 2 x y^2"),
			square("1", "x^3 y + x y^3 - 2 x y"), square("1", "x^2 - y^2"),
		},
	}
	return s
}

// onBox is x (1 - x) (x + 3 y) >= 0 for 0 <= x <= 1, y > -x/3, with fractions in
// every place.
func onBox() *export.Inequality {
	return &export.Inequality{
		Name: "on a box",
		Claim: &certificate.Claim{
			Variables: []string{"x", "y"},
			Positive: []certificate.Constraint{
				{Poly: poly("1/2 x")}, {Poly: poly("1/3 - 1/3 x")}, {Poly: poly("1/5 x + 3/5 y"), Strict: true},
			},
			Target: poly("1/7 x^2 + 3/7 x y - 1/7 x^3 - 3/7 x^2 y"),
		},
		Certificate: &certificate.Certificate{Squares: []certificate.Square{square("30/7", "1", 0, 1, 2)}},
	}
}

// onEdge has a multiplier that vanishes on an edge of the set: with
// M = 2/3 x² + x⁵/6, M (x/2 - x²) = x² g0 g1 + x⁴ g0² g1/4.
func onEdge() *export.Inequality {
	return &export.Inequality{
		Name: "multiplier that vanishes on an edge",
		Claim: &certificate.Claim{
			Variables: []string{"x", "y", "z"},
			Positive: []certificate.Constraint{
				{Poly: poly("x")}, {Poly: poly("1/3 - 2/3 x")}, {Poly: poly("1/2 y + z + x"), Strict: true}, {Poly: poly("z - y^2")},
			},
			Target: poly("1/2 x - x^2"),
		},
		Certificate: &certificate.Certificate{
			Multiplier: []certificate.Square{square("2/3", "x"), square("1/6", "x^2", 0)},
			Squares:    []certificate.Square{square("1", "x", 0, 1), square("1/4", "x^2", 0, 0, 1)},
		},
	}
}

// onCircle is a claim modulo c² + s² = 1: 1 - c s = (c - s)²/2 + 1/2 there.
func onCircle() *export.Inequality {
	return &export.Inequality{
		Name: "on a circle",
		Claim: &certificate.Claim{
			Variables: []string{"cos(theta)", "sin(theta)"},
			Zero:      []certificate.Polynomial{poly("cos(theta)^2 + sin(theta)^2 - 1")},
			Target:    poly("1 - cos(theta) sin(theta)"),
		},
		Certificate: &certificate.Certificate{
			Squares:   []certificate.Square{square("1/2", "cos(theta) - sin(theta)"), square("1/2", "1")},
			Cofactors: []certificate.Polynomial{poly("- 1/2")},
		},
	}
}

// withRoot has both sides as trees with a root and quotients:
// a/r <= r (a² + 1)/(2 (1 + u²)) where r² = 1 + u², r > 0. Multiplied by
// 2 r (1 + u²), the gap is (a - 1)² (1 + u²).
func withRoot() *export.Inequality {
	a, u, r := export.Variable("a"), export.Variable("u"), export.Variable("sqrt(u^2+1)")
	one, two := export.Number("1"), export.Number("2")
	return &export.Inequality{
		Name: "with a root",
		Claim: &certificate.Claim{
			Variables: []string{"a", "u", "sqrt(u^2+1)"},
			Positive:  []certificate.Constraint{{Poly: poly("sqrt(u^2+1)"), Strict: true}},
			Zero:      []certificate.Polynomial{poly("sqrt(u^2+1)^2 - u^2 - 1")},
			Target:    poly("a^2 u^2 - 2 a u^2 + u^2 + a^2 - 2 a + 1"),
		},
		Certificate: &certificate.Certificate{
			Squares:   []certificate.Square{square("1", "a u - u"), square("1", "a - 1")},
			Cofactors: []certificate.Polynomial{nil},
		},
		Left: export.Quotient{Num: a, Den: r},
		Right: export.Quotient{
			Num: export.Product{r, export.Sum{export.Power{Base: a, Exp: 2}, one}},
			Den: export.Product{two, export.Sum{one, export.Power{Base: u, Exp: 2}}},
		},
		Scale: [][]certificate.Square{{square("2", "1", 0)}, {square("1", "u"), square("1", "1")}},
	}
}

// withSquaring is a + b <= 3/2 r where r² = a² + b², r >= 0: the squares differ by
// (a - b)² + a²/4 + b²/4. Numbers stand in every place.
func withSquaring() *export.Inequality {
	return &export.Inequality{
		Name: "squaring",
		Claim: &certificate.Claim{
			Variables: []string{"a", "b", "r"},
			Positive:  []certificate.Constraint{{Poly: poly("1/3 r")}},
			Zero:      []certificate.Polynomial{poly("1/5 r^2 - 1/5 a^2 - 1/5 b^2")},
			Target:    poly("3/2 r - a - b"),
		},
		Certificate: &certificate.Certificate{Squaring: &certificate.Squaring{
			Left: []certificate.Square{square("9/2", "1", 0)}, Right: poly("a + b"), Cofactors: []certificate.Polynomial{nil},
			Proof: &certificate.Certificate{
				Squares:   []certificate.Square{square("1", "a - b"), square("1/4", "a"), square("1/4", "b")},
				Cofactors: []certificate.Polynomial{poly("45/4")},
			},
		}},
		Left:  export.Sum{export.Variable("a"), export.Variable("b")},
		Right: export.Quotient{Num: export.Product{export.Number("3"), export.Variable("r")}, Den: export.Number("2")},
	}
}

// triangle is t <= r + s for r² = a² + b², s² = c² + d², t² = (a + c)² + (b + d)²:
// squaring once leaves a c + b d <= r s, and twice (a d - b c)² >= 0.
func triangle() *export.Inequality {
	return &export.Inequality{
		Name: "triangle inequality",
		Claim: &certificate.Claim{
			Variables: []string{"a", "b", "c", "d", "r", "s", "t"},
			Positive:  []certificate.Constraint{{Poly: poly("r")}, {Poly: poly("s")}},
			Zero: []certificate.Polynomial{
				poly("r^2 - a^2 - b^2"), poly("s^2 - c^2 - d^2"), poly("t^2 - a^2 - 2 a c - c^2 - b^2 - 2 b d - d^2"),
			},
			Target: poly("r + s - t"),
		},
		Certificate: &certificate.Certificate{Squaring: &certificate.Squaring{
			Left: []certificate.Square{square("1", "1", 0), square("1", "1", 1)}, Right: poly("t"),
			Cofactors: []certificate.Polynomial{nil, nil, nil},
			Proof: &certificate.Certificate{Squaring: &certificate.Squaring{
				Left: []certificate.Square{square("2", "1", 0, 1)}, Right: poly("2 a c + 2 b d"),
				Cofactors: []certificate.Polynomial{poly("1"), poly("1"), poly("- 1")},
				Proof: &certificate.Certificate{
					Squares:   []certificate.Square{square("4", "a d - b c")},
					Cofactors: []certificate.Polynomial{poly("4 s^2"), poly("4 a^2 + 4 b^2"), nil},
				},
			}},
		}},
	}
}

// apart has as assumptions and weights what Coq unfolds to sums: the number 2, and
// a sum that stands alone.
func apart() *export.Inequality {
	return &export.Inequality{
		Name: "numbers and sums as terms",
		Claim: &certificate.Claim{
			Variables: []string{"x", "y"},
			Positive:  []certificate.Constraint{{Poly: poly("x + y")}},
			Target:    poly("x^2 + x + y + 4"),
		},
		Certificate: &certificate.Certificate{
			Squares: []certificate.Square{square("1", "x"), square("1", "1", 0), square("2", "1"), square("2", "1")},
		},
	}
}

// inequalities are certificates made by hand.
func inequalities() []*export.Inequality {
	return []*export.Inequality{layered(), motzkin(), motzkinSquared(), onBox(), onEdge(), onCircle(), withRoot(), withSquaring(), triangle(), apart()}
}
