package campaign

import "creaseproof/entropy/formula"

const maxDepth = 4 // of the derivatives in a formula whose Euler expression is taken

// euler is the Euler expression of f for an unknown: the sum over all indices
// I of (-D)^I f_I, where f_I is the derivative of f by the unknown's derivative
// of index I. Varying the unknown by x^I/I! gives
// sum over J <= I of f_J x^(I-J)/(I-J)!, from which f_I follows.
func (v *view) euler(f formula.Node, u string, order int) (series, error) {
	depth := v.depth(f, 0)
	if depth > maxDepth || v.vary != "" {
		return series{}, errOutside
	}
	top := order + depth
	partial := map[mono]series{}
	out := constant(order, zero)
	for _, i := range indices(len(v.coords), depth) {
		w := *v
		w.vary, w.by = u, i
		s, err := w.value(f, top+1)
		if err != nil {
			return out, err
		}
		s = s.deriv(variation).cut(top)
		for m := range s.rest { // to first order only
			if m[variation] > 0 {
				delete(s.rest, m)
			}
		}
		for j, p := range partial {
			if k, c, ok := monomial(i, j); ok {
				x := constant(top, zero)
				x.accumulate(k, c)
				s = s.add(p.mul(x).scale(one.neg()))
			}
		}
		partial[i] = s
		term := s
		for k, e := range i {
			for range e {
				term = term.deriv(k).scale(one.neg())
			}
		}
		out = out.add(term.cut(order))
	}
	return out, nil
}

// monomial is x^(i-j)/(i-j)!, where i >= j.
func monomial(i, j mono) (mono, number, bool) {
	f := one
	for k := range i {
		if i[k] < j[k] {
			return i, zero, false
		}
		i[k] -= j[k]
		for n := 2; n <= int(i[k]); n++ {
			inv, _ := whole(n).inverse()
			f = f.mul(inv)
		}
	}
	return i, f, true
}

// indices are the multi-indices of degree at most d, by degree.
func indices(n, d int) []mono {
	var out []mono
	for total := range d + 1 {
		var put func(i, left int, m mono)
		put = func(i, left int, m mono) {
			if i == n-1 {
				m[i] = int8(left)
				out = append(out, m)
				return
			}
			for e := range left + 1 {
				m[i] = int8(e)
				put(i+1, left-e, m)
			}
		}
		put(0, total, mono{})
	}
	return out
}

// depth bounds the order of the derivatives of unknowns in a formula.
func (v *view) depth(n formula.Node, above int) int {
	most := above
	see := func(x formula.Node, d int) { most = max(most, v.depth(x, d)) }
	formula.Walk(n, func(x formula.Node) bool {
		switch x := x.(type) {
		case *formula.Name:
			if f, ok := v.lets[x.ID]; ok {
				see(f, above)
			}
		case *formula.Deriv:
			if f, ok := v.lets[x.Of]; ok {
				see(f, above+len(x.By))
			} else {
				most = max(most, above+len(x.By))
			}
		case *formula.TotalDeriv:
			see(x.Arg, above+len(x.By))
			return false
		case *formula.Call:
			if x.Func == "div" {
				see(x.Args[0], above+1)
				return false
			}
			if x.Func == "euler" {
				most = maxDepth + 1
			}
		case *formula.Field:
			for _, f := range v.fields[x.ID] {
				see(f, above)
			}
		case *formula.Component:
			for _, f := range v.fields[x.Of] {
				see(f, above)
			}
		}
		return true
	})
	return most
}
