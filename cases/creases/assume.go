package creases

import (
	"fmt"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// broken names an assumption of the case that does not hold for the values of
// the surface: by exact arithmetic or an enclosure where it is one of numbers,
// and then one that cannot be decided is named too; by an enclosure at a few
// points of the surface where it is one of coordinates. It is empty where there
// is none. Assumptions about other constants and about derivatives are left
// alone.
func (c *combination) broken() string {
	var points []samplePoint
	for _, a := range c.set.Assume {
		d, known, moves := c.difference(a)
		switch {
		case known:
			s, ok := c.exact.Ring.Sign(d, nil)
			if !ok {
				return fmt.Sprintf("whether the assumption %q of the case holds%s cannot be decided", a.Text, c.where())
			}
			if !holds(a.Relation, s) {
				return fmt.Sprintf("the assumption %q of the case does not hold%s", a.Text, c.where())
			}
		case moves:
			if points == nil {
				points = c.samples()
			}
			for _, p := range points {
				x := c.exact.Ring.EncloseAt(d, nil, p.wide, precision)
				if s, ok := x.Sign(); ok && !holds(a.Relation, s) {
					return fmt.Sprintf("the assumption %q of the case does not hold%s%s", a.Text, c.place(p.point, p.params), c.where())
				}
			}
		}
	}
	return ""
}

// difference is the left side of an assumption minus the right side. It is
// known where it is one of numbers, and moves where it is one of coordinates too.
func (c *combination) difference(a entropy.Assumption) (d algebra.Fraction, known, moves bool) {
	l, err := c.in.Scalar(a.Left)
	if err != nil {
		return d, false, false
	}
	r, err := c.in.Scalar(a.Right)
	if err != nil {
		return d, false, false
	}
	d = l.Sub(r)
	if c.exact.Ring.Err(d) != nil {
		return d, false, false
	}
	known = true
	for _, v := range c.exact.Ring.Support(d) {
		switch c.exact.Ring.Symbol(v).Kind {
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
