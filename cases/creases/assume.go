package creases

import "creaseproof/cases/assumption"

// broken names an assumption of the case that does not hold for the values of
// the surface, or one that cannot be decided; see package assumption. It is
// empty where there is none.
func (c *combination) broken() string {
	return assumption.Broken(c.set.Assume, assumption.Values{In: c.in, Exact: c.exact, Text: c.where(), At: func() (list []assumption.Point) {
		for _, p := range c.samples() {
			list = append(list, assumption.Point{Wide: p.wide, Text: c.place(p.point, p.params)})
		}
		return list
	}})
}
