package levelset

import "creaseproof/entropy/interval"

// Interval is a set of real numbers as in package interval.
type Interval = interval.Interval

// span returns [lo, hi]; the whole line where the bounds describe no interval.
func span(lo, hi float64) Interval {
	r, err := interval.New(lo, hi)
	if err != nil {
		return interval.Entire()
	}
	return r
}

// certain reports whether a is not empty and contains no zero.
func certain(a Interval) bool { return !a.IsEmpty() && (a.Inf() > 0 || a.Sup() < 0) }

// signed returns a or, where sign is negative, -a.
func signed(a Interval, sign float64) Interval {
	if sign < 0 {
		return a.Neg()
	}
	return a
}
