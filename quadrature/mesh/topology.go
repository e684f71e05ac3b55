package mesh

import (
	"context"
	"math"
	"slices"
)

// Topology is how the triangles of a mesh hang together.
type Topology struct {
	// Edges counts all edges, Boundary those of one triangle only.
	Edges, Boundary int
	// NonManifold and Inconsistent count the edges that leave the mesh without
	// a consistent orientation; see TopologyError.
	NonManifold, Inconsistent int

	// bend is, for every vertex, the largest angle of the normals at an edge
	// around it, in radians; sharp edges do not count.
	bend []float32
}

// sharp is the angle of the normals at an edge, in radians, from which it is
// taken for an edge of the surface itself.
const sharp = math.Pi / 4

// side is a triangle at an edge: the end of the edge with the larger index, the
// triangle, and whether it runs through the edge upwards.
type side struct {
	end  int32
	code uint32 // twice the triangle, plus one if downwards
}

func (s side) triangle() int { return int(s.code >> 1) }

// Check counts the edges. Where the mesh has no consistent orientation the error
// is a *TopologyError and the counts stand. Time is linear in the number of
// triangles but for the sorting of the edges at each vertex.
func (m *Mesh) Check(ctx context.Context) (Topology, error) {
	t := Topology{bend: make([]float32, len(m.Vertices))}
	start := make([]int32, len(m.Vertices)+1)
	for _, tri := range m.Triangles {
		for k, a := range tri {
			start[min(a, tri[(k+1)%3])+1]++
		}
	}
	for v := range m.Vertices {
		start[v+1] += start[v]
	}
	sides := make([]side, 3*len(m.Triangles))
	next := slices.Clone(start)
	for i, tri := range m.Triangles {
		for k, a := range tri {
			b, code := tri[(k+1)%3], uint32(2*i)
			if b < a {
				a, b, code = b, a, code+1
			}
			sides[next[a]] = side{b, code}
			next[a]++
		}
	}
	var worst *TopologyError
	met := math.MaxInt
	for v := range m.Vertices {
		if v%65536 == 0 && ctx.Err() != nil {
			return Topology{}, context.Cause(ctx)
		}
		around := sides[start[v]:start[v+1]]
		slices.SortFunc(around, func(a, b side) int {
			if a.end != b.end {
				return int(a.end) - int(b.end)
			}
			return int(a.code) - int(b.code)
		})
		for len(around) > 0 {
			n := 1
			for n < len(around) && around[n].end == around[0].end {
				n++
			}
			edge := around[:n]
			around = around[n:]
			t.Edges++
			if !t.count(edge) && edge[1].triangle() < met {
				met = edge[1].triangle()
				worst = &TopologyError{A: m.Vertices[v], B: m.Vertices[edge[0].end], Shared: n}
				for _, s := range edge[:min(n, 8)] {
					worst.Triangles = append(worst.Triangles, m.number(s.triangle()))
				}
			}
			if n == 2 {
				a := float32(m.angle(edge))
				for _, w := range []int{v, int(edge[0].end)} {
					t.bend[w] = max(t.bend[w], a)
				}
			}
		}
	}
	if worst != nil {
		worst.NonManifold, worst.Inconsistent = t.NonManifold, t.Inconsistent
		return t, worst
	}
	return t, nil
}

// count classifies an edge and reports whether it is oriented.
func (t *Topology) count(edge []side) bool {
	switch {
	case len(edge) == 1:
		t.Boundary++
	case len(edge) > 2:
		t.NonManifold++
		return false
	case edge[0].code&1 == edge[1].code&1:
		t.Inconsistent++
		return false
	}
	return true
}

// angle is the angle of the normals of two triangles at their edge; 0 where it
// is sharp or one of them has no area.
func (m *Mesh) angle(edge []side) float64 {
	p, ok := measure(m.corners(edge[0].triangle()))
	q, also := measure(m.corners(edge[1].triangle()))
	if !ok || !also {
		return 0
	}
	c := dot(p.normal, q.normal)
	if edge[0].code&1 == edge[1].code&1 {
		c = -c
	}
	if a := math.Atan2(norm(cross(p.normal, q.normal)), c); a <= sharp {
		return a
	}
	return 0
}
