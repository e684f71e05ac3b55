package limit

import (
	"errors"
	"fmt"
	"math"
	"sort"

	"creaseproof/quadrature/rule"
)

// Wall is the one-dimensional transition across the plane on which two affine
// branches agree: the first on the side to which ν = q/|q| points, the second
// on the other. It gives no value of u, only derivatives: U is NaN. A Wall is
// not safe for concurrent use.
type Wall struct {
	// Profile is S and its derivative at the distance over eps.
	Profile func(tau float64) (s, slope float64)

	jets []Jet
}

// Smooth implements Smoothing.
func (w *Wall) Smooth(p *Problem, x []float64, eps float64, out *Jet) {
	branches := jetsOf(p, x, &w.jets)
	plus, minus := &branches[0], &branches[1]
	n := len(out.P)
	var norm float64
	for i := range n {
		out.P[i] = plus.P[i] - minus.P[i]
		norm = math.Hypot(norm, out.P[i])
	}
	s, slope := w.Profile((plus.U - minus.U) / (norm * eps))
	out.U = math.NaN()
	for i := range n {
		for j := range n {
			out.H[i*n+j] = slope / eps * out.P[i] * out.P[j] / norm
		}
	}
	for i := range n {
		out.P[i] = minus.P[i] + s*out.P[i]
	}
}

// ErrNoTransition says that no profile connects the two gradients.
var ErrNoTransition = errors.New("no transition connects the two gradients")

// Cells of the table in y = log(s/(1 - s)), in units of cell.
const (
	cell     = 0.25
	cells    = 2 * 92 // y from -23 to 23: there s is 1e-10
	trusted  = 16.0   // beyond this |y| rounding may decide the sign of R
	newtons  = 20
	smallest = 1e-12 // of speeds, relative to the greatest
)

// Optimal is the profile with ds/dtau = speed(s), s = 1/2 at 0, where
// speed(s) = |R(p⁻ + s q)|/|L(q ⊗ ν)| is positive in (0, 1); sign reports the
// sign of R there, which must not change. Where speed is s (1 - s) times a
// smooth positive function the table is accurate to about 1e-14; s beyond
// 1e-10 of its ends is continued by an exponential. Otherwise the error wraps
// ErrNoTransition.
func Optimal(speed func(s float64) float64, sign func(s float64) float64) (func(tau float64) (s, slope float64), error) {
	g := func(y float64) float64 { // dy/dtau
		s, rest := logistic(y)
		return speed(s) / (s * rest)
	}
	lowest := -cell * cells / 2
	k := rule.Kronrod15()
	travel := func(from, to float64) float64 { // the time tau between two y
		h, mid := (to-from)/2, (to+from)/2
		var t float64
		for i, x := range k.X {
			t += k.Weight[i] / g(mid+h*x)
		}
		return t * h
	}
	var top float64
	for y := lowest; y <= -lowest; y += cell {
		top = math.Max(top, g(y))
	}
	first := sign(0.5)
	for y := -trusted; y <= trusted; y += cell / 4 {
		s, _ := logistic(y)
		if v := g(y); !(v > smallest*top) || math.IsInf(v, 0) || sign(s) != first {
			return nil, fmt.Errorf("%w: the residual vanishes at s = %.4g of the segment between them, where a transition would stay for ever", ErrNoTransition, s)
		}
	}
	table := make([]float64, cells+1)
	for i := range cells {
		y := lowest + cell*float64(i)
		table[i+1] = table[i] + travel(y, y+cell)
	}
	shift := table[cells/2]
	for i := range table {
		table[i] -= shift
	}
	if math.IsNaN(table[0]) || math.IsNaN(table[cells]) {
		return nil, fmt.Errorf("%w: the residual is not a real number between them", ErrNoTransition)
	}
	at := func(tau float64) float64 {
		switch {
		case tau <= table[0]:
			return lowest + g(lowest)*(tau-table[0])
		case tau >= table[cells]:
			return -lowest + g(-lowest)*(tau-table[cells])
		}
		i := max(0, sort.SearchFloat64s(table, tau)-1)
		start := lowest + cell*float64(i)
		y := start + cell*(tau-table[i])/(table[i+1]-table[i])
		for range newtons {
			step := (table[i] + travel(start, y) - tau) * g(y)
			y = math.Min(math.Max(y-step, start), start+cell)
			if math.Abs(step) < 1e-15*cell*cells {
				break
			}
		}
		return y
	}
	return func(tau float64) (s, slope float64) {
		y := at(tau)
		s, rest := logistic(y)
		if math.Abs(y) > -lowest {
			return s, s * rest * g(math.Copysign(-lowest, y))
		}
		return s, speed(s)
	}, nil
}

// logistic is 1/(1 + exp(-y)) and 1 minus that.
func logistic(y float64) (s, rest float64) {
	if y < 0 {
		rest, s = logistic(-y)
		return s, rest
	}
	e := math.Exp(-y)
	return 1 / (1 + e), e / (1 + e)
}
