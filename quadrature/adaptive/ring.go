package adaptive

import (
	"math"
	"slices"
)

// Limits of the trapezoidal rule.
const (
	defaultPeriod = 8
	slowPeriod    = 64 // from here on slow convergence ends the attempt
	longestPeriod = 2048
	probes        = 4
)

// golden is the fractional part of the golden section, the multiples of which
// are spread evenly and stay off every dyadic grid.
const golden = 0.6180339887498949

// ring integrates over a period by doubling the trapezoidal rule. It returns
// false if that does not converge geometrically. The estimate is the distance
// of the last two rules, and the misfit at the probes.
func (t *Task) ring() (Result, bool, error) {
	n := max(defaultPeriod, t.MinPeriod, t.Mesh.period)
	length := t.Hi - t.Lo
	t.fineness = 1
	phase := t.Phase / defaultPeriod // within the widest spacing
	at := func(frac float64) float64 {
		frac -= math.Floor(frac)
		return t.Lo + length*frac
	}
	values := make([]Sample, n, 2*n)
	for i := range values {
		if err := t.F(at(phase+float64(i)/float64(n)), &values[i]); err != nil {
			return Result{}, false, err
		}
	}
	var old [Width]float64 // distance before
	slow := 0
	for {
		half := mean(values, 2)
		full := mean(values, 1)
		var r Result
		var est [Width]float64
		met, bad, hidden := true, false, false
		for c := range Width {
			r.Value[c], r.Noise[c], r.Size[c] = full.Value[c]*length, full.Noise[c]*length, full.Size[c]*length
			est[c] = math.Abs(full.Value[c]-half.Value[c]) * length
			if est[c] > t.tolerance(&r.Sample, c) {
				met = false
				bad = bad || old[c] > 0 && est[c] > 0.15*old[c]
			}
		}
		if met && t.Probe {
			miss, err := t.probe(values, phase, at)
			if err != nil {
				return r, false, err
			}
			for c := range Width {
				if miss[c]*length > t.tolerance(&r.Sample, c) {
					met, hidden = false, true
				} else {
					est[c] = math.Max(est[c], miss[c]*length)
				}
			}
		}
		if bad {
			slow++
		}
		if !met && !hidden && n >= slowPeriod {
			met = t.noisy(values, &r, est)
		}
		if met || t.Work.spent() {
			for c := range Width {
				r.Error[c] = est[c] + r.Noise[c]
			}
			r.Converged = met
			t.Mesh.period = n
			if t.settled(values, length, &r.Sample) {
				t.Mesh.period = n / 2
			}
			return r, true, nil
		}
		if n >= longestPeriod || n >= slowPeriod && slow >= 2 {
			return Result{}, false, nil
		}
		old = est
		t.fineness *= 2
		next := make([]Sample, 2*n)
		for i := range values {
			next[2*i] = values[i]
			if err := t.F(at(phase+(float64(i)+0.5)/float64(n)), &next[2*i+1]); err != nil {
				return Result{}, false, err
			}
		}
		values, n = next, 2*n
	}
}

// settled reports whether half the nodes would have done.
func (t *Task) settled(v []Sample, length float64, s *Sample) bool {
	half, quarter := mean(v, 2), mean(v, 4)
	for c := range Width {
		if math.Abs(half.Value[c]-quarter.Value[c])*length > t.tolerance(s, c)/2 {
			return false
		}
	}
	return true
}

// noisy reports whether what keeps the rule from settling is noise in the
// values, and adds it to the noise of r.
func (t *Task) noisy(v []Sample, r *Result, est [Width]float64) bool {
	for c := range Width {
		if est[c] <= t.tolerance(&r.Sample, c) {
			continue
		}
		level, ok := whiteNoise(v, c)
		level *= t.Hi - t.Lo
		if !ok || est[c] > 2*level || level > 1e-7*r.Size[c] {
			return false
		}
		r.Noise[c] += level
	}
	return true
}

// whiteNoise estimates the noise in the values of a function on a ring from
// the medians of its differences of orders 4, 6 and 8, which agree after
// scaling if noise dominates them. After Moré and Wild, Estimating
// computational noise, SIAM J. Sci. Comput. 33 (2011).
func whiteNoise(v []Sample, c int) (level float64, ok bool) {
	n := len(v)
	d := make([]float64, n)
	for i := range v {
		d[i] = v[i].Value[c]
	}
	var low, high float64
	binomial := map[int]float64{4: 70, 6: 924, 8: 12870}
	for order := 1; order <= 8; order++ {
		first := d[0]
		for i := range n - 1 {
			d[i] = d[i+1] - d[i]
		}
		d[n-1] = first - d[n-1]
		b, use := binomial[order]
		if !use {
			continue
		}
		a := make([]float64, n)
		for i := range d {
			a[i] = math.Abs(d[i])
		}
		slices.Sort(a)
		// 0.67 is the median of a Gaussian of unit variance.
		m := a[n/2] / (0.67 * math.Sqrt(b))
		if order == 4 {
			low, high = m, m
		}
		low, high = math.Min(low, m), math.Max(high, m)
	}
	return high, low > 0 && high <= 2*low
}

func (t *Task) tolerance(s *Sample, c int) float64 {
	return math.Max(math.Max(t.Abs[c], t.Rel*math.Abs(s.Value[c])), s.Noise[c])
}

// mean is the mean of every stride-th sample.
func mean(v []Sample, stride int) Sample {
	var m Sample
	k := float64(len(v) / stride)
	for c := range Width {
		var s, n, z Sum
		for i := 0; i < len(v); i += stride {
			s.Add(v[i].Value[c])
			n.Add(v[i].Noise[c])
			z.Add(v[i].Size[c])
		}
		m.Value[c], m.Noise[c], m.Size[c] = s.Value()/k, n.Value()/k, z.Value()/k
	}
	return m
}

// probe evaluates the integrand off the grid and returns how far it is from
// the trigonometric interpolant.
func (t *Task) probe(v []Sample, phase float64, at func(float64) float64) (miss [Width]float64, err error) {
	n := float64(len(v))
	for k := 1; k <= probes; k++ {
		// The remainder of a golden multiple modulo the spacing is not 0.
		frac := phase + golden*float64(k)
		var q Sample
		if err := t.F(at(frac), &q); err != nil {
			return miss, err
		}
		var p [Width]Sum
		for i := range v {
			d := frac - phase - float64(i)/n
			d -= math.Round(d)
			// The cardinal function of an even number of equidistant nodes.
			w := math.Sin(math.Pi*n*d) / math.Tan(math.Pi*d) / n
			for c := range Width {
				p[c].Add(w * v[i].Value[c])
			}
		}
		for c := range Width {
			if e := math.Abs(p[c].Value() - q.Value[c]); e > 16*epsilon*q.Size[c]+q.Noise[c] {
				miss[c] = math.Max(miss[c], e)
			}
		}
	}
	return miss, nil
}
