package identity

import (
	"errors"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/squares"
)

// gap is an inequality brought to the form poly >= 0.
type gap struct {
	value       algebra.Fraction // right - left of A <= B
	left, right algebra.Fraction // as written
	poly        algebra.Poly     // value times something positive
	factor      algebra.Fraction // value = poly · factor, before the angle is removed
	turned      *turned          // poly is at frame angle 0, which is enough
	wells       []relation       // what holds on the jets looked at
}

// inequality decides A <= B or A >= B.
func (d *decider) inequality() error {
	if d.claim.Divergence {
		return d.upToDivergence()
	}
	if len(d.claim.Solve) > 0 {
		return &entropy.Error{At: d.claim.Statement.Left.At(), Err: errors.New("solve is for equations"), Advice: "write the constant's value, or claim an equation"}
	}
	if d.claim.Best != "" {
		return d.best()
	}
	if len(d.wells) > 0 {
		if ok, err := d.proveOnWells(); err != nil || ok {
			return err
		}
		if _, err := d.parametrise(); err != nil {
			return err
		}
	}
	g, err := d.gap()
	if err != nil {
		return err
	}
	if g.value.IsZero() {
		d.proved("exact normal form: both sides are equal")
		return nil
	}
	if err := d.removeAngle(g); err != nil {
		return err
	}
	res := squares.Complete(d.ctx, d.ring, g.poly, d.squareVars(g.poly))
	if err := d.ctx.Err(); err != nil {
		return err
	}
	if !res.Proved && (d.refuteRests(g, res.Rests) || d.refuteFar(g)) {
		return nil
	}
	if ok, err := d.prove(g, res.Terms); err != nil || ok {
		return err
	}
	if res.Proved {
		d.proved("completing squares, multiplied out exactly")
		for _, t := range res.Terms {
			d.rec.Details = append(d.rec.Details, short("("+d.ring.Format(t.Weight)+") ("+d.ring.Format(t.Base)+")^2"))
		}
		return nil
	}
	if err := d.ctx.Err(); err != nil {
		return err
	}
	return d.search(g)
}

// gap evaluates both sides and clears denominators: with N/Π b^e the gap, its
// sign is that of N times the b of odd exponents whose sign does not show.
func (d *decider) gap() (*gap, error) {
	st := d.claim.Statement
	l, r, err := d.inequalitySides()
	if err != nil {
		return nil, err
	}
	g := &gap{left: l, right: r}
	if st.Relation == formula.GreaterEqual {
		l, r = r, l
	}
	if g.value, err = d.ring.Sub(r, l); err != nil {
		return nil, err
	}
	return g, d.clear(g)
}

// clear fills in the polynomial of a gap.
func (d *decider) clear(g *gap) error {
	g.poly = g.value.Num()
	for _, b := range g.value.DenFactors() {
		base := algebra.FromPoly(b.Base)
		switch {
		case b.Exp%2 == 0, d.ring.VisiblyNonNegative(base):
		case d.ring.VisiblyNonNegative(base.Neg()):
			g.poly = g.poly.Neg()
		default:
			g.poly = g.poly.Mul(b.Base)
		}
	}
	g.poly = d.ring.ReducePoly(g.poly)
	g.factor = jet.Whole(1)
	if f, ok := g.value.Quo(algebra.FromPoly(g.poly)); ok {
		g.factor = f
	}
	return g.poly.Err()
}

// inequalitySides evaluates both sides. Where a side is the supremum over an
// angle and that is not in closed form, sup f <= B is f <= B for all angles.
func (d *decider) inequalitySides() (left, right algebra.Fraction, err error) {
	st := d.claim.Statement
	side := func(n formula.Node, upper bool) (algebra.Fraction, error) {
		f, err := d.in.Scalar(n)
		call, ok := n.(*formula.Call)
		if err == nil || !ok || call.Func != "sup" || !upper || !errors.Is(err, jet.ErrOutside) || len(call.Args) != 2 {
			return f, err
		}
		d.rec.Details = append(d.rec.Details, "the supremum is bounded by bounding every member of the family")
		return d.in.Scalar(call.Args[1])
	}
	if left, err = side(st.Left, st.Relation == formula.LessEqual); err != nil {
		return left, right, err
	}
	right, err = side(st.Right, st.Relation == formula.GreaterEqual)
	return left, right, err
}

// squareVars orders the indeterminates in which squares are completed:
// derivatives of high order first, then of lower order, then the rest.
func (d *decider) squareVars(p algebra.Poly) []algebra.Var {
	var out []algebra.Var
	for _, v := range p.Vars() {
		if d.ring.Symbol(v).Kind <= jet.Derivative {
			out = append(out, v)
		}
	}
	for _, k := range d.ring.Kernels(algebra.FromPoly(p)) {
		for _, v := range d.ring.Support(d.ring.Symbol(k).Arg) {
			out = slices.DeleteFunc(out, func(w algebra.Var) bool { return w == v })
		}
	}
	rank := func(v algebra.Var) int {
		s := d.ring.Symbol(v)
		if s.Kind != jet.Derivative {
			return 100
		}
		return -s.Index.Order()
	}
	slices.SortStableFunc(out, func(a, b algebra.Var) int { return rank(a) - rank(b) })
	return out
}

// falseAt reports whether the inequality certainly fails at an admissible
// point, in exact arithmetic or with outward rounding.
func (d *decider) falseAt(g *gap, p *points, at jet.Point) bool {
	s, ok := d.ring.Sign(g.value, at)
	return ok && s < 0 && p.admissible(at)
}

// refuteRests looks for a point where what completing squares left over is
// negative. With the minimisers put in, the gap is negative there as well,
// however thin the set on which it is.
func (d *decider) refuteRests(g *gap, rests []squares.Rest) bool {
	pts := d.gapPoints(g)
	for _, rest := range rests {
		value := algebra.FromPoly(rest.Poly)
		for range 120 {
			at, ok := pts.next()
			if !ok {
				return false
			}
			if s, ok := d.ring.Sign(value, at); !ok || s >= 0 {
				continue
			}
			if d.lift(rest.Steps, at) && d.consistent(pts, at) && d.falseAt(g, pts, at) {
				at = d.simplify(g, pts, at)
				d.refuted("completing squares leaves a rest that is negative; exact arithmetic at the witness", at, g.left, g.right)
				return true
			}
		}
	}
	return false
}

// gapPoints draws points for a gap, at the frame angle at which it is looked at.
func (d *decider) gapPoints(g *gap) *points {
	p := d.points(g.value, g.left, g.right)
	if g.turned != nil {
		p.fixed = jet.Point{g.turned.cos: algebra.Int(1), g.turned.sin: algebra.Rat{}}
		p.angles = slices.DeleteFunc(p.angles, func(c algebra.Var) bool { return c == g.turned.cos })
	}
	return p
}

// lift puts the minimisers in, last one first.
func (d *decider) lift(steps []squares.Step, at jet.Point) bool {
	for _, s := range slices.Backward(steps) {
		x, ok := d.ring.Exact(s.Value, at)
		if !ok {
			return false
		}
		switch {
		case s.Power == 1:
		case x.Sign() <= 0:
			x = algebra.Rat{}
		case s.Power == 2:
			if x, ok = jet.SqrtRat(x); !ok {
				return false
			}
		default:
			return false
		}
		at[s.Var] = x
	}
	return true
}

// consistent renews what follows from other values at a point: the traces.
func (d *decider) consistent(p *points, at jet.Point) bool {
	if d.claim.Jump {
		if len(d.wells) > 0 {
			return false // moving one value leaves the well
		}
		return d.traces(at) == nil
	}
	return len(d.ideal) == 0
}

// refuteFar looks for directions in which the gap falls to minus infinity:
// the leading coefficient in one indeterminate is negative, or its degree odd.
func (d *decider) refuteFar(g *gap) bool {
	pts := d.gapPoints(g)
	vars := d.squareVars(g.poly)
	for range 24 {
		base, ok := pts.next()
		if !ok {
			return false
		}
		if d.consistent(pts, base) && d.falseAt(g, pts, base) {
			base = d.simplify(g, pts, base)
			d.refuted("exact arithmetic at the witness", base, g.left, g.right)
			return true
		}
		for _, v := range vars {
			x, ok := d.farValue(g.poly, v, base)
			if !ok {
				continue
			}
			at := base.Clone()
			at[v] = x
			if d.consistent(pts, at) && d.falseAt(g, pts, at) {
				at = d.simplify(g, pts, at)
				d.refuted("the gap is unbounded below; exact arithmetic at the witness", at, g.left, g.right)
				return true
			}
		}
	}
	return false
}

// farValue is a value of v beyond all zeros of p, others fixed, at which p is
// negative, if its leading coefficient allows that.
func (d *decider) farValue(p algebra.Poly, v algebra.Var, at jet.Point) (algebra.Rat, bool) {
	values := map[algebra.Var]algebra.Rat{}
	for _, w := range p.Vars() {
		if w == v {
			continue
		}
		x, ok := d.ring.Exact(jet.Of(w), at)
		if !ok {
			return x, false
		}
		values[w] = x
	}
	co := p.EvalPartial(values).Coeffs(v)
	n := len(co) - 1
	if n < 1 {
		return algebra.Rat{}, false
	}
	lead, ok := co[n].IsConst()
	if !ok {
		return lead, false
	}
	bound := algebra.Int(1)
	for _, c := range co[:n] {
		x, _ := c.IsConst()
		if q, ok := x.Quo(lead); ok {
			bound = bound.Add(q.Abs())
		}
	}
	sign := d.ring.Symbol(v).Sign
	low := sign == jet.AnySign || sign == jet.Negative || sign == jet.NonPositive
	high := sign != jet.Negative && sign != jet.NonPositive
	switch {
	case lead.Sign() < 0 && high:
		return simplerAbove(bound), true
	case n%2 == 1 && lead.Sign() > 0 && low, n%2 == 0 && lead.Sign() < 0 && low:
		return simplerAbove(bound).Neg(), true
	}
	return algebra.Rat{}, false
}

// simplerAbove is a power of two not below x.
func simplerAbove(x algebra.Rat) algebra.Rat {
	p := algebra.Int(1)
	for p.Cmp(x) < 0 {
		p = p.Add(p)
	}
	return p
}
