package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// onAssumed is the remainder of p by the assumptions that are equations, and by
// those that say the same as equations, since a sum of squares is not positive;
// those that hold one of the given indeterminates are left out. It vanishes only
// where p does at every point that satisfies them; that says nothing of
// derivatives.
func (d *Problem) onAssumed(p algebra.Poly, but ...algebra.Var) algebra.Poly {
	var gens []algebra.Poly
	for _, c := range d.Assumed {
		num := c.Value.Num()
		zeros := d.assumedZeros(c)
		if len(zeros) == 0 || slices.ContainsFunc(d.Ring.Support(algebra.FromPoly(num)), func(v algebra.Var) bool { return slices.Contains(but, v) }) {
			continue
		}
		gens = append(gens, zeros...)
	}
	if len(gens) == 0 || p.IsZero() {
		return p
	}
	_, rem := p.DivMod(d.completed(gens), algebra.GradedLex)
	return d.Ring.ReducePoly(rem)
}

// assumedZeros are polynomials whose common real zeros are the points that
// satisfy an assumption: none where it is no equation and says nothing of the kind.
func (d *Problem) assumedZeros(c Constraint) []algebra.Poly {
	num := c.Value.Num()
	if num.IsZero() {
		return nil
	}
	if c.Relation == "=" {
		if list := d.realZeros(radical(num)); !empty(list) {
			return list
		}
		return []algebra.Poly{num}
	}
	p, ok := c.Value.IsPoly()
	if !ok || len(d.Ring.Kernels(c.Value)) > 0 || c.Relation != "<=" && c.Relation != ">=" {
		return nil
	}
	if c.Relation == ">=" {
		p = p.Neg()
	}
	if list, ok := d.zerosOf(p, 0); ok && !empty(list) {
		return list
	}
	return nil
}

// contradicted reports whether the assumptions make a condition of the ring
// certainly false: what must not vanish does.
func (d *Problem) contradicted() bool {
	return slices.ContainsFunc(d.Ring.Conditions(), func(c jet.Condition) bool {
		return c.Need != jet.NeedNonNegative && d.onAssumed(c.Value.Num()).IsZero()
	})
}

// pinned reports whether the jets and constants of the claim may lie on a set
// on which different monomials agree: the zeros of equations, a well, an
// assumption that is an equation, a box without width, or assumptions for
// which no point is found that satisfies them strictly.
func (d *Problem) pinned() bool {
	if len(d.Ideal) > 0 || len(d.Wells) > 0 {
		return true
	}
	for _, c := range d.Assumed {
		if c.Relation == "=" {
			return true
		}
	}
	for _, b := range d.Claim.Box {
		if b.Lo.Cmp(b.Hi) == 0 {
			return true
		}
	}
	return !d.roomy()
}

// held reports whether derivatives or coordinates are held on a set without
// interior, by a restriction or by assumptions, so that an Euler expression
// that does not vanish excludes no divergence.
func (d *Problem) held() bool {
	constant := func(f algebra.Fraction) bool {
		return !slices.ContainsFunc(d.Ring.Support(f), func(v algebra.Var) bool {
			return d.Ring.Symbol(v).Kind == jet.Derivative || d.Ring.Symbol(v).Kind == jet.Coordinate
		})
	}
	if len(d.Claim.Restrict) > 0 {
		return true
	}
	for _, c := range d.Assumed {
		if c.Relation == "=" && !constant(c.Value) {
			return true
		}
	}
	for _, b := range d.Claim.Box {
		if f, err := d.In.Scalar(b.Node); b.Lo.Cmp(b.Hi) == 0 && (err != nil || !constant(f)) {
			return true
		}
	}
	return !d.roomy()
}

// roomy reports whether the inequalities assumed certainly hold on an open
// set: they hold strictly at a point, at which the equations assumed hold too.
func (d *Problem) roomy() bool {
	if len(d.Assumed) == 0 {
		return true
	}
	pts := d.Points()
	for range 20 {
		at, ok := pts.Next()
		if !ok {
			return false
		}
		if !slices.ContainsFunc(d.Assumed, func(c Constraint) bool {
			s, ok := d.Ring.Sign(c.Value, at)
			return c.Relation != "=" && (!ok || s == 0)
		}) {
			return true
		}
	}
	return false
}
