package adversary

import (
	"math/big"
	"slices"
)

// snapper holds the state of a snapping: the coordinates set so far, and a point
// that has them and is optimal in the others.
type snapper struct {
	*trial
	x      []float64
	fixed  []*big.Rat // nil where free
	accept float64    // margins up to this are kept
}

// snap sets one coordinate after the other to a simple rational, optimising the
// others again each time, and checks the rational point reached. The order
// decides which coordinates come out simple and which are tied to them; where
// the first order leaves long rationals the opposite one is tried as well.
func (t *trial) snap(x []float64, margin float64) []*big.Rat {
	accept := margin / 10
	groups := []int{0, 1, 2, 3}
	if margin > -noise {
		// The sign is unknown: stay within rounding of the equality set, and do
		// not look for points with zeros, where equality is often trivial.
		accept = noise
		groups = []int{1, 2, 3}
	}
	order := make([]int, len(x))
	for i := range order {
		order[i] = i
	}
	w := t.snapInOrder(x, accept, groups, order)
	if w != nil && totalComplexity(w) <= 6*len(w) || len(x) == 1 {
		return w
	}
	slices.Reverse(order)
	if r := t.snapInOrder(x, accept, groups, order); w == nil || r != nil && totalComplexity(r) < totalComplexity(w) {
		return r
	}
	return w
}

func (t *trial) snapInOrder(x []float64, accept float64, groups, order []int) []*big.Rat {
	s := &snapper{trial: t, x: slices.Clone(x), fixed: make([]*big.Rat, len(x)), accept: accept}
	left := len(x)
	for _, g := range groups {
		for _, i := range order {
			if s.fixed[i] != nil || left == 1 || t.ctx.Err() != nil {
				continue
			}
			if c := simple(s.x[i]); g < len(c) && s.fix(i, c[g]) {
				left--
			}
		}
	}
	// What is left is tied to the others: approximate it as well as needed. For
	// the last one the exact check itself decides.
	for _, i := range order {
		switch {
		case s.fixed[i] != nil:
		case left == 1:
			return s.last(i)
		case s.fix(i, convergents(s.x[i], 60)):
			left--
		default:
			return nil
		}
	}
	return nil
}

// last looks for the value of coordinate i when all others are set.
func (s *snapper) last(i int) []*big.Rat {
	var candidates []*big.Rat
	for _, g := range simple(s.x[i]) {
		candidates = append(candidates, g...)
	}
	for _, c := range append(candidates, convergents(s.x[i], 60)...) {
		if v, _ := c.Float64(); !s.p.within(i, v) {
			continue
		}
		s.fixed[i] = c
		if s.verify(s.fixed) {
			return s.fixed
		}
	}
	return s.polish(s.fixed)
}

// fix sets coordinate i to the first candidate that leaves an acceptable
// margin.
func (s *snapper) fix(i int, candidates []*big.Rat) bool {
	var free []int
	first := true
	for j, r := range s.fixed {
		if j != i && r == nil {
			free = append(free, j)
		}
		first = first && r == nil
	}
	for _, c := range candidates {
		if s.ctx.Err() != nil {
			return false
		}
		v, _ := c.Float64()
		if !s.p.within(i, v) {
			continue
		}
		x := slices.Clone(s.x)
		x[i] = v
		if s.try(x, free) {
			s.fixed[i] = c
			return true
		}
		// Many problems are homogeneous: move along the ray as well.
		if first && v != 0 && s.x[i] != 0 {
			ray := slices.Clone(s.x)
			for j := range ray {
				ray[j] *= v / s.x[i]
			}
			ray[i] = v
			if s.try(ray, free) {
				s.fixed[i] = c
				return true
			}
		}
	}
	return false
}

// try optimises the free coordinates from x and takes the point if its margin
// is acceptable. The margin defined as 0 at the zero point is no progress.
func (s *snapper) try(x []float64, free []int) bool {
	v := newView(&s.objective, x, free, true)
	y := v.variables()
	f, n := newton(v, y, 12)
	s.iterations += n
	x = v.set(y)
	zero := !slices.ContainsFunc(x, func(c float64) bool { return c != 0 })
	if f > s.accept || zero {
		return false
	}
	s.x = slices.Clone(x)
	return true
}
