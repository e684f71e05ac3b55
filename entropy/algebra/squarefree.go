package algebra

import "slices"

// SquareFree writes p as unit times a product of powers of polynomials with
// coprime integer coefficients. Where complete is true none of them has a square
// factor and no two have a common factor; otherwise the work allowed to GCD ran
// out and they are some factors only. The unit is 0, and there are no factors,
// where p is 0 or poisoned.
//
// The method is that of D. Y. Y. Yun, On square-free decomposition algorithms,
// 1976, applied to one indeterminate after the other.
func SquareFree(p Poly) (unit Rat, factors []Factor, complete bool) {
	if p.Len() == 0 {
		return Rat{}, nil, p.Err() == nil
	}
	unit, p = p.Primitive()
	if p.Err() != nil {
		return Rat{}, nil, false
	}
	whole := p
	complete = true
	m := p.MonomialContent()
	for _, w := range m.Powers() {
		factors = append(factors, Factor{Variable(w.Var), w.Exp})
	}
	p, _ = p.DivExact(monomialPoly(m))
	for {
		if p.Err() != nil {
			complete = false
			break
		}
		if _, constant := p.IsConst(); constant {
			break
		}
		v := p.r.vars[0]
		s := gcdState{left: gcdWork}
		content := s.contentGCD(Poly{}, p, v)
		if s.left < 0 {
			complete = false
			break
		}
		part, _ := p.DivExact(content)
		list, ok := yun(part, v)
		if !ok {
			complete = false
			break
		}
		factors = append(factors, list...)
		p = content
	}
	if !complete {
		return unit, []Factor{{whole, 1}}, false
	}
	// Factors from different indeterminates are coprime: those of the content
	// are free of v, and those of the rest have no factor free of v.
	slices.SortFunc(factors, func(x, y Factor) int { return x.Base.compareTo(y.Base) })
	return unit, factors, true
}

// yun needs p of coprime coefficients in v.
func yun(p Poly, v Var) ([]Factor, bool) {
	d := p.Deriv(v)
	g, ok := GCD(p, d)
	if !ok {
		return nil, false
	}
	w, ok1 := p.DivExact(g)
	y, ok2 := d.DivExact(g)
	if !ok1 || !ok2 {
		return nil, false
	}
	var list []Factor
	for i := 1; ; i++ {
		z := y.Sub(w.Deriv(v))
		if z.Err() != nil {
			return nil, false
		}
		f := w
		if !z.IsZero() {
			if f, ok = GCD(w, z); !ok {
				return nil, false
			}
		}
		if _, constant := f.IsConst(); !constant {
			_, f = f.Primitive()
			list = append(list, Factor{f, i})
		}
		if z.IsZero() {
			return list, true
		}
		w, ok1 = w.DivExact(f)
		y, ok2 = z.DivExact(f)
		if !ok1 || !ok2 {
			return nil, false
		}
	}
}
