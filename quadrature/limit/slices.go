package limit

import (
	"math"
	"slices"
)

// over integrates along lines through the ball: in the first direction of the
// frame, over the second and the third as far as there are any.
func (b *ball) over() {
	if b.rank == 1 {
		b.line(&line{w: b.frame[0], lo: -1, hi: 1, h: 1}, 1)
		return
	}
	s := slice{b: b, h: 1}
	if b.rank == 2 {
		s.add(1)
		return
	}
	b.planes(func(t float64) slice { return slice{b: b, at: t, h: math.Sqrt(1 - t*t)} })
}

// planes integrates over slices across the third direction of the frame, along
// which the pattern of affine branches is cut where it changes. That of others is
// nearly the same on all slices as long as three meet on a line, and is not cut.
func (b *ball) planes(of func(t float64) slice) {
	edges := []float64{-math.Pi / 2, math.Pi / 2}
	if b.flat {
		edges = split(-math.Pi/2, math.Pi/2, evenly(-math.Pi/2, math.Pi/2, onSlices), 1e-3, func(t float64) uint64 {
			s := of(math.Sin(t))
			return s.pattern()
		})
	}
	for k := 1; k < len(edges); k++ {
		g := b.o.across(edges[k]-edges[k-1], false)
		for i, x := range g.x {
			sin, cos := math.Sincos(edges[k-1] + (edges[k]-edges[k-1])*x)
			s := of(sin)
			s.add((edges[k] - edges[k-1]) * g.w[i] * cos)
		}
	}
}

// slice is a disc of radius h in the plane of the first two directions of the
// frame, at a distance along the third. Its lines are parallel to the first
// direction, or go out from the place (p, q) of the plane.
type slice struct {
	b     *ball
	at, h float64

	radially bool
	p, q     float64
}

// line is the line at a parameter, and the weight of the parameter: the sine of
// it is the distance of parallel lines from the middle over h, in which the
// length of a line is smooth; so is that over h of rays that come from outside
// of the slice; those from inside have an angle.
func (s *slice) line(t float64) (l line, weight float64) {
	f := &s.b.frame
	var foot vector
	if s.at != 0 {
		foot = f[2].times(s.at)
	}
	sin, cos := math.Sincos(t)
	if !s.radially {
		h := s.h * cos
		return line{o: foot.plus(s.h*sin, f[1]), w: f[0], lo: -h, hi: h, h: h}, h
	}
	weight = 1
	if far := math.Hypot(s.p, s.q); far > s.h {
		// The angle to the direction of the middle.
		part := s.h / far
		sine := part * sin
		cosine := math.Sqrt((1 - sine) * (1 + sine))
		weight = part * cos / cosine
		a, b := -s.p/far, -s.q/far
		cos, sin = a*cosine-b*sine, b*cosine+a*sine
	}
	along := s.p*cos + s.q*sin // of the foot, negative
	across := s.q*cos - s.p*sin
	h := math.Sqrt(math.Max(0, s.h*s.h-across*across))
	return line{o: foot.plus(s.p, f[0]).plus(s.q, f[1]), w: f[0].times(cos).plus(sin, f[1]),
		lo: math.Max(0, -along-h), hi: math.Max(0, -along+h), h: h, radially: true}, weight
}

// ends is the range of the parameter.
func (s *slice) ends() (lo, hi float64) {
	if s.radially && math.Hypot(s.p, s.q) <= s.h {
		return 0, 2 * math.Pi
	}
	return -math.Pi / 2, math.Pi / 2
}

// edges are the ends and the places where the pattern of branches changes.
func (s *slice) edges() []float64 {
	lo, hi := s.ends()
	if len(s.b.set) == 1 {
		return []float64{lo, hi}
	}
	pattern := func(t float64) uint64 {
		l, _ := s.line(t)
		return s.b.pattern(&l)
	}
	var at []float64
	if !s.radially {
		at = s.corners()
		if s.b.flat {
			return merge(at, pattern)
		}
		for k := range len(at) - 1 {
			at = append(at, (at[k]+at[k+1])/2)
		}
		at = at[:copy(at, at[(len(at)+1)/2:])]
	}
	tol := 1e-6
	if s.b.rank == 3 {
		tol = 1e-4
	}
	at = append(at, evenly(lo, hi, onALine)...)
	slices.Sort(at)
	return split(lo, hi, at, tol*(hi-lo), pattern)
}

// corners are the ends and the parameters at which, for the tangents of the
// branches at x, three of them meet or two meet on the edge of the slice.
func (s *slice) corners() []float64 {
	b := s.b
	list := []float64{-math.Pi / 2, math.Pi / 2}
	add := func(y float64) {
		if y = y / s.h; y > -1 && y < 1 {
			list = append(list, math.Asin(y))
		}
	}
	var foot vector
	if s.at != 0 {
		foot = b.frame[2].times(s.at)
	}
	type lines struct{ c, x, y float64 } // c + x t + y s = 0
	of := func(i, j int) lines {
		g := b.g[i].sub(b.g[j]).times(b.delta)
		return lines{b.u[i] - b.u[j] + g.dot(foot), g.dot(b.frame[0]), g.dot(b.frame[1])}
	}
	for a, i := range b.set {
		for c, j := range b.set[:a] {
			p := of(i, j)
			n2 := p.x*p.x + p.y*p.y
			if rest := s.h*s.h*n2 - p.c*p.c; rest > 0 && n2 > 0 {
				rest = math.Sqrt(rest)
				add((-p.c*p.y + p.x*rest) / n2)
				add((-p.c*p.y - p.x*rest) / n2)
			}
			for _, k := range b.set[:c] {
				q := of(i, k)
				if d := p.x*q.y - p.y*q.x; d != 0 {
					add((q.x*p.c - p.x*q.c) / d)
				}
			}
		}
	}
	slices.Sort(list)
	return list
}

// pattern stands for the sequence of patterns of lines.
func (s *slice) pattern() uint64 {
	edges := s.edges()
	h := uint64(14695981039346656037)
	for k := 1; k < len(edges); k++ {
		l, _ := s.line(edges[k-1] + (edges[k]-edges[k-1])/2)
		h = (h ^ s.b.pattern(&l)) * 1099511628211
	}
	return h
}

// add adds the integral over the slice.
func (s *slice) add(weight float64) {
	edges := s.edges()
	for k := 1; k < len(edges); k++ {
		size := edges[k] - edges[k-1]
		n := math.Ceil(size / (0.6 * math.Pi)) // parts
		size /= n
		g := s.b.o.across(size, s.b.flat)
		for c := range int(n) {
			for i, x := range g.x {
				l, w := s.line(edges[k-1] + size*(float64(c)+x))
				s.b.line(&l, weight*size*g.w[i]*w)
			}
		}
	}
}

// evenly are n places in an interval.
func evenly(lo, hi float64, n int) (list []float64) {
	for i := range n {
		list = append(list, lo+(hi-lo)*(float64(i)+0.5)/float64(n))
	}
	return list
}

// merge leaves out the places between two intervals of the same pattern.
func merge(at []float64, pattern func(float64) uint64) []float64 {
	list := at[:1]
	last := at[len(at)-1]
	var was uint64
	for k := 1; k < len(at); k++ {
		if at[k]-at[k-1] < finest {
			continue
		}
		now := pattern(at[k-1] + (at[k]-at[k-1])/2)
		if len(list) > 1 && now == was {
			list[len(list)-1] = at[k]
		} else {
			list = append(list, at[k])
		}
		was = now
	}
	list[len(list)-1] = last
	return list
}

// split is the interval with the places at which a pattern changes between
// those given, to tol.
func split(lo, hi float64, at []float64, tol float64, pattern func(float64) uint64) []float64 {
	edges := []float64{lo}
	var was uint64
	for i, t := range at {
		now := pattern(t)
		if i > 0 {
			edges = change(edges, at[i-1], t, was, now, tol, pattern)
		}
		was = now
	}
	return append(edges, hi)
}

// change adds the places between two with different patterns at which the
// pattern changes.
func change(edges []float64, lo, hi float64, first, next uint64, tol float64, pattern func(float64) uint64) []float64 {
	if first == next {
		return edges
	}
	mid := lo + (hi-lo)/2
	if hi-lo < tol {
		return append(edges, mid)
	}
	m := pattern(mid)
	edges = change(edges, lo, mid, first, m, tol, pattern)
	return change(edges, mid, hi, m, next, tol, pattern)
}
