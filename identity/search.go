package identity

import (
	"context"
	"errors"
	"fmt"
	"maps"
	"math"
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
	"creaseproof/identity/exact"
	"creaseproof/identity/sample"
)

// task is the numerical search for a counterexample in free coordinates: the
// free indeterminates, then t = tan(θ/2) for each angle, with orientations
// fixed.
type task struct {
	d     *decider
	g     *exact.Gap
	pts   *exact.Points
	Signs []algebra.Rat // of pts.Signs

	layout  *sample.Layout
	sampled *program.Program // gap and sum of absolute monomials, over the layout
	margin  *program.Program // margin and its gradient, over the free coordinates
}

// search samples the margin and sends the adversary after it. Every candidate
// is settled in exact arithmetic.
func (d *decider) search(g *exact.Gap) error {
	pts := d.GapPoints(g)
	if len(pts.Vars()) == 0 {
		return d.constant(g, pts)
	}
	if len(d.Ideal) > 0 || len(d.Wells) > 0 {
		return d.searchOnVariety(g, pts)
	}
	if slices.ContainsFunc(d.Assumed, func(c exact.Constraint) bool { return c.Relation == "=" }) {
		if d.refuteAssumed(g, pts) || d.RefuteIsolated(g) {
			return nil
		}
		if err := d.Ctx.Err(); err != nil {
			return err
		}
		d.Open("no proof and no exact counterexample was found; samples do not follow assumptions that are equations")
		return nil
	}
	for _, v := range pts.Free {
		if lo, hi := (&task{d: d}).bounds(v); lo >= hi {
			if _, ok := pts.Next(); !ok {
				d.Open("no jet was met that satisfies the assumptions on %s", d.Ring.Name(v))
				return nil
			}
		}
	}
	least := math.Inf(1)
	for k := range 1 << len(pts.Signs) {
		t := &task{d: d, g: g, pts: pts}
		for i := range pts.Signs {
			t.Signs = append(t.Signs, algebra.Int(int64(1-2*(k>>i&1))))
		}
		if err := t.compile(); err != nil {
			return err
		}
		m, done, err := t.run()
		if err != nil || done {
			return err
		}
		least = min(least, m)
	}
	d.supported(least)
	return nil
}

func (d *decider) supported(least float64) {
	if d.Rec.Samples == 0 {
		d.Open("no jet was met that satisfies the assumptions")
		return
	}
	d.Rec.Verdict, d.Rec.Method, d.Rec.Seed = Supported, "sampling and adversarial search", d.opt.Seed
	if !math.IsInf(least, 0) {
		d.Rec.Margin = &least
	}
	d.Rec.Reason = fmt.Sprintf("no counterexample in %d random jets and %d descents; a numerical check is not a proof", d.Rec.Samples, d.Rec.Searches)
	if p := d.picture; p != nil && p.Feasible {
		d.Rec.Reason += fmt.Sprintf("; a numerical sum of squares exists (least eigenvalue %.1e of the largest), but no rational one was found in %d forms", p.Least, p.Tried)
		if p.Kernel > 0 {
			d.Rec.Reason += fmt.Sprintf(", a kernel of dimension %d being not recognised as rational", p.Kernel)
		}
	}
}

// constant decides an inequality between constants.
func (d *decider) constant(g *exact.Gap, pts *exact.Points) error {
	at := jet.Point{}
	s, ok := d.Ring.Sign(g.Value, at)
	switch {
	case !ok:
		d.Open("the two sides are constants too close to tell apart at %d bits", 640)
	case s < 0 && !pts.Admissible(at):
		d.Open("the claim fails, but its assumptions are about numbers and do not certainly hold")
	case s < 0:
		d.Refuted("disjoint enclosures of constants", at, g.Left, g.Right)
	default:
		d.Proved("disjoint enclosures of constants")
	}
	return nil
}

// searchOnVariety samples exact rational points of a well or of equations
// that are not solved for a derivative, then real algebraic ones.
func (d *decider) searchOnVariety(g *exact.Gap, pts *exact.Points) error {
	tries := min(d.opt.Samples, 4000)
	for range tries {
		at, ok := pts.Next()
		if !ok {
			break
		}
		d.Rec.Samples++
		if d.FalseAt(g, pts, at) {
			d.Refuted("exact arithmetic at a rational point of the well", at, g.Left, g.Right)
			return nil
		}
	}
	if err := d.Ctx.Err(); err != nil {
		return err
	}
	if d.RefuteIsolated(g) {
		return nil
	}
	if err := d.Ctx.Err(); err != nil {
		return err
	}
	if d.Rec.Samples == 0 {
		d.Open("no rational point was found on which the claim could be tried")
		return nil
	}
	d.supported(math.Inf(1))
	return nil
}

// refuteAssumed looks at rational points that satisfy assumed equations.
func (d *decider) refuteAssumed(g *exact.Gap, pts *exact.Points) bool {
	for range 1000 {
		at, ok := pts.Next()
		if !ok {
			return false
		}
		if d.FalseAt(g, pts, at) {
			d.Refuted("exact arithmetic at a rational point that satisfies the assumptions", at, g.Left, g.Right)
			return true
		}
	}
	return false
}

func (t *task) compile() error {
	ring := t.d.Ring
	inputs := func(c *compiler) {
		for i, s := range t.pts.Signs {
			c.of[s] = c.b.Const(t.Signs[i].Float64())
		}
		for i, v := range t.pts.Free {
			c.of[v] = c.b.Input(i)
		}
		for v, x := range t.pts.Fixed {
			c.of[v] = c.b.Const(x.Float64())
		}
	}
	build := func(c *compiler) (gap, size program.Ref) {
		gap, size = c.poly(t.g.Poly), c.absSum(t.g.Poly)
		for _, a := range t.d.Assumed {
			if a.Bounds() {
				continue // of one indeterminate, which the layout knows
			}
			switch a.Relation {
			case ">", ">=":
				gap = c.where(gap, c.fraction(a.Value))
			case "<", "<=":
				gap = c.where(gap, c.b.Neg(c.fraction(a.Value)))
			}
		}
		return gap, size
	}
	n := len(t.pts.Free)

	c := &compiler{ring, program.NewBuilder(), map[algebra.Var]program.Ref{}}
	inputs(c)
	for i, a := range t.pts.Angles {
		c.of[a], c.of[ring.Symbol(a).Partner] = c.b.Input(n+2*i), c.b.Input(n+2*i+1)
	}
	gap, size := build(c)
	var err error
	if t.sampled, err = c.b.Compile(gap, size); err != nil {
		return fmt.Errorf("%w: %w", jet.ErrOutside, err)
	}
	if t.layout, err = t.makeLayout(); err != nil {
		return err
	}

	c = &compiler{ring, program.NewBuilder(), map[algebra.Var]program.Ref{}}
	inputs(c)
	one := c.b.Const(1)
	for i, a := range t.pts.Angles {
		x := c.b.Input(n + i)
		sq := c.b.Mul(x, x)
		den := c.b.Add(one, sq)
		c.of[a] = c.b.Quo(c.b.Sub(one, sq), den)
		c.of[ring.Symbol(a).Partner] = c.b.Quo(c.b.Add(x, x), den)
	}
	gap, size = build(c)
	m := c.b.Quo(gap, size)
	// A barrier keeps the descents inside the assumptions; it is too small to
	// hide a violation that can be seen at all.
	for _, a := range t.d.Assumed {
		if a.Bounds() || a.Relation == "=" {
			continue
		}
		g := c.fraction(a.Value)
		if a.Relation == "<" || a.Relation == "<=" {
			g = c.b.Neg(g)
		}
		m = c.b.Sub(m, c.b.Mul(c.b.Const(barrier), c.b.Func(program.Log, g)))
	}
	idx := make([]int, n+len(t.pts.Angles))
	for i := range idx {
		idx[i] = i
		c.b.Input(i)
	}
	if t.margin, err = c.b.Compile(append([]program.Ref{m}, c.b.Gradient(m, idx)...)...); err != nil {
		return fmt.Errorf("%w: %w", jet.ErrOutside, err)
	}
	return nil
}

func (t *task) makeLayout() (*sample.Layout, error) {
	var cols []sample.Column
	for _, v := range t.pts.Free {
		s := t.d.Ring.Symbol(v)
		c := sample.Column{Name: s.Name}
		if s.Kind == jet.Derivative && s.Side == jet.NoSide {
			c.Unknown, c.Order = t.d.Ring.Unknowns[s.Place], s.Index.Order()
			for i := range t.d.Ring.Coordinates {
				c.Index = append(c.Index, int(s.Index[i]))
			}
		}
		c.Lo, c.Hi = t.bounds(v)
		switch {
		case math.IsInf(c.Lo, -1) && math.IsInf(c.Hi, 1):
		case c.Lo == 0 && math.IsInf(c.Hi, 1):
			c.Kind = sample.Positive
		case c.Hi == 0 && math.IsInf(c.Lo, -1):
			c.Kind = sample.Negative
		default:
			c.Kind = sample.Box
		}
		cols = append(cols, c)
	}
	for i, a := range t.pts.Angles {
		name := t.d.Ring.Format(t.d.Ring.Symbol(a).Arg)
		cols = append(cols, sample.Column{Name: "cos " + name, Kind: sample.Cosine, Angle: i},
			sample.Column{Name: "sin " + name, Kind: sample.Sine, Angle: i})
	}
	return sample.NewLayout(cols)
}

// bounds are the bounds of v from its assumed sign and its box, as floats:
// they only guide the search.
func (t *task) bounds(v algebra.Var) (lo, hi float64) {
	lo, hi = math.Inf(-1), math.Inf(1)
	switch t.d.Ring.Symbol(v).Sign {
	case jet.Positive, jet.NonNegative:
		lo = 0
	case jet.Negative, jet.NonPositive:
		hi = 0
	}
	r := t.d.Range(v)
	if r.Lo != nil {
		lo = max(lo, r.Lo.Float64())
	}
	if r.Hi != nil {
		hi = min(hi, r.Hi.Float64())
	}
	return lo, hi
}

// barrier weighs the logarithms of the assumptions against the margin.
const barrier = 1e-10

const keepBest = 64

// run samples, then sends the adversary. It reports the least margin met, and
// true where a counterexample was found.
func (t *task) run() (float64, bool, error) {
	d := t.d
	samples := within(d.opt.Samples, sampleWork, int64(t.sampled.NumOps()))
	opts := sample.Options{Seed: d.opt.Seed, Samples: samples, Jobs: d.opt.Jobs, Laws: t.laws()}
	if d.opt.Progress != nil {
		opts.Progress = func(done, total int64) { d.opt.Progress(d.Claim.Name, done, total) }
	}
	res, err := sample.Run(d.Ctx, opts, t.layout, t.sampled, keepBest)
	d.Rec.Samples += res.Valid
	if err != nil || res.Valid == 0 {
		return math.Inf(1), false, err
	}
	var starts [][]float64
	for _, p := range res.Best {
		starts = append(starts, t.coordinates(p.Values))
	}
	least := res.MinMargin
	found, err := t.attack(append(t.suggested(), starts...))
	d.Rec.Searches += found.Starts
	least = min(least, found.BestMargin)
	if err != nil && !errors.Is(err, context.Canceled) && !errors.Is(err, context.DeadlineExceeded) {
		return least, false, fmt.Errorf("%w: %w", jet.ErrOutside, err)
	} else if err != nil {
		return least, false, err
	}
	if found.Witness != nil {
		at, _ := t.point(found.Witness)
		d.Rec.Margin = &least
		d.Refuted("adversarial search; exact arithmetic at the witness", at, t.g.Left, t.g.Right)
		return least, true, nil
	}
	for _, x := range starts { // samples that fail, should no descent have led to one
		q := make([]*big.Rat, len(x))
		for i := range x {
			if q[i] = new(big.Rat).SetFloat64(x[i]); q[i] == nil {
				q[i] = new(big.Rat)
			}
		}
		if at, ok := t.point(q); ok && d.FalseAt(t.g, t.pts, at) {
			d.Rec.Margin = &least
			d.Refuted("random sample; exact arithmetic at the witness", at, t.g.Left, t.g.Right)
			return least, true, nil
		}
	}
	if at, ok := t.small(); ok {
		d.Refuted("exact arithmetic at the witness", at, t.g.Left, t.g.Right)
		return least, true, nil
	}
	if b, ok := t.newBoundary(); ok {
		if found.BestPoint != nil {
			starts = slices.Insert(starts, 0, found.BestPoint)
		}
		if at, ok := b.search(starts); ok {
			d.Refuted("along the boundary of the assumptions; exact arithmetic at the witness", d.simplify(t.g, t.pts, at), t.g.Left, t.g.Right)
			return least, true, nil
		}
	}
	return least, false, nil
}

// suggested are the points that the search for a certificate has met.
func (t *task) suggested() [][]float64 {
	if t.d.picture == nil {
		return nil
	}
	var out [][]float64
	for _, p := range t.d.picture.Points {
		x := make([]float64, len(t.pts.Free)+len(t.pts.Angles))
		for i, v := range t.pts.Free {
			x[i] = 1 // what the target does not hold
			if y, ok := p[v]; ok {
				x[i] = y
			}
		}
		for i, c := range t.pts.Angles {
			if cos, ok := p[c]; ok && 1+cos > 1e-9 {
				x[len(t.pts.Free)+i] = p[t.d.Ring.Symbol(c).Partner] / (1 + cos)
			}
		}
		out = append(out, x)
	}
	return out
}

// coordinates are the free coordinates of a sampled point.
func (t *task) coordinates(values []float64) []float64 {
	n := len(t.pts.Free)
	x := slices.Clone(values[:n])
	for i := range t.pts.Angles {
		c, s := values[n+2*i], values[n+2*i+1]
		if 1+c > 1e-9 {
			x = append(x, s/(1+c))
		} else {
			x = append(x, 1e9)
		}
	}
	return x
}

// point is the exact point with the given rational coordinates.
func (t *task) point(x []*big.Rat) (jet.Point, bool) {
	at := jet.Point{}
	n := len(t.pts.Free)
	for i, v := range t.pts.Free {
		at[v] = algebra.FromBig(x[i])
	}
	for i, a := range t.pts.Angles {
		h := algebra.FromBig(x[n+i])
		sq := h.Mul(h)
		den := sq.Add(algebra.Int(1))
		at[a], _ = algebra.Int(1).Sub(sq).Quo(den)
		at[t.d.Ring.Symbol(a).Partner], _ = h.Add(h).Quo(den)
	}
	for i, s := range t.pts.Signs {
		at[s] = t.Signs[i]
	}
	maps.Copy(at, t.pts.Fixed)
	if t.d.Claim.Jump {
		if err := t.d.Traces(at); err != nil {
			return nil, false
		}
	}
	return at, true
}

// laws adds, to the default mixture, samples near the equality set: Newton
// steps on the gap in one derivative.
func (t *task) laws() []sample.Law {
	laws := sample.DefaultLaws()
	for _, v := range t.d.squareVars(t.g.Poly) {
		i := slices.Index(t.pts.Free, v)
		if i < 0 || t.g.Poly.Degree(v) < 2 {
			continue
		}
		// The gap touches zero where its derivative by v vanishes.
		c := &compiler{t.d.Ring, program.NewBuilder(), map[algebra.Var]program.Ref{}}
		for k, s := range t.pts.Signs {
			c.of[s] = c.b.Const(t.Signs[k].Float64())
		}
		for k, w := range t.pts.Free {
			c.of[w] = c.b.Input(k)
		}
		for w, x := range t.pts.Fixed {
			c.of[w] = c.b.Const(x.Float64())
		}
		n := len(t.pts.Free)
		for k, a := range t.pts.Angles {
			c.of[a], c.of[t.d.Ring.Symbol(a).Partner] = c.b.Input(n+2*k), c.b.Input(n+2*k+1)
		}
		first := c.poly(t.g.Poly.Deriv(v))
		second := c.poly(t.g.Poly.Deriv(v).Deriv(v))
		for k := range t.layout.Len() {
			c.b.Input(k)
		}
		prog, err := c.b.Compile(first, second)
		if err != nil {
			continue
		}
		if correct, err := sample.Newton(prog, i, 4); err == nil {
			laws = append(laws, sample.Near{Base: sample.Gaussian{}, Correct: correct})
		}
		if len(laws) >= 8 {
			break
		}
	}
	return laws
}
