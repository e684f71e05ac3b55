package quadrature

import "math"

// sample are the places, in fractions of the range, at which a piece is looked
// at before it is integrated. They have no symmetry.
var sample = [...]float64{0.0947, 0.2743, 0.4871, 0.6829, 0.9131}

// A shape is what is known of a piece beforehand.
type shape struct {
	*piece
	periodic  [2]bool
	outer     int // direction of the outer integral
	panels    int // to begin with in each direction; 0: no more than needed
	low, high [3]float64
	// degenerate is set if the area element is zero wherever it was looked at.
	degenerate *PlaceError
}

// shaky is the number of units in the last place that the rounding of
// positions costs, relative to the extent of the piece.
func (s *shape) shaky() float64 {
	var far, extent float64
	for k := range s.dim {
		far = math.Max(far, math.Max(math.Abs(s.low[k]), math.Abs(s.high[k])))
		extent = math.Max(extent, s.high[k]-s.low[k])
	}
	if extent == 0 {
		return 1
	}
	return 1 + far/extent
}

// ends is the number of units in the last place that the rounding of the ends
// of the parameters and of vertices costs, relative to the area, beyond the
// unavoidable.
func (s *shape) ends() float64 {
	sum := s.vertices
	for j := range s.n {
		r := s.over[j]
		sum += math.Max(0, math.Max(math.Abs(r.Lo), math.Abs(r.Hi))/(r.Hi-r.Lo)-1)
	}
	return sum
}

// survey looks at a piece at a few places: its extent, whether it is finite,
// whether it is degenerate, and which parameters are periodic.
func survey(p *piece) (*shape, error) {
	sh := &shape{piece: p}
	e := &evaluator{p: p, s: make([]float64, p.n)}
	e.allocate()
	m := len(sample)
	if p.n == 2 {
		m *= len(sample)
	}
	for k := range p.dim {
		sh.low[k], sh.high[k] = math.Inf(1), math.Inf(-1)
	}
	zero := 0
	var bad *PlaceError
	for i := range m {
		var s [2]float64
		for j := range p.n {
			s[j] = p.over[j].at(sample[i%len(sample)])
			i /= len(sample)
		}
		if err := e.place(s); err != nil {
			return nil, err
		}
		for k, v := range e.x {
			sh.low[k], sh.high[k] = math.Min(sh.low[k], v), math.Max(sh.high[k], v)
		}
		if e.area == 0 {
			zero++
			bad = e.fail(Degenerate, "surface", 0, 0)
		}
	}
	if zero == m && p.normal == nil {
		sh.degenerate = bad
	}
	for j := range p.n {
		per, err := e.periodic(j, norm(sh.low[:p.dim])+norm(sh.high[:p.dim]))
		if err != nil {
			return nil, err
		}
		sh.periodic[j] = per
	}
	if p.n == 2 && sh.periodic[0] && !sh.periodic[1] {
		sh.outer = 1
	}
	return sh, nil
}

func (r Range) at(frac float64) float64 { return r.Lo + frac*(r.Hi-r.Lo) }

// periodic reports whether position and tangents agree at the two ends of
// parameter j, for every sample of the other parameter.
func (e *evaluator) periodic(j int, size float64) (bool, error) {
	x := make([]float64, e.p.dim)
	jac := [][]float64{make([]float64, e.p.dim), make([]float64, e.p.dim)}
	moved := false
	for _, f := range sample {
		var s [2]float64
		s[1-j] = e.p.over[1-j].at(f)
		s[j] = e.p.over[j].Lo
		if !e.tryMap(s) {
			return false, nil
		}
		copy(x, e.x)
		for k := range e.jac {
			copy(jac[k], e.jac[k])
		}
		s[j] = e.p.over[j].Hi
		if !e.tryMap(s) {
			return false, nil
		}
		for k := range x {
			if math.Abs(x[k]-e.x[k]) > 1e-12*size {
				return false, nil
			}
		}
		for i := range e.jac {
			n := norm(jac[i]) + norm(e.jac[i])
			moved = moved || i == j && n > 0
			for k := range x {
				if math.Abs(jac[i][k]-e.jac[i][k]) > 1e-9*n {
					return false, nil
				}
			}
		}
	}
	return moved, nil
}
