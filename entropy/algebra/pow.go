package algebra

import "math/bits"

// Pow returns p to the power n, 1 where n is 0. A negative n poisons the result.
// It squares and multiplies, and gives up at the first product beyond a limit.
func (p Poly) Pow(n int) Poly {
	switch {
	case p.Err() != nil:
		return p
	case n < 0:
		return poison(ErrExponent)
	case n == 0:
		return Const(Int(1))
	case n == 1 || p.r == nil:
		return p
	}
	if d := p.r.degree(); d > 0 && n > MaxExponent/d {
		return poison(errExponent)
	}
	if len(p.r.coefs) == 1 {
		return p.powTerm(n)
	}
	// The power of a sum of two terms has exactly n+1 terms.
	if len(p.r.coefs) == 2 && n >= MaxTerms {
		return poison(errTerms)
	}
	r := p
	for i := bits.Len(uint(n)) - 2; i >= 0 && r.Err() == nil; i-- {
		r = r.Mul(r)
		if n>>i&1 == 1 {
			r = r.Mul(p)
		}
	}
	return r
}

func (p Poly) powTerm(n int) Poly {
	c, ok := p.r.coefs[0].Pow(n)
	if !ok {
		return poison(errBits)
	}
	r := p.r
	lay := layoutFor(len(r.vars), n*r.degree())
	e := make([]uint64, lay.words)
	for k := range len(r.vars) + 1 {
		lay.put(e, k, n*r.lay.field(r.exps, k))
	}
	return Poly{&rep{vars: r.vars, lay: lay, exps: e, coefs: []Rat{c}}}
}
