package levelset

import "math"

// mostProbes bounds the places at which the density is asked for.
const mostProbes = 64

// probe takes for the largest density twice what it is at the centres of some
// of the cells left out, with the normal that phi has there; where it has no
// value at any of them nothing is known.
func (d *driver) probe() {
	list := append([]cell(nil), d.left...)
	for _, q := range [2]cells{d.queue, d.atoms} {
		for i, step := 0, 1+len(q)/mostProbes; i < len(q); i += step {
			list = append(list, *q[i])
		}
	}
	x, g, out := d.evaluator.x, d.evaluator.g, d.out[1:]
	peak := make([]float64, len(d.peak))
	found := false
	for i := range list {
		c := &list[i]
		for k := range x {
			x[k] = c.lo[k] + (c.hi[k]-c.lo[k])/2
		}
		d.plan.phi.Gradient(g, x)
		size := norm(g)
		if !(size > 0) || math.IsInf(size, 0) {
			continue
		}
		for k := range g {
			d.n[k] = g[k] / size
		}
		d.opt.Probe(x, d.n, out)
		fine := true
		for _, v := range out {
			fine = fine && !math.IsNaN(v) && !math.IsInf(v, 0)
		}
		if !fine {
			continue
		}
		found = true
		for k, v := range out {
			peak[k+1] = max(peak[k+1], 2*math.Abs(v))
		}
	}
	if !found {
		for k := range peak {
			peak[k] = math.Inf(1)
		}
	}
	peak[0] = 1
	copy(d.peak, peak)
}
