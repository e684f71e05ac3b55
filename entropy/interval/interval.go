package interval

import (
	"errors"
	"fmt"
	"math"
	"strconv"
)

// ErrUndefined is returned by constructors whose arguments describe no
// interval: the exception UndefinedOperation of the standard.
var ErrUndefined = errors.New("interval: the bounds describe no interval")

// Interval is a closed interval of real numbers, the empty set, or a closed
// half-line, or the whole line: {x real : lo <= x <= hi}, where lo may be -Inf
// and hi may be +Inf. An infinite bound is no element of the set. The zero
// value is [0, 0]. Intervals are values and == compares them as sets.
type Interval struct {
	lo, hi float64 // the empty set has lo = +Inf, hi = -Inf; no bound is NaN or -0
}

var inf = math.Inf(1)

// Empty returns the empty set.
func Empty() Interval { return Interval{inf, -inf} }

// Entire returns the whole line, [-Inf, +Inf].
func Entire() Interval { return Interval{-inf, inf} }

// New returns [lo, hi]. Where lo > hi, a bound is NaN, lo = +Inf or hi = -Inf,
// it returns the empty set and [ErrUndefined]. The sign of a zero is dropped.
func New(lo, hi float64) (Interval, error) {
	if !(lo <= hi) || lo == inf || hi == -inf {
		return Empty(), fmt.Errorf("%w: [%v, %v]", ErrUndefined, lo, hi)
	}
	return make2(lo, hi), nil
}

// Point returns [x, x], or the empty set where x is NaN or infinite.
func Point(x float64) Interval {
	if x-x != 0 {
		return Empty()
	}
	return Interval{x + 0, x + 0}
}

// make2 drops the signs of zeros.
func make2(lo, hi float64) Interval { return Interval{lo + 0, hi + 0} }

// Inf returns the infimum: +Inf for the empty set.
func (x Interval) Inf() float64 { return x.lo }

// Sup returns the supremum: -Inf for the empty set.
func (x Interval) Sup() float64 { return x.hi }

// Mid returns the midpoint, rounded to nearest. It is finite and an element of
// x: 0 for the whole line, and the largest finite number of the right sign for a
// half-line. It is NaN for the empty set.
func (x Interval) Mid() float64 {
	switch {
	case x.IsEmpty():
		return math.NaN()
	case x.IsEntire():
		return 0
	case x.lo == -inf:
		return -math.MaxFloat64
	case x.hi == inf:
		return math.MaxFloat64
	}
	if m := x.lo + x.hi; m-m == 0 {
		// Halving rounds only where the sum is subnormal and odd.
		return min(max(m/2, x.lo), x.hi) + 0
	}
	return x.lo/2 + x.hi/2
}

// Rad returns the smallest float64 r such that [m-r, m+r] contains x, where m
// is the midpoint: +Inf for an unbounded interval, NaN for the empty set.
func (x Interval) Rad() float64 {
	if x.IsEmpty() {
		return math.NaN()
	}
	m := x.Mid()
	return max(subUp(x.hi, m), subUp(m, x.lo))
}

// Wid returns the width hi - lo, rounded upward; NaN for the empty set.
func (x Interval) Wid() float64 {
	if x.IsEmpty() {
		return math.NaN()
	}
	return subUp(x.hi, x.lo)
}

// Mag returns the largest absolute value in x, +Inf for an unbounded interval
// and NaN for the empty set.
func (x Interval) Mag() float64 {
	if x.IsEmpty() {
		return math.NaN()
	}
	return max(math.Abs(x.lo), math.Abs(x.hi))
}

// Mig returns the smallest absolute value in x, NaN for the empty set.
func (x Interval) Mig() float64 {
	switch {
	case x.IsEmpty():
		return math.NaN()
	case x.lo > 0:
		return x.lo
	case x.hi < 0:
		return -x.hi
	}
	return 0
}

// String returns the interval as "[lo, hi]" with bounds that read back as the
// same float64 numbers, "[empty]" or "[entire]".
func (x Interval) String() string {
	switch {
	case x.IsEmpty():
		return "[empty]"
	case x.IsEntire():
		return "[entire]"
	}
	return "[" + strconv.FormatFloat(x.lo, 'g', -1, 64) + ", " + strconv.FormatFloat(x.hi, 'g', -1, 64) + "]"
}
