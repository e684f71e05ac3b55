package levelset

import (
	"cmp"
	"math"
	"slices"
)

// Component is a connected part of the surface: of the set of its points where
// the conditions hold strictly, so that parts that only touch, at a point or
// along a curve on which a condition vanishes, are different components.
type Component struct {
	// Value and Error are the integrals over it and estimates of their errors,
	// which include all that may have been left out anywhere.
	Value, Error    []float64
	Area, AreaError float64
	// Point is a point on it.
	Point []float64
	// Box contains the nodes on it and the bases of their rows; the component
	// may reach a little farther.
	Box [][2]float64
	// Graphs counts the graphs it was cut into.
	Graphs int
}

// see widens the range of the nodes.
func (s *sheet) see(x []float64) {
	for i, v := range x {
		s.seen[i][0], s.seen[i][1] = min(s.seen[i][0], v), max(s.seen[i][1], v)
	}
}

// components joins the sheets and sums up what belongs together; lost is the
// bound of what was left out.
func (d *driver) components(r *Result, lost []float64) {
	n := d.taken
	diagonal := norm(d.plan.whole[:d.plan.dim])
	r.Settled = r.Resolution <= 0x1p-38*diagonal
	if n == 0 {
		return
	}
	j := newJoiner(d.plan, d.sheets[:n])
	j.run()
	if j.count > 1 {
		r.Loose = j.loose
		r.Settled = r.Settled && j.loose == 0
	}
	if !r.Settled {
		j.fragments(r.UndecidedArea)
	}
	at := map[int]int{} // by root
	var best []float64
	for i, s := range d.sheets[:n] {
		root := j.root(i)
		k, ok := at[root]
		if !ok {
			k = len(r.Components)
			at[root] = k
			c := Component{Value: make([]float64, d.opt.Parts), Error: make([]float64, d.opt.Parts), Box: make([][2]float64, d.plan.dim)}
			for i := range c.Box {
				c.Box[i] = [2]float64{math.Inf(1), math.Inf(-1)}
			}
			r.Components, best = append(r.Components, c), append(best, -1)
		}
		c := &r.Components[k]
		c.Graphs++
		for i := range c.Box {
			c.Box[i][0], c.Box[i][1] = min(c.Box[i][0], s.seen[i][0]), max(c.Box[i][1], s.seen[i][1])
		}
		if s.share > best[k] {
			best[k] = s.share
			c.Point = d.middle(s)
		}
	}
	for _, list := range [2][]*leaf{d.heap, d.done} {
		for _, l := range list {
			c := &r.Components[at[j.root(l.number)]]
			for m, v := range l.value {
				e := l.estimate[m] + l.rounding(m) + 4*0x1p-52*l.size[m]
				if m == 0 {
					c.Area += v
					c.AreaError += e
				} else {
					c.Value[m-1] += v
					c.Error[m-1] += e
				}
			}
		}
	}
	for k := range r.Components {
		c := &r.Components[k]
		c.AreaError += lost[0]
		for m := range c.Error {
			c.Error[m] += lost[m+1]
		}
	}
	least := 0x1p-56
	for _, w := range d.plan.whole[1:d.plan.dim] {
		least *= w
	}
	r.Components = slices.DeleteFunc(r.Components, func(c Component) bool { return c.Area <= least })
	if len(r.Components) <= 1 && r.Resolution <= 0x1p-38*diagonal {
		r.Loose, r.Settled = 0, true
	}
	slices.SortStableFunc(r.Components, func(a, b Component) int {
		if math.Abs(a.Area-b.Area) > 1e-6*max(a.Area, b.Area) {
			return cmp.Compare(b.Area, a.Area)
		}
		for i := range a.Box {
			if o := cmp.Compare(a.Box[i][0], b.Box[i][0]); o != 0 {
				return o
			}
		}
		return 0
	})
}

// middle is a point well inside a sheet.
func (e *evaluator) middle(s *sheet) []float64 {
	x := s.x0 + (s.x1-s.x0)*0.4877
	e.x[s.outer] = x
	if s.inner >= 0 {
		a, b := e.inside(s, x)
		e.x[s.inner] = a + (b-a)*0.4877
	}
	e.point(s, s.lo[s.up]+(s.hi[s.up]-s.lo[s.up])/2)
	return slices.Clone(e.x)
}
