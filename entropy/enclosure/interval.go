package enclosure

import "math/big"

// Interval is a closed interval of real numbers, possibly unbounded. It is
// immutable. The zero value is [Entire].
type Interval struct {
	lo, hi *big.Float // both nil, or neither; lo is never +Inf, hi never -Inf
}

// Entire returns the whole line: the result where an operation is undefined or
// nothing is known.
func Entire() Interval { return Interval{} }

var (
	minusInf = new(big.Float).SetInf(true)
	plusInf  = new(big.Float).SetInf(false)
)

// newInterval takes ownership of its arguments.
func newInterval(lo, hi *big.Float) Interval {
	if lo.IsInf() && hi.IsInf() {
		return Interval{}
	}
	return Interval{lo: lo, hi: hi}
}

// IsEntire reports whether x is the whole line.
func (x Interval) IsEntire() bool { return x.lo == nil }

// IsBounded reports whether both ends are finite.
func (x Interval) IsBounded() bool {
	return x.lo != nil && !x.lo.IsInf() && !x.hi.IsInf()
}

// IsPoint reports whether x holds a single number, which is then exact.
func (x Interval) IsPoint() bool { return x.lo != nil && x.lo.Cmp(x.hi) == 0 }

// Lo returns a copy of the lower end, which may be -Inf.
func (x Interval) Lo() *big.Float {
	if x.lo == nil {
		return new(big.Float).SetInf(true)
	}
	return new(big.Float).Copy(x.lo)
}

// Hi returns a copy of the upper end, which may be +Inf.
func (x Interval) Hi() *big.Float {
	if x.lo == nil {
		return new(big.Float).SetInf(false)
	}
	return new(big.Float).Copy(x.hi)
}

// Sign returns the sign of every number in x and true, or 0 and false where
// x does not settle it. The result (0, true) means that x is exactly zero.
func (x Interval) Sign() (int, bool) {
	switch {
	case x.lo == nil:
		return 0, false
	case x.lo.Sign() > 0:
		return 1, true
	case x.hi.Sign() < 0:
		return -1, true
	case x.lo.Sign() == 0 && x.hi.Sign() == 0:
		return 0, true
	}
	return 0, false
}

// Contains reports whether r lies in x. The comparison is exact.
func (x Interval) Contains(r *big.Rat) bool {
	if x.lo == nil {
		return true
	}
	// An end with p bits is ≤ r exactly when it is ≤ the largest number of p
	// bits that is ≤ r; this avoids expanding ends with large exponents.
	down := new(big.Float).SetPrec(max(x.lo.Prec(), 64)).SetMode(big.ToNegativeInf).SetRat(r)
	if x.lo.Cmp(down) > 0 {
		return false
	}
	up := new(big.Float).SetPrec(max(x.hi.Prec(), 64)).SetMode(big.ToPositiveInf).SetRat(r)
	return x.hi.Cmp(up) >= 0
}

// Within reports whether x is a subset of y.
func (x Interval) Within(y Interval) bool {
	if y.lo == nil {
		return true
	}
	return x.lo != nil && x.lo.Cmp(y.lo) >= 0 && x.hi.Cmp(y.hi) <= 0
}

// Width returns an upper bound of hi - lo, +Inf where x is unbounded.
func (x Interval) Width() *big.Float {
	if !x.IsBounded() {
		return new(big.Float).SetInf(false)
	}
	p := max(x.lo.Prec(), x.hi.Prec(), 64)
	return add(p, big.ToPositiveInf, x.hi, new(big.Float).Neg(x.lo))
}

// Disjoint reports whether a and b have no number in common, so that the two
// values they enclose differ for certain.
func Disjoint(a, b Interval) bool { return Less(a, b) || Less(b, a) }

// Less reports whether every number of a is less than every number of b.
func Less(a, b Interval) bool {
	return a.lo != nil && b.lo != nil && a.hi.Cmp(b.lo) < 0
}

// Union returns the smallest interval that contains a and b.
func Union(a, b Interval) Interval {
	if a.lo == nil || b.lo == nil {
		return Interval{}
	}
	lo, hi := a.lo, a.hi
	if b.lo.Cmp(lo) < 0 {
		lo = b.lo
	}
	if b.hi.Cmp(hi) > 0 {
		hi = b.hi
	}
	return newInterval(lo, hi)
}

// String returns the interval with 17 significant digits, rounded outward.
func (x Interval) String() string {
	lo, hi := x.Text(17)
	return "[" + lo + ", " + hi + "]"
}
