package certified

import (
	"container/heap"
	"context"
	"math"

	"creaseproof/entropy/interval"
)

// Options of an integration. The zero value is ready for use.
type Options struct {
	// Rel is the width aimed at, relative to the integral of the absolute value;
	// 1e-13 if zero. Rounding may leave more.
	Rel float64
	// MaxCells bounds the cells that are looked at. If zero it is 2000, and less
	// for integrands of more than some 200 operations, so that the work is bounded.
	MaxCells int
}

// Result is an enclosure of an integral.
type Result struct {
	Value interval.Interval // may be unbounded
	Cells int               // that were looked at
}

// cell is a part of the domain with the enclosure of the integral over it.
type cell struct {
	box   [2][2]float64
	value interval.Interval
	size  float64 // bound of the integral of the absolute value
	split int     // the direction to halve
}

type cells []cell

func (c cells) Len() int           { return len(c) }
func (c cells) Less(i, j int) bool { return c[i].value.Wid() > c[j].value.Wid() }
func (c cells) Swap(i, j int)      { c[i], c[j] = c[j], c[i] }
func (c *cells) Push(x any)        { *c = append(*c, x.(cell)) }
func (c *cells) Pop() any {
	old := *c
	x := old[len(old)-1]
	*c = old[:len(old)-1]
	return x
}

// Integrate encloses the integral of a value over its parameters, each from 0
// to 1; a parameter on which the value does not depend counts as well. It
// returns early with the context's error.
func (t *Tape) Integrate(ctx context.Context, of Ref, o Options) (Result, error) {
	if o.Rel == 0 {
		o.Rel = 1e-13
	}
	if x, ok := t.known(of); ok {
		return Result{Value: x, Cells: 1}, nil
	}
	e := t.evaluator(of)
	if o.MaxCells == 0 {
		o.MaxCells = min(2000, max(16, 400_000/e.work()))
	}
	both := t.deps[of] == 3
	dir := 0
	if t.deps[of] == 2 {
		dir = 1
	}
	g, err := single()
	if both {
		g, err = double()
	}
	if err != nil {
		return Result{Value: interval.Entire()}, err
	}
	evaluate := func(c *cell) {
		if both {
			e.rectangle(g, c)
		} else {
			e.segment(g, c, dir)
		}
	}
	first := cell{box: [2][2]float64{{0, 1}, {0, 1}}}
	evaluate(&first)
	open, done := cells{first}, cells(nil)
	r := Result{Cells: 1}
	for len(open) > 0 && r.Cells < o.MaxCells {
		if err := ctx.Err(); err != nil {
			return r, err
		}
		var width, size float64
		if r.Cells%8 < 2 { // the sums need not be fresh
			for _, l := range []cells{open, done} {
				for i := range l {
					width += l[i].value.Wid()
					size += l[i].size
				}
			}
			if width <= o.Rel*size && !math.IsInf(width, 0) {
				break
			}
		}
		c := heap.Pop(&open).(cell)
		k := c.split
		lo, hi := c.box[k][0], c.box[k][1]
		mid := lo + (hi-lo)/2
		if !(lo < mid && mid < hi) || mid-lo < 0x1p-48 && lo > 0 {
			done = append(done, c)
			continue
		}
		halves := [2]cell{{box: c.box}, {box: c.box}}
		halves[0].box[k][1], halves[1].box[k][0] = mid, mid
		var parts float64
		for i := range halves {
			evaluate(&halves[i])
			parts += halves[i].value.Wid()
		}
		r.Cells += 2
		if !math.IsInf(parts, 0) && parts >= 0.75*c.value.Wid() && c.value.Wid() <= 0x1p-40*c.size {
			done = append(done, c) // rounding is what is left
			continue
		}
		heap.Push(&open, halves[0])
		heap.Push(&open, halves[1])
	}
	r.Value = zero
	for _, l := range []cells{done, open} {
		for i := range l {
			r.Value = r.Value.Add(l[i].value)
		}
	}
	return r, nil
}

// spread is the interval of a side of a cell.
func spread(side [2]float64) interval.Interval {
	return interval.Point(side[0]).ConvexHull(interval.Point(side[1]))
}

// places are the nodes in a side of a cell, and its length.
func (g *gauss) places(side [2]float64) ([]interval.Interval, interval.Interval) {
	all := spread(side)
	h := interval.Point(side[1]).Sub(interval.Point(side[0]))
	half := h.Div(two)
	mid := interval.Point(side[0]).Add(half)
	out := make([]interval.Interval, g.n)
	for i, x := range g.nodes {
		out[i] = mid.Add(half.Mul(x)).Intersection(all)
	}
	return out, h
}

// segment encloses the integral over a cell in one direction.
func (e *evaluator) segment(g *gauss, c *cell, dir int) {
	c.split = dir
	unit := interval.Point(0).ConvexHull(one)
	box := [2]interval.Interval{unit, unit}
	box[dir] = spread(c.box[dir])
	at, h := g.places(c.box[dir])
	s := e.at(box, dir, h, 2*g.n)
	plain := s[0].Mul(h)
	rest := s.coefficient(2 * g.n)
	if c.take(plain); plain.IsEmpty() || !rest.IsBounded() || rest.IsEmpty() {
		return
	}
	total := zero
	for i, x := range at {
		box[dir] = x
		total = total.Add(g.weights[i].Mul(e.at(box, dir, h, 0)[0]))
	}
	total = total.Div(two).Add(rest.Mul(g.gamma)).Mul(h)
	c.narrow(total)
}

// take is the enclosure by the range. Where the integrand is defined nowhere on
// the cell there is none.
func (c *cell) take(plain interval.Interval) {
	if plain.IsEmpty() {
		plain = interval.Entire()
	}
	c.value, c.size = plain, plain.Mag()
}

// narrow intersects with a second enclosure.
func (c *cell) narrow(x interval.Interval) {
	if y := c.value.Intersection(x); !y.IsEmpty() {
		c.value = y
	}
}

// halved is the width of the range on the halves of a cell, added up.
func (e *evaluator) halved(c *cell, dir int) (width float64) {
	mid := c.box[dir][0] + (c.box[dir][1]-c.box[dir][0])/2
	for _, side := range [][2]float64{{c.box[dir][0], mid}, {mid, c.box[dir][1]}} {
		box := [2]interval.Interval{spread(c.box[0]), spread(c.box[1])}
		box[dir] = spread(side)
		width += e.at(box, 0, one, 0)[0].Wid()
	}
	return width
}

// rectangle encloses the integral over a cell in two directions.
func (e *evaluator) rectangle(g *gauss, c *cell) {
	box := [2]interval.Interval{spread(c.box[0]), spread(c.box[1])}
	at0, h0 := g.places(c.box[0])
	at1, h1 := g.places(c.box[1])
	area := h0.Mul(h1)
	s := e.at(box, 0, h0, 2*g.n)
	plain := s[0].Mul(area)
	rest0 := s.coefficient(2 * g.n).Mul(g.gamma)
	rest1 := e.at(box, 1, h1, 2*g.n).coefficient(2 * g.n).Mul(g.gamma)
	c.take(plain)
	wide0, wide1 := rest0.Wid(), rest1.Wid()
	c.split = 0
	switch rough0, rough1 := !(wide0 < math.Inf(1)), !(wide1 < math.Inf(1)); {
	case rough0 && rough1:
		if e.halved(c, 1) < e.halved(c, 0) {
			c.split = 1
		}
	case rough1 || !rough0 && wide1 > wide0:
		c.split = 1
	}
	if plain.IsEmpty() || !rest0.IsBounded() || !rest1.IsBounded() || rest0.IsEmpty() || rest1.IsEmpty() {
		return
	}
	if math.Min(rest0.Mag(), rest1.Mag()) > 0 && wide0+wide1 > s[0].Wid() {
		return // the rule would not help
	}
	total := zero
	for i, x := range at0 {
		line := zero
		for j, y := range at1 {
			line = line.Add(g.weights[j].Mul(e.at([2]interval.Interval{x, y}, 0, h0, 0)[0]))
		}
		// The remainder in the second direction holds for every value of the first.
		total = total.Add(g.weights[i].Mul(line.Div(two).Add(rest1)))
	}
	c.narrow(total.Div(two).Add(rest0).Mul(area))
}
