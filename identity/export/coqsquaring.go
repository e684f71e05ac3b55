package export

import (
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// bySquaring writes the theorem where the certificate is a squaring: first the
// lemma on the squares, by the certificate inside, then what follows from it.
func (p *proof) bySquaring(name string) error {
	d, x := p.doc, p.squaring
	inner := *p.scope
	inner.names = p.scope.names.sub()
	lemma := d.names.name(name + "_squares")
	q := &proof{doc: d, scope: &inner, name: lemma, kind: "Lemma"}
	var err error
	if q.cleared, err = inner.ring.clear(x.next, x.proof); err != nil {
		return fmt.Errorf("after squaring: %w", err)
	}
	q.state()
	if err := q.prove(lemma); err != nil {
		return fmt.Errorf("after squaring: %w", err)
	}

	d.statement(p.kind, name, p.scope, p.premises, "0 <= "+p.scope.at.over(p.target.n, p.target.d))
	d.intros(p.scope, p.given)
	p.numerators()
	p.denominator()
	z, zero := p.combination()
	var parts []string
	for _, t := range []string{p.signs.sum(x.left), p.scope.at.poly(x.right), z} {
		parts = append(parts, wrap("    ", "("+t+")"))
	}
	square := new(big.Int).Mul(x.scale, x.scale)
	g := p.scope.at.over(q.target.n, q.target.d)
	d.printf("  apply (by_squaring %s _\n%s\n    %s\n%s).\n", coqInteger(p.clear), strings.Join(parts, "\n"), coqInteger(square), wrap("    ", "("+g+")"))
	d.printf("  - lra.\n")
	p.signs.nonneg(d, "  - ", "    ", x.left)
	d.printf("  - %s.\n  - ring.\n  - lra.\n", zero)
	d.printf("%s\n", wrap("  ", "- exact ("+strings.Join(slices.Concat([]string{lemma}, p.scope.at, p.given), " ")+")."))
	d.printf("  - field.\nQed.\n")
	return nil
}
