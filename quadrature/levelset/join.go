package levelset

import "math"

// A joiner finds out which sheets are parts of one component. It looks at
// points on the edges of sheets; a sheet to whose cell such a point belongs, or
// is next to across a thin slab, contains it, since there is one graph in a
// cell, whose parts do not overlap. It belongs to both if no condition vanishes
// there.
type joiner struct {
	*plan
	list   []*sheet
	parent []int
	count  int // components
	loose  int
	index  *index
	near   [3]float64 // how far a sheet on the other side of a slab may be
	n, h   []float64  // normal, scratch
	hits   []int
	seen   []bool // an edge of the sheet was looked at
	open   []bool // and nothing found beyond it
}

func newJoiner(p *plan, list []*sheet) *joiner {
	j := &joiner{plan: p, list: list, parent: make([]int, len(list)), count: len(list),
		seen: make([]bool, len(list)), open: make([]bool, len(list)), n: make([]float64, p.dim), h: make([]float64, p.dim)}
	for i, s := range list {
		s.number = i
		j.parent[i] = i
	}
	for i := range p.dim {
		b := p.inside[i]
		j.near[i] = 0x1p-42*p.whole[i] + 64*ulp(max(math.Abs(b[0]), math.Abs(b[1])))
	}
	return j
}

// places are where edges are looked at, round after round, as long as there is
// more than one component: sheets may have a small part of an edge in common,
// which then is at the end of one.
var places = [][]float64{{0.4877}, {1e-3, 1 - 1e-3}, {1e-6, 1 - 1e-6}, {0.24, 0.77}}

func (j *joiner) run() {
	for _, round := range places {
		if j.count == 1 {
			return
		}
		if j.index == nil {
			j.index = newIndex(j.list, j.dim)
		}
		for i, s := range j.list {
			for _, t := range round {
				j.edges(i, s, t)
				if j.count == 1 {
					return
				}
			}
		}
	}
	j.slivers()
}

// root is the representative of the component of a sheet.
func (j *joiner) root(i int) int {
	for j.parent[i] != i {
		j.parent[i] = j.parent[j.parent[i]]
		i = j.parent[i]
	}
	return i
}

func (j *joiner) union(a, b int) {
	a, b = j.root(a), j.root(b)
	if a != b {
		j.parent[max(a, b)] = min(a, b)
		j.count--
	}
}

// shortest is the length of edges too short to be looked at: where the surface
// is parallel to the height, ends of edges are off by the root of rounding.
func (j *joiner) shortest(s *sheet) float64 {
	return min(0x1p-24*j.whole[s.inner], (s.hi[s.inner]-s.lo[s.inner])/16)
}

// slivers puts sheets without area, none of whose edges is long enough to be
// looked at, to a neighbour in the same cell.
func (j *joiner) slivers() {
	for i, s := range j.list {
		if s.inner < 0 || j.seen[i] || s.share > 0x1p-40*j.whole[s.inner]*j.whole[s.outer] {
			continue
		}
		for _, k := range [2]int{i - 1, i + 1} {
			if k >= 0 && k < len(j.list) {
				if o := j.list[k]; o.lo == s.lo && o.hi == s.hi && o.system == s.system && o.up == s.up && (o.x1 == s.x0 || o.x0 == s.x1) {
					j.union(i, k)
					break
				}
			}
		}
	}
}

// fragments puts components next to undecided cells that are smaller than what
// these can hold, by the areas of their bases, to the nearest that is larger. Of
// tiny ones the edges are too short to tell what is next to them.
func (j *joiner) fragments(area float64) {
	tiny := 0x1p-34
	for _, w := range j.whole[1:j.dim] {
		tiny *= w
	}
	size, open := map[int]float64{}, map[int]bool{}
	for i, s := range j.list {
		r := j.root(i)
		size[r] += s.share
		open[r] = open[r] || j.open[i] || !j.seen[i]
	}
	fragment := func(r int) bool { return size[r] <= area && (open[r] || size[r] <= tiny) }
	var large []int
	for i := range j.list {
		if !fragment(j.root(i)) {
			large = append(large, i)
		}
	}
	for i := range j.list {
		if r := j.root(i); i != r || !fragment(r) {
			continue
		}
		best, nearest := -1, math.Inf(1)
		for _, k := range large {
			if d := j.distance(i, k); d < nearest {
				best, nearest = k, d
			}
		}
		if best >= 0 {
			j.union(i, best)
		}
	}
}

// distance is that of the boxes of the nodes of two sheets.
func (j *joiner) distance(a, b int) float64 {
	s, o := j.list[a], j.list[b]
	sum := 0.0
	for k := range j.dim {
		d := max(0, s.seen[k][0]-o.seen[k][1], o.seen[k][0]-s.seen[k][1])
		sum += d * d
	}
	return sum
}

// edges looks at one place on each edge of a sheet, t of its length.
func (j *joiner) edges(i int, s *sheet, t float64) {
	e := j.eval
	mid := s.lo[s.up] + (s.hi[s.up]-s.lo[s.up])/2
	length := math.Inf(1)
	for _, x := range [2]float64{s.x0, s.x1} {
		e.x[s.outer] = x
		if s.inner >= 0 {
			a, b := e.inside(s, x)
			if length = b - a; length < j.shortest(s) {
				continue
			}
			e.x[s.inner] = a + t*(b-a)
		}
		e.point(s, mid)
		if s.inner < 0 {
			j.snap(s)
		}
		j.visit(i, s, length)
	}
	if s.inner < 0 {
		return
	}
	for _, upper := range [2]bool{false, true} {
		x := s.x0 + t*(s.x1-s.x0)
		a, b := e.inside(s, x)
		if b-a < j.shortest(s) {
			continue
		}
		d := s.low
		e.x[s.outer], e.x[s.inner] = x, a
		if upper {
			d = s.high
			e.x[s.inner] = b
		}
		e.point(s, mid)
		if d.f != nil {
			j.snap(s)
		}
		j.visit(i, s, b-a)
	}
}

// snap puts the point in j.eval.x onto a face across the height where it is on
// that face. Where the surface is parallel to the height there, the height found
// is off by as much as the root of rounding.
func (j *joiner) snap(s *sheet) {
	x, g := j.eval.x, j.eval.g
	was := x[s.up]
	for _, at := range [2]float64{s.lo[s.up], s.hi[s.up]} {
		x[s.up] = at
		j.phi.Gradient(g, x)
		if math.Abs(j.phi.Value(x)) <= j.near[s.up]*norm(g) {
			return
		}
	}
	x[s.up] = was
	j.phi.Gradient(g, x)
}

// sign tells whether f is positive at a point, 1, negative, or zero within
// rounding and the width of slabs; h gets its gradient.
func (j *joiner) sign(f Function, x []float64) int {
	v := f.Value(x)
	f.Gradient(j.h, x)
	far := 0.0
	for _, w := range j.whole[:j.dim] {
		far = max(far, w)
	}
	switch tiny := 0x1p-38 * far * norm(j.h); {
	case v > tiny:
		return 1
	case v < -tiny || v != v:
		return -1
	}
	return 0
}

// border returns the one condition of a system that vanishes at a point, -1 if
// none does, and reports whether all others are positive there.
func (j *joiner) border(system int, x []float64) (zero int, ok bool) {
	zero = -1
	for k, f := range j.systems[system] {
		switch s := j.sign(f, x); {
		case s < 0, s == 0 && zero >= 0:
			return 0, false
		case s == 0:
			zero = k
		}
	}
	return zero, true
}

// opposite reports whether two conditions are minus each other near a point.
func (j *joiner) opposite(f, g Function, x []float64) bool {
	a, b := make([]float64, j.dim), make([]float64, j.dim)
	f.Gradient(a, x)
	g.Gradient(b, x)
	size := norm(a) + norm(b)
	for i := range a {
		a[i] += b[i]
	}
	return norm(a) <= 1e-9*size
}

// visit joins sheet i, which the point in j.eval.x is at the edge of, with the
// sheets on the other side. The sheet is of that width there.
func (j *joiner) visit(i int, s *sheet, width float64) {
	x := j.eval.x
	j.seen[i] = true
	s.see(x)
	if !(math.Abs(norm(j.eval.g)) > 0) {
		return
	}
	copy(j.n, j.eval.g)
	zero, ok := j.border(s.system, x)
	if !ok || zero >= 0 && len(j.systems) == 1 {
		return
	}
	inner := zero < 0 && (s.inner < 0 || width > 4*j.shortest(s))
	for k := range j.dim {
		b := j.inside[k]
		inner = inner && x[k]-b[0] > j.near[k] && b[1]-x[k] > j.near[k]
	}
	found := false
	j.hits = j.index.find(x, j.near, j.hits[:0])
	for _, k := range j.hits {
		o := j.list[k]
		if k == i || (o.system == s.system) != (zero < 0) || !j.beside(o, x) {
			continue
		}
		if j.root(k) == j.root(i) {
			found = true
			continue
		}
		if zero >= 0 {
			z, ok := j.border(o.system, x)
			if !ok || z < 0 || !j.opposite(j.systems[s.system][zero], j.systems[o.system][z], x) {
				continue
			}
		}
		found = true
		j.union(i, k)
	}
	if !found && inner {
		j.loose++
		j.open[i] = true
	}
}

// beside reports whether a point of the surface belongs to a sheet, or is next
// to it across one thin slab, which the surface crosses at an angle.
func (j *joiner) beside(s *sheet, x []float64) bool {
	t := x[s.outer]
	if !(t >= s.x0-j.near[s.outer] && t <= s.x1+j.near[s.outer]) {
		return false
	}
	across := -1
	for k := range j.dim {
		d := max(s.lo[k]-x[k], x[k]-s.hi[k])
		if d <= 16*ulp(x[k]) {
			continue
		}
		if d > j.near[k] || across >= 0 {
			return false
		}
		across = k
	}
	if across < 0 {
		return true
	}
	along := 0.0
	for k, v := range j.n {
		if k != across {
			along += v * v
		}
	}
	return math.Sqrt(along) >= 0x1p-10*norm(j.n)
}
