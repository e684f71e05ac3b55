package branches

import (
	"math"
	"math/big"
)

// Connected groups faces: two belong together where they are of the same pair,
// with the same of the two on the side of the normal, and share a part of an edge
// that has a length, in the plane a point. Meets, if not nil, says whether a
// shared part, given by its ends, counts. A group lists the numbers of its faces
// in increasing order, and groups are in the order of their first.
func Connected(faces []Face, meets func(a, b []*big.Rat) bool) [][]int {
	root := make([]int, len(faces))
	for i := range root {
		root[i] = i
	}
	find := func(i int) int {
		for root[i] != i {
			root[i] = root[root[i]]
			i = root[i]
		}
		return i
	}
	about := make([]bounds, len(faces))
	for i, f := range faces {
		about[i] = around(f.Vertices)
		for j := i - 1; j >= 0 && faces[j].Branches == f.Branches; j-- {
			if faces[j].Plus != f.Plus || about[i].apart(about[j]) || find(i) == find(j) {
				continue
			}
			a, b, ok := shared(f.Vertices, faces[j].Vertices)
			if ok && (meets == nil || meets(a, b)) {
				x, y := find(i), find(j)
				root[max(x, y)] = min(x, y)
			}
		}
	}
	var out [][]int
	at := map[int]int{}
	for i := range faces {
		r := find(i)
		k, ok := at[r]
		if !ok {
			k = len(out)
			at[r] = k
			out = append(out, nil)
		}
		out[k] = append(out[k], i)
	}
	return out
}

// bounds are ranges of rounded coordinates. Rounding keeps the order, so that
// where two are apart the exact ones are.
type bounds [][2]float64

func around(points [][]*big.Rat) bounds {
	b := make(bounds, len(points[0]))
	for k := range b {
		b[k] = [2]float64{math.Inf(1), math.Inf(-1)}
		for _, x := range points {
			v, _ := x[k].Float64()
			b[k][0], b[k][1] = min(b[k][0], v), max(b[k][1], v)
		}
	}
	return b
}

func (b bounds) apart(c bounds) bool {
	for k := range b {
		if b[k][1] < c[k][0] || c[k][1] < b[k][0] {
			return true
		}
	}
	return false
}

// shared is the part that edges of two polygons in one plane have in common, of
// two segments on one line a point.
func shared(p, q [][]*big.Rat) (a, b []*big.Rat, ok bool) {
	if len(p) == 2 {
		for _, x := range p {
			for _, y := range q {
				if same(x, y) {
					return x, x, true
				}
			}
		}
		return nil, nil, false
	}
	for i, x := range p {
		y := p[(i+1)%len(p)]
		edge := around([][]*big.Rat{x, y})
		for j, v := range q {
			w := q[(j+1)%len(q)]
			if edge.apart(around([][]*big.Rat{v, w})) {
				continue
			}
			if a, b, ok = overlap(x, y, v, w); ok {
				return a, b, true
			}
		}
	}
	return nil, nil, false
}

// overlap is the common part of the segments xy and vw where it has a length.
func overlap(x, y, v, w []*big.Rat) (a, b []*big.Rat, ok bool) {
	s, on := along(x, y, v)
	if !on {
		return nil, nil, false
	}
	t, on := along(x, y, w)
	if !on {
		return nil, nil, false
	}
	if s.Cmp(t) > 0 {
		s, t, v, w = t, s, w, v
	}
	zero, one := new(big.Rat), big.NewRat(1, 1)
	if s.Sign() < 0 {
		s, v = zero, x
	}
	if t.Cmp(one) > 0 {
		t, w = one, y
	}
	return v, w, s.Cmp(t) < 0
}

// along is the s with p = x + s (y - x), where p is on that line.
func along(x, y, p []*big.Rat) (s *big.Rat, ok bool) {
	d, e := make([]*big.Rat, len(x)), make([]*big.Rat, len(x))
	for k := range x {
		d[k], e[k] = new(big.Rat).Sub(y[k], x[k]), new(big.Rat).Sub(p[k], x[k])
		if s == nil && d[k].Sign() != 0 {
			s = new(big.Rat).Quo(e[k], d[k])
		}
	}
	if s == nil {
		return nil, false
	}
	for k := range x {
		if d[k].Mul(d[k], s).Cmp(e[k]) != 0 {
			return nil, false
		}
	}
	return s, true
}
