package creases

import "fmt"

// broken names an assumption of the case that the values of the surface
// contradict, by exact arithmetic or an enclosure; empty where there is none.
func (c *combination) broken() string {
	if len(c.values) == 0 {
		return ""
	}
	for _, a := range c.set.Assume {
		l, err := c.in.Scalar(a.Left)
		if err != nil {
			continue
		}
		r, err := c.in.Scalar(a.Right)
		if err != nil {
			continue
		}
		s, ok := c.exact.Ring.Sign(l.Sub(r), nil)
		if !ok {
			continue
		}
		holds := true
		switch a.Relation {
		case ">":
			holds = s > 0
		case ">=":
			holds = s >= 0
		case "<":
			holds = s < 0
		case "<=":
			holds = s <= 0
		case "=":
			holds = s == 0
		}
		if !holds {
			return fmt.Sprintf("the assumption %q of the case does not hold%s", a.Text, c.where())
		}
	}
	return ""
}
