package levelset

import "math"

// mostProbes and mostLeft bound the places at which the density is asked for: in
// undecided cells and in thin ones.
const (
	mostProbes = 1 << 17
	mostLeft   = 64
)

// lost bounds for each component what the undecided cells can hold, and what
// the thin ones left out can: twice the
// density near the centre of an undecided cell, with the normal that phi has there,
// times the area that the cell can hold. Where there is no such value, and in
// the thin cells, it is the largest density met; where no node was found, the
// largest of these. In thin cells a density that is large on a small part of the
// surface counts by how much of a slab may lie there, see layers.
func (d *driver) lost() (sum, thin []float64) {
	sum, thin = make([]float64, d.parts), make([]float64, d.parts)
	top := make([]float64, d.parts)
	rest, seen := 0.0, 0
	for _, list := range [2]cells{d.queue, d.atoms} {
		step := 1 + len(list)/mostProbes
		for i, c := range list {
			if i%step != 0 || !d.probe(c) {
				rest += 2 * c.area(d.plan.dim)
				continue
			}
			seen++
			for k, v := range d.out {
				sum[k] += 2 * c.area(d.plan.dim) * v
				top[k] = max(top[k], v)
			}
		}
	}
	if d.nodes == 0 {
		for i := range d.left {
			if d.probe(&d.left[i]) {
				seen++
				for k, v := range d.out {
					top[k] = max(top[k], v)
				}
			}
		}
	}
	for k := range sum {
		peak := max(d.peak[k], top[k])
		if d.nodes == 0 && seen == 0 && k > 0 {
			peak = math.Inf(1) // nothing is known of the density
		}
		if d.nodes == 0 && k == 0 {
			peak = 1
		}
		if rest > 0 {
			sum[k] += rest * peak
		}
		if d.skipped > 0 {
			thin[k] = d.skipped * peak
			if d.nodes > 0 {
				thin[k] = d.skipped * min(peak, d.layers[k].mean())
			}
		}
	}
	return sum, thin
}

// probe puts twice the size of the density near the centre of a cell into d.out,
// and 1 for the area. It reports false where there is none.
func (d *driver) probe(c *cell) bool {
	x, g := d.evaluator.x, d.evaluator.g
	for k := range x {
		x[k] = c.lo[k] + offCentre*(c.hi[k]-c.lo[k])
	}
	d.plan.phi.Gradient(g, x)
	size := norm(g)
	if !(size > 0) || math.IsInf(size, 0) {
		return false
	}
	for k := range g {
		d.n[k] = g[k] / size
	}
	d.out[0] = 1
	d.opt.Probe(x, d.n, d.out[1:])
	for k, v := range d.out[1:] {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
		d.out[k+1] = 2 * math.Abs(v)
	}
	return true
}
