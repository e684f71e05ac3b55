package identity

import (
	"creaseproof/entropy/algebra"
	"creaseproof/identity/exact"
	"creaseproof/identity/gram"
)

// byDivision proves a target T >= 0 from an assumption P >= 0 that it divides,
// P = Q T: where Q is positive, or Q + m T is a sum of squares times
// assumptions, with
//
//	(Q + m T) T = P + m T²,    m > 0,
//
// or Q = T^2k R with R positive or R - m T² such a sum, with P T = R T^(2k+2). In
// all but the first T vanishes where the multiplier does. It reports whether the checker accepted one
// of these.
func (d *decider) byDivision(g *exact.Gap) (bool, error) {
	r := d.reduction(g)
	t := r.Normal(r.Target)
	if t.IsZero() || t.Err() != nil || t.Len() > maxLeaf {
		return false, nil
	}
	one := algebra.Const(algebra.Int(1))
	for i, pos := range r.Positive {
		if d.Ctx.Err() != nil {
			return false, d.Ctx.Err()
		}
		q, ok := pos.Poly.DivExact(t)
		if !ok {
			continue
		}
		for _, p := range r.divided(q, t, gram.Square{Weight: algebra.Int(1), Factors: []int{i}, Base: one}) {
			if cert, err := r.certify(p); err == nil {
				d.certified("a multiple of the gap is assumed", g, r, p, cert)
				return true, nil
			}
		}
	}
	return false, nil
}

// divided lists the proofs of t >= 0 that are tried, where p = q t.
func (r *reduction) divided(q, t algebra.Poly, p gram.Square) []*gram.Proof {
	var out []*gram.Proof
	if m, ok := r.cone(q); ok && r.strict(m) {
		out = append(out, &gram.Proof{Multiplier: m, Squares: []gram.Square{p}})
	}
	for _, by := range []algebra.Rat{algebra.Int(1), algebra.Frac64(1, 2), algebra.Int(2)} {
		if m, ok := r.cone(q.Add(t.Scale(by))); ok && len(m) > 0 {
			out = append(out, &gram.Proof{Multiplier: m, Squares: []gram.Square{p, {Weight: by, Base: t}}})
		}
	}
	half := t
	for {
		next, ok := q.DivExact(t.Mul(t))
		if !ok {
			break
		}
		q, half = next, half.Mul(t)
		if _, constant := t.IsConst(); constant || half.Err() != nil {
			return out
		}
	}
	times := func(m []gram.Square) []gram.Square {
		for i := range m {
			m[i].Base = m[i].Base.Mul(half)
		}
		return m
	}
	if m, ok := r.cone(q); ok && r.strict(m) && len(m) > 0 {
		out = append(out, &gram.Proof{Multiplier: []gram.Square{p}, Squares: times(m)})
	}
	for _, by := range []algebra.Rat{algebra.Frac64(1, 4), algebra.Frac64(1, 16)} {
		if m, ok := r.cone(q.Sub(t.Mul(t).Scale(by))); ok {
			whole := gram.Square{Weight: by, Base: t.Mul(half)}
			out = append(out, &gram.Proof{Multiplier: []gram.Square{p}, Squares: append(times(m), whole)})
		}
	}
	return out
}
