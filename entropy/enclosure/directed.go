package enclosure

import "math/big"

// maxExp bounds the binary exponent of a finite end, so that sums, products and
// quotients of ends stay inside the exponent range of big.Float (31 bits).
const maxExp = 1 << 29

// gap is the exponent difference from which on the smaller term of a sum is
// replaced, so that aligning the mantissas does not allocate gigabytes.
const gap = 1 << 12

func blank(prec uint, mode big.RoundingMode) *big.Float {
	return new(big.Float).SetPrec(prec).SetMode(mode)
}

// add returns x + y rounded in the given direction. Infinite terms must not be
// of opposite signs; no caller has them, since a lower end is never +Inf and an
// upper end never -Inf.
func add(prec uint, mode big.RoundingMode, x, y *big.Float) *big.Float {
	if x.Sign() != 0 && y.Sign() != 0 && !x.IsInf() && !y.IsInf() {
		ex, ey := x.MantExp(nil), y.MantExp(nil)
		if ex < ey {
			x, y, ex, ey = y, x, ey, ex
		}
		// With y below every bit of x and of the result, only its sign matters
		// to a directed rounding: any number as small does the same.
		if low := int(max(prec, x.MinPrec())) + 4; ex-ey > max(low, gap) {
			tiny := big.NewFloat(0.5)
			if y.Signbit() {
				tiny.Neg(tiny)
			}
			y = new(big.Float).SetMantExp(tiny, ex-low)
		}
	}
	return blank(prec, mode).Add(x, y)
}

// mul returns x y rounded in the given direction, with 0 · Inf = 0: the ends
// stand for limits of products of real numbers, and 0 times any real is 0.
func mul(prec uint, mode big.RoundingMode, x, y *big.Float) *big.Float {
	if x.Sign() == 0 || y.Sign() == 0 {
		return blank(prec, mode)
	}
	return blank(prec, mode).Mul(x, y)
}

// quo returns x/y, y != 0, rounded in the given direction, with Inf/Inf = 0:
// among the candidates for the ends of a quotient, 0 is then the limit of
// finite/Inf and the infinite limit is present as Inf/finite.
func quo(prec uint, mode big.RoundingMode, x, y *big.Float) *big.Float {
	if x.Sign() == 0 || y.IsInf() {
		return blank(prec, mode)
	}
	return blank(prec, mode).Quo(x, y)
}

// power2 returns 2^e.
func power2(e int) *big.Float {
	return new(big.Float).SetMantExp(big.NewFloat(1), e)
}

// lower moves a lower end outward into the exponent range.
func lower(x *big.Float) *big.Float {
	if x.Sign() == 0 {
		return x
	}
	if x.IsInf() {
		if x.Signbit() {
			return x
		}
		return power2(maxExp - 1)
	}
	switch e := x.MantExp(nil); {
	case e > maxExp && x.Signbit():
		return minusInf
	case e > maxExp:
		return power2(maxExp - 1) // 2^(e-1) ≤ x
	case e < -maxExp && x.Signbit():
		y := power2(-maxExp - 1) // |x| < 2^e
		return y.Neg(y)
	case e < -maxExp:
		return new(big.Float)
	}
	return x
}

// upper moves an upper end outward into the exponent range.
func upper(x *big.Float) *big.Float {
	y := lower(new(big.Float).Neg(x))
	return new(big.Float).Neg(y)
}

func ends(lo, hi *big.Float) Interval { return newInterval(lower(lo), upper(hi)) }
