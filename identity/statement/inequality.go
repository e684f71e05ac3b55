package statement

import (
	"context"
	"errors"
	"fmt"
	"maps"
	"reflect"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
	"creaseproof/identity/claim"
	"creaseproof/identity/exact"
	"creaseproof/identity/export"
)

// certified writes an inequality with a certificate: as left <= right where both
// sides can be written in the variables of the certificate, else as
// 0 <= target.
func certified(ctx context.Context, c *claim.Claim, r *claim.Record) (export.Statement, error) {
	s := &export.Inequality{Name: c.Name, Comment: text(c), Claim: r.Reduced, Certificate: r.Certificate}
	if r.OnWells || r.Parameters || len(r.Null) > 0 {
		s.Origin = originUnknown
		return s, nil // the target is not right - left in the jets of the claim
	}
	s.Origin = originUnknown
	var whole *export.Inequality
	err := replay(ctx, c, func(d *exact.Problem, g *exact.Gap) error {
		red := d.Reduce(g)
		if !reflect.DeepEqual(red.Claim, r.Reduced) {
			return nil
		}
		var err error
		s.Origin = origin(d, g)
		whole, err = withSides(s, d, g, red, nil, nil)
		return err
	})
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	if err != nil || whole == nil {
		return s, nil
	}
	return whole, nil
}

// errDone ends a replay.
var errDone = errors.New("done")

// replay makes a claim exact again, as far as the gap with its angle removed,
// and visits that.
func replay(ctx context.Context, c *claim.Claim, visit func(d *exact.Problem, g *exact.Gap) error) error {
	return visited(ctx, c, func(d *exact.Problem) error {
		g, err := d.Gap()
		if err != nil {
			return err
		}
		if err := d.RemoveAngle(g); err != nil {
			return err
		}
		return visit(d, g)
	})
}

// visited makes a claim exact again, and visits it before it is decided.
func visited(ctx context.Context, c *claim.Claim, visit func(d *exact.Problem) error) error {
	_, err := exact.Decide(ctx, c, 0, func(d *exact.Problem) error {
		if err := visit(d); err != nil {
			return err
		}
		return errDone
	})
	if errors.Is(err, errDone) {
		return nil
	}
	if err == nil {
		return fmt.Errorf("%w: the claim is settled before it is reduced", export.ErrUnsupported)
	}
	return err
}

// sides evaluates both sides as trees, in the order left <= right.
func sides(c *claim.Claim, t *trees) (left, right export.Expr, err error) {
	in := &entropy.Interpreter[pair]{Setting: c.Setting, Arith: t, Given: c.Given, Jump: c.Jump}
	l, err := in.Scalar(c.Statement.Left)
	if err != nil {
		return nil, nil, err
	}
	r, err := in.Scalar(c.Statement.Right)
	if err != nil {
		return nil, nil, err
	}
	if c.Statement.Relation == formula.GreaterEqual {
		l, r = r, l
	}
	return l.x, r.x, nil
}

// withSides completes a copy of s by its sides, at the values put for some
// indeterminates and with a null Lagrangian, if any, added on the right. It
// returns nil where the sides cannot be exported.
//
// Where the frame angle was removed, the sides are those at angle 0, written in
// the derivatives along the axes, which are those along the coordinates there.
// That is enough: the map from jets along the axes to jets along the coordinates
// is a bijection for every angle, and written in the jets along the axes the gap
// does not depend on the angle, so that the claim at any angle is the claim at
// angle 0.
func withSides(s *export.Inequality, d *exact.Problem, g *exact.Gap, red *exact.Reduction, put map[algebra.Var]export.Expr, n *null) (*export.Inequality, error) {
	t := &trees{Exact: d.Ex, vars: map[string]algebra.Var{}, put: map[algebra.Var]export.Expr{}}
	maps.Copy(t.put, put)
	out := *s
	if g.Turned != nil {
		t.put[g.Turned.Cos], t.put[g.Turned.Sin] = export.Number("1"), export.Number("0")
		t.frame = d.Claim.Setting.Frame
		out.Comment += " (along the axes of the frame, which is the claim at any angle)"
	}
	var err error
	if out.Left, out.Right, err = sides(d.Claim, t); err != nil {
		return nil, err
	}
	if n != nil {
		out.Right = t.sum(out.Right, n.tree(t))
	}
	out.Origin = ""
	w := &widened{d: d, red: red, claim: *s.Claim, name: t.name, added: map[algebra.Var]int{}, rooted: map[algebra.Var]bool{}}
	w.claim.Variables, w.claim.Positive = slices.Clone(s.Claim.Variables), slices.Clone(s.Claim.Positive)
	for name := range t.vars {
		if occurs(name, out.Left) || occurs(name, out.Right) {
			w.variable(name)
		}
	}
	slices.Sort(w.claim.Variables[len(s.Claim.Variables):])
	if !w.scale(g) {
		return nil, nil
	}
	for _, e := range append(export.Denominators(out.Left), export.Denominators(out.Right)...) {
		w.roots(e, t.vars)
	}
	out.Claim, out.Scale = &w.claim, w.factors
	if _, err := export.Coq("", &out); err != nil {
		return nil, nil // such as a denominator whose sign does not show
	}
	return &out, nil
}

func occurs(name string, e export.Expr) bool {
	in := func(list []export.Expr) bool {
		return slices.ContainsFunc(list, func(x export.Expr) bool { return occurs(name, x) })
	}
	switch e := e.(type) {
	case export.Variable:
		return string(e) == name
	case export.Sum:
		return in(e)
	case export.Product:
		return in(e)
	case export.Quotient:
		return occurs(name, e.Num) || occurs(name, e.Den)
	case export.Power:
		return occurs(name, e.Base)
	case export.Negation:
		return occurs(name, e.X)
	}
	return false
}

// widened is a reduced claim with more variables, and what is known of their
// signs: that changes nothing about its certificate.
type widened struct {
	d       *exact.Problem
	red     *exact.Reduction
	claim   certificate.Claim
	name    func(v algebra.Var) string
	factors [][]certificate.Square
	added   map[algebra.Var]int // the places of further signs
	rooted  map[algebra.Var]bool
}

func (w *widened) variable(name string) {
	if !slices.Contains(w.claim.Variables, name) {
		w.claim.Variables = append(w.claim.Variables, name)
	}
}

// scale is the product of the denominators of the gap, each a sum of squares:
// what the target is divided by in the gap. Where one may vanish, that it does not
// becomes a premise, for the sides have no value there. It reports false where
// a denominator has no visible sign and is no monomial.
func (w *widened) scale(g *exact.Gap) bool {
	for _, f := range g.Value.DenFactors() {
		base := f.Base
		visible := w.d.Ring.VisiblyNonNegative(algebra.FromPoly(base))
		negative := w.d.Ring.VisiblyNonNegative(algebra.FromPoly(base.Neg()))
		if g.Turned != nil {
			base = base.EvalPartial(map[algebra.Var]algebra.Rat{g.Turned.Cos: algebra.Int(1), g.Turned.Sin: {}})
		}
		if !visible && negative {
			base = base.Neg()
		}
		list, ok := w.squares(base)
		exp := f.Exp
		if !ok && !visible && !negative {
			if base.Len() != 1 {
				return false
			}
			base, exp = base.Mul(base), (exp+1)/2
		}
		if !ok || !w.strict(list) {
			list = []certificate.Square{{Weight: "1", Factors: []int{w.premise(base)}, Base: certificate.Polynomial{{C: "1"}}}}
		}
		for range exp {
			w.factors = append(w.factors, list)
		}
	}
	return true
}

// roots makes it a premise that a root in a denominator does not vanish.
func (w *widened) roots(e export.Expr, vars map[string]algebra.Var) {
	switch e := e.(type) {
	case export.Product:
		for _, x := range e {
			w.roots(x, vars)
		}
	case export.Power:
		w.roots(e.Base, vars)
	case export.Variable:
		v, ok := vars[string(e)]
		if ok && w.d.Ring.Symbol(v).Kind == jet.Root && w.d.Ring.Symbol(v).Sign == jet.NonNegative && !w.rooted[v] {
			w.rooted[v] = true
			w.premise(algebra.Variable(v))
		}
	}
}

// strict reports a sum of squares with a term that is surely positive.
func (w *widened) strict(list []certificate.Square) bool {
	return slices.ContainsFunc(list, func(s certificate.Square) bool {
		return len(s.Base[0].M) == 0 && !slices.ContainsFunc(s.Factors, func(i int) bool { return !w.claim.Positive[i].Strict })
	})
}

// premise adds p > 0 to the assumptions, and returns its place.
func (w *widened) premise(p algebra.Poly) int {
	q := certificate.Polynomial{}
	for m, c := range p.Terms() {
		t := certificate.Term{C: c.String()}
		for _, pw := range m.Powers() {
			if t.M == nil {
				t.M = map[string]int{}
			}
			name := w.name(pw.Var)
			w.variable(name)
			t.M[name] = pw.Exp
		}
		q = append(q, t)
	}
	w.claim.Positive = append(w.claim.Positive, certificate.Constraint{Poly: q, Strict: true})
	return len(w.claim.Positive) - 1
}

// squares writes p as a sum of monomials that are visibly not negative.
func (w *widened) squares(p algebra.Poly) ([]certificate.Square, bool) {
	var out []certificate.Square
	for m, c := range p.Terms() {
		s := certificate.Square{}
		base := certificate.Term{C: "1"}
		for _, pw := range m.Powers() {
			name := w.name(pw.Var)
			w.variable(name)
			if pw.Exp >= 2 {
				if base.M == nil {
					base.M = map[string]int{}
				}
				base.M[name] = pw.Exp / 2
			}
			if pw.Exp%2 == 1 {
				i, negative := w.sign(pw.Var, name)
				if i < 0 {
					return nil, false
				}
				if negative {
					c = c.Neg()
				}
				s.Factors = append(s.Factors, i)
			}
		}
		if c.Sign() <= 0 {
			return nil, false
		}
		s.Weight, s.Base = c.String(), certificate.Polynomial{base}
		out = append(out, s)
	}
	return out, len(out) > 0
}

// sign is the assumption on the sign of a variable, and whether it is negative.
func (w *widened) sign(v algebra.Var, name string) (int, bool) {
	if i, negative := w.red.SignOf(v); i >= 0 {
		return i, negative
	}
	negative, strict := false, false
	switch w.d.Ring.Symbol(v).Sign {
	case jet.Positive:
		strict = true
	case jet.NonNegative:
	case jet.Negative:
		negative, strict = true, true
	case jet.NonPositive:
		negative = true
	default:
		return -1, false
	}
	if i, ok := w.added[v]; ok {
		return i, negative
	}
	c := "1"
	if negative {
		c = "-1"
	}
	w.added[v] = len(w.claim.Positive)
	w.claim.Positive = append(w.claim.Positive, certificate.Constraint{
		Poly: certificate.Polynomial{{C: c, M: map[string]int{name: 1}}}, Strict: strict,
	})
	return w.added[v], negative
}
