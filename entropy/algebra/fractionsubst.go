package algebra

import "slices"

// Subst returns f with g in place of v.
func (f Fraction) Subst(v Var, g Fraction) Fraction {
	return f.SubstMany(map[Var]Fraction{v: g})
}

// SubstMany replaces indeterminates by fractions, all at once. It is poisoned
// where a fraction put in place of an indeterminate that occurs is, and, with
// ErrDivision, where the denominator becomes zero.
func (f Fraction) SubstMany(m map[Var]Fraction) Fraction {
	if f.Err() != nil {
		return f
	}
	used := false
	for _, v := range sortedKeys(m) {
		if f.Has(v) {
			used = true
			if m[v].Err() != nil {
				return m[v]
			}
		}
	}
	if !used {
		return f
	}
	r := substFractions(f.num, m)
	for _, d := range f.den {
		b, ok := substFractions(d.Base, m).Inv()
		if !ok {
			return Fraction{num: poison(ErrDivision)}
		}
		r = r.Mul(b.Pow(d.Exp))
	}
	return r
}

// substFractions substitutes over one denominator: with p of degree d in v, and
// N/D in place of v, the numerator is the sum of c_k N^k D^(d-k).
func substFractions(p Poly, m map[Var]Fraction) Fraction {
	var vars []Var
	polys := make(map[Var]Poly, len(m))
	fractions := false
	for _, v := range sortedKeys(m) {
		if p.Has(v) {
			vars = append(vars, v)
			polys[v] = m[v].num
			fractions = fractions || len(m[v].den) > 0
		}
	}
	if !fractions {
		return Fraction{num: p.SubstMany(polys)}
	}
	h := homogeneous{num: polys, den: make(map[Var]Poly), degree: make(map[Var]int), work: budget{MaxProducts}}
	var lists []Fraction
	for _, v := range vars {
		h.degree[v] = p.Degree(v)
		h.den[v] = m[v].Den()
		lists = append(lists, Fraction{Const(Int(1)), m[v].den}.Pow(h.degree[v]))
	}
	num := h.subst(p, vars)
	if num.Err() != nil {
		return Fraction{num: num}
	}
	den := Fraction{num: Const(Int(1))}
	for _, l := range lists {
		den = den.Mul(l)
	}
	if den.Err() != nil {
		return den
	}
	return reduce(num, den.den, func(int) bool { return true })
}

type homogeneous struct {
	num, den map[Var]Poly
	degree   map[Var]int
	work     budget
}

func (h *homogeneous) subst(p Poly, vars []Var) Poly {
	if len(vars) == 0 || p.r == nil || p.r.err != nil {
		return p
	}
	v := vars[0]
	n, d := h.num[v], h.den[v]
	var sum Poly
	parts := p.parts(v)
	last := 0
	for i, x := range parts {
		if i > 0 {
			sum = h.work.mul(sum, n.Pow(last-x.exp))
		}
		sum = sum.Add(h.work.mul(h.subst(x.poly, vars[1:]), d.Pow(h.degree[v]-x.exp)))
		last = x.exp
		if sum.Err() != nil {
			return sum
		}
	}
	return h.work.mul(sum, n.Pow(last))
}

// FromFactors returns num over the product of the given powers, which are of any
// polynomials with positive exponents; it is poisoned with ErrDivision where one
// of them is 0, and with ErrExponent where an exponent is below 1.
func FromFactors(num Poly, den []Factor) Fraction {
	f := FromPoly(num)
	for _, d := range slices.Clone(den) {
		if d.Exp < 1 {
			return Fraction{num: poison(ErrExponent)}
		}
		f = f.Mul(FromPoly(d.Base).Pow(-d.Exp))
	}
	return f
}
