package interval

import "math"

// expBall returns b and k with exp(x) = b 2^k for every x of the ball, for
// |x| <= 2000; b is between 0.7 and 1.5.
//
// With k the integer nearest x/ln 2, exp(x) = 2^k exp(s)^16, s = (x - k ln 2)/16,
// |s| <= 0.0218. The series is cut after s^13/13!: the rest is below
// 1.1 s^14/14! < 2^-112. Of its terms those from s^7/7! < 2^-50 on are summed
// in float64.
func expBall(x ball) (b ball, k int) {
	n := math.RoundToEven(x.h * invLn2)
	if n != 0 {
		p, e := twoProd(n, ln2a)
		q, f := twoProd(n, ln2b)
		x = x.sub(ball{p, e, 0}).sub(ball{q, f, 0x1p-110 * math.Abs(n)})
	}
	s := x.scale(0x1p-4)
	if !(math.Abs(s.h)+s.e < 0.022) {
		return ball{1, 0, inf}, int(n)
	}
	b = horner(s, expHead[:], expTail[:]).widen(0x1p-111)
	for range 4 {
		b = b.mul(b)
	}
	return b, int(n)
}

// The exponential exceeds every float64 from expOverflow on, and up to
// -expUnderflow it is below 2^-1075.
const (
	expOverflow  = 710
	expUnderflow = 746
)

func expDown(x float64) float64 {
	switch {
	case x == 0:
		return 1
	case x >= expOverflow:
		return math.MaxFloat64
	case x <= -expUnderflow:
		return 0
	case math.Abs(x) < 0x1p-54:
		return 1 - math.Max(0, -sign(x))*0x1p-53
	}
	b, k := expBall(number(x))
	return scaleDown(b.low(), k)
}

func expUp(x float64) float64 {
	switch {
	case x == 0:
		return 1
	case x >= expOverflow:
		return inf
	case x == -inf:
		return 0
	case x <= -expUnderflow:
		return math.SmallestNonzeroFloat64
	case math.Abs(x) < 0x1p-54:
		return 1 + math.Max(0, sign(x))*0x1p-52
	}
	b, k := expBall(number(x))
	return scaleUp(b.high(), k)
}

// Exp returns an enclosure of {exp(a)}.
func (x Interval) Exp() Interval {
	if x.IsEmpty() {
		return x
	}
	return make2(expDown(x.lo), expUp(x.hi))
}

// odd returns the series of sinh(r)/r in w = r^2, or of sin(r)/r in w = -r^2,
// for |r| <= 0.8. It is cut after w^13/27!: the rest is below
// 1.01 (0.64)^14/29! < 2^-111. The terms from w^8/17! < 2^-53 on are summed in
// float64.
func odd(w ball) ball { return horner(w, oddHead[:], oddTail[:]).widen(0x1p-111) }

// even is the same for cosh and cos: cut after w^13/26!, the rest below
// 1.01 (0.64)^14/28! < 2^-106; terms from w^8/16! < 2^-49 on in float64.
func even(w ball) ball { return horner(w, evenHead[:], evenTail[:]).widen(0x1p-106) }

// small is the magnitude below which x - x^3 < f(x) < x + x^3 decides the
// rounding of the odd functions with slope 1: x^3 is less than half a unit in
// the last place of x.
const small = 0x1p-28

// sinhBall returns b and k with sinh(x) = b 2^k, for small <= |x| <= 711.
func sinhBall(x float64) (ball, int) {
	if math.Abs(x) <= 0.7 {
		r := number(x)
		return odd(r.mul(r)).mul(r), 0
	}
	b, k := expBall(number(math.Abs(x)))
	// (e - 1/e)/2 = 2^(k-1) (b - 2^(-2k)/b)
	if k < 70 {
		b = b.sub(number(1).div(b).scale(math.Ldexp(1, -2*k)))
	} else {
		b = b.widen(0x1p-138)
	}
	if x < 0 {
		b = b.neg()
	}
	return b, k - 1
}

func sinhUp(x float64) float64 {
	switch m := math.Abs(x); {
	case x == 0 || math.IsInf(x, 0):
		return x
	case x > 711:
		return inf
	case x < -711:
		return -math.MaxFloat64
	case m < small && x > 0:
		return up(x)
	case m < small:
		return x
	}
	b, k := sinhBall(x)
	return scaleUp(b.high(), k)
}

// Sinh returns an enclosure of {sinh(a)}.
func (x Interval) Sinh() Interval {
	if x.IsEmpty() {
		return x
	}
	return make2(-sinhUp(-x.lo), sinhUp(x.hi))
}

// coshBounds returns bounds of cosh(x) for x >= 0.
func coshBounds(x float64) (lo, hi float64) {
	switch {
	case x == 0:
		return 1, 1
	case x > 711:
		return math.MaxFloat64, inf
	case x < 0x1p-27: // 1 + x^2/2 + ... < 1 + 2^-54
		return 1, 1 + 0x1p-52
	}
	b, k := expBall(number(x))
	if k < 70 {
		b = b.add(number(1).div(b).scale(math.Ldexp(1, -2*k)))
	} else {
		b = b.widen(0x1p-138)
	}
	return scaleDown(b.low(), k-1), scaleUp(b.high(), k-1)
}

// Cosh returns an enclosure of {cosh(a)}.
func (x Interval) Cosh() Interval {
	if x.IsEmpty() {
		return x
	}
	a := x.Abs()
	lo, hi := coshBounds(a.lo)
	if a.hi != a.lo {
		_, hi = coshBounds(a.hi)
	}
	return Interval{lo, hi}
}

// tanhUp returns an upper bound of tanh(x).
func tanhUp(x float64) float64 {
	var b ball
	switch m := math.Abs(x); {
	case x == 0:
		return x
	case m >= 20: // 1 - tanh(20) < 2 exp(-40) < 2^-56
		if x > 0 {
			return 1
		}
		return 0x1p-53 - 1
	case m < small && x > 0:
		return x
	case m < small:
		return up(x)
	case m <= 0.7:
		r := number(x)
		w := r.mul(r)
		b = odd(w).mul(r).div(even(w))
	default:
		e, k := expBall(number(2 * x))
		e = e.scale(math.Ldexp(1, k))
		b = e.sub(number(1)).div(e.add(number(1)))
	}
	return min(b.high(), 1)
}

// Tanh returns an enclosure of {tanh(a)}.
func (x Interval) Tanh() Interval {
	if x.IsEmpty() {
		return x
	}
	return make2(-tanhUp(-x.lo), tanhUp(x.hi))
}
