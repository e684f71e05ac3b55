package adaptive

import (
	"cmp"
	"math"
	"slices"

	"creaseproof/quadrature/rule"
)

// audit looks for what may hide between the outermost node of a panel and its
// end, where no rule sees it: a kink there leaves the panel as smooth as a
// polynomial. Neighbouring panels must extrapolate to the same value at their
// common end, and the extrapolation must meet the integrand next to the ends of
// the interval. A panel that fails is given the misfit over the gap as its
// estimate; audit reports whether there is work to do again.
func (b *bisection) audit() (again bool, err error) {
	all := append(slices.Clone(b.final), b.active...)
	slices.SortFunc(all, func(p, q *panel) int {
		x, _ := p.at((p.lo + p.hi) / 2)
		y, _ := q.at((q.lo + q.hi) / 2)
		return cmp.Compare(x, y)
	})
	miss := make([][Width]float64, len(all))
	for i, p := range all {
		if i > 0 {
			for c := range Width {
				l, okl := all[i-1].reaches(1, c)
				r, okr := p.reaches(0, c)
				if okl && okr {
					m := math.Abs(l - r)
					miss[i-1][c] += m * all[i-1].blind(1)
					miss[i][c] += m * p.blind(0)
				}
			}
		}
		for side, at := range [2]float64{b.t.Lo, b.t.Hi} {
			m, err := b.t.probeEnd(p, side, at)
			if err != nil {
				return false, err
			}
			for c := range Width {
				miss[i][c] += m[c] * p.gap
			}
		}
	}
	for i, p := range all {
		for c := range Width {
			if miss[i][c] <= p.est[c] {
				continue
			}
			p.est[c] = miss[i][c]
			if miss[i][c] > b.tolerance(c)/8 {
				p.decay[c] = 1
				p.doubted = true
			}
		}
	}
	b.active, b.final = b.active[:0], b.final[:0]
	for _, p := range all {
		b.put(p)
	}
	b.total()
	return !b.met(), nil
}

// reaches is the value of component c of the integrand extrapolated to the left
// (0) or right (1) end of a panel, where there is one.
func (p *panel) reaches(side, c int) (value float64, ok bool) {
	switch p.kind {
	case plain:
		return p.ends[side][c], true
	case squareLeft, squareRight:
		// At v = 0 the substitution is singular.
		k, v := p.inner(side)
		if v == 0 {
			return 0, false
		}
		_, ds := p.at(v)
		return p.ends[k][c] / ds, true
	case exponential:
		return p.ends[side][c], true
	}
	return 0, false
}

// inner is the end in v that belongs to the left (0) or right (1) end of a
// panel: for squareRight they are the other way round.
func (p *panel) inner(side int) (k int, v float64) {
	if p.kind == squareRight {
		side = 1 - side
	}
	if side == 1 {
		return 1, p.hi
	}
	return 0, p.lo
}

// blind is the distance of the left (0) or right (1) end of a panel from the
// node next to it.
func (p *panel) blind(side int) float64 {
	_, v := p.inner(side)
	_, ds := p.at(v)
	return p.gap * ds
}

// probeEnd compares the integrand with the extrapolation of a panel next to an
// end of the interval.
func (t *Task) probeEnd(p *panel, side int, end float64) (miss [Width]float64, err error) {
	if p.kind != plain || p.probed[side] || side == 0 && p.lo != end || side == 1 && p.hi != end {
		return miss, nil
	}
	p.probed[side] = true
	d := p.gap / rule.NearFraction
	if side == 1 {
		d = -d
	}
	if math.Abs(d) <= 16*epsilon*math.Max(math.Abs(t.Lo), math.Abs(t.Hi)) {
		return miss, nil // it cannot be told from the end
	}
	var q Sample
	if err := t.F(end+d, &q); err != nil {
		return miss, err
	}
	for c := range Width {
		if m := math.Abs(q.Value[c] - p.near[side][c]); m > q.Noise[c] {
			miss[c] = m
		}
	}
	return miss, nil
}
