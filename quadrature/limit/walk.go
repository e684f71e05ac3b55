package limit

import (
	"context"
	"math"
	"slices"

	"creaseproof/quadrature/rule"
)

// walk integrates over the domain, fibre by fibre.
type walk struct {
	p     *Problem
	ctx   context.Context
	eps   float64
	sharp bool // the jumps, not the approximation

	n       int
	order   []int   // of the parameters, outermost first; the last runs along fibres
	goal    float64 // the tolerance asked for
	rel     float64 // of this stage
	met     bool
	size    float64   // of the whole energy, 0 where not known
	least   float64   // what an energy is at least measured by
	scale   []float64 // of the integrals of each level
	used    int
	most    int
	allowed int // work

	s, x    []float64
	jac     [][]float64
	det     []float64 // a copy of jac for elimination
	v       []float64
	jets    []Jet
	u       Jet
	q, nu   []float64
	cuts    []crossing
	heights []float64 // of the branches along a fibre
	layer   inexact   // the smoothing, if it is
	finer   Jet
	noise   [2]float64 // differences of densities by finer jets, and densities
	bad     []float64  // where a density was not finite
	steep   float64    // the greatest density met
	summit  []float64  // and where

	first       int     // the parameter that is best along fibres
	fades       bool    // the layer does so exponentially
	plain       bool    // no other direction is needed
	even        bool    // nor are stages: see regular
	turned      bool    // outer parameters are taken in the other order
	ref         float64 // see reference
	near, parts []float64
	branches    []int
	spans       []span

	creases, reduced []crease // see arrange
}

func newWalk(ctx context.Context, p *Problem, eps float64, sharp bool) (*walk, error) {
	if err := p.Domain.check(); err != nil {
		return nil, err
	}
	n := len(p.Domain.Lo)
	w := &walk{p: p, ctx: ctx, eps: eps, sharp: sharp, n: n, goal: p.Rel, most: p.MaxEvaluations,
		scale: make([]float64, n), s: make([]float64, n), x: make([]float64, n), det: make([]float64, n*n),
		v: make([]float64, p.Branches), u: NewJet(n), q: make([]float64, n), nu: make([]float64, n),
		near: make([]float64, p.Branches), parts: make([]float64, n)}
	if w.goal == 0 {
		w.goal = defaultRel
	}
	if w.most == 0 {
		w.most = defaultMax
	}
	if sharp {
		w.most = min(w.most, mostFibres)
	}
	if l, ok := p.Smoothing.(inexact); ok && !sharp {
		w.layer, w.finer = l, NewJet(n)
		l.begin()
		w.goal = math.Max(w.goal, l.accuracy(p))
	}
	w.rel, w.allowed = w.goal, p.MaxWork
	for range n {
		w.jac = append(w.jac, make([]float64, n))
	}
	for range p.Branches {
		w.jets = append(w.jets, NewJet(n))
	}
	if p.MaxWork > 0 {
		w.p = p.counting()
	}
	if _, w.fades = p.Smoothing.(*Front); w.fades {
		w.p = w.p.remembering()
	}
	w.first = w.orient()
	w.reference()
	regular, found := w.regular()
	if found && !regular {
		w.plain = false
	}
	w.even = regular && !sharp
	if w.planar() {
		w.arrange()
	}
	w.direct(w.first)
	if !sharp {
		w.least = math.Max(smallestScale, insignificant*w.natural())
		w.gauge()
	}
	return w, nil
}

// move sets the position for the parameters.
func (w *walk) move() {
	if w.p.Domain.Map == nil {
		copy(w.x, w.s)
		return
	}
	w.p.Domain.Map(w.s, w.x, w.jac)
}

// volume is |det ∂x/∂s| at the current position.
func (w *walk) volume() float64 {
	if w.p.Domain.Map == nil {
		return 1
	}
	for i, row := range w.jac {
		copy(w.det[i*w.n:], row)
	}
	return math.Abs(determinant(w.det, w.n))
}

func length(v []float64) (l float64) {
	for _, x := range v {
		l = math.Hypot(l, x)
	}
	return l
}

// determinant eliminates with partial pivoting, in place.
func determinant(a []float64, n int) float64 {
	d := 1.0
	for k := range n {
		best := k
		for i := k + 1; i < n; i++ {
			if math.Abs(a[i*n+k]) > math.Abs(a[best*n+k]) {
				best = i
			}
		}
		if a[best*n+k] == 0 {
			return 0
		}
		if best != k {
			for j := range n {
				a[k*n+j], a[best*n+j] = a[best*n+j], a[k*n+j]
			}
			d = -d
		}
		d *= a[k*n+k]
		for i := k + 1; i < n; i++ {
			f := a[i*n+k] / a[k*n+k]
			for j := k; j < n; j++ {
				a[i*n+j] -= f * a[k*n+j]
			}
		}
	}
	return d
}

// level integrates over the parameters from the given one inwards.
func (w *walk) level(depth int, out, estimate *values) error {
	k := w.order[depth]
	inner := w.n - 1 - depth
	q := integral{scale: &w.scale[depth], rel: w.rel * math.Pow(0.3, float64(depth)), deepest: 34, spent: w.spent}
	if inner == 0 {
		w.cross()
		if w.sharp {
			return w.jumps(out)
		}
		q.coarse, q.k, q.f, q.deepest = rule.Kronrod7(), rule.Kronrod15(), w.density, 46
		if w.even {
			q.k = rule.Kronrod21()
		}
		return q.over(w.panels(), out, estimate)
	}
	q.k = rule.Kronrod15()
	q.f = func(s float64, v, e *values) error {
		w.s[k] = s
		return w.level(depth+1, v, e)
	}
	spans := w.turns(depth)
	return q.over(spans, out, estimate)
}

// probed is of how many densities one is computed again from a finer jet.
const probed = 37

// rough estimates the relative error of the integrals from that of the jets.
func (w *walk) rough() float64 {
	if !(w.noise[1] > 0) {
		return 0
	}
	return 2 * w.noise[0] / w.noise[1]
}

// density is the integrand along a fibre.
func (w *walk) density(s float64, out, _ *values) error {
	w.used++
	if (w.used%1024 == 0 || w.layer != nil && w.used%16 == 0) && w.ctx.Err() != nil {
		return w.ctx.Err()
	}
	w.p.add(unitWork)
	if w.exhausted() && !w.sharp {
		return errSpent
	}
	w.s[w.order[w.n-1]] = s
	w.move()
	part := 1.0
	if !w.plain {
		w.p.Jets(w.x, w.jets)
		if part = w.share(w.order[w.n-1]); part < 1e-2*w.rel {
			*out = values{}
			return nil
		}
	}
	w.p.Smoothing.Smooth(w.p, w.x, w.eps, &w.u)
	d := w.p.Density(w.x, w.eps, &w.u)
	dx := w.volume() * part
	if w.layer != nil && w.used%probed == 0 && w.layer.finer(w.p, w.x, w.eps, &w.finer) {
		f := w.p.Density(w.x, w.eps, &w.finer)
		off := math.Max(math.Abs(f.Energy-d.Energy), math.Max(math.Abs(f.Compression-d.Compression), math.Abs(f.Bending-d.Bending)))
		w.noise[0] += off * dx
		w.noise[1] += math.Abs(d.Energy) * dx
	}
	*out = values{d.Energy * dx, d.Compression * dx, d.Bending * dx, d.Curvature * dx}
	for _, v := range out {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			w.bad = append(w.bad[:0], w.x...)
			return errPoint
		}
	}
	if d.Energy > w.steep {
		w.steep = d.Energy
		w.summit = append(w.summit[:0], w.x...)
	}
	return nil
}

// jumps is the energy and the area of the crossings of a fibre, the part that
// belongs to its direction.
func (w *walk) jumps(out *values) error {
	w.used++
	if w.p.Domain.Map == nil {
		for i := range w.jac {
			clear(w.jac[i])
			w.jac[i][i] = 1
		}
	}
	for _, c := range w.cuts {
		w.s[w.order[w.n-1]] = c.s
		w.move()
		w.p.Jets(w.x, w.jets)
		plus, minus := w.jets[c.after].P, w.jets[c.before].P
		along := w.jac[w.order[w.n-1]]
		var q2, rate float64
		for i := range w.q {
			w.q[i] = plus[i] - minus[i]
			q2 += w.q[i] * w.q[i]
			rate += w.q[i] * along[i]
		}
		norm := math.Sqrt(q2)
		if norm == 0 || math.Abs(rate) < 1e-12*norm*length(along) {
			continue // the branches touch, or the fibre the crease
		}
		for i := range w.nu {
			w.nu[i] = w.q[i] / norm
		}
		area := w.volume() * norm / math.Abs(rate) * w.shareOfJump(w.order[w.n-1], c)
		out[0] += area * w.p.Cost(w.x, plus, minus, w.nu)
		out[1] += area
	}
	if v := out[0]; math.IsNaN(v) || math.IsInf(v, 0) {
		w.bad = append(w.bad[:0], w.x...)
		return errPoint
	}
	return nil
}

// infinite describes a divergence.
func (w *walk) infinite() error {
	at := w.summit
	if len(w.bad) > 0 {
		at = w.bad
	}
	e := &InfiniteError{Point: slices.Clone(at)}
	if len(at) == 0 {
		return e
	}
	w.p.Jets(at, w.jets)
	var most float64
	for i := range w.jets {
		for _, h := range w.jets[i].H {
			if h = math.Abs(h); h > most || math.IsNaN(h) {
				most, e.Branch = h, i
				if math.IsNaN(h) {
					return e
				}
			}
		}
	}
	return e
}
