package statement

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/source"
	"creaseproof/identity/certificate"
	"creaseproof/identity/claim"
	"creaseproof/identity/export"
)

// Of writes a proved claim as a statement. The error wraps export.ErrUnsupported
// where the kind of claim, or of its proof, is not exported.
func Of(ctx context.Context, c *claim.Claim, r *claim.Record) (export.Statement, error) {
	if r.Verdict != claim.Proved {
		return nil, fmt.Errorf("%w: the claim is not proved", export.ErrUnsupported)
	}
	if len(r.Null) > 0 {
		s, err := upToDivergence(ctx, c, r)
		if !errors.Is(err, export.ErrUnsupported) || r.Certificate == nil {
			return s, err
		}
	}
	switch {
	case r.Certificate != nil && r.Reduced != nil:
		return certified(ctx, c, r)
	case c.Best != "" && len(r.Ends)+len(r.Unbounded) > 0:
		return best(ctx, c, r)
	}
	if c.Jump || len(c.Modulo) > 0 || len(c.Restrict) > 0 || len(c.Solve) > 0 || c.Best != "" {
		return nil, fmt.Errorf("%w: claims at jumps, on equations, with restrictions or with constants to find", export.ErrUnsupported)
	}
	in, ex, err := c.Setting.NewExact(ctx)
	if err != nil {
		return nil, err
	}
	if err := ex.AssumeSigns(in, c.Assume); err != nil {
		return nil, err
	}
	t := &trees{Exact: ex, vars: map[string]algebra.Var{}}
	w := &writer{t: t, claim: c, in: &entropy.Interpreter[pair]{Setting: c.Setting, Arith: t, Given: c.Given}}
	s := &export.Identity{Name: c.Name, Comment: text(c)}
	switch {
	case c.Statement.Relation == formula.Equal && c.Divergence:
		s.Equalities, err = w.euler()
	case c.Statement.Relation == formula.Equal:
		s.Equalities, err = w.sides()
	case c.Statement.Relation == formula.Span:
		s.Equalities, err = w.span(r)
	default:
		err = fmt.Errorf("%w: this kind of claim", export.ErrUnsupported)
	}
	if err != nil {
		return nil, unsupported(err)
	}
	return s, w.complete(s)
}

// unsupported makes limits of the exact ring limits of the export.
func unsupported(err error) error {
	var finer *jet.FinerAngles
	if errors.As(err, &finer) || errors.Is(err, jet.ErrOutside) || errors.Is(err, algebra.ErrLimit) {
		return fmt.Errorf("%w: %w", export.ErrUnsupported, err)
	}
	return err
}

func text(c *claim.Claim) string {
	s := c.Statement.Text()
	if c.Divergence {
		s += ", up to a divergence"
	}
	return s
}

type writer struct {
	t     *trees
	claim *claim.Claim
	in    *entropy.Interpreter[pair]
}

func (w *writer) sides() ([]export.Equality, error) {
	st := w.claim.Statement
	l, err := w.in.Eval(st.Left)
	if err != nil {
		return nil, err
	}
	r, err := w.in.Eval(st.Right)
	if err != nil {
		return nil, err
	}
	if l.Vector == nil && r.Vector == nil {
		return []export.Equality{{Left: l.Scalar.x, Right: r.Scalar.x}}, w.agree(l.Scalar, r.Scalar)
	}
	var out []export.Equality
	for i, c := range w.claim.Setting.Coordinates {
		right := export.Expr(export.Number("0"))
		if r.Vector != nil {
			right = r.Vector[i].x
		}
		if l.Vector == nil {
			return nil, fmt.Errorf("%w: a number beside a vector", export.ErrUnsupported)
		}
		other := pair{}
		if r.Vector != nil {
			other = r.Vector[i]
		}
		if err := w.agree(l.Vector[i], other); err != nil {
			return nil, err
		}
		out = append(out, export.Equality{Label: c, Left: l.Vector[i].x, Right: right})
	}
	return out, nil
}

// agree makes sure that two sides are equal without the assumptions, which the
// statement of an identity does not hold.
func (w *writer) agree(a, b pair) error {
	gap, err := w.t.Ring.Sub(a.f, b.f)
	if err == nil && !gap.IsZero() {
		err = fmt.Errorf("%w: an identity that rests on assumptions", export.ErrUnsupported)
	}
	return err
}

func (w *writer) euler() ([]export.Equality, error) {
	l, err := w.in.Scalar(w.claim.Statement.Left)
	if err != nil {
		return nil, err
	}
	r, err := w.in.Scalar(w.claim.Statement.Right)
	if err != nil {
		return nil, err
	}
	gap, err := w.t.Add(l, w.t.Neg(r))
	if err != nil {
		return nil, err
	}
	var out []export.Equality
	for a, u := range w.claim.Setting.Unknowns {
		e, err := w.t.Euler(gap, a)
		if err != nil {
			return nil, err
		}
		out = append(out, export.Equality{Label: "Euler expression for " + u, Left: e.x, Right: export.Number("0")})
	}
	return out, nil
}

// span states Σ f_k F_k = F, with the coefficients of the record.
func (w *writer) span(r *claim.Record) ([]export.Equality, error) {
	st := w.claim.Statement
	if len(r.Coefficients) != len(st.Generators) {
		return nil, fmt.Errorf("%w: no coefficients are recorded", export.ErrUnsupported)
	}
	scope, err := w.claim.Setting.Scope(false)
	if err != nil {
		return nil, err
	}
	n := len(w.claim.Setting.Coordinates)
	sum := make([]pair, n)
	for i := range sum {
		sum[i] = pair{export.Number("0"), algebra.Fraction{}}
	}
	for k, g := range st.Generators {
		node, err := parse(scope, r.Coefficients[k])
		if err != nil {
			return nil, err
		}
		c, err := w.in.Scalar(node)
		if err != nil {
			return nil, err
		}
		f, err := w.in.Field(g)
		if err != nil {
			return nil, err
		}
		for i := range sum {
			p, err := w.t.Mul(c, f[i])
			if err != nil {
				return nil, err
			}
			if sum[i], err = w.t.Add(sum[i], p); err != nil {
				return nil, err
			}
		}
	}
	target, err := w.in.Field(st.Field)
	if err != nil {
		return nil, err
	}
	var out []export.Equality
	for i, c := range w.claim.Setting.Coordinates {
		out = append(out, export.Equality{Label: c, Left: target[i].x, Right: sum[i].x})
	}
	return out, nil
}

// complete adds variables, denominators and the relations of the kernels.
func (w *writer) complete(s *export.Identity) error {
	used := map[string]bool{}
	var walk func(e export.Expr)
	walk = func(e export.Expr) {
		switch e := e.(type) {
		case export.Variable:
			used[string(e)] = true
		case export.Sum:
			for _, x := range e {
				walk(x)
			}
		case export.Product:
			for _, x := range e {
				walk(x)
			}
		case export.Quotient:
			walk(e.Num)
			walk(e.Den)
		case export.Power:
			walk(e.Base)
		case export.Negation:
			walk(e.X)
		}
	}
	for _, q := range s.Equalities {
		walk(q.Left)
		walk(q.Right)
	}
	ring := w.t.Ring
	var vars []algebra.Var
	add := func(v algebra.Var) {
		if !slices.Contains(vars, v) {
			vars = append(vars, v)
		}
	}
	for name := range used {
		v, ok := w.t.vars[name]
		if !ok {
			return fmt.Errorf("%w: the name %s", export.ErrUnsupported, name)
		}
		add(v)
	}
	for i := 0; i < len(vars); i++ {
		if q, a := ring.Relation(vars[i]); q > 0 {
			for _, v := range a.Vars() {
				add(v)
			}
		}
	}
	slices.Sort(vars)
	for _, v := range vars {
		s.Variables = append(s.Variables, ring.Name(v))
		if q, a := ring.Relation(v); q > 0 {
			s.Relations = append(s.Relations, polynomial(ring, algebra.Variable(v).Pow(q).Sub(a)))
		}
	}
	var seen []string
	for _, q := range s.Equalities {
		for _, e := range []export.Expr{q.Left, q.Right} {
			for _, d := range export.Denominators(e) {
				if k := fmt.Sprintf("%#v", d); !slices.Contains(seen, k) {
					seen = append(seen, k)
					s.NonZero = append(s.NonZero, d)
				}
			}
		}
	}
	return nil
}

func polynomial(ring *jet.Ring, p algebra.Poly) certificate.Polynomial {
	var out certificate.Polynomial
	for m, c := range p.Terms() {
		t := certificate.Term{C: c.String()}
		for _, pw := range m.Powers() {
			if t.M == nil {
				t.M = map[string]int{}
			}
			t.M[ring.Name(pw.Var)] = pw.Exp
		}
		out = append(out, t)
	}
	return out
}

// parse reads a coefficient that a record prints.
func parse(s *formula.Scope, x string) (formula.Node, error) {
	n, err := s.ParseExpr(source.Text{S: x})
	if err != nil {
		return nil, fmt.Errorf("%w: the coefficient %s", export.ErrUnsupported, x)
	}
	return n, nil
}
