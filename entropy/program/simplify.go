package program

import (
	"math"
	"math/bits"

	"creaseproof/entropy/interval"
)

// fold returns the constant v if it is finite and, in an exact Builder, only if
// the enclosure of the value is a single number, which is then the constant.
func (b *Builder) fold(v float64, enclose func() interval.Interval) (Ref, bool) {
	if b.Exact {
		x := enclose()
		if !x.IsSingleton() {
			return refZero, false
		}
		return b.Const(x.Inf()), true
	}
	if math.IsInf(v, 0) || math.IsNaN(v) {
		return refZero, false
	}
	return b.Const(v), true
}

// pt is a number as an interval.
func pt(c float64) interval.Interval { return interval.Point(c) }

// binary adds a node for operands that no rule simplifies. The operands of
// commutative kinds are put in order.
func (b *Builder) binary(k kind, x, y Ref) Ref {
	if (k == kindAdd || k == kindMul) && x > y {
		x, y = y, x
	}
	return b.add(node{kind: k, a: x, b: y})
}

// Add returns x + y.
func (b *Builder) Add(x, y Ref) Ref {
	if !b.valid(x, y) {
		return refZero
	}
	cx, okx := b.constOf(x)
	cy, oky := b.constOf(y)
	if okx && oky {
		if r, ok := b.fold(cx+cy, func() interval.Interval { return pt(cx).Add(pt(cy)) }); ok {
			return r
		}
		return b.binary(kindAdd, x, y)
	}
	nx, negx := b.negOf(x)
	ny, negy := b.negOf(y)
	switch {
	case x == refZero:
		return y
	case y == refZero:
		return x
	case x == y:
		return b.Mul(b.Const(2), x)
	case negx && negy:
		return b.Neg(b.Add(nx, ny))
	case negx:
		return b.Sub(y, nx)
	case negy:
		return b.Sub(x, ny)
	}
	return b.binary(kindAdd, x, y)
}

// Sub returns x - y.
func (b *Builder) Sub(x, y Ref) Ref {
	if !b.valid(x, y) {
		return refZero
	}
	cx, okx := b.constOf(x)
	cy, oky := b.constOf(y)
	if okx && oky {
		if r, ok := b.fold(cx-cy, func() interval.Interval { return pt(cx).Sub(pt(cy)) }); ok {
			return r
		}
		return b.binary(kindSub, x, y)
	}
	nx, negx := b.negOf(x)
	ny, negy := b.negOf(y)
	switch {
	case y == refZero:
		return x
	case x == refZero:
		return b.Neg(y)
	case x == y:
		return refZero
	case oky:
		return b.Add(x, b.Const(-cy))
	case negy:
		return b.Add(x, ny)
	case negx:
		return b.Neg(b.Add(nx, y))
	}
	return b.binary(kindSub, x, y)
}

// Mul returns x y.
func (b *Builder) Mul(x, y Ref) Ref {
	if !b.valid(x, y) {
		return refZero
	}
	cx, okx := b.constOf(x)
	cy, oky := b.constOf(y)
	if okx && oky {
		if r, ok := b.fold(cx*cy, func() interval.Interval { return pt(cx).Mul(pt(cy)) }); ok {
			return r
		}
		return b.binary(kindMul, x, y)
	}
	nx, negx := b.negOf(x)
	ny, negy := b.negOf(y)
	switch {
	case x == refZero || y == refZero:
		return refZero
	case x == refOne:
		return y
	case y == refOne:
		return x
	case okx && cx == -1:
		return b.Neg(y)
	case oky && cy == -1:
		return b.Neg(x)
	case okx && negy:
		return b.Mul(b.Const(-cx), ny)
	case oky && negx:
		return b.Mul(b.Const(-cy), nx)
	case negx && negy:
		return b.Mul(nx, ny)
	case negx:
		return b.Neg(b.Mul(nx, y))
	case negy:
		return b.Neg(b.Mul(x, ny))
	}
	return b.binary(kindMul, x, y)
}

// Quo returns x/y. Division by a power of two becomes a product. A quotient
// 0/y is kept, since it is not defined where y vanishes.
func (b *Builder) Quo(x, y Ref) Ref {
	if !b.valid(x, y) {
		return refZero
	}
	cx, okx := b.constOf(x)
	cy, oky := b.constOf(y)
	if okx && oky {
		if r, ok := b.fold(cx/cy, func() interval.Interval { return pt(cx).Div(pt(cy)) }); ok {
			return r
		}
		return b.binary(kindQuo, x, y)
	}
	nx, negx := b.negOf(x)
	ny, negy := b.negOf(y)
	switch {
	case y == refOne:
		return x
	case oky && exactInverse(cy):
		return b.Mul(x, b.Const(1/cy))
	case negx && negy:
		return b.Quo(nx, ny)
	case negx:
		return b.Neg(b.Quo(nx, y))
	case negy:
		return b.Neg(b.Quo(x, ny))
	}
	return b.binary(kindQuo, x, y)
}

// exactInverse reports whether 1/c is a float64, that is, whether c is a power
// of two whose inverse is in range: then x/c and x*(1/c) round the same number.
func exactInverse(c float64) bool {
	f, e := math.Frexp(c)
	return math.Abs(f) == 0.5 && e > -1000 && e < 1000
}

// Neg returns -x.
func (b *Builder) Neg(x Ref) Ref {
	if !b.valid(x) {
		return refZero
	}
	n := b.nodes[x]
	switch n.kind {
	case kindConst:
		return b.Const(-n.value())
	case kindNeg:
		return n.a
	case kindSub:
		return b.Sub(n.b, n.a)
	}
	return b.add(node{kind: kindNeg, a: x})
}

// PowInt returns x^n; n may be negative. The program computes it by squaring
// and multiplying, and a negative power as the inverse of the positive one.
// 0^0 is 1.
func (b *Builder) PowInt(x Ref, n int) Ref {
	if !b.valid(x) {
		return refZero
	}
	if n > maxPower || n < -maxPower {
		return b.fail(ErrExponent)
	}
	switch n {
	case 0:
		return refOne
	case 1:
		return x
	case 2:
		return b.Mul(x, x)
	case -1:
		return b.Quo(refOne, x)
	}
	if c, ok := b.constOf(x); ok {
		if r, ok := b.fold(powInt(c, n), func() interval.Interval { return pt(c).Pown(n) }); ok {
			return r
		}
	}
	if m, ok := b.negOf(x); ok {
		p := b.PowInt(m, n)
		if n%2 != 0 {
			p = b.Neg(p)
		}
		return p
	}
	return b.add(node{kind: kindPowInt, a: x, imm: uint64(int64(n))})
}

// powInt computes x^n with the roundings of the compiled program.
func powInt(x float64, n int) float64 {
	m := uint(max(n, -n))
	p := x
	for i := bits.Len(m) - 2; i >= 0; i-- {
		p *= p
		if m>>uint(i)&1 != 0 {
			p *= x
		}
	}
	if n < 0 {
		return 1 / p
	}
	return p
}

// Pow returns the real power x^p of a base x >= 0. It is NaN for a negative
// base unless p is an integer. Integers and halves of small odd integers
// become products and a square root; in an exact Builder only integers and 1/2.
func (b *Builder) Pow(x Ref, p float64) Ref {
	if !b.valid(x) {
		return refZero
	}
	if p == math.Trunc(p) && math.Abs(p) <= maxPower {
		return b.PowInt(x, int(p))
	}
	if b.Exact && p == 0.5 {
		return b.Func(Sqrt, x)
	}
	if h := 2 * p; h == math.Trunc(h) && math.Abs(p) < 8 && !b.Exact {
		n := int(math.Abs(p))
		r := b.Mul(b.PowInt(x, n), b.Func(Sqrt, x))
		if p < 0 {
			r = b.Quo(refOne, r)
		}
		return r
	}
	if c, ok := b.constOf(x); ok {
		if r, ok := b.fold(math.Pow(c, p), func() interval.Interval { return pt(c).Pow(pt(p)) }); ok {
			return r
		}
	}
	return b.add(node{kind: kindPow, a: x, imm: math.Float64bits(p)})
}
