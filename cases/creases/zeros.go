package creases

import (
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/jet"
)

// vanishes reports whether f is shown to be zero on the whole piece: by its
// normal form, or, where f = a + b r with a root r, because
// (a + b r)(a - b r) vanishes and a - b r is shown to have no zero.
func (p *piece) vanishes(f algebra.Fraction) bool {
	if f.Err() != nil {
		return false
	}
	if f.IsZero() {
		return true
	}
	vars := f.Num().Vars()
	for i := len(vars) - 1; i >= 0; i-- {
		s := p.Ring.Symbol(vars[i])
		if s.Kind != jet.Root || s.Degree != 2 {
			continue
		}
		c := f.Num().Coeffs(vars[i])
		if len(c) != 2 {
			return false
		}
		other := algebra.FromPoly(c[0].Sub(c[1].Mul(algebra.Variable(vars[i]))))
		both, err := p.Ring.Mul(algebra.FromPoly(f.Num()), other)
		if err != nil {
			return false
		}
		return p.apart(other) && p.vanishes(both)
	}
	return false
}

// apart reports whether f is shown to be positive, or negative, everywhere on
// the piece.
func (p *piece) apart(f algebra.Fraction) bool {
	const depth = 12
	x := p.from.fraction(f)
	return p.tape.Positive(x, depth) || p.tape.Positive(p.tape.Mul(p.tape.Const(interval.Point(-1)), x), depth)
}

// dividesZero reports whether f may be zero on a part of the surface that has
// an area, although its normal form is not zero: whether the product of f with a
// polynomial in its roots vanishes identically, as that of |s| - s with |s| + s, or
// this is not known. A quotient by f is no function there, whatever its normal
// form says. Without roots of the parameters f is analytic, and its zeros have no
// area.
func (p *piece) dividesZero(f algebra.Fraction) bool {
	at := f.Num()
	for !at.IsZero() && at.Err() == nil {
		root, some := algebra.Var(0), false
		for _, v := range at.Vars() {
			switch s := p.Ring.Symbol(v); {
			case p.from.mask(v) == 0:
			case s.Kind == jet.Root:
				root, some = max(root, v), true
			case s.Kind >= jet.Cosine && p.rooted(s.Arg):
				return true
			}
		}
		if !some {
			return false
		}
		s := p.Ring.Symbol(root)
		c := at.Coeffs(root)
		next := s.Arg // times the coefficient, if there is one alone
		last := c[len(c)-1]
		for _, x := range c[:len(c)-1] {
			if x.IsZero() {
				continue
			}
			if s.Degree != 2 || len(c) != 2 {
				return true
			}
			next = algebra.FromPoly(x.Sub(last.Mul(algebra.Variable(root))))
			last = at
		}
		product, err := p.Ring.Mul(next, algebra.FromPoly(last))
		if err != nil {
			return true
		}
		at = product.Num()
	}
	return true
}

// rooted reports whether a root of the parameters is in f, at any depth.
func (p *piece) rooted(f algebra.Fraction) bool {
	for _, v := range f.Vars() {
		if s := p.Ring.Symbol(v); p.from.mask(v) != 0 && s.Kind >= jet.Cosine && (s.Kind == jet.Root || p.rooted(s.Arg)) {
			return true
		}
	}
	return false
}
