package quadrature

import "math"

// patrols is the number of places looked at beside the nodes, and fewest the
// least on a piece.
const (
	patrols = 256
	fewest  = 16
)

// patrol looks at n places spread evenly over the piece (the multiples of powers
// of the generalised golden section, Roberts 2018): where the integrand is
// smooth the nodes are so few that a fault or a peak on a small part of the
// surface lies between them. It checks the traces, and that they are smooth, and
// returns by how much the density is beyond those at the nodes.
func (e *evaluator) patrol(n int) (beyond float64, err error) {
	step := [2]float64{golden}
	if e.p.n == 2 {
		step = [2]float64{0.7548776662466927, 0.5698402909980532}
	}
	for i := range n {
		var s [2]float64
		for j := range e.p.n {
			_, f := math.Modf(0.5 + float64(i+1)*step[j])
			s[j] = e.p.over[j].at(f)
		}
		if err := e.place(s); err != nil {
			return 0, err
		}
		if e.area == 0 {
			continue
		}
		jump := math.Inf(1)
		if e.tr.Plus != nil {
			var size float64
			jump, size, err = e.checkTraces()
			if err == nil && e.tr.HasValue {
				err = e.smooth(size)
			}
			if err != nil {
				return 0, err
			}
		}
		d, err := e.density(jump)
		if err != nil {
			return 0, err
		}
		beyond = math.Max(beyond, e.met.beyond(d))
	}
	return beyond, nil
}

// A span is an interval of numbers met.
type span struct {
	lo, hi float64
	some   bool
}

func (s *span) add(x float64) {
	if !s.some {
		s.lo, s.hi, s.some = x, x, true
	}
	s.lo, s.hi = math.Min(s.lo, x), math.Max(s.hi, x)
}

// beyond is the distance of x from the span, 0 where it is so small that a
// smooth function may come so far between its nodes.
func (s *span) beyond(x float64) float64 {
	margin := 0.25*(s.hi-s.lo) + 1e-6*math.Max(math.Abs(s.lo), math.Abs(s.hi))
	if over := math.Max(x-s.hi, s.lo-x); s.some && over > margin {
		return over
	}
	return 0
}
