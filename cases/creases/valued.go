package creases

import (
	"fmt"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// valued refuses formulas with a constant of the case that the surface gives no
// value.
func (s *Surface) valued() error {
	h := &s.shape
	list := slices.Concat(s.plus, s.minus, h.maps, h.disc, h.all())
	for _, v := range slices.Concat(h.vertices, h.corners) {
		list = append(list, v...)
	}
	for _, r := range h.over {
		list = append(list, r[0], r[1])
	}
	for _, f := range []*formulaText{h.height, s.density} {
		if f != nil {
			list = append(list, *f)
		}
	}
	for _, f := range list {
		if n := s.valueless(f.node, map[string]bool{}); n != nil {
			return placed(f.text, &entropy.Error{At: n.At(), Err: fmt.Errorf("the constant %s has no value here", n.ID), Advice: giveValue(n.ID)})
		}
	}
	if r := s.ev.set.Model.Residual; r != nil && (s.plus != nil || h.branches != nil) {
		if n := s.valueless(r, map[string]bool{}); n != nil {
			return source.NewError(s.place, 0, fmt.Sprintf("the residual of the model has the constant %s, which has no value here", n.ID), giveValue(n.ID))
		}
	}
	return nil
}

func giveValue(name string) string { return fmt.Sprintf(`give it one: values = { %s = "1" }`, name) }

// valueless is the first constant without a value in a formula or in the named
// formulas that it uses, nil where there is none.
func (s *Surface) valueless(n formula.Node, seen map[string]bool) (found *formula.Name) {
	formula.Walk(n, func(n formula.Node) bool {
		var id string
		switch n := n.(type) {
		case *formula.Name:
			id = n.ID
			has := slices.ContainsFunc(s.values, func(c choice) bool { return c.name == id })
			if found == nil && !has && slices.Contains(s.ev.set.Constants, id) {
				found = n
			}
			if has {
				return found == nil
			}
		case *formula.Deriv:
			id = n.Of
		}
		if body := s.ev.set.Lets[id]; body != nil && found == nil && !seen[id] {
			seen[id] = true
			found = s.valueless(body, seen)
		}
		return found == nil
	})
	return found
}
