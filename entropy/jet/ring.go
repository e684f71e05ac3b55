package jet

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"strings"

	"creaseproof/entropy/algebra"
)

// Limits on a ring.
const (
	MaxCoordinates = 6
	MaxUnknowns    = 4
	MaxOrder       = 8    // of a derivative in a formula
	MaxProlonged   = 24   // of a derivative that differentiation makes
	MaxSymbols     = 4096 // indeterminates in one ring
)

// ErrDivisionByZero is returned where a formula divides by something that is
// identically zero.
var ErrDivisionByZero = errors.New("division by zero: the divisor vanishes identically")

// ErrOutside is wrapped by errors that say a formula is outside what can be
// brought to normal form.
var ErrOutside = errors.New("outside what can be normalised")

// Kind says what an indeterminate of a ring stands for.
type Kind uint8

// The kinds of indeterminates.
const (
	Coordinate Kind = iota
	Constant
	Derivative // u_J, order 0 included, on no side or on one side of a jump
	Pi
	Cosine
	Sine
	Root
	Exponential
	Logarithm
	ErrorFunction
)

// Index is a multi-index over the coordinates.
type Index [MaxCoordinates]uint8

// Order is |J|.
func (j Index) Order() int {
	n := 0
	for _, k := range j {
		n += int(k)
	}
	return n
}

// Plus is J + i.
func (j Index) Plus(i int) Index { j[i]++; return j }

// Covers reports j >= k in every place: u_J is then a derivative of u_K.
func (j Index) Covers(k Index) bool {
	for i := range j {
		if j[i] < k[i] {
			return false
		}
	}
	return true
}

// Minus is j - k, where j covers k.
func (j Index) Minus(k Index) Index {
	for i := range j {
		j[i] -= k[i]
	}
	return j
}

// Side says which trace of a jet at a jump is meant.
type Side uint8

// The unit normal points to the plus side. Exact values hold the traces as
// {u_J} ± [u_J]/2 in the mean and the difference of the two, so that what
// depends on the jump alone shows.
const (
	NoSide Side = iota
	PlusSide
	MinusSide
	Mean
	Difference
)

// Symbol describes one indeterminate.
type Symbol struct {
	Kind    Kind
	Name    string
	Place   int              // index of the coordinate, constant or unknown
	Index   Index            // Derivative
	Side    Side             // Derivative
	Arg     algebra.Fraction // what a kernel is applied to
	Degree  int              // Root: the q of r^q = Arg; Cosine, Sine: the q of v^q = Value, or 0
	Value   algebra.Poly     // Cosine, Sine of a fraction of π: see Degree
	Partner algebra.Var      // Cosine, Sine: the other of the pair
	Sign    Sign             // what is known of its values
}

// Sign is what is known of the values of an indeterminate.
type Sign uint8

// What may be known of a sign.
const (
	AnySign Sign = iota
	NonNegative
	Positive
	Negative
	NonPositive
)

// Need says what a Condition asks of its value.
type Need uint8

// The needs.
const (
	NeedNonNegative Need = iota // under a root
	NeedPositive                // inside a logarithm
	NeedNonZero                 // in a denominator
)

func (n Need) String() string { return [...]string{">= 0", "> 0", "!= 0"}[n] }

// Condition is something the normal forms made so far rest on and that does
// not show from the assumed signs.
type Condition struct {
	Value algebra.Fraction
	Need  Need
}

// Holds reports whether the condition certainly holds at a point.
func (c Condition) Holds(r *Ring, at Point) bool {
	s, ok := r.Sign(c.Value, at)
	switch c.Need {
	case NeedNonNegative:
		return ok && s >= 0
	case NeedPositive:
		return ok && s > 0
	}
	return ok && s != 0
}

// Rewriter says what a derivative is equal to on the jets that are looked at:
// those of the solutions of an equation, of a restriction, on the well. It
// reports false where the derivative stands for itself.
type Rewriter func(unknown int, j Index, side Side) (algebra.Fraction, bool, error)

// Ring holds the indeterminates of one computation. It grows as formulas are
// read; it is not safe for concurrent use.
type Ring struct {
	Coordinates []string
	Unknowns    []string

	rewrite    Rewriter
	ctx        context.Context
	symbols    []Symbol
	constants  map[string]algebra.Var
	coords     []algebra.Var
	jets       map[jetKey]algebra.Var
	kernels    map[string]algebra.Var
	related    []algebra.Var // kernels with a relation, oldest first
	expBasis   []algebra.Var
	angleBasis []algebra.Var // cosines of independent angles
	turning    []algebra.Var // angles that are split off first
	cosines    []algebra.Var // all cosines
	angles     Angles
	pi         algebra.Var
	conditions []Condition
	derivs     []*Derivation // total derivatives, by coordinate
}

type jetKey struct {
	unknown int
	index   Index
	side    Side
}

// NewRing makes the ring of jets of the unknowns over the coordinates.
// Operations stop with the context's error once ctx is done.
func NewRing(ctx context.Context, coordinates, unknowns []string) (*Ring, error) {
	if n := len(coordinates); n > MaxCoordinates {
		return nil, fmt.Errorf("%d coordinates: at most %d are supported", n, MaxCoordinates)
	}
	if n := len(unknowns); n > MaxUnknowns {
		return nil, fmt.Errorf("%d unknowns: at most %d are supported", n, MaxUnknowns)
	}
	r := &Ring{
		Coordinates: coordinates, Unknowns: unknowns, ctx: ctx,
		constants: map[string]algebra.Var{}, jets: map[jetKey]algebra.Var{}, kernels: map[string]algebra.Var{}, pi: -1,
	}
	for i, c := range coordinates {
		r.coords = append(r.coords, r.add(Symbol{Kind: Coordinate, Name: c, Place: i}))
	}
	r.derivs = make([]*Derivation, len(coordinates))
	return r, nil
}

func (r *Ring) add(s Symbol) algebra.Var {
	r.symbols = append(r.symbols, s)
	return algebra.Var(len(r.symbols) - 1)
}

// Symbol describes v.
func (r *Ring) Symbol(v algebra.Var) *Symbol { return &r.symbols[v] }

// Len is the number of indeterminates so far.
func (r *Ring) Len() int { return len(r.symbols) }

// Name is the printed name of v.
func (r *Ring) Name(v algebra.Var) string { return r.symbols[v].Name }

// Conditions lists what the values made so far rest on.
func (r *Ring) Conditions() []Condition { return r.conditions }

// CoordinateVar is the indeterminate of coordinate i.
func (r *Ring) CoordinateVar(i int) algebra.Var { return r.coords[i] }

// ConstantVar is the indeterminate of a symbolic constant.
func (r *Ring) ConstantVar(name string) algebra.Var {
	v, ok := r.constants[name]
	if !ok {
		v = r.add(Symbol{Kind: Constant, Name: name, Place: len(r.constants)})
		r.constants[name] = v
	}
	return v
}

// FreshConstant is a new indeterminate that no formula can name.
func (r *Ring) FreshConstant(name string) algebra.Var {
	return r.add(Symbol{Kind: Constant, Name: name, Place: -1})
}

// PiVar is the indeterminate that stands for π.
func (r *Ring) PiVar() algebra.Var {
	if r.pi < 0 {
		r.pi = r.add(Symbol{Kind: Pi, Name: "pi", Sign: Positive})
	}
	return r.pi
}

// SetRewriter makes the ring ask f for every jet that is read and for every
// jet that a total derivative makes.
func (r *Ring) SetRewriter(f Rewriter) {
	r.rewrite = f
	clear(r.derivs)
}

// Jet is the derivative of an unknown as a value, rewritten where the
// rewriter says so. A trace is written as {u_J} ± [u_J]/2.
func (r *Ring) Jet(unknown int, j Index, side Side) (algebra.Fraction, error) {
	if r.rewrite != nil {
		if x, ok, err := r.rewrite(unknown, j, side); ok || err != nil {
			return x, err
		}
	}
	if side != PlusSide && side != MinusSide {
		v, err := r.JetVar(unknown, j, side)
		return Of(v), err
	}
	m, err := r.JetVar(unknown, j, Mean)
	if err != nil {
		return algebra.Fraction{}, err
	}
	d, err := r.JetVar(unknown, j, Difference)
	if err != nil {
		return algebra.Fraction{}, err
	}
	half := algebra.Frac64(1, 2)
	if side == MinusSide {
		half = half.Neg()
	}
	return Of(m).Add(Of(d).Scale(half)), nil
}

// JetVar is the indeterminate of the derivative of an unknown.
func (r *Ring) JetVar(unknown int, j Index, side Side) (algebra.Var, error) {
	if n := j.Order(); n > MaxProlonged {
		return 0, fmt.Errorf("%w: a derivative of order %d; at most order %d is supported", algebra.ErrLimit, n, MaxProlonged)
	}
	key := jetKey{unknown, j, side}
	if v, ok := r.jets[key]; ok {
		return v, nil
	}
	if len(r.symbols) >= MaxSymbols {
		return 0, fmt.Errorf("%w: more than %d indeterminates", algebra.ErrLimit, MaxSymbols)
	}
	name := r.JetName(unknown, j)
	switch side {
	case PlusSide:
		name += "(+)"
	case MinusSide:
		name += "(-)"
	case Mean:
		name = "{" + name + "}"
	case Difference:
		name = "[" + name + "]"
	}
	v := r.add(Symbol{Kind: Derivative, Name: name, Place: unknown, Index: j, Side: side})
	r.jets[key] = v
	return v, nil
}

// JetName is the printed name of a derivative.
func (r *Ring) JetName(unknown int, j Index) string {
	if j.Order() == 0 {
		return r.Unknowns[unknown]
	}
	var b strings.Builder
	b.WriteString(r.Unknowns[unknown] + "_")
	for i, k := range j {
		for range k {
			b.WriteString(r.Coordinates[i])
		}
	}
	return b.String()
}

// Assume records what is known of the sign of v. It must be called before
// formulas that hold v are read.
func (r *Ring) Assume(v algebra.Var, s Sign) { r.symbols[v].Sign = s }

// Suppose is Assume for a sign that is no assumption: it joins the conditions.
func (r *Ring) Suppose(v algebra.Var, s Sign) {
	x, need := Of(v), NeedNonNegative
	if s == Negative || s == NonPositive {
		x = x.Neg()
	}
	if s == Positive || s == Negative {
		need = NeedPositive
	}
	r.conditions = append(r.conditions, Condition{x, need})
	r.Assume(v, s)
}

// Rational is the constant x.
func Rational(x *big.Rat) algebra.Fraction {
	return algebra.FromPoly(algebra.Const(algebra.FromBig(x)))
}

// Whole is the constant n.
func Whole(n int64) algebra.Fraction {
	return algebra.FromPoly(algebra.Const(algebra.Int(n)))
}

// Of is the indeterminate v as a value.
func Of(v algebra.Var) algebra.Fraction { return algebra.FromPoly(algebra.Variable(v)) }

// Err is the reason why a value is lost, or the context's error.
func (r *Ring) Err(f algebra.Fraction) error {
	if err := r.ctx.Err(); err != nil {
		return err
	}
	return f.Err()
}
