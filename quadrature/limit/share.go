package limit

import "math"

const (
	// reachOfShare is the difference of two branches, in units of eps, over
	// which a share fades away from the crease; farAway times that is where
	// nothing is left of it.
	reachOfShare = 6
	farAway      = 11
	// rest is a weight that the direction chosen first has everywhere; those
	// of the crease are of the order of 1.
	rest = 1e-9
	// parallel is the square of the sine of an angle that is rounding.
	parallel = 1e-24
)

// reference finds the square of a jump along a fibre, over a range of its
// parameter, that the shares are scaled by, the greatest on a few fibres; and
// whether the first direction is normal to all that these fibres meet.
func (w *walk) reference() {
	w.ref, w.plain = 0, true
	for k := range w.n {
		w.probe(k, func() {
			w.crossAlong(k)
			lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
			for _, c := range w.cuts {
				if math.Min(c.s-lo, hi-c.s) < 1e-9*(hi-lo) {
					continue // an axis, where all branches may agree
				}
				w.s[k] = c.s
				w.move()
				w.p.Jets(w.x, w.jets)
				var own, other float64
				for j := range w.n {
					d := w.along(j, &w.jets[c.after]) - w.along(j, &w.jets[c.before])
					w.ref = math.Max(w.ref, d*d)
					if j == w.first {
						own = d * d
					} else {
						other += d * d
					}
				}
				if !(other <= parallel*own) {
					w.plain = false
				}
			}
		})
	}
	if w.ref == 0 || math.IsInf(w.ref, 0) {
		w.ref = 1
	}
}

// along is the derivative by parameter j, over its range, of a function with
// the given jet at the current position.
func (w *walk) along(j int, f *Jet) float64 {
	size := w.p.Domain.Hi[j] - w.p.Domain.Lo[j]
	if w.p.Domain.Map == nil {
		return f.P[j] * size
	}
	var d float64
	for i, p := range f.P {
		d += p * w.jac[j][i]
	}
	return d * size
}

// bump vanishes at both ends of the range of parameter j and is 1 in the middle.
func (w *walk) bump(j int) float64 {
	lo, hi := w.p.Domain.Lo[j], w.p.Domain.Hi[j]
	t := (w.s[j] - lo) / (hi - lo)
	return 4 * t * (1 - t)
}

// share is the part of the fibres along parameter k in what is integrated at
// the current position, where the jets are those of the branches.
func (w *walk) share(k int) float64 {
	n := w.p.Branches
	for i := range n {
		w.v[i] = w.jets[i].U
	}
	u := w.v[w.p.active(w.v)]
	for i := range n {
		t := (w.jets[i].U - u) / (reachOfShare * w.eps)
		w.near[i] = math.Exp(1 - math.Sqrt(1+t*t)) // NaN stays
		if !(w.near[i] >= 0) {
			w.near[i] = 0
		}
	}
	clear(w.parts)
	for i := range n {
		if w.near[i] == 0 {
			continue
		}
		for m := range i {
			if f := w.near[i] * w.near[m]; f > 0 {
				for j := range w.parts {
					d := w.along(j, &w.jets[i]) - w.along(j, &w.jets[m])
					w.parts[j] += f * d * d
				}
			}
		}
	}
	return w.portion(k)
}

// shareOfJump is the same for a jump of the sharp function.
func (w *walk) shareOfJump(k int, c crossing) float64 {
	if w.plain {
		return 1
	}
	for j := range w.parts {
		d := w.along(j, &w.jets[c.after]) - w.along(j, &w.jets[c.before])
		w.parts[j] = d * d
	}
	return w.portion(k)
}

// portion is the part of direction k for squares of jumps in all directions.
func (w *walk) portion(k int) float64 {
	var all, own, inside, sum float64
	for j, v := range w.parts {
		b := w.bump(j)
		x := b * v / w.ref
		x *= x * x
		if j == k {
			own = x
		}
		all += x
		inside += b * b * b * v
		sum += v
	}
	if !(inside > 1e-250) {
		if k == w.first {
			return 1
		}
		return 0
	}
	var base float64
	if !w.sharp { // else what is parallel to the first direction would be lost
		base = rest * (inside / sum)
	}
	if k == w.first {
		own += base
	}
	return own / (all + base)
}
