package entropy

import (
	"math/big"

	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
)

// Sized is a compiled value and the sum of the absolute values of its terms,
// against which a value that ought to vanish is judged.
type Sized struct{ Value, Size program.Ref }

// Sizing is the arithmetic of Sized values over that of plain ones. Sizes are
// carried to first order through products and integer powers, as in a running
// error bound (Higham, Accuracy and Stability of Numerical Algorithms, 2nd
// ed., SIAM 2002, section 3.3): that of a b is |a| size b + |b| size a - |a b|.
// Functions, roots and derivatives count as one term.
type Sizing struct{ *Numeric }

// Sized is an interpreter into the same program, with the sizes of values.
func (n *Numeric) Sized() *Interpreter[Sized] {
	return &Interpreter[Sized]{Setting: n.set, Arith: Sizing{n}}
}

func (s Sizing) abs(x program.Ref) program.Ref { return s.Builder.Func(program.Abs, x) }

func (s Sizing) term(x program.Ref) Sized { return Sized{x, s.abs(x)} }

func (s Sizing) termErr(x program.Ref, err error) (Sized, error) { return s.term(x), err }

// Rational is the constant x.
func (s Sizing) Rational(x *big.Rat) Sized { return s.term(s.Numeric.Rational(x)) }

// Pi is π.
func (s Sizing) Pi() Sized { return s.term(s.Numeric.Pi()) }

// Coordinate is an input.
func (s Sizing) Coordinate(i int) Sized { return s.term(s.Numeric.Coordinate(i)) }

// Constant is a constant or an input.
func (s Sizing) Constant(name string) Sized { return s.term(s.Numeric.Constant(name)) }

// Jet is an input.
func (s Sizing) Jet(u int, j jet.Index, side jet.Side) (Sized, error) {
	return s.termErr(s.Numeric.Jet(u, j, side))
}

// Normal is an input.
func (s Sizing) Normal(i int) (Sized, error) { return s.termErr(s.Numeric.Normal(i)) }

// Add is a + b.
func (s Sizing) Add(a, b Sized) (Sized, error) {
	v, err := s.Numeric.Add(a.Value, b.Value)
	return Sized{v, s.Builder.Add(a.Size, b.Size)}, err
}

// Neg is -a.
func (s Sizing) Neg(a Sized) Sized { return Sized{s.Numeric.Neg(a.Value), a.Size} }

// Mul is a·b.
func (s Sizing) Mul(a, b Sized) (Sized, error) {
	v, err := s.Numeric.Mul(a.Value, b.Value)
	twice := s.Builder.Add(s.Builder.Mul(s.abs(a.Value), b.Size), s.Builder.Mul(s.abs(b.Value), a.Size))
	return Sized{v, s.Builder.Sub(twice, s.abs(v))}, err
}

// Quo is a/b.
func (s Sizing) Quo(a, b Sized) (Sized, error) {
	v, err := s.Numeric.Quo(a.Value, b.Value)
	if err != nil {
		return Sized{}, err
	}
	more := s.Builder.Mul(s.abs(v), s.Builder.Sub(b.Size, s.abs(b.Value)))
	return Sized{v, s.Builder.Quo(s.Builder.Add(a.Size, more), s.abs(b.Value))}, nil
}

// Power is a to a rational power.
func (s Sizing) Power(a Sized, e *big.Rat) (Sized, error) {
	v, err := s.Numeric.Power(a.Value, e)
	if err != nil || !e.IsInt() || e.Sign() <= 0 {
		return s.termErr(v, err)
	}
	n := int(e.Num().Int64()) // Numeric.Power has checked the range
	lower := s.abs(s.Builder.PowInt(a.Value, n-1))
	more := s.Builder.Sub(a.Size, s.abs(a.Value))
	size := s.Builder.Mul(s.Builder.Const(float64(n)), s.Builder.Mul(lower, more))
	return Sized{v, s.Builder.Add(s.abs(v), size)}, s.Err()
}

// Function applies a named function.
func (s Sizing) Function(name string, x Sized) (Sized, error) {
	return s.termErr(s.Numeric.Function(name, x.Value))
}

// Norm is the root of the sum of the squares.
func (s Sizing) Norm(parts []Sized) (Sized, error) {
	values := make([]program.Ref, len(parts))
	for i, x := range parts {
		values[i] = x.Value
	}
	return s.termErr(s.Numeric.Norm(values))
}

// Total is the total derivative by coordinate i.
func (s Sizing) Total(x Sized, i int) (Sized, error) {
	return s.termErr(s.Numeric.Total(x.Value, i))
}

// Euler is refused.
func (s Sizing) Euler(x Sized, unknown int) (Sized, error) {
	return s.termErr(s.Numeric.Euler(x.Value, unknown))
}

// Sup is the supremum over an angle.
func (s Sizing) Sup(angle string, x Sized) (Sized, error) {
	return s.termErr(s.Numeric.Sup(angle, x.Value))
}

var _ Arithmetic[Sized] = Sizing{}
