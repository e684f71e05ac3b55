package mesh

import (
	"context"
	"fmt"
	"math"

	"creaseproof/quadrature"
)

// A worker evaluates the integrand on triangles and checks it.
type worker struct {
	j *job
	g Integrand

	x, plus, minus, nu, back []float64

	// Of the triangle at hand: its number, what rounding costs its area, and
	// how far the traces may be from fitting.
	triangle     int
	rounding     float64
	tilt, height float64
	t            *tally
	unfit        bool
}

func newWorker(j *job, g Integrand) *worker {
	w := &worker{j: j, g: g, x: make([]float64, 3), nu: make([]float64, 3), back: make([]float64, 3)}
	if g.Traces.Plus != nil {
		w.plus, w.minus = make([]float64, 3), make([]float64, 3)
	}
	return w
}

// looks is about how many triangles are looked at for kinks of the traces.
const looks = 256

// chunk integrates over the triangles from lo to hi, or over the rough ones.
func (w *worker) chunk(t *tally, lo, hi int) error {
	j := w.j
	if j.ctx.Err() != nil {
		return context.Cause(j.ctx)
	}
	w.t = t
	for k := lo; k < hi; k++ {
		i := k
		if j.rough != nil {
			i = int(j.rough[k])
		}
		a, b, c := j.m.corners(i)
		s, ok := measure(a, b, c)
		if !ok {
			continue
		}
		w.begin(i, s)
		tri := [3][3]float64{a, b, c}
		var p part
		var err error
		if j.rough != nil {
			p, err = w.divide(tri, s.area)
		} else {
			t.area.Add(s.area)
			t.areaNoise.Add(s.area * w.rounding)
			if i%(1+len(j.m.Triangles)/looks) == 0 {
				err = w.kink(tri, s.longest)
			}
			if err == nil {
				p, err = w.descend(tri, s.area, j.depth)
			}
		}
		if err != nil {
			return err
		}
		if w.unfit {
			t.unfit++
		}
		j.parts[i] = p
	}
	return nil
}

// begin prepares for a triangle.
func (w *worker) begin(i int, s span) {
	w.triangle, w.unfit = i, false
	copy(w.nu, s.normal[:])
	for k := range w.nu {
		w.back[k] = -w.nu[k]
	}
	w.rounding = 2*epsilon + 4*epsilon*s.edges/s.area
	w.tilt, w.height = w.j.o.Tolerance, w.j.o.Tolerance*w.j.extent
	if w.j.o.Tolerance == 0 {
		var bend float64
		for _, v := range w.j.m.Triangles[i] {
			bend = math.Max(bend, float64(w.j.bend[v]))
		}
		w.tilt = math.Min(0.5, plain+2*bend)
		w.height = plain*w.j.extent + bend*s.longest/2
	}
}

// plain is the tolerance on a flat part of a mesh.
const plain = 1e-6

// quarter divides a triangle into four.
func quarter(t [3][3]float64) [4][3][3]float64 {
	mid := func(a, b [3]float64) [3]float64 {
		return [3]float64{a[0] + (b[0]-a[0])/2, a[1] + (b[1]-a[1])/2, a[2] + (b[2]-a[2])/2}
	}
	ab, bc, ca := mid(t[0], t[1]), mid(t[1], t[2]), mid(t[2], t[0])
	return [4][3][3]float64{{t[0], ab, ca}, {ab, t[1], bc}, {ca, bc, t[2]}, {bc, ca, ab}}
}

// descend divides a triangle so many times and integrates.
func (w *worker) descend(t [3][3]float64, area float64, depth int) (p part, err error) {
	if depth == 0 {
		return w.part(t, area)
	}
	for _, q := range quarter(t) {
		r, err := w.descend(q, area/4, depth-1)
		if err != nil {
			return p, err
		}
		p.add(r)
	}
	return p, nil
}

// deepest bounds how often a triangle is divided.
const deepest = 24

// slowest bounds how much the difference of the two rules may fall from a triangle
// to one of its quarters: across a kink of the integrand it falls like the cube
// of the length, by 8, and the rules may agree there by accident. For rules of degree
// 6 and 4 on a smooth integrand it falls by 128.
const slowest = 128

// mostDoubt bounds the factor by which the differences of the rules are
// enlarged where the division of a triangle changed its share by more than a
// quarter of that difference, as it does where the integrand is not smooth: the
// change is much less where the difference is that of a rule of lower degree.
const mostDoubt = 1000

// divide divides a triangle where its error is too large, one generation after
// another, until its share of the evaluations is used up.
func (w *worker) divide(t [3][3]float64, area float64) (p part, err error) {
	type piece struct {
		t     [3][3]float64
		p     part
		raw   float64 // difference of the rules
		doubt float64 // factor on it
	}
	one, err := w.part(t, area)
	if err != nil {
		return p, err
	}
	raw := one.differ
	one.differ = math.Max(one.differ, w.j.parts[w.triangle].differ)
	nodes := len(w.j.main) + len(w.j.lower)
	used := nodes
	now := []piece{{t, one, raw, 1}}
	for range deepest {
		if w.j.ctx.Err() != nil {
			return p, context.Cause(w.j.ctx)
		}
		var rough []piece
		for _, q := range now {
			if q.p.differ <= math.Max(w.j.allowed*area, 16*q.p.noise) {
				p.add(q.p)
			} else {
				rough = append(rough, q)
			}
		}
		now = rough
		if len(now) == 0 || used+4*nodes*len(now) > w.j.share {
			break
		}
		area /= 4
		next := make([]piece, 0, 4*len(now))
		for _, q := range now {
			from := len(next)
			change := q.p.energy
			for _, t := range quarter(q.t) {
				r, err := w.part(t, area)
				if err != nil {
					return p, err
				}
				change -= r.energy
				next = append(next, piece{t, r, r.differ, 1})
			}
			doubt := math.Max(1, q.doubt/4)
			if change = math.Abs(change); change > 4*q.p.noise {
				doubt = math.Max(doubt, math.Min(mostDoubt, 4*change/q.raw))
			}
			for i := range next[from:] {
				r := &next[from+i]
				r.doubt = doubt
				r.p.differ = math.Max(doubt*r.raw, q.p.differ/slowest)
			}
		}
		used += 4 * nodes * len(now)
		now = next
	}
	for _, q := range now {
		p.add(q.p)
	}
	return p, nil
}

// part applies the two rules to a triangle.
func (w *worker) part(t [3][3]float64, area float64) (p part, err error) {
	for _, n := range w.j.main {
		d, noise, err := w.at(t, n.at)
		if err != nil {
			return p, err
		}
		p.energy += n.weight * d
		p.noise += n.weight * noise
	}
	var lower float64
	for _, n := range w.j.lower {
		d, _, err := w.at(t, n.at)
		if err != nil {
			return p, err
		}
		lower += n.weight * d
	}
	return part{area * p.energy, area * math.Abs(p.energy-lower), area * p.noise}, nil
}

// at is the density at a point of a triangle, and what rounding costs it.
func (w *worker) at(t [3][3]float64, at [3]float64) (d, noise float64, err error) {
	w.t.evaluations++
	for k := range w.x {
		w.x[k] = at[0]*t[0][k] + at[1]*t[1][k] + at[2]*t[2][k]
	}
	condition := w.j.reach / w.j.extent
	jump := math.Inf(1)
	if w.plus != nil {
		var size float64
		if jump, size, err = w.check(); err != nil {
			return 0, 0, err
		}
		if jump > 0 {
			condition += size / jump
		}
	}
	d = w.g.Density(w.x, w.plus, w.minus, w.nu)
	if jump == 0 && math.IsNaN(d) {
		d = 0 // no jump, no energy
	}
	if !finite(d) {
		return 0, 0, w.fail(quadrature.NotFinite, "density", d, 0)
	}
	if w.j.sided {
		if e := w.g.Density(w.x, w.plus, w.minus, w.back); !(math.Abs(d-e) <= 1e-9*(math.Abs(d)+math.Abs(e))) && jump != 0 {
			return 0, 0, fmt.Errorf("mesh: %w: %.9g and %.9g at (%.6g, %.6g, %.6g), triangle %d", ErrSided, d, e, w.x[0], w.x[1], w.x[2], w.j.m.number(w.triangle)+1)
		}
	}
	return d, (2*epsilon*(1+condition) + w.rounding + w.j.o.DensityError) * math.Abs(d), nil
}

// fail describes a failure at the present place.
func (w *worker) fail(r quadrature.Reason, what string, residual, scale float64) *quadrature.PlaceError {
	return &quadrature.PlaceError{
		Reason: r, What: what, Piece: fmt.Sprintf("triangle %d", w.j.m.number(w.triangle)+1),
		Point: append([]float64(nil), w.x...), Residual: residual, Scale: scale,
	}
}
