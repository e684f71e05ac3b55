package interval

// IsEmpty reports whether x has no element.
func (x Interval) IsEmpty() bool { return x.lo > x.hi }

// IsEntire reports whether x is the whole line.
func (x Interval) IsEntire() bool { return x.lo == -inf && x.hi == inf }

// IsSingleton reports whether x has exactly one element.
func (x Interval) IsSingleton() bool { return x.lo == x.hi }

// IsBounded reports whether x is empty or has two finite bounds: the
// isCommonInterval of the standard, and the empty set.
func (x Interval) IsBounded() bool { return x.IsEmpty() || x.lo > -inf && x.hi < inf }

// Contains reports whether the number m is an element of x: isMember.
// It is false for NaN and the infinities.
func (x Interval) Contains(m float64) bool { return m-m == 0 && x.lo <= m && m <= x.hi }

// Equal reports whether x and y are the same set.
func (x Interval) Equal(y Interval) bool { return x == y }

// Subset reports whether every element of x is one of y.
func (x Interval) Subset(y Interval) bool { return x.IsEmpty() || y.lo <= x.lo && x.hi <= y.hi }

// Interior reports whether x lies in the topological interior of y. Every set
// lies in the interior of the whole line, and the empty set in that of every set.
func (x Interval) Interior(y Interval) bool {
	return x.IsEmpty() || (y.lo < x.lo || y.lo == -inf) && (x.hi < y.hi || y.hi == inf)
}

// Disjoint reports whether x and y have no element in common.
func (x Interval) Disjoint(y Interval) bool {
	return x.IsEmpty() || y.IsEmpty() || x.hi < y.lo || y.hi < x.lo
}

// Less reports whether for every element of x there is one of y that is not
// smaller and for every element of y one of x that is not larger: the weak
// relation "less" of the standard.
func (x Interval) Less(y Interval) bool {
	if x.IsEmpty() || y.IsEmpty() {
		return x.IsEmpty() && y.IsEmpty()
	}
	return x.lo <= y.lo && x.hi <= y.hi
}

// StrictLess is Less with strict inequalities.
func (x Interval) StrictLess(y Interval) bool {
	if x.IsEmpty() || y.IsEmpty() {
		return x.IsEmpty() && y.IsEmpty()
	}
	return (x.lo < y.lo || x.lo == -inf && y.lo == -inf) && (x.hi < y.hi || x.hi == inf && y.hi == inf)
}

// Precedes reports whether no element of x is larger than one of y. It is true
// if one of them is empty.
func (x Interval) Precedes(y Interval) bool { return x.IsEmpty() || y.IsEmpty() || x.hi <= y.lo }

// StrictPrecedes reports whether every element of x is smaller than every
// element of y. It is true if one of them is empty.
func (x Interval) StrictPrecedes(y Interval) bool {
	return x.IsEmpty() || y.IsEmpty() || x.hi < y.lo
}

// Intersection returns the set of the elements of both.
func (x Interval) Intersection(y Interval) Interval {
	if x.Disjoint(y) {
		return Empty()
	}
	return Interval{max(x.lo, y.lo), min(x.hi, y.hi)}
}

// ConvexHull returns the smallest interval that contains x and y.
func (x Interval) ConvexHull(y Interval) Interval {
	return Interval{min(x.lo, y.lo), max(x.hi, y.hi)}
}
