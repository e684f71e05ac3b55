package cases

import (
	"slices"

	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
	"creaseproof/identity/claim"
)

// claim reads a claim in the scope it has: that of the setting, the names of
// solve and best beside its constants, brackets for jumps at a jump.
func (b *builder) claim(f *casefile.Claim) *Claim {
	c := &Claim{Claim: &claim.Claim{Name: f.Name, Setting: b.set, Divergence: f.Divergence, Jump: f.At == "jump"}, Pos: position(f.States)}
	scope := b.claimScope(f, c)
	if scope == nil {
		return c
	}
	var err error
	if c.Statement, err = scope.ParseStatement(f.States); err != nil {
		b.add(b.text.place(err, c.Pos))
		return c
	}
	for _, t := range f.Modulo {
		if n := b.equation(scope, t); n != nil {
			c.Modulo = append(c.Modulo, n)
		}
	}
	c.Assume = b.assumptions(scope, f.Assume)
	b.given(scope, f, c)
	b.restrict(scope, f, c)
	b.box(scope, f, c)
	b.integrability(scope, f, c)
	b.effect(f, c)
	c.Expected = b.expectation(f)
	return c
}

func position(t source.Text) source.Pos { return source.Pos{Line: t.Line, Col: t.Col} }

// claimScope is the scope of a claim. The names of solve and best become
// constants of a setting of the claim's own.
func (b *builder) claimScope(f *casefile.Claim, c *Claim) *formula.Scope {
	scope, extra := b.scope, f.Solve
	if f.Best != nil {
		extra = append(slices.Clone(extra), *f.Best)
		c.Best = fold(*f.Best)
	}
	var added []string
	for _, n := range extra {
		s, err := scope.With(n.S)
		if err != nil {
			b.add(b.text.place(err, n.Pos))
			return nil
		}
		scope = s
		if name := fold(n); !slices.Contains(b.set.Constants, name) && !slices.Contains(added, name) {
			added = append(added, name)
		}
	}
	c.Solve = folded(f.Solve)
	if len(added) > 0 {
		set := *b.set
		set.Constants = slices.Concat(b.set.Constants, added)
		c.Setting = &set
	}
	if c.Jump {
		scope = scope.AtJump()
	}
	return scope
}

// equation reads a formula to be taken as zero, which may be written as an
// equation.
func (b *builder) equation(scope *formula.Scope, t source.Text) formula.Node {
	found := cuts(t.S)
	if len(found) == 0 {
		return b.expr(scope, t)
	}
	if found[0].relation == "==" {
		b.fault(t.Pos(found[0].runes(t)), `write "="`, "%q is no relation of an equation", "==")
		return nil
	}
	if found[0].relation != "=" {
		b.fault(t.Pos(found[0].runes(t)), "write a formula, which is taken as zero, or an equation; an inequality belongs to assume", "modulo holds an inequality")
		return nil
	}
	if len(found) > 1 {
		b.fault(t.Pos(found[1].runes(t)), `write a list of two equations, ["a = b", "b = c"]`, "an equation has one relation")
		return nil
	}
	l, r := found[0].split(t)
	left, right := b.expr(scope, l), b.expr(scope, r)
	if left == nil || right == nil {
		return nil
	}
	if n, ok := right.(*formula.Num); ok && n.Value.Sign() == 0 {
		return left
	}
	return formula.NewSum(formula.Term{X: left}, formula.Term{Neg: true, X: right})
}

// effect refuses keys that would be without effect on the claim.
func (b *builder) effect(f *casefile.Claim, c *Claim) {
	relation := c.Statement.Relation
	inequality := relation == formula.LessEqual || relation == formula.GreaterEqual
	if len(f.Solve) > 0 && relation != formula.Equal {
		b.fault(f.Solve[0].Pos, `an inequality has best = "c"`, "solve is for an equation")
	}
	if f.Best != nil && !inequality {
		b.fault(f.Best.Pos, `an equation has solve = ["c"]`, "best is for an inequality")
	}
	if c.Jump && b.set.Model.Residual == nil {
		b.fault(f.Pos, `add [model] and residual = "R": its zero set is the well on which the traces lie`, "a claim at a jump needs the residual of a model")
	}
	if relation == formula.Entropy && b.set.Model.Residual == nil {
		b.fault(f.Pos, `add [model] and residual = "R": its zero set is the well`, "an entropy needs the residual of a model")
	}
	if relation != formula.Integrable && len(f.Integrability) > 0 {
		b.fault(f.Integrability[0].Name.Pos, `it belongs to a claim such as "Sigma in L^1"`, "integrability is without effect on this claim")
	}
	if relation == formula.Integrable && len(f.Integrability) == 0 {
		b.fault(f.Pos, "add integrability = { u_x = 3 } with an exponent for each derivative in the field", "nothing is known of the integrability of the derivatives")
	}
	if relation == formula.Equal || inequality {
		return
	}
	const advice = "it belongs to an equation or an inequality"
	switch {
	case c.Jump:
		b.fault(f.Pos, `it belongs to an equation or an inequality`, `at = "jump" is without effect on this claim`)
	case len(f.Modulo) > 0:
		b.fault(position(f.Modulo[0]), advice, "modulo is without effect on this claim")
	case f.Divergence:
		b.fault(f.Pos, advice, `modulo = "divergence" is without effect on this claim`)
	}
}

// given reads unknowns in closed form.
func (b *builder) given(scope *formula.Scope, f *casefile.Claim, c *Claim) {
	for _, a := range f.Given {
		u := slices.Index(b.set.Unknowns, fold(a.Name))
		if u < 0 {
			b.fault(a.Name.Pos, `write given = { u = "..." }; a derivative that is a constant belongs to restrict`, "%q is no unknown", Clip(a.Name.S, 60))
			continue
		}
		if _, twice := c.Given[u]; twice {
			b.fault(a.Name.Pos, "keep one of the two", "%s is given twice", b.set.Unknowns[u])
			continue
		}
		n := b.expr(scope, a.Formula)
		if n == nil {
			continue
		}
		if bad := b.depends(n); bad != nil {
			b.fault(bad.At(), "write it in coordinates and constants", "a closed form of %s depends on an unknown: %s", b.set.Unknowns[u], Clip(formula.Text(bad), 60))
			continue
		}
		if c.Given == nil {
			c.Given = map[int]formula.Node{}
		}
		c.Given[u] = n
	}
}

// restrict reads derivatives that are constants.
func (b *builder) restrict(scope *formula.Scope, f *casefile.Claim, c *Claim) {
	for _, a := range f.Restrict {
		key := b.key(scope, a.Name)
		if key.node == nil {
			continue
		}
		if key.unknown < 0 || key.index.Order() == 0 {
			b.fault(a.Name.Pos, `write restrict = { u_z = "1/2" }; u itself belongs to given`, "restrict fixes a derivative, and %q is none", Clip(a.Name.S, 60))
			continue
		}
		if slices.ContainsFunc(c.Restrict, func(r claim.Restriction) bool { return r.Unknown == key.unknown && r.Index == key.index }) {
			b.fault(a.Name.Pos, "keep one of the two", "%s is restricted twice", Clip(a.Name.S, 60))
			continue
		}
		n := b.expr(scope, a.Formula)
		if n == nil {
			continue
		}
		if bad := b.depends(n); bad != nil {
			b.fault(bad.At(), "write a constant", "a restriction to something that is no constant: %s", Clip(formula.Text(bad), 60))
			continue
		}
		c.Restrict = append(c.Restrict, claim.Restriction{Unknown: key.unknown, Index: key.index, Value: n})
	}
}

// box reads bounds of coordinates, constants and derivatives.
func (b *builder) box(scope *formula.Scope, f *casefile.Claim, c *Claim) {
	for _, i := range f.Box {
		key := b.key(scope, i.Name)
		if key.node == nil {
			continue
		}
		lo, hi := b.number(scope, i.Lo), b.number(scope, i.Hi)
		if lo == nil || hi == nil {
			continue
		}
		if lo.Cmp(hi) >= 0 {
			b.fault(i.Name.Pos, "write [lower, upper]", "the box of %s is empty or a point: [%s, %s]", Clip(i.Name.S, 60), Clip(lo.RatString(), 40), Clip(hi.RatString(), 40))
			continue
		}
		c.Box = append(c.Box, claim.Bound{Node: key.node, Lo: lo, Hi: hi})
	}
}

// integrability reads in which L^p the derivatives are.
func (b *builder) integrability(scope *formula.Scope, f *casefile.Claim, c *Claim) {
	for _, e := range f.Integrability {
		key := b.key(scope, e.Name)
		if key.node == nil {
			continue
		}
		if key.unknown < 0 {
			b.fault(e.Name.Pos, "write integrability = { u_x = 3 }", "integrability is of unknowns and their derivatives, and %q is none", Clip(e.Name.S, 60))
			continue
		}
		c.Integrability = append(c.Integrability, claim.Exponent{Node: key.node, P: e.P})
	}
}

// Assumed are the conditions under which the claim is stated.
func (c *Claim) Assumed() []entropy.Assumption {
	return slices.Concat(c.Setting.Assume, c.Assume)
}
