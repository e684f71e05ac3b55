package creases

import (
	"math"
	"math/big"
	"slices"

	"creaseproof/quadrature/branches"
	"creaseproof/quadrature/disc"
)

// cutFace is the part of a face inside a domain.
type cutFace struct {
	area, failure float64
	energy        float64 // with failure, once weighed
	point         []float64
	box           [][2]float64
}

// cutter cuts faces by a domain.
type cutter struct {
	d      domain
	center []*big.Rat // in all coordinates, 0 in those that are not round
	axis   int        // of a cylinder, otherwise -1
}

func newCutter(d domain) *cutter {
	c := &cutter{d: d, axis: -1}
	for k := range d.box {
		c.center = append(c.center, new(big.Rat))
		if i := slices.Index(d.round, k); i >= 0 {
			c.center[k].SetFloat64(d.center[i])
		} else if d.round != nil {
			c.axis = k
		}
	}
	return c
}

// from is the vertices as seen from the centre.
func (c *cutter) from(f *branches.Face) [][]float64 {
	out := make([][]float64, len(f.Vertices))
	for i, x := range f.Vertices {
		out[i] = c.relative(x)
	}
	return out
}

func (c *cutter) relative(x []*big.Rat) []float64 {
	out := make([]float64, len(x))
	for k, v := range x {
		out[k], _ = new(big.Rat).Sub(v, c.center[k]).Float64()
	}
	return out
}

// cut reports false where nothing with an area is inside.
func (c *cutter) cut(f *branches.Face) (cutFace, bool) {
	at := c.from(f)
	q := floats(f.Jump)
	length := norm(q)
	switch {
	case c.d.round == nil:
		ratio, _ := f.Ratio.Float64()
		area := ratio * length
		return c.made(at, middleOf(at), area, 0x1p-50*area), true
	case len(q) == 2:
		p, e := [2]float64{at[0][0], at[0][1]}, [2]float64{at[1][0] - at[0][0], at[1][1] - at[0][1]}
		lo, hi := disc.Chord(p, e, c.d.radius)
		if !(lo < hi) {
			return cutFace{}, false
		}
		whole := math.Hypot(e[0], e[1])
		ends := [][]float64{{p[0] + lo*e[0], p[1] + lo*e[1]}, {p[0] + hi*e[0], p[1] + hi*e[1]}}
		return c.made(ends, middleOf(ends), whole*(hi-lo), 0x1p-50*(whole+c.d.radius)), true
	}
	n := make([]float64, 3)
	for k := range n {
		n[k] = q[k] / length
	}
	conic := disc.Conic{Slope: 1, Radius: c.d.radius}
	var s, t, foot []float64
	if c.axis < 0 {
		var ok bool
		if conic.Radius, foot, ok = c.sphere(f); !ok {
			return cutFace{}, false
		}
		s = across(n, unitVector(flattest(n)))
		t = cross3(n, s)
	} else {
		up := unitVector(c.axis)
		if s = cross3(up, n); norm(s) == 0 {
			s = unitVector((c.axis + 1) % 3)
		}
		s = scale3(s, 1/norm(s))
		t = cross3(n, s)
		if n[c.axis] < 0 {
			t = scale3(t, -1)
		}
		conic.Slope = math.Abs(n[c.axis])
		foot = slices.Clone(at[0])
		conic.Shift = dot3(foot, cross3(up, s))
	}
	// Coordinates in the plane: s from the centre, t from the foot.
	shift := dot3(foot, s)
	if c.axis < 0 {
		shift = 0
	}
	polygon := make([][2]float64, len(at))
	for i, x := range at {
		d := []float64{x[0] - foot[0], x[1] - foot[1], x[2] - foot[2]}
		polygon[i] = [2]float64{dot3(d, s) + shift, dot3(d, t)}
	}
	region, ok := disc.Cut(polygon, conic)
	if !ok {
		return cutFace{}, false
	}
	back := func(p [2]float64) []float64 {
		x := make([]float64, 3)
		for k := range x {
			x[k] = foot[k] + (p[0]-shift)*s[k] + p[1]*t[k]
		}
		return x
	}
	var edge [][]float64
	for _, p := range region.Boundary {
		edge = append(edge, back(p))
	}
	return c.made(edge, back(region.Point), region.Area, region.Error), true
}

// sphere is the disc in which the plane of a face cuts the ball: its radius and
// its centre, as seen from that of the ball.
func (c *cutter) sphere(f *branches.Face) (radius float64, foot []float64, ok bool) {
	h, qq, t := new(big.Rat), new(big.Rat), new(big.Rat)
	for k, q := range f.Jump {
		h.Add(h, t.Mul(q, t.Sub(f.Vertices[0][k], c.center[k])))
		qq.Add(qq, t.Mul(q, q))
	}
	r := new(big.Rat).SetFloat64(c.d.radius)
	square := r.Mul(r, r)
	square.Sub(square, t.Quo(t.Mul(h, h), qq))
	if square.Sign() <= 0 {
		return 0, nil, false
	}
	v, _ := square.Float64()
	for _, q := range f.Jump {
		x, _ := t.Quo(t.Mul(h, q), qq).Float64()
		foot = append(foot, x)
	}
	return math.Sqrt(v), foot, true
}

// made puts a part together from points as seen from the centre.
func (c *cutter) made(edge [][]float64, point []float64, area, failure float64) cutFace {
	center := floats(c.center)
	p := cutFace{area: area, failure: failure, box: make([][2]float64, len(point))}
	for k, v := range point {
		p.point = append(p.point, center[k]+v)
		p.box[k] = [2]float64{math.Inf(1), math.Inf(-1)}
		for _, x := range append(edge[:len(edge):len(edge)], point) {
			p.box[k][0], p.box[k][1] = min(p.box[k][0], center[k]+x[k]), max(p.box[k][1], center[k]+x[k])
		}
	}
	return p
}

// meets reports whether a part of the segment ab, or the point, is well inside
// the domain.
func (c *cutter) meets(a, b []*big.Rat) bool {
	if c.d.round == nil {
		return true
	}
	x, y := c.relative(a), c.relative(b)
	var xx, xe, ee float64
	for _, k := range c.d.round {
		e := y[k] - x[k]
		xx, xe, ee = xx+x[k]*x[k], xe+x[k]*e, ee+e*e
	}
	if ee > 0 {
		t := max(0, min(1, -xe/ee))
		xx += t * (2*xe + t*ee)
	}
	r := c.d.radius * (1 - 0x1p-40)
	return xx < r*r
}

func middleOf(at [][]float64) []float64 {
	out := make([]float64, len(at[0]))
	for _, x := range at {
		for k, v := range x {
			out[k] += v / float64(len(at))
		}
	}
	return out
}

func unitVector(k int) []float64 {
	e := make([]float64, 3)
	e[k] = 1
	return e
}

// flattest is the direction in which a vector is shortest.
func flattest(n []float64) (k int) {
	for i := range n {
		if math.Abs(n[i]) < math.Abs(n[k]) {
			k = i
		}
	}
	return k
}

// across is the unit vector perpendicular to both.
func across(a, b []float64) []float64 {
	c := cross3(a, b)
	return scale3(c, 1/norm(c))
}

func cross3(a, b []float64) []float64 {
	return []float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

func dot3(a, b []float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func scale3(a []float64, f float64) []float64 { return []float64{a[0] * f, a[1] * f, a[2] * f} }
