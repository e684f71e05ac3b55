package adaptive

import (
	"math"

	"creaseproof/quadrature/rule"
)

const (
	finestLevel = 6   // step 2^-finestLevel
	farthest    = 6.0 // largest |t|
	tiny        = 1e-12
	slowest     = 0.1
)

// side is one half of a double exponential rule.
type side struct {
	limit float64 // no node beyond this t
	last  Sample  // values at the outermost node
	dist  float64 // distance of the outermost node from the end
	reach float64 // its t
}

// applyExponential integrates over [p.lo, p.hi] by nested levels of the double
// exponential rule, stopping when two levels agree to the tolerance. The
// estimate is the distance of the last two levels, or a part of that of the two
// before where it does not fall fast, the tails cut off, and the
// rounding of the distances from the ends.
func (t *Task) applyExponential(p *panel) error {
	half := (p.hi - p.lo) / 2
	var total [Width]Sum
	var noise, size, value, old, before [Width]float64
	sides := [2]side{{limit: farthest}, {limit: farthest}}
	node := func(k int, tt float64) (done bool, err error) {
		sd := &sides[k]
		d, w := rule.TanhSinh(tt)
		d *= half
		s, end := p.lo+d, p.lo
		if k == 1 {
			s, end = p.hi-d, p.hi
		}
		near := d <= tiny*(math.Abs(p.lo)+math.Abs(p.hi)+half)
		if s == end || d == 0 {
			return true, nil
		}
		var q Sample
		if err := t.F(s, &q); err != nil {
			if near {
				return true, nil
			}
			return false, err
		}
		negligible := true
		r := endRounding(s, end)
		for c := range Width {
			total[c].Add(w * q.Value[c])
			size[c] += w * q.Size[c]
			noise[c] += w * (q.Noise[c] + r*q.Size[c])
			if w*q.Size[c] > epsilon/64*size[c] {
				negligible = false
			}
		}
		if tt > sd.reach {
			sd.last, sd.dist, sd.reach = q, d, tt
		}
		return negligible, nil
	}
	step := 0.5
	for level := 1; level <= finestLevel; level++ {
		first, stride := 0, 1
		if level > 1 {
			first, stride = 1, 2
		}
		for k := range sides {
			for i := first; ; i += stride {
				tt := float64(i) * step
				if tt > sides[k].limit {
					break
				}
				if i == 0 && k == 1 {
					continue
				}
				done, err := node(k, tt)
				if err != nil {
					return err
				}
				if done && tt > 1 {
					if level == 1 {
						sides[k].limit = tt
					}
					break
				}
			}
		}
		ok := true
		for c := range Width {
			value[c] = total[c].Value() * step * half
			d := math.Abs(value[c] - old[c])
			if level == 1 {
				d = size[c] * step * half
			}
			// The distances should fall quadratically.
			p.est[c] = math.Max(d, slowest*before[c])
			before[c] = d
			p.v.Value[c] = value[c]
			p.v.Size[c] = size[c] * step * half
			p.v.Noise[c] = noise[c] * step * half
			if p.est[c] > math.Max(t.Abs[c], math.Max(t.Rel/8*p.v.Size[c], p.v.Noise[c])) {
				ok = false
			}
			p.decay[c] = 0
		}
		if ok || t.Work.spent() {
			break
		}
		old = value
		step /= 2
	}
	p.gap = 0
	for k := range sides {
		for c := range Width {
			p.ends[k][c] = sides[k].last.Value[c]
			p.v.Noise[c] += sides[k].tail(c)
		}
	}
	return nil
}

// tail bounds the integral from the outermost node to the end for an integrand
// that grows towards the end no faster than the power -3/4 of the distance.
func (s *side) tail(c int) float64 { return 4 * s.last.Size[c] * s.dist }

func (w *Work) spent() bool { return w != nil && w.Spent() }
