package certified

import (
	"math"
	"math/big"

	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/interval"
)

// Ref is a value on a Tape.
type Ref int32

type kind uint8

const (
	constant kind = iota
	parameter
	sum
	product
	quotient
	power // a^n
	root  // the n-th root
	cosine
	sine
	exponential
	logarithm
	errorFunction
	magnitude
)

type op struct {
	kind kind
	a, b Ref
	n    int
	c    interval.Interval
}

// Tape is a list of operations, each of earlier ones, in up to two parameters
// in [0, 1]. The zero value is ready for use.
type Tape struct {
	ops   []op
	deps  []uint8 // the parameters that a value depends on, as bits
	index map[op]Ref
}

var (
	zero = interval.Point(0)
	one  = interval.Point(1)
	two  = interval.Point(2)
)

func (t *Tape) add(o op, deps uint8) Ref {
	if r, ok := t.index[o]; ok {
		return r
	}
	if t.index == nil {
		t.index = map[op]Ref{}
	}
	r := Ref(len(t.ops))
	t.ops, t.deps = append(t.ops, o), append(t.deps, deps)
	t.index[o] = r
	return r
}

// Len is the number of operations so far.
func (t *Tape) Len() int { return len(t.ops) }

// Depends reports whether a value depends on parameter k.
func (t *Tape) Depends(a Ref, k int) bool { return t.deps[a]>>k&1 == 1 }

// Param is parameter k, 0 or 1, which runs from 0 to 1.
func (t *Tape) Param(k int) Ref { return t.add(op{kind: parameter, n: k & 1}, 1<<(k&1)) }

// Const is a constant that x contains.
func (t *Tape) Const(x interval.Interval) Ref { return t.add(op{kind: constant, c: x}, 0) }

// Rat is the constant x, enclosed.
func (t *Tape) Rat(x *big.Rat) Ref {
	return t.Const(Outward(enclosure.Context{Prec: 128}.FromRat(x)))
}

// Outward is the smallest interval of float64 numbers around x.
func Outward(x enclosure.Interval) interval.Interval {
	lo, hi := x.Lo(), x.Hi()
	a, acc := lo.Float64()
	if acc == big.Above {
		a = math.Nextafter(a, math.Inf(-1))
	}
	b, acc := hi.Float64()
	if acc == big.Below {
		b = math.Nextafter(b, math.Inf(1))
	}
	i, err := interval.New(a, b)
	if err != nil {
		return interval.Entire()
	}
	return i
}

func (t *Tape) known(a Ref) (interval.Interval, bool) {
	o := &t.ops[a]
	return o.c, o.kind == constant
}

// Add is a + b.
func (t *Tape) Add(a, b Ref) Ref {
	x, okA := t.known(a)
	y, okB := t.known(b)
	switch {
	case okA && okB:
		return t.Const(x.Add(y))
	case okA && x == zero:
		return b
	case okB && y == zero:
		return a
	}
	return t.add(op{kind: sum, a: a, b: b}, t.deps[a]|t.deps[b])
}

// Mul is a·b.
func (t *Tape) Mul(a, b Ref) Ref {
	x, okA := t.known(a)
	y, okB := t.known(b)
	switch {
	case a == b:
		return t.Pow(a, 2)
	case okA && okB:
		return t.Const(x.Mul(y))
	case okA && x == one:
		return b
	case okB && y == one:
		return a
	}
	return t.add(op{kind: product, a: a, b: b}, t.deps[a]|t.deps[b])
}

// Quo is a/b.
func (t *Tape) Quo(a, b Ref) Ref {
	x, okA := t.known(a)
	y, okB := t.known(b)
	switch {
	case okA && okB && !y.Contains(0):
		return t.Const(x.Div(y))
	case okB && y == one:
		return a
	}
	return t.add(op{kind: quotient, a: a, b: b}, t.deps[a]|t.deps[b])
}

// Pow is a to an integer power.
func (t *Tape) Pow(a Ref, n int) Ref {
	switch {
	case n == 1:
		return a
	case n == 0:
		return t.Const(one)
	case n < 0:
		return t.Quo(t.Const(one), t.Pow(a, -n))
	}
	if x, ok := t.known(a); ok {
		return t.Const(x.Pown(n))
	}
	return t.add(op{kind: power, a: a, n: n}, t.deps[a])
}

// Root is the non-negative n-th root of a, n > 0, where a is not negative.
func (t *Tape) Root(a Ref, n int) Ref {
	if x, ok := t.known(a); ok {
		return t.Const(rootOf(x, n))
	}
	return t.add(op{kind: root, a: a, n: n}, t.deps[a])
}

var halfLine, _ = interval.New(0, math.Inf(1))

func rootOf(x interval.Interval, n int) interval.Interval {
	x = x.Intersection(halfLine)
	if n == 2 {
		return x.Sqrt()
	}
	return x.Rootn(n)
}

func (t *Tape) unary(k kind, a Ref, f func(interval.Interval) interval.Interval) Ref {
	if x, ok := t.known(a); ok {
		return t.Const(f(x))
	}
	return t.add(op{kind: k, a: a}, t.deps[a])
}

// Cos is the cosine of a.
func (t *Tape) Cos(a Ref) Ref { return t.unary(cosine, a, interval.Interval.Cos) }

// Sin is the sine of a.
func (t *Tape) Sin(a Ref) Ref { return t.unary(sine, a, interval.Interval.Sin) }

// Exp is the exponential of a.
func (t *Tape) Exp(a Ref) Ref { return t.unary(exponential, a, interval.Interval.Exp) }

// Log is the natural logarithm of a, where a is positive.
func (t *Tape) Log(a Ref) Ref { return t.unary(logarithm, a, interval.Interval.Log) }

// Erf is the error function of a.
func (t *Tape) Erf(a Ref) Ref { return t.unary(errorFunction, a, interval.Interval.Erf) }

// Abs is |a|.
func (t *Tape) Abs(a Ref) Ref { return t.unary(magnitude, a, interval.Interval.Abs) }
