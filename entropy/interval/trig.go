package interval

import (
	"math"
	"math/big"

	"creaseproof/entropy/enclosure"
)

// large is the magnitude from which arguments of sine, cosine and tangent are
// left to multiprecision arithmetic.
const large = 0x1p20

// reduce returns n and r with x = n pi/2 + r, |r| < 0.8, for |x| <= large. pi/2
// is a sum of three numbers: the products of n with two of them are exact, that
// with the third and the rest of the series are below n 2^-161.
func reduce(x float64) (n float64, r ball) {
	n = math.RoundToEven(x * twoOverPi)
	if n == 0 {
		return 0, number(x)
	}
	p, e := twoProd(n, halfPiA)
	q, f := twoProd(n, halfPiB)
	s, t := twoSum(x, -p)
	r = ball{s, t, 0}.sub(number(e)).sub(ball{q, f, 0})
	return n, r.sub(number(n * halfPiC)).widen(math.Abs(n) * 0x1p-161)
}

// quadrant returns floor(x/(pi/2)) for |x| <= large.
func quadrant(x float64) (q int, ok bool) {
	n, r := reduce(x)
	switch {
	case x == 0 || r.low() > 0:
		return int(n), true
	case r.high() < 0:
		return int(n) - 1, true
	}
	return 0, false
}

// waveAt returns the sine of x + shift pi/2 for small <= |x| <= large.
func waveAt(x float64, shift int) ball {
	n, r := reduce(x)
	w := r.mul(r).neg()
	q := int(n) + shift
	var b ball
	if q&1 == 0 {
		b = odd(w).mul(r)
	} else {
		b = even(w)
	}
	if q&2 != 0 {
		b = b.neg()
	}
	return b
}

// waveBounds returns bounds of the sine of x + shift pi/2, |x| <= large.
func waveBounds(x float64, shift int) (lo, hi float64) {
	if math.Abs(x) < small {
		switch {
		case shift == 1 && x == 0:
			return 1, 1
		case shift == 1:
			return 1 - 0x1p-53, 1
		case x > 0:
			return down(x), x
		case x < 0:
			return x, up(x)
		}
		return 0, 0
	}
	b := waveAt(x, shift)
	return max(b.low(), -1), min(b.high(), 1)
}

// wave returns the range of the sine of x + shift pi/2, shift 0 or 1.
func (x Interval) wave(shift int) Interval {
	if x.IsEmpty() {
		return x
	}
	full := Interval{-1, 1}
	if x.hi-x.lo >= 6.3 {
		return full
	}
	if x.Mag() > large {
		c := enclosure.Context{Prec: 128}
		if shift == 0 {
			return outward(c.Sin(rational(c, x))).Intersection(full)
		}
		return outward(c.Cos(rational(c, x))).Intersection(full)
	}
	lo, hi := waveBounds(x.lo, shift)
	if x.lo == x.hi {
		return make2(lo, hi)
	}
	a, b := waveBounds(x.hi, shift)
	lo, hi = min(lo, a), max(hi, b)
	p, ok := quadrant(x.lo)
	q, okq := quadrant(x.hi)
	if !ok || !okq {
		return full
	}
	// The sine has its extrema 1 and -1 at the odd multiples of pi/2.
	for j := p + 1; j <= q; j++ {
		switch (j + shift) & 3 {
		case 1:
			hi = 1
		case 3:
			lo = -1
		}
	}
	return make2(lo, hi)
}

// Sin returns an enclosure of {sin(a)}.
func (x Interval) Sin() Interval { return x.wave(0) }

// Cos returns an enclosure of {cos(a)}.
func (x Interval) Cos() Interval { return x.wave(1) }

// Tan returns an enclosure of {tan(a) : a no odd multiple of pi/2}: the whole
// line if x has such a number inside.
func (x Interval) Tan() Interval {
	switch {
	case x.IsEmpty():
		return x
	case x.hi-x.lo >= 3.2:
		return Entire()
	case x.Mag() > large:
		c := enclosure.Context{Prec: 128}
		return outward(c.Tan(rational(c, x)))
	}
	p, ok := quadrant(x.lo)
	q, okq := quadrant(x.hi)
	if !ok || !okq || (p+1)>>1 != (q+1)>>1 {
		return Entire()
	}
	lo, hi := tanBounds(x.lo)
	if x.lo != x.hi {
		_, hi = tanBounds(x.hi)
	}
	return make2(lo, hi)
}

func tanBounds(x float64) (lo, hi float64) {
	switch {
	case x == 0:
		return 0, 0
	case math.Abs(x) < small && x > 0:
		return x, up(x)
	case math.Abs(x) < small:
		return down(x), x
	}
	n, r := reduce(x)
	w := r.mul(r).neg()
	s, c := odd(w).mul(r), even(w)
	var b ball
	if int(n)&1 == 0 {
		b = s.div(c)
	} else {
		b = c.neg().div(s)
	}
	return b.low(), b.high()
}

// rational gives x to multiprecision arithmetic.
func rational(c enclosure.Context, x Interval) enclosure.Interval {
	return c.FromRats(new(big.Rat).SetFloat64(x.lo), new(big.Rat).SetFloat64(x.hi))
}

// outward rounds a multiprecision enclosure.
func outward(x enclosure.Interval) Interval {
	if x.IsEntire() {
		return Entire()
	}
	lo, accLo := x.Lo().Float64()
	if accLo == big.Above {
		lo = -up(-lo)
	}
	hi, accHi := x.Hi().Float64()
	if accHi == big.Below {
		hi = up(hi)
	}
	return make2(lo, hi)
}
