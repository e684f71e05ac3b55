package mesh

import (
	"fmt"
	"math"
)

// A builder collects triangles and merges vertices with the same coordinates.
type builder struct {
	most   int
	seen   int
	format string
	where  map[[3]uint64]int32
	m      Mesh
}

func newBuilder(most int) *builder {
	return &builder{most: most, where: map[[3]uint64]int32{}}
}

// vertex is the index of a point. Negative zero is zero.
func (b *builder) vertex(p [3]float64) int32 {
	var key [3]uint64
	for k := range p {
		p[k] += 0
		key[k] = math.Float64bits(p[k])
	}
	i, ok := b.where[key]
	if !ok {
		i = int32(len(b.m.Vertices))
		b.where[key] = i
		b.m.Vertices = append(b.m.Vertices, p)
	}
	return i
}

// full reports whether one more triangle is too many.
func (b *builder) full() bool { return b.seen >= b.most }

func (b *builder) tooMany() string {
	return fmt.Sprintf("more than the %d triangles allowed", b.most)
}

// add adds a triangle; normal is as the file has it, zero where it has none.
func (b *builder) add(t [3]int32, normal [3]float64) {
	m := &b.m
	number := int32(b.seen)
	b.seen++
	if t[0] == t[1] || t[1] == t[2] || t[2] == t[0] {
		if m.Number == nil {
			m.Number = make([]int32, len(m.Triangles), len(m.Triangles)+1)
			for i := range m.Number {
				m.Number[i] = int32(i)
			}
		}
		m.Dropped++
		return
	}
	s, ok := measure(m.Vertices[t[0]], m.Vertices[t[1]], m.Vertices[t[2]])
	switch {
	case !ok:
		m.Flat++
	case dot(s.normal, normal) < 0:
		m.Contradicting++
	}
	m.Triangles = append(m.Triangles, t)
	if m.Number != nil {
		m.Number = append(m.Number, number)
	}
}

func (b *builder) finish() (*Mesh, error) {
	m := &b.m
	m.Format = b.format
	if b.seen == 0 {
		return nil, &FormatError{Format: b.format, Problem: "the file holds no triangle", Err: ErrFormat}
	}
	if m.Flat == len(m.Triangles) {
		return nil, &FormatError{Format: b.format, Problem: fmt.Sprintf("all %d triangles are degenerate: their vertices coincide or lie on a line", b.seen), Err: ErrFormat}
	}
	return m, nil
}

// vast is a bound on coordinates, so that no area overflows.
const vast = 0x1p480

// usable reports what is wrong with a coordinate, "" if nothing.
func usable(x float64) string {
	switch {
	case math.IsNaN(x):
		return "a coordinate is not a number"
	case math.IsInf(x, 0):
		return "a coordinate is infinite"
	case math.Abs(x) > vast:
		return fmt.Sprintf("the coordinate %g is too large", x)
	}
	return ""
}
