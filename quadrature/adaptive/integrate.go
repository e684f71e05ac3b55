package adaptive

import (
	"container/heap"
	"math"
	"slices"
)

// Limits of the subdivision.
const (
	deepest    = 60 // halvings
	longStall  = 6  // halvings in a row that do not lessen the estimate
	keptPanels = 8  // a longer subdivision is not handed on by a Mesh
	gain       = 0.05
)

// Run integrates. The error is one of F, or nil; whether the tolerance was met
// is in the result.
func (t *Task) Run() (Result, error) {
	if t.Mesh == nil {
		t.Mesh = new(Mesh)
	}
	if t.Periodic && !t.Mesh.failed {
		r, ok, err := t.ring()
		if err != nil || ok {
			return r, err
		}
		t.Mesh.failed = true
	}
	return t.bisect()
}

// panelHeap orders panels by decreasing key.
type panelHeap []*panel

func (h panelHeap) Len() int           { return len(h) }
func (h panelHeap) Less(i, j int) bool { return h[i].key > h[j].key }
func (h panelHeap) Swap(i, j int)      { h[i], h[j] = h[j], h[i] }
func (h *panelHeap) Push(x any)        { *h = append(*h, x.(*panel)) }
func (h *panelHeap) Pop() any {
	o := *h
	p := o[len(o)-1]
	*h = o[:len(o)-1]
	return p
}

// bisection is the state of a global adaptive integration.
type bisection struct {
	t      *Task
	active panelHeap // to be refined if need be
	final  []*panel  // refining these does not help
	est    [Width]float64
	noise  [Width]float64
	value  [Width]float64
	scale  [Width]float64
	rough  bool           // a panel that touches no end was not resolved
	before [Width]float64 // estimate at half the number of steps
}

func (t *Task) bisect() (Result, error) {
	b := &bisection{t: t}
	start := t.Mesh.panels
	if len(start) == 0 {
		start = t.begin()
	}
	for i := range start {
		p := start[i]
		if err := t.apply(&p); err != nil {
			return Result{}, err
		}
		b.active = append(b.active, &p)
	}
	b.total()
	ps := b.active
	b.active = nil
	for _, p := range ps {
		b.put(p)
	}
	next := 16
	for n := 1; ; n++ {
		if b.met() {
			if b.total(); b.met() {
				again, err := b.audit()
				if err != nil {
					return Result{}, err
				}
				if !again {
					break
				}
			}
		}
		if len(b.active) == 0 || t.Work.spent() {
			break
		}
		p := heap.Pop(&b.active).(*panel)
		kids, err := b.refine(p)
		if err != nil {
			return Result{}, err
		}
		b.account(p, -1)
		for _, k := range kids {
			b.account(k, 1)
			b.put(k)
		}
		if n%64 == 0 {
			b.total()
		}
		if n == next {
			if b.noisy() {
				break
			}
			next *= 2
		}
	}
	return b.result(), nil
}

// noisy reports whether the estimate is small, spread over many panels, and has
// hardly changed since it was last asked for, at half the number of steps: then
// it is the noise in the integrand that stays, and finer panels do not help.
func (b *bisection) noisy() bool {
	b.total()
	before := b.before
	b.before = b.est
	noisy := false
	for c := range Width {
		if b.est[c] <= b.tolerance(c) {
			continue
		}
		if b.est[c] < 0.7*before[c] || before[c] == 0 || b.est[c] > 1e-7*b.scale[c] {
			return false
		}
		for _, p := range b.active {
			if p.est[c] > b.est[c]/4 {
				return false
			}
		}
		noisy = true
	}
	return noisy
}

// begin cuts the interval into equal panels.
func (t *Task) begin() []panel {
	n := max(1, t.MinPanels)
	ps := make([]panel, n)
	for i := range ps {
		ps[i] = panel{lo: t.at(i, n), hi: t.at(i+1, n), order: 15, left: -1, right: -1}
	}
	ps[0].left, ps[n-1].right = 0, 0
	return ps
}

// at is the i-th of n equal steps through the interval.
func (t *Task) at(i, n int) float64 {
	if i == n {
		return t.Hi
	}
	return t.Lo + (t.Hi-t.Lo)*(float64(i)/float64(n))
}

// put files a panel, as final if its estimate is within its noise.
func (b *bisection) put(p *panel) {
	p.key = 0
	for c := range Width {
		if p.est[c] > p.v.Noise[c] && b.scale[c] > 0 {
			p.key = math.Max(p.key, p.est[c]/b.scale[c])
		}
	}
	lo, _ := p.at(p.lo)
	hi, _ := p.at(p.hi)
	if p.key == 0 || p.depth >= deepest || p.stall >= longStall ||
		p.width() <= 8*epsilon*math.Max(math.Abs(lo), math.Abs(hi)) {
		b.final = append(b.final, p)
		return
	}
	heap.Push(&b.active, p)
}

func (b *bisection) account(p *panel, sign float64) {
	for c := range Width {
		b.est[c] += sign * p.est[c]
		b.noise[c] += sign * p.v.Noise[c]
		b.value[c] += sign * p.v.Value[c]
	}
}

// total sums everything anew.
func (b *bisection) total() {
	var value, est, noise, size [Width]Sum
	for _, list := range [][]*panel{b.final, b.active} {
		for _, p := range list {
			for c := range Width {
				value[c].Add(p.v.Value[c])
				est[c].Add(p.est[c])
				noise[c].Add(p.v.Noise[c])
				size[c].Add(p.v.Size[c])
			}
		}
	}
	for c := range Width {
		b.value[c], b.est[c] = value[c].Value(), est[c].Value()
		b.noise[c], b.scale[c] = noise[c].Value(), size[c].Value()
	}
}

func (b *bisection) tolerance(c int) float64 {
	return math.Max(math.Max(b.t.Abs[c], b.t.Rel*math.Abs(b.value[c])), b.noise[c])
}

func (b *bisection) met() bool {
	for c := range Width {
		if b.est[c] > b.tolerance(c) {
			return false
		}
	}
	return true
}

func (b *bisection) result() Result {
	r := Result{Converged: b.met(), Rough: b.rough}
	b.total()
	for c := range Width {
		r.Value[c], r.Noise[c], r.Size[c] = b.value[c], b.noise[c], b.scale[c]
		r.Error[c] = b.est[c] + b.noise[c]
	}
	all := append(slices.Clone(b.final), b.active...)
	b.t.Mesh.panels = b.t.Mesh.panels[:0]
	if len(all) <= keptPanels {
		slices.SortFunc(all, func(p, q *panel) int {
			a, _ := p.at((p.lo + p.hi) / 2)
			c, _ := q.at((q.lo + q.hi) / 2)
			switch {
			case a < c:
				return -1
			case a > c:
				return 1
			}
			return 0
		})
		for _, p := range all {
			k := *p
			k.stall = 0
			b.t.Mesh.panels = append(b.t.Mesh.panels, k)
		}
	}
	return r
}

// worst is the largest estimate of a panel in units of the tolerance.
func (b *bisection) worst(p *panel) (excess, decay float64) {
	for c := range Width {
		if p.est[c] <= p.v.Noise[c] {
			continue
		}
		if tol := b.tolerance(c); tol > 0 {
			excess = math.Max(excess, p.est[c]/tol)
		} else {
			excess = math.Inf(1)
		}
		decay = math.Max(decay, p.decay[c])
	}
	return excess, decay
}

// refine replaces a panel by better ones.
func (b *bisection) refine(p *panel) ([]*panel, error) {
	excess, decay := b.worst(p)
	if p.kind != exponential && p.order < 31 && decay <= resolved {
		q := *p
		switch {
		case p.order < 21 && 4*excess*math.Pow(decay, 3) <= 1:
			q.order = 21
		case excess*math.Pow(decay, 8) <= 10:
			q.order = 31
		}
		if q.order > p.order {
			if err := b.t.apply(&q); err != nil {
				return nil, err
			}
			return []*panel{&q}, nil
		}
	}
	if p.kind == plain && decay > resolved && !p.doubted {
		if q, err := b.atEnd(p, excess); q != nil || err != nil {
			return []*panel{q}, err
		}
	}
	if decay > resolved && p.left < 0 && p.right < 0 && p.depth >= 3 && !p.doubted {
		b.rough = true
	}
	return b.halve(p, excess)
}

// atEnd tries the rules for a singularity at an end of the interval on a panel
// at which bisection has come to cluster. It returns nil if none of them helps.
func (b *bisection) atEnd(p *panel, excess float64) (*panel, error) {
	run := max(p.left, p.right)
	if (p.left > 0) == (p.right > 0) || run < 2 {
		return nil, nil
	}
	var tries []*panel
	if !p.tried || run%4 == 0 {
		p.tried = true
		q := *p
		q.h, q.lo, q.hi, q.order = p.hi-p.lo, 0, 1, 31
		q.kind, q.end = squareLeft, p.lo
		if p.right > 0 {
			q.kind, q.end = squareRight, p.hi
		}
		tries = append(tries, &q)
	}
	if run%4 == 3 {
		q := *p
		q.kind = exponential
		tries = append(tries, &q)
	}
	for _, q := range tries {
		if err := b.t.apply(q); err != nil {
			return nil, err
		}
		if e, d := b.worst(q); e <= gain || e <= gain*excess && d <= resolved || e <= 1e-4*excess {
			q.left, q.right = -1, -1
			return q, nil
		}
	}
	return nil, nil
}

// rough reports whether the estimate of a panel is so small next to its size
// that it may be rounding in the integrand rather than an oscillation.
func (p *panel) rough() bool {
	for c := range Width {
		if p.est[c] > 1e-7*p.v.Size[c] {
			return false
		}
	}
	return true
}

// halve splits a panel into two.
func (b *bisection) halve(p *panel, excess float64) ([]*panel, error) {
	base := *p
	if base.kind == exponential {
		base.kind = plain
	}
	base.depth++
	base.order = 15
	mid := p.lo + (p.hi-p.lo)/2
	l, r := base, base
	l.hi, r.lo = mid, mid
	if base.kind == plain {
		l.left, l.right = -1, -1
		r.left, r.right = -1, -1
		if p.left >= 0 {
			l.left = p.left + 1
		}
		if p.right >= 0 {
			r.right = p.right + 1
		}
	}
	kids := []*panel{&l, &r}
	var after float64
	for _, k := range kids {
		if err := b.t.apply(k); err != nil {
			return nil, err
		}
		e, _ := b.worst(k)
		after += e
	}
	stall := 0
	if after > 0.7*excess && p.rough() {
		stall = p.stall + 1
	}
	l.stall, r.stall = stall, stall
	if b.t.Work.spent() && after > excess {
		return []*panel{p}, nil
	}
	return kids, nil
}
