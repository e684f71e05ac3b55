package levelset

import "math"

// solve finds the zero of f along coordinate k between lo and hi, where f is
// monotone, and leaves it in x[k]. Where f has no zero there x[k] becomes the
// end nearer to it. It is Newton's method kept inside a bracket; g is scratch.
func solve(f Function, x []float64, k int, lo, hi, guess float64, rising bool, g []float64) {
	first, last := lo, hi
	t := min(max(guess, lo), hi)
	before := math.Inf(1)
	holes, doubts := 0, 0
	for range 200 {
		x[k] = t
		v := f.Value(x)
		if v != v && holes < 3 { // a removable singularity
			holes++
			t = lo + (0.5+0.03*float64(holes))*(hi-lo)
			continue
		}
		if v == 0 || v != v {
			return
		}
		if (v < 0) == rising {
			if t == last {
				return
			}
			lo = t
		} else {
			if t == first {
				return
			}
			hi = t
		}
		if hi-lo <= ulp(t) {
			return
		}
		f.Gradient(g, x)
		step := v / g[k]
		next := t - step
		size := math.Abs(step)
		switch {
		case next >= hi && hi == last && t != last:
			next, size = last, math.Inf(1)
		case next <= lo && lo == first && t != first:
			next, size = first, math.Inf(1)
		case !(next > lo && next < hi) || size > before/2:
			if size <= ulp(t) {
				return
			}
			next, size = lo+(hi-lo)/2, math.Inf(1)
		case size <= ulp(t) || !math.IsInf(before, 1) && size*size*size <= before*before*ulp(t)/8:
			// Quadratic convergence: the step after this one would be
			// size³/before², less than rounding. Next to a kink it is not.
			x[k] = next
			if doubts++; doubts > 4 || !(math.Abs(f.Value(x)/g[k]) > 64*ulp(t)) {
				return
			}
		}
		before = size
		t = next
	}
}

// ulp is about two units in the last place of t.
func ulp(t float64) float64 { return 0x1p-52*math.Abs(t) + 0x1p-1000 }

// crossing finds a zero of u between a and b, where it has the values ua and
// ub of opposite signs, by the Illinois method, and by bisection where that is
// slow, as at a triple zero.
func crossing(u func(float64) float64, a, b, ua, ub float64) float64 {
	side := 0
	for i := range 200 {
		t := (a*ub - b*ua) / (ub - ua)
		if i%8 == 7 || i >= 40 || !(t > min(a, b) && t < max(a, b)) {
			t = a + (b-a)/2
		}
		ut := u(t)
		if ut == 0 || math.Abs(b-a) <= 2*ulp(max(math.Abs(a), math.Abs(b))) {
			return t
		}
		if (ut > 0) == (ub > 0) {
			b, ub = t, ut
			if side == 1 {
				ua /= 2
			}
			side = 1
		} else {
			a, ua = t, ut
			if side == -1 {
				ub /= 2
			}
			side = -1
		}
	}
	return a + (b-a)/2
}

// isolation finds all zeros of functions of one variable.
type isolation struct {
	whole  float64 // length of the interval
	left   int     // evaluations of ranges allowed
	points []float64
}

// zeros appends every zero of f in [lo, hi] to the points. Where intervals
// cannot separate zeros the two ends of a tiny interval are appended. It
// reports false when the work allowed did not suffice.
func (s *isolation) zeros(f Function, lo, hi float64) bool {
	if s.left--; s.left < 0 {
		return false
	}
	var box, g [1]Interval
	box[0] = span(lo, hi)
	r := f.Range(box[:])
	if certain(r) || r.IsEmpty() {
		return true
	}
	f.GradientRange(g[:], box[:])
	if certain(g[0]) {
		s.bracketed(f, lo, hi)
		return true
	}
	if hi-lo <= 1e-12*s.whole || hi-lo <= 8*ulp(max(math.Abs(lo), math.Abs(hi))) {
		s.points = append(s.points, lo, hi)
		return true
	}
	m := lo + offCentre*(hi-lo)
	c := span(m, m)
	box[0] = c
	if certain(f.Range(box[:]).Add(g[0].Mul(span(lo, hi).Sub(c)))) {
		return true
	}
	return s.zeros(f, lo, m) && s.zeros(f, m, hi)
}

// bracketed appends the zero of f in [lo, hi] if its values at the ends have
// different signs.
func (s *isolation) bracketed(f Function, lo, hi float64) {
	var x [1]float64
	u := func(t float64) float64 {
		x[0] = t
		return f.Value(x[:])
	}
	a, b := u(lo), u(hi)
	switch {
	case a == 0:
		s.points = append(s.points, lo)
	case b == 0:
		s.points = append(s.points, hi)
	case (a < 0) != (b < 0):
		s.points = append(s.points, crossing(u, lo, hi, a, b))
	}
}

// sampled appends the zeros of f that show between 64 places.
func (s *isolation) sampled(f Function, lo, hi float64) {
	const n = 64
	for i := range n {
		s.bracketed(f, lo+(hi-lo)*float64(i)/n, lo+(hi-lo)*float64(i+1)/n)
	}
}

// offCentre is where intervals are cut, so that surfaces placed
// symmetrically do not lie on cuts.
const offCentre = 0.4877
