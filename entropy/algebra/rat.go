package algebra

import (
	"math"
	"math/big"
	"math/bits"
)

// Rat is an exact rational number. The zero value is 0. A Rat is immutable; it
// holds its value as a quotient of two int64 in lowest terms where they fit,
// and as a big.Rat otherwise. Compare with Equal or Cmp, not with ==.
type Rat struct {
	n  int64    // numerator, never math.MinInt64
	dm int64    // denominator minus one, in [0, math.MaxInt64-1]
	b  *big.Rat // non-nil exactly when n and dm cannot hold the value
}

// Int returns n.
func Int(n int64) Rat {
	if n == math.MinInt64 {
		return Rat{b: new(big.Rat).SetInt64(n)}
	}
	return Rat{n: n}
}

// Frac64 returns n/d. It panics if d is 0.
func Frac64(n, d int64) Rat {
	if d == 0 {
		panic("algebra: Frac64 with denominator 0")
	}
	un, ud := abs64(n), abs64(d)
	g := gcd64(un, ud)
	un, ud = un/g, ud/g
	if un > math.MaxInt64 || ud > math.MaxInt64 {
		return demote(big.NewRat(n, d))
	}
	r := int64(un)
	if (n < 0) != (d < 0) {
		r = -r
	}
	return Rat{n: r, dm: int64(ud) - 1}
}

// FromBig returns the value of b, which is copied.
func FromBig(b *big.Rat) Rat {
	if r, ok := small(b); ok {
		return r
	}
	return Rat{b: new(big.Rat).Set(b)}
}

// FromFloat returns the exact value of f, and false where f is infinite or not
// a number.
func FromFloat(f float64) (Rat, bool) {
	if i := int64(f); float64(i) == f && math.Abs(f) < 1<<62 {
		return Rat{n: i}, true
	}
	b := new(big.Rat).SetFloat64(f)
	if b == nil {
		return Rat{}, false
	}
	return demote(b), true
}

func small(b *big.Rat) (Rat, bool) {
	if b.Num().IsInt64() && b.Denom().IsInt64() {
		if n := b.Num().Int64(); n != math.MinInt64 {
			return Rat{n: n, dm: b.Denom().Int64() - 1}, true
		}
	}
	return Rat{}, false
}

// demote takes ownership of b.
func demote(b *big.Rat) Rat {
	if r, ok := small(b); ok {
		return r
	}
	return Rat{b: b}
}

// Big returns the value as a new big.Rat.
func (a Rat) Big() *big.Rat {
	if a.b != nil {
		return new(big.Rat).Set(a.b)
	}
	return big.NewRat(a.n, a.dm+1)
}

// view returns the value as a big.Rat that must not be modified.
func (a Rat) view() *big.Rat {
	if a.b != nil {
		return a.b
	}
	return big.NewRat(a.n, a.dm+1)
}

// Add returns a + b.
func (a Rat) Add(b Rat) Rat {
	if a.b == nil && b.b == nil {
		if a.dm|b.dm == 0 {
			if s, ok := add64(a.n, b.n); ok {
				return Rat{n: s}
			}
		} else if s, ok := addSmall(a, b); ok {
			return s
		}
	}
	return demote(new(big.Rat).Add(a.view(), b.view()))
}

// addSmall follows D. E. Knuth, The Art of Computer Programming, volume 2,
// section 4.5.1, which keeps the intermediate numbers small.
func addSmall(a, b Rat) (Rat, bool) {
	da, db := a.dm+1, b.dm+1
	if da == db {
		t, ok := add64(a.n, b.n)
		if !ok {
			return Rat{}, false
		}
		g := int64(gcd64(abs64(t), uint64(da)))
		return Rat{n: t / g, dm: da/g - 1}, true
	}
	g := int64(1)
	if da != 1 && db != 1 {
		g = int64(gcd64(uint64(da), uint64(db)))
	}
	ra := da / g
	x, ok1 := mul64(a.n, db/g)
	y, ok2 := mul64(b.n, ra)
	if !ok1 || !ok2 {
		return Rat{}, false
	}
	t, ok := add64(x, y)
	if !ok {
		return Rat{}, false
	}
	if g != 1 {
		g2 := int64(gcd64(abs64(t), uint64(g)))
		t, db = t/g2, db/g2
	}
	d, ok := mul64(ra, db)
	if !ok {
		return Rat{}, false
	}
	return Rat{n: t, dm: d - 1}, true
}

// Sub returns a - b.
func (a Rat) Sub(b Rat) Rat { return a.Add(b.Neg()) }

// Neg returns -a.
func (a Rat) Neg() Rat {
	if a.b != nil {
		return demote(new(big.Rat).Neg(a.b))
	}
	return Rat{n: -a.n, dm: a.dm}
}

// Abs returns the absolute value of a.
func (a Rat) Abs() Rat {
	if a.Sign() < 0 {
		return a.Neg()
	}
	return a
}

// Mul returns a b.
func (a Rat) Mul(b Rat) Rat {
	if a.b == nil && b.b == nil {
		if a.dm|b.dm == 0 {
			if p, ok := mul64(a.n, b.n); ok {
				return Rat{n: p}
			}
		} else {
			an, ad, bn, bd := a.n, a.dm+1, b.n, b.dm+1
			if bd != 1 {
				g := int64(gcd64(abs64(an), uint64(bd)))
				an, bd = an/g, bd/g
			}
			if ad != 1 {
				g := int64(gcd64(abs64(bn), uint64(ad)))
				bn, ad = bn/g, ad/g
			}
			n, ok1 := mul64(an, bn)
			d, ok2 := mul64(ad, bd)
			if ok1 && ok2 {
				return Rat{n: n, dm: d - 1}
			}
		}
	}
	return demote(new(big.Rat).Mul(a.view(), b.view()))
}

// Inv returns 1/a, and false where a is 0.
func (a Rat) Inv() (Rat, bool) {
	if a.b != nil {
		return demote(new(big.Rat).Inv(a.b)), true
	}
	switch {
	case a.n > 0:
		return Rat{n: a.dm + 1, dm: a.n - 1}, true
	case a.n < 0:
		return Rat{n: -(a.dm + 1), dm: -a.n - 1}, true
	}
	return Rat{}, false
}

// Quo returns a/b, and false where b is 0.
func (a Rat) Quo(b Rat) (Rat, bool) {
	i, ok := b.Inv()
	if !ok {
		return Rat{}, false
	}
	return a.Mul(i), true
}

// Pow returns a to the power n; 0 to the power 0 is 1. It returns false where a
// is 0 and n is negative, and where the result would exceed MaxBits.
func (a Rat) Pow(n int) (Rat, bool) {
	if n < 0 {
		i, ok := a.Inv()
		if !ok || n == math.MinInt {
			return Rat{}, ok && i.Abs().IsOne()
		}
		return i.Pow(-n)
	}
	switch {
	case n == 0 || a.IsOne():
		return Rat{n: 1}, true
	case a.IsZero():
		return Rat{}, true
	case a.Neg().IsOne():
		return Rat{n: 1 - 2*int64(n&1)}, true
	}
	if n > MaxBits/(a.BitLen()-1) {
		return Rat{}, false
	}
	r := Rat{n: 1}
	for i := bits.Len(uint(n)) - 1; i >= 0; i-- {
		r = r.Mul(r)
		if n>>i&1 == 1 {
			r = r.Mul(a)
		}
	}
	return r, r.BitLen() <= MaxBits
}

// Sign returns -1, 0 or 1.
func (a Rat) Sign() int {
	if a.b != nil {
		return a.b.Sign()
	}
	switch {
	case a.n > 0:
		return 1
	case a.n < 0:
		return -1
	}
	return 0
}

// Cmp returns the sign of a - b.
func (a Rat) Cmp(b Rat) int {
	if a.b != nil || b.b != nil {
		return a.view().Cmp(b.view())
	}
	sa, sb := a.Sign(), b.Sign()
	if sa != sb {
		if sa < sb {
			return -1
		}
		return 1
	}
	h1, l1 := bits.Mul64(abs64(a.n), uint64(b.dm)+1)
	h2, l2 := bits.Mul64(abs64(b.n), uint64(a.dm)+1)
	switch {
	case h1 == h2 && l1 == l2:
		return 0
	case h1 < h2 || h1 == h2 && l1 < l2:
		return -sa
	}
	return sa
}

// Equal reports whether a = b.
func (a Rat) Equal(b Rat) bool {
	if a.b == nil || b.b == nil {
		return a == b
	}
	return a.b.Cmp(b.b) == 0
}

// IsZero reports whether a is 0.
func (a Rat) IsZero() bool { return a.b == nil && a.n == 0 }

// IsOne reports whether a is 1.
func (a Rat) IsOne() bool { return a.b == nil && a.n == 1 && a.dm == 0 }

// IsInt reports whether a is an integer.
func (a Rat) IsInt() bool {
	if a.b != nil {
		return a.b.IsInt()
	}
	return a.dm == 0
}

// Int64 returns a as an int64, and false where it is none.
func (a Rat) Int64() (int64, bool) {
	if a.b != nil {
		if a.b.IsInt() && a.b.Num().IsInt64() {
			return a.b.Num().Int64(), true
		}
		return 0, false
	}
	return a.n, a.dm == 0
}

// Float64 returns the float64 nearest to a, ties to even; an infinity where a is
// too large.
func (a Rat) Float64() float64 {
	const exact = 1 << 53
	if a.b == nil && -exact <= a.n && a.n <= exact && a.dm < exact {
		return float64(a.n) / float64(a.dm+1)
	}
	f, _ := a.view().Float64()
	return f
}

// BitLen returns the larger of the bit lengths of numerator and denominator.
func (a Rat) BitLen() int {
	if a.b != nil {
		return max(a.b.Num().BitLen(), a.b.Denom().BitLen())
	}
	return max(bits.Len64(abs64(a.n)), bits.Len64(uint64(a.dm)+1))
}

func abs64(x int64) uint64 {
	if x < 0 {
		return -uint64(x)
	}
	return uint64(x)
}

// add64 and mul64 report false where the result is not above math.MinInt64 and
// at most math.MaxInt64.
func add64(x, y int64) (int64, bool) {
	s := x + y
	return s, (s > x) == (y > 0) && s != math.MinInt64
}

func mul64(x, y int64) (int64, bool) {
	hi, lo := bits.Mul64(abs64(x), abs64(y))
	return x * y, hi == 0 && lo <= math.MaxInt64
}

// gcd64 is the binary algorithm; gcd64(x, 0) = x.
func gcd64(x, y uint64) uint64 {
	if x == 1 || y == 1 {
		return 1
	}
	if x == 0 || y == 0 {
		return x | y
	}
	s := bits.TrailingZeros64(x | y)
	x >>= bits.TrailingZeros64(x)
	for y != 0 {
		y >>= bits.TrailingZeros64(y)
		if x > y {
			x, y = y, x
		}
		y -= x
	}
	return x << s
}
