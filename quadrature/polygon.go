package quadrature

import (
	"fmt"
	"math"
	"slices"
)

// A Polygon is flat.
//
// In space its Vertices (three or more, not repeated at the end, convex or not)
// bound a planar region; the normal is that about which they run
// counter-clockwise. In the plane they are joined in order to a chain of
// segments; the normal of each is its direction turned by -90 degrees, as for a
// Patch. Repeat the first vertex to close the chain.
//
// Integrate refuses with ErrShape vertices that are not finite, that coincide,
// that do not lie in a plane (to 1e-9 of the size), that enclose no area, and
// a boundary that crosses or touches itself. Crossings are decided exactly for
// the vertices projected on the nearest coordinate plane.
type Polygon struct {
	Vertices [][]float64
}

// Dimension is that of the first vertex.
func (p Polygon) Dimension() int {
	if len(p.Vertices) == 0 {
		return 0
	}
	return len(p.Vertices[0])
}

// flatness is the relative distance from a plane that is put down to rounding.
const flatness = 1e-9

func (p Polygon) pieces() ([]*piece, error) {
	dim := p.Dimension()
	if dim != 2 && dim != 3 {
		return nil, shapeError("a polygon needs vertices of 2 or 3 coordinates")
	}
	for i, v := range p.Vertices {
		if len(v) != dim {
			return nil, shapeError("vertex %d of the polygon has %d coordinates, the first has %d", i+1, len(v), dim)
		}
		for _, c := range v {
			if !finite(c) {
				return nil, shapeError("vertex %d of the polygon, %s, is not finite", i+1, tuple(v))
			}
		}
	}
	if dim == 2 {
		return p.chain()
	}
	return p.faces()
}

// chain gives the segments of a polygon in the plane.
func (p Polygon) chain() ([]*piece, error) {
	n := len(p.Vertices) - 1
	if n < 1 {
		return nil, shapeError("a chain of segments needs at least 2 vertices")
	}
	v := make([][2]float64, n+1)
	for i, x := range p.Vertices {
		v[i] = [2]float64{x[0], x[1]}
	}
	if err := simple(v, false); err != nil {
		return nil, err
	}
	ps := make([]*piece, n)
	for i := range ps {
		a, e := v[i], [2]float64{v[i+1][0] - v[i][0], v[i+1][1] - v[i][1]}
		ps[i] = &piece{
			name: fmt.Sprintf("segment %d", i+1), dim: 2, n: 1, over: [2]Range{{0, 1}},
			eval: func(s, x []float64, jac [][]float64) {
				for k := range 2 {
					x[k], jac[0][k] = a[k]+s[0]*e[k], e[k]
				}
			},
		}
	}
	return ps, nil
}

// simple checks that a closed polygon or a chain neither crosses nor touches
// itself, where a chain may end where it began.
func simple(v [][2]float64, closed bool) error {
	n := len(v)
	edges := n
	ring := closed
	if !closed {
		edges = n - 1
		ring = n > 3 && v[0] == v[n-1]
	}
	at := func(i int) [2]float64 { return v[i%n] }
	for i := range edges {
		if at(i) == at(i+1) {
			return shapeError("vertices %d and %d of the polygon coincide", i+1, (i+1)%n+1)
		}
	}
	for i := range edges {
		for j := i + 1; j < edges; j++ {
			a, b, c, d := at(i), at(i+1), at(j), at(j+1)
			switch {
			case j == i+1:
				if folds(a, b, d) {
					return shapeError("the polygon turns back on itself at vertex %d", j+1)
				}
				continue
			case ring && i == 0 && j == edges-1:
				if folds(c, a, b) {
					return shapeError("the polygon turns back on itself at vertex 1")
				}
				continue
			}
			if meet(a, b, c, d) {
				return shapeError("the polygon meets itself: edge %d and edge %d have a point in common", i+1, j+1)
			}
		}
	}
	return nil
}

// folds reports whether the path a, b, c turns back at b.
func folds(a, b, c [2]float64) bool {
	return orient(a, b, c) == 0 && (between(a, b, c) || between(b, c, a))
}

// plane gives the unit normal (Newell's sum) and a size of the polygon.
func (p Polygon) plane() (normal [3]float64, size float64, err error) {
	v := p.Vertices
	o := v[0]
	var perimeter float64
	for i := range v {
		a, b := v[i], v[(i+1)%len(v)]
		u := [3]float64{a[0] - o[0], a[1] - o[1], a[2] - o[2]}
		w := [3]float64{b[0] - o[0], b[1] - o[1], b[2] - o[2]}
		perimeter += math.Sqrt(math.Pow(b[0]-a[0], 2) + math.Pow(b[1]-a[1], 2) + math.Pow(b[2]-a[2], 2))
		c := cross(u, w)
		for k := range 3 {
			normal[k] += c[k]
		}
	}
	length := norm(normal[:])
	if !(length > 1e-13*perimeter*perimeter) {
		return normal, 0, shapeError("the polygon has no area: its vertices lie on a line, or it is traversed in both senses")
	}
	for k := range normal {
		normal[k] /= length
	}
	for i, x := range v {
		d := (x[0]-o[0])*normal[0] + (x[1]-o[1])*normal[1] + (x[2]-o[2])*normal[2]
		if math.Abs(d) > flatness*perimeter {
			return normal, 0, shapeError("the polygon is not flat: vertex %d, %s, is %.3g off the plane of the others", i+1, tuple(x), math.Abs(d))
		}
	}
	return normal, perimeter, nil
}

// triangles cuts a polygon in space into triangles, of the same sense, and
// gives the common unit normal.
func (p Polygon) triangles() ([][3]int, [3]float64, error) {
	n := len(p.Vertices)
	if n < 3 {
		return nil, [3]float64{}, shapeError("a polygon in space needs at least 3 vertices, not %d", n)
	}
	normal, _, err := p.plane()
	if err != nil {
		return nil, normal, err
	}
	drop := 0
	for k := range 3 {
		if math.Abs(normal[k]) > math.Abs(normal[drop]) {
			drop = k
		}
	}
	flat := make([][2]float64, n)
	for i, x := range p.Vertices {
		flat[i] = [2]float64{x[(drop+1)%3], x[(drop+2)%3]}
	}
	if err := simple(flat, true); err != nil {
		return nil, normal, err
	}
	index := make([]int, n)
	for i := range index {
		index[i] = i
	}
	if normal[drop] < 0 {
		slices.Reverse(index)
	}
	ts := clip(flat, index)
	if normal[drop] < 0 {
		for i := range ts {
			ts[i][1], ts[i][2] = ts[i][2], ts[i][1]
		}
	}
	return ts, normal, nil
}

// clip triangulates a simple counter-clockwise polygon by cutting off ears
// (Meisters, Polygons have ears, 1975).
func clip(v [][2]float64, index []int) [][3]int {
	var ts [][3]int
	for len(index) > 2 {
		n := len(index)
		cut := -1
		for i := range n {
			a, b, c := index[(i+n-1)%n], index[i], index[(i+1)%n]
			turn := orient(v[a], v[b], v[c])
			if turn == 0 {
				cut = i
				break
			}
			if turn > 0 && empty(v, index, a, b, c) {
				cut = i
				ts = append(ts, [3]int{a, b, c})
				break
			}
		}
		if cut < 0 {
			break // not reached for a simple polygon
		}
		index = slices.Delete(index, cut, cut+1)
	}
	return ts
}

// empty reports whether no other vertex is in the closed triangle a, b, c.
func empty(v [][2]float64, index []int, a, b, c int) bool {
	for _, i := range index {
		if i == a || i == b || i == c {
			continue
		}
		if orient(v[a], v[b], v[i]) >= 0 && orient(v[b], v[c], v[i]) >= 0 && orient(v[c], v[a], v[i]) >= 0 {
			return false
		}
	}
	return true
}

func (p Polygon) faces() ([]*piece, error) {
	ts, normal, err := p.triangles()
	if err != nil {
		return nil, err
	}
	var ps []*piece
	for _, t := range ts {
		var a, e, f [3]float64
		for k := range 3 {
			a[k] = p.Vertices[t[0]][k]
			e[k] = p.Vertices[t[1]][k] - a[k]
			f[k] = p.Vertices[t[2]][k] - p.Vertices[t[1]][k]
		}
		ps = append(ps, &piece{
			name: fmt.Sprintf("triangle of the vertices %d, %d, %d", t[0]+1, t[1]+1, t[2]+1),
			dim:  3, n: 2, over: unitSquare, normal: normal[:],
			vertices: unsure(p.Vertices[t[0]], p.Vertices[t[1]], p.Vertices[t[2]]),
			eval: func(s, x []float64, jac [][]float64) {
				for k := range 3 {
					d := e[k] + s[1]*f[k]
					x[k], jac[0][k], jac[1][k] = a[k]+s[0]*d, d, s[0]*f[k]
				}
			},
		})
	}
	return ps, nil
}

// unsure is the relative error of the area of a triangle that errors of the
// relative size 1 in its corners cause: the distance of the corners from the
// origin times the perimeter over twice the area.
func unsure(a, b, c []float64) float64 {
	var e, f, g [3]float64
	for k := range a {
		e[k], f[k], g[k] = b[k]-a[k], c[k]-b[k], c[k]-a[k]
	}
	area := cross(e, f)
	far := math.Max(norm(a), math.Max(norm(b), norm(c)))
	return far * (norm(e[:]) + norm(f[:]) + norm(g[:])) / norm(area[:]) / 2
}

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

func norm(v []float64) float64 {
	var m float64
	for _, x := range v {
		m = math.Max(m, math.Abs(x))
	}
	if m == 0 || !finite(m) {
		return m
	}
	var s float64
	for _, x := range v {
		s += (x / m) * (x / m)
	}
	return m * math.Sqrt(s)
}
