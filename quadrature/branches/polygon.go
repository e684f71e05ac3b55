package branches

import (
	"math/big"
	"slices"
)

// polygon is a convex polygon in a plane, or a segment; fewer than three
// vertices, in the plane fewer than two, are nothing.
type polygon struct {
	dim int
	at  [][]*big.Rat
	// near are the vertices as floating-point numbers, which decide nothing.
	near [][]float64
}

func newPolygon(dim int, at [][]*big.Rat) polygon {
	p := polygon{dim: dim}
	for i, x := range at {
		if i > 0 && same(x, p.at[len(p.at)-1]) {
			continue
		}
		p.at = append(p.at, x)
	}
	if k := len(p.at); k > 1 && same(p.at[0], p.at[k-1]) {
		p.at = p.at[:k-1]
	}
	p.near = make([][]float64, len(p.at))
	for i, x := range p.at {
		p.near[i] = make([]float64, dim)
		for k, c := range x {
			p.near[i][k], _ = c.Float64()
		}
	}
	return p
}

func same(x, y []*big.Rat) bool {
	return slices.EqualFunc(x, y, func(a, b *big.Rat) bool { return a.Cmp(b) == 0 })
}

func (p polygon) empty() bool { return len(p.at) < p.dim }

// side is the side of the box that the polygon lies in, where it lies in one.
func (p polygon) side(box Box) (coordinate int, high, ok bool) {
	for k := range p.dim {
		for i, end := range []*big.Rat{box.Lo[k], box.Hi[k]} {
			if !slices.ContainsFunc(p.at, func(x []*big.Rat) bool { return x[k].Cmp(end) != 0 }) {
				return k, i == 1, true
			}
		}
	}
	return 0, false, false
}

// section is the part of the plane f = 0 in a box.
func section(f Affine, box Box) polygon {
	dim := len(box.Lo)
	up := 0 // the coordinate that is solved for
	for k, g := range f.Gradient {
		if new(big.Rat).Abs(g).Cmp(new(big.Rat).Abs(f.Gradient[up])) > 0 {
			up = k
		}
	}
	others := []int{0, 1, 2}[:dim]
	others = slices.DeleteFunc(slices.Clone(others), func(k int) bool { return k == up })
	corners := [][]*big.Rat{{box.Lo[others[0]]}, {box.Hi[others[0]]}}
	if dim == 3 {
		b := others[1]
		corners = [][]*big.Rat{
			{box.Lo[others[0]], box.Lo[b]}, {box.Hi[others[0]], box.Lo[b]},
			{box.Hi[others[0]], box.Hi[b]}, {box.Lo[others[0]], box.Hi[b]},
		}
	}
	var at [][]*big.Rat
	for _, c := range corners {
		x := make([]*big.Rat, dim)
		x[up] = new(big.Rat)
		for i, k := range others {
			x[k] = c[i]
		}
		x[up] = new(big.Rat).Neg(new(big.Rat).Quo(f.At(x), f.Gradient[up]))
		at = append(at, x)
	}
	p := newPolygon(dim, at)
	for _, high := range []bool{false, true} {
		h := Affine{make([]*big.Rat, dim), box.Hi[up]}
		for k := range h.Gradient {
			h.Gradient[k] = new(big.Rat)
		}
		h.Gradient[up].SetInt64(-1)
		if !high {
			h.Gradient[up].SetInt64(1)
			h.Constant = new(big.Rat).Neg(box.Lo[up])
		}
		p, _ = p.cut(p.values(h))
	}
	return p
}

// values are those of f at the vertices.
func (p polygon) values(f Affine) []*big.Rat {
	v := make([]*big.Rat, len(p.at))
	for i, x := range p.at {
		v[i] = f.At(x)
	}
	return v
}

// cut gives the parts where an affine function with the values v at the
// vertices is not negative and where it is not positive.
func (p polygon) cut(v []*big.Rat) (above, below polygon) {
	var a, b [][]*big.Rat
	n := len(p.at)
	for i, x := range p.at {
		s, t := v[i].Sign(), v[(i+1)%n].Sign()
		if s >= 0 {
			a = append(a, x)
		}
		if s <= 0 {
			b = append(b, x)
		}
		if s*t < 0 {
			y := cross(x, p.at[(i+1)%n], v[i], v[(i+1)%n])
			a, b = append(a, y), append(b, y)
		}
	}
	return newPolygon(p.dim, a), newPolygon(p.dim, b)
}

// cross is the zero between x and y of an affine function with the values v
// and w there.
func cross(x, y []*big.Rat, v, w *big.Rat) []*big.Rat {
	t := new(big.Rat).Quo(v, new(big.Rat).Sub(v, w))
	z := make([]*big.Rat, len(x))
	for k := range x {
		z[k] = new(big.Rat).Sub(y[k], x[k])
		z[k].Add(z[k].Mul(z[k], t), x[k])
	}
	return z
}

// ratio is the area of the polygon, which is perpendicular to q, over |q|.
func (p polygon) ratio(q []*big.Rat) *big.Rat {
	sub := func(a, b *big.Rat) *big.Rat { return new(big.Rat).Sub(a, b) }
	if p.dim == 2 {
		// y - x = ratio (-q_2, q_1)
		x, y := p.at[0], p.at[1]
		if q[0].Sign() != 0 {
			return new(big.Rat).Abs(new(big.Rat).Quo(sub(y[1], x[1]), q[0]))
		}
		return new(big.Rat).Abs(new(big.Rat).Quo(sub(y[0], x[0]), q[1]))
	}
	k := 0
	for q[k].Sign() == 0 {
		k++
	}
	a, b := (k+1)%3, (k+2)%3
	o := p.at[0]
	sum := new(big.Rat)
	for i := 1; i+1 < len(p.at); i++ {
		x, y := p.at[i], p.at[i+1]
		s := new(big.Rat).Mul(sub(x[a], o[a]), sub(y[b], o[b]))
		t := new(big.Rat).Mul(sub(x[b], o[b]), sub(y[a], o[a]))
		sum.Add(sum, s.Sub(s, t))
	}
	sum.Quo(sum, q[k])
	return sum.Mul(sum.Abs(sum), big.NewRat(1, 2))
}
