package algebra

import (
	"maps"
	"slices"
)

// Subst returns p with q in place of v.
func (p Poly) Subst(v Var, q Poly) Poly {
	return p.SubstMany(map[Var]Poly{v: q})
}

// SubstMany replaces indeterminates by polynomials, all at once: what is put in
// is not substituted again. It is poisoned where a polynomial put in place of an
// indeterminate that occurs is.
func (p Poly) SubstMany(m map[Var]Poly) Poly {
	if p.Err() != nil {
		return p
	}
	consts := true
	var vars []Var
	for _, v := range sortedKeys(m) {
		q := m[v]
		if !p.Has(v) {
			continue
		}
		if q.Err() != nil {
			return q
		}
		_, c := q.IsConst()
		consts = consts && c
		vars = append(vars, v)
	}
	if len(vars) == 0 {
		return p
	}
	if consts {
		values := make(map[Var]Rat, len(vars))
		for _, v := range vars {
			values[v], _ = m[v].IsConst()
		}
		return p.EvalPartial(values)
	}
	return p.subst(vars, m, &budget{MaxProducts})
}

// budget bounds the work of many products together.
type budget struct{ left int }

// mul multiplies unless the work is spent.
func (b *budget) mul(p, q Poly) Poly {
	n := p.Len() * q.Len()
	b.left -= n * (4 + (p.someBits()+q.someBits())/16)
	if n > MaxProducts || b.left < 0 {
		return poison(errProducts)
	}
	return p.Mul(q)
}

// someBits returns the bit length of a coefficient in the middle, where those of
// a power are largest.
func (p Poly) someBits() int {
	if n := p.Len(); n > 0 {
		return p.r.coefs[n/2].BitLen()
	}
	return 0
}

func (p Poly) subst(vars []Var, m map[Var]Poly, work *budget) Poly {
	for len(vars) > 0 && !p.Has(vars[0]) {
		vars = vars[1:]
	}
	if len(vars) == 0 {
		return p
	}
	q := m[vars[0]]
	var sum Poly
	last := 0
	for i, x := range p.parts(vars[0]) {
		if i > 0 {
			sum = work.mul(sum, q.Pow(last-x.exp))
		}
		sum = sum.Add(x.poly.subst(vars[1:], m, work))
		last = x.exp
		if sum.Err() != nil {
			return sum
		}
	}
	return work.mul(sum, q.Pow(last))
}

// EvalPartial replaces indeterminates by numbers.
func (p Poly) EvalPartial(values map[Var]Rat) Poly {
	if p.Len() == 0 {
		return p
	}
	r := p.r
	keep := make([]Var, 0, len(r.vars))
	var known []int // fields of the indeterminates with a value
	var powers []func(int) (Rat, bool)
	for k, v := range r.vars {
		if c, ok := values[v]; ok {
			known = append(known, k+1)
			powers = append(powers, powersOf(c))
		} else {
			keep = append(keep, v)
		}
	}
	if len(known) == 0 {
		return p
	}
	c := newCollector(keep, r.degree())
	e := make([]uint64, c.lay.words)
	work := 0
	for i, coef := range r.coefs {
		t := r.term(i)
		deg := r.lay.field(t, 0)
		for n, k := range known {
			x := r.lay.field(t, k)
			if x == 0 {
				continue
			}
			deg -= x
			y, ok := powers[n](x)
			if work += productCost(coef, y); !ok || work > MaxProducts {
				return poison(errBits)
			}
			coef = coef.Mul(y)
		}
		if coef.b != nil && coef.BitLen() > MaxBits {
			return poison(errBits)
		}
		clear(e)
		c.lay.put(e, 0, deg)
		j := 0
		for k, v := range r.vars {
			if j < len(keep) && keep[j] == v {
				c.lay.put(e, j+1, r.lay.field(t, k+1))
				j++
			}
		}
		c.add(e, coef)
	}
	return c.poly()
}

// powersOf returns a function giving powers of c, which remembers small ones.
func powersOf(c Rat) func(int) (Rat, bool) {
	known := []Rat{Int(1), c}
	return func(n int) (Rat, bool) {
		if n > 64 || c.b != nil && n > MaxBits/c.BitLen() {
			return c.Pow(n)
		}
		for len(known) <= n {
			known = append(known, known[len(known)-1].Mul(c))
		}
		return known[n], true
	}
}

// productCost weighs a product of numbers against a product of small terms.
func productCost(a, b Rat) int {
	if a.b == nil && b.b == nil {
		return 1
	}
	wa, wb := a.BitLen()/64+1, b.BitLen()/64+1
	return 8 + wa + wb + wa*wb/16
}

// Eval returns the value of p where each indeterminate v is at(v); it is exact.
// It returns false where p is poisoned, the value is beyond MaxBits or the work
// beyond MaxProducts.
func (p Poly) Eval(at func(Var) Rat) (Rat, bool) {
	if p.r == nil {
		return Rat{}, true
	}
	if p.r.err != nil {
		return Rat{}, false
	}
	r := p.r
	powers := make([]func(int) (Rat, bool), len(r.vars))
	for k, v := range r.vars {
		powers[k] = powersOf(at(v))
	}
	var sum Rat
	work := 0
	for i, c := range r.coefs {
		t := r.term(i)
		for k := range r.vars {
			e := r.lay.field(t, k+1)
			if e == 0 {
				continue
			}
			y, ok := powers[k](e)
			if work += productCost(c, y); !ok || work > MaxProducts {
				return Rat{}, false
			}
			c = c.Mul(y)
		}
		sum = sum.Add(c)
		if sum.b != nil && sum.BitLen() > MaxBits {
			return Rat{}, false
		}
	}
	return sum, true
}

// sortedKeys returns the keys of m in order.
func sortedKeys[T any](m map[Var]T) []Var {
	return slices.Sorted(maps.Keys(m))
}
