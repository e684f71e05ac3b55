package algebra

import "slices"

// shared is a base with its exponents in two denominators.
type shared struct {
	base Poly
	a, b int
}

// common returns the bases of two denominators with their exponents in both,
// sorted. A base that divides another is split off it; split reports whether one
// was.
func common(f, g []Factor) (basis []shared, split bool) {
	basis = make([]shared, 0, len(f)+len(g))
	i, j := 0, 0
	matched := 0
	for i < len(f) || j < len(g) {
		c := 0
		switch {
		case i == len(f):
			c = 1
		case j == len(g):
			c = -1
		default:
			c = f[i].Base.compareTo(g[j].Base)
		}
		switch {
		case c < 0:
			basis = append(basis, shared{f[i].Base, f[i].Exp, 0})
			i++
		case c > 0:
			basis = append(basis, shared{g[j].Base, 0, g[j].Exp})
			j++
		default:
			basis = append(basis, shared{f[i].Base, f[i].Exp, g[j].Exp})
			i, j = i+1, j+1
			matched++
		}
	}
	if matched == len(f) || matched == len(g) {
		return basis, false
	}
	return refine(basis)
}

// smallBase is the number of terms up to which common factors of a base are
// looked for.
const smallBase = 64

// commonFactor looks for a common factor g of p and q that is not constant, and
// returns it with p/g and q/g; they have coprime integer coefficients and do not
// divide each other.
func commonFactor(p, q Poly) (g, pg, qg Poly, ok bool) {
	if p.Len() > smallBase || q.Len() > smallBase || irreducible(p) || irreducible(q) {
		return Poly{}, Poly{}, Poly{}, false
	}
	g, _ = GCD(p, q)
	if _, constant := g.IsConst(); constant || g.Err() != nil {
		return Poly{}, Poly{}, Poly{}, false
	}
	pg, ok1 := p.DivExact(g)
	qg, ok2 := q.DivExact(g)
	return g, pg, qg, ok1 && ok2
}

// refine splits bases until none divides another.
func refine(list []shared) (basis []shared, split bool) {
	todo := slices.Clone(list)
	for len(todo) > 0 {
		p := todo[len(todo)-1]
		todo = todo[:len(todo)-1]
		keep := true
		for i := 0; i < len(basis) && keep; i++ {
			q := &basis[i]
			if p.base.Equal(q.base) {
				q.a, q.b = q.a+p.a, q.b+p.b
				keep = false
				break
			}
			if r, ok := p.base.DivExact(q.base); ok {
				split = true
				q.a, q.b = q.a+p.a, q.b+p.b
				todo = append(todo, shared{r, p.a, p.b})
				keep = false
			} else if r, ok := q.base.DivExact(p.base); ok {
				split = true
				todo = append(todo, shared{r, q.a, q.b}, shared{p.base, p.a + q.a, p.b + q.b})
				basis = slices.Delete(basis, i, i+1)
				keep = false
			} else if g, r, s, ok := commonFactor(p.base, q.base); ok {
				split = true
				todo = append(todo, shared{r, p.a, p.b}, shared{s, q.a, q.b}, shared{g, p.a + q.a, p.b + q.b})
				basis = slices.Delete(basis, i, i+1)
				keep = false
			}
		}
		if keep {
			basis = append(basis, p)
		}
	}
	slices.SortFunc(basis, func(x, y shared) int { return x.base.compareTo(y.base) })
	return basis, split
}

// irreducible reports whether b, of coprime integer coefficients, is seen at a
// glance to be irreducible: it is an indeterminate, or linear in one with a
// constant coefficient.
func irreducible(b Poly) bool {
	r := b.r
	for k := range r.vars {
		count := 0
		for i := range r.coefs {
			t := r.term(i)
			if e := r.lay.field(t, k+1); e > 0 {
				if count++; count > 1 || e > 1 || r.lay.field(t, 0) > 1 {
					count = 2
					break
				}
			}
		}
		if count == 1 {
			return true
		}
	}
	return false
}

// cancel divides num by each base as often as it goes, at most to the exponent.
// The list is not modified.
func cancel(num Poly, den []Factor) (Poly, []Factor) {
	return cancelSome(num, den, func(int) bool { return true })
}

func cancelSome(num Poly, den []Factor, try func(i int) bool) (Poly, []Factor) {
	if num.r == nil || num.r.err != nil {
		return num, nil
	}
	var out []Factor
	for i, d := range den {
		e := d.Exp
		if m, _ := d.Base.Leading(); try(i) && d.Base.Len() == 1 {
			num, e = cancelMonomial(num, m, e)
		} else if try(i) {
			for e > 0 {
				q, ok := num.DivExact(d.Base)
				if !ok {
					break
				}
				num = q
				e--
			}
		}
		if e != d.Exp && out == nil {
			out = append(make([]Factor, 0, len(den)), den[:i]...)
		}
		if out != nil && e > 0 {
			out = append(out, Factor{d.Base, e})
		}
	}
	if out == nil {
		out = den
	}
	return num, out
}

// cancelMonomial divides num by m as often as it goes, at most e times, and
// returns how often is left. It takes one step: e can be large. A base of several
// terms goes less often than num has terms.
func cancelMonomial(num Poly, m Monomial, e int) (Poly, int) {
	have := num.MonomialContent()
	times := e
	var ps []Power
	for _, w := range m.Powers() {
		times = min(times, have.Exp(w.Var)/w.Exp)
	}
	if times == 0 {
		return num, e
	}
	for _, w := range m.Powers() {
		ps = append(ps, Power{w.Var, w.Exp * times})
	}
	if q, ok := num.DivExact(monomialPoly(NewMonomial(ps...))); ok {
		return q, e - times
	}
	return num, e
}

// reduce makes a fraction, trying to cancel the bases for which try holds and
// common factors with small bases.
func reduce(num Poly, den []Factor, try func(i int) bool) Fraction {
	num, den = cancelSome(num, den, try)
	if num.Len() == 0 || num.Len() > 4*smallBase {
		return over(num, den)
	}
	for i := 0; i < len(den); i++ {
		b, e := den[i].Base, den[i].Exp
		if b.Len() > smallBase || irreducible(b) {
			continue
		}
		g, _ := GCD(num, b)
		if _, constant := g.IsConst(); constant || g.Err() != nil {
			continue
		}
		rest, ok1 := b.DivExact(g)
		less, ok2 := num.DivExact(g)
		if !ok1 || !ok2 {
			continue
		}
		num = less
		list := []shared{{rest, e, 0}}
		if e > 1 {
			list = append(list, shared{g, e - 1, 0})
		}
		for j, d := range den {
			if j != i {
				list = append(list, shared{d.Base, d.Exp, 0})
			}
		}
		basis, _ := refine(list)
		den = make([]Factor, len(basis))
		for j, x := range basis {
			den[j] = Factor{x.base, x.a}
		}
		num, den = cancel(num, den)
		i = -1
	}
	return over(num, den)
}

// factors writes p, which is not 0, as a rational times a product of bases.
// It fails at a limit only.
func factors(p Poly) (unit Rat, den []Factor, err error) {
	unit, p = p.Primitive()
	if m := p.MonomialContent(); m != One {
		for _, w := range m.Powers() {
			den = append(den, Factor{Variable(w.Var), w.Exp})
		}
		p, _ = p.DivExact(monomialPoly(m))
	}
	if p.Err() != nil {
		return unit, nil, p.Err()
	}
	if _, ok := p.IsConst(); !ok {
		if p.Len() <= smallBase && !irreducible(p) {
			_, list, _ := SquareFree(p)
			den = append(den, list...)
		} else {
			den = append(den, Factor{p, 1})
		}
	}
	slices.SortFunc(den, func(x, y Factor) int { return x.Base.compareTo(y.Base) })
	return unit, den, nil
}
