package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
)

// Reduction is a gap as a polynomial inequality on a set given by polynomials:
// what a certificate is about.
type Reduction struct {
	d        *Problem
	Target   algebra.Poly
	Vars     []algebra.Var
	Names    map[algebra.Var]string
	Positive []Positive
	Zero     []Relation
	Claim    *certificate.Claim
}

// Positive is Poly >= 0, or Poly > 0 where it is strict.
type Positive struct {
	Poly   algebra.Poly
	Strict bool
}

// Relation is v^degree = value, as an equation of the claim; value holds only
// lower powers of v.
type Relation struct {
	Var    algebra.Var
	Degree int
	Value  algebra.Poly
}

// Poly is the relation as a polynomial that vanishes.
func (r Relation) Poly() algebra.Poly {
	return algebra.Variable(r.Var).Pow(r.Degree).Sub(r.Value)
}

// Reduce lists the variables of a gap, with all that kernels in it and the
// assumptions say of them. Dropping an assumption only makes the claim
// stronger, so those that are not polynomial are dropped.
func (d *Problem) Reduce(g *Gap) *Reduction {
	r := &Reduction{d: d, Target: g.Poly, Names: map[algebra.Var]string{}}
	seen := map[algebra.Var]bool{}
	var visit func(p algebra.Poly)
	visit = func(p algebra.Poly) {
		for _, v := range p.Vars() {
			if seen[v] {
				continue
			}
			seen[v] = true
			r.Vars = append(r.Vars, v)
			r.describe(v)
			if s := d.Ring.Symbol(v); s.Kind == jet.Cosine && s.Degree == 0 && !seen[s.Partner] {
				visit(algebra.Variable(s.Partner)) // whose relation bounds the cosine
			}
			if q, a := d.Ring.Relation(v); q > 0 {
				if len(g.Wells) > 0 { // everything is written in the traces
					if t, err := d.InTraces(a); err == nil {
						a = t
					}
				}
				visit(a)
				r.Zero = append(r.Zero, Relation{v, q, a})
			}
		}
	}
	visit(g.Poly)
	for _, w := range g.Wells {
		visit(w.Poly())
		r.Zero = append(r.Zero, w)
	}
	// Assumptions that share a variable with the target, or with such a one.
	left := slices.Clone(d.Assumed)
	for before := -1; before != len(left); {
		before = len(left)
		left = slices.DeleteFunc(left, func(c Constraint) bool {
			p, ok := c.Value.IsPoly()
			if !ok || slices.ContainsFunc(p.Vars(), func(v algebra.Var) bool { return d.Ring.Symbol(v).Kind >= jet.Cosine }) {
				return true
			}
			if !slices.ContainsFunc(p.Vars(), func(v algebra.Var) bool { return seen[v] }) {
				return false
			}
			r.join(p, c.Relation, visit)
			return true
		})
	}
	slices.Sort(r.Vars)
	for _, v := range r.Vars {
		r.Names[v] = d.Ring.Name(v)
		if g.Turned != nil && g.Turned.Names[v] != "" {
			r.Names[v] = g.Turned.Names[v]
		}
	}
	slices.SortFunc(r.Zero, func(a, b Relation) int { return int(a.Var - b.Var) })
	r.Claim = r.Statement()
	return r
}

// join adds an assumption about p, with the variables that visit makes known.
func (r *Reduction) join(p algebra.Poly, relation string, visit func(algebra.Poly)) {
	strict := relation == "<" || relation == ">"
	switch relation {
	case "<", "<=":
		p = p.Neg()
	case ">", ">=":
	default:
		if rel, ok := Monic(p); ok && !slices.ContainsFunc(r.Zero, func(z Relation) bool { return z.Var == rel.Var }) {
			visit(p)
			r.Zero = append(r.Zero, rel)
		}
		return
	}
	visit(p)
	r.assume(p, strict)
}

// describe adds what is known of the sign of a variable.
func (r *Reduction) describe(v algebra.Var) {
	s := r.d.Ring.Symbol(v)
	x := algebra.Variable(v)
	switch s.Sign {
	case jet.Positive:
		r.assume(x, true)
	case jet.NonNegative:
		r.assume(x, false)
	case jet.Negative:
		r.assume(x.Neg(), true)
	case jet.NonPositive:
		r.assume(x.Neg(), false)
	}
}

// assume adds a constraint, normalised to coprime whole coefficients.
func (r *Reduction) assume(p algebra.Poly, strict bool) {
	c, q := p.Primitive()
	if c.Sign() < 0 {
		q = q.Neg()
	}
	if q.IsZero() {
		return
	}
	for i, g := range r.Positive {
		if g.Poly.Equal(q) {
			r.Positive[i].Strict = g.Strict || strict
			return
		}
	}
	r.Positive = append(r.Positive, Positive{Poly: q, Strict: strict})
}

// Statement is the claim in the checker's terms.
func (r *Reduction) Statement() *certificate.Claim {
	c := &certificate.Claim{Target: r.Polynomial(r.Target)}
	for _, v := range r.Vars {
		c.Variables = append(c.Variables, r.Names[v])
	}
	for _, g := range r.Positive {
		c.Positive = append(c.Positive, certificate.Constraint{Poly: r.Polynomial(g.Poly), Strict: g.Strict})
	}
	for _, h := range r.Zero {
		c.Zero = append(c.Zero, r.Polynomial(h.Poly()))
	}
	return c
}

func (r *Reduction) Polynomial(p algebra.Poly) certificate.Polynomial {
	var out certificate.Polynomial
	for m, c := range p.Terms() {
		t := certificate.Term{C: c.String()}
		for _, pw := range m.Powers() {
			if t.M == nil {
				t.M = map[string]int{}
			}
			t.M[r.Names[pw.Var]] = pw.Exp
		}
		out = append(out, t)
	}
	return out
}

// Cofactors writes a polynomial that vanishes modulo the relations as a
// combination of them.
func (r *Reduction) Cofactors(rest algebra.Poly) []certificate.Polynomial {
	if len(r.Zero) == 0 {
		return nil
	}
	total := make([]algebra.Poly, len(r.Zero))
	for range 64 {
		for k := len(r.Zero) - 1; k >= 0; k-- {
			var quo algebra.Poly
			quo, rest = r.Zero[k].Divide(rest)
			total[k] = total[k].Add(quo)
		}
		if rest.IsZero() || rest.Err() != nil {
			break
		}
	}
	out := make([]certificate.Polynomial, len(r.Zero))
	for k, t := range total {
		out[k] = r.Polynomial(t)
	}
	return out
}

// Normal is the normal form modulo all relations, newest first.
func (r *Reduction) Normal(p algebra.Poly) algebra.Poly {
	for range 64 {
		old := p
		for k := len(r.Zero) - 1; k >= 0; k-- {
			_, p = r.Zero[k].Divide(p)
		}
		if p.Err() != nil || p.Equal(old) {
			return p
		}
	}
	return p
}

// Divide is monic division by v^q - a.
func (h Relation) Divide(p algebra.Poly) (quo, rem algebra.Poly) {
	for {
		n := p.Degree(h.Var)
		if n < h.Degree || p.Err() != nil {
			return quo, p
		}
		lead := p.Coeffs(h.Var)[n].Mul(algebra.Variable(h.Var).Pow(n - h.Degree))
		quo = quo.Add(lead)
		p = p.Sub(lead.Mul(h.Poly()))
	}
}

// SignOf is the constraint that says v > 0, v >= 0, or the same of -v.
func (r *Reduction) SignOf(v algebra.Var) (int, bool) {
	for i, g := range r.Positive {
		if w, ok := LoneVar(algebra.FromPoly(g.Poly)); ok && w == v {
			return i, false
		}
		if w, ok := LoneVar(algebra.FromPoly(g.Poly.Neg())); ok && w == v {
			return i, true
		}
	}
	return -1, false
}

// Monic writes w = 0 as a relation for an indeterminate in which w is monic up
// to a constant.
func Monic(w algebra.Poly) (Relation, bool) {
	for _, v := range w.Vars() {
		n := w.Degree(v)
		c, ok := w.Coeffs(v)[n].IsConst()
		if !ok {
			continue
		}
		inv, ok := c.Inv()
		if !ok {
			continue
		}
		return Relation{v, n, algebra.Variable(v).Pow(n).Sub(w.Scale(inv))}, true
	}
	return Relation{}, false
}
