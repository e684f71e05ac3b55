package rule

import "math"

// Top is the number of Legendre coefficients a Kronrod rule offers.
const Top = 8

// A Kronrod is a nested Gauss–Kronrod pair on [-1, 1] with 2n+1 nodes in
// increasing order. The rules are shared: do not change them.
type Kronrod struct {
	// Degree up to which the Kronrod rule is exact.
	Degree int
	// X are the nodes, Weight the Kronrod weights and Gauss the weights of
	// the n-point Gauss–Legendre rule, 0 at nodes that are not its own.
	X, Weight, Gauss []float64
	// Coefficient[k] are weights giving the Legendre coefficient of degree
	// High-k of a function from its values at the nodes.
	Coefficient [Top][]float64
	// High is the highest degree of those coefficients, less than half
	// of Degree.
	High int
	// Gap is the distance from 1 to the outermost node.
	Gap float64
	// End are weights extrapolating the interpolating polynomial to 1, and
	// Near to 1 - Gap/NearFraction; reversed they do so to the other end.
	End, Near []float64
	// Order lists the indices of the nodes from the centre outwards.
	Order []int
}

var (
	k7  = newKronrod(half7[:])
	k15 = newKronrod(half15[:])
	k21 = newKronrod(half21[:])
	k31 = newKronrod(half31[:])
)

// Kronrod7 is the pair of the 3-point Gauss and the 7-point Kronrod rule. It has
// no more than six coefficients; the others are nil.
func Kronrod7() *Kronrod { return k7 }

// Kronrod15 is the pair of the 7-point Gauss and the 15-point Kronrod rule.
func Kronrod15() *Kronrod { return k15 }

// Kronrod21 is the pair of the 10-point Gauss and the 21-point Kronrod rule.
func Kronrod21() *Kronrod { return k21 }

// Kronrod31 is the pair of the 15-point Gauss and the 31-point Kronrod rule.
func Kronrod31() *Kronrod { return k31 }

func newKronrod(half [][3]float64) *Kronrod {
	n := len(half) - 1
	m := 2*n + 1
	k := &Kronrod{
		Degree: 3*n + 1 + n%2,
		X:      make([]float64, m), Weight: make([]float64, m), Gauss: make([]float64, m),
		Order: make([]int, 0, m),
	}
	for i, h := range half {
		k.X[n+i], k.Weight[n+i], k.Gauss[n+i] = h[0], h[1], h[2]
		k.X[n-i], k.Weight[n-i], k.Gauss[n-i] = -h[0], h[1], h[2]
		k.Order = append(k.Order, n+i)
		if i > 0 {
			k.Order = append(k.Order, n-i)
		}
	}
	k.X[n] = 0
	k.Gap = 1 - k.X[m-1]
	k.End = lagrange(k.X, 1)
	k.Near = lagrange(k.X, 1-k.Gap/NearFraction)
	k.High = k.Degree / 2
	for j := range k.Coefficient {
		d := k.High - j
		if d < 0 {
			break
		}
		c := make([]float64, m)
		for i, x := range k.X {
			c[i] = float64(2*d+1) / 2 * k.Weight[i] * legendre(d, x)
		}
		k.Coefficient[j] = c
	}
	return k
}

// NearFraction is the part of the gap at which a function can be compared with
// its extrapolation.
const NearFraction = 4096

// lagrange gives the weights of the interpolating polynomial at t.
func lagrange(x []float64, t float64) []float64 {
	w := make([]float64, len(x))
	for i := range x {
		w[i] = 1
		for j := range x {
			if j != i {
				w[i] *= (t - x[j]) / (x[i] - x[j])
			}
		}
	}
	return w
}

// legendre is the Legendre polynomial of degree n at x.
func legendre(n int, x float64) float64 {
	a, b := 1.0, x
	if n == 0 {
		return a
	}
	for k := 1; k < n; k++ {
		a, b = b, (float64(2*k+1)*x*b-float64(k)*a)/float64(k+1)
	}
	return b
}

// TanhSinh gives the node of the double exponential substitution on [-1, 1]
// at t: its distance from the nearer end, 1 - |tanh(π/2 sinh t)|, and the
// weight dx/dt. Both are accurate to a few units in the last place as long as
// they do not underflow; the node is on the side of the sign of t.
func TanhSinh(t float64) (distance, weight float64) {
	u := math.Pi / 2 * math.Sinh(math.Abs(t))
	e := math.Exp(-2 * u)
	distance = 2 * e / (1 + e)
	weight = math.Pi / 2 * math.Cosh(t) * 4 * e / ((1 + e) * (1 + e))
	return distance, weight
}
