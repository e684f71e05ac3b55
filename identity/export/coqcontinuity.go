package export

import (
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// byContinuity writes the theorem where the multiplier may vanish: a lemma on
// multiplier · target, and the passage to the limit.
func (p *proof) byContinuity(name string) error {
	end, value, err := p.end()
	if err != nil {
		return err
	}
	p.doc.continuity = true
	lemma := p.productLemma(name)
	d, at := p.doc, p.scope.at

	t := p.scope.names.name("s")
	moving, ends := slices.Clone(at), slices.Clone(at)
	for i, y := range end {
		if y != nil {
			moving[i] = fmt.Sprintf("line %s %s %s", at[i], coqNumber(y), t)
			ends[i] = coqNumber(y)
		}
	}
	for i := range moving {
		if moving[i] != at[i] {
			moving[i] = "(" + moving[i] + ")"
		}
	}
	along := &signs{at: moving, positive: p.positive}

	d.statement(p.kind, name, p.scope, p.premises, "0 <= "+at.over(p.target.n, p.target.d))
	d.intros(p.scope, p.given)
	p.numerators()
	p.denominator()
	if len(p.target.n) > chunk {
		d.printf("%s\n", wrap("  ", fmt.Sprintf("apply (nonneg_equal _ (%s)); [ring |].", at.chunked(p.target.n))))
	}
	h := p.scope.names.name("H")
	d.printf("  pose proof (by_continuity\n%s\n%s) as %s.\n",
		wrap("    ", fmt.Sprintf("(fun %s => %s)", t, along.sum(p.multiplier))),
		wrap("    ", fmt.Sprintf("(fun %s => %s)", t, moving.chunked(p.target.n))), h)
	d.printf("  cbv beta in %s. rewrite ?line_start, ?line_end in %s. apply %s.\n", h, h, h)
	d.printf("  - polynomial_in_t.\n  - polynomial_in_t.\n")
	sign := "Rgt_not_eq"
	if value.Sign() < 0 {
		sign = "Rlt_not_eq"
	}
	d.printf("%s\n    apply %s. lra.\n", wrap("  ", fmt.Sprintf("- replace (%s) with %s by field.",
		(&signs{at: ends, positive: p.positive}).sum(p.multiplier), coqNumber(value))), sign)
	p.nearby(lemma, t, end, moving, ends)
	d.printf("Qed.\n")
	return nil
}

// productLemma states 0 <= M and 0 <= M p under the premises on integer
// polynomials.
func (p *proof) productLemma(name string) string {
	d, at := p.doc, p.scope.at
	lemma := d.names.name(name + "_product")
	var premises []string
	for _, g := range p.positive {
		relation := " <= "
		if g.strict {
			relation = " < "
		}
		premises = append(premises, "0"+relation+at.poly(g.n))
	}
	for _, h := range p.zero {
		premises = append(premises, at.poly(h.n)+" = 0")
	}
	p.signs.known, p.zeros = p.given[:len(p.positive)], p.given[len(p.positive):]
	m := "(" + p.signs.sum(p.multiplier) + ")"
	d.statement("Lemma", lemma, p.scope, premises, fmt.Sprintf("0 <= %s /\\ 0 <= %s * (%s)", m, m, at.chunked(p.target.n)))
	d.intros(p.scope, p.given)
	d.printf("  split.\n  {\n")
	p.signs.nonneg(d, "    ", "    ", p.multiplier)
	d.printf("  }\n  {\n")
	p.identity("    ")
	d.printf("  }\nQed.\n")
	return lemma
}

// nearby proves that the lemma applies for all small t > 0.
func (p *proof) nearby(lemma, t string, end []*big.Rat, moving, ends places) {
	d, names := p.doc, p.scope.names
	all, pattern := "near_interval", names.name("Ht")
	interval := pattern
	steps := make([]string, len(p.positive))
	for i := len(p.positive) - 1; i >= 0; i-- {
		g := p.positive[i]
		moves := false
		for v, occurs := range p.scope.ring.occurs(g.n) {
			moves = moves || occurs && end[v] != nil
		}
		switch {
		case !moves:
			steps[i] = "exact " + p.signs.known[i] + "."
		case g.strict:
			near, here := names.name("N"), names.name("K")
			d.printf("%s\n", wrap("  ", fmt.Sprintf("%s assert (%s : near (fun %s => 0 < %s)).", bullet(all), near, t, moving.poly(g.n))))
			d.printf("    { apply (near_positive (fun %s => %s)); [polynomial_in_t |].\n      rewrite ?line_start. exact %s. }\n",
				t, strings.ReplaceAll(wrap("        ", moving.poly(g.n)), "        ", ""), p.signs.known[i])
			all = fmt.Sprintf("(near_and _ _ %s %s)", near, all)
			pattern = fmt.Sprintf("[%s %s]", here, pattern)
			steps[i] = "exact " + here + "."
		default:
			steps[i] = fmt.Sprintf("replace (%s) with ((1 - %s) * (%s) + %s * (%s)) by (unfold line; ring). apply between_nonneg; [exact %s | exact %s | lra].",
				moving.poly(g.n), t, p.scope.at.poly(g.n), t, ends.poly(g.n), interval, p.signs.known[i])
		}
	}
	d.printf("  %s apply near_implies with (2 := %s).\n    intros %s %s.\n", bullet(all), all, t, pattern)
	d.printf("%s\n", wrap("    ", fmt.Sprintf("apply (%s %s).", lemma, strings.Join(moving, " "))))
	for _, s := range steps {
		d.printf("%s\n", wrap("    ", "+ "+s))
	}
	for _, z := range p.zeros {
		d.printf("    + exact %s.\n", z)
	}
}

// bullet opens the last goal once: with the first step made.
func bullet(all string) string {
	if all == "near_interval" {
		return "-"
	}
	return " "
}

// end chooses the point y: for each variable that moves a rational number, nil
// for the others, such that the bounds that are not strict hold and the
// multiplier is a number there, value, other than zero.
func (p *proof) end() (y []*big.Rat, value *big.Rat, err error) {
	r := p.scope.ring
	m, err := r.expand(p.multiplier, p.positive)
	if err != nil {
		return nil, nil, err
	}
	fixed := make([]bool, len(r.names))
	lower, upper := make([]*big.Rat, len(r.names)), make([]*big.Rat, len(r.names))
	for _, h := range p.zero {
		fix(fixed, r.occurs(h.n))
	}
	for _, g := range p.positive {
		if g.strict {
			continue
		}
		v, at, isLower, ok := r.bound(g.n)
		switch {
		case !ok:
			fix(fixed, r.occurs(g.n))
		case isLower && (lower[v] == nil || at.Cmp(lower[v]) > 0):
			lower[v] = at
		case !isLower && (upper[v] == nil || at.Cmp(upper[v]) < 0):
			upper[v] = at
		}
	}
	occurs := r.occurs(m)
	for try := range 2000 {
		y = make([]*big.Rat, len(r.names))
		for v := range y {
			if occurs[v] && !fixed[v] {
				y[v] = choose(lower[v], upper[v], mix(try, v))
			}
		}
		if value, ok := isConstant(at(m, y)); ok && value.Sign() != 0 {
			return y, value, nil
		}
	}
	return nil, nil, fmt.Errorf("%w: no point was found at which the multiplier is a number other than zero", ErrUnsupported)
}

func fix(fixed, occurs []bool) {
	for i, o := range occurs {
		fixed[i] = fixed[i] || o
	}
}

// mix is a small number from 0 to 6 that varies with try and variable: 0
// for all variables first.
func mix(try, variable int) int64 {
	if try == 0 {
		return 0
	}
	x := uint64(try)*0x9E3779B97F4A7C15 + uint64(variable)*0xBF58476D1CE4E5B9
	x ^= x >> 31
	x *= 0x94D049BB133111EB
	return int64((x >> 33) % 7)
}

// choose is number k of a list of points of an interval.
func choose(lower, upper *big.Rat, k int64) *big.Rat {
	switch {
	case lower != nil && upper != nil:
		width := new(big.Rat).Sub(upper, lower)
		part := []*big.Rat{big.NewRat(1, 2), big.NewRat(1, 3), big.NewRat(2, 3), big.NewRat(1, 4), big.NewRat(3, 4), big.NewRat(1, 5), big.NewRat(4, 5)}[k]
		return width.Add(lower, width.Mul(width, part))
	case lower != nil:
		return new(big.Rat).Add(lower, big.NewRat(k+1, 1))
	case upper != nil:
		return new(big.Rat).Sub(upper, big.NewRat(k+1, 1))
	}
	return big.NewRat([]int64{1, 2, -1, 0, 3, -2, -3}[k], 1)
}

// bound reads g as a·v + b with a ≠ 0.
func (r *ring) bound(g poly) (v int, at *big.Rat, lower, ok bool) {
	v, a, b := -1, new(big.Rat), new(big.Rat)
	for _, t := range g {
		switch degree(t.exps) {
		case 0:
			b = t.coef
		case 1:
			if v >= 0 {
				return 0, nil, false, false
			}
			v, a = slices.Index(t.exps, 1), t.coef
		default:
			return 0, nil, false, false
		}
	}
	if v < 0 {
		return 0, nil, false, false
	}
	at = new(big.Rat).Quo(new(big.Rat).Neg(b), a)
	return v, at, a.Sign() > 0, true
}
