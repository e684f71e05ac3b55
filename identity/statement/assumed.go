package statement

import (
	"fmt"
	"maps"
	"math/big"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
	"creaseproof/identity/export"
)

// assumed writes the assumptions of the setting and of the claim, and its box,
// as they stand. Those that hold no indeterminate are left out.
func assumed(c *claim.Claim, t *trees) ([]export.Comparison, error) {
	in := &entropy.Interpreter[pair]{Setting: c.Setting, Arith: t, Given: c.Given, Jump: c.Jump}
	var out []export.Comparison
	add := func(l export.Expr, relation string, r export.Expr) {
		for name := range t.vars {
			if occurs(name, l) || occurs(name, r) {
				out = append(out, export.Comparison{Left: l, Relation: relation, Right: r})
				return
			}
		}
	}
	for _, list := range [][]entropy.Assumption{c.Setting.Assume, c.Assume} {
		for _, a := range list {
			l, err := in.Scalar(a.Left)
			if err != nil {
				return nil, err
			}
			r, err := in.Scalar(a.Right)
			if err != nil {
				return nil, err
			}
			add(l.x, a.Relation, r.x)
		}
	}
	number := func(x *big.Rat) export.Expr { return export.Number(x.RatString()) }
	for _, b := range c.Box {
		x, err := in.Scalar(b.Node)
		if err != nil {
			return nil, err
		}
		add(number(b.Lo), "<=", x.x)
		add(x.x, "<=", number(b.Hi))
	}
	return out, nil
}

// kernels says of the roots, and of the cosines and sines of angles, that occur
// in formulas or below other roots what defines them.
func (t *trees) kernels(used []export.Expr) ([]export.Comparison, error) {
	var vars []algebra.Var
	for _, name := range slices.Sorted(maps.Keys(t.vars)) {
		if slices.ContainsFunc(used, func(e export.Expr) bool { return occurs(name, e) }) {
			vars = append(vars, t.vars[name])
		}
	}
	zero := export.Number("0")
	var out []export.Comparison
	for i := 0; i < len(vars); i++ {
		v := vars[i]
		q, a := t.Ring.Relation(v)
		s := t.Ring.Symbol(v)
		switch {
		case q == 0 && s.Kind == jet.Cosine:
			if !slices.Contains(vars, s.Partner) {
				vars = append(vars, s.Partner)
			}
			continue
		case q == 0 && s.Kind > jet.Cosine:
			return nil, fmt.Errorf("%w: %s beyond an end", export.ErrUnsupported, t.Ring.Name(v))
		case q == 0:
			continue
		}
		for _, w := range a.Vars() {
			if !slices.Contains(vars, w) {
				vars = append(vars, w)
			}
		}
		x := t.variable(v)
		out = append(out, export.Comparison{Left: export.Power{Base: x, Exp: q}, Relation: "=", Right: t.writtenPoly(a)})
		if s.Kind == jet.Root && s.Degree%2 == 0 {
			out = append(out, export.Comparison{Left: zero, Relation: "<=", Right: x})
		}
	}
	return out, nil
}
