// Package assumption decides whether the assumptions of a case hold for chosen
// values of its constants: by exact arithmetic or an enclosure where one is of
// numbers, by an enclosure at a few points where it is of coordinates too.
// Assumptions about constants without a value and about derivatives are left
// alone.
package assumption

import (
	"fmt"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/jet"
)

// Precision of enclosures at points, in bits.
const Precision = 200

// Point is a place at which assumptions about coordinates are looked at.
type Point struct {
	Wide map[algebra.Var]enclosure.Interval // of the coordinates
	Text string                             // such as " at (x, y) = (1, 2)"
}

// Values are a choice of values, as named formulas of a setting.
type Values struct {
	In    *entropy.Interpreter[algebra.Fraction]
	Exact *entropy.Exact
	Text  string         // such as " for k = 2", or nothing
	At    func() []Point // where to look; called at most once
}

// Broken names an assumption that does not hold, or one of numbers that cannot
// be decided. It is empty where there is none.
func Broken(list []entropy.Assumption, v Values) string {
	var points []Point
	for _, a := range list {
		d, known, moves := v.difference(a)
		switch {
		case known:
			s, ok := v.Exact.Ring.Sign(d, nil)
			if !ok {
				return fmt.Sprintf("whether the assumption %q of the case holds%s cannot be decided", a.Text, v.Text)
			}
			if !holds(a.Relation, s) {
				return fmt.Sprintf("the assumption %q of the case does not hold%s", a.Text, v.Text)
			}
		case moves:
			if points == nil {
				points = v.At()
			}
			for _, p := range points {
				x := v.Exact.Ring.EncloseAt(d, nil, p.Wide, Precision)
				if s, ok := x.Sign(); ok && !holds(a.Relation, s) {
					return fmt.Sprintf("the assumption %q of the case does not hold%s%s", a.Text, p.Text, v.Text)
				}
			}
		}
	}
	return ""
}

// difference is the left side of an assumption minus the right side. It is
// known where it is one of numbers, and moves where it is one of coordinates too.
func (v *Values) difference(a entropy.Assumption) (d algebra.Fraction, known, moves bool) {
	l, err := v.In.Scalar(a.Left)
	if err != nil {
		return d, false, false
	}
	r, err := v.In.Scalar(a.Right)
	if err != nil {
		return d, false, false
	}
	d = l.Sub(r)
	if v.Exact.Ring.Err(d) != nil {
		return d, false, false
	}
	known = true
	for _, x := range v.Exact.Ring.Support(d) {
		switch v.Exact.Ring.Symbol(x).Kind {
		case jet.Coordinate:
			known, moves = false, true
		case jet.Constant, jet.Derivative:
			return d, false, false
		}
	}
	return d, known, moves
}

// holds reports whether a number of that sign stands in the relation to zero.
func holds(relation string, sign int) bool {
	switch relation {
	case ">":
		return sign > 0
	case ">=":
		return sign >= 0
	case "<":
		return sign < 0
	case "<=":
		return sign <= 0
	}
	return sign == 0
}
