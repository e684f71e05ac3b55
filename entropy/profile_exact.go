package entropy

import (
	"fmt"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// ExactCost is the number Numerator/√SquaredJump, with SquaredJump = |p⁺ - p⁻|².
type ExactCost struct{ Numerator, SquaredJump algebra.Rat }

// Exact is the profile cost at rational traces with ν parallel to their
// difference, in exact arithmetic. at gives values to coordinates and
// constants by name. Traces off the well are an error. Where R or L is not
// polynomial in the gradient, or their product changes sign inside the
// segment at a place that halving does not reach, the error wraps
// jet.ErrOutside.
func (p *Profile) Exact(plus, minus []algebra.Rat, at map[string]algebra.Rat) (ExactCost, error) {
	n := len(p.set.Coordinates)
	if len(plus) != n || len(minus) != n {
		return ExactCost{}, fmt.Errorf("%w: traces of %d and %d components in %d dimensions", ErrShape, len(plus), len(minus), n)
	}
	if !p.Polynomial() {
		return ExactCost{}, fmt.Errorf("%w: a profile cost that is not polynomial", jet.ErrOutside)
	}
	var out ExactCost
	q := make([]algebra.Rat, n)
	for i := range q {
		q[i] = plus[i].Sub(minus[i])
		out.SquaredJump = out.SquaredJump.Add(q[i].Mul(q[i]))
	}
	if out.SquaredJump.IsZero() {
		return ExactCost{SquaredJump: algebra.Int(1)}, nil
	}
	s := p.ring.FreshConstant("s")
	segment := func(f algebra.Fraction) ([]algebra.Rat, error) {
		m := map[algebra.Var]algebra.Fraction{}
		for _, v := range f.Vars() {
			y := p.ring.Symbol(v)
			switch {
			case y.Kind == jet.Derivative && y.Index.Order() == 1:
				i := axes(y.Index)[0]
				m[v] = constantFraction(minus[i]).Add(jet.Of(s).Scale(q[i]))
			case y.Kind == jet.Derivative:
				i := axes(y.Index)
				m[v] = constantFraction(q[i[0]].Mul(q[i[1]]))
			default:
				x, ok := at[y.Name]
				if !ok {
					return nil, fmt.Errorf("%w: the profile cost depends on %s, which has no rational value", jet.ErrOutside, y.Name)
				}
				m[v] = constantFraction(x)
			}
		}
		g := f.SubstMany(m)
		if err := g.Err(); err != nil {
			return nil, err
		}
		num, ok := g.IsPoly()
		if !ok {
			return nil, fmt.Errorf("%w: a denominator along the segment", jet.ErrOutside)
		}
		var coefs []algebra.Rat
		for _, c := range num.Coeffs(s) {
			x, _ := c.IsConst()
			coefs = append(coefs, x)
		}
		return coefs, nil
	}
	r, err := segment(p.residual)
	if err != nil {
		return out, err
	}
	l, err := segment(p.bending)
	if err != nil {
		return out, err
	}
	var sum algebra.Rat
	for _, c := range r {
		sum = sum.Add(c)
	}
	if len(r) > 0 && !r[0].IsZero() {
		return out, fmt.Errorf("the minus trace is off the well: the residual is %s", r[0])
	}
	if !sum.IsZero() {
		return out, fmt.Errorf("the plus trace is off the well: the residual is %s", sum)
	}
	if len(r) == 0 || len(l) == 0 {
		return out, nil
	}
	prod := make([]algebra.Rat, len(r)+len(l)-1)
	for i, a := range r {
		for j, b := range l {
			prod[i+j] = prod[i+j].Add(a.Mul(b))
		}
	}
	out.Numerator, err = absIntegralExact(prod)
	return out, err
}

func constantFraction(x algebra.Rat) algebra.Fraction { return algebra.FromPoly(algebra.Const(x)) }

// axes lists the coordinates of a derivative.
func axes(j jet.Index) (at []int) {
	for i, k := range j {
		for range k {
			at = append(at, i)
		}
	}
	return at
}

// absIntegralExact is absIntegral in rational arithmetic.
func absIntegralExact(coefs []algebra.Rat) (algebra.Rat, error) {
	const deepest = 12
	n := len(coefs) - 1
	b := make([]algebra.Rat, n+1)
	for j := range b {
		ratio := algebra.Int(1)
		for i := 0; i <= j; i++ {
			b[j] = b[j].Add(ratio.Mul(coefs[i]))
			if i < n {
				ratio = ratio.Mul(algebra.Frac64(int64(j-i), int64(n-i)))
			}
		}
	}
	half := algebra.Frac64(1, 2)
	var value algebra.Rat
	var walk func(b []algebra.Rat, width algebra.Rat, depth int) error
	walk = func(b []algebra.Rat, width algebra.Rat, depth int) error {
		var pos, neg bool
		var sum algebra.Rat
		for _, c := range b {
			pos, neg = pos || c.Sign() > 0, neg || c.Sign() < 0
			sum = sum.Add(c)
		}
		if !pos || !neg {
			value = value.Add(width.Mul(sum.Abs()).Mul(algebra.Frac64(1, int64(len(b)))))
			return nil
		}
		if depth == deepest {
			return fmt.Errorf("%w: the integrand of the profile cost changes sign inside the segment", jet.ErrOutside)
		}
		left, right := halves(b, func(a, c algebra.Rat) algebra.Rat { return a.Add(c).Mul(half) })
		if err := walk(left, width.Mul(half), depth+1); err != nil {
			return err
		}
		return walk(right, width.Mul(half), depth+1)
	}
	err := walk(b, algebra.Int(1), 0)
	return value, err
}
