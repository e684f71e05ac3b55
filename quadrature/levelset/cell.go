package levelset

import (
	"math"
	"slices"
)

// thinWidth is the width, relative to that of the whole box, below which a
// direction of a cell is thin: it comes from a cut next to a critical point.
const thinWidth = 0x1p-40

// A cell is a box still to be treated.
type cell struct {
	lo, hi [3]float64
	size   float64 // largest relative width
	system int     // whose conditions apply
}

// box puts the intervals of a cell into b.
func (c *cell) box(b []Interval) {
	for i := range b {
		b[i] = span(c.lo[i], c.hi[i])
	}
}

// area bounds the area of a surface without folds that crosses the cell: the
// sum of the areas of three faces. In the plane it is the sum of two sides.
func (c *cell) area(dim int) float64 {
	sum := 0.0
	for i := range dim {
		sum += c.projection(dim, i)
	}
	return sum
}

// projection is the area of the cell seen along direction i.
func (c *cell) projection(dim, i int) float64 {
	p := 1.0
	for j := range dim {
		if j != i {
			p *= c.hi[j] - c.lo[j]
		}
	}
	return p
}

// verdict on a cell.
type verdict int

const (
	done verdict = iota // discarded, or its sheets are recorded
	cut                 // replaced by smaller cells
	atom                // too small to be cut
)

// treat discards the cell, records the sheets in it, or cuts it.
func (p *plan) treat(c *cell) (verdict, error) {
	d := p.dim
	box := p.box[:d]
	c.box(box)
	r := p.phi.Range(box)
	switch {
	case r.IsEmpty() || certain(r):
		return done, nil
	case r.Inf() == 0 && r.Sup() == 0:
		return done, p.identical(c)
	}
	for _, t := range p.systems[c.system] {
		if r := t.Range(box); r.Sup() < 0 || r.IsEmpty() {
			return done, nil
		}
	}
	g := p.grad[:d]
	p.phi.GradientRange(g, box)
	if p.misses(c, g) {
		return done, nil
	}
	if p.thin(c) {
		return p.treatThin(c, g)
	}
	return p.treatPlain(c, g)
}

// misses tries the mean value form: phi(centre) + gradient · (x - centre).
func (p *plan) misses(c *cell, g []Interval) bool {
	d := p.dim
	sum := span(0, 0)
	for i := range d {
		m := c.lo[i] + (c.hi[i]-c.lo[i])/2
		p.point[i] = span(m, m)
		sum = sum.Add(g[i].Mul(span(c.lo[i], c.hi[i]).Sub(p.point[i])))
	}
	r := p.phi.Range(p.point[:d])
	return certain(r.Add(sum))
}

func (p *plan) thin(c *cell) bool {
	for i := range p.dim {
		if p.isThin(c, i) {
			return true
		}
	}
	return false
}

func (p *plan) isThin(c *cell, i int) bool {
	return c.hi[i]-c.lo[i] < thinWidth*p.whole[i]
}

// treatPlain looks for a height direction with a base whose active conditions
// share an inner direction.
func (p *plan) treatPlain(c *cell, g []Interval) (verdict, error) {
	order := p.heights(c, g)
	if len(order) == 0 {
		for _, k := range p.steepest(c, g) {
			if j, s, ok := p.critical(c, p.phi, p.dim, k, -1); ok {
				return p.slab(c, j, s), nil
			}
		}
		return p.bisect(c, -1), nil
	}
	var first *base
	for _, k := range order {
		b := p.newBase(c, k, g[k].Inf() > 0)
		if b == nil {
			return done, nil
		}
		l, ok := b.direction()
		if ok && b.dim > 1 && p.record(b, l) {
			return done, nil
		}
		if t := b.vanishing(); t != nil {
			return done, &VanishingError{System: c.system, Condition: t.condition, Point: slices.Clone(t.x)}
		}
		if ok && b.dim == 1 && p.record(b, l) {
			return done, nil
		}
		if first == nil && !ok {
			first = b
		}
	}
	if first != nil {
		if j, s, ok := p.turning(c, first); ok {
			return p.slab(c, j, s), nil
		}
	}
	return p.bisect(c, order[0]), nil
}

// heights lists the directions in which phi is certainly monotone, the one
// nearest to the normal first.
func (p *plan) heights(c *cell, g []Interval) []int {
	order := p.steepest(c, g)
	n := 0
	for _, k := range order {
		if certain(g[k]) {
			order[n] = k
			n++
		}
	}
	return order[:n]
}

// steepest lists the directions by the size of the partial derivative of phi,
// its certain minimum in the first place and its size at a few places in the
// second, largest first.
func (p *plan) steepest(c *cell, g []Interval) []int {
	d := p.dim
	var size [3]float64
	for i, v := range g {
		if certain(v) {
			size[i] = 10 * float64(int(1)<<d) * v.Mig()
		}
	}
	for corner := range 1 << d {
		for i := range d {
			t := 0.25
			if corner>>i&1 == 1 {
				t = 0.75
			}
			p.x[i] = c.lo[i] + t*(c.hi[i]-c.lo[i])
		}
		p.phi.Gradient(p.g[:d], p.x[:d])
		for i, v := range p.g[:d] {
			size[i] += math.Abs(v)
		}
	}
	order := p.order[:d]
	for i := range order {
		order[i] = i
		for j := i; j > 0 && size[order[j]] > size[order[j-1]]; j-- {
			order[j], order[j-1] = order[j-1], order[j]
		}
	}
	return order
}

// critical looks for a cut across a direction j of the cell that makes the
// derivative of f by its k-th variable certainly of one sign on both sides of a
// thin slab. Up is the direction of the cell that f does not depend on, or -1.
func (p *plan) critical(c *cell, f Function, dim, k, up int) (j int, s float64, ok bool) {
	box, g, gb, x := p.cbox[:dim], p.cg[:dim], p.cgb[:dim], p.cx[:dim]
	at := func(i int) int {
		if up < 0 {
			return i
		}
		return skip(i, up)
	}
	for try := range dim {
		i := try // k first
		if try == 0 {
			i = k
		} else if try <= k {
			i = try - 1
		}
		if p.isThin(c, at(i)) {
			continue
		}
		for m := range dim {
			x[m] = c.lo[at(m)] + (c.hi[at(m)]-c.lo[at(m)])/2
		}
		u := func(t float64) float64 {
			x[i] = t
			f.Gradient(g, x)
			return g[k]
		}
		lo, hi := c.lo[at(i)], c.hi[at(i)]
		ulo, uhi := u(lo), u(hi)
		if !((ulo < 0 && uhi > 0) || (ulo > 0 && uhi < 0)) {
			continue
		}
		s := crossing(u, lo, hi, ulo, uhi)
		a, b := p.cuts(c, at(i), s)
		if !(a > lo && b < hi) {
			continue
		}
		for m := range dim {
			box[m] = span(c.lo[at(m)], c.hi[at(m)])
		}
		box[i] = span(lo, a)
		if f.GradientRange(gb, box); !certain(gb[k]) {
			continue
		}
		box[i] = span(b, hi)
		if f.GradientRange(gb, box); !certain(gb[k]) {
			continue
		}
		return at(i), s, true
	}
	return 0, 0, false
}

// cuts returns the two sides of the slab about s.
func (p *plan) cuts(c *cell, j int, s float64) (a, b float64) {
	h := 0x1p-45*min(p.whole[j], 4*(c.hi[j]-c.lo[j])) + 8*ulp(s)
	return s - h, s + h
}

// slab cuts a cell into a thin slab and what is on its two sides.
func (p *plan) slab(c *cell, j int, s float64) verdict {
	a, b := p.cuts(c, j, s)
	for i, at := range [4]float64{c.lo[j], a, b, c.hi[j]} {
		if i > 0 {
			n := *c
			n.lo[j], n.hi[j] = p.last, at
			p.push(&n)
		}
		p.last = at
	}
	return cut
}

// idle reports whether phi changes little along direction i of a cell, by its
// gradient in p.grad, against another direction: cuts across it would not help.
// Trims may change along it.
func (p *plan) idle(c *cell, i int) bool {
	if len(p.systems[c.system]) > 0 {
		return false
	}
	most := 0.0
	for k, g := range p.grad[:p.dim] {
		most = max(most, g.Mag()*(c.hi[k]-c.lo[k]))
	}
	return p.grad[i].Mag()*(c.hi[i]-c.lo[i]) < most/16 && most < math.Inf(1)
}

// bisect cuts a cell across its relatively longest direction. The height, if
// not negative, is cut only when it is the longest by far, and so is a direction
// along which phi hardly changes.
func (p *plan) bisect(c *cell, height int) verdict {
	j, best := -1, 0.0
	for i := range p.dim {
		w := (c.hi[i] - c.lo[i]) / p.whole[i]
		if i == height {
			w /= 4
		}
		if p.idle(c, i) {
			w /= 16
		}
		if w > best && !p.isThin(c, i) {
			j, best = i, w
		}
	}
	if j < 0 || best < p.smallest || best < p.coarsest && p.scale(c) > 1/(64*p.coarsest) {
		return atom
	}
	s := c.lo[j] + offCentre*(c.hi[j]-c.lo[j])
	if !(s > c.lo[j] && s < c.hi[j]) {
		return atom
	}
	a, b := *c, *c
	a.hi[j], b.lo[j] = s, s
	p.push(&a)
	p.push(&b)
	return cut
}

// treatThin bounds the area in a cell that is thin in some directions. Where one
// of the other directions, k, is a height with |grad phi| at most 1000 |phi_k|,
// the area is at most 1000 times that of the thin base. Otherwise, let T be
// the thin directions and those in which the derivative has no certain sign. The
// projections in the others are one-to-one; and if the derivatives by T together
// are at most half the largest of the others,
//
//	∫ dA ≤ ∫ Σ |n_i| dA ≤ 2 Σ_{i not in T} projection(i),
//
// where every projection has a thin side. If that fails too the surface may lie
// along the slab, and where a thin direction is a height the cell is
// treated as any other.
func (p *plan) treatThin(c *cell, g []Interval) (verdict, error) {
	d := p.dim
	total, across, along, area := 0.0, 0.0, 0.0, 0.0
	open, best := -1, -1
	height := false
	for i := range d {
		total += g[i].Mag()
		switch {
		case p.isThin(c, i):
			across += g[i].Mag()
			height = height || certain(g[i])
		case !certain(g[i]):
			across += g[i].Mag()
			open = i
		default:
			area += 2 * c.projection(d, i)
			if m := g[i].Mig(); m > along {
				along, best = m, i
			}
		}
	}
	bound := math.Inf(1)
	if across <= along/2 {
		bound = area
	}
	if best >= 0 && total <= 1000*along {
		bound = min(bound, c.projection(d, best)*total/along)
	}
	switch {
	case !math.IsInf(bound, 1) && (open < 0 || bound <= 100*area):
		p.skipped += bound
		if len(p.left) < mostLeft {
			p.left = append(p.left, *c)
		}
		return done, nil
	case height:
		return p.treatPlain(c, g)
	}
	if open >= 0 {
		if j, s, ok := p.critical(c, p.phi, d, open, -1); ok {
			return p.slab(c, j, s), nil
		}
	}
	return p.bisect(c, -1), nil
}
