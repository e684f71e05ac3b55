package limit

import (
	"container/heap"
	"errors"
	"math"

	"creaseproof/quadrature/rule"
)

// width is the number of functions that are integrated at once.
const width = 4

type values [width]float64

// errInfinite says that an integral diverges.
var errInfinite = errors.New("the integral diverges")

// errPoint says that an integrand is not finite at a node.
var errPoint = errors.New("the integrand is not finite")

// errSpent says that the work allowed is used up.
var errSpent = errors.New("the work allowed is used up")

// mostPanels of one integral; more of them chase rounding.
const mostPanels = 2000

// window is over how many halvings contributions have to fall by a half.
const window = 12

// integral integrates several functions over one interval by global bisection.
type integral struct {
	// f sets the values at s and estimates of their errors. errPoint and
	// errInfinite make the node infinite; other errors end the integration.
	f func(s float64, out, err *values) error
	k *rule.Kronrod
	// coarse is tried first on spans that are coarse.
	coarse *rule.Kronrod
	// scale is the size that rel refers to; it grows with the values met.
	scale *float64
	rel   float64
	// deepest is the number of halvings after which a panel that does not
	// lose its contribution is called divergent, and at the latest what is
	// not finite.
	deepest int
	spent   func() bool
}

type panel struct {
	lo, hi   float64
	value    values
	err      values // from the distance of the two rules
	inner    values // errors of the nodes
	worst    float64
	depth    int
	infinite int // nodes
	coarse   bool
	past     [2 * window]float64
}

type panels []*panel

func (h panels) Len() int           { return len(h) }
func (h panels) Less(i, j int) bool { return h[i].worst > h[j].worst }
func (h panels) Swap(i, j int)      { h[i], h[j] = h[j], h[i] }
func (h *panels) Push(x any)        { *h = append(*h, x.(*panel)) }
func (h *panels) Pop() any {
	o := *h
	p := o[len(o)-1]
	*h = o[:len(o)-1]
	return p
}

// apply evaluates the rules on a panel.
func (q *integral) apply(p *panel) error {
	half, mid := (p.hi-p.lo)/2, p.lo+(p.hi-p.lo)/2
	var kronrod, gauss, inner, spread values
	var seen [31]values
	k := q.k
	if p.coarse {
		k = q.coarse
	}
	for n, i := range k.Order {
		var v, e values
		err := q.f(mid+half*k.X[i], &v, &e)
		switch {
		case errors.Is(err, errPoint), errors.Is(err, errInfinite):
			p.infinite++
			if p.infinite == n+1 && n == 2 {
				return errInfinite // wherever one looks
			}
			continue
		case err != nil:
			return err
		}
		seen[i] = v
		for c := range v {
			kronrod[c] += k.Weight[i] * v[c]
			gauss[c] += k.Gauss[i] * v[c]
			inner[c] += k.Weight[i] * e[c]
		}
	}
	p.worst = 0
	for c := range kronrod {
		p.value[c] = half * kronrod[c]
		for i, w := range k.Weight {
			spread[c] += w * math.Abs(seen[i][c]-kronrod[c]/2)
		}
		p.err[c] = half * distance(kronrod[c]-gauss[c], spread[c])
		p.inner[c] = half * inner[c]
		p.worst = math.Max(p.worst, p.err[c])
	}
	if p.infinite > 0 {
		p.worst = math.Inf(1)
	}
	copy(p.past[1:], p.past[:])
	p.past[0] = math.Abs(p.value[0])
	if p.infinite > 0 {
		p.past[0] = math.Inf(1)
	}
	return nil
}

// distance is the error estimate of QUADPACK for the distance of the two rules,
// where spread is the integral of the distance from the mean: the Kronrod rule
// is better than the other, the more so the closer they are.
func distance(d, spread float64) float64 {
	d = math.Abs(d)
	if spread == 0 || d == 0 {
		return d
	}
	return math.Min(2*d, spread*math.Pow(200*d/spread, 1.5))
}

// divergent reports whether the contributions of the panel and of those it came
// from do not fall.
func (q *integral) divergent(p *panel) bool {
	if p.depth < q.deepest {
		return false
	}
	if p.infinite > 0 {
		return true
	}
	var late, early float64
	for i, v := range p.past {
		if i < window {
			late = math.Max(late, v)
		} else {
			early = math.Max(early, v)
		}
	}
	return late > early/2 && late > 1e-9**q.scale
}

// span is an interval.
type span struct {
	lo, hi float64
	coarse bool // where little is expected
}

// over integrates over the spans. The estimate
// includes the errors of the nodes. Where the work is used up the values come
// with their estimates as they are.
func (q *integral) over(spans []span, out, estimate *values) error {
	var open, done panels
	add := func(p *panel) error {
		if err := q.apply(p); err != nil {
			return err
		}
		if q.divergent(p) {
			return errInfinite
		}
		if p.infinite == 0 && (p.depth >= 2*q.deepest || p.worst <= 4e-16*math.Abs(p.value[0]) || p.worst <= p.inner[0]) {
			done = append(done, p)
		} else {
			heap.Push(&open, p)
		}
		return nil
	}
	for _, s := range spans {
		if s.hi > s.lo {
			if err := add(&panel{lo: s.lo, hi: s.hi, coarse: s.coarse}); err != nil {
				return err
			}
		}
	}
	for len(open) > 0 && len(open)+len(done) < mostPanels && !q.spent() {
		var size, err float64
		for _, p := range open {
			size += math.Abs(p.value[0])
			err += p.worst
		}
		for _, p := range done {
			size += math.Abs(p.value[0])
		}
		if !math.IsInf(err, 0) {
			*q.scale = math.Max(*q.scale, size)
		}
		if err <= q.rel**q.scale {
			break
		}
		p := heap.Pop(&open).(*panel)
		if p.coarse {
			if err := add(&panel{lo: p.lo, hi: p.hi}); err != nil {
				return err
			}
			continue
		}
		mid := p.lo + (p.hi-p.lo)/2
		if !(mid > p.lo && mid < p.hi) {
			if p.infinite > 0 {
				return errInfinite
			}
			done = append(done, p)
			continue
		}
		for _, part := range [2][2]float64{{p.lo, mid}, {mid, p.hi}} {
			if err := add(&panel{lo: part[0], hi: part[1], depth: p.depth + 1, past: p.past}); err != nil {
				return err
			}
		}
	}
	for _, list := range []panels{open, done} {
		for _, p := range list {
			if p.infinite > 0 {
				return errPoint // not resolved within the work allowed
			}
			for c := range width {
				out[c] += p.value[c]
				estimate[c] += p.err[c] + p.inner[c]
			}
		}
	}
	return nil
}
