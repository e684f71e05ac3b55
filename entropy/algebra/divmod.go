package algebra

import (
	"container/heap"
	"slices"
)

// DivMod divides p by several divisors at once: p is the sum of quotients times
// divisors plus rem, and no term of rem is a multiple of the leading monomial of
// a divisor, leading in the given order (nil is GradedLex). Where more than one
// divisor applies the first is taken; a divisor that is 0 never does, and its
// quotient is 0. For every i the leading monomial of quotient i times divisor i is
// at most that of p. The order must be a monomial order: total, with 1 the
// smallest, and kept by multiplication.
//
// Where an argument is poisoned or a limit is reached all results are poisoned.
func (p Poly) DivMod(divisors []Poly, order func(a, b Monomial) int) (quotients []Poly, rem Poly) {
	lost := func(err error) ([]Poly, Poly) {
		q := slices.Repeat([]Poly{poison(err)}, len(divisors))
		return q, poison(err)
	}
	if p.Err() != nil {
		return lost(p.Err())
	}
	if order == nil {
		order = GradedLex
	}
	byOrder := make([][]Term, len(divisors))
	for i, d := range divisors {
		if d.Err() != nil {
			return lost(d.Err())
		}
		byOrder[i] = ordered(d, order)
	}
	left := remaining{order: order, coef: make(map[Monomial]Rat, p.Len())}
	for m, c := range p.Terms() {
		left.coef[m] = c
		left.keys = append(left.keys, m)
	}
	heap.Init(&left)
	quo := make([][]Term, len(divisors))
	var rest []Term
	work := 0
	for left.Len() > 0 {
		m := heap.Pop(&left).(Monomial)
		c := left.coef[m]
		delete(left.coef, m)
		if c.IsZero() {
			continue
		}
		if c.b != nil && c.BitLen() > MaxBits {
			return lost(errBits)
		}
		i, f := leadingDivisor(byOrder, m)
		if i < 0 {
			rest = append(rest, Term{m, c})
			continue
		}
		d := byOrder[i]
		c, _ = c.Quo(d[0].Coef)
		work += len(d) * stepCost(c)
		if work > MaxProducts || len(left.coef) > MaxTerms {
			return lost(errWork)
		}
		quo[i] = append(quo[i], Term{f, c})
		for _, t := range d[1:] {
			k := t.Mono.Mul(f)
			if !k.Valid() {
				return lost(errExponent)
			}
			old, there := left.coef[k]
			if !there {
				heap.Push(&left, k)
			}
			left.coef[k] = old.Sub(t.Coef.Mul(c))
		}
	}
	quotients = make([]Poly, len(divisors))
	for i := range quo {
		if quotients[i] = FromTerms(quo[i]); quotients[i].Err() != nil {
			return lost(quotients[i].Err())
		}
	}
	if rem = FromTerms(rest); rem.Err() != nil {
		return lost(rem.Err())
	}
	return quotients, rem
}

// stepCost weighs one step of a division with coefficient c against a product of
// small terms.
func stepCost(c Rat) int {
	if c.b == nil {
		return 16
	}
	return 32 + c.BitLen()/8
}

// ordered returns the terms of p, larger first in the order.
func ordered(p Poly, order func(a, b Monomial) int) []Term {
	ts := make([]Term, 0, p.Len())
	for m, c := range p.Terms() {
		ts = append(ts, Term{m, c})
	}
	slices.SortFunc(ts, func(a, b Term) int { return order(b.Mono, a.Mono) })
	return ts
}

// leadingDivisor returns the first divisor whose leading monomial divides m, and
// the quotient; -1 where there is none.
func leadingDivisor(divisors [][]Term, m Monomial) (int, Monomial) {
	for i, d := range divisors {
		if len(d) > 0 {
			if f, ok := m.Div(d[0].Mono); ok {
				return i, f
			}
		}
	}
	return -1, One
}

// remaining is a heap of monomials, the largest first, with their coefficients;
// a coefficient may have become zero.
type remaining struct {
	order func(a, b Monomial) int
	coef  map[Monomial]Rat
	keys  []Monomial
}

func (r *remaining) Len() int           { return len(r.keys) }
func (r *remaining) Less(i, j int) bool { return r.order(r.keys[i], r.keys[j]) > 0 }
func (r *remaining) Swap(i, j int)      { r.keys[i], r.keys[j] = r.keys[j], r.keys[i] }
func (r *remaining) Push(x any)         { r.keys = append(r.keys, x.(Monomial)) }
func (r *remaining) Pop() any {
	n := len(r.keys) - 1
	m := r.keys[n]
	r.keys = r.keys[:n]
	return m
}
