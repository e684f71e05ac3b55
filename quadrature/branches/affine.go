package branches

import (
	"context"
	"fmt"
	"math/big"
)

// Affine is the function Gradient·x + Constant.
type Affine struct {
	Gradient []*big.Rat
	Constant *big.Rat
}

// At is the value at x.
func (f Affine) At(x []*big.Rat) *big.Rat {
	v := new(big.Rat).Set(f.Constant)
	t := new(big.Rat)
	for i, g := range f.Gradient {
		if g.Sign() != 0 {
			v.Add(v, t.Mul(g, x[i]))
		}
	}
	return v
}

// minus is f - g.
func (f Affine) minus(g Affine) Affine {
	d := Affine{make([]*big.Rat, len(f.Gradient)), new(big.Rat).Sub(f.Constant, g.Constant)}
	for i := range d.Gradient {
		d.Gradient[i] = new(big.Rat).Sub(f.Gradient[i], g.Gradient[i])
	}
	return d
}

// flat reports whether f is constant.
func (f Affine) flat() bool {
	for _, g := range f.Gradient {
		if g.Sign() != 0 {
			return false
		}
	}
	return true
}

// multiple is the c with f = c g, where there is one; g is not constant.
func (f Affine) multiple(g Affine) (*big.Rat, bool) {
	var c *big.Rat
	t := new(big.Rat)
	for i, x := range g.Gradient {
		if c == nil && x.Sign() != 0 {
			c = new(big.Rat).Quo(f.Gradient[i], x)
		}
	}
	for i, x := range g.Gradient {
		if t.Mul(c, x).Cmp(f.Gradient[i]) != 0 {
			return nil, false
		}
	}
	return c, t.Mul(c, g.Constant).Cmp(f.Constant) == 0
}

// Box is the product of the intervals from Lo[i] to Hi[i].
type Box struct{ Lo, Hi []*big.Rat }

// Face is a flat part of the sheet of two branches.
type Face struct {
	// Branches are the numbers of the two, in increasing order, from 0.
	Branches [2]int
	// Plus and Minus say which of them u is on the side of the normal and on
	// the other. The normal is that of Jump.
	Plus, Minus int
	// Vertices are the corners of a convex polygon in order, in the plane the
	// two ends of a segment.
	Vertices [][]*big.Rat
	// Jump is the gradient of the first branch minus that of the second.
	Jump []*big.Rat
	// Ratio is the area (in the plane the length) over the length of Jump.
	Ratio *big.Rat
}

// SquaredArea is the square of the area.
func (f *Face) SquaredArea() *big.Rat {
	s, t := new(big.Rat), new(big.Rat)
	for _, q := range f.Jump {
		s.Add(s, t.Mul(q, q))
	}
	return s.Mul(s, t.Mul(f.Ratio, f.Ratio))
}

// SameError says that two branches are the same function.
type SameError struct{ First, Second int }

func (e *SameError) Error() string {
	return fmt.Sprintf("branches %d and %d are the same function", e.First+1, e.Second+1)
}

// BoundaryError says that a sheet lies in a side of the box, so that it is
// neither inside nor outside: u jumps there only if it is continued beyond.
type BoundaryError struct {
	First, Second int // branches
	Coordinate    int
	High          bool // it is the upper end of the coordinate
}

func (e *BoundaryError) Error() string {
	end := "lower"
	if e.High {
		end = "upper"
	}
	return fmt.Sprintf("the sheet of branches %d and %d lies in the side of the box at the %s end of direction %d", e.First+1, e.Second+1, end, e.Coordinate+1)
}

// mostFaces bounds the number of faces, and mostPieces that of pieces that the
// plane of a pair is cut into.
const (
	mostFaces  = 100000
	mostPieces = 10000
)

// Faces finds all sheets of the tree over affine branches in a box of two or
// three dimensions, in the order of the pairs. Two equal branches are a
// *SameError, and a sheet in a side of the box is a *BoundaryError. Faces of one
// pair do not overlap.
func Faces(ctx context.Context, list []Affine, t *Tree, box Box) ([]Face, error) {
	n := len(box.Lo)
	if n != 2 && n != 3 || len(box.Hi) != n {
		return nil, fmt.Errorf("branches: a box of %d dimensions, not two or three", n)
	}
	for i := range n {
		if box.Lo[i].Cmp(box.Hi[i]) >= 0 {
			return nil, fmt.Errorf("branches: the box is empty in direction %d", i+1)
		}
	}
	for _, f := range list {
		if len(f.Gradient) != n {
			return nil, fmt.Errorf("branches: a gradient of %d components in %d dimensions", len(f.Gradient), n)
		}
	}
	var out []Face
	float := rounded(list)
	for i := range list {
		for j := i + 1; j < len(list); j++ {
			if err := ctx.Err(); err != nil {
				return nil, err
			}
			d := list[i].minus(list[j])
			if d.flat() {
				if d.Constant.Sign() == 0 {
					return nil, &SameError{i, j}
				}
				continue
			}
			s := &sheet{ctx: ctx, list: list, float: float, tree: t, i: i, j: j, across: d}
			if err := s.find(box); err != nil {
				return nil, err
			}
			if out = append(out, s.faces...); len(out) > mostFaces {
				return nil, fmt.Errorf("branches: more than %d faces", mostFaces)
			}
		}
	}
	return out, nil
}

// Aligned reports whether g - f and h - f are multiples of each other, so that
// the three have the same value wherever two of them have.
func (f Affine) Aligned(g, h Affine) bool {
	a, b := g.minus(f), h.minus(f)
	x, y := append(a.Gradient[:len(a.Gradient):len(a.Gradient)], a.Constant), append(b.Gradient[:len(b.Gradient):len(b.Gradient)], b.Constant)
	s, t := new(big.Rat), new(big.Rat)
	for i := range x {
		for j := range i {
			if s.Mul(x[i], y[j]).Cmp(t.Mul(x[j], y[i])) != 0 {
				return false
			}
		}
	}
	return true
}
