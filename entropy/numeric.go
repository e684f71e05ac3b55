package entropy

import (
	"fmt"
	"math/big"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
)

// InputKind says what an input of a compiled formula stands for.
type InputKind uint8

// The kinds of inputs.
const (
	CoordinateInput InputKind = iota // the coordinate Place
	ConstantInput                    // the constant Name
	JetInput                         // the derivative Index of the unknown Place on Side
	NormalInput                      // component Place of the unit normal of a jump
	CosineInput                      // the cosine of the angle Name
	SineInput                        // the sine of the angle Name
)

// Input is what one input of a compiled formula stands for.
type Input struct {
	Kind  InputKind
	Name  string
	Place int
	Index jet.Index
	Side  jet.Side
}

// Numeric is the arithmetic of compiled formulas: values are nodes of a
// program.Builder. A formula is compiled in the form in which it was written;
// nothing is expanded. Total derivatives are those of program.Builder.Diff:
// the derivative of a jet is another jet, of a coordinate 0 or 1, and of a
// constant or an angle 0.
//
// Compiled formulas are evaluated in float64 and prove nothing. Where
// Builder.Exact is set before the first formula, numbers that are no float64
// and pi keep an enclosure, and evaluation over intervals is rigorous:
// program.Program.EvalInterval. The float64 values of Constants are then taken
// as they are; a constant that is none is to be an input.
type Numeric struct {
	Builder *program.Builder
	// Constants gives values to constants. Those without a value are inputs.
	Constants map[string]float64
	// Closed refuses inputs that were not declared.
	Closed bool
	// Suprema are the harmonics of the suprema over the frame angle, in the
	// order in which they are met: see Setting.Suprema. Where it is nil they
	// are refused. The cosine and sine of the angle must be inputs.
	Suprema []int

	met    int
	set    *Setting
	inputs []Input
	index  map[Input]int
	err    error
}

// NewNumeric makes an arithmetic in which the given inputs come first, in that
// order, and an interpreter into it.
func (s *Setting) NewNumeric(constants map[string]float64, inputs ...Input) (*Interpreter[program.Ref], *Numeric) {
	n := &Numeric{Builder: program.NewBuilder(), Constants: constants, set: s, index: map[Input]int{}}
	n.Declare(inputs...)
	return &Interpreter[program.Ref]{Setting: s, Arith: n}, n
}

// Declare adds inputs behind those there are.
func (n *Numeric) Declare(inputs ...Input) {
	for _, in := range inputs {
		n.input(in)
	}
}

// Inputs lists what the inputs of a program compiled from the Builder stand
// for. A program may have fewer inputs than are listed, never more.
func (n *Numeric) Inputs() []Input { return n.inputs }

// Err is the first failure, such as a constant without a value.
func (n *Numeric) Err() error {
	if n.err == nil {
		n.err = n.Builder.Err()
	}
	return n.err
}

// Compile compiles values to a program.
func (n *Numeric) Compile(outs ...program.Ref) (*program.Program, error) {
	if err := n.Err(); err != nil {
		return nil, err
	}
	return n.Builder.Compile(outs...)
}

func (n *Numeric) input(in Input) program.Ref {
	i, ok := n.index[in]
	if !ok {
		i = len(n.inputs)
		n.inputs = append(n.inputs, in)
		n.index[in] = i
	}
	return n.Builder.Input(i)
}

func (n *Numeric) want(in Input) program.Ref {
	if _, ok := n.index[in]; !ok && n.Closed {
		if n.err == nil {
			n.err = fmt.Errorf("%s has no value here", n.describe(in))
		}
		return 0
	}
	return n.input(in)
}

func (n *Numeric) describe(in Input) string {
	switch in.Kind {
	case CoordinateInput:
		return "the coordinate " + n.set.Coordinates[in.Place]
	case NormalInput:
		return "the normal nu"
	case JetInput:
		if in.Index.Order() == 0 {
			return "the unknown " + n.set.Unknowns[in.Place]
		}
		var by []string
		for i, k := range in.Index {
			for range k {
				by = append(by, n.set.Coordinates[i])
			}
		}
		return "the derivative " + formula.Text(formula.NewDeriv(n.set.Unknowns[in.Place], by...))
	case CosineInput, SineInput:
		return "the angle " + in.Name
	}
	if n.set.Frame != nil && in.Name == n.set.Frame.Angle {
		return "the angle " + in.Name
	}
	return "the constant " + in.Name
}

func (n *Numeric) done(x program.Ref) (program.Ref, error) { return x, n.Err() }

// Rational is x, rounded or enclosed.
func (n *Numeric) Rational(x *big.Rat) program.Ref { return n.Builder.ConstRat(x) }

// Pi is π, rounded or enclosed.
func (n *Numeric) Pi() program.Ref { return n.Builder.ConstPi() }

// Coordinate is an input.
func (n *Numeric) Coordinate(i int) program.Ref {
	return n.want(Input{Kind: CoordinateInput, Place: i})
}

// Constant is the value of a constant, or an input.
func (n *Numeric) Constant(name string) program.Ref {
	if v, ok := n.Constants[name]; ok {
		return n.Builder.Const(v)
	}
	if n.set.Frame != nil && name == n.set.Frame.Angle && n.Closed {
		if _, ok := n.index[Input{Kind: CosineInput, Name: name}]; ok {
			return n.input(Input{Kind: ConstantInput, Name: name})
		}
	}
	return n.want(Input{Kind: ConstantInput, Name: name})
}

// Jet is an input.
func (n *Numeric) Jet(unknown int, j jet.Index, side jet.Side) (program.Ref, error) {
	return n.done(n.want(Input{Kind: JetInput, Place: unknown, Index: j, Side: side}))
}

// Normal is an input.
func (n *Numeric) Normal(i int) (program.Ref, error) {
	return n.done(n.want(Input{Kind: NormalInput, Place: i}))
}

// Add is a + b.
func (n *Numeric) Add(a, b program.Ref) (program.Ref, error) { return n.done(n.Builder.Add(a, b)) }

// Neg is -a.
func (n *Numeric) Neg(a program.Ref) program.Ref { return n.Builder.Neg(a) }

// Mul is a·b.
func (n *Numeric) Mul(a, b program.Ref) (program.Ref, error) { return n.done(n.Builder.Mul(a, b)) }

// Quo is a/b. A divisor that is the constant 0 is refused.
func (n *Numeric) Quo(a, b program.Ref) (program.Ref, error) {
	if err := n.Err(); err != nil {
		return 0, err
	}
	if b == n.Builder.Const(0) {
		return 0, jet.ErrDivisionByZero
	}
	return n.done(n.Builder.Quo(a, b))
}

// maxExponent bounds integer exponents.
var maxExponent = big.NewInt(1 << 30)

// Power is a to a rational power; NaN for a negative base where the exponent
// is no integer.
func (n *Numeric) Power(a program.Ref, e *big.Rat) (program.Ref, error) {
	if e.IsInt() {
		if !e.Num().IsInt64() || e.Num().CmpAbs(maxExponent) > 0 {
			return 0, fmt.Errorf("the exponent %s is too large", e.RatString())
		}
		return n.done(n.Builder.PowInt(a, int(e.Num().Int64())))
	}
	if e.Cmp(big.NewRat(1, 2)) == 0 {
		return n.done(n.Builder.Func(program.Sqrt, a))
	}
	if p, q := e.Num(), e.Denom(); p.IsInt64() && q.IsInt64() && p.CmpAbs(maxExponent) <= 0 && q.Cmp(maxExponent) <= 0 {
		return n.done(n.Builder.PowRat(a, int(p.Int64()), int(q.Int64())))
	}
	if n.Builder.Exact {
		b := n.Builder
		return n.done(b.Func(program.Exp, b.Mul(b.ConstRat(e), b.Func(program.Log, a))))
	}
	f, _ := e.Float64()
	return n.done(n.Builder.Pow(a, f))
}

var numericFunctions = map[string]program.Func{
	"sin": program.Sin, "cos": program.Cos, "tan": program.Tan,
	"sinh": program.Sinh, "cosh": program.Cosh, "tanh": program.Tanh,
	"exp": program.Exp, "log": program.Log, "sqrt": program.Sqrt,
	"erf": program.Erf, "abs": program.Abs,
}

// Function applies a named function. The cosine and sine of a frame angle are
// inputs of their own where they were declared.
func (n *Numeric) Function(name string, x program.Ref) (program.Ref, error) {
	f, ok := numericFunctions[name]
	if !ok {
		return 0, fmt.Errorf("%w: the function %s", jet.ErrOutside, name)
	}
	if fr := n.set.Frame; fr != nil && (f == program.Cos || f == program.Sin) {
		in := Input{Kind: CosineInput, Name: fr.Angle}
		if f == program.Sin {
			in.Kind = SineInput
		}
		angle, ok := n.index[Input{Kind: ConstantInput, Name: fr.Angle}]
		if _, pair := n.index[in]; ok && pair && x == n.Builder.Input(angle) {
			return n.done(n.input(in))
		}
	}
	return n.done(n.Builder.Func(f, x))
}

// Norm is the root of the sum of the squares. It overflows where a square does.
func (n *Numeric) Norm(parts []program.Ref) (program.Ref, error) {
	var sum program.Ref
	for _, x := range parts {
		sum = n.Builder.Add(sum, n.Builder.PowInt(x, 2))
	}
	return n.done(n.Builder.Func(program.Sqrt, sum))
}

// Total is the total derivative by coordinate i.
func (n *Numeric) Total(x program.Ref, i int) (program.Ref, error) {
	var failed error
	d := n.Builder.Diff(x, func(k int) program.Ref {
		switch in := n.inputs[k]; in.Kind {
		case CoordinateInput:
			if in.Place == i {
				return n.Builder.Const(1)
			}
		case JetInput:
			if in.Index.Order() >= jet.MaxOrder && failed == nil {
				failed = fmt.Errorf("a derivative of order %d; at most order %d is supported", in.Index.Order()+1, jet.MaxOrder)
				return 0
			}
			in.Index = in.Index.Plus(i)
			return n.want(in)
		case NormalInput:
			if failed == nil {
				failed = fmt.Errorf("%w: a derivative of the normal of a jump", jet.ErrOutside)
			}
		}
		return n.Builder.Const(0)
	})
	if failed != nil {
		return 0, failed
	}
	return n.done(d)
}

// Euler is refused: it is decided exactly, not compiled.
func (n *Numeric) Euler(program.Ref, int) (program.Ref, error) {
	return 0, fmt.Errorf("%w: the Euler operator of a compiled formula", jet.ErrOutside)
}

var _ Arithmetic[program.Ref] = (*Numeric)(nil)
