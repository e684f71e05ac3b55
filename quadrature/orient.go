package quadrature

import (
	"math"
	"math/big"
)

// orient is the sign of the area of the triangle a, b, c: 1 if it runs
// counter-clockwise, 0 if the points lie on a line. It is exact: a float
// decides only where its error bound allows (Shewchuk, Adaptive precision
// floating-point arithmetic and fast robust geometric predicates, 1997, gives
// the bound), and rational arithmetic elsewhere.
func orient(a, b, c [2]float64) int {
	l := (a[0] - c[0]) * (b[1] - c[1])
	r := (a[1] - c[1]) * (b[0] - c[0])
	d := l - r
	if bound := (3 + 16*0x1p-53) * 0x1p-53 * (math.Abs(l) + math.Abs(r)); bound > 0x1p-900 && math.Abs(d) > bound {
		if d > 0 {
			return 1
		}
		return -1
	}
	q := func(x float64) *big.Rat { return new(big.Rat).SetFloat64(x) }
	sub := func(x, y float64) *big.Rat { return new(big.Rat).Sub(q(x), q(y)) }
	el := new(big.Rat).Mul(sub(a[0], c[0]), sub(b[1], c[1]))
	er := new(big.Rat).Mul(sub(a[1], c[1]), sub(b[0], c[0]))
	return el.Cmp(er)
}

// between reports whether c, known to be on the line ab, is on the closed
// segment ab.
func between(a, b, c [2]float64) bool {
	return math.Min(a[0], b[0]) <= c[0] && c[0] <= math.Max(a[0], b[0]) &&
		math.Min(a[1], b[1]) <= c[1] && c[1] <= math.Max(a[1], b[1])
}

// meet reports whether the closed segments ab and cd have a point in common.
func meet(a, b, c, d [2]float64) bool {
	o1, o2, o3, o4 := orient(a, b, c), orient(a, b, d), orient(c, d, a), orient(c, d, b)
	if o1*o2 < 0 && o3*o4 < 0 {
		return true
	}
	return o1 == 0 && between(a, b, c) || o2 == 0 && between(a, b, d) ||
		o3 == 0 && between(c, d, a) || o4 == 0 && between(c, d, b)
}
