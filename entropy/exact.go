package entropy

import (
	"context"
	"fmt"
	"math/big"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// Exact is the exact arithmetic: values are normal forms in a ring of jets.
type Exact struct {
	Ring *jet.Ring

	normal []algebra.Fraction
	size   algebra.Fraction // |q|
}

// NewExact makes a ring for the setting, with the assumed signs known to it,
// and an interpreter into it.
func (s *Setting) NewExact(ctx context.Context) (*Interpreter[algebra.Fraction], *Exact, error) {
	ring, err := jet.NewRing(ctx, s.Coordinates, s.Unknowns)
	if err != nil {
		return nil, nil, err
	}
	ex := &Exact{Ring: ring}
	in := &Interpreter[algebra.Fraction]{Setting: s, Arith: ex}
	for _, c := range s.Constants {
		ring.ConstantVar(c)
	}
	if s.Frame != nil {
		ring.SplitAngle(ring.ConstantVar(s.Frame.Angle))
	}
	return in, ex, ex.AssumeSigns(in, s.Assume)
}

// AssumeSigns tells the ring the signs of single indeterminates that the
// assumptions give. The assumptions themselves remain the caller's to check.
func (ex *Exact) AssumeSigns(in *Interpreter[algebra.Fraction], list []Assumption) error {
	for _, a := range list {
		l, err := in.Scalar(a.Left)
		if err != nil {
			return err
		}
		r, err := in.Scalar(a.Right)
		if err != nil {
			return err
		}
		d := l.Sub(r)
		rel := a.Relation
		p, ok := d.IsPoly()
		if !ok || len(p.Vars()) != 1 {
			continue
		}
		v := p.Vars()[0]
		if p.Degree(v) != 1 || ex.Ring.Symbol(v).Kind > jet.Derivative {
			continue
		}
		co := p.Coeffs(v)
		lead, _ := co[1].IsConst()
		shift, _ := co[0].IsConst()
		if lead.Sign() < 0 {
			rel = map[string]string{">": "<", ">=": "<=", "<": ">", "<=": ">=", "=": "="}[rel]
			shift = shift.Neg()
		}
		// |lead|·v + shift rel 0
		cur := ex.Ring.Symbol(v).Sign
		switch {
		case rel == ">" && shift.Sign() <= 0, rel == ">=" && shift.Sign() < 0, rel == "=" && shift.Sign() < 0:
			cur = jet.Positive
		case rel == ">=" && shift.IsZero() && cur != jet.Positive:
			cur = jet.NonNegative
		case rel == "<" && shift.Sign() >= 0, rel == "<=" && shift.Sign() > 0, rel == "=" && shift.Sign() > 0:
			cur = jet.Negative
		case rel == "<=" && shift.IsZero() && cur != jet.Negative:
			cur = jet.NonPositive
		}
		ex.Ring.Assume(v, cur)
	}
	return nil
}

// Rational is the constant x.
func (ex *Exact) Rational(x *big.Rat) algebra.Fraction { return jet.Rational(x) }

// Pi is π, an indeterminate with a known value.
func (ex *Exact) Pi() algebra.Fraction { return jet.Of(ex.Ring.PiVar()) }

// Coordinate is the coordinate with index i.
func (ex *Exact) Coordinate(i int) algebra.Fraction { return jet.Of(ex.Ring.CoordinateVar(i)) }

// Constant is a symbolic constant.
func (ex *Exact) Constant(name string) algebra.Fraction { return jet.Of(ex.Ring.ConstantVar(name)) }

// Jet is a derivative of an unknown.
func (ex *Exact) Jet(unknown int, j jet.Index, side jet.Side) (algebra.Fraction, error) {
	return ex.Ring.Jet(unknown, j, side)
}

// NoJump reports whether a condition says only that there is a jump at all:
// that a multiple of |q| or |q|² is not zero.
func (ex *Exact) NoJump(c jet.Condition) bool {
	if c.Need != jet.NeedNonZero || ex.size.IsZero() {
		return false
	}
	square, err := ex.Ring.Mul(ex.size, ex.size)
	if err != nil {
		return false
	}
	for _, x := range []algebra.Fraction{ex.size, square} {
		if k, ok := c.Value.Quo(x); ok {
			if _, ok = k.IsConst(); ok {
				return true
			}
		}
	}
	return false
}

// ResetNormal forgets the normal, after the traces have come to mean something
// else.
func (ex *Exact) ResetNormal() { ex.normal = nil }

// Normal is component i of nu = σ q/|q|, q = [grad u], σ² = 1. Both
// orientations are admissible: σ is an indeterminate of its own.
func (ex *Exact) Normal(i int) (algebra.Fraction, error) {
	if ex.normal == nil {
		if len(ex.Ring.Unknowns) != 1 {
			return algebra.Fraction{}, fmt.Errorf("%w: the normal of a jump of %d unknowns", jet.ErrOutside, len(ex.Ring.Unknowns))
		}
		q := make([]algebra.Fraction, len(ex.Ring.Coordinates))
		for k := range q {
			var err error
			if q[k], err = ex.jump(k); err != nil {
				return q[k], err
			}
		}
		size, err := ex.Norm(q)
		if err != nil {
			return size, err
		}
		ex.size = size
		sigma, err := ex.Ring.Orientation()
		if err != nil {
			return sigma, err
		}
		for k := range q {
			x, err := ex.Ring.Quo(q[k], size)
			if err != nil {
				return x, err
			}
			if x, err = ex.Ring.Mul(x, sigma); err != nil {
				return x, err
			}
			ex.normal = append(ex.normal, x)
		}
	}
	return ex.normal[i], nil
}

func (ex *Exact) jump(k int) (algebra.Fraction, error) {
	p, err := ex.Jet(0, jet.Index{}.Plus(k), jet.PlusSide)
	if err != nil {
		return p, err
	}
	m, err := ex.Jet(0, jet.Index{}.Plus(k), jet.MinusSide)
	if err != nil {
		return m, err
	}
	return ex.Ring.Sub(p, m)
}

// Add is a + b.
func (ex *Exact) Add(a, b algebra.Fraction) (algebra.Fraction, error) { return ex.Ring.Add(a, b) }

// Neg is -a.
func (ex *Exact) Neg(a algebra.Fraction) algebra.Fraction { return a.Neg() }

// Mul is a·b.
func (ex *Exact) Mul(a, b algebra.Fraction) (algebra.Fraction, error) { return ex.Ring.Mul(a, b) }

// Quo is a/b.
func (ex *Exact) Quo(a, b algebra.Fraction) (algebra.Fraction, error) { return ex.Ring.Quo(a, b) }

// Power is a to a rational power.
func (ex *Exact) Power(a algebra.Fraction, e *big.Rat) (algebra.Fraction, error) {
	return ex.Ring.Pow(a, algebra.FromBig(e))
}

// Function applies a named function.
func (ex *Exact) Function(name string, x algebra.Fraction) (algebra.Fraction, error) {
	r := ex.Ring
	switch name {
	case "cos", "sin", "tan":
		c, s, err := r.CosSin(x)
		switch {
		case err != nil || name == "cos":
			return c, err
		case name == "sin":
			return s, nil
		}
		return r.Quo(s, c)
	case "sinh", "cosh", "tanh":
		return r.Hyperbolic(name, x)
	case "exp":
		return r.Exp(x)
	case "log":
		return r.Log(x)
	case "sqrt":
		return r.Root(x, 2)
	case "erf":
		return r.Erf(x)
	case "abs":
		return r.Abs(x)
	}
	return x, fmt.Errorf("%w: the function %s", jet.ErrOutside, name)
}

// Norm is the root of the sum of the squares.
func (ex *Exact) Norm(parts []algebra.Fraction) (algebra.Fraction, error) {
	var sum algebra.Fraction
	for _, x := range parts {
		sq, err := ex.Ring.Mul(x, x)
		if err != nil {
			return sq, err
		}
		if sum, err = ex.Ring.Add(sum, sq); err != nil {
			return sum, err
		}
	}
	return ex.Ring.NormRoot(sum)
}

// Total is the total derivative by coordinate i.
func (ex *Exact) Total(x algebra.Fraction, i int) (algebra.Fraction, error) {
	return ex.Ring.Total(x, i)
}

// Euler is the Euler operator.
func (ex *Exact) Euler(x algebra.Fraction, unknown int) (algebra.Fraction, error) {
	return ex.Ring.Euler(x, unknown)
}

// Sup is the supremum over an angle of a + b cos kθ + c sin kθ, which is
// a + sqrt(b² + c²). Several harmonics at once are outside.
func (ex *Exact) Sup(angle string, x algebra.Fraction) (algebra.Fraction, error) {
	h, err := ex.Ring.Harmonics(x, angle)
	if err != nil {
		return x, err
	}
	sum := h.Mean
	if len(h.Waves) > 1 {
		return x, fmt.Errorf("%w: the supremum over %s of %d harmonics at once", jet.ErrOutside, angle, len(h.Waves))
	}
	for _, w := range h.Waves {
		size, err := ex.Norm([]algebra.Fraction{w.Cos, w.Sin})
		if err != nil {
			return x, err
		}
		if sum, err = ex.Ring.Add(sum, size); err != nil {
			return x, err
		}
	}
	return sum, nil
}

var _ Arithmetic[algebra.Fraction] = (*Exact)(nil)
