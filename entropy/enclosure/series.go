package enclosure

import (
	"math/big"
	"sync"
)

// sum adds the terms term(0), term(1), ... until one is negligible against the
// sum, and then widens by twice that term. It is rigorous where
// |t[j+1]| ≤ |t[j]|/2 for every j ≥ from, by the bound in the package comment.
// Terms before from are always added.
func (c Context) sum(from int, term func(j int) Interval) Interval {
	s := exact(0)
	for j := 0; ; j++ {
		t := term(j)
		if t.lo == nil {
			return t
		}
		if j >= from && c.negligible(t, s) {
			m := magnitude(t)
			tail := Interval{lo: new(big.Float).Neg(m), hi: m}
			return c.Add(s, scale(tail, 1))
		}
		s = c.Add(s, t)
	}
}

// negligible reports whether |t| is below the last bits of s, or hopeless: so
// small that waiting for smaller terms would not pay.
func (c Context) negligible(t, s Interval) bool {
	m := magnitude(t)
	if m.Sign() == 0 {
		return true
	}
	e := m.MantExp(nil)
	if e < -maxExp/2 {
		return true
	}
	ms := magnitude(s)
	return ms.Sign() != 0 && e < ms.MantExp(nil)-int(c.prec())-4
}

// refine evaluates f with growing precision until its result is tight for the
// precision of c. Containment does not depend on it, only width.
func (c Context) refine(f func(w Context) Interval) Interval {
	var r Interval
	for extra := uint(24); extra <= 1536; extra *= 4 {
		r = f(c.more(extra))
		if c.tight(r) {
			break
		}
	}
	return c.round(r)
}

func (c Context) tight(r Interval) bool {
	if !r.IsBounded() {
		return false
	}
	if r.IsPoint() {
		return true
	}
	least := r.lo
	if r.lo.Sign() < 0 {
		least = r.hi
		if least.Sign() > 0 {
			return false
		}
	}
	if least.Sign() == 0 {
		return false
	}
	return r.Width().MantExp(nil) < least.MantExp(nil)-int(c.prec())-3
}

// monotone applies an increasing function, given at numbers by f, to x. The
// values atMinus and atPlus are bounds for infinite ends.
func monotone(x Interval, f func(*big.Float) Interval, atMinus, atPlus *big.Float) Interval {
	if x.IsPoint() {
		return f(x.lo)
	}
	lo, hi := atMinus, atPlus
	if !x.lo.IsInf() {
		lo = f(x.lo).end(true)
	}
	if !x.hi.IsInf() {
		hi = f(x.hi).end(false)
	}
	return newInterval(lo, hi)
}

// constants caches π and log 2 by precision.
type constants struct {
	mu   sync.Mutex
	vals map[uint]Interval
}

func (k *constants) at(c Context, compute func(w Context) Interval) Interval {
	p := (c.prec() + 63) / 64 * 64 // few distinct precisions
	k.mu.Lock()
	defer k.mu.Unlock()
	if v, ok := k.vals[p]; ok {
		return v
	}
	if k.vals == nil {
		k.vals = make(map[uint]Interval)
	}
	v := Context{Prec: p}.round(compute(Context{Prec: p + 24}))
	k.vals[p] = v
	return v
}

var cachedPi, cachedLog2 constants

// Pi encloses π, by Machin's formula π = 16 atan(1/5) - 4 atan(1/239).
func (c Context) Pi() Interval {
	return c.round(cachedPi.at(c, func(w Context) Interval {
		return w.Sub(scale(w.inverseArc(5, true), 4), scale(w.inverseArc(239, true), 2))
	}))
}

// log2 encloses the natural logarithm of 2 = 2 atanh(1/3).
func (c Context) log2() Interval {
	return cachedLog2.at(c, func(w Context) Interval {
		return scale(w.inverseArc(3, false), 1)
	})
}

// inverseArc encloses atan(1/n), alternating, or atanh(1/n), from
// the series of (±1)^j n^(-2j-1)/(2j+1); its ratios are at most n^(-2) ≤ 1/9.
func (c Context) inverseArc(n int64, alternating bool) Interval {
	sq := exact(n * n)
	if alternating {
		sq = exact(-n * n)
	}
	power := c.Quo(exact(1), exact(n))
	return c.sum(0, func(j int) Interval {
		if j > 0 {
			power = c.Quo(power, sq)
		}
		return c.Quo(power, exact(int64(2*j+1)))
	})
}
