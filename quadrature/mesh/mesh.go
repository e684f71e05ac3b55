package mesh

import "math"

// A Mesh is a surface of triangles in space.
type Mesh struct {
	// Vertices are pairwise different points.
	Vertices [][3]float64
	// Triangles are triples of different vertices; the normal is by the
	// right-hand rule.
	Triangles [][3]int32
	// Number[i] is the number of triangle i in the file, from 0: triangles
	// that are dropped leave gaps. Nil where none were dropped.
	Number []int32

	// Format is "STL", "binary STL" or "OBJ".
	Format string
	// Dropped counts the triangles that had two equal vertices, Flat those
	// kept whose vertices lie on a line, and Contradicting those whose normal
	// in the file points against the order of their vertices.
	Dropped, Flat, Contradicting int
}

// number is the number of a triangle in the file.
func (m *Mesh) number(i int) int {
	if m.Number == nil {
		return i
	}
	return int(m.Number[i])
}

// corners are the vertices of a triangle.
func (m *Mesh) corners(i int) (a, b, c [3]float64) {
	t := m.Triangles[i]
	return m.Vertices[t[0]], m.Vertices[t[1]], m.Vertices[t[2]]
}

// skew is the sine of the angle at the first vertex of a triangle below which
// its vertices count as on a line.
const skew = 1e-13

// span is what a triangle is made of: its normal and area, and area again as
// the product of two edges, against which its rounding is judged.
type span struct {
	normal      [3]float64
	area, edges float64
	longest     float64
}

// measure returns false for a triangle without area.
func measure(a, b, c [3]float64) (s span, ok bool) {
	u, v, w := sub(b, a), sub(c, a), sub(c, b)
	nu, nv, nw := norm(u), norm(v), norm(w)
	s.longest = math.Max(nu, math.Max(nv, nw))
	if nu == 0 || nv == 0 {
		return s, false
	}
	n := cross(scale(u, 1/nu), scale(v, 1/nv))
	sine := norm(n)
	if !(sine > skew) {
		return s, false
	}
	s.normal = scale(n, 1/sine)
	s.edges = nu * nv / 2
	s.area = sine * s.edges
	return s, true
}

func sub(a, b [3]float64) [3]float64 { return [3]float64{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }

func scale(a [3]float64, f float64) [3]float64 { return [3]float64{a[0] * f, a[1] * f, a[2] * f} }

func dot(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

func norm(a [3]float64) float64 { return math.Hypot(math.Hypot(a[0], a[1]), a[2]) }

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
