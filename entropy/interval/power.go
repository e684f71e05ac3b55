package interval

import "math"

// powerBall returns b and k with x^n = b 2^k for finite x > 0 and n > 0. The
// radius is 0 if no rounding occurred. Where k would leave the range of
// exponents by far, it is cut to a value that still does.
func powerBall(x float64, n uint64) (b ball, k int64) {
	const far = 1 << 40
	m, e := math.Frexp(x)
	b, k = number(m), int64(e)
	top := 63
	for n>>uint(top) == 0 {
		top--
	}
	for i := top - 1; i >= 0; i-- {
		b, k = exactMul(b, b), 2*k
		if n>>uint(i)&1 != 0 {
			b, k = exactMul(b, number(m)), k+int64(e)
		}
		f, j := math.Frexp(b.h)
		p := math.Ldexp(1, -j)
		b = ball{f, b.l * p, b.e * p}
		k += int64(j)
		if k > far || k < -far {
			break // higher powers are further out
		}
	}
	return b, min(max(k, -far), far)
}

// exactMul is mul without a radius where the product of two numbers is exact.
func exactMul(a, b ball) ball {
	if a.l == 0 && b.l == 0 && a.e == 0 && b.e == 0 {
		h, l := twoProd(a.h, b.h)
		return ball{h, l, 0}
	}
	return a.mul(b)
}

// powerBounds returns bounds of x^n for x in [0, +Inf], n > 0.
func powerBounds(x float64, n uint64) (lo, hi float64) {
	switch {
	case x == 0 || x == inf:
		return x, x
	case n == 1:
		return x, x
	}
	b, k := powerBall(x, n)
	return bounds(b, k)
}

// bounds rounds b 2^k, b > 0, outward.
func bounds(b ball, k int64) (lo, hi float64) {
	e := int(min(max(k, -5000), 5000))
	return max(scaleDown(b.low(), e), 0), scaleUp(b.high(), e)
}

// inverseBounds returns bounds of x^-n for x in [0, +Inf], n > 0.
func inverseBounds(x float64, n uint64) (lo, hi float64) {
	switch {
	case x == 0:
		return inf, inf
	case x == inf:
		return 0, 0
	case n == 1:
		return divDown(1, x), divUp(1, x)
	}
	b, k := powerBall(x, n)
	if b == number(0.5) {
		return bounds(number(2), -k)
	}
	return bounds(number(1).div(b), -k)
}

// Pown returns an enclosure of {a^n}, for n < 0 of {a^n : a != 0}; a^0 is 1.
func (x Interval) Pown(n int) Interval {
	if x.IsEmpty() {
		return x
	}
	switch {
	case n == 0:
		return Interval{1, 1}
	case n == 1:
		return x
	case n == 2:
		return x.Sqr()
	case n == -1:
		return x.Recip()
	}
	if n%2 == 0 {
		x = x.Abs()
	}
	m := uint64(n)
	if n < 0 {
		m = -m
	}
	switch {
	case x.hi <= 0 && x.lo < 0: // n is odd
		return x.Neg().Pown(n).Neg()
	case n > 0 && x.lo < 0:
		_, lo := powerBounds(-x.lo, m)
		_, hi := powerBounds(x.hi, m)
		return make2(-lo, hi)
	case n > 0:
		lo, hi := powerBounds(x.lo, m)
		if x.lo != x.hi {
			_, hi = powerBounds(x.hi, m)
		}
		return make2(lo, hi)
	case x.lo < 0:
		return Entire()
	case x.hi == 0:
		return Empty()
	}
	lo, hi := inverseBounds(x.hi, m)
	if x.lo != x.hi {
		_, hi = inverseBounds(x.lo, m)
	}
	return make2(lo, hi)
}

// realBounds returns bounds of x^y for x in [0, +Inf] and y a number or a ball
// around one, in the sense of limits: exp(y log x) with 0 times infinity 0.
func realBounds(x float64, y ball) (lo, hi float64) {
	switch {
	case x == 1 || y.h == 0:
		return 1, 1
	case x == 0 && y.h > 0 || x == inf && y.h < 0 || y.h == inf && x < 1 || y.h == -inf && x > 1:
		return 0, 0
	case x == 0 || x == inf || math.IsInf(y.h, 0):
		return inf, inf
	}
	if y.l == 0 && y.e == 0 && y.h == math.Trunc(y.h) && math.Abs(y.h) <= 1<<30 {
		if y.h > 0 {
			return powerBounds(x, uint64(y.h))
		}
		return inverseBounds(x, uint64(-y.h))
	}
	if y == number(0.5) {
		return sqrtDown(x), sqrtUp(x)
	}
	l := logBall(x)
	switch t := l.h * y.h; {
	case t > 1000:
		return math.MaxFloat64, inf
	case t < -1000:
		return 0, math.SmallestNonzeroFloat64
	case math.Abs(t) < 0x1p-60 && (x > 1) == (y.h > 0):
		return 1, 1 + 0x1p-52
	case math.Abs(t) < 0x1p-60:
		return 1 - 0x1p-53, 1
	}
	b, k := expBall(l.mul(y))
	return bounds(b, int64(k))
}

// Pow returns an enclosure of the real powers {a^b : a > 0, or a = 0 and b > 0}.
func (x Interval) Pow(y Interval) Interval {
	x = x.Intersection(Interval{0, inf})
	if x.IsEmpty() || y.IsEmpty() || x.hi == 0 && y.hi <= 0 {
		return Empty()
	}
	if x.hi == 0 {
		return x
	}
	r := x.real(number(y.lo))
	if y.lo != y.hi {
		r = r.ConvexHull(x.real(number(y.hi)))
	}
	return r
}

// real returns the hull of the powers of the bounds of x >= 0.
func (x Interval) real(y ball) Interval {
	lo, hi := realBounds(x.lo, y)
	if x.lo != x.hi {
		a, b := realBounds(x.hi, y)
		lo, hi = min(lo, a), max(hi, b)
	}
	if lo == inf {
		lo = math.MaxFloat64
	}
	return make2(lo, hi)
}

// PowRat returns an enclosure of the powers a^(num/den) of {a : a > 0, or a = 0
// and num/den > 0}, or of Pown where the exponent is an integer. It is empty for
// den = 0. (The standard has no such operation.)
func (x Interval) PowRat(num, den int) Interval {
	if den == 0 || x.IsEmpty() {
		return Empty()
	}
	if num%den == 0 && (num != math.MinInt || den != -1) {
		return x.Pown(num / den)
	}
	x = x.Intersection(Interval{0, inf})
	if x.IsEmpty() || x.hi == 0 && (num < 0) != (den < 0) {
		return Empty()
	}
	if x.hi == 0 {
		return x
	}
	if 2*num == den {
		return x.Sqrt()
	}
	return x.real(integer(num).div(integer(den)))
}

// integer returns n as a ball.
func integer(n int) ball {
	h := float64(n)
	if math.Abs(h) <= 1<<53 {
		return number(h)
	}
	return ball{h, 0, math.Abs(h) * 0x1p-53}
}

// rootBounds returns bounds of the n-th root of x in [0, +Inf], n > 1.
func rootBounds(x float64, n int) (lo, hi float64) {
	if x == 0 || x == 1 || x == inf {
		return x, x
	}
	b, k := expBall(logBall(x).div(integer(n)))
	if r := math.Ldexp(b.h, k); n < 1<<11 {
		if p, q := powerBounds(r, uint64(n)); p == x && q == x {
			return r, r
		}
	}
	return bounds(b, int64(k))
}

// Rootn returns an enclosure of the real n-th roots of the elements that have
// one: all for odd n > 0, those a >= 0 for even n > 0, and for n < 0 the same
// without 0, the reciprocals. It is empty for n = 0.
func (x Interval) Rootn(n int) Interval {
	switch {
	case n == 0 || x.IsEmpty() || n == math.MinInt:
		return Empty()
	case n < 0:
		return x.Rootn(-n).Recip()
	case n == 1:
		return x
	case n == 2:
		return x.Sqrt()
	case n%2 == 0:
		x = x.Intersection(Interval{0, inf})
		if x.IsEmpty() {
			return x
		}
	}
	lo, _ := signedRoot(x.lo, n)
	_, hi := signedRoot(x.hi, n)
	return make2(lo, hi)
}

func signedRoot(x float64, n int) (lo, hi float64) {
	if x < 0 {
		lo, hi = rootBounds(-x, n)
		return -hi, -lo
	}
	return rootBounds(x, n)
}

// Cbrt returns an enclosure of the real cube roots.
func (x Interval) Cbrt() Interval { return x.Rootn(3) }
