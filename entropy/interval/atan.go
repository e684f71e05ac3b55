package interval

import "math"

// atanBall returns the arc tangent of x, |x| >= small, x finite.
//
// For |x| > 1 it is ±pi/2 - atan(1/x). Else, for any y, it is y + atan(t) with
// t = (x cos y - sin y)/(cos y + x sin y); y is the arc tangent up to about
// 2^-34, so that atan(t) = t - t^3/3 up to t^5/5 < 2^-150.
func atanBall(x float64) ball {
	z := number(x)
	if math.Abs(x) > 1 {
		z = number(1).div(z)
	}
	y := atanNear(z.h)
	w := number(y).mul(number(y)).neg()
	s, c := odd(w).times(y), even(w)
	t := z.mul(c).sub(s).div(c.add(z.mul(s)))
	if !(math.Abs(t.h)+t.e < 0x1p-30) {
		return ball{y, 0, inf}
	}
	// The cube is rounded: an error below 2^-90 2^-50.
	a := number(y).add(t.sub(number(t.h * t.h * t.h / 3)).widen(0x1p-139 * math.Abs(t.h) / 0x1p-30))
	switch {
	case x > 1:
		return ball{halfPiA, halfPiB, 0x1p-108}.sub(a)
	case x < -1:
		return ball{-halfPiA, -halfPiB, 0x1p-108}.sub(a)
	}
	return a
}

// atanNear approximates the arc tangent of |x| <= 1 as twice that of
// x/(1 + sqrt(1 + x^2)), relatively to about 2^-34.
func atanNear(x float64) float64 {
	u := x / (1 + math.Sqrt(1+float64(x*x)))
	w := u * u
	t := 0.0
	for i := 25; i >= 1; i -= 2 {
		t = 1/float64(i) - float64(t*w)
	}
	return 2 * u * t
}

func atanUp(x float64) float64 {
	switch m := math.Abs(x); {
	case x == 0:
		return x
	case m == inf && x > 0:
		return up(halfPiA)
	case m < small && x > 0:
		return x
	case m < small:
		return up(x)
	}
	return atanBall(x).high()
}

// Atan returns an enclosure of {atan(a)}.
func (x Interval) Atan() Interval {
	if x.IsEmpty() {
		return x
	}
	return make2(-atanUp(-x.lo), atanUp(x.hi))
}
