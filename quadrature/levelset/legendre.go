package levelset

import (
	"math"
	"sync"
)

// maxOrder is the largest number of Gauss–Legendre nodes in one direction.
const maxOrder = 32

// A gauss is the Gauss–Legendre rule with n nodes on [0, 1], weights adding up
// to 1, and the rows that give six Legendre coefficients of a function from
// its values at the nodes: those of the degrees n-1 and n-2, of the two degrees
// below, and of two degrees about n/2 below.
type gauss struct {
	n    int
	x, w []float64
	rows [3][2][]float64 // tail, before it, middle
}

// rules holds the rules by their order, from 3 on.
var rules = sync.OnceValue(func() *[maxOrder + 1]*gauss {
	r := new([maxOrder + 1]*gauss)
	for n := 3; n <= maxOrder; n++ {
		r[n] = newGauss(n)
	}
	return r
})

// newGauss computes the rule by Newton's method on the Legendre polynomial.
func newGauss(n int) *gauss {
	r := &gauss{n: n, x: make([]float64, n), w: make([]float64, n)}
	p := make([]float64, n+1)
	for i := range n {
		x := -math.Cos(math.Pi * (float64(i) + 0.75) / (float64(n) + 0.5))
		var d float64
		for range 8 {
			legendre(p, x)
			d = float64(n) * (x*p[n] - p[n-1]) / (x*x - 1)
			x -= p[n] / d
		}
		r.x[i] = (1 + x) / 2
		r.w[i] = 1 / ((1 - x*x) * d * d)
	}
	degrees := [3][2]int{{n - 1, n - 2}, {max(n-3, 0), max(n-4, 0)}, {max(n/2-1, 0), max(n/2-2, 0)}}
	for s := range r.rows {
		for j := range r.rows[s] {
			r.rows[s][j] = make([]float64, n)
			for i := range n {
				legendre(p, 2*r.x[i]-1)
				l := degrees[s][j]
				r.rows[s][j][i] = float64(2*l+1) * r.w[i] * p[l]
			}
		}
	}
	return r
}

// legendre fills p with the values of the Legendre polynomials at x.
func legendre(p []float64, x float64) {
	p[0], p[1] = 1, x
	for l := 1; l+1 < len(p); l++ {
		p[l+1] = (float64(2*l+1)*x*p[l] - float64(l)*p[l-1]) / float64(l+1)
	}
}

// A spread is a polynomial map of [0, 1] onto itself, with derivative zero at
// the ends at which the integrand is like a power of the distance.
type spread uint8

const (
	atLow  spread = 1 // quadratic at 0
	atHigh spread = 2 // quadratic at 1
)

// at returns the image of t, its distance from 1, and the derivative.
func (s spread) at(t float64) (v, rest, d float64) {
	r := 1 - t
	switch s {
	case atLow:
		return t * t, r * (1 + t), 2 * t
	case atHigh:
		return t * (1 + r), r * r, 2 * r
	case atLow | atHigh:
		sin, cos := math.Sincos(math.Pi / 2 * t)
		return sin * sin, cos * cos, math.Pi * sin * cos
	}
	return t, r, 1
}

// tails turns the sizes of Legendre coefficients on n nodes into an estimate of
// the error of the rule, and the number of nodes that should bring it below
// want.
//
// Coefficients that fall like r^-j make the error of the rule about r^(-2n),
// the square of the tail. The rate is the slower one of that from the middle to
// the tail and that at the tail. The estimate is of the order r^(-3n/2), so that
// it stays above the error when the decay is misjudged, and nearer to r^-n for
// few nodes, which say little about the decay. Where the coefficients do not
// fall geometrically it is the sum of a tail that falls no faster than 1/j.
func tails(n int, t [3]float64, want float64) (estimate float64, order int) {
	tail, before, mid := t[0], t[1], t[2]
	if tail == 0 {
		return 0, n
	}
	half := float64(n) / 2
	ratio := max(tail/mid, math.Pow(tail/before, half/2)) // r^(-n/2)
	if !(ratio < 0.1) {
		if n < 10 {
			return float64(n) * tail, n + 6 // too early to tell
		}
		return float64(n) * tail, maxOrder + 1
	}
	estimate = 4 * tail * math.Pow(ratio, trust(n))
	for order = n; order <= maxOrder && want > 0; order++ {
		more := float64(order - n)
		if 4*tail*math.Pow(ratio, more/half+trust(order)*(1+more/(2*half))) <= want {
			break
		}
	}
	return estimate, order
}

// trust is the part of the gain beyond the tail that the decay of the
// coefficients on n nodes is trusted with.
func trust(n int) float64 { return min(1, float64(n-4)/10) }
