package algebra

import "math/big"

// Content returns the rational c, with the sign of the leading coefficient, such
// that p/c has coprime integer coefficients; 0 where p is 0 or poisoned, and where
// c would exceed MaxBits.
func (p Poly) Content() Rat {
	if p.Len() == 0 {
		return Rat{}
	}
	c, _ := content(p.r.coefs)
	return c
}

// content returns false where the result would exceed MaxBits.
func content(coefs []Rat) (Rat, bool) {
	n, d := uint64(0), uint64(1)
	ok := true
	for i := range coefs {
		c := &coefs[i]
		if c.b != nil {
			ok = false
			break
		}
		if n != 1 {
			n = gcd64(n, abs64(c.n))
		}
		if cd := uint64(c.dm) + 1; cd != 1 && d%cd != 0 {
			l, fits := mul64(int64(d), int64(cd/gcd64(d, cd)))
			if !fits {
				ok = false
				break
			}
			d = uint64(l)
		}
	}
	sign := coefs[0].Sign()
	if ok {
		return Rat{n: int64(sign) * int64(n), dm: int64(d) - 1}, true
	}
	num, den := new(big.Int), big.NewInt(1)
	var g big.Int
	for _, c := range coefs {
		b := c.view()
		num.GCD(nil, nil, num, g.Abs(b.Num()))
		g.GCD(nil, nil, den, b.Denom())
		den.Mul(den, g.Quo(b.Denom(), &g))
		if den.BitLen() > MaxBits {
			return Rat{}, false
		}
	}
	if sign < 0 {
		num.Neg(num)
	}
	return demote(new(big.Rat).SetFrac(num, den)), true
}

// Primitive returns the content c and p/c, which has coprime integer
// coefficients and a positive leading one; 0 and p where p is 0 or poisoned. Where
// the content would exceed MaxBits it is 0 and the polynomial poisoned.
func (p Poly) Primitive() (Rat, Poly) {
	if p.Len() == 0 {
		return Rat{}, p
	}
	c, ok := content(p.r.coefs)
	if !ok {
		return Rat{}, poison(errBits)
	}
	inv, _ := c.Inv()
	return c, p.Scale(inv)
}

// MonomialContent returns the largest monomial that divides p; 1 where p is 0 or
// poisoned.
func (p Poly) MonomialContent() Monomial {
	if p.Len() == 0 {
		return One
	}
	r := p.r
	var ps []Power
	for k, v := range r.vars {
		low := MaxExponent
		for i := 0; i < len(r.coefs) && low > 0; i++ {
			low = min(low, r.lay.field(r.term(i), k+1))
		}
		if low > 0 {
			ps = append(ps, Power{v, low})
		}
	}
	return encode(ps)
}

// monomialPoly returns m as a polynomial.
func monomialPoly(m Monomial) Poly { return FromTerms([]Term{{m, Int(1)}}) }
