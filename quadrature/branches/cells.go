package branches

import (
	"errors"
	"slices"
)

// A Relation says how a branch compares with the value of a pair.
type Relation uint8

// The relations; Open is one that a condition decides.
const (
	Open Relation = iota
	Below
	Above
)

// Condition says that a branch is below or above the pair.
type Condition struct {
	Branch   int
	Relation Relation // Below or Above
}

// System is a set of conditions under which a pair makes a crease, and whether
// the tree is the maximum or the minimum of the pair there.
type System struct {
	Conditions []Condition
	Op         Op
}

// ErrCells says that a tree has too many ways to make a sheet of a pair.
var ErrCells = errors.New("branches: the combination needs too many systems of inequalities")

// mostCells bounds the systems, and mostLooks the sets of conditions looked at.
const (
	mostCells = 1000
	mostLooks = 50000
)

// Cells gives the conditions on the other branches under which the pair i, j,
// with the same value, makes a crease: one of the systems has to hold, and no
// two hold at once. Known may hold relations that need no condition; it has an
// entry for each branch, or is nil.
//
// Order is nil, or lists the branches that have the value of the pair on all of
// its surface, the pair among them, as they follow on each other where u_i > u_j,
// the lowest first. Where u_i < u_j they follow in the opposite order.
func Cells(t *Tree, i, j int, known []Relation, order []int) ([]System, error) {
	if order == nil {
		order = []int{j, i}
	}
	c := &cells{i: i, j: j, at: map[int]place{}}
	for k, r := range known {
		if r != Open {
			c.at[k] = place{relation: r}
		}
	}
	for n, k := range order {
		c.at[k] = place{rank: n - slices.Index(order, i), same: true}
	}
	c.split(t, nil)
	if c.tooMany {
		return nil, ErrCells
	}
	return c.systems, nil
}

// place is where a branch is compared with the pair: below, above, or at it with
// a rank on the side where u_i > u_j, that of i being 0.
type place struct {
	relation Relation
	rank     int
	same     bool
}

type cells struct {
	i, j    int
	at      map[int]place
	systems []System
	looks   int
	tooMany bool
}

// split decides the tree under conditions, and adds some where that needs them.
func (c *cells) split(t *Tree, conditions []Condition) {
	if c.looks++; c.looks > mostLooks || len(c.systems) > mostCells {
		c.tooMany = true
		return
	}
	v := c.value(t, 1)
	if v.known {
		if !v.same {
			return
		}
		plus, minus := v.branch, c.value(t, -1).branch
		switch {
		case plus == c.i && minus == c.j:
			c.systems = append(c.systems, System{slices.Clone(conditions), Max})
		case plus == c.j && minus == c.i:
			c.systems = append(c.systems, System{slices.Clone(conditions), Min})
		}
		return
	}
	for _, r := range [2]Relation{Below, Above} {
		c.at[v.want] = place{relation: r}
		c.split(t, append(conditions, Condition{v.want, r}))
		if c.tooMany {
			return
		}
	}
	delete(c.at, v.want)
}

// reading is the place of a tree and the branch that it equals where that is at
// the pair; or, where it is not known, a branch that has to be placed first.
type reading struct {
	place
	branch int
	known  bool
	want   int
}

// order is -1 below the pair, 1 above, 0 at it.
func (p place) order() int {
	switch {
	case p.same:
		return 0
	case p.relation == Below:
		return -1
	}
	return 1
}

// value is the tree on the side where u_i - u_j has the given sign.
func (c *cells) value(t *Tree, side int) reading {
	if t.Op == Leaf {
		p, ok := c.at[t.Branch]
		return reading{place: p, branch: t.Branch, known: ok, want: t.Branch}
	}
	end := 1 // the order that settles the node
	if t.Op == Min {
		end = -1
	}
	var best, open reading
	found, opened := false, false
	for _, a := range t.Args {
		v := c.value(a, side)
		switch {
		case !v.known:
			if !opened {
				open, opened = v, true
			}
		case v.order() == end:
			return v
		case !found:
			best, found = v, true
		case (v.order()-best.order())*end > 0, v.same && best.same && (v.rank-best.rank)*side*end > 0:
			best = v
		}
	}
	if opened {
		return open
	}
	return best
}
