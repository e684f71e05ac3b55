package program

import (
	"fmt"
	"math"
	"math/big"

	"creaseproof/entropy/interval"
)

// Func is a function of one real variable.
type Func uint8

// The functions. Outside their domain they are NaN or infinite as in package
// math; Sign is -1, 0 or 1 and NaN for NaN.
const (
	Sin Func = iota + 1
	Cos
	Tan
	Sinh
	Cosh
	Tanh
	Exp
	Log
	Sqrt
	Cbrt
	Erf
	Abs
	Sign
	funcEnd
)

var funcNames = [...]string{
	Sin: "sin", Cos: "cos", Tan: "tan", Sinh: "sinh", Cosh: "cosh",
	Tanh: "tanh", Exp: "exp", Log: "log", Sqrt: "sqrt", Cbrt: "cbrt",
	Erf: "erf", Abs: "abs", Sign: "sign",
}

// String returns the name of the function as it is written in formulas.
func (f Func) String() string {
	if f == 0 || f >= funcEnd {
		return fmt.Sprintf("Func(%d)", uint8(f))
	}
	return funcNames[f]
}

// eval returns f(x).
func (f Func) eval(x float64) float64 {
	switch f {
	case Sin:
		return math.Sin(x)
	case Cos:
		return math.Cos(x)
	case Tan:
		return math.Tan(x)
	case Sinh:
		return math.Sinh(x)
	case Cosh:
		return math.Cosh(x)
	case Tanh:
		return math.Tanh(x)
	case Exp:
		return math.Exp(x)
	case Log:
		return math.Log(x)
	case Sqrt:
		return math.Sqrt(x)
	case Cbrt:
		return math.Cbrt(x)
	case Erf:
		return math.Erf(x)
	case Abs:
		return math.Abs(x)
	case Sign:
		return sign(x)
	}
	return math.NaN()
}

func sign(x float64) float64 {
	switch {
	case x > 0:
		return 1
	case x < 0:
		return -1
	}
	return x // a zero or NaN
}

// Func returns f(x).
func (b *Builder) Func(f Func, x Ref) Ref {
	if !b.valid(x) {
		return refZero
	}
	if f == 0 || f >= funcEnd {
		return b.fail(fmt.Errorf("%w: %v", ErrInvalidFunc, f))
	}
	n := b.nodes[x]
	if n.kind == kindConst {
		if r, ok := b.fold(f.eval(n.value()), func() interval.Interval { return f.enclose(pt(n.value())) }); ok {
			return r
		}
	}
	if f == Abs && n.kind == kindNeg {
		x = n.a
	}
	if f == Abs && n.kind == kindFunc && (n.fn == Abs || n.fn == Exp || n.fn == Sqrt || n.fn == Cosh) {
		return x
	}
	return b.add(node{kind: kindFunc, fn: f, a: x})
}

// slope returns the derivative of a node of one operand, other than Neg, by
// that operand. The derivatives of Abs and Sign at 0 are taken as 0.
func (b *Builder) slope(self Ref) Ref {
	n := b.nodes[self]
	switch n.kind {
	case kindPowInt:
		m := int(int64(n.imm))
		return b.Mul(b.Const(float64(m)), b.PowInt(n.a, m-1))
	case kindPow:
		p := n.value()
		if b.Exact && !pt(p).Sub(pt(1)).IsSingleton() {
			return b.Mul(b.Const(p), b.Quo(self, n.a))
		}
		return b.Mul(b.Const(p), b.Pow(n.a, p-1))
	case kindPowRat:
		num, den := n.exponent()
		return b.Mul(b.ConstRat(big.NewRat(int64(num), int64(den))), b.PowRat(n.a, num-den, den))
	}
	switch n.fn {
	case Sin:
		return b.Func(Cos, n.a)
	case Cos:
		return b.Neg(b.Func(Sin, n.a))
	case Tan:
		return b.Add(refOne, b.Mul(self, self))
	case Sinh:
		return b.Func(Cosh, n.a)
	case Cosh:
		return b.Func(Sinh, n.a)
	case Tanh:
		// Not 1 - tanh^2, which cancels for large arguments.
		return b.PowInt(b.Func(Cosh, n.a), -2)
	case Exp:
		return self
	case Log:
		return b.Quo(refOne, n.a)
	case Sqrt:
		return b.Quo(b.Const(0.5), self)
	case Cbrt:
		return b.Quo(refOne, b.Mul(b.Const(3), b.Mul(self, self)))
	case Erf:
		return b.Mul(b.twoOverRootPi(), b.Func(Exp, b.Neg(b.Mul(n.a, n.a))))
	case Abs:
		return b.Func(Sign, n.a)
	}
	return refZero
}
