package creases

import (
	"fmt"
	"math"
	"slices"

	"creaseproof/quadrature/branches"
	"creaseproof/quadrature/levelset"
)

// The jumps counted are those inside the open domain. A surface that runs along
// the boundary is refused, whether it is found exactly (branches.BoundaryError),
// to rounding (flatBox.along, alongSide), or where the condition of a round domain
// vanishes on it.

// alongSide finds a flat side of the domain on a part of which phi vanishes to
// rounding, and where it could be u: by points spread over it, of which more than
// one have to show it. What they show is a place in the names of the case.
func (c *combination) alongSide(d *domain, p part) (place string, found bool) {
	const most = 256
	n := len(d.box)
	x, g := make([]float64, n), make([]float64, n)
	for k, b := range d.box {
		if slices.Contains(d.round, k) {
			continue
		}
		for i, end := range b {
			hits := 0
			for m := range most {
				at := m + 1
				for j, r := range d.box {
					if j == k {
						continue
					}
					_, f := math.Modf(0.5 + float64(at)*[2]float64{0.7548776662466927, 0.5698402909980532}[at2(j, k)])
					x[j] = r[0] + (0.002+0.996*f)*(r[1]-r[0])
				}
				x[k] = end
				if onZero(p.phi, x, g, k, b[1]-b[0]) && satisfied(p.systems, x) {
					if hits++; hits == 2 {
						return c.sidePlace(k, i == 1), true
					}
				}
			}
		}
	}
	return "", false
}

// at2 numbers the coordinates other than k.
func at2(j, k int) int {
	if j > k {
		return j - 1
	}
	return j
}

// onZero reports whether x is on the zero set, to rounding, which is there
// perpendicular to coordinate k.
func onZero(phi levelset.Function, x, g []float64, k int, width float64) bool {
	phi.Gradient(g, x)
	steep := math.Abs(g[k])
	for j, v := range g {
		if j != k && !(math.Abs(v) <= 1e-9*steep) {
			return false
		}
	}
	return steep > 0 && math.Abs(phi.Value(x)) <= 1e-13*steep*(width+math.Abs(x[k]))
}

// satisfied reports whether all conditions of a system hold.
func satisfied(systems [][]levelset.Function, x []float64) bool {
	return slices.ContainsFunc(systems, func(list []levelset.Function) bool {
		return !slices.ContainsFunc(list, func(f levelset.Function) bool { return !(f.Value(x) > 0) })
	})
}

// flatInSide finds a flat side of the domain that one of the sheets lies in.
func (c *combination) flatInSide(d *domain, sheets []Sheet) (place string, found bool) {
	for _, s := range sheets {
		for k, b := range d.box {
			if slices.Contains(d.round, k) || s.Box == nil {
				continue
			}
			for i, end := range b {
				least := 1e-13 * (b[1] - b[0] + math.Abs(end))
				if math.Abs(s.Box[k][0]-end) <= least && math.Abs(s.Box[k][1]-end) <= least {
					return c.sidePlace(k, i == 1), true
				}
			}
		}
	}
	return "", false
}

// sidePlace names a flat side of the domain.
func (c *combination) sidePlace(k int, high bool) string {
	h := &c.s.shape
	ends := h.heights
	if h.box != nil {
		ends = h.box[k]
	}
	end := ends[0]
	if high {
		end = ends[1]
	}
	return fmt.Sprintf(", where %s = %s", c.set.Coordinates[k], end.text.S)
}

// inSide is the reason to refuse a crease in a side of the domain.
func (c *combination) inSide(e *branches.BoundaryError) string {
	return fmt.Sprintf("branches %d and %d: %s", e.First+1, e.Second+1, c.runsAlong(c.sidePlace(e.Coordinate, e.High)))
}

// onBoundary is the reason to refuse a surface on which the condition of a round
// domain vanishes.
func (c *combination) onBoundary(v *levelset.VanishingError) string {
	return c.runsAlong(c.place(v.Point, nil))
}

// runsAlong is what to say of a surface in the boundary of the domain.
func (c *combination) runsAlong(place string) string {
	return "the surface runs along the boundary of the domain" + place + c.where() + ": choose a domain that it crosses, or ends inside of"
}
