package algebra

import "slices"

// gcdWork bounds one greatest common divisor, in term operations.
const gcdWork = 100_000

// GCD returns a common divisor of a and b with coprime integer coefficients and
// a positive leading one; the greatest where greatest is true. The work is
// bounded: beyond it, the divisor found may be a smaller one, such as 1. The
// divisor of 0 and 0 is 0. It is poisoned where a or b is.
//
// The method is a primitive remainder sequence in one indeterminate after the
// other (W. S. Brown, On Euclid's algorithm and the computation of polynomial
// greatest common divisors, 1971), left out where images modulo a prime show
// that the degree is 0.
func GCD(a, b Poly) (g Poly, greatest bool) {
	if e, lost := bad(a, b); lost {
		return e, false
	}
	s := gcdState{left: gcdWork}
	g = s.gcd(a, b)
	if s.left < 0 || g.Err() != nil {
		return Const(Int(1)), false
	}
	return g, true
}

type gcdState struct{ left int }

func (s *gcdState) spend(n int) bool {
	s.left -= n
	return s.left >= 0
}

// div is a division that can fail at a limit only.
func (s *gcdState) div(a, b Poly) Poly {
	q, ok := a.DivExact(b)
	if !ok {
		s.left = -1
		return onePoly
	}
	_, q = q.Primitive()
	return q
}

var onePoly = Const(Int(1))

// gcd returns anything at all once the work is spent.
func (s *gcdState) gcd(a, b Poly) Poly {
	_, a = a.Primitive()
	_, b = b.Primitive()
	if a.Err() != nil || b.Err() != nil {
		s.left = -1
		return onePoly
	}
	switch {
	case a.IsZero():
		return b
	case b.IsZero() || a.Equal(b):
		return a
	}
	if !s.spend(a.Len() + b.Len()) {
		return onePoly
	}
	ma, mb := a.MonomialContent(), b.MonomialContent()
	if ma != One || mb != One {
		var common []Power
		merge(ma, mb, func(v Var, x, y int) bool {
			common = append(common, Power{v, min(x, y)})
			return true
		})
		g := s.gcd(s.div(a, monomialPoly(ma)), s.div(b, monomialPoly(mb)))
		return g.Mul(monomialPoly(NewMonomial(common...)))
	}
	if len(a.r.vars) == 0 || len(b.r.vars) == 0 {
		return onePoly
	}
	// A divisor of both is free of what occurs in only one.
	for _, swap := range []bool{false, true} {
		if swap {
			a, b = b, a
		}
		for _, v := range a.r.vars {
			if !b.Has(v) {
				return s.contentGCD(b, a, v)
			}
		}
	}
	return s.sameVars(a, b)
}

// contentGCD returns the common divisor of g and all coefficients of p in v.
func (s *gcdState) contentGCD(g, p Poly, v Var) Poly {
	parts := p.parts(v)
	slices.SortStableFunc(parts, func(x, y part) int { return x.poly.Len() - y.poly.Len() })
	for _, x := range parts {
		if g = s.gcd(g, x.poly); s.left < 0 || g.Equal(onePoly) {
			break
		}
	}
	return g
}

func (s *gcdState) sameVars(a, b Poly) Poly {
	main, low := a.r.vars[0], int(MaxExponent)
	var free []Var // in which the divisor has degree 0
	for _, v := range a.r.vars {
		if !s.spend(a.Len() + b.Len()) {
			return onePoly
		}
		if d, ok := imageDegree(a, b, v); ok && d == 0 {
			free = append(free, v)
		}
		if da := max(a.Degree(v), b.Degree(v)); da < low {
			main, low = v, da
		}
	}
	switch len(free) {
	case 0:
	case len(a.r.vars):
		return onePoly
	default:
		// The divisor divides every coefficient.
		return s.contentGCD(s.contentGCD(Poly{}, a, free[0]), b, free[0])
	}
	if low > 200 {
		s.left = -1
		return onePoly
	}
	if _, ok := a.DivExact(b); ok {
		return b
	}
	if _, ok := b.DivExact(a); ok {
		return a
	}
	v := main
	ca, cb := s.contentGCD(Poly{}, a, v), s.contentGCD(Poly{}, b, v)
	if s.left < 0 {
		return onePoly
	}
	a, b = s.div(a, ca), s.div(b, cb)
	c := s.gcd(ca, cb)
	if a.Degree(v) < b.Degree(v) {
		a, b = b, a
	}
	for b.Degree(v) > 0 {
		r := s.pseudoRemainder(a, b, v)
		if s.left < 0 || r.Err() != nil {
			s.left = -1
			return onePoly
		}
		if r.IsZero() {
			return s.primitiveMul(b, c)
		}
		cr := s.contentGCD(Poly{}, r, v)
		if s.left < 0 {
			return onePoly
		}
		a, b = b, s.div(r, cr)
	}
	return c
}

func (s *gcdState) primitiveMul(a, b Poly) Poly {
	_, g := a.Mul(b).Primitive()
	return g
}

// pseudoRemainder returns the remainder of a multiple of a, by a power of the
// leading coefficient of b in v.
func (s *gcdState) pseudoRemainder(a, b Poly, v Var) Poly {
	db := b.Degree(v)
	lead := b.parts(v)[0].poly
	for a.Degree(v) >= db && a.Err() == nil {
		top := a.parts(v)[0]
		n := (a.Len()+1)*lead.Len() + (b.Len()+1)*top.poly.Len()
		if !s.spend(n * (1 + productCost(top.poly.r.coefs[0], lead.r.coefs[0])/4)) {
			return onePoly
		}
		a = a.Mul(lead).Sub(b.Mul(top.poly).Mul(Variable(v).Pow(top.exp - db)))
		_, a = a.Primitive()
	}
	return a
}
