package formula_test

import (
	"fmt"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

func scope() *formula.Scope {
	s, err := formula.NewScope(formula.ScopeConfig{
		Coordinates: []string{"x", "y", "z"},
		Axes:        []string{"xi", "eta"},
		Unknowns:    []string{"u"},
		Constants:   []string{"eps"},
		Angles:      []string{"theta"},
		Lets:        []string{"R", "K", "e"},
		Fields:      []string{"Sigma"},
	})
	if err != nil {
		panic(err)
	}
	return s
}

func ExampleScope_ParseExpr() {
	n, err := scope().ParseExpr(source.Text{S: `(u_\eta^2 - u_\xi²)/2 + \frac{3}{2} ε K`})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(formula.Text(n))
	fmt.Println(formula.TeX(n))
	// Output:
	// (u_eta^2 - u_xi^2)/2 + (3/2) eps K
	// \frac{u_{\eta}^{2} - u_{\xi}^{2}}{2} + \frac{3}{2} \varepsilon K
}

func ExampleScope_ParseExpr_refused() {
	_, err := scope().ParseExpr(source.Text{File: "mine.toml", Line: 7, Col: 6, S: "u_z + 1/2 u_x"})
	fmt.Println(err)
	// Output:
	// mine.toml:7:13: a division by factors written side by side has two readings
	//     u_z + 1/2 u_x
	//            ^
	//     write "(1/2) u_x" or "1/(2 u_x)"
}

func ExampleScope_ParseStatement() {
	s, err := scope().ParseStatement(source.Text{S: "div(Sigma) ≤ e - 2 eps K"})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(s.Text())
	fmt.Println(s.TeX())
	// Output:
	// div(Sigma) <= e - 2 eps K
	// \operatorname{div}\left(\Sigma\right) \le e - 2 \varepsilon K
}

func ExampleMathML() {
	n, err := scope().ParseExpr(source.Text{S: "u_x^2/2"})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(formula.MathML(n))
	// Output:
	// <math xmlns="http://www.w3.org/1998/Math/MathML"><mrow><mfrac><mrow><msubsup><mi>u</mi><mrow><mi>x</mi></mrow><mrow><mn>2</mn></mrow></msubsup></mrow><mrow><mn>2</mn></mrow></mfrac></mrow></math>
}

func ExampleNewScope() {
	_, err := formula.NewScope(formula.ScopeConfig{Coordinates: []string{"x", "y", "xy"}})
	fmt.Println(err)
	// Output:
	// coordinate "xy": a subscript "xy" could be read as "x y" or as "xy"; rename a coordinate or axis
}

func ExampleWalk() {
	n, err := scope().ParseExpr(source.Text{S: "R (u_xixi - u_etaeta)"})
	if err != nil {
		fmt.Println(err)
		return
	}
	formula.Walk(n, func(n formula.Node) bool {
		if d, ok := n.(*formula.Deriv); ok {
			fmt.Println(d.Of, d.By, d.At().Col)
		}
		return true
	})
	// Output:
	// u [xi xi] 4
	// u [eta eta] 13
}
