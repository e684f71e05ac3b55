package algebra_test

import (
	"fmt"

	"creaseproof/entropy/algebra"
)

func name(v algebra.Var) string { return []string{"x", "y", "z"}[v] }

func ExamplePoly() {
	x, y := algebra.Variable(0), algebra.Variable(1)
	p := x.Add(y).Pow(3)
	fmt.Println(p.String(name))
	fmt.Println(p.Deriv(0).String(name))
	q, ok := p.Sub(x.Pow(3)).DivExact(y)
	fmt.Println(q.String(name), ok)
	// Output:
	// x^3 + 3 x^2 y + 3 x y^2 + y^3
	// 3 x^2 + 6 x y + 3 y^2
	// 3 x^2 + 3 x y + y^2 true
}

func ExamplePoly_Err() {
	x, y := algebra.Variable(0), algebra.Variable(1)
	p := x.Add(y).Add(algebra.Const(algebra.Int(1))).Pow(999_999_999)
	fmt.Println(p.Err())
	fmt.Println(p.Sub(p).IsZero())
	// Output:
	// algebraic limit reached: a product of more than 30000000 pairs of terms
	// false
}

func ExamplePoly_DivMod() {
	// On the circle x^2 + y^2 = 1, with x to be eliminated where possible.
	x, y := algebra.Variable(0), algebra.Variable(1)
	circle := x.Pow(2).Add(y.Pow(2)).Sub(algebra.Const(algebra.Int(1)))
	_, rem := x.Pow(4).Sub(y.Pow(4)).DivMod([]algebra.Poly{circle}, algebra.Lex(0))
	fmt.Println(rem.String(name))
	// Output: -2 y^2 + 1
}

func ExampleFraction() {
	x, y := algebra.FromPoly(algebra.Variable(0)), algebra.FromPoly(algebra.Variable(1))
	one := algebra.FromPoly(algebra.Const(algebra.Int(1)))
	a, _ := one.Quo(x.Sub(y))
	b, _ := one.Quo(x.Add(y))
	fmt.Println(a.Add(b).String(name))
	fmt.Println(a.Mul(x.Mul(x).Sub(y.Mul(y))).String(name))
	fmt.Println(a.Deriv(1).String(name))
	// Output:
	// 2 x/((x - y) (x + y))
	// x + y
	// 1/(x - y)^2
}

func ExampleRat() {
	a, _ := algebra.ParseRat("0.1")
	b := algebra.Frac64(1, 3)
	fmt.Println(a.Add(b), a.Mul(b), a.Cmp(b))
	// Output: 13/30 1/30 -1
}

func ExampleSolveRat() {
	q := algebra.Int
	x, null, ok := algebra.SolveRat(
		[][]algebra.Rat{{q(1), q(2), q(1)}, {q(2), q(1), q(-1)}},
		[]algebra.Rat{q(4), q(5)})
	fmt.Println(x, null, ok)
	// Output: [2 1 0] [[1 -1 1]] true
}
