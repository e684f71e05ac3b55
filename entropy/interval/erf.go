package interval

import "math"

// erfBall returns b and k with erf(x) = b 2^k for 0 < x < 6.
//
// erf(x) = 2/sqrt(pi) x exp(-x^2) S, S = 1 + a/3 (1 + a/5 (1 + a/7 (...))) with
// a = 2 x^2 (DLMF 7.6.2). Every bracket from the one with a/(2n+3) <= 1/2 on is
// between 1 and 2, and that is put for the first one that changes S by less
// than 2^-104.
func erfBall(x float64) (ball, int) {
	m, k := math.Frexp(x)
	b := ball{twoOverRootPiA, twoOverRootPiB, 0x1p-109}.times(m)
	if x < 0x1p-60 { // 1 - x^2/3 < erf(x)/(2 x/sqrt(pi)) < 1
		return b.widen(0x1p-120), k
	}
	p, e := twoProd(x, x)
	a := ball{2 * p, 2 * e, 0}
	n := 0
	for t := 1.0; t > 0x1p-104 || float64(2*n+3) < 2.01*a.h; n++ {
		t *= a.h / float64(2*n+3)
	}
	s := ball{1.5, 0, 0.5}
	for ; n > 0; n-- {
		s = s.mul(a).div(number(float64(2*n + 1))).add(number(1))
	}
	g, j := expBall(ball{-p, -e, 0})
	return b.mul(s).mul(g), k + j
}

func erfUp(x float64) float64 {
	switch m := math.Abs(x); {
	case x == 0:
		return x
	case m >= 6: // 1 - erf(6) < 2^-55
		if x > 0 {
			return 1
		}
		return 0x1p-53 - 1
	}
	b, k := erfBall(math.Abs(x))
	if x < 0 {
		b = b.neg()
	}
	return min(scaleUp(b.high(), k), 1)
}

// Erf returns an enclosure of {erf(a)}, the error function.
func (x Interval) Erf() Interval {
	if x.IsEmpty() {
		return x
	}
	return make2(-erfUp(-x.lo), erfUp(x.hi))
}
