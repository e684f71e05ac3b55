package levelset

import (
	"math"
	"slices"
)

// record finds the break points of a base with inner direction l (-1 in the
// plane) and appends the sheets between them. It reports false, and appends
// nothing, if the zeros could not be isolated within the work allowed.
func (p *plan) record(b *base, l int) bool {
	if b.dim == 1 {
		return p.recordCurve(b)
	}
	m := 1 - l
	x0, x1 := b.box[m].Inf(), b.box[m].Sup()
	y0, y1 := b.box[l].Inf(), b.box[l].Sup()
	s := &isolation{whole: x1 - x0, left: work}

	// First the faces: where their zeros enter and leave the base.
	for _, f := range b.faces {
		if !s.zeros(newFace(f, 2, l, y0, 1), x0, x1) || !s.zeros(newFace(f, 2, l, y1, 1), x0, x1) {
			return false
		}
	}
	var out []*sheet
	ok := pieces(s, x0, x1, func(x0, x1 float64) bool {
		sh := &sheet{
			up: b.up, inner: skip(l, b.up), outer: skip(m, b.up), rising: b.rising,
			lo: b.cell.lo, hi: b.cell.hi, system: b.cell.system, x0: x0, x1: x1,
			low: bound{at: y0}, high: bound{at: y1},
		}
		if !b.faceBounds(sh, l, x0+(x1-x0)/2, y0, y1) {
			return true
		}
		if len(b.trims) == 0 {
			out = append(out, sh)
			return true
		}
		return b.trimmed(sh, l, &out)
	})
	return ok && p.keep(&b.cell, out)
}

// keep appends the sheets found in a cell, unless one is flat at an end and the
// cell can still be cut.
func (p *plan) keep(c *cell, list []*sheet) bool {
	if c.size > flatSize && slices.ContainsFunc(list, p.eval.flat) {
		return false
	}
	p.sheets = append(p.sheets, list...)
	return true
}

// pieces sorts the points found and calls f for the intervals between them. It
// resets the points for the use of f.
func pieces(s *isolation, x0, x1 float64, f func(x0, x1 float64) bool) bool {
	points := append(slices.Clone(s.points), x0, x1)
	slices.Sort(points)
	for i := 1; i < len(points); i++ {
		if points[i]-points[i-1] > 8*ulp(max(math.Abs(points[i]), math.Abs(points[i-1])))+0x1p-50*(x1-x0) {
			if !f(points[i-1], points[i]) {
				return false
			}
		}
	}
	return true
}

// telling is the value of f largest in size at a few places between x0 and x1,
// where f has one sign: at a single place it might vanish by rounding.
func telling(x0, x1 float64, f func(x float64) float64) (v float64) {
	for _, t := range [3]float64{0.5, 0.21, 0.83} {
		if w := f(x0 + t*(x1-x0)); !(math.Abs(w) <= math.Abs(v)) {
			v = w
		}
	}
	return v
}

// faceBounds sets the bounds that the faces put on the inner coordinate, at
// the outer coordinate x, and reports whether any is left.
func (b *base) faceBounds(sh *sheet, l int, x, y0, y1 float64) bool {
	var at [2]float64
	value := func(f Function, y float64) float64 {
		return telling(sh.x0, sh.x1, func(x float64) float64 {
			at[1-l], at[l] = x, y
			return f.Value(at[:])
		})
	}
	for _, f := range b.faces {
		v0, v1 := value(f, y0), value(f, y1)
		switch {
		case v0 < 0 && v1 < 0:
			return false
		case v0 < 0:
			sh.low = bound{f: f, rising: true}
		case v1 < 0:
			sh.high = bound{f: f, rising: false}
		}
	}
	a, c := b.p.eval.inside(sh, x)
	return a < c
}

// trimmed cuts a sheet bounded by the faces where the zeros of the trims meet
// its bounds or each other.
func (b *base) trimmed(sh *sheet, l int, out *[]*sheet) bool {
	s := &isolation{whole: sh.x1 - sh.x0, left: work}
	along := func(d bound, f Function) Function {
		if d.f == nil {
			return newFace(f, 2, l, d.at, 1)
		}
		return newTrace(f, d.f, 2, l, b.box[l].Inf(), b.box[l].Sup(), d.rising)
	}
	for _, t := range b.trims {
		if !b.coincide(sh, l, t, false) && !b.kinks(s, along(sh.low, t), sh.x0, sh.x1) {
			return false
		}
		if !b.coincide(sh, l, t, true) && !b.kinks(s, along(sh.high, t), sh.x0, sh.x1) {
			return false
		}
	}
	return pieces(s, sh.x0, sh.x1, func(x0, x1 float64) bool {
		n := *sh
		n.x0, n.x1 = x0, x1
		if !b.trimBounds(&n, l) {
			return true
		}
		inner := slices.Concat(n.trimLow, n.trimHigh)
		if len(inner) < 2 {
			*out = append(*out, &n)
			return true
		}
		return b.crossed(&n, l, inner, out)
	})
}

// kinks finds the zeros of a trim along a bound. In small cells in which
// intervals do not succeed, as between trims that nearly coincide, it takes
// those that show at a number of places.
func (b *base) kinks(s *isolation, f Function, x0, x1 float64) bool {
	s.left = work
	before := len(s.points)
	if s.zeros(f, x0, x1) {
		return true
	}
	if b.cell.size > sampledSize {
		return false
	}
	s.points = s.points[:before]
	s.sampled(f, x0, x1)
	return true
}

// coincide reports whether the zeros of t agree with the lower or the upper
// bound of a sheet to rounding, at five places. They are not isolated then:
// either will do as the bound.
func (b *base) coincide(sh *sheet, l int, t *trace, upper bool) bool {
	var at, g [2]float64
	for i := range 5 {
		x := sh.x0 + (sh.x1-sh.x0)*(float64(i)+0.6)/5.2
		lo, hi := b.p.eval.inside(sh, x)
		if upper {
			lo = hi
		}
		at[l], at[1-l] = lo, x
		t.Gradient(g[:], at[:])
		if v := t.psi.Value(t.x); !(math.Abs(v) <= 1e-13*norm(t.h)*b.box[l].Wid()) {
			return false
		}
	}
	return true
}

// trimBounds sets the bounds that the trims put on the inner coordinate
// between the bounds of the faces.
func (b *base) trimBounds(sh *sheet, l int) bool {
	var at [2]float64
	outer := *sh
	value := func(t *trace, upper bool) float64 {
		return telling(sh.x0, sh.x1, func(x float64) float64 {
			lo, hi := b.p.eval.inside(&outer, x)
			if upper {
				lo = hi
			}
			at[1-l], at[l] = x, lo
			return t.Value(at[:])
		})
	}
	for _, t := range b.trims {
		v0, v1 := value(t, false), value(t, true)
		switch {
		case v0 < 0 && v1 < 0:
			return false
		case v0 < 0:
			sh.trimLow = append(sh.trimLow, bound{f: t, trim: t, rising: true})
		case v1 < 0:
			sh.trimHigh = append(sh.trimHigh, bound{f: t, trim: t, rising: false})
		}
	}
	return true
}

// crossed cuts a sheet where the zeros of two trims cross, and keeps of the
// trims those that bound it.
func (b *base) crossed(sh *sheet, l int, inner []bound, out *[]*sheet) bool {
	outer := *sh
	outer.trimLow, outer.trimHigh = nil, nil
	s := &isolation{whole: sh.x1 - sh.x0, left: work}
	between := b.between(sh, l)
	for i, d := range inner {
		for _, e := range inner[:i] {
			n := outer
			if d.rising {
				n.trimLow = []bound{d}
			} else {
				n.trimHigh = []bound{d}
			}
			if b.coincide(&n, l, e.trim, !d.rising) {
				continue
			}
			t := newTrace(e.f, d.f, 2, l, b.box[l].Inf(), b.box[l].Sup(), d.rising)
			t.bracket = func(x []float64) (lo, hi float64) { return b.p.eval.inside(&outer, x[0]) }
			t.between = between
			if !b.kinks(s, t, sh.x0, sh.x1) {
				return false
			}
		}
	}
	return pieces(s, sh.x0, sh.x1, func(x0, x1 float64) bool {
		n := outer
		n.x0, n.x1 = x0, x1
		if !b.trimBounds(&n, l) {
			return true
		}
		x := x0 + (x1-x0)/2
		n.trimLow = b.foremost(&outer, n.trimLow, x, 1)
		n.trimHigh = b.foremost(&outer, n.trimHigh, x, -1)
		if lo, hi := b.p.eval.inside(&n, x); lo < hi {
			*out = append(*out, &n)
		}
		return true
	})
}

// between encloses the bounds that the faces put on the inner coordinate of a
// sheet, beyond which the surface is not in the cell.
func (b *base) between(sh *sheet, l int) func(box []Interval) (low, high Interval) {
	end := func(d bound) func(box []Interval) Interval {
		if d.f == nil {
			return func([]Interval) Interval { return span(d.at, d.at) }
		}
		t := newTrace(d.f, d.f, 2, l, b.box[l].Inf(), b.box[l].Sup(), d.rising)
		return func(box []Interval) Interval {
			t.enclose(box)
			return t.xb[l]
		}
	}
	low, high := end(sh.low), end(sh.high)
	return func(box []Interval) (Interval, Interval) { return low(box), high(box) }
}

// foremost keeps the bound that is the innermost at x.
func (b *base) foremost(outer *sheet, list []bound, x, sign float64) []bound {
	best, at := -1, 0.0
	for i := range list {
		n := *outer
		if sign > 0 {
			n.trimLow = list[i : i+1]
		} else {
			n.trimHigh = list[i : i+1]
		}
		lo, hi := b.p.eval.inside(&n, x)
		if sign < 0 {
			lo = hi
		}
		if best < 0 || sign*lo > sign*at {
			best, at = i, lo
		}
	}
	if best < 0 {
		return nil
	}
	return list[best : best+1]
}

// recordCurve is record for curves in the plane.
func (p *plan) recordCurve(b *base) bool {
	x0, x1 := b.box[0].Inf(), b.box[0].Sup()
	s := &isolation{whole: x1 - x0, left: work}
	for _, f := range b.faces {
		if !s.zeros(f, x0, x1) {
			return false
		}
	}
	below := func(f Function, x0, x1 float64) bool {
		return telling(x0, x1, func(x float64) float64 { return f.Value([]float64{x}) }) < 0
	}
	var out []*sheet
	ok := pieces(s, x0, x1, func(x0, x1 float64) bool {
		if slices.ContainsFunc(b.faces, func(f Function) bool { return below(f, x0, x1) }) {
			return true
		}
		s := &isolation{whole: x1 - x0, left: work}
		for _, t := range b.trims {
			if !s.zeros(t, x0, x1) {
				return false
			}
		}
		return pieces(s, x0, x1, func(x0, x1 float64) bool {
			if !slices.ContainsFunc(b.trims, func(t *trace) bool { return below(t, x0, x1) }) {
				out = append(out, &sheet{
					up: b.up, inner: -1, outer: skip(0, b.up), rising: b.rising,
					lo: b.cell.lo, hi: b.cell.hi, system: b.cell.system, x0: x0, x1: x1,
				})
			}
			return true
		})
	})
	return ok && p.keep(&b.cell, out)
}

const (
	// work is the number of ranges evaluated to isolate the zeros on one segment.
	work = 500
	// sampledSize is the size of cells, relative to the box, in which break
	// points between trims may be found without a proof.
	sampledSize = 1.0 / 32
)
