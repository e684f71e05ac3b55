package quadrature

import (
	"context"
	"errors"
	"math"
	"slices"

	"creaseproof/quadrature/adaptive"
)

// An evaluator computes the integrand on a piece and checks it.
type evaluator struct {
	ctx   context.Context
	p     *piece
	tr    Traces
	d     Density
	o     Options
	work  *adaptive.Work
	reach float64 // largest distance of the surface from the origin
	whole float64 // extent of the surface
	shaky float64 // what rounding costs, in units in the last place

	s, x, nu    []float64
	jac         [][]float64
	plus, minus []float64
	area        float64 // area element

	met   span      // of the densities at the nodes
	zeros int       // nodes of this row without area
	rows  []float64 // rows with three or more such nodes
	bad   *PlaceError
}

func newEvaluator(ctx context.Context, p *piece, tr Traces, d Density, o Options, work *adaptive.Work, reach float64) *evaluator {
	e := &evaluator{ctx: ctx, p: p, tr: tr, d: d, o: o, work: work, reach: reach, s: make([]float64, p.n)}
	e.allocate()
	if tr.Plus != nil {
		e.plus, e.minus = make([]float64, p.dim), make([]float64, p.dim)
	}
	return e
}

func (e *evaluator) allocate() {
	e.x, e.nu = make([]float64, e.p.dim), make([]float64, e.p.dim)
	e.jac = make([][]float64, e.p.n)
	for j := range e.jac {
		e.jac[j] = make([]float64, e.p.dim)
	}
}

// fail describes a failure at the present place.
func (e *evaluator) fail(r Reason, what string, residual, scale float64) *PlaceError {
	return &PlaceError{
		Reason: r, What: what, Piece: e.p.name,
		Point:    append([]float64(nil), e.x...),
		Params:   append([]float64(nil), e.s...),
		Residual: residual, Scale: scale,
	}
}

// tryMap evaluates position and tangents and reports whether they are finite.
func (e *evaluator) tryMap(s [2]float64) bool {
	copy(e.s, s[:])
	e.p.eval(e.s, e.x, e.jac)
	for k := range e.x {
		if !finite(e.x[k]) {
			return false
		}
		for _, t := range e.jac {
			if !finite(t[k]) {
				return false
			}
		}
	}
	return true
}

// skew is the sine of the angle of the tangents below which they count as
// parallel.
const skew = 1e-13

// place computes position, tangents, area element and normal.
func (e *evaluator) place(s [2]float64) error {
	if !e.tryMap(s) {
		return e.fail(NotFinite, "position or tangent of the surface", 0, 0)
	}
	sign := 1.0
	if e.p.flip {
		sign = -1
	}
	if e.p.n == 1 {
		t := e.jac[0]
		e.area = norm(t)
		if e.area > 0 {
			e.nu[0], e.nu[1] = sign*t[1]/e.area, -sign*t[0]/e.area
		}
		return nil
	}
	a, b := e.jac[0], e.jac[1]
	na, nb := norm(a), norm(b)
	e.area = 0
	if na == 0 || nb == 0 {
		return nil
	}
	c := cross([3]float64{a[0] / na, a[1] / na, a[2] / na}, [3]float64{b[0] / nb, b[1] / nb, b[2] / nb})
	if e.p.normal != nil {
		copy(e.nu, e.p.normal)
		e.area = na * nb * math.Abs(c[0]*e.nu[0]+c[1]*e.nu[1]+c[2]*e.nu[2])
		return nil
	}
	n := norm(c[:])
	if n <= skew {
		return nil
	}
	for k := range c {
		e.nu[k] = sign * c[k] / n
	}
	e.area = n * na * nb
	return nil
}

// at is the integrand: the density and 1, each times the area element.
func (e *evaluator) at(s [2]float64, out *adaptive.Sample) error {
	if e.work.Used%256 == 0 && e.ctx.Err() != nil {
		return context.Cause(e.ctx)
	}
	e.work.Used++
	if err := e.place(s); err != nil {
		return err
	}
	if e.area == 0 {
		e.zeros++
		e.bad = e.fail(Degenerate, "surface", 0, 0)
		return nil
	}
	condition := e.shaky
	jump := math.Inf(1)
	if e.tr.Plus != nil {
		var size float64
		var err error
		if jump, size, err = e.checkTraces(); err != nil {
			if e.unresolved(err) {
				return nil
			}
			return err
		}
		if jump > 0 {
			condition += size / jump
		}
	}
	d, err := e.density(jump)
	if err != nil {
		return err
	}
	e.met.add(d)
	out.Value[0], out.Value[1] = d*e.area, e.area
	out.Size[0], out.Size[1] = math.Abs(d)*e.area, e.area
	out.Noise[0] = (2*epsilon*(1+condition) + e.o.DensityError) * out.Size[0]
	out.Noise[1] = 2 * epsilon * (1 + e.shaky) * e.area
	return nil
}

// density is the density at the present place, where the gradient jumps by so
// much.
func (e *evaluator) density(jump float64) (float64, error) {
	d := e.d(e.x, e.plus, e.minus, e.nu)
	if jump == 0 && math.IsNaN(d) {
		d = 0 // no jump, no energy
	}
	if !finite(d) {
		return 0, e.fail(NotFinite, "density", d, 0)
	}
	return d, nil
}

// wide is the jump of u, relative to what u varies by over the surface, above
// which it counts as discontinuous however large u itself is.
const wide = 1e-7

// blur is the relative error of a gradient that is put down to the rounding of
// its position: at most 1e-7, but for points next to a tip, which carry no area
// to speak of.
func (e *evaluator) blur() float64 {
	const most, tip = 1e-7, 1e-6
	l := e.local()
	b := 8 * epsilon * norm(e.x) / l
	if l > tip*e.whole {
		return math.Min(most, b)
	}
	return b
}

// checkTraces evaluates the traces and checks them. It returns the length of
// the jump of the gradient and the sum of the lengths of the gradients.
func (e *evaluator) checkTraces() (jump, size float64, err error) {
	up := e.tr.Plus(e.x, e.plus)
	um := e.tr.Minus(e.x, e.minus)
	if e.tr.HasValue {
		if !finite(up) {
			return 0, 0, e.fail(NotFinite, "plus trace", up, 0)
		}
		if !finite(um) {
			return 0, 0, e.fail(NotFinite, "minus trace", um, 0)
		}
	}
	for k := range e.plus {
		if !finite(e.plus[k]) {
			return 0, 0, e.fail(NotFinite, "gradient of the plus trace", e.plus[k], 0)
		}
		if !finite(e.minus[k]) {
			return 0, 0, e.fail(NotFinite, "gradient of the minus trace", e.minus[k], 0)
		}
	}
	tol := e.o.Tolerance
	blur := e.blur()
	if e.o.Well != nil {
		for i, g := range [][]float64{e.plus, e.minus} {
			what := [...]string{"plus", "minus"}[i]
			r, scale := e.o.Well(g)
			if !finite(r) || !finite(scale) {
				return 0, 0, e.fail(NotFinite, "residual of the "+what+" trace", r, scale)
			}
			if math.Abs(r) > math.Max(tol, blur)*scale {
				return 0, 0, e.fail(OffWell, what, r, scale)
			}
		}
	}
	size = norm(e.plus) + norm(e.minus)
	if e.tr.HasValue {
		scale := math.Abs(up) + math.Abs(um) + size*(e.reach+e.slip())
		if e.tr.Scale != nil {
			scale += math.Abs(e.tr.Scale(e.x))
		}
		gap := math.Abs(up - um)
		if gap > e.o.Continuity*scale || gap > wide*size*e.whole && gap > 64*epsilon*scale {
			return 0, 0, e.fail(Discontinuous, "surface", up-um, scale)
		}
	}
	var q, t [3]float64
	var normal float64
	for k := range e.plus {
		q[k] = e.plus[k] - e.minus[k]
		normal += q[k] * e.nu[k]
	}
	for k := range e.plus {
		t[k] = q[k] - normal*e.nu[k]
	}
	jump = norm(q[:])
	off := norm(t[:])
	if off > math.Max(tol, blur)*size || off > 1e-6*jump && off > math.Max(1e-12, blur)*size {
		return 0, 0, e.fail(NotNormal, "surface", off, size)
	}
	return jump, size, nil
}

// slip is how far the position moves where a parameter is changed by all of
// itself: times the precision, what the rounding of the parameters costs.
func (e *evaluator) slip() float64 {
	var sum float64
	for j, t := range e.jac {
		sum += norm(t) * math.Abs(e.s[j])
	}
	return sum
}

// rowDone is called when the row of nodes at s, or the whole curve, is
// complete. A curve, or three rows, with three nodes or more without area are a
// degenerate region; fewer may be a pole or a tip. The area of a polygon is
// checked as a whole.
func (e *evaluator) rowDone(s float64) error {
	zeros := e.zeros
	e.zeros = 0
	if zeros < 3 || e.p.normal != nil || slices.Contains(e.rows, s) {
		return nil
	}
	e.rows = append(e.rows, s)
	if e.p.n == 1 || len(e.rows) >= 3 {
		return e.bad
	}
	return nil
}

// unresolved reports whether a trace is not finite at a place that rounding
// cannot tell from a point, such as the tip of a cone: there is no area there.
func (e *evaluator) unresolved(err error) bool {
	var p *PlaceError
	return errors.As(err, &p) && p.Reason == NotFinite && e.local() <= 64*epsilon*norm(e.x)
}

// local is a length on which the surface varies at the present place.
func (e *evaluator) local() float64 {
	l := math.Inf(1)
	for j, t := range e.jac {
		l = math.Min(l, norm(t)*(e.p.over[j].Hi-e.p.over[j].Lo))
	}
	return l
}

// smooth checks that the gradient of u at the present place is its limit from
// the side that it is the trace on. At a kink on the surface itself, such as
// that of |x| on x = 0, the value of the derivative means nothing. The gradient
// is compared with those at two small distances: where it is continuous the
// difference falls with the distance.
func (e *evaluator) smooth(size float64) error {
	const step, ratio = 0x1p-20, 0x1p-10
	far := step * math.Min(e.whole, e.local())
	near := math.Max(ratio*far, 64*epsilon*e.reach)
	if near > far/8 {
		return nil // too far from the origin to tell
	}
	x, grad := make([]float64, e.p.dim), make([]float64, e.p.dim)
	differs := func(f func(x, grad []float64) float64, at []float64, h float64) float64 {
		for k := range x {
			x[k] = e.x[k] + h*e.nu[k]
		}
		f(x, grad)
		for k := range grad {
			grad[k] -= at[k]
		}
		return norm(grad)
	}
	for i, f := range []func(x, grad []float64) float64{e.tr.Plus, e.tr.Minus} {
		what, at, sign := "plus", e.plus, 1.0
		if i == 1 {
			what, at, sign = "minus", e.minus, -1
		}
		one := differs(f, at, sign*far)
		two := differs(f, at, sign*near)
		if finite(one) && finite(two) && two > 1e-3*(size+one) && two > one/2 {
			return e.fail(NotSmooth, what, two, size)
		}
	}
	return nil
}
