package levelset

// A Function is a differentiable function of two or three variables together
// with enclosures. Value and Gradient are ordinary floating point.
//
// Range must contain every value that the function takes on the box, at the
// points where it is defined; it is empty only if there are none.
// GradientRange must contain every value of each partial derivative on the box;
// unless the function is certainly defined and continuously differentiable at
// every point of the box, it must give the whole line for each. Both are asked
// for boxes that are reduced to a point in some directions, too.
//
// The methods must not keep the slices. They are called from one goroutine.
type Function interface {
	Value(x []float64) float64
	Gradient(g, x []float64)
	Range(box []Interval) Interval
	GradientRange(g, box []Interval)
}

// face is the restriction of f to the plane where coordinate k is at, times
// sign: a function of one variable less.
type face struct {
	f      Function
	k      int
	at     float64
	sign   float64
	x, g   []float64
	xb, gb []Interval
}

func newFace(f Function, dim, k int, at, sign float64) *face {
	return &face{f, k, at, sign, make([]float64, dim), make([]float64, dim), make([]Interval, dim), make([]Interval, dim)}
}

// insert copies x to full, leaving out coordinate k.
func insert[T any](full, x []T, k int) {
	copy(full[:k], x[:k])
	copy(full[k+1:], x[k:])
}

func (s *face) Value(x []float64) float64 {
	insert(s.x, x, s.k)
	s.x[s.k] = s.at
	return s.sign * s.f.Value(s.x)
}

func (s *face) Gradient(g, x []float64) {
	insert(s.x, x, s.k)
	s.x[s.k] = s.at
	s.f.Gradient(s.g, s.x)
	for i := range g {
		g[i] = s.sign * s.g[skip(i, s.k)]
	}
}

func (s *face) Range(box []Interval) Interval {
	insert(s.xb, box, s.k)
	s.xb[s.k] = span(s.at, s.at)
	return signed(s.f.Range(s.xb), s.sign)
}

func (s *face) GradientRange(g, box []Interval) {
	insert(s.xb, box, s.k)
	s.xb[s.k] = span(s.at, s.at)
	s.f.GradientRange(s.gb, s.xb)
	for i := range g {
		g[i] = signed(s.gb[skip(i, s.k)], s.sign)
	}
}

// skip is the index among all coordinates of the i-th one that is not k.
func skip(i, k int) int {
	if i >= k {
		return i + 1
	}
	return i
}

// trace is the restriction of psi to the graph {phi = 0} over the coordinates
// but k, a function of one variable less. The derivative of phi by coordinate
// k has a fixed sign for coordinate k in [lo, hi]. Outside the part of the
// base over which the graph lies in [lo, hi] values are those at the nearer
// end, and the enclosures need not hold.
type trace struct {
	psi, phi Function
	k        int
	lo, hi   float64
	rising   bool
	// condition is the number of psi in its system, where it is one.
	condition int
	// bracket, if not nil, bounds coordinate k of the graph more closely.
	bracket func(x []float64) (lo, hi float64)
	// between, if not nil, encloses the two ends of the range of coordinate k in
	// which phi has the derivative that it says and the graph lies, for all x in
	// the base box. It has to be given where phi is a trace.
	between func(box []Interval) (low, high Interval)
	x       []float64
	g, h    []float64
	xb      []Interval
	gb, hb  []Interval
}

func newTrace(psi, phi Function, dim, k int, lo, hi float64, rising bool) *trace {
	return &trace{
		psi: psi, phi: phi, k: k, lo: lo, hi: hi, rising: rising,
		x: make([]float64, dim), g: make([]float64, dim), h: make([]float64, dim),
		xb: make([]Interval, dim), gb: make([]Interval, dim), hb: make([]Interval, dim),
	}
}

// lift puts the point of the graph over x into s.x.
func (s *trace) lift(x []float64) {
	lo, hi := s.lo, s.hi
	if s.bracket != nil {
		lo, hi = s.bracket(x)
	}
	insert(s.x, x, s.k)
	solve(s.phi, s.x, s.k, lo, hi, lo+(hi-lo)/2, s.rising, s.g)
}

func (s *trace) Value(x []float64) float64 {
	s.lift(x)
	return s.psi.Value(s.x)
}

func (s *trace) Gradient(g, x []float64) {
	s.lift(x)
	s.phi.Gradient(s.g, s.x)
	s.psi.Gradient(s.h, s.x)
	slope := s.h[s.k] / s.g[s.k]
	for i := range g {
		j := skip(i, s.k)
		g[i] = s.h[j] - slope*s.g[j]
	}
}

// enclose puts into s.xb a box that contains the graph over the base box, as
// far as it lies in [lo, hi], by two steps of the interval Newton method, and
// into s.gb the gradient of phi there. The steps start from points between which
// and the graph phi is differentiable, over all of the base box.
func (s *trace) enclose(box []Interval) {
	insert(s.xb, box, s.k)
	z, start := span(s.lo, s.hi), span(s.lo, s.hi)
	if s.between != nil {
		low, high := s.between(box)
		z = span(max(s.lo, low.Inf()), min(s.hi, high.Sup()))
		if !(low.Sup() <= high.Inf()) {
			s.xb[s.k] = z
			s.phi.GradientRange(s.gb, s.xb)
			return
		}
		start = span(low.Sup(), high.Inf())
	}
	for range 2 {
		c := min(max(z.Inf()+(z.Sup()-z.Inf())/2, start.Inf()), start.Sup())
		s.xb[s.k] = span(min(z.Inf(), c), max(z.Sup(), c))
		s.phi.GradientRange(s.gb, s.xb)
		d := s.gb[s.k]
		if !certain(d) {
			break
		}
		s.xb[s.k] = span(c, c)
		n := span(c, c).Sub(s.phi.Range(s.xb).Div(d))
		lo, hi := max(z.Inf(), n.Inf()), min(z.Sup(), n.Sup())
		if !(lo <= hi) {
			break
		}
		z = span(lo, hi)
	}
	s.xb[s.k] = z
	s.phi.GradientRange(s.gb, s.xb)
}

func (s *trace) Range(box []Interval) Interval {
	s.enclose(box)
	return s.psi.Range(s.xb)
}

func (s *trace) GradientRange(g, box []Interval) {
	s.enclose(box)
	s.psi.GradientRange(s.hb, s.xb)
	slope := s.hb[s.k].Div(s.gb[s.k])
	for i := range g {
		j := skip(i, s.k)
		g[i] = s.hb[j].Sub(slope.Mul(s.gb[j]))
	}
}
