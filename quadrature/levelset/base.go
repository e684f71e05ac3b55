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
// points of the surface in the cell, spread over the base, and so everywhere.
func (b *base) vanishing() *trace {
	if len(b.trims) == 0 {
		return nil
	}
	const most, need = 24, 6
	d := b.p.dim
	onSurface := b.usual(b.p.phi)
	var x [2]float64
	for _, t := range b.trims {
		found, tiny := 0, b.usual(t.psi)
		for i := range most {
			for k := range b.dim {
				x[k] = b.box[k].Inf() + golden(d-1, k, i)*b.box[k].Wid()
			}
			t.lift(x[:b.dim])
			if !(math.Abs(t.phi.Value(t.x)) <= onSurface) {
				continue // the surface is not over this point
			}
			if !(math.Abs(t.psi.Value(t.x)) <= tiny) {
				break
			}
			if found++; found == need {
				return t
			}
		}
	}
	return nil
}

// usual is 1e-11 of the least absolute value of a function at a few places in
// the cell, most of which will not be on the surface; 0 where it has none.
func (b *base) usual(f Function) float64 {
	least := math.Inf(1)
	x := make([]float64, b.p.dim)
	for i := range 7 {
		for k := range x {
			x[k] = b.cell.lo[k] + golden(len(x), k, i)*(b.cell.hi[k]-b.cell.lo[k])
		}
		v := math.Abs(f.Value(x))
		if !(v < math.Inf(1)) {
			return 0
		}
		least = min(least, v)
	}
	return 1e-11 * least
}

// golden is coordinate k of the i-th of points spread evenly over the unit cube
// of d dimensions: multiples of powers of generalised golden sections (Roberts
// 2018).
func golden(d, k, i int) float64 {
	step := [4][3]float64{1: {0.6180339887498949}, 2: {0.7548776662466927, 0.5698402909980532}, 3: {0.8191725133961645, 0.6710436067037893, 0.5497004779019703}}[d][k]
	_, f := math.Modf(0.5 + float64(i+1)*step)
	return f
}
