package entropy

import (
	"fmt"
	"math/big"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

// FieldOfGradient is a field with formulas put in for the gradient, as exact
// formulas, one for each coordinate. gradient holds the derivatives of the
// first unknown by each coordinate, then those of the next; each is a formula
// in coordinates and constants. angle is the frame angle, nil for the frame's
// own. A field that depends on the unknown itself or on higher derivatives is
// refused.
//
// Named formulas and the frame are written out; nothing else is rearranged
// except that terms 0 and factors 1 are dropped.
func (s *Setting) FieldOfGradient(field string, gradient []formula.Node, angle formula.Node) ([]formula.Node, error) {
	if n := len(s.Coordinates) * len(s.Unknowns); len(gradient) != n {
		return nil, fmt.Errorf("%w: a gradient of %d formulas instead of %d", ErrShape, len(gradient), n)
	}
	return s.symbolic(field, angle, func(u int, j jet.Index) (formula.Node, error) {
		if j.Order() == 1 {
			for i, k := range j {
				if k == 1 {
					return gradient[u*len(s.Coordinates)+i], nil
				}
			}
		}
		return nil, fmt.Errorf("the field depends on more than the gradient")
	})
}

// FieldOfUnknowns is a field with formulas in coordinates and constants put in
// for the unknowns, in their order; derivatives are written d_x(...).
func (s *Setting) FieldOfUnknowns(field string, unknowns []formula.Node, angle formula.Node) ([]formula.Node, error) {
	if len(unknowns) != len(s.Unknowns) {
		return nil, fmt.Errorf("%w: %d formulas for %d unknowns", ErrShape, len(unknowns), len(s.Unknowns))
	}
	return s.symbolic(field, angle, func(u int, j jet.Index) (formula.Node, error) {
		var by []string
		for i, k := range j {
			for range k {
				by = append(by, s.Coordinates[i])
			}
		}
		return formula.NewTotalDeriv(unknowns[u], by...), nil
	})
}

func (s *Setting) symbolic(field string, angle formula.Node, of func(int, jet.Index) (formula.Node, error)) ([]formula.Node, error) {
	in := &Interpreter[formula.Node]{Setting: s, Arith: &trees{set: s, jet: of}}
	v, err := in.Field(formula.NewField(field, angle))
	if err != nil {
		return nil, fmt.Errorf("the field %s: %w", field, err)
	}
	return v, nil
}

// trees is the arithmetic of formulas themselves.
type trees struct {
	set *Setting
	jet func(unknown int, j jet.Index) (formula.Node, error)
}

func isNum(n formula.Node, v int64) bool {
	x, ok := n.(*formula.Num)
	return ok && x.Value.IsInt() && x.Value.Num().IsInt64() && x.Value.Num().Int64() == v
}

func (t *trees) Rational(x *big.Rat) formula.Node { return formula.NewNum(x) }

func (t *trees) Pi() formula.Node { return formula.NewName("pi") }

func (t *trees) Coordinate(i int) formula.Node { return formula.NewName(t.set.Coordinates[i]) }

func (t *trees) Constant(name string) formula.Node { return formula.NewName(name) }

func (t *trees) Jet(u int, j jet.Index, _ jet.Side) (formula.Node, error) { return t.jet(u, j) }

func (t *trees) Normal(int) (formula.Node, error) {
	return nil, fmt.Errorf("%w: a normal in a field", jet.ErrOutside)
}

func (t *trees) Add(a, b formula.Node) (formula.Node, error) {
	switch {
	case isNum(a, 0):
		return b, nil
	case isNum(b, 0):
		return a, nil
	}
	var terms []formula.Term
	for _, x := range []formula.Node{a, b} {
		if s, ok := x.(*formula.Sum); ok {
			terms = append(terms, s.Terms...)
		} else {
			terms = append(terms, formula.Term{X: x})
		}
	}
	return formula.NewSum(terms...), nil
}

func (t *trees) Neg(a formula.Node) formula.Node {
	if isNum(a, 0) {
		return a
	}
	return formula.NewNeg(a)
}

func (t *trees) Mul(a, b formula.Node) (formula.Node, error) {
	switch {
	case isNum(a, 0), isNum(b, 1):
		return a, nil
	case isNum(b, 0), isNum(a, 1):
		return b, nil
	}
	return formula.NewProduct(a, b), nil
}

func (t *trees) Quo(a, b formula.Node) (formula.Node, error) {
	switch {
	case isNum(b, 0):
		return nil, jet.ErrDivisionByZero
	case isNum(a, 0), isNum(b, 1):
		return a, nil
	}
	return formula.NewQuotient(a, b), nil
}

func (t *trees) Power(a formula.Node, e *big.Rat) (formula.Node, error) {
	return formula.NewPower(a, e), nil
}

func (t *trees) Function(name string, x formula.Node) (formula.Node, error) {
	if isNum(x, 0) {
		switch name {
		case "cos", "cosh", "exp":
			return formula.NewInt(1), nil
		case "sin", "tan", "sinh", "tanh", "erf", "abs", "sqrt":
			return x, nil
		}
	}
	return formula.NewCall(name, x), nil
}

func (t *trees) Norm(parts []formula.Node) (formula.Node, error) {
	return formula.NewCall("norm", parts...), nil
}

func (t *trees) Total(x formula.Node, i int) (formula.Node, error) {
	return formula.NewTotalDeriv(x, t.set.Coordinates[i]), nil
}

func (t *trees) Euler(formula.Node, int) (formula.Node, error) {
	return nil, fmt.Errorf("%w: the Euler operator in a field", jet.ErrOutside)
}

func (t *trees) Sup(angle string, x formula.Node) (formula.Node, error) {
	return formula.NewCall("sup", formula.NewName(angle), x), nil
}

var _ Arithmetic[formula.Node] = (*trees)(nil)
