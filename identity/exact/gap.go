package exact

import (
	"errors"
	"fmt"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

// Gap is an inequality brought to the form poly >= 0.
type Gap struct {
	Value       algebra.Fraction // right - left of A <= B
	Left, Right algebra.Fraction // as written
	Poly        algebra.Poly     // value times something positive
	Factor      algebra.Fraction // value = poly · factor, before the angle is removed
	Turned      *Turned          // poly is at frame angle 0, which is enough
	Wells       []Relation       // what holds on the jets looked at
}

// Gap evaluates both sides and clears denominators: with N/Π b^e the gap, its
// sign is that of N times the b of odd exponents whose sign does not show.
func (d *Problem) Gap() (*Gap, error) {
	st := d.Claim.Statement
	l, r, err := d.inequalitySides()
	if err != nil {
		return nil, err
	}
	g := &Gap{Left: l, Right: r}
	if st.Relation == formula.GreaterEqual {
		l, r = r, l
	}
	if g.Value, err = d.Ring.Sub(r, l); err != nil {
		return nil, err
	}
	return g, d.Clear(g)
}

// GapOnWells is the gap with the wells on both sides of a jump, or the equations
// that are not solved, as relations: in the traces, at a jump. It reports false
// where one of them is monic in no derivative of its own.
func (d *Problem) GapOnWells() (*Gap, bool, error) {
	g, err := d.Gap()
	if err != nil {
		return nil, false, err
	}
	gens := d.Wells
	if len(gens) == 0 {
		gens = d.equations
	}
	taken := map[algebra.Var]bool{}
	for _, w := range gens {
		rel, ok := Monic(w)
		if !ok || taken[rel.Var] {
			return nil, false, nil
		}
		taken[rel.Var] = true
		g.Wells = append(g.Wells, rel)
	}
	if len(d.Wells) > 0 {
		if g.Poly, err = d.InTraces(g.Poly); err != nil {
			return nil, false, err
		}
	}
	return g, len(gens) > 0, d.RemoveAngle(g)
}

// Affine reports whether a gap is affine in a constant on which nothing else
// depends: no denominator, no kernel and no assumption holds it.
func (d *Problem) Affine(g *Gap, v algebra.Var) error {
	name := d.Ring.Name(v)
	switch {
	case g.Poly.Degree(v) > 1, slices.ContainsFunc(g.Value.DenFactors(), func(f algebra.Factor) bool { return f.Base.Has(v) }):
		return fmt.Errorf("the inequality is not affine in %s", name)
	case slices.ContainsFunc(d.Ring.Kernels(g.Value, g.Left, g.Right), func(k algebra.Var) bool { return slices.Contains(d.Ring.Support(d.Ring.Symbol(k).Arg), v) }):
		return fmt.Errorf("%s stands inside a root or a function", name)
	case slices.ContainsFunc(d.Assumed, func(c Constraint) bool { return slices.Contains(d.Ring.Support(c.Value), v) }):
		return fmt.Errorf("an assumption holds %s", name)
	case slices.ContainsFunc(d.Ring.Conditions(), func(c jet.Condition) bool { return slices.Contains(d.Ring.Support(c.Value), v) }):
		return fmt.Errorf("the sides are not defined for every %s", name)
	}
	return nil
}

// At is the gap with a value put in for a constant in which it is affine.
func (g *Gap) At(v algebra.Var, x algebra.Rat) *Gap {
	put := map[algebra.Var]algebra.Fraction{v: jet.Rational(x.Big())}
	h := *g
	h.Value, h.Left, h.Right = g.Value.SubstMany(put), g.Left.SubstMany(put), g.Right.SubstMany(put)
	h.Poly = g.Poly.EvalPartial(map[algebra.Var]algebra.Rat{v: x})
	return &h
}

// Clear fills in the polynomial of a gap.
func (d *Problem) Clear(g *Gap) error {
	g.Poly = g.Value.Num()
	for _, b := range g.Value.DenFactors() {
		base := algebra.FromPoly(b.Base)
		switch {
		case b.Exp%2 == 0, d.Ring.VisiblyNonNegative(base):
		case d.Ring.VisiblyNonNegative(base.Neg()):
			g.Poly = g.Poly.Neg()
		default:
			g.Poly = g.Poly.Mul(b.Base)
		}
	}
	g.Poly = d.Ring.ReducePoly(g.Poly)
	g.Factor = jet.Whole(1)
	if f, ok := g.Value.Quo(algebra.FromPoly(g.Poly)); ok {
		g.Factor = f
	}
	return g.Poly.Err()
}

// inequalitySides evaluates both sides. Where a side is the supremum over an
// angle and that is not in closed form, sup f <= B is f <= B for all angles.
func (d *Problem) inequalitySides() (left, right algebra.Fraction, err error) {
	st := d.Claim.Statement
	side := func(n formula.Node, upper bool) (algebra.Fraction, error) {
		f, err := d.In.Scalar(n)
		call, ok := n.(*formula.Call)
		if err == nil || !ok || call.Func != "sup" || !upper || !errors.Is(err, jet.ErrOutside) || len(call.Args) != 2 {
			return f, err
		}
		d.Rec.Details = append(d.Rec.Details, "the supremum is bounded by bounding every member of the family")
		return d.In.Scalar(call.Args[1])
	}
	if left, err = side(st.Left, st.Relation == formula.LessEqual); err != nil {
		return left, right, err
	}
	right, err = side(st.Right, st.Relation == formula.GreaterEqual)
	return left, right, err
}

// FalseAt reports whether the inequality certainly fails at an admissible
// point, in exact arithmetic or with outward rounding.
func (d *Problem) FalseAt(g *Gap, p *Points, at jet.Point) bool {
	s, ok := d.Ring.Sign(g.Value, at)
	return ok && s < 0 && p.Admissible(at)
}

// GapPoints draws points for a gap, at the frame angle at which it is looked at.
func (d *Problem) GapPoints(g *Gap) *Points {
	p := d.Points(g.Value, g.Left, g.Right)
	if g.Turned != nil {
		p.Fixed = jet.Point{g.Turned.Cos: algebra.Int(1), g.Turned.Sin: algebra.Rat{}}
		p.Angles = slices.DeleteFunc(p.Angles, func(c algebra.Var) bool { return c == g.Turned.Cos })
	}
	return p
}

// Consistent renews what follows from other values at a point: the traces.
func (d *Problem) Consistent(p *Points, at jet.Point) bool {
	if d.Claim.Jump {
		if len(d.Wells) > 0 {
			return false // moving one value leaves the well
		}
		return d.Traces(at) == nil
	}
	return len(d.Ideal) == 0
}
