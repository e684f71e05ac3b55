package campaign

import (
	"errors"
	"math/big"
)

// number is a rational, or the interval between two where a root is
// irrational. Numbers are never changed once made.
type number struct{ lo, hi *big.Rat }

var (
	errDivision   = errors.New("division by zero, or by what may be zero")
	errNegative   = errors.New("root of a negative number, or of what may be negative")
	errEnclosure  = errors.New("sign inside the enclosure")
	errOutside    = errors.New("outside what the sampler evaluates")
	zero, one     = exactly(new(big.Rat)), exactly(big.NewRat(1, 1))
	enclosureBits = uint(160)
)

func exactly(x *big.Rat) number { return number{x, x} }

func whole(i int) number { return exactly(big.NewRat(int64(i), 1)) }

func (a number) exact() bool { return a.lo == a.hi }

// isZero reports an exact zero.
func (a number) isZero() bool { return a.exact() && a.lo.Sign() == 0 }

// sign is the sign, where the number has one for certain.
func (a number) sign() (int, bool) {
	l, h := a.lo.Sign(), a.hi.Sign()
	return l, a.exact() || l == h && l != 0
}

func (a number) add(b number) number {
	if a.isZero() {
		return b
	}
	if b.isZero() {
		return a
	}
	lo := new(big.Rat).Add(a.lo, b.lo)
	if a.exact() && b.exact() {
		return exactly(lo)
	}
	return number{lo, new(big.Rat).Add(a.hi, b.hi)}
}

func (a number) neg() number {
	lo := new(big.Rat).Neg(a.hi)
	if a.exact() {
		return exactly(lo)
	}
	return number{lo, new(big.Rat).Neg(a.lo)}
}

func (a number) mul(b number) number {
	switch {
	case a.isZero() || b == one:
		return a
	case b.isZero() || a == one:
		return b
	}
	if a.exact() && b.exact() {
		return exactly(new(big.Rat).Mul(a.lo, b.lo))
	}
	var lo, hi *big.Rat
	for _, x := range []*big.Rat{a.lo, a.hi} {
		for _, y := range []*big.Rat{b.lo, b.hi} {
			p := new(big.Rat).Mul(x, y)
			if lo == nil || p.Cmp(lo) < 0 {
				lo = p
			}
			if hi == nil || p.Cmp(hi) > 0 {
				hi = p
			}
		}
	}
	return number{lo, hi}
}

func (a number) inverse() (number, error) {
	if s, ok := a.sign(); !ok || s == 0 {
		return zero, errDivision
	}
	lo := new(big.Rat).Inv(a.hi)
	if a.exact() {
		return exactly(lo), nil
	}
	return number{lo, new(big.Rat).Inv(a.lo)}, nil
}

// sqrt is exact for squares of rationals, and an enclosure otherwise.
func (a number) sqrt() (number, error) {
	if a.lo.Sign() < 0 {
		return zero, errNegative
	}
	lo, exact := rootBelow(a.lo)
	if exact && a.exact() {
		return exactly(lo), nil
	}
	hi, exact := rootBelow(a.hi)
	if !exact {
		step := new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).Lsh(a.hi.Denom(), enclosureBits/2))
		hi.Add(hi, step)
	}
	return number{lo, hi}, nil
}

// rootBelow is the root of p/q, or what is below it by less than
// 2^-80/q.
func rootBelow(x *big.Rat) (*big.Rat, bool) {
	pq := new(big.Int).Mul(x.Num(), x.Denom())
	pq.Lsh(pq, enclosureBits)
	r := new(big.Int).Sqrt(pq)
	exact := new(big.Int).Mul(r, r).Cmp(pq) == 0
	return new(big.Rat).SetFrac(r, new(big.Int).Lsh(x.Denom(), enclosureBits/2)), exact
}
