package levelset

import (
	"fmt"
	"math"
)

// A bound is one side of the inner range of a piece: the zero of f along
// coordinate l of the base, or a constant where f is nil.
type bound struct {
	f      Function
	trim   *trace // f, if it is a trim
	at     float64
	rising bool
}

// A sheet is a part of the surface that is a graph over coordinate up, whose
// base consists of the points with the outer coordinate in [x0, x1] (of the
// piece) and the inner one between the bounds. In the plane there is no inner
// coordinate.
type sheet struct {
	up, inner, outer int // coordinates; inner is -1 in the plane
	rising           bool
	lo, hi           [3]float64 // the cell
	system           int        // of conditions
	x0, x1           float64
	// The outermost bounds, then those of trims between them.
	low, high         bound
	trimLow, trimHigh []bound
	scale             float64 // of the size of coordinates against that of the cell
	mapOuter          spread
	mapInner          spread
	share             float64       // area of the base
	seen              [3][2]float64 // range of the nodes, and of the base on their rows
	number            int           // among all sheets
}

// A leaf is a rectangle of the parameters of a sheet.
type leaf struct {
	*sheet
	p0, p1, q0, q1 float64
	np, nq         int
	// integrals and estimated errors of the components, area first
	value, estimate, size, noise []float64
	decay                        [][2][3]float64 // sizes of coefficients, per component, outer and inner
	safety                       float64         // factor on the estimates
	depth                        int
	priority                     float64
	edge                         bool // the estimate is that of the ends of the outer range
}

// evaluator integrates over leaves.
type evaluator struct {
	dim, parts int
	rules      *[maxOrder + 1]*gauss
	phi        Function
	density    func(x, n []float64, out []float64)
	x, g, n    []float64
	base, bg   []float64
	values     [][]float64 // per component, row by row
	nodes      int
	peak       []float64 // largest absolute value of each component
	layers     []layers
	out        []float64

	widths, places []float64 // of the rows of a leaf
}

// inside returns the inner range of the sheet at the outer coordinate x.
func (e *evaluator) inside(s *sheet, x float64) (a, b float64) {
	i, o := baseIndex(s.inner, s.up), baseIndex(s.outer, s.up)
	e.base[o] = x
	lo, hi := s.lo[s.inner], s.hi[s.inner]
	zero := func(d bound, lo, hi float64) float64 {
		if d.f == nil {
			return d.at
		}
		solve(d.f, e.base, i, lo, hi, lo+(hi-lo)/2, d.rising, e.bg)
		return e.base[i]
	}
	a, b = zero(s.low, lo, hi), zero(s.high, lo, hi)
	if !(a < b) {
		return a, a
	}
	fa, fb := a, b
	for _, d := range s.trimLow {
		a = max(a, zero(d, fa, fb))
	}
	for _, d := range s.trimHigh {
		b = min(b, zero(d, fa, fb))
	}
	return a, max(a, b)
}

// baseIndex is the index of coordinate k among those that are not up.
func baseIndex(k, up int) int {
	if k > up {
		return k - 1
	}
	return k
}

// point solves for the point of the sheet over e.x and returns the ratio of
// the areas of the surface and of the base.
func (e *evaluator) point(s *sheet, guess float64) float64 {
	k := s.up
	solve(e.phi, e.x, k, s.lo[k], s.hi[k], guess, s.rising, e.g)
	e.phi.Gradient(e.g, e.x)
	return norm(e.g) / math.Abs(e.g[k])
}

func norm(g []float64) float64 {
	sum := 0.0
	for _, x := range g {
		sum += x * x
	}
	if sum > 0x1p-900 && sum < 0x1p900 {
		return math.Sqrt(sum)
	}
	size := 0.0
	for _, x := range g {
		size = math.Hypot(size, x)
	}
	return size
}

// shape chooses the maps of a sheet: quadratic at the ends at which the
// integrand or the inner range has a slope like the inverse root of the
// distance.
func (e *evaluator) shape(s *sheet) {
	const near, steep = 1e-6, 12.0
	w := s.x1 - s.x0
	k := s.up
	mid := s.lo[k] + (s.hi[k]-s.lo[k])/2
	if s.inner < 0 {
		f := func(t float64) float64 {
			e.x[s.outer] = s.x0 + w*t
			return e.point(s, mid)
		}
		s.mapOuter = ends(f(near), f(0.25), f(0.75), f(1-near), steep)
		s.share = w
		return
	}
	span := func(t float64) (a, b float64) { return e.inside(s, s.x0+w*t) }
	a0, b0 := span(near)
	a1, b1 := span(2 * near)
	a2, b2 := span(0.25)
	a3, b3 := span(0.5)
	a4, b4 := span(0.75)
	a5, b5 := span(1 - 2*near)
	a6, b6 := span(1 - near)
	s.share = w * (b2 - a2 + 2*(b3-a3) + b4 - a4) / 4
	slope := func(u, v, dt float64) float64 { return math.Abs(v-u) / dt }
	height := max(b2-a2, b3-a3, b4-a4)
	beyond := func(end, near float64) bool { return end > steep*max(near, height/4) }
	if beyond(slope(a0, a1, near), slope(a2, a3, 0.25)) || beyond(slope(b0, b1, near), slope(b2, b3, 0.25)) {
		s.mapOuter |= atLow
	}
	if beyond(slope(a5, a6, near), slope(a3, a4, 0.25)) || beyond(slope(b5, b6, near), slope(b3, b4, 0.25)) {
		s.mapOuter |= atHigh
	}
	f := func(x, y float64) float64 {
		e.x[s.outer], e.x[s.inner] = x, y
		return e.point(s, mid)
	}
	line := func(t, a, b float64) spread {
		x := s.x0 + w*t
		return ends(f(x, a+near*(b-a)), f(x, a+(b-a)/4), f(x, b-(b-a)/4), f(x, b-near*(b-a)), steep)
	}
	s.mapInner = line(0.25, a2, b2) | line(0.5, a3, b3) | line(0.75, a4, b4)
	s.mapOuter |= ends(f(s.x0+w*near, a0+(b0-a0)/2), f(s.x0+w/4, a2+(b2-a2)/2),
		f(s.x0+w*3/4, a4+(b4-a4)/2), f(s.x0+w*(1-near), a6+(b6-a6)/2), steep)
}

// ends compares the values of a positive function next to the two ends with
// those at a quarter.
func ends(f0, f1, f2, f3, steep float64) (s spread) {
	if f0 > steep*f1 {
		s |= atLow
	}
	if f3 > steep*f2 {
		s |= atHigh
	}
	return s
}

// evaluate applies the rules to a leaf.
func (e *evaluator) evaluate(l *leaf) error {
	gp := e.rules[l.np]
	rows, cols := l.np, 1
	if l.inner >= 0 {
		cols = l.nq
	}
	for c := range e.values {
		if cap(e.values[c]) < rows*cols {
			e.values[c] = make([]float64, maxOrder*maxOrder)
		}
		e.values[c] = e.values[c][:rows*cols]
		l.value[c], l.size[c], l.noise[c] = 0, 0, 0
	}
	guess := l.lo[l.up] + (l.hi[l.up]-l.lo[l.up])/2
	first := guess
	w := l.x1 - l.x0
	for i := range rows {
		v, rest, d := l.mapOuter.at(l.p0 + (l.p1-l.p0)*gp.x[i])
		x := l.x0 + w*v
		if rest < v {
			x = l.x1 - w*rest
		}
		jac := d * w * (l.p1 - l.p0)
		if l.inner < 0 {
			e.x[l.outer] = x
			if err := e.node(l, i, gp.w[i], jac, guess); err != nil {
				return err
			}
			guess = e.x[l.up]
			continue
		}
		gq := e.rules[l.nq]
		a, b := e.inside(l.sheet, x)
		e.widths[i], e.places[i] = b-a, x
		l.seen[l.inner][0], l.seen[l.inner][1] = min(l.seen[l.inner][0], a), max(l.seen[l.inner][1], b)
		guess = first
		for j := range cols {
			v, rest, d := l.mapInner.at(l.q0 + (l.q1-l.q0)*gq.x[j])
			e.x[l.outer], e.x[l.inner] = x, a+(b-a)*v
			if rest < v {
				e.x[l.inner] = b - (b-a)*rest
			}
			if err := e.node(l, i*cols+j, gp.w[i]*gq.w[j], jac*d*(b-a)*(l.q1-l.q0), guess); err != nil {
				return err
			}
			guess = e.x[l.up]
			if j == 0 {
				first = guess
			}
		}
	}
	e.estimate(l, rows, cols)
	e.beyond(l)
	return nil
}

// node evaluates the density at one node.
func (e *evaluator) node(l *leaf, at int, weight, jac, guess float64) error {
	ratio := e.point(l.sheet, guess)
	g := norm(e.g)
	for i := range e.g {
		e.n[i] = e.g[i] / g
	}
	e.nodes++
	l.sheet.see(e.x)
	e.out[0] = 1
	if jac == 0 {
		ratio = 0
	}
	e.density(e.x, e.n, e.out[1:])
	// The error of the height grows as the surface gets parallel to it, and
	// moves the ratio of the areas.
	noise := 0x1p-52 * (4 + ratio*ratio*l.scale)
	for c, f := range e.out {
		v := f * ratio * jac
		if math.IsNaN(v) || math.IsInf(v, 0) {
			if c == 0 {
				return fmt.Errorf("%w at %v", ErrSingular, append([]float64(nil), e.x...))
			}
			return fmt.Errorf("%w at %v (component %d)", ErrNotFinite, append([]float64(nil), e.x...), c-1)
		}
		e.peak[c] = max(e.peak[c], math.Abs(f))
		e.layers[c].add(f, weight*ratio*math.Abs(jac))
		e.values[c][at] = v
		l.value[c] += weight * v
		l.size[c] += weight * math.Abs(v)
		l.noise[c] += weight * math.Abs(v) * noise
	}
	return nil
}

// mostNoise bounds the relative error of nodes at which nothing is left of the
// height.
const mostNoise = 16

// rounding is the error of component c by rounding. To first order, which noise
// is, it has no bound.
func (l *leaf) rounding(c int) float64 { return min(l.noise[c], mostNoise*l.size[c]) }

// estimate judges the rules by the decay of the Legendre coefficients.
func (e *evaluator) estimate(l *leaf, rows, cols int) {
	gp := e.rules[l.np]
	for c, v := range e.values {
		var t [2][3]float64
		for j := range cols {
			weight := 1.0
			if l.inner >= 0 {
				weight = e.rules[l.nq].w[j]
			}
			for k := range t[0] {
				t[0][k] += weight * largest(&gp.rows[k], v[j:], cols)
			}
		}
		est, _ := tails(rows, t[0], 0)
		if l.inner >= 0 {
			gq := e.rules[l.nq]
			for i := range rows {
				for k := range t[1] {
					t[1][k] += gp.w[i] * largest(&gq.rows[k], v[i*cols:], 1)
				}
			}
			more, _ := tails(cols, t[1], 0)
			est += more
		}
		l.decay[c] = t
		l.estimate[c] = max(est, min(l.safety*est, mostDoubt*l.size[c]))
	}
}

// orders returns the numbers of nodes that should make the error of a leaf
// small enough, and its errors by direction relative to those allowed.
func (d *driver) orders(l *leaf) (np, nq int, errP, errQ float64) {
	np, nq = l.np, l.nq
	for c, t := range l.decay {
		if !d.matters(c) {
			continue
		}
		// A share of the tolerance, but not less than rounding.
		target := max(d.want[c]/(2*float64(len(d.heap)+1)), 2*l.noise[c]) / l.safety
		e, n := tails(l.np, t[0], target)
		errP, np = max(errP, e/d.want[c]), max(np, n)
		if l.inner >= 0 {
			e, n = tails(l.nq, t[1], target)
			errQ, nq = max(errQ, e/d.want[c]), max(nq, n)
		}
	}
	return np, nq, errP, errQ
}

// largest returns the larger absolute value of two Legendre coefficients.
func largest(rows *[2][]float64, v []float64, stride int) float64 {
	var a, b float64
	for i, r := range rows[0] {
		a += r * v[i*stride]
		b += rows[1][i] * v[i*stride]
	}
	return max(math.Abs(a), math.Abs(b))
}
