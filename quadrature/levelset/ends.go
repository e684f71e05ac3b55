package levelset

import "math"

// beyond adds to the estimates of a leaf what its inner range may do between an
// end of the outer range of the sheet and the row next to it. Where a condition is
// nearly parallel to the inner direction a little beyond the end, the range is
// that of a root up to a short stretch, which no row may show. At places close
// to the end the range is compared with the polynomial through the rows, and
// the largest difference counts on all of the stretch.
func (e *evaluator) beyond(l *leaf) {
	l.edge = false
	if l.inner < 0 {
		return
	}
	g := e.rules[l.np]
	base := 0.0
	for i, w := range g.w {
		_, _, d := l.mapOuter.at(l.p0 + (l.p1-l.p0)*g.x[i])
		base += w * d * (l.p1 - l.p0) * (l.x1 - l.x0) * e.widths[i] * (l.q1 - l.q0)
	}
	if !(base > 0) {
		return
	}
	missed := 0.0
	if l.p0 == 0 {
		missed += e.stretch(l, g, 0, 0)
	}
	if l.p1 == 1 {
		missed += e.stretch(l, g, 1, l.np-1)
	}
	for c, size := range l.size {
		if more := missed * (l.q1 - l.q0) * size / base; more > 4*l.noise[c] {
			l.edge = l.edge || more > l.estimate[c]
			l.estimate[c] += more
		}
	}
}

// stretch bounds the area of the base that is not seen between an end, 0 or 1 of
// the parameter of the leaf, and its row next to it.
func (e *evaluator) stretch(l *leaf, g *gauss, end float64, row int) float64 {
	length := math.Abs(e.places[row] - l.x0)
	if end == 1 {
		length = math.Abs(l.x1 - e.places[row])
	}
	worst := 0.0
	for _, part := range [3]float64{0.5, 0.1, 0.01} {
		t := end + part*(g.x[row]-end)
		v, rest, _ := l.mapOuter.at(l.p0 + (l.p1-l.p0)*t)
		x := l.x0 + (l.x1-l.x0)*v
		if rest < v {
			x = l.x1 - (l.x1-l.x0)*rest
		}
		a, b := e.inside(l.sheet, x)
		worst = max(worst, math.Abs(b-a-g.through(e.widths, t))-0x1p-46*(math.Abs(a)+math.Abs(b)))
	}
	return worst * length
}

// through is the value at t of the polynomial with the given values at the
// points of the rule, by the barycentric formula (Wang and Xiang, Math. Comp. 81
// (2012) 861: the weights of Gauss-Legendre points).
func (g *gauss) through(values []float64, t float64) float64 {
	var above, below float64
	sign := 1.0
	for i, x := range g.x {
		if t == x {
			return values[i]
		}
		w := sign * math.Sqrt(x*(1-x)*g.w[i]) / (t - x)
		above += w * values[i]
		below += w
		sign = -sign
	}
	return above / below
}
