package levelset

import "math"

// A base is the projection of a cell along its height direction with the
// conditions, functions that have to be non-negative, that the part of the
// surface in the cell puts on it. Conditions certainly met are left out.
type base struct {
	p      *plan
	cell   cell
	up     int
	rising bool
	dim    int
	box    [2]Interval
	faces  []Function // the surface is above the bottom, and below the top
	trims  []*trace
}

// newBase returns nil if no point of the base meets the conditions.
func (p *plan) newBase(c *cell, up int, rising bool) *base {
	d := p.dim
	b := &base{p: p, cell: *c, up: up, rising: rising, dim: d - 1}
	for i := range d - 1 {
		j := skip(i, up)
		b.box[i] = span(c.lo[j], c.hi[j])
	}
	sign := 1.0
	if rising {
		sign = -1
	}
	for _, f := range [2]*face{newFace(p.phi, d, up, c.lo[up], sign), newFace(p.phi, d, up, c.hi[up], -sign)} {
		r := f.Range(b.box[:d-1])
		if r.Sup() < 0 || r.IsEmpty() {
			return nil
		}
		if !(r.Inf() >= 0) {
			b.faces = append(b.faces, f)
		}
	}
	box := p.tbox[:d]
	for k, psi := range p.systems[c.system] {
		c.box(box)
		if r := psi.Range(box); r.Inf() >= 0 {
			continue
		}
		t := newTrace(psi, p.phi, d, up, c.lo[up], c.hi[up], rising)
		t.condition = k
		r := t.Range(b.box[:d-1])
		if r.Sup() < 0 || r.IsEmpty() {
			return nil
		}
		if !(r.Inf() >= 0) {
			b.trims = append(b.trims, t)
		}
	}
	return b
}

// active calls f for every condition.
func (b *base) active(f func(Function)) {
	for _, g := range b.faces {
		f(g)
	}
	for _, g := range b.trims {
		f(g)
	}
}

// direction returns a coordinate of the base in which all conditions are
// certainly monotone, the steeper one if there are two. In the plane the base is
// a segment, and nothing is asked.
func (b *base) direction() (int, bool) {
	if b.dim == 1 {
		return -1, true
	}
	var g [2]Interval
	ok := [2]bool{true, true}
	var steep [2]float64
	b.active(func(f Function) {
		f.GradientRange(g[:], b.box[:])
		for i := range g {
			if !certain(g[i]) {
				ok[i] = false
				continue
			}
			mid := math.Abs(g[i].Inf() + g[i].Sup())
			steep[i] += mid / (mid + math.Abs(g[1-i].Inf()+g[1-i].Sup()))
		}
	})
	switch {
	case ok[0] && ok[1]:
		if len(b.faces)+len(b.trims) == 0 || steep[0] == steep[1] {
			if b.cell.relative(b.p, skip(0, b.up)) > b.cell.relative(b.p, skip(1, b.up)) {
				return 1, true
			}
			return 0, true
		}
		if steep[0] > steep[1] {
			return 0, true
		}
		return 1, true
	case ok[0]:
		return 0, true
	case ok[1]:
		return 1, true
	}
	return 0, false
}

func (c *cell) relative(p *plan, i int) float64 { return (c.hi[i] - c.lo[i]) / p.whole[i] }

// turning looks for a cut that makes a condition of the base monotone.
func (p *plan) turning(c *cell, b *base) (j int, s float64, ok bool) {
	var fails [2][]Function
	var g [2]Interval
	b.active(func(f Function) {
		f.GradientRange(g[:], b.box[:])
		for i := range g {
			if !certain(g[i]) {
				fails[i] = append(fails[i], f)
			}
		}
	})
	order := [2]int{1, 0}
	if len(fails[0]) < len(fails[1]) {
		order = [2]int{0, 1}
	}
	for _, k := range order {
		for _, f := range fails[k] {
			if j, s, ok = p.critical(c, f, 2, k, b.up); ok {
				return j, s, ok
			}
		}
	}
	return 0, 0, false
}

// vanishing returns a trim that is zero to rounding at all of a number of
// points of the surface in the cell, spread over the base, and so everywhere. In
// large cells it does not look.
func (b *base) vanishing() *trace {
	const most, need = 24, 6
	for i := range b.p.dim {
		if b.cell.relative(b.p, i) > 1.0/8 {
			return nil
		}
	}
	box := b.p.tbox[:b.p.dim]
	b.cell.box(box)
	tiny := func(f Function, x []float64) bool { return math.Abs(f.Value(x)) <= 1e-11*f.Range(box).Mag() }
	var x [2]float64
	for _, t := range b.trims {
		found := 0
		for i := range most {
			// Multiples of powers of a generalised golden section.
			for k, step := range [2]float64{0.7548776662466927, 0.5698402909980532} {
				if k < b.dim {
					_, f := math.Modf(0.5 + float64(i+1)*step)
					x[k] = b.box[k].Inf() + f*b.box[k].Wid()
				}
			}
			t.lift(x[:b.dim])
			if !tiny(t.phi, t.x) {
				continue // the surface is not over this point
			}
			if !tiny(t.psi, t.x) {
				break
			}
			if found++; found == need {
				return t
			}
		}
	}
	return nil
}
