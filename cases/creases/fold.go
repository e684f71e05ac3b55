package creases

import (
	"math/big"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/formula"
)

// numeric is the setting for compiled formulas, in which the parts of named
// formulas without variables are numbers.
func (c *combination) numeric() *entropy.Setting {
	if c.folded == nil {
		set := *c.set
		set.Lets = make(map[string]formula.Node, len(c.set.Lets))
		for name, body := range c.set.Lets {
			set.Lets[name] = c.fold(body)
		}
		c.folded = &set
	}
	return c.folded
}

// fold puts numbers for the largest parts of a formula without variables:
// their values to 200 bits, which a program rounds once. Evaluated in float64,
// a^2 - b^2 in a formula would be off by far more than a rounding error where a
// and b are close, and by the same at every node, so that no estimate of the
// error of an integral could see it. Constant terms of a sum count as one part.
func (c *combination) fold(n formula.Node) formula.Node {
	if c.constant(n) {
		switch n.(type) {
		case *formula.Num, *formula.Name:
			return n // a name stands for a formula that is folded itself, or for pi
		}
		if x := c.exactly(n); x != nil {
			return x
		}
		return n
	}
	switch n := n.(type) {
	case *formula.Sum:
		m := *n
		m.Terms = nil
		var still []formula.Term
		for _, t := range n.Terms {
			if c.constant(t.X) {
				still = append(still, t)
			} else {
				m.Terms = append(m.Terms, formula.Term{Neg: t.Neg, X: c.fold(t.X)})
			}
		}
		if len(still) > 1 {
			if x := c.exactly(&formula.Sum{Terms: still}); x != nil {
				still = []formula.Term{{X: x}}
			}
		}
		for i, t := range still {
			still[i].X = c.fold(t.X)
		}
		m.Terms = append(m.Terms, still...)
		return &m
	case *formula.Product:
		m := *n
		m.Factors = slices.Clone(n.Factors)
		for i, f := range m.Factors {
			m.Factors[i].X = c.fold(f.X)
		}
		return &m
	case *formula.Juxt:
		m := *n
		m.Factors = c.foldAll(n.Factors)
		return &m
	case *formula.Power:
		m := *n
		m.Base = c.fold(n.Base)
		return &m
	case *formula.Call:
		m := *n
		m.Args = c.foldAll(n.Args)
		return &m
	case *formula.Jump:
		m := *n
		m.X = c.fold(n.X)
		return &m
	case *formula.Average:
		m := *n
		m.X = c.fold(n.X)
		return &m
	}
	return n
}

func (c *combination) foldAll(list []formula.Node) []formula.Node {
	out := make([]formula.Node, len(list))
	for i, n := range list {
		out[i] = c.fold(n)
	}
	return out
}

// constant reports whether a formula holds nothing but numbers, functions and
// names that stand for such.
func (c *combination) constant(n formula.Node) bool {
	all := func(list []formula.Node) bool {
		return !slices.ContainsFunc(list, func(n formula.Node) bool { return !c.constant(n) })
	}
	switch n := n.(type) {
	case *formula.Num:
		return true
	case *formula.Name:
		if n.ID == "pi" {
			return true
		}
		if known, ok := c.fixed[n.ID]; ok {
			return known
		}
		body, ok := c.set.Lets[n.ID]
		c.fixed[n.ID] = false // also of a name that stands for itself
		c.fixed[n.ID] = ok && c.constant(body)
		return c.fixed[n.ID]
	case *formula.Sum:
		return !slices.ContainsFunc(n.Terms, func(t formula.Term) bool { return !c.constant(t.X) })
	case *formula.Product:
		return !slices.ContainsFunc(n.Factors, func(f formula.Factor) bool { return !c.constant(f.X) })
	case *formula.Juxt:
		return all(n.Factors)
	case *formula.Power:
		return c.constant(n.Base)
	case *formula.Call:
		switch n.Func {
		case "sin", "cos", "tan", "sinh", "cosh", "tanh", "exp", "log", "sqrt", "erf", "abs", "norm":
			return all(n.Args)
		}
	}
	return false
}

// exactly is the value of a formula without variables as a number, nil where
// it is not known to 100 bits.
func (c *combination) exactly(n formula.Node) formula.Node {
	x, err := c.in.Scalar(n)
	if err != nil || c.exact.Ring.Err(x) != nil {
		return nil
	}
	if r, ok := x.IsConst(); ok {
		return formula.NewNum(r.Big())
	}
	i := c.exact.Ring.Enclose(x, nil, precision)
	if !i.IsBounded() {
		return nil
	}
	lo, hi := new(big.Rat), new(big.Rat)
	i.Lo().Rat(lo)
	i.Hi().Rat(hi)
	mid := new(big.Rat).Add(lo, hi)
	mid.Quo(mid, big.NewRat(2, 1))
	width := new(big.Rat).Sub(hi, lo)
	width.Mul(width, new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), 100)))
	if width.Cmp(new(big.Rat).Abs(mid)) > 0 {
		return nil
	}
	return formula.NewNum(mid)
}
