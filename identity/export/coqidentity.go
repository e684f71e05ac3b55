package export

import (
	"errors"
	"fmt"
	"strings"
)

func (s *Identity) coq(d *document) error {
	if len(s.Equalities) == 0 {
		return errors.New("there is no equality")
	}
	sc, name, err := d.open(s, s.Variables)
	if err != nil {
		return err
	}
	p := &proof{doc: d, scope: sc, name: name, cleared: &cleared{}}
	for k, h := range s.Relations {
		q, err := sc.ring.premise(h, false)
		if err != nil {
			return fmt.Errorf("relation %d: %w", k, err)
		}
		p.zero = append(p.zero, q)
	}
	p.state()
	for _, e := range s.NonZero {
		if err := inspect(e, sc.ring.declared); err != nil {
			return err
		}
		p.premises = append(p.premises, tree(e, sc.ids, levelSum)+" <> 0")
	}
	nonzero := make([]string, len(s.NonZero))
	for i := range nonzero {
		nonzero[i] = sc.names.name("D")
	}
	p.given = append(p.given, nonzero...)

	// The statement comes before its proof, so what may fail comes first.
	differences := make([]fraction, len(s.Equalities))
	sides := make([]string, len(s.Equalities))
	for i, q := range s.Equalities {
		for _, e := range []Expr{q.Left, q.Right} {
			if err := inspect(e, sc.ring.declared); err != nil {
				return err
			}
		}
		if differences[i], err = sc.ring.evaluate(Sum{q.Left, Negation{q.Right}}); err != nil {
			return err
		}
		sides[i] = tree(q.Left, sc.ids, levelSum) + " = " + tree(q.Right, sc.ids, levelSum)
	}
	d.statement("Theorem", name, sc, p.premises, strings.Join(sides, " /\\ "))
	d.intros(sc, p.given)
	p.numerators()
	for _, id := range nonzero {
		d.printf("  nonzero_parts %s.\n", id)
	}
	if len(sides) > 1 {
		d.printf("  repeat match goal with |- _ /\\ _ => split end.\n")
	}
	for i, x := range differences {
		z, err := sc.vanishing(x, p.zero, p.zeros)
		if err != nil && len(s.Relations) > 0 {
			return fmt.Errorf("equality %d: %w", i, err)
		}
		if err != nil || z.text == "" {
			d.printf("  - field; nonzero.\n")
			continue
		}
		d.printf("%s\n", wrap("  ", fmt.Sprintf("- apply (equal_from_difference _ _ (%s) (%s)).", z.text, z.over)))
		d.printf("    + %s.\n    + field; nonzero.\n", z.proof)
	}
	d.printf("Qed.\n")
	return nil
}
