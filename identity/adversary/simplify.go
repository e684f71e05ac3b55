package adversary

import (
	"math"
	"math/big"
)

// round checks roundings of x with growing denominators, then x itself.
func (t *trial) round(x []float64) []*big.Rat {
	r := make([]*big.Rat, len(x))
	approximations := make([][]*big.Rat, len(x))
	for i, v := range x {
		approximations[i] = convergents(v, 200)
	}
	for limit := int64(1); limit < 1<<50; limit *= 4 {
		changed := limit == 1
		for i := range x {
			q := within(approximations[i], limit)
			changed = changed || q.Cmp(r[i]) != 0
			r[i] = q
		}
		if !changed {
			continue
		}
		if t.verify(r) {
			return r
		}
		if limit <= 1<<12 {
			if w := t.polish(r); w != nil {
				return w
			}
		}
	}
	for i, v := range x {
		r[i] = new(big.Rat).SetFloat64(v)
	}
	if t.verify(r) {
		return r
	}
	return nil
}

// polish replaces single coordinates of x by their exact minimisers, last
// coordinate first, until the point is a witness.
func (t *trial) polish(x []*big.Rat) []*big.Rat {
	if t.p.Polish == nil {
		return nil
	}
	for i := len(x) - 1; i >= 0; i-- {
		if w := t.polishOne(x, i); w != nil {
			return w
		}
	}
	// Two coordinates in turn: where two conditions are tied.
	y := clone(x)
	for range 2 {
		for i := len(y) - 1; i >= 0; i-- {
			if t.ctx.Err() != nil {
				return nil
			}
			r, ok := t.p.Polish(y, i)
			if !ok || complexity(r) > 2000 {
				continue
			}
			y[i] = r
		}
	}
	if t.verify(y) {
		return y
	}
	return nil
}

func (t *trial) polishOne(x []*big.Rat, i int) []*big.Rat {
	r, ok := t.p.Polish(x, i)
	if !ok || r.Cmp(x[i]) == 0 {
		return nil
	}
	y := clone(x)
	y[i] = r
	if t.verify(y) {
		return y
	}
	return nil
}

// simplify replaces coordinates of the witness w by simpler ones as long as the
// exact check holds, with its own budget of checks.
func (t *trial) simplify(w []*big.Rat) []*big.Rat {
	t.limit = t.checks + t.o.Checks
	for changed := true; changed; {
		changed = false
		for i := range w {
			if y := t.simplifyAt(w, i); y != nil {
				w, changed = y, true
			}
		}
	}
	return t.positive(w)
}

// positive tries the witness with fewer negative signs: with all signs changed,
// and then with those of one or two coordinates.
func (t *trial) positive(w []*big.Rat) []*big.Rat {
	flip := func(w []*big.Rat, which ...int) []*big.Rat {
		y := clone(w)
		for _, i := range which {
			y[i].Neg(y[i])
		}
		if negatives(y) < negatives(w) && t.allWithin(y) && t.verify(y) {
			return y
		}
		return w
	}
	all := make([]int, len(w))
	for i := range all {
		all[i] = i
	}
	w = flip(w, all...)
	for i := range w {
		w = flip(w, i)
		for j := range i {
			w = flip(w, i, j)
		}
	}
	return w
}

func negatives(x []*big.Rat) int {
	n := 0
	for _, r := range x {
		if r.Sign() < 0 {
			n++
		}
	}
	return n
}

func (t *trial) allWithin(x []*big.Rat) bool {
	for i, r := range x {
		if v, _ := r.Float64(); !t.p.within(i, v) {
			return false
		}
	}
	return true
}

// simplifyAt returns a witness that is simpler in coordinate i, and simpler in
// all, or nil. With exact minimisation another coordinate may follow.
func (t *trial) simplifyAt(w []*big.Rat, i int) []*big.Rat {
	v, _ := w[i].Float64()
	var candidates []*big.Rat
	for _, g := range simple(v) {
		candidates = append(candidates, g...)
	}
	candidates = append(candidates, convergents(v, 40)...)
	if a := math.Abs(v); a >= 2 && a < 1e15 {
		for _, by := range []float64{1000, 10, 2} { // far out for no reason
			candidates = append(candidates, big.NewRat(int64(v/by), 1))
		}
	}
	limit := complexity(w[i])
	for _, c := range candidates {
		if complexity(c) >= limit {
			continue
		}
		if f, _ := c.Float64(); !t.p.within(i, f) {
			continue
		}
		y := clone(w)
		y[i] = c
		if t.verify(y) {
			return y
		}
		if t.p.Polish == nil {
			continue
		}
		for j := range y {
			if j == i {
				continue
			}
			z := t.polishOne(y, j)
			if z != nil && totalComplexity(z) < totalComplexity(w) {
				return z
			}
		}
	}
	return nil
}

func (p *Problem) within(i int, v float64) bool {
	lo, hi := p.bounds(i)
	return lo <= v && v <= hi
}
