package interval

// Decoration tells what is known of a function on the box it was evaluated on.
// Decorations are ordered; that of an expression is the least of those of its
// operations. The standard's "ill" (not an interval) is left out: constructors
// return an error instead.
type Decoration uint8

// The decorations of the standard.
const (
	// Trv: nothing is known; the function may be defined nowhere on the box.
	Trv Decoration = iota
	// Def: the box is not empty and the function is defined on all of it.
	Def
	// Dac: the function is defined on the box and its restriction to the box is
	// continuous.
	Dac
	// Com: moreover the box and the computed enclosure are bounded.
	Com
)

// String returns the name of the standard: trv, def, dac or com.
func (d Decoration) String() string {
	switch d {
	case Def:
		return "def"
	case Dac:
		return "dac"
	case Com:
		return "com"
	}
	return "trv"
}

// Initial returns the decoration of an input: that of the identity on x.
func Initial(x Interval) Decoration {
	switch {
	case x.IsEmpty():
		return Trv
	case x.IsBounded():
		return Com
	}
	return Dac
}

// After returns the decoration of an operation on an operand of decoration d
// (the least of them where there are several) with the given result; defined
// and continuous tell whether the operation is that on all of its operands.
func (d Decoration) After(defined, continuous bool, result Interval) Decoration {
	switch {
	case !defined || result.IsEmpty():
		return Trv
	case !continuous:
		return min(d, Def)
	case !result.IsBounded():
		return min(d, Dac)
	}
	return d
}
