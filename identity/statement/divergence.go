package statement

import (
	"context"
	"fmt"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
	"creaseproof/identity/exact"
	"creaseproof/identity/export"
)

// upToDivergence writes left <= right up to a divergence: the inequality with
// the null Lagrangian N that was found, left <= right + N where both can be
// written in the variables of the certificate and 0 <= target otherwise, and
// the identity that N is the divergence of a potential.
func upToDivergence(ctx context.Context, c *claim.Claim, r *claim.Record) (export.Statement, error) {
	s := &export.Group{Name: c.Name, Comment: text(c) + ": " + r.Solution + " is a divergence, so that its integral is a boundary term"}
	err := visited(ctx, c, func(d *exact.Problem) error {
		g, err := d.Gap()
		if err != nil {
			return err
		}
		list, err := d.NullLagrangians(g, len(r.Null))
		if err != nil {
			return err
		}
		x := make([]algebra.Rat, len(r.Null))
		for k, t := range r.Null {
			if x[k], err = algebra.ParseRat(t); err != nil {
				return err
			}
		}
		h, potential, err := d.AddNull(g, list, x)
		if err != nil {
			return err
		}
		if d.FormatNull(list, x) != r.Solution {
			return fmt.Errorf("%w: the null Lagrangian of the record is another one", export.ErrUnsupported)
		}
		n := &null{list: list, x: x, potential: potential}
		s.Statements = nil
		if err := n.inequality(s, d, h, r); err != nil {
			return err
		}
		id, err := n.identity(c, d)
		if err != nil {
			return err
		}
		s.Statements = append(s.Statements, id)
		return nil
	})
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	if err != nil {
		return nil, fmt.Errorf("%w: %w", export.ErrUnsupported, err)
	}
	return s, nil
}

// null is N = Σ x_k coef_k minor_k with its potential.
type null struct {
	list      []exact.NullLagrangian
	x         []algebra.Rat
	potential []algebra.Fraction
}

// tree is N, as a sum of minors with their coefficients.
func (n *null) tree(t *trees) export.Expr {
	var sum export.Expr = export.Number("0")
	for k, l := range n.list {
		if n.x[k].IsZero() {
			continue
		}
		x := t.product(t.written(l.Coef.Scale(n.x[k].Abs())), t.written(l.Minor))
		if n.x[k].Sign() < 0 {
			x = neg(x)
		}
		sum = t.sum(sum, x)
	}
	return sum
}

// inequality adds the certified inequality.
func (n *null) inequality(s *export.Group, d *exact.Problem, h *exact.Gap, r *claim.Record) error {
	c := d.Claim
	if err := d.RemoveAngle(h); err != nil {
		return err
	}
	if h.Poly.IsZero() && (r.Reduced != nil || r.Certificate != nil) {
		return fmt.Errorf("%w: the certificate of the record is that of another inequality", export.ErrUnsupported)
	}
	x, err := reduced(d, h, r.Reduced, r.Certificate)
	if err != nil {
		return err
	}
	x.Name, x.Comment = c.Name+", at every jet", c.Statement.Text()+", with N added to the greater side"
	x.Origin = "With N added on the greater side: " + origin(d, h)
	whole, err := withSides(x, d, h, d.Reduce(h), nil, n)
	if err == nil && whole != nil {
		x = whole
	}
	s.Statements = append(s.Statements, x)
	return nil
}

// identity is N = D_1 P_1 + ... + D_n P_n.
func (n *null) identity(c *claim.Claim, d *exact.Problem) (*export.Identity, error) {
	t := &trees{Exact: d.Ex, vars: map[string]algebra.Var{}}
	var sum export.Expr = export.Number("0")
	for i, p := range n.potential {
		e, err := t.derive(t.written(p), func(v algebra.Var) (algebra.Fraction, error) { return d.Ring.Total(jet.Of(v), i) })
		if err != nil {
			return nil, err
		}
		sum = t.sum(sum, e)
	}
	s := &export.Identity{
		Name: c.Name + ", divergence", Comment: d.FormatPotential(n.potential),
		Equalities: []export.Equality{{Label: "N as a divergence", Left: n.tree(t), Right: sum}},
	}
	w := &writer{t: t, claim: c}
	return s, w.complete(s)
}
