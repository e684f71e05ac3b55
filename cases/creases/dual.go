package creases

import (
	"fmt"
	"math/big"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// dual is a value at a point of a surface with its gradient in space, nil
// where that vanishes.
type dual struct {
	x algebra.Fraction
	d []algebra.Fraction
}

// duals is the arithmetic of values with gradients at the positions pos, which
// are functions of the parameters of the surface.
type duals struct {
	at *onSurface
}

func (a duals) scaled(x algebra.Fraction, d []algebra.Fraction, value algebra.Fraction) (dual, error) {
	out := dual{x: value}
	for _, y := range d {
		z, err := a.at.Ring.Mul(x, y)
		if err != nil {
			return out, err
		}
		out.d = append(out.d, z)
	}
	return out, nil
}

// Rational is the constant x.
func (a duals) Rational(x *big.Rat) dual { return dual{x: a.at.Rational(x)} }

// Pi is π.
func (a duals) Pi() dual { return dual{x: a.at.Pi()} }

// Constant is a constant, or a parameter of the surface.
func (a duals) Constant(name string) dual { return dual{x: a.at.Constant(name)} }

// Coordinate is the position, its gradient a unit vector.
func (a duals) Coordinate(i int) dual {
	d := make([]algebra.Fraction, len(a.at.pos))
	d[i] = jet.Whole(1)
	return dual{a.at.pos[i], d}
}

// Jet is refused.
func (a duals) Jet(int, jet.Index, jet.Side) (dual, error) {
	return dual{}, fmt.Errorf("%w: a derivative in a formula of coordinates", jet.ErrOutside)
}

// Normal is refused.
func (a duals) Normal(int) (dual, error) {
	return dual{}, fmt.Errorf("%w: the normal in a formula of coordinates", jet.ErrOutside)
}

// Add is x + y.
func (a duals) Add(x, y dual) (dual, error) {
	v, err := a.at.Ring.Add(x.x, y.x)
	if err != nil || x.d == nil || y.d == nil {
		d := x.d
		if d == nil {
			d = y.d
		}
		return dual{v, d}, err
	}
	out := dual{v, make([]algebra.Fraction, len(x.d))}
	for i := range out.d {
		if out.d[i], err = a.at.Ring.Add(x.d[i], y.d[i]); err != nil {
			return out, err
		}
	}
	return out, nil
}

// Neg is -x.
func (a duals) Neg(x dual) dual {
	out := dual{x: x.x.Neg()}
	for _, y := range x.d {
		out.d = append(out.d, y.Neg())
	}
	return out
}

// Mul is x·y.
func (a duals) Mul(x, y dual) (dual, error) {
	v, err := a.at.Ring.Mul(x.x, y.x)
	if err != nil {
		return dual{}, err
	}
	l, err := a.scaled(y.x, x.d, v)
	if err != nil {
		return l, err
	}
	r, err := a.scaled(x.x, y.d, algebra.Fraction{})
	if err != nil {
		return r, err
	}
	out, err := a.Add(l, r)
	out.x = v
	return out, err
}

// Quo is x/y.
func (a duals) Quo(x, y dual) (dual, error) {
	r, err := a.at.Ring.Quo(jet.Whole(1), y.x)
	if err != nil {
		return dual{}, err
	}
	s, err := a.at.Ring.Mul(r, r)
	if err != nil {
		return dual{}, err
	}
	inv, err := a.scaled(s.Neg(), y.d, r)
	if err != nil {
		return inv, err
	}
	return a.Mul(x, inv)
}

// Power is x^e.
func (a duals) Power(x dual, e *big.Rat) (dual, error) {
	v, err := a.at.Power(x.x, e)
	if err != nil || x.d == nil || e.Sign() == 0 {
		return dual{x: v}, err
	}
	f, err := a.at.Power(x.x, new(big.Rat).Sub(e, big.NewRat(1, 1)))
	if err != nil {
		return dual{}, err
	}
	return a.scaled(f.Scale(algebra.FromBig(e)), x.d, v)
}

// Function applies a named function.
func (a duals) Function(name string, x dual) (dual, error) {
	v, err := a.at.Function(name, x.x)
	if err != nil || x.d == nil {
		return dual{x: v}, err
	}
	r := a.at.Ring
	var f algebra.Fraction
	switch name {
	case "sin":
		f, err = a.at.Function("cos", x.x)
	case "cos":
		f, err = a.at.Function("sin", x.x)
		f = f.Neg()
	case "tan", "tanh":
		if f, err = r.Mul(v, v); err == nil {
			if name == "tanh" {
				f = f.Neg()
			}
			f, err = r.Add(jet.Whole(1), f)
		}
	case "sinh":
		f, err = a.at.Function("cosh", x.x)
	case "cosh":
		f, err = a.at.Function("sinh", x.x)
	case "exp":
		f = v
	case "log":
		f, err = r.Quo(jet.Whole(1), x.x)
	case "sqrt":
		f, err = r.Quo(jet.Whole(1), v.Scale(algebra.Int(2)))
	case "abs":
		f, err = r.Quo(x.x, v)
	case "erf":
		if f, err = r.Mul(x.x, x.x); err == nil {
			if f, err = r.Exp(f.Neg()); err == nil {
				var root algebra.Fraction
				if root, err = r.Root(a.at.Pi(), 2); err == nil {
					f, err = r.Quo(f.Scale(algebra.Int(2)), root)
				}
			}
		}
	default:
		err = fmt.Errorf("%w: the derivative of %s", jet.ErrOutside, name)
	}
	if err != nil {
		return dual{}, err
	}
	return a.scaled(f, x.d, v)
}

// Norm is the root of the sum of the squares.
func (a duals) Norm(parts []dual) (dual, error) {
	xs := make([]algebra.Fraction, len(parts))
	var total dual
	for i, p := range parts {
		xs[i] = p.x
		t, err := a.Mul(dual{x: p.x}, dual{p.x, p.d})
		if err == nil {
			total, err = a.Add(total, t)
		}
		if err != nil {
			return total, err
		}
	}
	v, err := a.at.Norm(xs)
	if err != nil || total.d == nil {
		return dual{x: v}, err
	}
	r, err := a.at.Ring.Quo(jet.Whole(1), v)
	if err != nil {
		return dual{}, err
	}
	return a.scaled(r, total.d, v)
}

// Total is refused.
func (a duals) Total(dual, int) (dual, error) {
	return dual{}, fmt.Errorf("%w: a total derivative in a formula of a surface", jet.ErrOutside)
}

// Euler is refused.
func (a duals) Euler(dual, int) (dual, error) {
	return dual{}, fmt.Errorf("%w: the Euler operator in a formula of a surface", jet.ErrOutside)
}

// Sup is refused.
func (a duals) Sup(string, dual) (dual, error) {
	return dual{}, fmt.Errorf("%w: a supremum in a formula of coordinates", jet.ErrOutside)
}

var _ entropy.Arithmetic[dual] = duals{}
