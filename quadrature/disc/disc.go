package disc

import "math"

// Conic is the set {S² + (Slope T + Shift)² <= Radius²}; Slope is not negative.
type Conic struct{ Slope, Shift, Radius float64 }

// scaled are the coordinates in which the conic is the disc about the origin.
func (c Conic) scaled(x [2]float64) [2]float64 { return [2]float64{x[0], c.Slope*x[1] + c.Shift} }

// Region is the intersection of a convex polygon with a conic.
type Region struct {
	Area, Error float64
	// Boundary are points of its boundary: the corners, and some on the arcs.
	Boundary [][2]float64
	// Point is a point inside.
	Point [2]float64
}

// span is the part of an edge inside the conic; fromEnd and toEnd say of its
// ends that they are those of the edge.
type span struct {
	from, to       [2]float64
	fromEnd, toEnd bool
	edge           int
}

// Cut intersects a convex polygon, given by its corners in order, with a conic.
// It reports false where they have no area in common.
func Cut(polygon [][2]float64, c Conic) (Region, bool) {
	if len(polygon) < 3 || !(c.Radius > 0) {
		return Region{}, false
	}
	p := polygon
	if shoelace(p) < 0 {
		p = make([][2]float64, len(polygon))
		for i, x := range polygon {
			p[len(p)-1-i] = x
		}
	}
	var spans []span
	for i, x := range p {
		y := p[(i+1)%len(p)]
		lo, hi := Chord(c.scaled(x), [2]float64{y[0] - x[0], c.Slope * (y[1] - x[1])}, c.Radius)
		if !(lo < hi) {
			continue
		}
		s := span{from: between(x, y, lo), to: between(x, y, hi), fromEnd: lo == 0, toEnd: hi == 1, edge: i}
		spans = append(spans, s)
	}
	if spans == nil {
		if c.Slope == 0 {
			return Region{}, false
		}
		center := [2]float64{0, -c.Shift / c.Slope}
		if !inside(p, center) {
			return Region{}, false
		}
		r := Region{Area: math.Pi * c.Radius * c.Radius / c.Slope, Point: center}
		r.Error = 0x1p-50 * r.Area
		for i := range 16 {
			sin, cos := math.Sincos(float64(i) * math.Pi / 8)
			r.Boundary = append(r.Boundary, [2]float64{c.Radius * cos, center[1] + c.Radius*sin/c.Slope})
		}
		return r, true
	}
	var r Region
	var corners [][2]float64
	segments := 0.0
	for i, s := range spans {
		next := spans[(i+1)%len(spans)]
		corners = append(corners, s.from)
		if s.toEnd && next.fromEnd && next.edge == (s.edge+1)%len(p) {
			continue
		}
		corners = append(corners, s.to)
		a := c.angle(p, s.to, next.from)
		segments += c.segment(a)
		r.Boundary = append(r.Boundary, c.arc(s.to, a)...)
	}
	r.Boundary = append(r.Boundary, corners...)
	r.Area = shoelace(corners) + segments
	perimeter, size := 0.0, 0.0
	for i, x := range corners {
		y := corners[(i+1)%len(corners)]
		perimeter += math.Hypot(y[0]-x[0], y[1]-x[1])
		size = math.Max(size, math.Hypot(x[0], x[1]))
		r.Point[0] += x[0] / float64(len(corners))
		r.Point[1] += x[1] / float64(len(corners))
	}
	r.Error = 0x1p-50 * (perimeter*(size+c.Radius) + segments)
	if len(corners) == 2 { // a chord and an arc: half way from its middle to that of the arc
		a := c.angle(p, corners[1], corners[0])
		far := c.turned(corners[1], a/2)
		r.Point = between(r.Point, far, 0.5)
	}
	return r, r.Area > 0
}

// Chord gives the range of 0 <= t <= 1 in which |p + t d| <= r. It is empty, with
// lo >= hi, where there is no part of positive length.
func Chord(p, d [2]float64, r float64) (lo, hi float64) {
	a := d[0]*d[0] + d[1]*d[1]
	b := p[0]*d[0] + p[1]*d[1]
	length := math.Hypot(p[0], p[1])
	e := (length - r) * (length + r)
	if a == 0 {
		if e < 0 {
			return 0, 1
		}
		return 0, 0
	}
	side := math.Abs(p[0]*d[1]-p[1]*d[0]) / math.Sqrt(a)
	if !(side < r) {
		return 0, 0
	}
	root := math.Sqrt(a) * math.Sqrt((r-side)*(r+side))
	var first, second float64
	if q := b + math.Copysign(root, b); q == 0 {
		return 0, 0
	} else if q > 0 {
		first, second = -q/a, -e/q
	} else {
		first, second = -e/q, -q/a
	}
	return math.Max(0, first), math.Min(1, second)
}

func between(x, y [2]float64, t float64) [2]float64 {
	if t == 1 {
		return y
	}
	return [2]float64{x[0] + t*(y[0]-x[0]), x[1] + t*(y[1]-x[1])}
}

// angle is that of the arc from x to y, counterclockwise.
func (c Conic) angle(polygon [][2]float64, x, y [2]float64) float64 {
	p, q := c.scaled(x), c.scaled(y)
	d := [2]float64{y[0] - x[0], c.Slope * (y[1] - x[1])}
	a := math.Atan2(p[0]*d[1]-p[1]*d[0], p[0]*q[0]+p[1]*q[1])
	switch {
	case a >= 0:
		return a
	case a < -1e-6:
		return a + 2*math.Pi
	}
	// All of the conic but a little, or nothing: the opposite point tells.
	if c.Slope > 0 && inside(polygon, [2]float64{-p[0], (-p[1] - c.Shift) / c.Slope}) {
		return a + 2*math.Pi
	}
	return 0
}

// segment is the area between an arc and its chord.
func (c Conic) segment(a float64) float64 {
	if a == 0 || c.Slope == 0 {
		return 0
	}
	s := a - math.Sin(a)
	if a < 0.3 {
		b := a * a
		s = a * b / 6 * (1 - b/20*(1-b/42*(1-b/72*(1-b/110*(1-b/156)))))
	}
	return c.Radius * c.Radius / 2 * (s / c.Slope)
}

// turned is the point of the conic at an angle from x.
func (c Conic) turned(x [2]float64, a float64) [2]float64 {
	if c.Slope == 0 {
		return x
	}
	p := c.scaled(x)
	sin, cos := math.Sincos(a)
	return [2]float64{p[0]*cos - p[1]*sin, (p[0]*sin + p[1]*cos - c.Shift) / c.Slope}
}

// arc are some points on the arc of an angle from x.
func (c Conic) arc(x [2]float64, a float64) (out [][2]float64) {
	n := 1 + int(8*a/math.Pi)
	for i := range n {
		out = append(out, c.turned(x, a*float64(i+1)/float64(n+1)))
	}
	return out
}

// shoelace is the area of a polygon, positive where it is counterclockwise.
func shoelace(p [][2]float64) (sum float64) {
	for i := 1; i+1 < len(p); i++ {
		sum += (p[i][0]-p[0][0])*(p[i+1][1]-p[0][1]) - (p[i+1][0]-p[0][0])*(p[i][1]-p[0][1])
	}
	return sum / 2
}

// inside reports whether a point is inside a convex counterclockwise polygon.
func inside(p [][2]float64, x [2]float64) bool {
	for i, a := range p {
		b := p[(i+1)%len(p)]
		if (b[0]-a[0])*(x[1]-a[1])-(x[0]-a[0])*(b[1]-a[1]) <= 0 {
			return false
		}
	}
	return true
}
