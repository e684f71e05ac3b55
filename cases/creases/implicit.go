package creases

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"creaseproof/entropy/formula"
	"creaseproof/identity/claim"
	"creaseproof/quadrature/branches"
	"creaseproof/quadrature/levelset"
)

// implicit evaluates a level set or branches.
func (c *combination) implicit(r Result, rel, allowed float64) (Result, error) {
	d, err := c.domain()
	if err != nil {
		return r, err
	}
	if c.s.shape.branches != nil {
		reason, onWell, err := c.branchesOffWell(d)
		if err != nil {
			return r, err
		}
		if reason != "" {
			return r.refuse(reason), nil
		}
		if done, err := c.faces(&r, d); done || err != nil {
			return r, err
		}
		r.Pairs = nil
		return c.finish(r, rel, allowed, func(t *tally) (string, error) { return c.creases(t, d, onWell) })
	}
	reason, onWell, err := c.offWell()
	if err != nil {
		return r, err
	}
	if reason != "" {
		return r.refuse(reason), nil
	}
	return c.finish(r, rel, allowed, func(t *tally) (string, error) {
		phi, err := c.levelFunction(*c.s.shape.level, nil)
		if err != nil {
			return "", err
		}
		v, reason, err := c.within(t, &d, phi, d.trims(), d.box, onWell, 0)
		t.add(v)
		if reason == "" && err == nil && v.empty {
			reason = fmt.Sprintf("the level set %s = 0 misses the domain%s: by enclosures it has no point there", strings.TrimSpace(c.s.shape.level.text.S), c.where())
		}
		return reason, err
	})
}

// tally adds up parts of a surface.
type tally struct {
	rel, abs         float64
	energy, failure  float64
	area             float64
	nodes, undecided int
	resolution       float64
	limited          error
	pairs            []Pair
}

// finish runs the integrals and compares.
func (c *combination) finish(r Result, rel, allowed float64, run func(*tally) (string, error)) (Result, error) {
	t := &tally{rel: math.Max(1e-13, math.Min(1e-11, rel/10))}
	if r.Claimed != nil && *r.Claimed == 0 {
		t.abs = rel / 10
	}
	reason, err := run(t)
	if c.ctx.Err() != nil {
		return r, c.ctx.Err()
	}
	if err != nil {
		return r, err
	}
	r.Evaluations = t.nodes
	if reason != "" {
		return r.refuse(reason), nil
	}
	r.Energy, r.Error, r.Area = &t.energy, &t.failure, &t.area
	r.Pairs = t.pairs
	if t.undecided > 0 {
		r.Resolution = &t.resolution
	}
	c.compare(&r, rel, allowed)
	if t.limited != nil && r.Verdict != claim.Supported && !(t.failure <= rel*math.Abs(t.energy)) {
		r.Verdict = claim.Open
		if r.Expected == "" {
			r.Expected = claim.Supported
		}
		r.add("the accuracy asked for was not reached: " + t.limited.Error())
	}
	r.Met = r.Verdict == r.Expected || r.Verdict == "" && r.Expected == ""
	return r, nil
}

// share is what a part of a surface adds.
type share struct {
	energy, failure, area float64
	undecided             int
	resolution            float64
	limited               error
	empty                 bool
}

func (t *tally) add(v share) {
	t.energy += v.energy
	t.failure += v.failure
	t.area += v.area
	t.undecided += v.undecided
	t.resolution = math.Max(t.resolution, v.resolution)
	if v.limited != nil {
		t.limited = v.limited
	}
}

// blocks cuts the box of a round domain into parts such that its boundary does
// not pass through those about its centre: there branches may meet, just where
// the boundary is parallel to a side.
func (d *domain) blocks(box [][2]float64) [][][2]float64 {
	list := [][][2]float64{slices.Clone(box)}
	for i, k := range d.round {
		cuts := []float64{d.center[i] - 0.5234*d.radius, d.center[i] + 0.5417*d.radius}
		var next [][][2]float64
		for _, b := range list {
			for _, at := range cuts {
				if b[k][0] < at && at < b[k][1] {
					low := slices.Clone(b)
					low[k][1] = at
					next = append(next, low)
					b = slices.Clone(b)
					b[k][0] = at
				}
			}
			next = append(next, b)
		}
		list = next
	}
	return list
}

// within is over for a part of a round domain: where cells are left undecided
// in one piece it is done in blocks.
func (c *combination) within(t *tally, d *domain, phi levelset.Function, trims []levelset.Function, box [][2]float64, onWell bool, abs float64) (share, string, error) {
	v, reason, err := c.over(t, phi, trims, box, onWell, abs)
	if d.round == nil || !errors.Is(v.limited, levelset.ErrResolution) {
		return v, reason, err
	}
	sum := share{empty: true}
	for _, b := range d.blocks(box) {
		w, reason, err := c.over(t, phi, trims, b, onWell, max(abs, t.rel*math.Abs(v.energy)/8))
		if reason != "" || err != nil {
			return w, reason, err
		}
		if w.empty {
			continue
		}
		sum.empty = false
		sum.energy += w.energy
		sum.failure += w.failure
		sum.area += w.area
		sum.undecided += w.undecided
		sum.resolution = math.Max(sum.resolution, w.resolution)
		if w.limited != nil {
			sum.limited = w.limited
		}
	}
	if sum.failure < v.failure {
		return sum, "", nil
	}
	return v, "", nil
}

// over integrates over a part of a level set; abs is the error that does not
// matter. The reason is that for which the surface is refused.
func (c *combination) over(t *tally, phi levelset.Function, trims []levelset.Function, box [][2]float64, onWell bool, abs float64) (v share, reason string, err error) {
	tr, options, err := c.traces()
	if err != nil {
		return v, "", err
	}
	density, inexact, err := c.density()
	if err != nil {
		return v, "", err
	}
	if onWell {
		options.Well = nil
	}
	at := newNodes(len(box), tr, options, density, box)
	q, err := levelset.Integrate(c.ctx, phi, trims, box, at.at, levelset.Options{
		Parts: 1, Probe: at.near, Rel: t.rel, Abs: math.Max(t.abs, abs), MaxNodes: c.o.MaxEvaluations,
	})
	if c.ctx.Err() != nil {
		return v, "", c.ctx.Err()
	}
	t.nodes += q.Nodes
	switch {
	case at.bad != nil:
		return v, c.explain(at.bad), nil
	case errors.Is(err, levelset.ErrEmpty):
		return share{empty: true}, "", nil
	case errors.Is(err, levelset.ErrBudget), errors.Is(err, levelset.ErrResolution), errors.Is(err, levelset.ErrAccuracy):
		v.limited = err
	case err != nil:
		return v, strings.TrimPrefix(err.Error(), "level set: ") + c.where(), nil
	}
	v.energy, v.failure, v.area = q.Value[0], q.Error[0]+inexact*math.Abs(q.Value[0]), q.Area
	v.undecided, v.resolution = q.Undecided, q.Resolution
	return v, "", nil
}

// creases integrates over the sheets of all pairs of branches.
func (c *combination) creases(t *tally, d domain, onWell bool) (reason string, err error) {
	h := &c.s.shape
	n := len(h.branches)
	pairs := []branches.Pair{{First: 0, Second: 1, Box: d.box}}
	if n > 2 {
		enclose, err := c.ranged()
		if err != nil {
			return "", err
		}
		if pairs, err = branches.Pairs(c.ctx, h.tree, n, d.box, enclose, branches.PairOptions{}); err != nil {
			return "", err
		}
	}
	for _, p := range pairs {
		op, systems, err := branches.Cells(h.tree, p.First, p.Second, p.Known)
		if err != nil {
			return "", fault(h.branches[p.First].text, "combine fewer branches", "branches %d and %d: the combination needs too many systems of inequalities", p.First+1, p.Second+1)
		}
		plus, minus := p.First, p.Second
		if op == branches.Min {
			plus, minus = minus, plus
		}
		between := c.between(plus, minus)
		phi, err := c.levelFunction(h.branches[p.First], &h.branches[p.Second])
		if err != nil {
			return "", err
		}
		var sum Pair
		found := false
		for _, system := range systems {
			trims := d.trims()
			for _, q := range system {
				above, below := h.branches[p.First], h.branches[q.Branch]
				if q.Relation == branches.Above {
					above, below = below, above
				}
				f, err := c.levelFunction(above, &below)
				if err != nil {
					return "", err
				}
				trims = append(trims, f)
			}
			v, reason, err := between.within(t, &d, phi, trims, p.Box, onWell, t.rel*math.Abs(t.energy)/float64(len(pairs)))
			if err != nil || reason != "" {
				return c.ofPair(p, reason), err
			}
			if v.empty {
				continue
			}
			t.add(v)
			found = true
			sum.Energy += v.energy
			sum.Error += v.failure
			sum.Area += v.area
		}
		if found {
			sum.Branches = [2]int{p.First + 1, p.Second + 1}
			t.pairs = append(t.pairs, sum)
		}
	}
	return "", nil
}

func (c *combination) ofPair(p branches.Pair, reason string) string {
	if reason == "" {
		return ""
	}
	return fmt.Sprintf("branches %d and %d: %s", p.First+1, p.Second+1, reason)
}

// between is the combination with two branches as its traces.
func (c *combination) between(plus, minus int) *combination {
	s := *c.s
	s.isU = true
	s.plus, s.minus = []formulaText{s.shape.branches[plus]}, []formulaText{s.shape.branches[minus]}
	out := *c
	out.s = &s
	return &out
}

// branchesOffWell brings the residual of every branch to exact normal form;
// onWell says that all vanish. Where one does not it is enclosed at points of
// the domain, first at those where u is that branch.
func (c *combination) branchesOffWell(d domain) (reason string, onWell bool, err error) {
	if c.set.Model.Residual == nil {
		return "", false, nil
	}
	onWell = true
	for k, f := range c.s.shape.branches {
		c.in.Reset()
		c.in.Given = map[int]formula.Node{0: f.node}
		r, err := c.in.Scalar(c.set.Model.Residual)
		c.in.Given = nil
		c.in.Reset()
		if c.ctx.Err() != nil {
			return "", false, c.ctx.Err()
		}
		if err != nil || r.Err() != nil {
			onWell = false
			continue
		}
		if r.IsZero() {
			continue
		}
		onWell = false
		points, err := c.active(d, k)
		if err != nil {
			return "", false, err
		}
		for _, x := range points {
			v := c.exact.Ring.Enclose(r, c.rationalPoint(x), precision)
			if s, ok := v.Sign(); ok && s != 0 {
				lo, _ := v.Lo().Float64()
				return fmt.Sprintf("branch %d, %s, is off the well%s%s: the residual is %.6g, not zero, by an enclosure",
					k+1, strings.TrimSpace(f.text.S), c.place(x, nil), c.where(), lo), false, nil
			}
		}
	}
	return "", onWell, nil
}
