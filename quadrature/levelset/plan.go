package levelset

import (
	"container/heap"
	"context"
	"fmt"
	"math"
	"slices"
)

// A plan cuts the box into sheets.
type plan struct {
	dim      int
	phi      Function
	systems  [][]Function
	inside   [3][2]float64 // the box
	whole    [3]float64    // its widths
	smallest float64       // relative width of cells that are not cut any more
	coarsest float64       // the same where the coordinates are large against them
	queue    cells
	pending  float64 // bound of the area in the queue
	atoms    cells   // cells too small to be cut
	cells    int     // treated
	sheets   []*sheet
	shaped   int     // sheets whose maps are chosen
	bases    float64 // area of their bases
	skipped  float64 // bound of the area in thin cells left out
	left     []cell  // some of these
	eval     *evaluator

	box, cbox, tbox, grad, cgb, point []Interval
	x, g, cx, cg                      []float64
	order                             [3]int
	last                              float64
}

func newPlan(phi Function, systems [][]Function, box [][2]float64, cuts [][]float64, eval *evaluator) *plan {
	d := len(box)
	p := &plan{
		dim: d, phi: phi, systems: systems, smallest: 0x1p-30, coarsest: 0x1p-30, eval: eval,
		box: make([]Interval, d), cbox: make([]Interval, d), tbox: make([]Interval, d),
		grad: make([]Interval, d), cgb: make([]Interval, d), point: make([]Interval, d),
		x: make([]float64, d), g: make([]float64, d), cx: make([]float64, d), cg: make([]float64, d),
	}
	if d == 2 { // a singular point costs the length of its cell, not the square of that
		p.smallest, p.coarsest = 0x1p-46, 0x1p-38
	}
	first := []cell{{}}
	for i, b := range box {
		p.inside[i] = b
		p.whole[i] = b[1] - b[0]
		first = slabs(first, i, b, cuts)
	}
	for k := range systems {
		for _, c := range first {
			c.system = k
			p.push(&c)
		}
	}
	return p
}

// slabs extends cells in direction i over the range b, cut at the places given.
func slabs(cells []cell, i int, b [2]float64, cuts [][]float64) []cell {
	at := []float64{b[0], b[1]}
	if i < len(cuts) {
		for _, s := range cuts[i] {
			if b[0] < s && s < b[1] {
				at = append(at, s)
			}
		}
		slices.Sort(at)
		at = slices.Compact(at)
	}
	var out []cell
	for _, c := range cells {
		for k := 1; k < len(at); k++ {
			c.lo[i], c.hi[i] = at[k-1], at[k]
			out = append(out, c)
		}
	}
	return out
}

func (p *plan) push(c *cell) {
	c.size = 0
	for i := range p.dim {
		c.size = max(c.size, c.relative(p, i))
	}
	p.pending += c.area(p.dim)
	heap.Push(&p.queue, c)
}

// resum sums the areas in the queue anew.
func (p *plan) resum() {
	p.pending = 0
	for _, c := range p.queue {
		p.pending += c.area(p.dim)
	}
}

// run treats cells, the largest first, until none is left or the area that
// those left can hold is at most part of that of the bases found.
func (p *plan) run(ctx context.Context, part float64, budget int) error {
	for len(p.queue) > 0 {
		if p.cells%64 == 0 {
			if err := ctx.Err(); err != nil {
				return err
			}
		}
		if p.queue[0].size < 0x1p-8 && p.pending <= part*p.bases {
			// The running sum has lost digits where it became small.
			if p.resum(); p.pending <= part*p.bases {
				return nil
			}
		}
		if p.cells >= budget {
			return nil
		}
		c := heap.Pop(&p.queue).(*cell)
		p.pending = max(0, p.pending-c.area(p.dim))
		p.cells++
		v, err := p.treat(c)
		if err != nil {
			return err
		}
		if v == atom {
			p.atoms = append(p.atoms, c)
		}
		for ; p.shaped < len(p.sheets); p.shaped++ {
			s := p.sheets[p.shaped]
			s.scale = p.scale(c)
			for i := range s.seen {
				s.seen[i] = [2]float64{math.Inf(1), math.Inf(-1)}
			}
			s.seen[s.outer] = [2]float64{s.x0, s.x1}
			p.eval.shape(s)
			if !(s.share >= 0) {
				return fmt.Errorf("%w: the zero could not be found in the cell %s", ErrNotFinite, p.describe(c))
			}
			p.bases += s.share
		}
	}
	return nil
}

// scale is the size of the coordinates of a cell against its width.
func (p *plan) scale(c *cell) float64 {
	size, width := 0.0, 0.0
	for i := range p.dim {
		size = max(size, math.Abs(c.lo[i]), math.Abs(c.hi[i]))
		width = max(width, c.hi[i]-c.lo[i])
	}
	return max(1, size/width)
}

// undecided bounds the area in the cells left, taken to hold at most two
// sheets each, and returns the diameter of the largest and their number.
func (p *plan) undecided() (area, diameter float64, count int) {
	for _, list := range [2]cells{p.queue, p.atoms} {
		for _, c := range list {
			area += 2 * c.area(p.dim)
			sum := 0.0
			for i := range p.dim {
				sum += (c.hi[i] - c.lo[i]) * (c.hi[i] - c.lo[i])
			}
			diameter = max(diameter, math.Sqrt(sum))
			count++
		}
	}
	return area, diameter, count
}

func (p *plan) describe(c *cell) string {
	s := ""
	for i := range p.dim {
		if i > 0 {
			s += " × "
		}
		s += fmt.Sprintf("[%.6g, %.6g]", c.lo[i], c.hi[i])
	}
	return s
}

func (p *plan) identical(c *cell) error {
	return fmt.Errorf("%w: on %s", ErrIdentical, p.describe(c))
}

// cells is a heap, the largest cell first.
type cells []*cell

func (q cells) Len() int           { return len(q) }
func (q cells) Less(i, j int) bool { return q[i].size > q[j].size }
func (q cells) Swap(i, j int)      { q[i], q[j] = q[j], q[i] }
func (q *cells) Push(c any)        { *q = append(*q, c.(*cell)) }
func (q *cells) Pop() any {
	old := *q
	c := old[len(old)-1]
	*q = old[:len(old)-1]
	return c
}
