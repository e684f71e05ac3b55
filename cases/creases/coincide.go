package creases

import (
	"fmt"
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/formula"
	"creaseproof/quadrature/branches"
	"creaseproof/quadrature/levelset"
)

// beside orders the branches that have the value of a pair on all of its
// surface, the pair among them, as branches.Cells asks for it: those with
// u_k - u_i = s (u_i - u_j) and a function s that exact arithmetic finds and
// enclosures show to be bounded on the box of the pair. Where the enclosures of
// their s overlap the order is nil.
func (c *combination) beside(p branches.Pair) []int {
	i, j := p.First, p.Second
	ring := c.exact.Ring
	difference := func(a, b int) (algebra.Fraction, bool) {
		list := c.s.shape.branches
		x, err := c.in.Scalar(formula.NewSum(formula.Term{X: list[a].node}, formula.Term{Neg: true, X: list[b].node}))
		return x, err == nil && ring.Err(x) == nil
	}
	across, ok := difference(i, j)
	if !ok || across.IsZero() {
		return nil
	}
	wide := map[algebra.Var]enclosure.Interval{}
	for k, b := range p.Box {
		lo, hi := new(big.Rat).SetFloat64(b[0]), new(big.Rat).SetFloat64(b[1])
		wide[ring.CoordinateVar(k)] = precise.FromRats(lo, hi)
	}
	type member struct {
		branch int
		slope  enclosure.Interval
	}
	list := []member{{i, precise.Int(0)}, {j, precise.Int(-1)}}
	for k := range c.s.shape.branches {
		if k == i || k == j || p.Known != nil && p.Known[k] != branches.Open {
			continue
		}
		d, ok := difference(k, i)
		if !ok {
			continue
		}
		s, err := ring.Quo(d, across)
		if err != nil || ring.Err(s) != nil {
			continue
		}
		if x := ring.EncloseAt(s, nil, wide, precision); x.IsBounded() {
			list = append(list, member{k, x})
		}
	}
	for a := range list {
		for b := range a {
			if !enclosure.Disjoint(list[a].slope, list[b].slope) {
				return nil
			}
		}
	}
	slices.SortFunc(list, func(a, b member) int { return a.slope.Lo().Cmp(b.slope.Lo()) })
	order := make([]int, len(list))
	for n, m := range list {
		order[n] = m.branch
	}
	return order
}

// same reports whether two branches are the same function by exact arithmetic.
func (c *combination) same(a, b int) bool {
	x, err := c.in.Scalar(c.s.shape.branches[a].node)
	if err != nil {
		return false
	}
	y, err := c.in.Scalar(c.s.shape.branches[b].node)
	if err != nil {
		return false
	}
	d := x.Sub(y)
	return c.exact.Ring.Err(d) == nil && d.IsZero()
}

// undecidedBeside says why a surface is refused on which three branches agree.
func (c *combination) undecidedBeside(p branches.Pair, third int, v *levelset.VanishingError) string {
	for _, k := range []int{p.First, p.Second} {
		if c.same(k, third) {
			return fmt.Sprintf("branches %d and %d are the same function%s: leave one of them out", min(k, third)+1, max(k, third)+1, c.where())
		}
	}
	list := []int{p.First, p.Second, third}
	slices.Sort(list)
	return fmt.Sprintf("branches %d, %d and %d agree on a part of the surface%s%s, and how they follow on each other beside it was not decided: that needs the quotients of their differences to be apart from each other on the whole domain",
		list[0]+1, list[1]+1, list[2]+1, c.place(v.Point, nil), c.where())
}
