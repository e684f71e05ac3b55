package creases

import (
	"math"
	"math/big"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/quadrature/branches"
)

const (
	// roundedBits is the precision, in bits, of numbers that are not rational.
	roundedBits = 128
	// mostNear bounds the branches of which every three are compared.
	mostNear = 300
)

// nearAffine are the branches as affine functions whose coefficients are rounded
// where they are not rational; exact says that none is. The list is nil where one
// is not affine, or where rounding might decide something: where the differences
// of three branches are nearly, and not exactly, multiples of each other.
func (c *combination) nearAffine() (list []branches.Affine, exact bool) {
	if list = c.affine(); list != nil {
		return list, true
	}
	if len(c.s.shape.branches) > mostNear {
		return nil, false
	}
	n := len(c.set.Coordinates)
	for _, f := range c.s.shape.branches {
		x, err := c.in.Scalar(f.node)
		if err != nil || c.exact.Ring.Err(x) != nil {
			return nil, false
		}
		a := branches.Affine{Gradient: make([]*big.Rat, n)}
		for i := range n {
			v := c.exact.Ring.CoordinateVar(i)
			d, err := c.exact.Ring.Partial(x, v)
			if err != nil {
				return nil, false
			}
			if a.Gradient[i] = c.roundedValue(d); a.Gradient[i] == nil {
				return nil, false
			}
			x = x.Sub(d.Mul(jet.Of(v)))
		}
		if a.Constant = c.roundedValue(x); a.Constant == nil {
			return nil, false
		}
		list = append(list, a)
	}
	if c.ctx.Err() != nil || nearlyCoincident(list) {
		return nil, false
	}
	return list, false
}

// roundedValue is the value of what depends on no coordinate, nil of what does.
func (c *combination) roundedValue(x algebra.Fraction) *big.Rat {
	ring := c.exact.Ring
	if x.Err() != nil || ring.Err(x) != nil || len(ring.Support(x)) > 0 {
		return nil
	}
	if r, ok := x.IsConst(); ok {
		return r.Big()
	}
	i := ring.Enclose(x, nil, precision)
	if i.IsEntire() || !i.IsBounded() {
		return nil
	}
	return roundedMiddle(i.Lo(), i.Hi())
}

// roundedMiddle is the middle of an interval. The bits left out of it make equal
// numbers equal that are computed in different ways.
func roundedMiddle(lo, hi *big.Float) *big.Rat {
	mid := new(big.Float).SetPrec(2*precision).Add(lo, hi)
	mid.Quo(mid, big.NewFloat(2))
	r, _ := mid.SetPrec(roundedBits).Rat(nil)
	return r
}

// nearlyCoincident reports whether the differences of three branches are
// multiples of each other to rounding, but not exactly.
func nearlyCoincident(list []branches.Affine) bool {
	var at [][]float64
	for _, f := range list {
		var row []float64
		for _, g := range append(f.Gradient[:len(f.Gradient):len(f.Gradient)], f.Constant) {
			x, _ := g.Float64()
			row = append(row, x)
		}
		at = append(at, row)
	}
	const small = 1e-9
	d, e := make([]float64, len(at[0])), make([]float64, len(at[0]))
	for i := range at {
		for j := range i {
			dd, scale := 0.0, 0.0
			for m := range d {
				d[m] = at[j][m] - at[i][m]
				dd += d[m] * d[m]
				scale += at[j][m]*at[j][m] + at[i][m]*at[i][m]
			}
			if !(dd > small*small*scale) {
				return true
			}
			for k := range j {
				de, ee := 0.0, 0.0
				for m := range e {
					e[m] = at[k][m] - at[i][m]
					de += d[m] * e[m]
					ee += e[m] * e[m]
				}
				off := 0.0
				for m := range e {
					off = math.Max(off, math.Abs(e[m]-de/dd*d[m]))
				}
				if !(off > small*math.Sqrt(ee)) && !list[i].Aligned(list[j], list[k]) {
					return true
				}
			}
		}
	}
	return false
}
