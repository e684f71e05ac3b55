package algebra

import "slices"

// align returns the packed terms of a and b over common indeterminates in a
// layout for the given degree; false where they would exceed MaxWords.
func align(a, b *rep, degree int) (vars []Var, lay layout, ea, eb []uint64, ok bool) {
	vars = union(a.vars, b.vars)
	lay = layoutFor(len(vars), degree)
	if (len(a.coefs)+len(b.coefs))*lay.words > MaxWords {
		return nil, lay, nil, nil, false
	}
	return vars, lay, repack(a.exps, a.vars, a.lay, vars, lay), repack(b.exps, b.vars, b.lay, vars, lay), true
}

// Add returns p + q.
func (p Poly) Add(q Poly) Poly { return p.plus(q, false) }

// Sub returns p - q.
func (p Poly) Sub(q Poly) Poly { return p.plus(q, true) }

func (p Poly) plus(q Poly, minus bool) Poly {
	if e, ok := bad(p, q); ok {
		return e
	}
	if q.r == nil {
		return p
	}
	if p.r == nil {
		if minus {
			return q.Neg()
		}
		return q
	}
	a, b := p.r, q.r
	vars, lay, ea, eb, ok := align(a, b, max(a.degree(), b.degree()))
	if !ok {
		return poison(errWords)
	}
	w := lay.words
	exps := make([]uint64, 0, len(ea)+len(eb))
	coefs := make([]Rat, 0, len(a.coefs)+len(b.coefs))
	i, j := 0, 0
	for i < len(a.coefs) && j < len(b.coefs) {
		ti, tj := ea[i*w:(i+1)*w], eb[j*w:(j+1)*w]
		c := compare(ti, tj)
		switch {
		case c > 0:
			exps = append(exps, ti...)
			coefs = append(coefs, a.coefs[i])
			i++
		case c < 0:
			x := b.coefs[j]
			if minus {
				x = x.Neg()
			}
			exps = append(exps, tj...)
			coefs = append(coefs, x)
			j++
		default:
			x := b.coefs[j]
			if minus {
				x = x.Neg()
			}
			if x = a.coefs[i].Add(x); !x.IsZero() {
				exps = append(exps, ti...)
				coefs = append(coefs, x)
			}
			i, j = i+1, j+1
		}
	}
	exps = append(append(exps, ea[i*w:]...), eb[j*w:]...)
	coefs = append(coefs, a.coefs[i:]...)
	for _, x := range b.coefs[j:] {
		if minus {
			x = x.Neg()
		}
		coefs = append(coefs, x)
	}
	return canonical(vars, lay, exps, coefs)
}

// Neg returns -p.
func (p Poly) Neg() Poly { return p.Scale(Int(-1)) }

// Scale returns c p.
func (p Poly) Scale(c Rat) Poly {
	if p.r == nil || p.r.err != nil || c.IsOne() {
		return p
	}
	if c.IsZero() {
		return Poly{}
	}
	if c.b != nil && c.BitLen() > MaxBits {
		return poison(errBits)
	}
	coefs := make([]Rat, len(p.r.coefs))
	for i, x := range p.r.coefs {
		coefs[i] = x.Mul(c)
		if coefs[i].b != nil && coefs[i].BitLen() > MaxBits {
			return poison(errBits)
		}
	}
	return Poly{&rep{vars: p.r.vars, lay: p.r.lay, exps: p.r.exps, coefs: coefs}}
}

// Deriv returns the partial derivative in v.
func (p Poly) Deriv(v Var) Poly {
	k := p.index(v)
	if k < 0 {
		if p.Err() != nil {
			return p
		}
		return Poly{}
	}
	r := p.r
	w := r.lay.words
	less := make([]uint64, w)
	r.lay.put(less, 0, 1)
	r.lay.put(less, k+1, 1)
	exps := make([]uint64, 0, len(r.exps))
	coefs := make([]Rat, 0, len(r.coefs))
	for i, c := range r.coefs {
		t := r.term(i)
		e := r.lay.field(t, k+1)
		if e == 0 {
			continue
		}
		for j, x := range t {
			exps = append(exps, x-less[j])
		}
		coefs = append(coefs, c.Mul(Int(int64(e))))
	}
	return canonical(r.vars, r.lay, exps, coefs)
}

// part is the coefficient of a power of an indeterminate.
type part struct {
	exp  int
	poly Poly
}

// parts splits p by the powers of v that occur, the highest first.
func (p Poly) parts(v Var) []part {
	k := p.index(v)
	if k < 0 {
		if p.r == nil {
			return nil
		}
		return []part{{0, p}}
	}
	r := p.r
	exponents := make([]int, 0, len(r.coefs))
	for i := range r.coefs {
		exponents = append(exponents, r.lay.field(r.term(i), k+1))
	}
	slices.Sort(exponents)
	exponents = slices.Compact(exponents)
	ps := make([]part, len(exponents))
	exps := make([][]uint64, len(ps))
	coefs := make([][]Rat, len(ps))
	unit := make([]uint64, r.lay.words)
	r.lay.put(unit, 0, 1)
	r.lay.put(unit, k+1, 1)
	for i, c := range r.coefs {
		t := r.term(i)
		e := r.lay.field(t, k+1)
		j, _ := slices.BinarySearch(exponents, e)
		for n, x := range t {
			exps[j] = append(exps[j], x-uint64(e)*unit[n])
		}
		coefs[j] = append(coefs[j], c)
	}
	for j, e := range exponents {
		ps[len(ps)-1-j] = part{e, canonical(r.vars, r.lay, exps[j], coefs[j])}
	}
	return ps
}

// Coeffs returns p as a polynomial in v: the coefficient of v^k is at index k,
// up to the degree. It is empty where p is 0. Where p is poisoned, or its degree
// in v is MaxTerms or more, the one element is poisoned.
func (p Poly) Coeffs(v Var) []Poly {
	if p.Err() != nil {
		return []Poly{p}
	}
	d := p.Degree(v)
	if d >= MaxTerms {
		return []Poly{poison(errTerms)}
	}
	out := make([]Poly, d+1)
	for _, x := range p.parts(v) {
		out[x.exp] = x.poly
	}
	return out
}
