package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// zeroSet is a polynomial with the same real zeros as p, where p is defined:
// the product of its square-free factors, with roots squared away where that
// adds no zero. With α > 0 and -β >= 0, α r + β = 0 for r the q-th root of a
// says the same as α^q a = (-β)^q.
func (d *Problem) zeroSet(p algebra.Poly) algebra.Poly {
	p = radical(p)
	for range 4 {
		next, ok := d.unrooted(p)
		if !ok {
			break
		}
		p = radical(next)
	}
	return p
}

func (d *Problem) unrooted(p algebra.Poly) (algebra.Poly, bool) {
	kernels := d.Ring.Kernels(algebra.FromPoly(p))
	for _, v := range slices.Backward(kernels) {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Root || p.Degree(v) != 1 || !slices.ContainsFunc(d.Ring.Support(s.Arg), func(w algebra.Var) bool { return d.Ring.Symbol(w).Kind == jet.Derivative }) {
			continue
		}
		if slices.ContainsFunc(kernels, func(k algebra.Var) bool {
			return k != v && slices.Contains(d.Ring.Kernels(d.Ring.Symbol(k).Arg), v)
		}) {
			continue // the root stands inside another function
		}
		a, ok := s.Arg.IsPoly()
		if !ok {
			continue
		}
		co := p.Coeffs(v)
		alpha, minus := co[1], co[0].Neg()
		if d.Ring.VisiblyPositive(algebra.FromPoly(alpha.Neg())) {
			alpha, minus = alpha.Neg(), minus.Neg()
		}
		if !d.Ring.VisiblyPositive(algebra.FromPoly(alpha)) || !d.Ring.VisiblyNonNegative(algebra.FromPoly(minus)) {
			continue
		}
		out := d.Ring.ReducePoly(alpha.Pow(s.Degree).Mul(a).Sub(minus.Pow(s.Degree)))
		if out.Err() != nil || out.IsZero() {
			continue
		}
		return out, true
	}
	return p, false
}
