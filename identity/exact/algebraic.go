package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// maxAlgebraic bounds the dimension over the rationals of the algebras in which
// numbers are compared with zero.
const maxAlgebraic = 36

// vanishingNumbers reports whether p is certainly zero since its coefficients,
// as a polynomial in all but constant roots, cosines and sines, are algebraic
// numbers that are certainly zero.
func (d *Problem) vanishingNumbers(p algebra.Poly) bool {
	if p.Err() != nil || p.IsZero() {
		return false
	}
	number := map[algebra.Var]bool{}
	found := false
	for _, v := range p.Vars() {
		number[v] = d.isNumber(v)
		found = found || number[v]
	}
	if !found {
		return false
	}
	var parts []algebra.Poly
	index := map[string]int{}
	for m, c := range p.Terms() {
		var of, rest []algebra.Power
		for _, pw := range m.Powers() {
			if number[pw.Var] {
				of = append(of, pw)
			} else {
				rest = append(rest, pw)
			}
		}
		one := algebra.Int(1)
		key := d.Ring.Format(algebra.FromPoly(algebra.FromTerms([]algebra.Term{{Mono: algebra.NewMonomial(rest...), Coef: one}})))
		i, ok := index[key]
		if !ok {
			i = len(parts)
			index[key] = i
			parts = append(parts, algebra.Poly{})
		}
		parts[i] = parts[i].Add(algebra.FromTerms([]algebra.Term{{Mono: algebra.NewMonomial(of...), Coef: c}}))
	}
	return !slices.ContainsFunc(parts, func(q algebra.Poly) bool { return !d.isZeroNumber(q) })
}

// isNumber reports a root, cosine or sine that depends on nothing, with a
// relation over the rationals.
func (d *Problem) isNumber(v algebra.Var) bool {
	q, a := d.Ring.Relation(v)
	s := d.Ring.Symbol(v)
	if q == 0 || a.Err() != nil {
		return false
	}
	if s.Kind == jet.Root {
		if _, ok := s.Arg.IsPoly(); !ok {
			return false
		}
		if c, ok := s.Arg.IsConst(); ok && c.IsOne() {
			return false // an orientation, which has two values
		}
	}
	if s.Kind == jet.Sine && !d.isNumber(s.Partner) {
		return false
	}
	return !slices.ContainsFunc(a.Vars(), func(w algebra.Var) bool { return w != v && !d.isNumber(w) })
}

// isZeroNumber reports whether a polynomial in constant roots, cosines and sines
// is certainly zero. These span an algebra of finite dimension over the rationals,
// in which the powers of p are dependent: t^n = Σ c_i t^i holds for the number
// that p is. With c_k the first coefficient that is not zero, a zero t of this
// other than 0 has |t| >= |c_k|/(|c_k| + max |c_i|), i > k, the leading one
// included (Cauchy's bound for 1/t), so that a smaller number is 0.
func (d *Problem) isZeroNumber(p algebra.Poly) bool {
	if p = d.Ring.ReducePoly(p); p.IsZero() {
		return true
	}
	dimension := 1
	var visit func(algebra.Poly)
	seen := map[algebra.Var]bool{}
	visit = func(p algebra.Poly) {
		for _, v := range p.Vars() {
			if seen[v] || dimension > maxAlgebraic {
				continue
			}
			seen[v] = true
			q, a := d.Ring.Relation(v)
			dimension *= max(q, 1)
			visit(a)
		}
	}
	visit(p)
	if dimension > maxAlgebraic || len(seen) == 0 {
		return false
	}
	c, ok := d.dependence(p, dimension)
	if !ok || len(c) == 0 {
		return false
	}
	k := slices.IndexFunc(c, func(x algebra.Rat) bool { return !x.IsZero() })
	if k == 0 {
		return false
	}
	if k < 0 {
		return true // a power of it is zero
	}
	largest := algebra.Int(1)
	for _, x := range c[k+1:] {
		if x = x.Abs(); x.Cmp(largest) > 0 {
			largest = x
		}
	}
	bound, ok := c[k].Abs().Quo(c[k].Abs().Add(largest))
	if !ok {
		return false
	}
	s, ok := d.Ring.Sign(algebra.FromPoly(algebra.Const(bound.Mul(bound)).Sub(p.Mul(p))), jet.Point{})
	return ok && s > 0
}

// dependence finds c with p^n = Σ_{i<n} c_i p^i in normal forms, n as small as
// it can be.
func (d *Problem) dependence(p algebra.Poly, dimension int) ([]algebra.Rat, bool) {
	powers := []algebra.Poly{algebra.Const(algebra.Int(1))}
	for len(powers) <= dimension {
		next := d.Ring.ReducePoly(powers[len(powers)-1].Mul(p))
		if next.Err() != nil {
			return nil, false
		}
		rows := map[string]int{}
		var a [][]algebra.Rat
		var b []algebra.Rat
		for k, q := range append(slices.Clone(powers), next) {
			for m, c := range q.Terms() {
				key := d.Ring.Format(algebra.FromPoly(algebra.FromTerms([]algebra.Term{{Mono: m, Coef: algebra.Int(1)}})))
				r, ok := rows[key]
				if !ok {
					r = len(a)
					rows[key] = r
					a, b = append(a, make([]algebra.Rat, len(powers))), append(b, algebra.Rat{})
				}
				if k < len(powers) {
					a[r][k] = c
				} else {
					b[r] = c
				}
			}
		}
		if x, _, ok := algebra.SolveRat(a, b); ok {
			return x, true
		}
		powers = append(powers, next)
	}
	return nil, false
}
