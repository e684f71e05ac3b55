package levelset

import "math"

// flatSize is the size of cells, relative to the box, down to which a sheet that
// is flat at an end of its base is refused.
const flatSize = 1.0 / 256

// flat reports whether the ratio of the areas of a sheet and of its base, or the
// inner range, grows towards an end of the base faster than the inverse root of
// the distance. The surface touches a line along the height there to a higher
// order than a curve with a curvature does: as x⁴ + y⁴ = 1 does at x = 0, where
// the ratio is like the distance to the power -3/4. No quadratic map makes that
// smooth, and the height is ill-conditioned. Smaller cells have other heights.
func (e *evaluator) flat(s *sheet) bool {
	w := s.x1 - s.x0
	mid := s.lo[s.up] + (s.hi[s.up]-s.lo[s.up])/2
	if s.inner < 0 {
		f := func(t float64) float64 {
			e.x[s.outer] = s.x0 + w*t
			return e.point(s, mid)
		}
		return steeper(f) || steeper(func(t float64) float64 { return f(1 - t) })
	}
	f := func(u, v float64) float64 {
		x := s.x0 + w*u
		a, b := e.inside(s, x)
		e.x[s.outer], e.x[s.inner] = x, a+(b-a)*v
		return e.point(s, mid)
	}
	slope := func(k int, end float64) func(t float64) float64 {
		return func(t float64) float64 {
			var p, q [2]float64
			p[0], p[1] = e.inside(s, s.x0+w*math.Abs(end-t))
			q[0], q[1] = e.inside(s, s.x0+w*math.Abs(end-2*t))
			height := s.hi[s.inner] - s.lo[s.inner]
			return 1 + math.Abs(p[k]-q[k])/(t*height)
		}
	}
	for end := range 2 {
		at := func(t float64) float64 { return math.Abs(float64(end) - t) }
		for _, v := range [2]float64{0.3, 0.8} {
			if steeper(func(t float64) float64 { return f(v, at(t)) }) || steeper(func(t float64) float64 { return f(at(t), v) }) {
				return true
			}
		}
		for k := range 2 {
			if steeper(slope(k, float64(end))) {
				return true
			}
		}
	}
	return false
}

// steeper reports whether a positive function of the distance grows faster than
// its power -0.6 over one of a few ranges of the distance.
func steeper(f func(t float64) float64) bool {
	const power, least = 0.6, 30
	before := f(0x1p-20)
	if !(before > least) {
		return false
	}
	for k := 17; k >= 5; k -= 3 {
		next := f(math.Ldexp(1, -k))
		if before > next*math.Exp2(3*power) {
			return true
		}
		before = next
	}
	return false
}
