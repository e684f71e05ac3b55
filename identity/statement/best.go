package statement

import (
	"context"
	"fmt"
	"reflect"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
	"creaseproof/identity/claim"
	"creaseproof/identity/exact"
	"creaseproof/identity/export"
)

// best writes the set of values of a constant for which an inequality holds: the
// inequality at each end, a jet beyond each end at which it fails for every
// value there, and for a side without an end that the slope of the gap in the
// constant has a sign. A jet whose roots are not rational is left out. Since the
// gap is affine in the constant, this is all of the claim.
func best(ctx context.Context, c *claim.Claim, r *claim.Record) (export.Statement, error) {
	s := &export.Group{Name: c.Name, Comment: text(c) + ": " + r.Solution}
	err := replay(ctx, c, func(d *exact.Problem, g *exact.Gap) error {
		v := d.Ring.ConstantVar(c.Best)
		s.Statements = nil
		for _, e := range r.Ends {
			if err := end(s, d, g, v, &e); err != nil {
				return err
			}
		}
		for _, u := range r.Unbounded {
			h := *g
			side := "no lower end"
			if h.Poly = g.Poly.Deriv(v); !u.Upper {
				h.Poly = h.Poly.Neg()
			} else {
				side = "no upper end"
			}
			h.Value = algebra.FromPoly(h.Poly)
			x, err := reduced(d, &h, u.Reduced, u.Certificate)
			if err != nil {
				return err
			}
			x.Name = c.Name + ", " + side
			x.Comment = "the slope of right - left in " + c.Best
			if !u.Upper {
				x.Comment = "minus " + x.Comment
			}
			x.Comment += " is not negative"
			s.Statements = append(s.Statements, x)
		}
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

// reduced is the statement of a certificate that a record holds. Where the gap
// is zero no certificate is needed, and what the record holds is none of it.
func reduced(d *exact.Problem, g *exact.Gap, problem *certificate.Claim, cert *certificate.Certificate) (*export.Inequality, error) {
	red := d.Reduce(g)
	if g.Poly.IsZero() {
		return &export.Inequality{Claim: red.Claim, Certificate: &certificate.Certificate{
			Cofactors: make([]certificate.Polynomial, len(red.Claim.Zero)),
		}}, nil
	}
	if problem == nil || cert == nil || !reflect.DeepEqual(red.Claim, problem) {
		return nil, fmt.Errorf("%w: the certificate of the record is that of another inequality", export.ErrUnsupported)
	}
	return &export.Inequality{Claim: problem, Certificate: cert}, nil
}

func end(s *export.Group, d *exact.Problem, g *exact.Gap, v algebra.Var, e *claim.End) error {
	c := d.Claim
	x, err := algebra.ParseRat(e.Value)
	if err != nil {
		return err
	}
	at := g.At(v, x)
	holds, err := reduced(d, at, e.Reduced, e.Certificate)
	if err != nil {
		return err
	}
	holds.Name = c.Name + ", at " + c.Best + " = " + e.Value
	holds.Comment = text(c) + ", at " + c.Best + " = " + e.Value
	holds.Origin = origin(d, at)
	whole, err := withSides(holds, d, at, d.Reduce(at), map[algebra.Var]export.Expr{v: export.Number(e.Value)}, nil)
	if err == nil && whole != nil {
		holds = whole
	}
	s.Statements = append(s.Statements, holds)
	if e.Beyond == nil || e.Outer != "" {
		return nil
	}
	if fails := beyond(d, g, v, e); fails != nil {
		s.Statements = append(s.Statements, fails)
	}
	return nil
}

// beyond states that the inequality fails at the jet beyond an end, where all
// assumptions hold, nil where that cannot be exported.
func beyond(d *exact.Problem, g *exact.Gap, v algebra.Var, e *claim.End) *export.Beyond {
	p, err := d.Replay(e.Beyond, d.Points(g.Value, g.Left, g.Right))
	if err != nil {
		return nil
	}
	t := &trees{Exact: d.Ex, vars: map[string]algebra.Var{}}
	c := d.Claim
	side := "below"
	if e.Upper {
		side = "above"
	}
	s := &export.Beyond{
		Name: c.Name + ", " + side + " " + e.Value, Comment: "the inequality fails at a jet for every value " + side + " " + e.Value,
		Constant: c.Best, Value: e.Value, Upper: e.Upper, At: map[string]string{},
	}
	if s.Left, s.Right, err = sides(c, t); err != nil {
		return nil
	}
	if s.Assumed, err = assumed(c, t); err != nil {
		return nil
	}
	used := []export.Expr{s.Left, s.Right}
	for _, a := range s.Assumed {
		used = append(used, a.Left, a.Right)
	}
	kernels, err := t.kernels(used)
	if err != nil {
		return nil
	}
	for _, a := range kernels {
		s.Assumed, used = append(s.Assumed, a), append(used, a.Left, a.Right)
	}
	for name, w := range t.vars {
		if w == v || !slices.ContainsFunc(used, func(e export.Expr) bool { return occurs(name, e) }) {
			continue
		}
		x, ok := d.Ring.Exact(jet.Of(w), p)
		if !ok {
			return nil
		}
		s.At[name] = x.String()
	}
	if _, err := export.Coq("", s); err != nil {
		return nil
	}
	return s
}
