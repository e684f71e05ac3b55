package enclosure

import "math/big"

// trigExp is the binary exponent from which on sine and cosine are not
// evaluated.
const trigExp = 4096

func unit() Interval { return Interval{lo: big.NewFloat(-1), hi: big.NewFloat(1)} }

// Sin returns the sine.
func (c Context) Sin(x Interval) Interval { return c.wave(x, 0) }

// Cos returns the cosine.
func (c Context) Cos(x Interval) Interval { return c.wave(x, 1) }

// wave returns sin(x + shift π/2).
//
// Its extrema are where x = (n + (1 - shift)/2) π, the value being (-1)^n.
// Between neighbouring extrema the function is monotone, so its range over x is
// the hull of its values at the ends and at the extrema inside. Every extremum
// that cannot be excluded is counted as inside.
func (c Context) wave(x Interval, shift int) Interval {
	if x.lo == nil {
		return x
	}
	if x.IsPoint() {
		return c.waveAt(x.lo, shift)
	}
	if !x.IsBounded() || exponent(x) >= trigExp {
		return unit()
	}
	n0, n1 := c.extrema(x, 1-shift)
	span := new(big.Int).Sub(n1, n0)
	if span.Cmp(big.NewInt(1)) >= 0 { // both a maximum and a minimum
		return unit()
	}
	r := Union(c.waveAt(x.lo, shift), c.waveAt(x.hi, shift))
	if span.Sign() == 0 {
		if n0.Bit(0) == 0 {
			r = Union(r, exact(1))
		} else {
			r = Union(r, exact(-1))
		}
	}
	return c.round(r)
}

// exponent returns the larger binary exponent of the ends of a bounded x.
func exponent(x Interval) int {
	m := magnitude(x)
	if m.Sign() == 0 {
		return -maxExp
	}
	return m.MantExp(nil)
}

// extrema returns the least and the greatest integer n for which (n + half/2) π
// may lie in x. The first exceeds the second where there is none.
func (c Context) extrema(x Interval, half int) (n0, n1 *big.Int) {
	w := c.more(uint(max(exponent(x), 0)) + 8)
	q := w.Sub(w.Quo(x, w.Pi()), scale(exact(int64(half)), -1))
	n0 = floor(new(big.Float).Neg(q.lo))
	n0.Neg(n0)
	return n0, floor(q.hi)
}

// floor returns the greatest integer ≤ v.
func floor(v *big.Float) *big.Int {
	n, acc := v.Int(nil) // toward zero
	if acc == big.Above {
		n.Sub(n, big.NewInt(1))
	}
	return n
}

// waveAt encloses sin(v + shift π/2). With k an integer near 2v/π and
// r = v - k π/2, |r| ≤ 1, it is ±sin r or ±cos r by k + shift modulo 4.
func (c Context) waveAt(v *big.Float, shift int) Interval {
	if v.Sign() == 0 {
		return exact(int64(shift))
	}
	e := v.MantExp(nil)
	if e >= trigExp {
		return unit()
	}
	r := c.refine(func(w Context) Interval {
		wide := w.more(uint(max(e, 0)) + 8)
		half := scale(wide.Pi(), -1)
		f := new(big.Float).SetPrec(wide.prec()).Quo(v, half.lo)
		k := floor(f.Add(f, big.NewFloat(0.5)))
		r := wide.Sub(point(v), wide.Mul(point(new(big.Float).SetInt(k)), half))
		if magnitude(r).Cmp(big.NewFloat(1)) > 0 {
			return unit()
		}
		q := (int(k.Bit(0)) + 2*int(k.Bit(1)) + shift) & 3
		var s Interval
		if q&1 == 0 {
			s = w.sinSmall(r)
		} else {
			s = w.cosSmall(r)
		}
		if q >= 2 {
			s = w.Neg(s)
		}
		return s
	})
	return clip(r)
}

// clip returns the part of x in [-1, 1]; the value enclosed lies there.
func clip(x Interval) Interval {
	u := unit()
	if x.lo == nil {
		return u
	}
	if x.lo.Cmp(u.lo) > 0 {
		u.lo = x.lo
	}
	if x.hi.Cmp(u.hi) < 0 {
		u.hi = x.hi
	}
	return u
}

// sinSmall sums the series of (-1)^j r^(2j+1)/(2j+1)!, |r| ≤ 1; its ratios are
// at most 1/6 in absolute value.
func (c Context) sinSmall(r Interval) Interval {
	sq := c.Neg(c.Sqr(r))
	term := r
	return c.sum(0, func(j int) Interval {
		if j > 0 {
			term = c.Quo(c.Mul(term, sq), exact(int64(2*j*(2*j+1))))
		}
		return term
	})
}

// cosSmall sums the series of (-1)^j r^(2j)/(2j)!, |r| ≤ 1; its ratios are at
// most 1/2 in absolute value.
func (c Context) cosSmall(r Interval) Interval {
	sq := c.Neg(c.Sqr(r))
	term := exact(1)
	return c.sum(0, func(j int) Interval {
		if j > 0 {
			term = c.Quo(c.Mul(term, sq), exact(int64((2*j-1)*2*j)))
		}
		return term
	})
}

// Tan returns the tangent, Entire where a pole cannot be excluded from x. It is
// increasing between its poles.
func (c Context) Tan(x Interval) Interval {
	if x.lo == nil || !x.IsBounded() || exponent(x) >= trigExp {
		return Interval{}
	}
	if !x.IsPoint() {
		if n0, n1 := c.extrema(x, 1); n0.Cmp(n1) <= 0 {
			return Interval{}
		}
	}
	w := c.more(8)
	return monotone(x, func(v *big.Float) Interval {
		return c.Quo(w.waveAt(v, 0), w.waveAt(v, 1))
	}, minusInf, plusInf)
}
