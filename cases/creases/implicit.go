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
		if out, done, err := c.flat(r, d, onWell, rel, allowed); done || err != nil {
			return out, err
		}
		if reason, err = c.undefined(d); reason != "" || err != nil {
			return r.refuse(reason), err
		}
		return c.finish(r, rel, allowed, func(t *tally) (string, error) { return c.creases(t, d, onWell) })
	}
	reason, onWell, err := c.offWell()
	if err != nil {
		return r, err
	}
	if reason != "" {
		return r.refuse(reason), nil
	}
	if reason, _ := c.torn(); reason != "" {
		return r.refuse(reason), nil
	}
	return c.finish(r, rel, allowed, func(t *tally) (string, error) {
		return c.level(t, &d, onWell)
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
	sheets           []Sheet // of a level set
	unsettled        bool
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
	r.Pairs, r.Sheets, r.Unsettled = t.pairs, t.sheets, t.unsettled
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
	sheets                []Sheet
	unsettled             bool // how many sheets there are
	vanishing             *levelset.VanishingError
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

// join adds another share, with its sheets.
func (s *share) join(v share) {
	if v.empty {
		return
	}
	s.empty = false
	s.energy += v.energy
	s.failure += v.failure
	s.area += v.area
	s.undecided += v.undecided
	s.resolution = math.Max(s.resolution, v.resolution)
	if v.limited != nil {
		s.limited = v.limited
	}
	s.sheets = append(s.sheets, v.sheets...)
	s.unsettled = s.unsettled || v.unsettled
}

// part is a part of a level set: where all conditions of one of the systems
// hold, in a box.
type part struct {
	phi     levelset.Function
	systems [][]levelset.Function
	box     [][2]float64
	abs     float64 // error that does not matter
	cells   int     // budget of boxes, the usual one if 0
	// sign, if not nil, says at a node by what the normal of phi is turned.
	sign func(x, n []float64) float64
}

// cuts are places at which the box of a round domain is cut such that its
// boundary does not pass through the blocks about its centre: there branches may
// meet, just where the boundary is parallel to a side.
func (d *domain) cuts() [][]float64 {
	list := make([][]float64, len(d.box))
	for i, k := range d.round {
		list[k] = []float64{d.center[i] - 0.5234*d.radius, d.center[i] + 0.5417*d.radius}
	}
	return list
}

// within is over for a part of a domain, in whose boundary it must not lie.
func (c *combination) within(t *tally, d *domain, p part, onWell bool) (share, string, error) {
	if place, found := c.alongSide(d, p); found {
		return share{}, c.runsAlong(place), nil
	}
	v, reason, err := c.inBlocks(t, d, p, onWell)
	if place, found := c.flatInSide(d, v.sheets); found && reason == "" && err == nil {
		reason = c.runsAlong(place)
	}
	return v, reason, err
}

// inBlocks is over for a part of a domain: where cells are left undecided in one
// piece of a round one it is done in blocks.
func (c *combination) inBlocks(t *tally, d *domain, p part, onWell bool) (share, string, error) {
	v, reason, err := c.over(t, p, nil, onWell)
	if d.round == nil || !errors.Is(v.limited, levelset.ErrResolution) {
		return v, reason, err
	}
	w, reason, err := c.over(t, p, d.cuts(), onWell)
	if reason != "" || err != nil || w.empty || w.failure < v.failure {
		return w, reason, err
	}
	return v, "", nil
}

// over integrates over a part of a level set, whose box is cut in the beginning
// at the places given. The reason is that for which the surface is refused.
func (c *combination) over(t *tally, p part, cuts [][]float64, onWell bool) (v share, reason string, err error) {
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
	at := newNodes(len(p.box), tr, options, density, p.box)
	node, near := at.at, at.near
	if p.sign != nil {
		node, near = turned(at.at, p.sign, len(p.box)), turned(at.near, p.sign, len(p.box))
	}
	q, err := levelset.IntegrateUnion(c.ctx, p.phi, p.systems, p.box, node, levelset.Options{
		Parts: 1, Probe: near, Rel: t.rel, Abs: math.Max(t.abs, p.abs), MaxNodes: c.o.MaxEvaluations, MaxCells: p.cells, Cuts: cuts,
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
	case errors.As(err, &v.vanishing):
		return v, "", nil
	case err != nil:
		return v, strings.TrimPrefix(err.Error(), "level set: ") + c.where(), nil
	}
	v.energy, v.failure, v.area = q.Value[0], q.Error[0]+inexact*math.Abs(q.Value[0]), q.Area
	v.undecided, v.resolution, v.unsettled = q.Undecided, q.Resolution, !q.Settled
	for _, s := range q.Components {
		v.sheets = append(v.sheets, Sheet{
			Energy: s.Value[0], Error: s.Error[0] + inexact*math.Abs(s.Value[0]), Area: s.Area, Point: s.Point, Box: s.Box,
		})
	}
	return v, "", nil
}

// turned is a density with the normal turned by a sign.
func turned(f func(x, n, out []float64), sign func(x, n []float64) float64, dim int) func(x, n, out []float64) {
	m := make([]float64, dim)
	return func(x, n, out []float64) {
		s := sign(x, n)
		for i := range m {
			m[i] = s * n[i]
		}
		f(x, m, out)
	}
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
	known := orders{c, map[[2]int]int{}}
	for _, p := range pairs {
		if !known.settle(&p) {
			continue
		}
		v, third, reason, err := c.crease(t, &d, p, nil, len(pairs), onWell)
		if err == nil && reason == "" && v.vanishing != nil {
			switch order := c.beside(p); {
			case third < 0:
				reason = c.onBoundary(v.vanishing)
			case slices.Contains(order, third):
				w, other, again, fault := c.crease(t, &d, p, order, len(pairs), onWell)
				if v, reason, err = w, again, fault; v.vanishing != nil && err == nil {
					reason = c.undecidedBeside(p, other, v.vanishing)
				}
			default:
				reason = c.undecidedBeside(p, third, v.vanishing)
			}
		}
		if err != nil || reason != "" {
			return c.ofPair(p, reason), err
		}
		if v.empty {
			continue
		}
		t.add(v)
		if v.sheets == nil && !v.unsettled && v.limited == nil {
			continue // they only touch
		}
		t.pairs = append(t.pairs, Pair{
			Branches: [2]int{p.First + 1, p.Second + 1}, Energy: v.energy, Error: v.failure, Area: v.area,
			Sheets: v.sheets, Unsettled: v.unsettled,
		})
	}
	return "", nil
}

// crease integrates over the sheets of one pair of count. Order is that of
// branches.Cells. Where a condition vanishes third is the branch it is about, or
// -1 for that of the domain.
func (c *combination) crease(t *tally, d *domain, p branches.Pair, order []int, count int, onWell bool) (sum share, third int, reason string, err error) {
	h := &c.s.shape
	systems, err := branches.Cells(h.tree, p.First, p.Second, p.Known, order)
	if err != nil {
		return sum, 0, "", fault(h.branches[p.First].text, "combine fewer branches", "branches %d and %d: the combination needs too many systems of inequalities", p.First+1, p.Second+1)
	}
	phi, err := c.levelFunction(h.branches[p.First], &h.branches[p.Second])
	if err != nil {
		return sum, 0, "", err
	}
	sum.empty = true
	for _, op := range [2]branches.Op{branches.Max, branches.Min} {
		part := part{phi: phi, box: p.Box, abs: t.rel * math.Abs(t.energy) / float64(count)}
		var about [][]branches.Condition
		for _, system := range systems {
			if system.Op != op {
				continue
			}
			trims := d.trims()
			for _, q := range system.Conditions {
				above, below := h.branches[p.First], h.branches[q.Branch]
				if q.Relation == branches.Above {
					above, below = below, above
				}
				f, err := c.levelFunction(above, &below)
				if err != nil {
					return sum, 0, "", err
				}
				trims = append(trims, f)
			}
			part.systems, about = append(part.systems, trims), append(about, system.Conditions)
		}
		if about == nil {
			continue
		}
		plus, minus := p.First, p.Second
		if op == branches.Min {
			plus, minus = minus, plus
		}
		v, reason, err := c.between(plus, minus).within(t, d, part, onWell)
		if e := v.vanishing; e != nil {
			third = -1
			if k := e.Condition - len(d.trims()); k >= 0 {
				third = about[e.System][k].Branch
			}
			return v, third, reason, err
		}
		if err != nil || reason != "" {
			return v, 0, reason, err
		}
		sum.join(v)
	}
	return sum, 0, "", nil
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
