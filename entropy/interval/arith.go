package interval

import "math"

// Neg returns {-a}.
func (x Interval) Neg() Interval { return make2(-x.hi, -x.lo) }

// Add returns the hull of {a + b}. Each bound is the nearest float64 outward.
func (x Interval) Add(y Interval) Interval {
	if x.IsEmpty() || y.IsEmpty() {
		return Empty()
	}
	return make2(addDown(x.lo, y.lo), addUp(x.hi, y.hi))
}

// Sub returns the hull of {a - b}. Each bound is the nearest float64 outward.
func (x Interval) Sub(y Interval) Interval {
	if x.IsEmpty() || y.IsEmpty() {
		return Empty()
	}
	return make2(subDown(x.lo, y.hi), subUp(x.hi, y.lo))
}

// Mul returns the hull of {a b}. Each bound is the nearest float64 outward.
func (x Interval) Mul(y Interval) Interval {
	if x.IsEmpty() || y.IsEmpty() {
		return Empty()
	}
	if x.hi <= 0 && x.lo < 0 {
		return x.Neg().Mul(y).Neg()
	}
	if y.hi <= 0 && y.lo < 0 {
		return x.Mul(y.Neg()).Neg()
	}
	if x.lo < 0 && y.lo >= 0 {
		x, y = y, x
	}
	switch {
	case x.lo < 0: // both have 0 inside
		return make2(min(mulDown(x.lo, y.hi), mulDown(x.hi, y.lo)), max(mulUp(x.lo, y.lo), mulUp(x.hi, y.hi)))
	case y.lo < 0:
		return make2(mulDown(x.hi, y.lo), mulUp(x.hi, y.hi))
	}
	return make2(mulDown(x.lo, y.lo), mulUp(x.hi, y.hi))
}

// Sqr returns the hull of {a^2}. Each bound is the nearest float64 outward.
func (x Interval) Sqr() Interval {
	if x.IsEmpty() {
		return x
	}
	a := x.Abs()
	return make2(mulDown(a.lo, a.lo), mulUp(a.hi, a.hi))
}

// Div returns the hull of {a/b : b != 0}: empty if y = [0, 0], and the whole
// line if 0 is inside y and x is not [0, 0]. Each bound is the nearest float64
// outward.
func (x Interval) Div(y Interval) Interval {
	switch {
	case x.IsEmpty() || y.IsEmpty() || y == Interval{}:
		return Empty()
	case x == Interval{}:
		return x
	case y.hi <= 0:
		return x.Neg().Div(y.Neg())
	case y.lo < 0:
		return Entire()
	case x.hi <= 0:
		return x.Neg().Div(y).Neg()
	}
	// y >= 0 and x has a positive element.
	hi := inf
	if y.lo > 0 {
		hi = divUp(x.hi, y.lo)
	}
	switch {
	case x.lo >= 0:
		return make2(divDown(x.lo, y.hi), hi)
	case y.lo > 0:
		return make2(divDown(x.lo, y.lo), hi)
	}
	return Entire()
}

// Recip returns the hull of {1/a : a != 0}: empty for [0, 0].
func (x Interval) Recip() Interval { return Interval{1, 1}.Div(x) }

// Sqrt returns the hull of {sqrt(a) : a >= 0}. Each bound is the nearest float64
// outward.
func (x Interval) Sqrt() Interval {
	if x.IsEmpty() || x.hi < 0 {
		return Empty()
	}
	return make2(sqrtDown(max(x.lo, 0)), sqrtUp(x.hi))
}

// Abs returns {|a|}.
func (x Interval) Abs() Interval {
	switch {
	case x.IsEmpty() || x.lo >= 0:
		return x
	case x.hi <= 0:
		return x.Neg()
	}
	return Interval{0, max(-x.lo, x.hi)}
}

// Sign returns the hull of {sign(a)}, where sign is -1, 0 or 1.
func (x Interval) Sign() Interval {
	if x.IsEmpty() {
		return x
	}
	return Interval{sign(x.lo), sign(x.hi)}
}

func sign(x float64) float64 {
	switch {
	case x > 0:
		return 1
	case x < 0:
		return -1
	}
	return 0
}

// Min returns {min(a, b)}.
func (x Interval) Min(y Interval) Interval {
	if x.IsEmpty() || y.IsEmpty() {
		return Empty()
	}
	return Interval{min(x.lo, y.lo), min(x.hi, y.hi)}
}

// Max returns {max(a, b)}.
func (x Interval) Max(y Interval) Interval {
	if x.IsEmpty() || y.IsEmpty() {
		return Empty()
	}
	return Interval{max(x.lo, y.lo), max(x.hi, y.hi)}
}

// Fma returns the hull of {a b + c}. Each bound is the nearest float64 outward:
// the product is not rounded.
func (x Interval) Fma(y, z Interval) Interval {
	if x.IsEmpty() || y.IsEmpty() || z.IsEmpty() {
		return Empty()
	}
	lo, hi := inf, -inf
	for _, a := range [2]float64{x.lo, x.hi} {
		for _, b := range [2]float64{y.lo, y.hi} {
			lo = min(lo, -fmaUp(-a, b, -z.lo))
			hi = max(hi, fmaUp(a, b, z.hi))
		}
	}
	return make2(lo, hi)
}

// fmaUp returns a b + c rounded toward +Inf, where 0 times anything is 0 and
// c is not -Inf unless the result is to be a lower bound of -Inf.
func fmaUp(a, b, c float64) float64 {
	if a == 0 || b == 0 {
		return c
	}
	if math.IsInf(c, 0) {
		return c
	}
	if math.IsInf(a, 0) || math.IsInf(b, 0) {
		return a * b
	}
	f := math.FMA(a, b, c)
	if math.IsInf(f, 0) {
		return max(f, -math.MaxFloat64)
	}
	p := a * b
	if m := math.Abs(p); m < safe || m > 0x1p1000 || math.Abs(c) > 0x1p1000 {
		if exactSign(a, b, c, f) > 0 {
			return up(f)
		}
		return f
	}
	// a b + c - f = p + e + c - f: the sign of a sum of four numbers.
	e := math.FMA(a, b, -p)
	if signOfSum([4]float64{e, p, c, -f}) > 0 {
		return up(f)
	}
	return f
}
