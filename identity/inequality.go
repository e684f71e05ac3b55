package identity

import (
	"errors"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/exact"
	"creaseproof/identity/squares"
)

// inequality decides A <= B or A >= B.
func (d *decider) inequality() error {
	if d.Claim.Divergence {
		return d.upToDivergence()
	}
	if len(d.Claim.Solve) > 0 {
		return &entropy.Error{At: d.Claim.Statement.Left.At(), Err: errors.New("solve is for equations"), Advice: "write the constant's value, or claim an equation"}
	}
	if d.Claim.Best != "" {
		return d.best()
	}
	if len(d.Wells) > 0 || len(d.Ideal) > 0 {
		if ok, err := d.refuteOnWells(); err != nil || ok {
			return err
		}
		if ok, err := d.proveOnWells(); err != nil || ok {
			return err
		}
		ok, err := d.parametrise()
		if err != nil {
			return err
		}
		d.Rec.Parameters = ok
	}
	g, err := d.Gap()
	if err != nil {
		return err
	}
	if g.Value.IsZero() {
		d.Proved("exact normal form: both sides are equal")
		return nil
	}
	if err := d.RemoveAngle(g); err != nil {
		return err
	}
	long := g.Poly.Len() > longTarget
	if long {
		if ok, err := d.asWritten(g); err != nil || ok {
			return err
		}
	}
	res := squares.Complete(d.Ctx, d.Ring, g.Poly, d.squareVars(g.Poly))
	if err := d.Ctx.Err(); err != nil {
		return err
	}
	if !res.Proved && (d.refuteRests(g, res.Rests) || d.refuteFar(g)) {
		return nil
	}
	if !res.Proved {
		if ok, err := d.byDivision(g); err != nil || ok {
			return err
		}
	}
	if ok, err := d.prove(g, res.Terms); err != nil || ok {
		return err
	}
	if !res.Proved && !long {
		if ok, err := d.asWritten(g); err != nil || ok {
			return err
		}
	}
	if res.Proved {
		d.Proved("completing squares, multiplied out exactly")
		for _, t := range res.Terms {
			d.Rec.Details = append(d.Rec.Details, exact.Short("("+d.Ring.Format(t.Weight)+") ("+d.Ring.Format(t.Base)+")^2"))
		}
		return nil
	}
	if err := d.Ctx.Err(); err != nil {
		return err
	}
	return d.search(g)
}

// parametrise replaces the wells, or the zeros of one equation, by a rational
// parametrisation where there is one.
func (d *decider) parametrise() (bool, error) {
	if len(d.Wells) > 0 {
		return d.Parametrise()
	}
	g, err := d.Gap()
	if err != nil {
		return false, err
	}
	return d.ParametriseZeros(g)
}

// squareVars orders the indeterminates in which squares are completed:
// derivatives of high order first, then of lower order, then the rest.
func (d *decider) squareVars(p algebra.Poly) []algebra.Var {
	var out []algebra.Var
	for _, v := range p.Vars() {
		if d.Ring.Symbol(v).Kind <= jet.Derivative {
			out = append(out, v)
		}
	}
	for _, k := range d.Ring.Kernels(algebra.FromPoly(p)) {
		for _, v := range d.Ring.Support(d.Ring.Symbol(k).Arg) {
			out = slices.DeleteFunc(out, func(w algebra.Var) bool { return w == v })
		}
	}
	rank := func(v algebra.Var) int {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Derivative {
			return 100
		}
		return -s.Index.Order()
	}
	slices.SortStableFunc(out, func(a, b algebra.Var) int { return rank(a) - rank(b) })
	return out
}

// refuteRests looks for a point where what completing squares left over is
// negative. With the minimisers put in, the gap is negative there as well,
// however thin the set on which it is.
func (d *decider) refuteRests(g *exact.Gap, rests []squares.Rest) bool {
	pts := d.GapPoints(g)
	for _, rest := range rests {
		value := algebra.FromPoly(rest.Poly)
		tried := func(at jet.Point) bool {
			if s, ok := d.Ring.Sign(value, at); !ok || s >= 0 {
				return false
			}
			if !d.lift(rest.Steps, at) || !d.Consistent(pts, at) || !d.FalseAt(g, pts, at) {
				return false
			}
			at = d.simplify(g, pts, at)
			d.Refuted("completing squares leaves a rest that is negative; exact arithmetic at the witness", at, g.Left, g.Right)
			return true
		}
		for range 120 {
			at, ok := pts.Next()
			if !ok {
				return false
			}
			if tried(at) {
				return true
			}
		}
		for k := range farTries {
			at, ok := pts.Next()
			if !ok {
				return false
			}
			if far(pts, rest.Poly, at, k); tried(at) {
				return true
			}
		}
	}
	return false
}

// farTries are the points of a rest that are tried far out and near zero.
const farTries = 14

// far moves the free indeterminates of p by powers of two, different ones each
// time: a rest may be negative only far out, or only near zero.
func far(pts *exact.Points, p algebra.Poly, at jet.Point, k int) {
	powers := []int{0, 30, -30, 60, -60, 120, -120}
	for i, v := range p.Vars() {
		x, ok := at[v]
		if !ok || !slices.Contains(pts.Free, v) {
			continue // cosines and sines are tied to each other
		}
		by, ok := algebra.Int(2).Pow(powers[(k+i*(1+k/len(powers)))%len(powers)])
		if ok {
			at[v] = x.Mul(by)
		}
	}
}

// lift puts the minimisers in, last one first.
func (d *decider) lift(steps []squares.Step, at jet.Point) bool {
	for _, s := range slices.Backward(steps) {
		x, ok := d.Ring.Exact(s.Value, at)
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

// refuteFar looks for directions in which the gap falls to minus infinity:
// the leading coefficient in one indeterminate is negative, or its degree odd.
func (d *decider) refuteFar(g *exact.Gap) bool {
	pts := d.GapPoints(g)
	vars := d.squareVars(g.Poly)
	for range 24 {
		base, ok := pts.Next()
		if !ok {
			return false
		}
		if d.Consistent(pts, base) && d.FalseAt(g, pts, base) {
			base = d.simplify(g, pts, base)
			d.Refuted("exact arithmetic at the witness", base, g.Left, g.Right)
			return true
		}
		for _, v := range vars {
			x, ok := d.farValue(g.Poly, v, base)
			if !ok {
				continue
			}
			at := base.Clone()
			at[v] = x
			if d.Consistent(pts, at) && d.FalseAt(g, pts, at) {
				at = d.simplify(g, pts, at)
				d.Refuted("the gap is unbounded below; exact arithmetic at the witness", at, g.Left, g.Right)
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
		x, ok := d.Ring.Exact(jet.Of(w), at)
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
	sign := d.Ring.Symbol(v).Sign
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
