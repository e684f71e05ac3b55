package adaptive

import (
	"math"

	"creaseproof/quadrature/rule"
)

// A kind is the change of variable a panel is integrated in.
type kind uint8

const (
	plain       kind = iota // s = v
	squareLeft              // s = end + h v²
	squareRight             // s = end - h v²
	exponential             // double exponential on [lo, hi]
)

// A panel is one piece of an integral.
type panel struct {
	kind   kind
	end, h float64 // of the square substitutions
	lo, hi float64 // range of v
	order  int     // nodes of the Gauss–Kronrod rule
	depth  int
	left   int // number of halvings in a row next to the left end, -1 if not there
	right  int // the same at the right end
	stall  int // number of halvings in a row that did not help
	tried  bool

	v     Sample
	est   [Width]float64
	decay [Width]float64
	key   float64 // priority

	// The polynomial through the nodes, extrapolated to the two ends, and
	// almost to them, as values of the integrand.
	ends, near [2][Width]float64
	gap        float64 // length between an end and the outermost node
	probed     [2]bool
	doubted    bool // by the audit
}

// width is the length of the panel in s.
func (p *panel) width() float64 {
	switch p.kind {
	case squareLeft, squareRight:
		return p.h * (p.hi - p.lo) * (p.hi + p.lo)
	}
	return p.hi - p.lo
}

// at maps v to s and the derivative of s.
func (p *panel) at(v float64) (s, ds float64) {
	switch p.kind {
	case squareLeft:
		return p.end + p.h*v*v, 2 * p.h * v
	case squareRight:
		return p.end - p.h*v*v, 2 * p.h * v
	}
	return v, 1
}

func kronrod(order int) *rule.Kronrod {
	switch {
	case order <= 15:
		return rule.Kronrod15()
	case order <= 21:
		return rule.Kronrod21()
	}
	return rule.Kronrod31()
}

// resolved is the ratio of neighbouring pairs of Legendre coefficients below
// which a function counts as resolved by geometric decay.
const resolved = 0.5

// apply integrates over a panel by its rule.
func (t *Task) apply(p *panel) error {
	t.fineness = (t.Hi - t.Lo) / p.width()
	if p.kind == exponential {
		return t.applyExponential(p)
	}
	k := kronrod(p.order)
	mid, half := p.lo+(p.hi-p.lo)/2, (p.hi-p.lo)/2
	var g [31]Sample
	for _, i := range k.Order {
		s, ds := p.at(mid + half*k.X[i])
		q := &g[i]
		if err := t.value(s, q); err != nil {
			return err
		}
		for c := range q.Value {
			q.Value[c] *= ds
			q.Size[c] *= ds
			q.Noise[c] *= ds
			if p.kind != plain {
				// s is rounded: the distance from the end is off by that.
				q.Noise[c] += q.Size[c] * endRounding(s, p.end)
			}
		}
	}
	p.v = Sample{}
	p.gap = k.Gap * half
	p.probed, p.doubted = [2]bool{}, false
	for c := range Width {
		var kv, d Sum
		var noise, size, peak float64
		for i, w := range k.Weight {
			f := g[i].Value[c]
			kv.Add(w * f)
			d.Add((w - k.Gauss[i]) * f)
			noise += w * g[i].Noise[c]
			size += w * g[i].Size[c]
			peak = math.Max(peak, math.Abs(f))
		}
		p.v.Value[c], p.v.Noise[c], p.v.Size[c] = kv.Value()*half, noise*half, size*half
		var pair [rule.Top / 2]float64
		for j, w := range k.Coefficient {
			var a float64
			for i := range w {
				a += w[i] * g[i].Value[c]
			}
			pair[j/2] = math.Max(pair[j/2], math.Abs(a))
		}
		p.extrapolate(k, &g, c)
		p.est[c], p.decay[c] = judge(k, math.Abs(d.Value())*half, pair, peak, half)
	}
	return nil
}

// value is the integrand at s. Where it has none because s has been rounded to
// an end of the interval, or almost, it is the one next to it.
func (t *Task) value(s float64, out *Sample) error {
	err := t.F(s, out)
	if err == nil {
		return nil
	}
	ulp := epsilon * math.Max(math.Abs(t.Lo), math.Abs(t.Hi))
	inwards := 1.0
	switch {
	case s-t.Lo <= 2*ulp:
	case t.Hi-s <= 2*ulp:
		inwards = -1
	default:
		return err
	}
	for k := 1.0; k <= 16; k *= 2 {
		*out = Sample{}
		if t.F(s+inwards*k*ulp, out) == nil {
			return nil
		}
	}
	return err
}

// extrapolate fills the extrapolations of component c.
func (p *panel) extrapolate(k *rule.Kronrod, g *[31]Sample, c int) {
	n := len(k.X)
	var lo, hi, nearLo, nearHi float64
	for i := range n {
		lo += k.End[n-1-i] * g[i].Value[c]
		hi += k.End[i] * g[i].Value[c]
		nearLo += k.Near[n-1-i] * g[i].Value[c]
		nearHi += k.Near[i] * g[i].Value[c]
	}
	p.ends[0][c], p.ends[1][c] = lo, hi
	p.near[0][c], p.near[1][c] = nearLo, nearHi
}

// judge turns the distance of a pair of rules and the last pairs of Legendre
// coefficients into an estimate of the error of the better rule.
func judge(k *rule.Kronrod, distance float64, pair [rule.Top / 2]float64, peak, half float64) (est, decay float64) {
	floor := 256 * epsilon * peak
	if pair[0] <= floor {
		return distance, 0
	}
	for j := range len(pair) - 1 {
		if j == 0 || pair[j] > floor {
			decay = math.Max(decay, ratio(pair[j], pair[j+1]))
		}
	}
	if decay <= resolved {
		// What the coefficients come to at the degree of the rule.
		rest := pair[0] * half * math.Pow(decay, float64((k.Degree-k.High)/2))
		return math.Max(rest, distance*math.Min(1, 4*decay*decay)), decay
	}
	return math.Max(10*distance, pair[0]*half), decay
}

func ratio(a, b float64) float64 {
	if a < b {
		return a / b
	}
	return 1
}

// endRounding is the relative error that rounding s to a float causes in its
// distance from the end.
func endRounding(s, end float64) float64 {
	d := math.Abs(s - end)
	r := epsilon / 2 * math.Abs(s)
	if r >= d {
		return 1
	}
	return r / d
}
