package interval

import "math"

// A ball is the set of numbers at most e away from h + l, where h is h + l
// rounded to nearest. The functions are evaluated in balls, whose operations
// bound their own rounding errors; nothing is estimated by hand but the tails
// of series.
//
// The double-word operations and their relative error bounds, in units of
// 2^-106, are those of M. Joldes, J.-M. Muller and V. Popescu, ACM Trans. Math.
// Softw. 44 (2017), article 15: algorithm 6 (sum, 3 and a little), 9 (product
// with a float64, 2) and 12 (product, 5). Radii are sums and products of
// non-negative numbers in a handful of roundings, hence within 2^-49 of the
// exact value; grow covers that, and tiny any underflow.
type ball struct{ h, l, e float64 }

const (
	grow = 1 + 0x1p-45
	tiny = 0x1p-1000
)

func number(x float64) ball { return ball{h: x} }

func (a ball) neg() ball { return ball{-a.h, -a.l, a.e} }

func (a ball) add(b ball) ball {
	sh, sl := twoSum(a.h, b.h)
	th, tl := twoSum(a.l, b.l)
	vh, vl := fastTwoSum(sh, sl+th)
	h, l := fastTwoSum(vh, tl+vl)
	return ball{h, l, float64((float64(math.Abs(h)*0x1p-104)+a.e+b.e)*grow) + tiny}
}

func (a ball) sub(b ball) ball { return a.add(b.neg()) }

func (a ball) mul(b ball) ball {
	c, c1 := twoProd(a.h, b.h)
	t := math.FMA(a.l, b.h, math.FMA(a.h, b.l, a.l*b.l))
	h, l := fastTwoSum(c, c1+t)
	r := float64(math.Abs(a.h)*b.e) + float64((math.Abs(b.h)+b.e)*a.e)
	return ball{h, l, float64((float64(math.Abs(h)*0x6p-106)+r)*grow) + tiny}
}

// times is the product with a number.
func (a ball) times(x float64) ball {
	c, c1 := twoProd(a.h, x)
	h, l := fastTwoSum(c, math.FMA(a.l, x, c1))
	r := float64(math.Abs(h)*0x3p-106) + float64(math.Abs(x)*a.e)
	return ball{h, l, float64(r*grow) + tiny}
}

// scale is the product with a power of two of moderate size, which is exact.
func (a ball) scale(p float64) ball { return ball{a.h * p, a.l * p, float64(a.e*p) + tiny} }

// div is a/b. With a quotient q of the high parts, a/b = q + (a - q b)/b; of the
// second term, about 2^-53 of the first, only the high part is computed.
func (a ball) div(b ball) ball {
	q := a.h / b.h
	r := ball{a.h, a.l, 0}.sub(ball{b.h, b.l, 0}.times(q))
	d := r.h / b.h
	h, l := fastTwoSum(q, d)
	m := float64(math.Abs(b.h)*(1-0x1p-50)) - b.e
	if !(m > 0) {
		return ball{h, l, inf}
	}
	e := (r.e + math.Abs(r.l) + a.e + float64((math.Abs(q)+math.Abs(d))*b.e)) / m
	return ball{h, l, float64((e+float64(math.Abs(d)*0x1p-50))*grow) + tiny}
}

// widen adds to the radius.
func (a ball) widen(e float64) ball {
	a.e = float64((a.e+e)*grow) + tiny
	return a
}

// low and high are bounds of the ball.
func (a ball) low() float64 {
	if !(a.e < inf) {
		return -inf
	}
	return addDown(a.h, subDown(a.l, a.e))
}

func (a ball) high() float64 {
	if !(a.e < inf) {
		return inf
	}
	return addUp(a.h, addUp(a.l, a.e))
}

// horner is the value of c[0] + z c[1] + ... + z^n (c[n] + z t(z)), where the
// tail polynomial t, together with its factor, contributes so little that
// float64 arithmetic suffices: its relative error is below 2^-49 since each
// step loses at most 4 units of 2^-53 and the terms fall by factors of 8.
func horner(z ball, c []ball, tail []float64) ball {
	t := 0.0
	for i := len(tail) - 1; i >= 0; i-- {
		t = float64(t*z.h) + tail[i]
	}
	s := ball{t, 0, float64(math.Abs(t)*0x1p-49) + z.e}
	for i := len(c) - 1; i >= 0; i-- {
		s = s.mul(z).add(c[i])
	}
	return s
}
