package limit

import "math"

// Rate is the order at which a gap falls: |gap| is about a constant times
// eps^Value.
type Rate struct {
	Value float64
	// Deviation is the standard error of Value, NaN where two energies only
	// determine it.
	Deviation float64
	Used      int // energies
}

// FitRate fits log|gap| against log eps by least squares over the entries with
// |gap| more than ten times the error. It is nil where there are fewer than
// two, or where the last gap is not above its error: then the gap is below
// rounding, or nothing can be said.
func FitRate(eps, gap, err []float64) *Rate {
	last := len(eps) - 1
	if last < 1 || !(math.Abs(gap[last]) > err[last]) {
		return nil
	}
	var x, y []float64
	for i := range eps {
		if math.Abs(gap[i]) > 10*err[i] {
			x, y = append(x, math.Log(eps[i])), append(y, math.Log(math.Abs(gap[i])))
		}
	}
	n := float64(len(x))
	if n < 2 {
		return nil
	}
	var mx, my, sxx, sxy, rss float64
	for i := range x {
		mx += x[i] / n
		my += y[i] / n
	}
	for i := range x {
		sxx += (x[i] - mx) * (x[i] - mx)
		sxy += (x[i] - mx) * (y[i] - my)
	}
	r := &Rate{Value: sxy / sxx, Deviation: math.NaN(), Used: len(x)}
	for i := range x {
		d := y[i] - my - r.Value*(x[i]-mx)
		rss += d * d
	}
	if len(x) > 2 {
		r.Deviation = math.Sqrt(rss / (n - 2) / sxx)
	}
	return r
}

// Extrapolate is the value at eps = 0 of the polynomial through the last (at
// most four) energies, and an estimate of its error: the distance from the
// polynomial through one energy less, and the errors of the energies as they
// are amplified. Where without the last energy the same estimate would have
// been too small by a factor of ten, eps is not small yet, and the estimate is
// no less than what the last energy moved the value by. One energy alone is its
// own limit, with an infinite error.
func Extrapolate(eps, energy, err []float64) (limit, estimate float64) {
	limit, estimate = extrapolate(eps, energy, err)
	if n := len(eps) - 1; n >= 2 {
		before, e := extrapolate(eps[:n], energy[:n], err[:n])
		if moved := math.Abs(limit - before); moved > 10*e {
			estimate = math.Max(estimate, moved)
		}
	}
	return limit, estimate
}

func extrapolate(eps, energy, err []float64) (limit, estimate float64) {
	k := min(len(eps), 4)
	if k == 0 {
		return math.NaN(), math.Inf(1)
	}
	at := func(eps, energy, err []float64) (v, e float64) {
		for i := range eps {
			c := 1.0
			for j := range eps {
				if j != i {
					c *= eps[j] / (eps[j] - eps[i])
				}
			}
			v += c * energy[i]
			e += math.Abs(c) * err[i]
		}
		return v, e
	}
	n := len(eps)
	limit, noise := at(eps[n-k:], energy[n-k:], err[n-k:])
	if k == 1 {
		return limit, math.Inf(1)
	}
	less, _ := at(eps[n-k+1:], energy[n-k+1:], err[n-k+1:])
	return limit, math.Abs(limit-less) + noise
}
