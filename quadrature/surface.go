package quadrature

import "math"

// A Surface is a surface in space or a curve in the plane: a Polygon, a Patch
// or a Graph.
type Surface interface {
	// Dimension is the number of coordinates, 2 or 3.
	Dimension() int
	// pieces cuts the surface into parametrised pieces.
	pieces() ([]*piece, error)
}

// A Range is an interval of a parameter, Lo < Hi.
type Range struct{ Lo, Hi float64 }

func (r Range) check(what string) error {
	if !(r.Lo < r.Hi) || math.IsInf(r.Lo, 0) || math.IsInf(r.Hi, 0) {
		return shapeError("%s runs from %v to %v; the ends must be finite and in increasing order", what, r.Lo, r.Hi)
	}
	return nil
}

// A piece is a parametrised part of a surface.
type piece struct {
	name   string
	dim, n int // coordinates, parameters
	over   [2]Range
	// eval fills the position and jac[j] = dx/ds_j.
	eval func(s, x []float64, jac [][]float64)
	// flip turns the normal round.
	flip bool
	// normal is the unit normal of a flat piece, or nil: from the tangents.
	normal []float64
	// vertices is the relative error of the area by the rounding of vertices,
	// in units in the last place.
	vertices float64
	// wedge marks a slice of a triangle, whose area nobody needs.
	wedge bool
}

// A Patch is a parametrised curve in the plane (Dim 2, one parameter) or
// surface in space (Dim 3, two parameters).
//
// The normal follows from the order of the parameters. In space it is
// x_1 × x_2 over its length, where x_j is the derivative of the position by
// the j-th parameter. In the plane it is the tangent turned by -90 degrees,
// nu = (t_y, -t_x): a curve run through counter-clockwise has its normal
// outwards.
type Patch struct {
	Dim    int
	Params []Range
	// Map fills x (Dim long) with the position at s and jac[j] (Dim long) with
	// its derivative by s[j]. It must not keep the slices.
	Map func(s, x []float64, jac [][]float64)
}

// Dimension is p.Dim.
func (p Patch) Dimension() int { return p.Dim }

func (p Patch) pieces() ([]*piece, error) {
	if p.Dim != 2 && p.Dim != 3 {
		return nil, shapeError("a patch lives in 2 or 3 dimensions, not %d", p.Dim)
	}
	if len(p.Params) != p.Dim-1 {
		return nil, shapeError("a patch in %d dimensions has %d parameters, not %d", p.Dim, p.Dim-1, len(p.Params))
	}
	if p.Map == nil {
		return nil, shapeError("a patch without a map")
	}
	q := &piece{dim: p.Dim, n: len(p.Params), eval: p.Map}
	for i, r := range p.Params {
		if err := r.check([]string{"the first parameter", "the second parameter"}[i]); err != nil {
			return nil, err
		}
		q.over[i] = r
	}
	return []*piece{q}, nil
}
