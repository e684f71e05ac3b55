package export

import (
	"errors"
	"fmt"
	"math/big"
	"slices"
	"strings"

	"creaseproof/identity/certificate"
)

// proof is an inequality on its way into a document.
type proof struct {
	*cleared
	doc   *document
	scope *scope
	name  string
	kind  string // Theorem or Lemma
	signs *signs
	zeros []string // names of the premises n = 0
	// premises of the theorem, and the names under which it introduces them
	premises []string
	given    []string
	integer  []string // names of the premises on integer polynomials
}

func (s *Inequality) coq(d *document) error {
	if s.Claim == nil {
		return errors.New("there is no claim")
	}
	if (s.Left == nil) != (s.Right == nil) {
		return errors.New("one side is given without the other")
	}
	sc, name, err := d.open(s, s.Claim.Variables)
	if err != nil {
		return err
	}
	if s.Certificate != nil && certificate.WhereMultiplierVanishes(s.Claim, s.Certificate) == certificate.WithTarget {
		return fmt.Errorf("%w: a multiplier that vanishes where the two sides are equal", ErrUnsupported)
	}
	p := &proof{doc: d, scope: sc, name: name, kind: "Theorem"}
	if p.cleared, err = sc.ring.clear(s.Claim, s.Certificate); err != nil {
		return err
	}
	p.state()
	goal := name
	if s.Left != nil {
		goal = d.names.name(name + "_gap")
	}
	if err := p.prove(goal); err != nil || s.Left == nil {
		return err
	}
	return p.compare(s, goal)
}

// prove writes the theorem 0 <= target in the way that its certificate asks for.
func (p *proof) prove(name string) error {
	switch {
	case p.squaring != nil:
		return p.bySquaring(name)
	case p.multiplier != nil && surelyPositive(p.multiplier, p.positive) < 0:
		return p.byContinuity(name)
	}
	p.direct(name)
	return nil
}

// state prepares the premises of the theorem and the names of what follows.
func (p *proof) state() {
	n := p.scope.names
	p.signs = &signs{at: p.scope.at, positive: p.positive}
	for i, g := range p.positive {
		relation := " <= "
		if g.strict {
			relation = " < "
		}
		p.premises = append(p.premises, "0"+relation+p.scope.at.over(g.n, g.d))
		p.given = append(p.given, n.name(fmt.Sprintf("P%d", i)))
	}
	for i, h := range p.zero {
		p.premises = append(p.premises, p.scope.at.over(h.n, h.d)+" = 0")
		p.given = append(p.given, n.name(fmt.Sprintf("Z%d", i)))
	}
	for i, q := range slices.Concat(p.positive, p.zero) {
		id := p.given[i]
		if !isOne(q.d) {
			id = n.name(id + "n")
		}
		p.integer = append(p.integer, id)
	}
}

// numerators turns the premises into those on integer polynomials.
func (p *proof) numerators() {
	n := len(p.positive)
	p.signs.known, p.zeros = p.integer[:n], p.integer[n:]
	for i, g := range p.positive {
		relation, lemma := "<=", "numerator_nonneg"
		if g.strict {
			relation, lemma = "<", "numerator_pos"
		}
		p.numerator(i, g, "0 "+relation+" "+p.scope.at.poly(g.n), lemma)
	}
	for k, h := range p.zero {
		p.numerator(n+k, h, p.scope.at.poly(h.n)+" = 0", "numerator_zero")
	}
}

func (p *proof) numerator(i int, g premise, says, lemma string) {
	if isOne(g.d) {
		return
	}
	p.doc.printf("%s\n%s\n", wrap("  ", fmt.Sprintf("assert (%s : %s).", p.integer[i], says)),
		wrap("  ", fmt.Sprintf("{ apply (%s %s %s); [lra | exact %s]. }", lemma, p.scope.at.factor(g.n), coqInteger(g.d), p.given[i])))
}

func isOne(d *big.Int) bool { return d.IsInt64() && d.Int64() == 1 }

// denominator begins the proof of 0 <= n/d: it leaves 0 <= n.
func (p *proof) denominator() {
	if !isOne(p.target.d) {
		p.doc.printf("  apply quotient_nonneg; [lra |].\n")
	}
}

// direct writes the theorem where the multiplier is 1 or positive.
func (p *proof) direct(name string) {
	d := p.doc
	d.statement(p.kind, name, p.scope, p.premises, "0 <= "+p.scope.at.over(p.target.n, p.target.d))
	d.intros(p.scope, p.given)
	p.numerators()
	p.denominator()
	if p.multiplier != nil {
		d.printf("%s\n", wrap("  ", fmt.Sprintf("apply (divide_out (%s)).", p.signs.sum(p.multiplier))))
		d.printf("%s\n", wrap("  ", "{ "+p.signs.pos(p.multiplier, surelyPositive(p.multiplier, p.positive))+". }"))
	}
	p.identity("  ")
	d.printf("Qed.\n")
}

// identity proves 0 <= multiplier · target.n by the identity.
func (p *proof) identity(indent string) {
	d := p.doc
	z, zero := p.combination()
	d.printf("%sapply (from_identity %s _\n%s\n%s).\n", indent, coqInteger(p.clear),
		wrap(indent+"  ", "("+p.signs.sum(p.squares)+")"), wrap(indent+"  ", "("+z+")"))
	d.printf("%s- lra.\n", indent)
	p.signs.nonneg(d, indent+"- ", indent+"  ", p.squares)
	d.printf("%s- %s.\n%s- ring.\n", indent, zero, indent)
}

// combination is Σ cofactor · equation, and a tactic that it is 0.
func (p *proof) combination() (text, tactic string) {
	var parts, proofs []string
	for k, c := range p.cofactors {
		if len(c) == 0 {
			continue
		}
		parts = append(parts, p.scope.at.factor(c)+" * "+p.scope.at.factor(p.zero[k].n))
		proofs = append(proofs, "apply zero_product; exact "+p.zeros[k])
	}
	return zeroSum(parts, proofs)
}

func zeroSum(parts, proofs []string) (text, tactic string) {
	if len(parts) == 0 {
		return "0", "reflexivity"
	}
	tactic = proofs[0]
	for _, q := range proofs[1:] {
		tactic = fmt.Sprintf("apply zero_sum; [%s | %s]", tactic, q)
	}
	return strings.Join(parts, " + "), tactic
}
