package interval

import "math"

// The coefficients 1/(2n+1) of atanh(s)/s in s^2, n = 0 ... 3, and 4 ... 7.
var (
	atanhHead = [...]ball{
		{1, 0, 0},
		{0x1.5555555555555p-2, 0x1.5555555555555p-56, 0x1p-108},  // 1/3
		{0x1.999999999999ap-3, -0x1.999999999999ap-57, 0x1p-109}, // 1/5
		{0x1.2492492492492p-3, 0x1.2492492492492p-57, 0x1p-109},  // 1/7
	}
	atanhTail = [...]float64{1.0 / 9, 1.0 / 11, 1.0 / 13, 1.0 / 15}
)

// logBall returns the logarithm of x > 0, finite.
//
// Let x = 2^n m, 0.7 < m < 1.42. Near 1 (n = 0, |m-1| < 2^-6) it is
// 2 atanh(s), s = (m-1)/(m+1), |s| < 2^-6.9, and the series is cut after
// s^14/15: the rest is below 1.01 s^16/17 < 2^-114; terms from s^8/9 < 2^-58
// on are summed in float64. Elsewhere log m = y + log(1 + d) for any y, with
// d = m exp(-y) - 1; y is log m but for a few roundings, so that |d| < 2^-45
// and log(1 + d) = d - d^2/2 up to d^3/2 < 2^-136.
func logBall(x float64) ball {
	m, n := math.Frexp(x)
	if m < math.Sqrt2/2 {
		m *= 2
		n--
	}
	f := m - 1 // exact
	if n == 0 && math.Abs(f) < 0x1p-6 {
		s := number(f).div(number(2).add(number(f)))
		return horner(s.mul(s), atanhHead[:], atanhTail[:]).widen(0x1p-114).mul(s).scale(2)
	}
	y := logNear(f)
	b, k := expBall(number(-y))
	d := b.scale(math.Ldexp(1, k)).times(m).sub(number(1))
	if !(math.Abs(d.h)+d.e < 0x1p-45) {
		return ball{y, 0, inf}
	}
	d = d.sub(number(d.h * d.h / 2)).widen(0x1p-136)
	p, e := twoProd(float64(n), ln2a)
	q, g := twoProd(float64(n), ln2b)
	t := ball{p, e, 0}.add(ball{q, g, 0x1p-110 * math.Abs(float64(n))})
	return t.add(number(y)).add(d)
}

// logNear approximates log(1 + f), 0.7 < 1 + f < 1.42, as 2 atanh(f/(2 + f)).
// Its accuracy, about 2^-50, matters for speed alone.
func logNear(f float64) float64 {
	s := f / (2 + f)
	w := s * s
	t := 0.0
	for i := 23; i >= 1; i -= 2 {
		t = float64(t*w) + 1/float64(i)
	}
	return 2 * s * t
}

func logDown(x float64) float64 {
	switch x {
	case 0:
		return -inf
	case 1:
		return 0
	}
	return logBall(x).low()
}

func logUp(x float64) float64 {
	switch x {
	case inf:
		return inf
	case 1:
		return 0
	}
	return logBall(x).high()
}

// Log returns an enclosure of {log(a) : a > 0}.
func (x Interval) Log() Interval {
	if x.IsEmpty() || x.hi <= 0 {
		return Empty()
	}
	return make2(logDown(max(x.lo, 0)), logUp(x.hi))
}
