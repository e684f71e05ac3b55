package export

import (
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// compare writes left <= right from 0 <= target, which the theorem goal states.
func (p *proof) compare(s *Inequality, goal string) error {
	r, d, sc := p.scope.ring, p.doc, p.scope
	for _, e := range []Expr{s.Left, s.Right} {
		if err := inspect(e, r.declared); err != nil {
			return err
		}
	}
	factors := make([][]product, len(s.Scale))
	over := r.one() // 1/scale
	for i, list := range s.Scale {
		var err error
		if factors[i], err = r.products(list, p.positive); err != nil {
			return fmt.Errorf("scale: %w", err)
		}
		if surelyPositive(factors[i], p.positive) < 0 {
			return fmt.Errorf("%w: factor %d of the scale is not visibly positive", ErrUnsupported, i)
		}
		sum, err := r.expand(factors[i], p.positive)
		if err != nil {
			return err
		}
		inverse, err := r.invert(fraction{num: sum})
		if err != nil {
			return err
		}
		if over, err = r.times(over, inverse); err != nil {
			return err
		}
	}
	if err := p.denominators(s, factors); err != nil {
		return err
	}
	z, err := p.difference(s, over)
	if err != nil {
		return err
	}

	left, right := tree(s.Left, sc.ids, levelSum), tree(s.Right, sc.ids, levelSum)
	d.statement("Theorem", p.name, sc, p.premises, left+" <= "+right)
	d.intros(sc, p.given)
	p.numerators()
	h := sc.names.name("H")
	d.printf("%s\n", wrap("  ", fmt.Sprintf("pose proof (%s) as %s.", strings.Join(slices.Concat([]string{goal}, sc.at, p.given), " "), h)))
	for i, g := range p.positive {
		if g.strict {
			d.notZero(sc, p.signs.known[i])
		}
	}
	texts, proofs := []string{}, []string{}
	for _, f := range factors {
		id := sc.names.name("S")
		text := p.signs.sum(f)
		if len(factors) > 1 {
			text = "(" + text + ")"
		}
		d.printf("%s\n", wrap("  ", fmt.Sprintf("assert (%s : 0 < %s).", id, text)))
		d.printf("%s\n", wrap("  ", "{ "+p.signs.pos(f, surelyPositive(f, p.positive))+". }"))
		d.notZero(sc, id)
		texts, proofs = append(texts, text), append(proofs, "exact "+id)
	}
	scaleText, scaleProof := "1", "lra"
	if len(texts) > 0 {
		scaleText, scaleProof = strings.Join(texts, " * "), proofs[0]
		for _, q := range proofs[1:] {
			scaleProof = fmt.Sprintf("apply product_pos; [%s | %s]", scaleProof, q)
		}
	}
	target := "(" + sc.at.over(p.target.n, p.target.d) + ")"
	if z.text == "" {
		d.printf("%s\n", wrap("  ", fmt.Sprintf("apply (from_gap _ _ %s (%s)).", target, scaleText)))
		d.printf("  - %s.\n  - exact %s.\n", scaleProof, h)
	} else {
		d.printf("%s\n", wrap("  ", fmt.Sprintf("apply (from_gap_modulo _ _ %s (%s) (%s) (%s)).", target, scaleText, z.text, z.over)))
		d.printf("  - %s.\n  - exact %s.\n  - %s.\n", scaleProof, h, z.proof)
	}
	d.printf("  - field; nonzero.\nQed.\n")
	return nil
}

// denominators makes sure that no denominator of the sides vanishes: each is a
// product of what is positive by an assumption or as a factor of the scale.
func (p *proof) denominators(s *Inequality, factors [][]product) error {
	r := p.scope.ring
	known := map[string]bool{}
	add := func(n poly) {
		if len(n) == 0 {
			return
		}
		_, n = primitive(n)
		known[polyKey(n)] = true
		if len(n) == 1 {
			for v, e := range n[0].exps {
				if e > 0 {
					known[polyKey(r.variable(v))] = true
				}
			}
		}
	}
	for _, g := range p.positive {
		if g.strict {
			add(g.n)
		}
	}
	for _, f := range factors {
		sum, err := r.expand(f, p.positive)
		if err != nil {
			return err
		}
		add(sum)
	}
	var check func(e Expr) error
	check = func(e Expr) error {
		switch e := e.(type) {
		case Product:
			for _, f := range e {
				if err := check(f); err != nil {
					return err
				}
			}
			return nil
		case Power:
			return check(e.Base)
		case Negation:
			return check(e.X)
		case Quotient:
			return check(e.Num)
		}
		x, err := r.evaluate(e)
		if err != nil {
			return err
		}
		if c, ok := isConstant(x.num); ok && c.Sign() != 0 {
			return nil
		}
		if len(x.num) > 0 {
			if _, n := primitive(x.num); known[polyKey(n)] {
				return nil
			}
		}
		return fmt.Errorf("%w: a denominator of the sides is not visibly positive", ErrUnsupported)
	}
	for _, e := range slices.Concat(Denominators(s.Left), Denominators(s.Right)) {
		if err := check(e); err != nil {
			return err
		}
	}
	return nil
}

// difference is right - left - target/scale as a combination of the equations.
func (p *proof) difference(s *Inequality, over fraction) (vanishing, error) {
	r := p.scope.ring
	gap, err := r.evaluate(Sum{s.Right, Negation{s.Left}})
	if err != nil {
		return vanishing{}, err
	}
	over, err = r.times(over, fraction{num: scale(new(big.Rat).SetFrac(big.NewInt(-1), p.target.d), p.target.n)})
	if err != nil {
		return vanishing{}, err
	}
	if gap, err = r.plus(gap, over); err != nil {
		return vanishing{}, err
	}
	return p.scope.vanishing(gap, p.zero, p.zeros)
}

// notZero records that what is positive does not vanish.
func (d *document) notZero(sc *scope, positive string) {
	id := sc.names.name("D")
	d.printf("  pose proof (Rgt_not_eq _ _ %s) as %s. nonzero_parts %s.\n", positive, id, id)
}

// vanishing is text/over = 0 by proof; the text is empty where no equation is
// needed.
type vanishing struct{ text, over, proof string }

// vanishing writes x as a combination of the equations n = 0, whose names are
// given, over the denominator of x.
func (sc *scope) vanishing(x fraction, zero []premise, names []string) (vanishing, error) {
	if len(x.num) == 0 {
		return vanishing{}, nil
	}
	hs := make([]poly, len(zero))
	for k, h := range zero {
		hs[k] = h.n
	}
	cofactors, rest, err := sc.ring.divide(x.num, hs)
	if err != nil {
		return vanishing{}, err
	}
	if len(rest) > 0 {
		return vanishing{}, fmt.Errorf("both sides do not agree modulo the equations: %d terms are left over", len(rest))
	}
	e := big.NewInt(1)
	for _, c := range cofactors {
		_, f := integral(c)
		e = lcm(e, f)
	}
	var parts, proofs []string
	for k, c := range cofactors {
		if len(c) == 0 {
			continue
		}
		c = scale(new(big.Rat).SetInt(e), c)
		parts = append(parts, sc.at.factor(c)+" * "+sc.at.factor(hs[k]))
		proofs = append(proofs, "apply zero_product; exact "+names[k])
	}
	over := []string{coqInteger(e)}
	for _, f := range x.den {
		over = append(over, fmt.Sprintf("%s^%d", sc.at.factor(f.p), f.power))
	}
	v := vanishing{over: strings.Join(over, " * ")}
	v.text, v.proof = zeroSum(parts, proofs)
	return v, nil
}
