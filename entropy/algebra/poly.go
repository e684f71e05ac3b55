package algebra

import (
	"iter"
	"slices"
)

// Poly is a polynomial over the rationals. It is immutable; the zero value is
// 0. Its terms are kept in graded lexicographic order, larger first (GradedLex),
// and equal polynomials have the same representation.
//
// A Poly may be poisoned: it was lost to a limit, Err says to which. Every
// operation on a poisoned polynomial gives a poisoned one, and no predicate
// holds of it: IsZero, Equal, the ok of IsConst and DivExact are false.
type Poly struct {
	r *rep // nil is 0
}

// rep is a polynomial with at least one term, or a poisoned one (err is set and
// all else empty). The indeterminates are exactly those that occur, sorted, and
// the layout is layoutFor of their number and the total degree.
type rep struct {
	vars  []Var
	lay   layout
	exps  []uint64 // lay.words for each term
	coefs []Rat    // none is zero
	err   error
}

// Term is a coefficient times a monomial.
type Term struct {
	Mono Monomial
	Coef Rat
}

func poison(err error) Poly { return Poly{&rep{err: err}} }

// Const returns the constant c.
func Const(c Rat) Poly {
	if c.IsZero() {
		return Poly{}
	}
	if c.b != nil && c.BitLen() > MaxBits {
		return poison(errBits)
	}
	return Poly{&rep{lay: layoutFor(0, 0), exps: []uint64{0}, coefs: []Rat{c}}}
}

// Variable returns the polynomial v.
func Variable(v Var) Poly {
	lay := layoutFor(1, 1)
	e := []uint64{0}
	lay.put(e, 0, 1)
	lay.put(e, 1, 1)
	return Poly{&rep{vars: []Var{v}, lay: lay, exps: e, coefs: []Rat{Int(1)}}}
}

// FromTerms returns the sum of the terms, in any order and with repetitions.
func FromTerms(terms []Term) Poly {
	if len(terms) > MaxProducts {
		return poison(errProducts)
	}
	seen := make(map[Var]struct{})
	deg := 0
	for _, t := range terms {
		if !t.Mono.Valid() {
			return poison(ErrExponent)
		}
		deg = max(deg, t.Mono.Degree())
		for i := range t.Mono.len() {
			v, _ := t.Mono.at(i)
			seen[v] = struct{}{}
		}
	}
	vars := sortedKeys(seen)
	c := newCollector(vars, deg)
	e := make([]uint64, c.lay.words)
	for _, t := range terms {
		clear(e)
		c.lay.put(e, 0, t.Mono.Degree())
		for i := range t.Mono.len() {
			v, x := t.Mono.at(i)
			k, _ := slices.BinarySearch(vars, v)
			c.lay.put(e, k+1, x)
		}
		c.add(e, t.Coef)
	}
	return c.poly()
}

// Err returns nil, or why p was lost.
func (p Poly) Err() error {
	if p.r == nil {
		return nil
	}
	return p.r.err
}

// IsZero reports whether p is 0; a poisoned polynomial is not.
func (p Poly) IsZero() bool { return p.r == nil }

// Equal reports whether p = q; false where either is poisoned.
func (p Poly) Equal(q Poly) bool {
	a, b := p.r, q.r
	if a == nil || b == nil {
		return a == b
	}
	if a.err != nil || b.err != nil || len(a.coefs) != len(b.coefs) {
		return false
	}
	return a == b || slices.Equal(a.vars, b.vars) && slices.Equal(a.exps, b.exps) &&
		slices.EqualFunc(a.coefs, b.coefs, Rat.Equal)
}

// compareTo is a total order on unpoisoned polynomials, without meaning.
func (p Poly) compareTo(q Poly) int {
	a, b := p.r, q.r
	switch {
	case a == b:
		return 0
	case a == nil:
		return -1
	case b == nil:
		return 1
	}
	if c := len(a.coefs) - len(b.coefs); c != 0 {
		return c
	}
	if c := slices.Compare(a.vars, b.vars); c != 0 {
		return c
	}
	if c := slices.Compare(a.exps, b.exps); c != 0 {
		return c
	}
	return slices.CompareFunc(a.coefs, b.coefs, Rat.Cmp)
}

// IsConst returns the value of p where p is constant.
func (p Poly) IsConst() (Rat, bool) {
	if p.r == nil {
		return Rat{}, true
	}
	if p.r.err != nil || len(p.r.vars) > 0 {
		return Rat{}, false
	}
	return p.r.coefs[0], true
}

// Len returns the number of terms.
func (p Poly) Len() int {
	if p.r == nil {
		return 0
	}
	return len(p.r.coefs)
}

func (r *rep) term(i int) []uint64 {
	return r.exps[i*r.lay.words : (i+1)*r.lay.words]
}

func (r *rep) monomial(i int) Monomial {
	var buf [16]Power
	ps := buf[:0]
	t := r.term(i)
	for k, v := range r.vars {
		if e := r.lay.field(t, k+1); e > 0 {
			ps = append(ps, Power{v, e})
		}
	}
	return encode(ps)
}

// Terms yields the terms, larger first in graded lexicographic order.
func (p Poly) Terms() iter.Seq2[Monomial, Rat] {
	return func(yield func(Monomial, Rat) bool) {
		for i := range p.Len() {
			if !yield(p.r.monomial(i), p.r.coefs[i]) {
				return
			}
		}
	}
}

// Leading returns the largest monomial in graded lexicographic order and its
// coefficient; 1 and 0 where p is 0 or poisoned.
func (p Poly) Leading() (Monomial, Rat) {
	if p.Len() == 0 {
		return One, Rat{}
	}
	return p.r.monomial(0), p.r.coefs[0]
}

// Vars returns the indeterminates that occur, sorted.
func (p Poly) Vars() []Var {
	if p.r == nil {
		return nil
	}
	return slices.Clone(p.r.vars)
}

func (p Poly) index(v Var) int {
	if p.r == nil {
		return -1
	}
	i, found := slices.BinarySearch(p.r.vars, v)
	if !found {
		return -1
	}
	return i
}

// Has reports whether v occurs.
func (p Poly) Has(v Var) bool { return p.index(v) >= 0 }

// Degree returns the degree in v; -1 where p is 0 or poisoned.
func (p Poly) Degree(v Var) int {
	if p.Len() == 0 {
		return -1
	}
	k := p.index(v)
	if k < 0 {
		return 0
	}
	d := 0
	for i := range p.r.coefs {
		d = max(d, p.r.lay.field(p.r.term(i), k+1))
	}
	return d
}

// TotalDegree returns the total degree; -1 where p is 0 or poisoned.
func (p Poly) TotalDegree() int {
	if p.Len() == 0 {
		return -1
	}
	return p.r.degree()
}

func (r *rep) degree() int { return r.lay.field(r.exps, 0) }

// canonical makes a polynomial of sorted terms without zero coefficients, over
// indeterminates of which some may not occur. It keeps the slices it is given.
func canonical(vars []Var, lay layout, exps []uint64, coefs []Rat) Poly {
	if len(coefs) == 0 {
		return Poly{}
	}
	if len(coefs) > MaxTerms {
		return poison(errTerms)
	}
	for i := range coefs {
		if coefs[i].b != nil && coefs[i].BitLen() > MaxBits {
			return poison(errBits)
		}
	}
	var buf [8]uint64
	seen := append(buf[:0], exps[:lay.words]...)
	if lay.words == 1 {
		s := seen[0]
		for _, e := range exps {
			s |= e
		}
		seen[0] = s
	} else {
		for i := lay.words; i < len(exps); i += lay.words {
			for w := range seen {
				seen[w] |= exps[i+w]
			}
		}
	}
	all := true
	for k := range vars {
		all = all && lay.field(seen, k+1) > 0
	}
	to := vars
	if !all {
		to = make([]Var, 0, len(vars))
		for k, v := range vars {
			if lay.field(seen, k+1) > 0 {
				to = append(to, v)
			}
		}
	}
	lt := layoutFor(len(to), lay.field(exps, 0))
	if !all || lt != lay {
		exps = repack(exps, vars, lay, to, lt)
	}
	return Poly{&rep{vars: to, lay: lt, exps: exps, coefs: coefs}}
}

// bad returns the poisoned one of p and q, and whether there is one.
func bad(p, q Poly) (Poly, bool) {
	if p.Err() != nil {
		return p, true
	}
	return q, q.Err() != nil
}
