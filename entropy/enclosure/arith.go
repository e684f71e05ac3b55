package enclosure

import "math/big"

// DefaultPrec is the precision, in bits, of a Context that names none.
const DefaultPrec = 128

const (
	minPrec = 16
	maxPrec = 1 << 16
)

// Context carries the operations on intervals. Prec is the precision of the
// ends of the results in bits: 0 stands for [DefaultPrec], and other values are
// brought into the range from 16 to 65536.
type Context struct {
	Prec uint
}

func (c Context) prec() uint {
	if c.Prec == 0 {
		return DefaultPrec
	}
	return min(max(c.Prec, minPrec), maxPrec)
}

// more returns a context with n more bits.
func (c Context) more(n uint) Context { return Context{Prec: c.prec() + n} }

const (
	down = big.ToNegativeInf
	up   = big.ToPositiveInf
)

// FromRat returns an interval that contains r: r itself where it has few enough
// bits, its two neighbours otherwise.
func (c Context) FromRat(r *big.Rat) Interval {
	p := c.prec()
	return ends(blank(p, down).SetRat(r), blank(p, up).SetRat(r))
}

// FromRats returns the interval from the lesser to the greater of a and b,
// rounded outward.
func (c Context) FromRats(a, b *big.Rat) Interval {
	return Union(c.FromRat(a), c.FromRat(b))
}

// Int returns the interval that holds n, rounded outward.
func (c Context) Int(n int64) Interval {
	p := c.prec()
	return ends(blank(p, down).SetInt64(n), blank(p, up).SetInt64(n))
}

// exact returns the interval that holds n alone.
func exact(n int64) Interval {
	v := new(big.Float).SetPrec(64).SetInt64(n)
	return Interval{lo: v, hi: v}
}

// point returns the interval that holds v alone; v is finite.
func point(v *big.Float) Interval { return Interval{lo: v, hi: v} }

// round rounds x outward to the precision of c.
func (c Context) round(x Interval) Interval {
	if x.lo == nil {
		return x
	}
	p := c.prec()
	return ends(blank(p, down).Set(x.lo), blank(p, up).Set(x.hi))
}

// Neg returns -x, exactly.
func (c Context) Neg(x Interval) Interval {
	if x.lo == nil {
		return x
	}
	return Interval{lo: new(big.Float).Neg(x.hi), hi: new(big.Float).Neg(x.lo)}
}

// Add returns x + y.
func (c Context) Add(x, y Interval) Interval {
	if x.lo == nil || y.lo == nil {
		return Interval{}
	}
	p := c.prec()
	return ends(add(p, down, x.lo, y.lo), add(p, up, x.hi, y.hi))
}

// Sub returns x - y.
func (c Context) Sub(x, y Interval) Interval { return c.Add(x, c.Neg(y)) }

// Mul returns x y.
func (c Context) Mul(x, y Interval) Interval {
	if x.lo == nil || y.lo == nil {
		return Interval{}
	}
	p := c.prec()
	if x.lo.Sign() >= 0 && y.lo.Sign() >= 0 {
		return ends(mul(p, down, x.lo, y.lo), mul(p, up, x.hi, y.hi))
	}
	return hull(p, mul, x, y)
}

// Quo returns x/y, Entire where y contains 0.
func (c Context) Quo(x, y Interval) Interval {
	if x.lo == nil || y.lo == nil || (y.lo.Sign() <= 0 && y.hi.Sign() >= 0) {
		return Interval{}
	}
	p := c.prec()
	if x.IsPoint() && y.IsPoint() {
		return ends(quo(p, down, x.lo, y.lo), quo(p, up, x.lo, y.lo))
	}
	return hull(p, quo, x, y)
}

// hull returns the least and greatest value of op at the four pairs of ends; op
// is monotone in each argument on the box.
func hull(p uint, op func(uint, big.RoundingMode, *big.Float, *big.Float) *big.Float, x, y Interval) Interval {
	var lo, hi *big.Float
	for _, a := range [2]*big.Float{x.lo, x.hi} {
		for _, b := range [2]*big.Float{y.lo, y.hi} {
			l, h := op(p, down, a, b), op(p, up, a, b)
			if lo == nil || l.Cmp(lo) < 0 {
				lo = l
			}
			if hi == nil || h.Cmp(hi) > 0 {
				hi = h
			}
		}
	}
	return ends(lo, hi)
}

// Abs returns |x|, exactly.
func (c Context) Abs(x Interval) Interval {
	switch {
	case x.lo == nil || x.lo.Sign() >= 0:
		return x
	case x.hi.Sign() <= 0:
		return c.Neg(x)
	}
	return Interval{lo: new(big.Float), hi: magnitude(x)}
}

// magnitude returns the largest |v| in x, which is not Entire.
func magnitude(x Interval) *big.Float {
	m := new(big.Float).Neg(x.lo)
	if x.hi.Cmp(m) > 0 {
		m = x.hi
	}
	return m
}

// Sqr returns x², which is never negative, unlike Mul(x, x).
func (c Context) Sqr(x Interval) Interval {
	a := c.Abs(x)
	return c.Mul(a, a)
}

// scale returns x 2^k, exactly unless it leaves the exponent range.
func scale(x Interval, k int) Interval {
	if x.lo == nil || k == 0 {
		return x
	}
	shift := func(v *big.Float) *big.Float {
		if v.Sign() == 0 || v.IsInf() {
			return v
		}
		return new(big.Float).SetMantExp(v, k)
	}
	return ends(shift(x.lo), shift(x.hi))
}
