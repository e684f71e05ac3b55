package mesh

import (
	"math"

	"creaseproof/quadrature"
)

// onWell is the relative tolerance of the check of the well where none is given.
const onWell = 1e-9

// check evaluates the traces at the present place and checks them. It returns
// the length of the jump of the gradient and the sum of the lengths of the
// gradients. What the discretisation may explain is only noted, an error is
// what it cannot.
func (w *worker) check() (jump, size float64, err error) {
	tr := &w.g.Traces
	up, um := tr.Plus(w.x, w.plus), tr.Minus(w.x, w.minus)
	if tr.HasValue {
		if !finite(up) {
			return 0, 0, w.fail(quadrature.NotFinite, "plus trace", up, 0)
		}
		if !finite(um) {
			return 0, 0, w.fail(quadrature.NotFinite, "minus trace", um, 0)
		}
	}
	for k := range w.plus {
		if !finite(w.plus[k]) {
			return 0, 0, w.fail(quadrature.NotFinite, "gradient of the plus trace", w.plus[k], 0)
		}
		if !finite(w.minus[k]) {
			return 0, 0, w.fail(quadrature.NotFinite, "gradient of the minus trace", w.minus[k], 0)
		}
	}
	if w.g.Well != nil {
		if err := w.well(); err != nil {
			return 0, 0, err
		}
	}
	p, m := [3]float64(w.plus), [3]float64(w.minus)
	q := sub(p, m)
	jump, size = norm(q), norm(p)+norm(m)
	if tr.HasValue {
		gap := math.Abs(up - um)
		rounding := math.Abs(up) + math.Abs(um) + size*w.j.reach
		if tr.Scale != nil {
			rounding += math.Abs(tr.Scale(w.x))
		}
		rounding *= 64 * epsilon
		// Where the gradients agree, u must do so to the second order.
		slope := jump + plain*size
		if gap > rounding {
			w.t.defect.Continuity = math.Max(w.t.defect.Continuity, (gap-rounding)/(slope*w.j.extent))
		}
		if gap > rounding+slope*w.height {
			w.note(quadrature.Discontinuous, up-um, slope*w.j.extent)
		}
	}
	n := [3]float64(w.nu)
	off := norm(sub(q, scale(n, dot(q, n))))
	slope := jump + plain*size
	if rounding := 64 * epsilon * size; off > rounding {
		w.t.defect.Normal = math.Max(w.t.defect.Normal, (off-rounding)/slope)
		if off > rounding+w.tilt*slope {
			w.note(quadrature.NotNormal, off, jump)
		}
	}
	return jump, size, nil
}

func (w *worker) well() error {
	for i, g := range [][]float64{w.plus, w.minus} {
		what := [...]string{"plus", "minus"}[i]
		r, terms := w.g.Well(g)
		if !finite(r) || !finite(terms) {
			return w.fail(quadrature.NotFinite, "residual of the "+what+" trace", r, terms)
		}
		if r == 0 {
			continue
		}
		w.t.defect.Well = math.Max(w.t.defect.Well, math.Abs(r)/terms)
		if math.Abs(r) > math.Max(onWell, w.j.o.Tolerance)*terms {
			return w.fail(quadrature.OffWell, what, r, terms)
		}
	}
	return nil
}

// note counts a triangle that the traces do not fit.
func (w *worker) note(r quadrature.Reason, residual, size float64) {
	w.unfit = true
	if w.t.first == nil {
		w.t.first = w.fail(r, "surface", residual, size)
	}
}

// kink checks at the middle of a triangle that the gradients of u are their
// limits from the sides they are the traces on: at a kink of a formula on the
// surface itself, such as that of |x| on x = 0, the value of its derivative means
// nothing. The gradient is compared with those at two small distances: where it is
// continuous the difference falls with the distance.
func (w *worker) kink(t [3][3]float64, long float64) error {
	const step, ratio = 0x1p-20, 0x1p-10
	if w.plus == nil || !w.g.Traces.HasValue || w.j.sided {
		return nil
	}
	far := step * long
	near := math.Max(ratio*far, 64*epsilon*w.j.reach)
	if near > far/8 {
		return nil // too far from the origin to tell
	}
	var x, here, there [3]float64
	for k := range x {
		w.x[k] = (t[0][k] + t[1][k] + t[2][k]) / 3
	}
	for i, f := range []func(x, grad []float64) float64{w.g.Traces.Plus, w.g.Traces.Minus} {
		f(w.x, here[:])
		var differ [2]float64
		for n, h := range [2]float64{far, near} {
			if i == 1 {
				h = -h
			}
			for k := range x {
				x[k] = w.x[k] + h*w.nu[k]
			}
			f(x[:], there[:])
			differ[n] = norm(sub(there, here))
		}
		one, two := differ[0], differ[1]
		if finite(one) && finite(two) && two > 1e-3*(norm(here)+one) && two > one/2 {
			return w.fail(quadrature.NotSmooth, [...]string{"plus", "minus"}[i], two, norm(here))
		}
	}
	return nil
}
