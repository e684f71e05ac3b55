package enclosure

import "math/big"

// Erf returns the error function, 2/√π times the integral of exp(-t²) from 0.
func (c Context) Erf(x Interval) Interval {
	if x.lo == nil {
		return x
	}
	return monotone(x, c.erfAt, big.NewFloat(-1), big.NewFloat(1))
}

// erfAt uses that erf is odd, and for a = |v| either
//
//	erf a = 2/√π exp(-a²) Σ 2^j a^(2j+1)/(1·3···(2j+1)),
//
// a series of positive terms whose ratio 2a²/(2j+3) is at most 1/2 from
// j ≥ 2a² on, or, where exp(-a²) is below the last bit and a ≥ 1,
//
//	1 - exp(-a²) ≤ erf a ≤ 1,
//
// since the complement is at most exp(-a²)/(a√π).
func (c Context) erfAt(v *big.Float) Interval {
	if v.Sign() == 0 {
		return exact(0)
	}
	a := new(big.Float).Abs(v)
	r := c.erfPositive(a)
	if v.Signbit() {
		return c.Neg(r)
	}
	return r
}

func (c Context) erfPositive(a *big.Float) Interval {
	one := big.NewFloat(1)
	f := 1e9
	if a.MantExp(nil) < 24 {
		f, _ = a.Float64()
	}
	if f*f > float64(c.prec())+8 { // then also f > 1 and exp(-f²) < 2^(-p-8)
		w := c.more(8)
		x := point(a)
		return c.round(newInterval(w.Sub(exact(1), w.Exp(w.Neg(w.Sqr(x)))).lo, one))
	}
	from := int(2*f*f) + 2
	r := c.refine(func(w Context) Interval {
		w = w.more(16)
		x := point(a)
		sq := w.Sqr(x)
		twice := scale(sq, 1)
		term := x
		s := w.sum(from, func(j int) Interval {
			if j > 0 {
				term = w.Quo(w.Mul(term, twice), exact(int64(2*j+1)))
			}
			return term
		})
		s = w.Mul(s, w.Exp(w.Neg(sq)))
		return w.Quo(scale(s, 1), w.Sqrt(w.Pi()))
	})
	return clip(r)
}
