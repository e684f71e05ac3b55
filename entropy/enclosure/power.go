package enclosure

import (
	"math/big"
	"math/bits"
)

// PowInt returns x^n, with x^0 = 1 for every x (but Entire for Entire). A
// negative power of an interval that contains 0 is Entire.
func (c Context) PowInt(x Interval, n int) Interval {
	if x.lo == nil {
		return x
	}
	if n == 0 {
		return exact(1)
	}
	if n < 0 {
		// -n overflows for the least int; its magnitude as unsigned does not.
		w := c.more(8)
		return c.Quo(exact(1), w.power(x, uint(-(n+1))+1))
	}
	return c.power(x, uint(n))
}

// power returns x^n for n ≥ 1. An odd power is increasing; an even one is that
// of |x|, increasing there.
func (c Context) power(x Interval, n uint) Interval {
	if n%2 == 0 {
		x = c.Abs(x)
	}
	// Each of the 2 log2(n) roundings is multiplied at most n times.
	w := c.more(uint(2*bits.Len(n)) + 8)
	if x.IsPoint() {
		return c.round(w.powerOf(x, n))
	}
	lo, hi := minusInf, plusInf
	if !x.lo.IsInf() {
		lo = w.powerOf(point(x.lo), n).end(true)
	}
	if !x.hi.IsInf() {
		hi = w.powerOf(point(x.hi), n).end(false)
	}
	return c.round(newInterval(lo, hi))
}

// end returns the lower or the upper end, infinite where x is Entire.
func (x Interval) end(low bool) *big.Float {
	switch {
	case low && x.lo == nil:
		return minusInf
	case low:
		return x.lo
	case x.lo == nil:
		return plusInf
	}
	return x.hi
}

func (c Context) powerOf(x Interval, n uint) Interval {
	y := exact(1)
	for i := bits.Len(n) - 1; i >= 0; i-- {
		y = c.Mul(y, y)
		if n>>uint(i)&1 == 1 {
			y = c.Mul(y, x)
		}
	}
	return y
}

// Sqrt returns the square root of a non-negative x, Entire for other x.
func (c Context) Sqrt(x Interval) Interval { return c.Root(x, 2) }

// Root returns the q-th root of a non-negative x. It is Entire for q < 1 and
// where x touches a negative number, whatever the parity of q.
func (c Context) Root(x Interval, q int) Interval {
	if x.lo == nil || x.lo.Sign() < 0 || q < 1 {
		return Interval{}
	}
	if q == 1 {
		return c.round(x)
	}
	if x.IsPoint() {
		return c.rootOf(x.lo, q)
	}
	lo := c.rootOf(x.lo, q).end(true)
	hi := plusInf
	if !x.hi.IsInf() {
		hi = c.rootOf(x.hi, q).end(false)
	}
	return newInterval(lo, hi)
}

// integerRoot is the largest q for which roots are taken in integers.
const integerRoot = 64

// rootOf encloses the q-th root of one number v ≥ 0.
//
// Let N = floor(v 2^(qk)) and s = floor(N^(1/q)), an integer root. Then
// s ≤ (v 2^(qk))^(1/q) < s + 1, because an integer s + 1 with
// (s+1)^q ≤ v 2^(qk) would have (s+1)^q ≤ N. So the root lies in
// [s, s+1] 2^(-k), and is s 2^(-k) where no floor dropped anything. k is chosen
// so that s has at least p bits. For q > 64, v^(1/q) = exp(log(v)/q).
func (c Context) rootOf(v *big.Float, q int) Interval {
	if v.Sign() == 0 {
		return exact(0)
	}
	if q > integerRoot {
		w := c.more(40) // |log v|/q is below 2^23: at most 23 bits are lost
		return c.round(w.Exp(w.Quo(w.Log(point(v)), exact(int64(q)))))
	}
	p := int(c.prec()) + 2
	e := v.MantExp(nil)
	k := p - floorDiv(e-1, q)
	shifted := new(big.Float).SetMantExp(v, q*k) // in [2^(qp), 2^(q(p+1)))
	n, acc := shifted.Int(nil)
	s, whole := floorRoot(n, q)
	whole = whole && acc == big.Exact
	lo := new(big.Float).SetInt(s)
	hi := lo
	if !whole {
		hi = new(big.Float).SetInt(new(big.Int).Add(s, big.NewInt(1)))
	}
	return c.round(scale(newInterval(lo, hi), -k))
}

func floorDiv(a, b int) int {
	d := a / b
	if a%b < 0 {
		d--
	}
	return d
}

// floorRoot returns the largest s with s^q ≤ n, and whether s^q = n. Newton's
// iteration from above decreases until it has reached the floor of the root.
func floorRoot(n *big.Int, q int) (*big.Int, bool) {
	if q == 2 {
		s := new(big.Int).Sqrt(n)
		return s, new(big.Int).Mul(s, s).Cmp(n) == 0
	}
	bq, bq1 := big.NewInt(int64(q)), big.NewInt(int64(q-1))
	s := new(big.Int).Lsh(big.NewInt(1), uint((n.BitLen()+q-1)/q)) // s^q > n
	for {
		t := new(big.Int).Exp(s, bq1, nil)
		t.Quo(n, t)
		t.Add(t, new(big.Int).Mul(s, bq1))
		t.Quo(t, bq)
		if t.Cmp(s) >= 0 {
			break
		}
		s = t
	}
	return s, new(big.Int).Exp(s, bq, nil).Cmp(n) == 0
}
