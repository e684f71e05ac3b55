package creases

import (
	"math/big"
	"slices"

	"creaseproof/entropy/formula"
	"creaseproof/quadrature/levelset"
)

// isolated is a level function, another one with the same zero set where the
// conditions are non-negative, and the sign by which their signs differ next to it.
type isolated struct {
	node       formula.Node
	conditions []formula.Node
	sign       int
}

// isolate turns s (k √a + b), where k is positive, s is a sign, √a is the only
// root and a may be negative in the domain, into k² a - b² with the condition
// -b >= 0: at its rim, where a and b vanish, the gradient of the root is infinite,
// and beyond it the level function is not defined.
func (c *combination) isolate(f formulaText, d *domain) (isolated, error) {
	plain := isolated{node: f.node, sign: 1}
	s, ok := c.named(f.node).(*formula.Sum)
	if !ok {
		return plain, nil
	}
	at := -1
	var root []formula.Node
	for i, t := range s.Terms {
		if !c.holdsRoot(t.X) {
			continue
		}
		if root = c.rooted(t.X); at >= 0 || root == nil {
			return plain, nil
		}
		at = i
	}
	if at < 0 || len(s.Terms) < 2 {
		return plain, nil
	}
	k, a := root[0], root[1]
	r, err := c.rangeOf(formulaText{f.text, a}, d)
	if err != nil || r.Inf() >= 0 {
		return plain, err
	}
	sign := c.signOf(k)
	if sign == 0 {
		return plain, nil
	}
	// s (k √a + b) with k > 0: rest is what k √a has to be, -b.
	var rest []formula.Term
	down := s.Terms[at].Neg != (sign < 0)
	for i, t := range s.Terms {
		if i != at {
			rest = append(rest, formula.Term{Neg: t.Neg != !down, X: t.X})
		}
	}
	b := formula.NewSum(rest...)
	two := big.NewRat(2, 1)
	out := isolated{
		node: formula.NewSum(
			formula.Term{X: formula.NewProduct(formula.NewPower(k, two), a)},
			formula.Term{Neg: true, X: formula.NewPower(b, two)}),
		conditions: []formula.Node{b},
		sign:       1,
	}
	if down {
		out.sign = -1
	}
	return out, nil
}

// named is the formula that a name stands for.
func (c *combination) named(n formula.Node) formula.Node {
	for range 64 {
		name, ok := n.(*formula.Name)
		if !ok || c.set.Lets[name.ID] == nil {
			break
		}
		n = c.set.Lets[name.ID]
	}
	return n
}

// isRoot gives the radicand of a square root.
func isRoot(n formula.Node) (formula.Node, bool) {
	switch n := n.(type) {
	case *formula.Call:
		if n.Func == "sqrt" && len(n.Args) == 1 {
			return n.Args[0], true
		}
	case *formula.Power:
		if n.Exp.Cmp(big.NewRat(1, 2)) == 0 {
			return n.Base, true
		}
	}
	return nil, false
}

// rooted gives k and a of k √a with a constant k.
func (c *combination) rooted(n formula.Node) []formula.Node {
	var k []formula.Node
	var a formula.Node
	var parts []formula.Node
	switch m := n.(type) {
	case *formula.Product:
		for _, f := range m.Factors {
			if f.Op == formula.Slash {
				if !c.constant(f.X) {
					return nil
				}
				parts = append(parts, formula.NewQuotient(formula.NewInt(1), f.X))
				continue
			}
			parts = append(parts, f.X)
		}
	case *formula.Juxt:
		parts = m.Factors
	default:
		parts = []formula.Node{n}
	}
	for _, p := range parts {
		if x, ok := isRoot(p); ok && a == nil && !c.constant(p) && !c.holdsRoot(x) {
			a = x
			continue
		}
		if !c.constant(p) {
			return nil
		}
		k = append(k, p)
	}
	if a == nil {
		return nil
	}
	if k == nil {
		return []formula.Node{formula.NewInt(1), a}
	}
	return []formula.Node{formula.NewProduct(k...), a}
}

// holdsRoot reports whether a root of something with variables is in a formula.
func (c *combination) holdsRoot(n formula.Node) bool {
	return c.find(n, func(n formula.Node) bool {
		_, ok := isRoot(n)
		return ok && !c.constant(n)
	}) != nil
}

// find finds a part of a formula, named formulas included, that satisfies f.
func (c *combination) find(n formula.Node, f func(formula.Node) bool) (found formula.Node) {
	seen := map[string]bool{}
	var look func(n formula.Node) bool
	look = func(n formula.Node) bool {
		if found != nil {
			return false
		}
		if f(n) {
			found = n
			return false
		}
		if name, ok := n.(*formula.Name); ok && c.set.Lets[name.ID] != nil && !seen[name.ID] {
			seen[name.ID] = true
			formula.Walk(c.set.Lets[name.ID], look)
		}
		return true
	}
	formula.Walk(n, look)
	return found
}

// signOf is the sign of a formula without variables, 0 where it is not known.
func (c *combination) signOf(n formula.Node) int {
	x, err := c.in.Scalar(n)
	if err != nil || c.exact.Ring.Err(x) != nil {
		return 0
	}
	s, _ := c.exact.Ring.Enclose(x, nil, precision).Sign()
	return s
}

// rangeOf encloses a formula on the box of the domain.
func (c *combination) rangeOf(f formulaText, d *domain) (levelset.Interval, error) {
	phi, err := c.levelFunction(f, nil)
	if err != nil {
		return levelset.Interval{}, err
	}
	return phi.Range(d.intervals()), nil
}

// folds bounds the absolute values that are taken apart.
const folds = 4

// unfold takes the absolute values of what changes its sign in the domain
// apart: |a| is a where a >= 0 and -a where -a >= 0. It returns nil where
// there are none, or too many.
func (c *combination) unfold(f formulaText, d *domain) ([]isolated, error) {
	list := []isolated{{node: f.node, sign: 1}}
	whole := false
	for range folds + 1 {
		var next []isolated
		whole = true
		for _, p := range list {
			var arg formula.Node
			call := c.find(p.node, func(n formula.Node) bool {
				call, ok := n.(*formula.Call)
				if !ok || call.Func != "abs" || len(call.Args) != 1 || c.constant(n) {
					return false
				}
				arg = call.Args[0]
				return c.find(arg, func(n formula.Node) bool { x, ok := n.(*formula.Call); return ok && x.Func == "abs" }) == nil
			})
			if call == nil {
				next = append(next, p)
				continue
			}
			whole = false
			r, err := c.rangeOf(formulaText{f.text, arg}, d)
			if err != nil {
				return nil, err
			}
			if !(r.Sup() <= 0) {
				next = append(next, p.with(c.replace(p.node, call, arg), arg))
			}
			if !(r.Inf() >= 0) {
				minus := formula.NewNeg(arg)
				next = append(next, p.with(c.replace(p.node, call, minus), minus))
			}
		}
		if list = next; whole {
			break
		}
	}
	if !whole || len(list) < 2 {
		return nil, nil
	}
	return list, nil
}

func (p isolated) with(node, condition formula.Node) isolated {
	return isolated{node: node, conditions: append(slices.Clone(p.conditions), condition), sign: p.sign}
}

// replace puts one part of a formula for another, in named formulas too.
func (c *combination) replace(n, old, by formula.Node) formula.Node {
	if n == old {
		return by
	}
	all := func(list []formula.Node) []formula.Node {
		out := make([]formula.Node, len(list))
		for i, x := range list {
			out[i] = c.replace(x, old, by)
		}
		return out
	}
	switch n := n.(type) {
	case *formula.Name:
		if body := c.set.Lets[n.ID]; body != nil {
			return c.replace(body, old, by)
		}
	case *formula.Sum:
		m := *n
		m.Terms = slices.Clone(n.Terms)
		for i, t := range m.Terms {
			m.Terms[i].X = c.replace(t.X, old, by)
		}
		return &m
	case *formula.Product:
		m := *n
		m.Factors = slices.Clone(n.Factors)
		for i, f := range m.Factors {
			m.Factors[i].X = c.replace(f.X, old, by)
		}
		return &m
	case *formula.Juxt:
		m := *n
		m.Factors = all(n.Factors)
		return &m
	case *formula.Power:
		m := *n
		m.Base = c.replace(n.Base, old, by)
		return &m
	case *formula.Call:
		m := *n
		m.Args = all(n.Args)
		return &m
	}
	return n
}
