package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
)

// Budgets of completing a basis.
const (
	maxBasis     = 60  // polynomials in it
	maxPairs     = 600 // looked at
	maxPairTerms = 120 // of a polynomial that joins it
)

// completed adds to generators of an ideal the remainders of their
// S-polynomials (Buchberger's algorithm; Cox, Little, O'Shea, Ideals,
// Varieties, and Algorithms, 4th ed., Springer 2015, section 2.7), pairs of
// low degree first, within a budget. All that it adds lies in the ideal; only
// if it ends within the budget is the result a Gröbner basis.
func (d *Problem) completed(gens []algebra.Poly) []algebra.Poly {
	type pair struct {
		i, k int
		lcm  algebra.Monomial
	}
	basis := slices.Clone(gens)
	var pairs []pair
	join := func(k int) {
		mk, _ := basis[k].Leading()
		for i := range k {
			mi, _ := basis[i].Leading()
			if l, ok := commonMultiple(mi, mk); ok {
				pairs = append(pairs, pair{i, k, l})
			}
		}
	}
	for k := range basis {
		join(k)
	}
	for n := 0; n < maxPairs && len(pairs) > 0 && len(basis) < maxBasis && d.Ctx.Err() == nil; n++ {
		best := 0
		for i, p := range pairs {
			if p.lcm.Degree() < pairs[best].lcm.Degree() {
				best = i
			}
		}
		p := pairs[best]
		pairs = slices.Delete(pairs, best, best+1)
		s := multiple(basis[p.i], p.lcm).Sub(multiple(basis[p.k], p.lcm))
		if s.Err() != nil || s.IsZero() {
			continue
		}
		_, rem := s.DivMod(basis, algebra.GradedLex)
		if rem.Err() != nil || rem.IsZero() || rem.Len() > maxPairTerms {
			continue
		}
		_, rem = rem.Primitive()
		basis = append(basis, rem)
		join(len(basis) - 1)
	}
	return basis
}

// commonMultiple is the least common multiple of two monomials; false where
// they have no indeterminate in common, for such a pair adds nothing.
func commonMultiple(a, b algebra.Monomial) (algebra.Monomial, bool) {
	shared := false
	var out []algebra.Power
	for _, pw := range a.Powers() {
		if e := b.Exp(pw.Var); e > 0 {
			shared, pw.Exp = true, max(pw.Exp, e)
		}
		out = append(out, pw)
	}
	for _, pw := range b.Powers() {
		if a.Exp(pw.Var) == 0 {
			out = append(out, pw)
		}
	}
	return algebra.NewMonomial(out...), shared
}

// multiple is the monic multiple of p with the leading monomial m.
func multiple(p algebra.Poly, m algebra.Monomial) algebra.Poly {
	lead, c := p.Leading()
	q, ok := m.Div(lead)
	inv, ok2 := c.Inv()
	if !ok || !ok2 {
		return algebra.Poly{}
	}
	return p.Mul(algebra.FromTerms([]algebra.Term{{Mono: q, Coef: inv}}))
}
