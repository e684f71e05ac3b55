package branches

import "errors"

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

// ErrCells says that a tree has too many ways to make a sheet of a pair.
var ErrCells = errors.New("branches: the combination needs too many systems of inequalities")

const mostCells = 1000

// Cells gives the conditions on the other branches under which the pair i, j,
// with the same value, makes a crease: one of the systems has to hold, and no
// two hold at once. Op says whether the tree is the maximum or the minimum of
// the pair there. Known may hold relations that need no condition; it has an
// entry for each branch, or is nil.
func Cells(t *Tree, i, j int, known []Relation) (op Op, systems [][]Condition, err error) {
	c := &cells{i: i, j: j, known: known}
	has := c.holds(t)
	if has != both {
		return Leaf, nil, nil
	}
	systems = c.through(t)
	if c.tooMany {
		return Leaf, nil, ErrCells
	}
	return c.op, systems, nil
}

type cells struct {
	i, j    int
	known   []Relation
	op      Op
	tooMany bool
}

const (
	first  = 1
	second = 2
	both   = first | second
)

// holds tells which of the pair a tree holds.
func (c *cells) holds(t *Tree) (h int) {
	if t.Op == Leaf {
		switch t.Branch {
		case c.i:
			return first
		case c.j:
			return second
		}
		return 0
	}
	for _, a := range t.Args {
		h |= c.holds(a)
	}
	return h
}

// through gives the systems under which a tree that holds one of the pair, or
// both, has their value.
func (c *cells) through(t *Tree) [][]Condition {
	out := [][]Condition{nil}
	if t.Op == Leaf {
		return out
	}
	parts := 0
	for _, a := range t.Args {
		if c.holds(a) != 0 {
			parts++
			out = c.product(out, c.through(a))
			continue
		}
		side := Below
		if t.Op == Min {
			side = Above
		}
		out = c.product(out, c.apart(a, side))
	}
	if parts == 2 {
		c.op = t.Op
	}
	return out
}

// apart gives the systems under which a tree without the pair is on that side.
func (c *cells) apart(t *Tree, side Relation) [][]Condition {
	if t.Op == Leaf {
		if c.known != nil && c.known[t.Branch] != Open {
			if c.known[t.Branch] == side {
				return [][]Condition{nil}
			}
			return nil
		}
		return [][]Condition{{{t.Branch, side}}}
	}
	if (t.Op == Max) == (side == Below) { // all of them
		out := [][]Condition{nil}
		for _, a := range t.Args {
			out = c.product(out, c.apart(a, side))
		}
		return out
	}
	// One of them: the first is at m.
	var out [][]Condition
	before := [][]Condition{nil}
	for _, a := range t.Args {
		out = append(out, c.product(before, c.apart(a, side))...)
		before = c.product(before, c.apart(a, Below+Above-side))
	}
	return out
}

// product joins every system of a to every one of b.
func (c *cells) product(a, b [][]Condition) [][]Condition {
	if len(a)*len(b) > mostCells {
		c.tooMany = true
		return nil
	}
	var out [][]Condition
	for _, x := range a {
		for _, y := range b {
			out = append(out, append(x[:len(x):len(x)], y...))
		}
	}
	return out
}
