package creases

import (
	"fmt"
	"math/big"

	"creaseproof/entropy"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/jet"
	"creaseproof/quadrature/certified"
)

// taped is arithmetic of operations on the tape of a piece: formulas as they
// are written, where the normal form multiplies out what is better left as it is,
// (x - a)^2 or sin(100 x). Positions, traces and the normal are those of the
// piece, in normal form.
type taped struct{ p *piece }

func (a taped) number(x float64) certified.Ref { return a.p.tape.Const(interval.Point(x)) }

// Rational is the constant x.
func (a taped) Rational(x *big.Rat) certified.Ref { return a.p.tape.Rat(x) }

// Pi is π.
func (a taped) Pi() certified.Ref { return a.p.tape.Const(certified.Pi()) }

// Coordinate is the position.
func (a taped) Coordinate(i int) certified.Ref { return a.p.from.fraction(a.p.Coordinate(i)) }

// Constant is a parameter, or a constant without a value.
func (a taped) Constant(name string) certified.Ref { return a.p.from.fraction(a.p.Constant(name)) }

// Jet is a trace.
func (a taped) Jet(unknown int, j jet.Index, side jet.Side) (certified.Ref, error) {
	x, err := a.p.Jet(unknown, j, side)
	return a.p.from.fraction(x), err
}

// Normal is component i of the unit normal.
func (a taped) Normal(i int) (certified.Ref, error) {
	x, err := a.p.Normal(i)
	return a.p.from.fraction(x), err
}

// Add is x + y.
func (a taped) Add(x, y certified.Ref) (certified.Ref, error) { return a.p.tape.Add(x, y), nil }

// Neg is -x.
func (a taped) Neg(x certified.Ref) certified.Ref { return a.p.tape.Mul(a.number(-1), x) }

// Mul is x·y.
func (a taped) Mul(x, y certified.Ref) (certified.Ref, error) { return a.p.tape.Mul(x, y), nil }

// Quo is x/y.
func (a taped) Quo(x, y certified.Ref) (certified.Ref, error) { return a.p.tape.Quo(x, y), nil }

// Power is x to a rational power.
func (a taped) Power(x certified.Ref, e *big.Rat) (certified.Ref, error) {
	n, q := e.Num(), e.Denom()
	if n.BitLen() > 20 || q.BitLen() > 6 {
		return x, fmt.Errorf("%w: the exponent %s", jet.ErrOutside, e)
	}
	if q := int(q.Int64()); q > 1 {
		x = a.p.tape.Root(x, q)
	}
	return a.p.tape.Pow(x, int(n.Int64())), nil
}

// Function applies a named function.
func (a taped) Function(name string, x certified.Ref) (certified.Ref, error) {
	t := a.p.tape
	switch name {
	case "cos":
		return t.Cos(x), nil
	case "sin":
		return t.Sin(x), nil
	case "tan":
		return t.Quo(t.Sin(x), t.Cos(x)), nil
	case "exp":
		return t.Exp(x), nil
	case "log":
		return t.Log(x), nil
	case "sqrt":
		return t.Root(x, 2), nil
	case "erf":
		return t.Erf(x), nil
	case "abs":
		return t.Abs(x), nil
	case "tanh": // 1 - 2/(exp(2 x) + 1)
		e := t.Exp(t.Mul(a.number(2), x))
		return t.Add(a.number(1), t.Quo(a.number(-2), t.Add(e, a.number(1)))), nil
	case "sinh", "cosh":
		half := a.number(0.5)
		e, inverse := t.Exp(x), t.Exp(a.Neg(x))
		if name == "sinh" {
			inverse = a.Neg(inverse)
		}
		return t.Mul(half, t.Add(e, inverse)), nil
	}
	return x, fmt.Errorf("%w: the function %s", jet.ErrOutside, name)
}

// Norm is the root of the sum of the squares.
func (a taped) Norm(parts []certified.Ref) (certified.Ref, error) {
	sum := a.number(0)
	for _, x := range parts {
		sum = a.p.tape.Add(sum, a.p.tape.Pow(x, 2))
	}
	return a.p.tape.Root(sum, 2), nil
}

// Total is refused.
func (a taped) Total(x certified.Ref, _ int) (certified.Ref, error) {
	return x, fmt.Errorf("%w: a total derivative on a tape", jet.ErrOutside)
}

// Euler is refused.
func (a taped) Euler(x certified.Ref, _ int) (certified.Ref, error) {
	return x, fmt.Errorf("%w: the Euler operator on a tape", jet.ErrOutside)
}

// Sup is refused.
func (a taped) Sup(_ string, x certified.Ref) (certified.Ref, error) {
	return x, fmt.Errorf("%w: a supremum on a tape", jet.ErrOutside)
}

var _ entropy.Arithmetic[certified.Ref] = taped{}

// asWritten encloses the integral of a given density over the parameters as its
// formula is written, the whole line where it cannot. The traces have been found.
func (c *combination) asWritten(p *piece) (interval.Interval, error) {
	if c.s.density == nil {
		return interval.Entire(), nil
	}
	in := &entropy.Interpreter[certified.Ref]{Setting: c.set, Arith: taped{p}, Jump: c.s.plus != nil}
	d, err := in.Scalar(c.s.density.node)
	if err != nil || p.from.fault != "" {
		return interval.Entire(), nil // a reason to have none of this kind
	}
	r, err := p.tape.Integrate(c.ctx, p.tape.Mul(d, p.from.fraction(p.area)), certified.Options{})
	if err != nil || p.from.fault != "" {
		return interval.Entire(), err
	}
	return p.scaled(r.Value), nil
}

// scaled is an integral over the ranges, from one over parameters in [0, 1].
func (p *piece) scaled(x interval.Interval) interval.Interval {
	for _, s := range p.scale {
		x = x.Mul(s)
	}
	return x
}
