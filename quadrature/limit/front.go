package limit

import "math"

// Front is the smooth front ±2 eps log Σ exp(±u_i/(2 eps)), plus for the
// maximum of the branches and minus for the minimum. A branch whose weight
// underflows is left out, whatever its derivatives. A Front is not safe for
// concurrent use.
type Front struct {
	Min bool

	w, d []float64
	jets []Jet
}

// Smooth implements Smoothing.
func (f *Front) Smooth(p *Problem, x []float64, eps float64, out *Jet) {
	branches := jetsOf(p, x, &f.jets)
	sign := 1.0
	if f.Min {
		sign = -1
	}
	n := len(out.P)
	if len(f.w) < len(branches) || len(f.d) < n {
		f.w, f.d = make([]float64, len(branches)), make([]float64, n)
	}
	w := f.w[:len(branches)]
	top := math.Inf(-1)
	for i := range branches {
		w[i] = sign * branches[i].U / (2 * eps)
		top = math.Max(top, w[i])
	}
	var total float64
	for i := range w {
		w[i] = math.Exp(w[i] - top)
		total += w[i]
	}
	out.clear()
	out.U = sign * 2 * eps * (top + math.Log(total))
	for i := range w {
		if w[i] /= total; w[i] == 0 {
			continue
		}
		for a, p := range branches[i].P {
			out.P[a] += w[i] * p
		}
		for a, h := range branches[i].H {
			out.H[a] += w[i] * h
		}
	}
	for i := range w {
		if w[i] == 0 {
			continue
		}
		for a, p := range branches[i].P {
			f.d[a] = p - out.P[a]
		}
		c := sign * w[i] / (2 * eps)
		for a := range n {
			for b := range n {
				out.H[a*n+b] += c * f.d[a] * f.d[b]
			}
		}
	}
}
