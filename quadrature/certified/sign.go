package certified

import "creaseproof/entropy/interval"

// Positive reports whether a value is shown to be positive for all parameters
// in [0, 1], by halving cells at most depth times.
func (t *Tape) Positive(of Ref, depth int) bool {
	return t.everywhere(of, depth, func(x interval.Interval) bool { return x.Inf() > 0 })
}

// NonNegative reports whether a value is shown not to be negative for all
// parameters in [0, 1], by halving cells at most depth times.
func (t *Tape) NonNegative(of Ref, depth int) bool {
	return t.everywhere(of, depth, func(x interval.Interval) bool { return x.Inf() >= 0 })
}

func (t *Tape) everywhere(of Ref, depth int, ok func(interval.Interval) bool) bool {
	e := t.evaluator(of)
	var walk func(box [2][2]float64, depth int) bool
	walk = func(box [2][2]float64, depth int) bool {
		x := e.at([2]interval.Interval{spread(box[0]), spread(box[1])}, 0, one, 0)[0]
		if !x.IsEmpty() && ok(x) {
			return true
		}
		if depth == 0 || x.Sup() < 0 || t.deps[of] == 0 {
			return false
		}
		k := 0
		if t.deps[of] == 2 || t.deps[of] == 3 && box[1][1]-box[1][0] > box[0][1]-box[0][0] {
			k = 1
		}
		mid := box[k][0] + (box[k][1]-box[k][0])/2
		low, high := box, box
		low[k][1], high[k][0] = mid, mid
		return walk(low, depth-1) && walk(high, depth-1)
	}
	return walk([2][2]float64{{0, 1}, {0, 1}}, depth)
}
