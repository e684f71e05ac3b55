package identity

import (
	"fmt"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/exact"
	"creaseproof/identity/gram"
	"creaseproof/identity/squares"
)

// upToDivergence decides A <= B up to a divergence: it looks for a combination
// N of minors and of total derivatives, each the divergence of a potential, with gap + N >= 0 for all
// jets, and reports N.
func (d *decider) upToDivergence() error {
	if len(d.Claim.Given) > 0 || d.Claim.Jump || len(d.Claim.Modulo) > 0 {
		return fmt.Errorf("a claim up to a divergence is about all smooth u: take `given`, `at` and other `modulo` away")
	}
	g, err := d.Gap()
	if err != nil {
		return err
	}
	if ok, err := d.withNull(g, nil, nil); err != nil || ok {
		if ok {
			d.Rec.Solution = "N = 0"
		}
		return err
	}
	minors := 0
	for _, more := range []int{0, 1} { // the minors alone, and with integrations by parts
		list, err := d.NullLagrangians(g, (minors+1)*more)
		if err != nil {
			return err
		}
		if len(list) == minors && more > 0 {
			break
		}
		minors = len(list)
		if x, ok := d.Cancel(g, list); ok {
			if ok, err := d.withNull(g, list, x); err != nil || ok {
				return err
			}
		}
		if len(list) == 0 {
			continue
		}
		if x, ok := d.fitNull(g, list); ok {
			for _, try := range roundings(x) {
				if ok, err := d.withNull(g, list, try); err != nil || ok {
					return err
				}
			}
		}
	}
	if err := d.Ctx.Err(); err != nil {
		return err
	}
	d.Rec.Details = nil
	d.Open("no combination of minors and integrations by parts was found that makes the gap non-negative for all jets")
	// What is known pointwise, which is no refutation of the claim.
	pts := d.GapPoints(g)
	if at, ok := d.cheapCounterexample(g, pts); ok {
		d.Rec.Reason += "; pointwise, without a divergence, the inequality fails at the witness, which does not refute it up to a divergence"
		d.ShowWitness(at, g.Left, g.Right)
	}
	return nil
}

// cheapCounterexample is a point at which the gap is negative, from completed
// squares and from small rational points.
func (d *decider) cheapCounterexample(g *exact.Gap, pts *exact.Points) (jet.Point, bool) {
	res := squares.Complete(d.Ctx, d.Ring, g.Poly, d.squareVars(g.Poly))
	for _, rest := range res.Rests {
		value := algebra.FromPoly(rest.Poly)
		for range 60 {
			at, ok := pts.Next()
			if !ok {
				return nil, false
			}
			if s, ok := d.Ring.Sign(value, at); ok && s < 0 && d.lift(rest.Steps, at) && d.FalseAt(g, pts, at) {
				return d.simplify(g, pts, at), true
			}
		}
	}
	for range 200 {
		at, ok := pts.Next()
		if !ok {
			return nil, false
		}
		if d.FalseAt(g, pts, at) {
			return d.simplify(g, pts, at), true
		}
	}
	return nil, false
}

// withNull tries to prove gap + Σ x_k N_k >= 0, and on success records N.
func (d *decider) withNull(g *exact.Gap, list []exact.NullLagrangian, x []algebra.Rat) (bool, error) {
	h, potential, err := d.AddNull(g, list, x)
	if err != nil {
		return false, err
	}
	if h.Value.IsZero() {
		d.Proved("exact normal form: both sides are equal up to a divergence")
	} else {
		if err := d.RemoveAngle(h); err != nil {
			return false, err
		}
		res := squares.Complete(d.Ctx, d.Ring, h.Poly, d.squareVars(h.Poly))
		ok, err := d.prove(h, res.Terms)
		if err != nil || !ok {
			return false, err
		}
	}
	if len(list) == 0 {
		return true, nil
	}
	d.Rec.Solution = d.FormatNull(list, x)
	for _, c := range x {
		d.Rec.Null = append(d.Rec.Null, c.String())
	}
	d.Rec.Details = append(d.Rec.Details, d.FormatPotential(potential))
	return true, nil
}

// fitNull finds, numerically, a combination with which the gap is a sum of
// squares. With a frame angle it looks at angle 0, which is necessary.
func (d *decider) fitNull(g *exact.Gap, list []exact.NullLagrangian) ([]float64, bool) {
	h := *g
	value := g.Value
	sub := map[algebra.Var]algebra.Fraction{}
	if f := d.Claim.Setting.Frame; f != nil {
		if c, s, ok := d.FrameAngle(f.Angle); ok {
			sub[c], sub[s] = jet.Whole(1), algebra.Fraction{}
		}
	}
	h.Value = value.SubstMany(sub)
	if d.Clear(&h) != nil {
		return nil, false
	}
	var free []algebra.Poly
	for _, l := range list {
		f, ok := l.Value.SubstMany(sub).Quo(h.Factor)
		if !ok {
			return nil, false
		}
		p, ok := f.IsPoly()
		if !ok {
			return nil, false
		}
		free = append(free, p)
	}
	r := d.reduction(&h)
	effort, _ := gram.Efforts(d.opt.Effort)
	return gram.Fit(d.Ctx, r.problemFor(h.Poly), free, nil, effort)
}

// roundings are vectors of rationals near x, from coarse to fine.
func roundings(x []float64) [][]algebra.Rat {
	var out [][]algebra.Rat
	for level := range 5 {
		v := make([]algebra.Rat, len(x))
		ok := true
		for k, y := range x {
			c := gram.Recognise(y)
			if len(c) == 0 {
				ok = false
				break
			}
			v[k] = c[max(0, len(c)-1-level)]
		}
		if ok && !slices.ContainsFunc(out, func(w []algebra.Rat) bool {
			return slices.EqualFunc(v, w, func(a, b algebra.Rat) bool { return a.Equal(b) })
		}) {
			out = append(out, v)
		}
	}
	return out
}
