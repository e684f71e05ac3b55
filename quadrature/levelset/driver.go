package levelset

import (
	"container/heap"
	"context"
	"errors"
	"fmt"
	"math"
)

// A driver refines leaves until the tolerance is met.
type driver struct {
	*plan
	*evaluator
	opt   Options
	heap  leaves
	done  []*leaf // no further refinement
	taken int     // sheets made into leaves
	want  []float64
	sum   []float64 // of the estimates
	total []float64 // of the values
	bulk  []float64 // of the absolute values
}

func newDriver(p *plan, e *evaluator, opt Options) *driver {
	n := e.parts
	return &driver{plan: p, evaluator: e, opt: opt,
		want: make([]float64, n), sum: make([]float64, n), total: make([]float64, n), bulk: make([]float64, n)}
}

// run resolves the surface, then integrates, and resolves further if what the
// undecided cells can hold turns out to be too much.
func (d *driver) run(ctx context.Context) error {
	part := d.opt.Rel / 32
	for range 8 {
		if err := d.plan.run(ctx, part, d.opt.MaxCells); err != nil {
			return err
		}
		if err := d.refine(ctx); err != nil {
			return err
		}
		if len(d.queue)+len(d.atoms) == 0 {
			return nil
		}
		over := 0.0
		lost, _ := d.lost()
		for c, lost := range lost {
			if d.want[c] > 0 && d.matters(c) {
				over = max(over, lost/d.want[c])
			} else if d.nodes == 0 {
				return ErrResolution
			}
		}
		if over <= 0.5 {
			return nil
		}
		if len(d.queue) == 0 || d.plan.cells >= d.opt.MaxCells {
			return ErrResolution
		}
		part /= 4 * over
	}
	return ErrResolution
}

// matters reports whether a tolerance is asked for component c.
func (d *driver) matters(c int) bool { return c > 0 || d.opt.AreaRel > 0 || d.parts == 1 }

// aim sets the errors allowed.
func (d *driver) aim() {
	for c := range d.want {
		rel := d.opt.Rel
		if c == 0 && d.opt.AreaRel > 0 {
			rel = d.opt.AreaRel
		}
		d.want[c] = max(d.opt.Abs, rel*math.Abs(d.total[c]), 0x1p-50*d.bulk[c])
	}
}

// firstOrder is the order with which a leaf begins: less for small ones.
func (d *driver) firstOrder(share float64) int {
	rel := min(max(d.opt.Rel, 1e-14), 1e-2)
	full := max(8, 4-0.7*math.Log10(rel))
	if d.plan.dim == 2 {
		full += 4
	}
	part := 1 - math.Log(max(share, 1e-300))/math.Log(rel)
	return min(max(int(math.Round(full*part)), 4), 16)
}

// refine makes leaves of new sheets and improves the worst leaf until the
// estimates are within the tolerance.
func (d *driver) refine(ctx context.Context) error {
	for ; d.taken < len(d.sheets); d.taken++ {
		s := d.sheets[d.taken]
		n := d.firstOrder(s.share / d.bases)
		l := d.newLeaf(s)
		l.p1, l.q1, l.np, l.nq, l.safety = 1, 1, n, n, 1
		if err := d.evaluate(l); err != nil {
			return err
		}
		d.account(l, 1)
		heap.Push(&d.heap, l)
	}
	d.aim()
	for _, l := range d.heap {
		d.rank(l)
	}
	heap.Init(&d.heap)
	for i := 0; ; i++ {
		if i%32 == 0 {
			if err := ctx.Err(); err != nil {
				return err
			}
			d.recount()
			d.aim()
		}
		if d.met() {
			d.recount()
			d.aim()
			if d.met() {
				return nil
			}
		}
		if len(d.heap) == 0 {
			return ErrAccuracy
		}
		if d.nodes >= d.opt.MaxNodes {
			return ErrBudget
		}
		if err := d.improve(heap.Pop(&d.heap).(*leaf)); err != nil {
			return err
		}
	}
}

func (d *driver) newLeaf(s *sheet) *leaf {
	n := d.parts
	buf := make([]float64, 4*n)
	return &leaf{sheet: s, value: buf[:n:n], estimate: buf[n : 2*n : 2*n], size: buf[2*n : 3*n : 3*n],
		noise: buf[3*n:], decay: make([][2][3]float64, n)}
}

func (d *driver) met() bool {
	for c, w := range d.want {
		if d.matters(c) && !(d.sum[c] <= w) {
			return false
		}
	}
	return true
}

// account adds a leaf to the sums, or takes it out.
func (d *driver) account(l *leaf, sign float64) {
	for c := range d.sum {
		d.sum[c] += sign * l.estimate[c]
		d.total[c] += sign * l.value[c]
		d.bulk[c] += sign * l.size[c]
	}
}

// recount computes the sums anew.
func (d *driver) recount() {
	for c := range d.sum {
		d.sum[c], d.total[c], d.bulk[c] = 0, 0, 0
	}
	for _, list := range [2][]*leaf{d.heap, d.done} {
		for _, l := range list {
			d.account(l, 1)
		}
	}
}

func (d *driver) rank(l *leaf) {
	l.priority = 0
	for c, w := range d.want {
		if d.matters(c) && l.estimate[c] > 0 {
			l.priority = max(l.priority, l.estimate[c]/w)
		}
	}
}

// improve replaces a leaf by one of higher order or by two halves.
func (d *driver) improve(l *leaf) error {
	pure := true
	for c, e := range l.estimate {
		pure = pure && (!d.matters(c) || e <= 2*l.noise[c])
	}
	if pure {
		d.done = append(d.done, l)
		return nil
	}
	np, nq, errP, errQ := d.orders(l)
	var parts []*leaf
	part := func() *leaf {
		n := d.newLeaf(l.sheet)
		n.p0, n.p1, n.q0, n.q1, n.np, n.nq, n.safety, n.depth = l.p0, l.p1, l.q0, l.q1, l.np, l.nq, l.safety, l.depth+1
		parts = append(parts, n)
		return n
	}
	limit := func(n int) int { return min(maxOrder, 2*n+2) }
	switch {
	case l.edge && l.depth <= 60:
		m := l.p0 + (l.p1-l.p0)/2
		part().p1 = m
		part().p0 = m
	case np <= limit(l.np) && nq <= limit(l.nq) && (np > l.np || nq > l.nq):
		n := part()
		n.np, n.nq = np, nq
	case l.depth > 60:
		d.done = append(d.done, l)
		return nil
	case errP >= errQ:
		m := l.p0 + (l.p1-l.p0)/2
		part().p1 = m
		part().p0 = m
	default:
		m := l.q0 + (l.q1-l.q0)/2
		part().q1 = m
		part().q0 = m
	}
	for _, n := range parts {
		if err := d.evaluate(n); err != nil {
			// Keep what was there, so that the result stays whole.
			d.done = append(d.done, l)
			return err
		}
	}
	d.judge(l, parts)
	d.account(l, -1)
	for _, n := range parts {
		d.account(n, 1)
		d.rank(n)
		heap.Push(&d.heap, n)
	}
	return nil
}

// judge compares a leaf with those that replace it. Where the old estimate was
// below the difference, the new ones are not believed either.
func (d *driver) judge(old *leaf, parts []*leaf) {
	worst := 0.0
	for c := range old.value {
		diff, noise := old.value[c], old.noise[c]
		for _, n := range parts {
			diff -= n.value[c]
			noise += n.noise[c]
		}
		if diff = math.Abs(diff) - noise; diff > old.estimate[c] {
			worst = max(worst, diff/max(old.estimate[c], 0x1p-53*old.size[c]))
		}
	}
	if worst > 0 {
		for _, n := range parts {
			f := min(4*worst, 1000)
			n.safety = min(n.safety*f, 1e6)
			for c := range n.estimate {
				diff := old.value[c]
				for _, m := range parts {
					diff -= m.value[c]
				}
				n.estimate[c] = max(n.estimate[c], min(f*n.estimate[c], mostDoubt*(n.size[c]+math.Abs(diff))))
			}
		}
	}
}

// mostDoubt bounds the estimates of the errors of parts that are not believed,
// by what they hold and by what they have changed.
const mostDoubt = 64

// result puts the numbers together.
func (d *driver) result(stop error) (Result, error) {
	d.recount()
	d.aim()
	r := Result{
		Value: make([]float64, d.opt.Parts), Error: make([]float64, d.opt.Parts),
		Nodes: d.nodes, Cells: d.plan.cells, Sheets: len(d.sheets),
	}
	r.UndecidedArea, r.Resolution, r.Undecided = d.undecided()
	lost, thin := d.lost()
	for c, v := range thin {
		lost[c] += v
	}
	for c := range d.sum {
		noise := 4 * 0x1p-52 * d.bulk[c]
		for _, list := range [2][]*leaf{d.heap, d.done} {
			for _, l := range list {
				noise += l.rounding(c)
			}
		}
		v, e := d.total[c], d.sum[c]+noise+lost[c]
		if c == 0 {
			r.Area, r.AreaError = v, e
		} else {
			r.Value[c-1], r.Error[c-1] = v, e
		}
	}
	if stop == nil || errors.Is(stop, ErrResolution) || errors.Is(stop, ErrBudget) || errors.Is(stop, ErrAccuracy) {
		d.components(&r, lost)
	}
	switch {
	case stop == nil && len(d.sheets) == 0 && r.Undecided == 0 && d.skipped == 0:
		return r, ErrEmpty
	case errors.Is(stop, ErrResolution):
		return r, fmt.Errorf("%w: %d cells of diameter up to %.3g are undecided and can hold an area of %.3g",
			stop, r.Undecided, r.Resolution, r.UndecidedArea)
	case errors.Is(stop, ErrBudget), errors.Is(stop, ErrAccuracy):
		return r, fmt.Errorf("%w: after %d nodes, estimated errors %.3g", stop, r.Nodes, r.Error)
	case stop != nil:
		return r, fmt.Errorf("level set: %w", stop)
	}
	return r, nil
}

// leaves is a heap, the worst first.
type leaves []*leaf

func (q leaves) Len() int           { return len(q) }
func (q leaves) Less(i, j int) bool { return q[i].priority > q[j].priority }
func (q leaves) Swap(i, j int)      { q[i], q[j] = q[j], q[i] }
func (q *leaves) Push(l any)        { *q = append(*q, l.(*leaf)) }
func (q *leaves) Pop() any {
	old := *q
	l := old[len(old)-1]
	*q = old[:len(old)-1]
	return l
}
