package enclosure

import (
	"math"
	"math/big"
)

// expLimit is the largest |x| at which the exponential is evaluated.
const expLimit = 2_500_000

// Exp returns e^x.
func (c Context) Exp(x Interval) Interval {
	if x.lo == nil {
		return x
	}
	return monotone(x, c.expAt, new(big.Float), plusInf)
}

// expAt encloses e^v. With k an integer near v/log 2, r = v - k log 2 and
// t = r/2^m, e^v = 2^k (e^t)^(2^m). The series of t^j/j! has ratios
// |t|/(j+1) ≤ 1/2, since |t| ≤ 1/2.
func (c Context) expAt(v *big.Float) Interval {
	if v.Sign() == 0 {
		return exact(1)
	}
	if v.Cmp(big.NewFloat(expLimit)) > 0 {
		return newInterval(c.expAt(big.NewFloat(expLimit)).lo, plusInf)
	}
	if v.Cmp(big.NewFloat(-expLimit)) < 0 {
		return newInterval(new(big.Float), c.expAt(big.NewFloat(-expLimit)).hi)
	}
	return c.refine(func(w Context) Interval {
		f, _ := v.Float64()
		k := math.Round(f / math.Ln2)
		m := int(math.Sqrt(float64(w.prec()))) / 2
		w = w.more(uint(m) + 32) // m squarings, 22 bits of k
		r := w.Sub(point(v), w.Mul(exact(int64(k)), w.log2()))
		t := scale(r, -m)
		if magnitude(t).Cmp(big.NewFloat(0.5)) > 0 {
			return Interval{}
		}
		power := exact(1)
		s := w.sum(0, func(j int) Interval {
			if j > 0 {
				power = w.Quo(w.Mul(power, t), exact(int64(j)))
			}
			return power
		})
		for range m {
			s = w.Mul(s, s)
		}
		return scale(s, int(k))
	})
}

// Log returns the natural logarithm of a positive x, Entire for other x.
func (c Context) Log(x Interval) Interval {
	if x.lo == nil || x.lo.Sign() <= 0 {
		return Interval{}
	}
	return monotone(x, c.logAt, minusInf, plusInf)
}

// logAt encloses log v, v > 0. With v = 2^e m and m in [2/3, 4/3],
// log v = e log 2 + 2 atanh z, z = (m-1)/(m+1), |z| ≤ 1/5. The series of
// z^(2j+1)/(2j+1) has ratios below z² ≤ 1/25. Since m - 1 is exact, there is
// no loss near v = 1.
func (c Context) logAt(v *big.Float) Interval {
	m := new(big.Float)
	e := v.MantExp(m) // m in [1/2, 1)
	if m.Cmp(big.NewFloat(2.0/3)) < 0 {
		m.SetMantExp(m, 1)
		e--
	}
	if e == 0 && m.Cmp(big.NewFloat(1)) == 0 {
		return exact(0)
	}
	return c.refine(func(w Context) Interval {
		wide := Context{Prec: max(w.prec(), m.MinPrec()+2)}
		x := point(m)
		z := w.Quo(wide.Sub(x, exact(1)), wide.Add(x, exact(1)))
		sq := w.Sqr(z)
		power := z
		s := w.sum(0, func(j int) Interval {
			if j > 0 {
				power = w.Mul(power, sq)
			}
			return w.Quo(power, exact(int64(2*j+1)))
		})
		return w.Add(scale(s, 1), w.Mul(exact(int64(e)), w.log2()))
	})
}

// Sinh returns the hyperbolic sine.
func (c Context) Sinh(x Interval) Interval {
	if x.lo == nil {
		return x
	}
	return monotone(x, c.sinhAt, minusInf, plusInf)
}

// sinhAt sums the series of v^(2j+1)/(2j+1)! for |v| ≤ 1, where its ratios are
// at most 1/6, and takes (e^v - e^-v)/2 elsewhere.
func (c Context) sinhAt(v *big.Float) Interval {
	if v.Sign() == 0 {
		return exact(0)
	}
	return c.bounded(v, func(w Context) Interval {
		if magnitude(point(v)).Cmp(big.NewFloat(1)) <= 0 {
			return w.sinhSmall(v)
		}
		return scale(w.Sub(w.expAt(v), w.expAt(new(big.Float).Neg(v))), -1)
	})
}

// bounded is refine, but only once for |v| beyond the limit of the exponential,
// where more precision changes nothing.
func (c Context) bounded(v *big.Float, f func(w Context) Interval) Interval {
	if magnitude(point(v)).Cmp(big.NewFloat(expLimit)) >= 0 {
		return c.round(f(c.more(24)))
	}
	return c.refine(f)
}

func (c Context) sinhSmall(v *big.Float) Interval {
	x := point(v)
	sq := c.Sqr(x)
	term := x
	return c.sum(0, func(j int) Interval {
		if j > 0 {
			term = c.Quo(c.Mul(term, sq), exact(int64(2*j*(2*j+1))))
		}
		return term
	})
}

// Cosh returns the hyperbolic cosine.
func (c Context) Cosh(x Interval) Interval {
	if x.lo == nil {
		return x
	}
	return monotone(c.Abs(x), c.coshAt, minusInf, plusInf)
}

func (c Context) coshAt(v *big.Float) Interval {
	if v.Sign() == 0 {
		return exact(1)
	}
	return c.bounded(v, func(w Context) Interval {
		return scale(w.Add(w.expAt(v), w.expAt(new(big.Float).Neg(v))), -1)
	})
}

// Tanh returns the hyperbolic tangent.
func (c Context) Tanh(x Interval) Interval {
	if x.lo == nil {
		return x
	}
	return monotone(x, c.tanhAt, big.NewFloat(-1), big.NewFloat(1))
}

// tanhAt takes sinh/cosh for |v| ≤ 1 and 1 - 2/(e^(2|v|) + 1) with the sign of
// v elsewhere.
func (c Context) tanhAt(v *big.Float) Interval {
	if v.Sign() == 0 {
		return exact(0)
	}
	a := new(big.Float).Abs(v)
	r := c.bounded(a, func(w Context) Interval {
		if a.Cmp(big.NewFloat(1)) <= 0 {
			return w.Quo(w.sinhSmall(a), w.coshAt(a))
		}
		e := w.expAt(new(big.Float).SetMantExp(a, 1))
		return w.Sub(exact(1), w.Quo(exact(2), w.Add(e, exact(1))))
	})
	if v.Signbit() {
		return c.Neg(r)
	}
	return r
}
