// Package ranges encloses the values and the gradients of formulas in the
// coordinates on boxes, by outward-rounded interval arithmetic (package
// interval). Numbers of a formula are enclosed too, so that what holds for the
// enclosures holds for the formula as it was written.
//
// The gradient is carried forward with the values (A. Griewank and A. Walther,
// Evaluating Derivatives, 2nd ed., SIAM 2008, section 3.1): that of f/g is
// (f' - (f/g) g')/g, and so on. The derivative of |f| where f may vanish is
// [-1, 1] f', and that of a norm at its zero lies in the unit ball, so that a
// formula that is not differentiable at a point still has bounded enclosures
// about it.
package ranges

import (
	"fmt"
	"math"
	"math/big"

	"creaseproof/entropy"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/jet"
)

// Ref is a value of a Tape.
type Ref int32

type kind uint8

const (
	number kind = iota
	coordinate
	sum
	product
	quotient
	negative
	power    // to an integer n
	rational // to n/m
	function
	square // of a norm: a² + b, where b may be nothing
	norm   // root of a sum of squares
)

type op struct {
	kind kind
	a, b Ref
	n, m int
	name string
	c    interval.Interval
}

// Tape is a list of operations, each of earlier ones: the arithmetic in which
// an entropy.Interpreter records formulas. Constants and jets are refused, but
// for constants that are named formulas of the setting.
type Tape struct {
	set   *entropy.Setting
	ops   []op
	deps  []uint8 // the coordinates that a value depends on
	index map[op]Ref
}

// most bounds the operations of a tape.
const most = 1 << 20

// New makes a tape and an interpreter into it.
func New(s *entropy.Setting) (*entropy.Interpreter[Ref], *Tape) {
	t := &Tape{set: s, index: map[op]Ref{}}
	return &entropy.Interpreter[Ref]{Setting: s, Arith: t}, t
}

func (t *Tape) add(o op) (Ref, error) {
	if r, ok := t.index[o]; ok {
		return r, nil
	}
	if len(t.ops) >= most {
		return 0, fmt.Errorf("%w: a formula of more than %d operations", jet.ErrOutside, most)
	}
	r := Ref(len(t.ops))
	var dep uint8
	switch o.kind {
	case number:
	case coordinate:
		dep = 1 << o.n
	case sum, product, quotient:
		dep = t.deps[o.a] | t.deps[o.b]
	case square:
		dep = t.deps[o.a]
		if o.b >= 0 {
			dep |= t.deps[o.b]
		}
	default:
		dep = t.deps[o.a]
	}
	t.ops, t.deps = append(t.ops, o), append(t.deps, dep)
	t.index[o] = r
	return r, nil
}

// must is for operations that have no error to return; a full tape shows in
// the next one that has.
func (t *Tape) must(o op) Ref {
	r, _ := t.add(o)
	return r
}

// around is an interval that contains x.
func around(x *big.Rat) interval.Interval {
	f, exact := x.Float64()
	if math.IsInf(f, 0) {
		return interval.Entire()
	}
	if exact {
		return interval.Point(f)
	}
	i, err := interval.New(math.Nextafter(f, math.Inf(-1)), math.Nextafter(f, math.Inf(1)))
	if err != nil {
		return interval.Entire()
	}
	return i
}

// Rational encloses x.
func (t *Tape) Rational(x *big.Rat) Ref { return t.must(op{kind: number, c: around(x)}) }

// Pi encloses π.
func (t *Tape) Pi() Ref {
	i, _ := interval.New(math.Pi, math.Nextafter(math.Pi, 4))
	return t.must(op{kind: number, c: i})
}

// Coordinate is the side of the box.
func (t *Tape) Coordinate(i int) Ref { return t.must(op{kind: coordinate, n: i}) }

// Constant has no value: the whole line.
func (t *Tape) Constant(string) Ref { return t.must(op{kind: number, c: interval.Entire()}) }

// Jet is refused.
func (t *Tape) Jet(int, jet.Index, jet.Side) (Ref, error) {
	return 0, fmt.Errorf("%w: a derivative in a formula of coordinates", jet.ErrOutside)
}

// Normal is refused.
func (t *Tape) Normal(int) (Ref, error) {
	return 0, fmt.Errorf("%w: the normal in a formula of coordinates", jet.ErrOutside)
}

// Add is a + b.
func (t *Tape) Add(a, b Ref) (Ref, error) { return t.add(op{kind: sum, a: a, b: b}) }

// Neg is -a.
func (t *Tape) Neg(a Ref) Ref { return t.must(op{kind: negative, a: a}) }

// Mul is a·b.
func (t *Tape) Mul(a, b Ref) (Ref, error) {
	if a == b {
		return t.add(op{kind: power, a: a, n: 2})
	}
	return t.add(op{kind: product, a: a, b: b})
}

// Quo is a/b.
func (t *Tape) Quo(a, b Ref) (Ref, error) {
	if o := t.ops[b]; o.kind == number && o.c == interval.Point(0) {
		return 0, jet.ErrDivisionByZero
	}
	return t.add(op{kind: quotient, a: a, b: b})
}

// Power is a to a rational power.
func (t *Tape) Power(a Ref, e *big.Rat) (Ref, error) {
	const large = 1 << 20
	if !e.Num().IsInt64() || !e.Denom().IsInt64() || e.Num().CmpAbs(big.NewInt(large)) > 0 || e.Denom().Cmp(big.NewInt(large)) > 0 {
		return 0, fmt.Errorf("the exponent %s is too large", e.RatString())
	}
	n, m := int(e.Num().Int64()), int(e.Denom().Int64())
	if m == 1 {
		return t.add(op{kind: power, a: a, n: n})
	}
	return t.add(op{kind: rational, a: a, n: n, m: m})
}

// Function applies a named function.
func (t *Tape) Function(name string, x Ref) (Ref, error) {
	switch name {
	case "sin", "cos", "tan", "sinh", "cosh", "tanh", "exp", "log", "sqrt", "erf", "abs":
		return t.add(op{kind: function, a: x, name: name})
	}
	return 0, fmt.Errorf("%w: the function %s", jet.ErrOutside, name)
}

// Norm is the root of the sum of the squares.
func (t *Tape) Norm(parts []Ref) (Ref, error) {
	last := Ref(-1)
	for _, x := range parts {
		var err error
		if last, err = t.add(op{kind: square, a: x, b: last}); err != nil {
			return 0, err
		}
	}
	if last < 0 {
		return t.Rational(new(big.Rat)), nil
	}
	return t.add(op{kind: norm, a: last})
}

// Total is refused: gradients come with the enclosures.
func (t *Tape) Total(Ref, int) (Ref, error) {
	return 0, fmt.Errorf("%w: a derivative inside a formula of coordinates", jet.ErrOutside)
}

// Euler is refused.
func (t *Tape) Euler(Ref, int) (Ref, error) {
	return 0, fmt.Errorf("%w: the Euler operator in a formula of coordinates", jet.ErrOutside)
}

// Sup is refused.
func (t *Tape) Sup(string, Ref) (Ref, error) {
	return 0, fmt.Errorf("%w: a supremum in a formula of coordinates", jet.ErrOutside)
}

var _ entropy.Arithmetic[Ref] = (*Tape)(nil)
