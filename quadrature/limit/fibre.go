package limit

import (
	"cmp"
	"math"
	"slices"

	"creaseproof/quadrature/rule"
)

// crossing is a place on a fibre at which another branch takes over.
type crossing struct {
	s             float64
	before, after int
	slope         float64 // of the difference of the two branches along the fibre
	steep         float64 // its greatest slope, where the smoothing is inexact
}

const (
	pieces   = 48 // of a fibre, between which crossings are looked for
	probes   = 4  // fibres in each direction, to choose that of the fibres
	halvings = 60

	// smallestScale is an energy below which rounding is all there is.
	smallestScale = 1e-26
)

// reach are the places of the cuts about a crossing, in units of the width of
// the layer; denser is for one direction of fibres.
var (
	reach  = []float64{10, 26, 48}
	denser = []float64{3, 9, 20, 42}
)

// winner is the branch that is the sharp function at parameter s of the fibre.
func (w *walk) winner(k int, s float64) int {
	w.s[k] = s
	w.move()
	w.p.Values(w.x, w.v)
	return w.p.active(w.v)
}

// cross finds the crossings along the current fibre.
func (w *walk) cross() { w.crossAlong(w.order[w.n-1]) }

func (w *walk) crossAlong(k int) {
	w.cuts = w.cuts[:0]
	lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
	n := w.p.Branches
	if len(w.heights) < (pieces+1)*n {
		w.heights = make([]float64, (pieces+1)*n)
	}
	var first [pieces + 1]int
	at := func(i int) float64 { return lo + (hi-lo)*float64(i)/pieces }
	for i := range first {
		first[i] = w.winner(k, at(i))
		copy(w.heights[i*n:], w.v)
	}
	for i := range pieces {
		a, b := first[i], first[i+1]
		if a != b {
			w.between(k, at(i), at(i+1), a, b, halvings)
			continue
		}
		// Another branch may win on a short part: look where its distance
		// has a minimum among three places.
		for j := range n {
			if j == a || i == 0 || first[i-1] != a {
				continue
			}
			d := func(m int) float64 { return math.Abs(w.heights[m*n+j] - w.heights[m*n+a]) }
			if l, m, r := d(i-1), d(i), d(i+1); m <= l && m <= r && 4*m <= l+r {
				if s, ok := w.dip(k, a, j, at(i-1), at(i+1)); ok {
					w.between(k, at(i-1), s, a, w.winner(k, s), halvings)
					w.between(k, s, at(i+1), w.winner(k, s), a, halvings)
				}
			}
		}
	}
	slices.SortFunc(w.cuts, func(a, b crossing) int { return cmp.Compare(a.s, b.s) })
}

// dip looks between two places at which branch i wins for one at which it does
// not, where branch j is closest to it, by golden sections.
func (w *walk) dip(k, i, j int, a, b float64) (float64, bool) {
	const ratio = 0.6180339887498949
	f := func(s float64) float64 {
		if w.winner(k, s) != i {
			return -1
		}
		return math.Abs(w.v[i] - w.v[j])
	}
	c, d := b-ratio*(b-a), a+ratio*(b-a)
	fc, fd := f(c), f(d)
	for range 40 {
		switch {
		case fc < 0:
			return c, true
		case fd < 0:
			return d, true
		case fc < fd:
			b, d, fd = d, c, fc
			c = b - ratio*(b-a)
			fc = f(c)
		default:
			a, c, fc = c, d, fd
			d = a + ratio*(b-a)
			fd = f(d)
		}
	}
	return 0, false
}

// between finds the crossings between two places with different winners.
func (w *walk) between(k int, from, to float64, first, next, left int) {
	if first == next {
		return
	}
	// Two branches alone: a root of their difference, by false position
	// (Illinois); where a third one wins there, each side by itself.
	sign := 1.0
	diff := func(s float64) float64 {
		w.winner(k, s)
		return sign * (w.v[next] - w.v[first])
	}
	a, b := from, to
	fa, fb := diff(a), diff(b)
	if fb < 0 || fb == 0 && fa > 0 {
		sign, fa, fb = -1, -fa, -fb
	}
	if !(fa <= 0 && fb >= 0) {
		// There is a third one between them, or a value that is not finite.
		if m := a + (b-a)/2; left > 0 && !math.IsNaN(fa+fb) {
			third := w.winner(k, m)
			w.between(k, a, m, first, third, left-1)
			w.between(k, m, b, third, next, left-1)
		}
		return
	}
	side := 0
	for range 100 {
		if b-a <= 4e-16*math.Max(math.Abs(a), math.Abs(b)) || fb == 0 || fa == 0 {
			break
		}
		m := b - fb*(b-a)/(fb-fa)
		if !(m > a && m < b) {
			m = a + (b-a)/2
		}
		fm := diff(m)
		if fm > 0 || fm == 0 && side < 0 {
			b, fb = m, fm
			if side == 1 {
				fa /= 2
			}
			side = 1
		} else {
			a, fa = m, fm
			if side == -1 {
				fb /= 2
			}
			side = -1
		}
	}
	root := b
	if fa == 0 || math.Abs(fa) < math.Abs(fb) {
		root = a
	}
	third := w.winner(k, root)
	if third != first && third != next && left > 0 {
		better := math.Abs(w.v[third] - w.v[first])
		if better > 1e-14*(math.Abs(w.v[third])+math.Abs(w.v[first])) {
			w.between(k, from, root, first, third, left-1)
			w.between(k, root, to, third, next, left-1)
			return
		}
	}
	h := 1e-4 * (w.p.Domain.Hi[k] - w.p.Domain.Lo[k])
	low, high := math.Max(root-h, w.p.Domain.Lo[k]), math.Min(root+h, w.p.Domain.Hi[k])
	c := crossing{s: root, before: first, after: next, slope: (diff(high) - diff(low)) / (high - low)}
	if w.layer != nil {
		w.s[k] = root
		w.move()
		w.p.Jets(w.x, w.jets)
		for a := range w.q {
			w.q[a] = w.jets[next].P[a] - w.jets[first].P[a]
		}
		c.steep = length(w.q)
	}
	w.cuts = append(w.cuts, c)
}

// panels cuts the current fibre at the crossings and about them. Spans on which
// nothing is left of the share are left out.
func (w *walk) panels() []span {
	k := w.order[w.n-1]
	lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
	w.spans = w.spans[:0]
	from := lo // what is before it is covered
	reach := reach
	if w.even {
		reach = denser
	}
	for i, c := range w.cuts {
		right := hi
		if i+1 < len(w.cuts) {
			right = (c.s + w.cuts[i+1].s) / 2
		}
		left := from
		if i > 0 {
			left = (w.cuts[i-1].s + c.s) / 2
		}
		unit := w.eps / math.Abs(c.slope)
		if !(unit > 0) || math.IsInf(unit, 0) {
			w.put(from, c.s, false)
			from = c.s
			continue
		}
		if w.layer != nil {
			l := w.layer.reach(w.eps) * c.steep / math.Abs(c.slope)
			for _, s := range [3]float64{c.s - l, c.s, c.s + l} {
				if s == c.s || s > left && s < right {
					w.put(from, s, false)
					from = s
				}
			}
			continue
		}
		last := len(reach) - 1
		for m := last; m >= 0; m-- {
			if s := c.s - reach[m]*unit; s > left {
				w.put(from, s, m < last)
				from = s
			}
		}
		w.put(from, c.s, false)
		from = c.s
		for m, r := range reach {
			s := c.s + r*unit
			if s >= right {
				break
			}
			w.put(from, s, m > 0)
			from = s
		}
	}
	w.put(from, hi, false)
	return w.spans
}

// put adds a span of the current fibre.
func (w *walk) put(a, b float64, coarse bool) {
	k := w.order[w.n-1]
	if p := (span{a, b, coarse && w.fades}); b > a && (k == w.first || !w.empty(k, p)) {
		w.spans = append(w.spans, p)
	}
}

// empty reports whether nothing is left of the share on a span of the current
// fibre, as far as a few places show.
func (w *walk) empty(k int, p span) bool {
	lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
	n := w.p.Branches
	for i := range pieces + 1 {
		if s := lo + (hi-lo)*float64(i)/pieces; s > p.lo && s < p.hi && w.close(w.heights[i*n:(i+1)*n]) {
			return false
		}
	}
	for _, s := range [3]float64{p.lo, p.lo + (p.hi-p.lo)/2, p.hi} {
		if w.winner(k, s); w.close(w.v) {
			return false
		}
	}
	return true
}

// close reports whether another branch is near to that which wins.
func (w *walk) close(v []float64) bool {
	best := v[w.p.active(v)]
	found := 0
	for _, u := range v {
		if math.Abs(u-best) < farAway*reachOfShare*w.eps {
			found++
		}
	}
	return found > 1
}

// gauge sets the size of the integrals along fibres to the greatest on a few
// of them, so that those off the layer are not computed to a tolerance of
// their own, which would be that of rounding.
func (w *walk) gauge() {
	k := w.order[w.n-1]
	size := &w.scale[w.n-1]
	*size = smallestScale
	r := rule.Kronrod15()
	w.probe(k, func() {
		w.cross()
		var sum float64
		for _, p := range w.panels() {
			half := (p.hi - p.lo) / 2
			for j, x := range r.X {
				var v values
				if w.density(p.lo+half*(1+x), &v, nil) == nil {
					sum += half * r.Weight[j] * math.Abs(v[0])
				}
			}
		}
		*size = math.Max(*size, sum)
	})
	w.bad = w.bad[:0]
}

// insignificant is the part of the natural energy below which an energy is as
// good as 0.
const insignificant = 1e-8

// natural is the energy that a layer of the width eps as large as the domain
// would have about: R²/2 for gradients half-way between two branches, the
// greatest at a few places, times the volume.
func (w *walk) natural() float64 {
	var most float64
	w.probe(w.order[w.n-1], func() {
		k := w.order[w.n-1]
		w.s[k] = w.p.Domain.Lo[k] + 0.63*(w.p.Domain.Hi[k]-w.p.Domain.Lo[k])
		w.move()
		w.p.Jets(w.x, w.jets)
		v := w.volume()
		for j := range w.n {
			v *= w.p.Domain.Hi[j] - w.p.Domain.Lo[j]
		}
		for i := range w.jets {
			for j := range i {
				w.u.clear()
				w.u.U = (w.jets[i].U + w.jets[j].U) / 2
				for a := range w.u.P {
					w.u.P[a] = (w.jets[i].P[a] + w.jets[j].P[a]) / 2
				}
				if e := w.eps * w.p.Density(w.x, w.eps, &w.u).Compression * v; e > most && !math.IsInf(e, 0) {
					most = e
				}
			}
		}
	})
	return most
}

// probe visits a few fibres along parameter k.
func (w *walk) probe(k int, visit func()) {
	total := 1
	for range w.n - 1 {
		total *= probes
	}
	for m := range total {
		rest := m
		for j := range w.n {
			if j == k {
				continue
			}
			t := (float64(rest%probes) + 0.37) / probes // no symmetric place
			rest /= probes
			w.s[j] = w.p.Domain.Lo[j] + t*(w.p.Domain.Hi[j]-w.p.Domain.Lo[j])
		}
		visit()
	}
}

// orient chooses the parameter that runs along fibres: the one with the most
// crossings on a few fibres, of equals the first.
func (w *walk) orient() int {
	most, best := -1, 0
	for k := range w.n {
		found := 0
		w.probe(k, func() {
			w.crossAlong(k)
			found += len(w.cuts)
		})
		if found > most {
			most, best = found, k
		}
	}
	return best
}

// direct makes parameter k run along fibres. The others keep their order, or
// are turned around.
func (w *walk) direct(k int) {
	w.order = w.order[:0]
	for j := range w.n {
		if j != k {
			w.order = append(w.order, j)
		}
	}
	if w.turned {
		slices.Reverse(w.order)
	}
	w.order = append(w.order, k)
}
