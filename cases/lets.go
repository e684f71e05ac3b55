package cases

import (
	"fmt"
	"slices"
	"strings"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// maxChain bounds how many named formulas may be used one inside another.
const maxChain = 100

// definition is a named formula or a field, and what its formulas name.
type definition struct {
	name  string
	what  string // for messages
	pos   source.Pos
	nodes []formula.Node

	state int // of the search: not met, being followed, done
	depth int // of the longest chain of definitions that starts here
}

const (
	notMet = iota
	followed
	done
)

// definitions refuses named formulas and fields that are defined by
// themselves, naming the cycle, and chains that are too long. It notes which
// of them depend on an unknown.
func (b *builder) definitions() {
	defs := map[string]*definition{}
	var order []*definition
	add := func(d *definition) {
		defs[d.name] = d
		order = append(order, d)
	}
	for _, l := range b.file.Lets {
		if n := b.set.Lets[fold(l.Name)]; n != nil {
			add(&definition{name: fold(l.Name), what: fold(l.Name), pos: l.Name.Pos, nodes: []formula.Node{n}})
		}
	}
	for _, f := range b.file.Fields {
		d := &definition{name: fold(f.Name), what: "the field " + fold(f.Name), pos: f.Name.Pos}
		if g := b.set.Fields[d.name]; g != nil {
			for _, c := range f.Components {
				if n := g.Components[fold(c.Index)]; n != nil {
					d.nodes = append(d.nodes, n)
				}
			}
		}
		add(d)
	}
	b.varies = map[string]bool{}
	for _, d := range order {
		if !b.follow(defs, d, nil) {
			return
		}
	}
}

// follow searches depth first; path is what leads to d.
func (b *builder) follow(defs map[string]*definition, d *definition, path []*definition) bool {
	switch {
	case d.state == done:
		return true
	case d.state == followed:
		b.cycle(append(path[slices.Index(path, d):], d))
		return false
	case len(path) >= maxChain:
		b.fault(d.pos, "use fewer named formulas inside named formulas", "named formulas are used one inside another more than %d deep", maxChain)
		return false
	}
	d.state = followed
	path = append(path, d)
	varies, ok := false, true
	for _, n := range d.nodes {
		formula.Walk(n, func(n formula.Node) bool {
			name := named(n)
			if name == "" || !ok {
				return ok
			}
			if slices.Contains(b.set.Unknowns, name) {
				varies = true
			} else if e := defs[name]; e != nil {
				ok = b.follow(defs, e, path)
				varies = varies || b.varies[name]
				d.depth = max(d.depth, e.depth+1)
			}
			return ok
		})
	}
	if ok && d.depth > maxChain {
		b.fault(d.pos, "use fewer named formulas inside named formulas", "named formulas are used one inside another more than %d deep", maxChain)
		ok = false
	}
	d.state = done
	b.varies[d.name] = varies
	return ok
}

func (b *builder) cycle(path []*definition) {
	if len(path) == 2 {
		b.fault(path[0].pos, "write it without itself", "%s is defined by itself", path[0].what)
		return
	}
	var names []string
	for _, d := range path {
		names = append(names, d.what)
	}
	if len(names) > 8 {
		names = append(append(names[:4:4], fmt.Sprintf("(%d more)", len(names)-7)), names[len(names)-3:]...)
	}
	b.fault(path[0].pos, "break the cycle: one of these must do without the next", "%s is defined by itself: %s", path[0].what, strings.Join(names, ", then "))
}

// named is the declared name a formula begins with, "" where it has none.
func named(n formula.Node) string {
	switch n := n.(type) {
	case *formula.Name:
		return n.ID
	case *formula.Deriv:
		return n.Of
	case *formula.Field:
		return n.ID
	case *formula.Component:
		return n.Of
	}
	return ""
}

// depends finds an unknown, a field or a named formula of an unknown in a
// formula, or a trace at a jump; nil where there is none.
func (b *builder) depends(n formula.Node) (found formula.Node) {
	formula.Walk(n, func(n formula.Node) bool {
		switch n.(type) {
		case *formula.Jump, *formula.Average, *formula.DotNu:
			found = n
		default:
			if name := named(n); name == "nu" || slices.Contains(b.set.Unknowns, name) || b.varies[name] {
				found = n
			}
		}
		return found == nil
	})
	return found
}
