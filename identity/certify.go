package identity

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
	"creaseproof/identity/gram"
	"creaseproof/identity/squares"
)

// reduction is a gap as a polynomial inequality on a set given by polynomials:
// what a certificate is about.
type reduction struct {
	d        *decider
	target   algebra.Poly
	vars     []algebra.Var
	names    map[algebra.Var]string
	positive []gram.Constraint
	zero     []relation
	claim    *certificate.Claim
}

// relation is v^degree = value, as an equation of the claim; value holds only
// lower powers of v.
type relation struct {
	v      algebra.Var
	degree int
	value  algebra.Poly
}

func (r relation) poly() algebra.Poly {
	return algebra.Variable(r.v).Pow(r.degree).Sub(r.value)
}

// reduce lists the variables of a gap, with all that kernels in it and the
// assumptions say of them. Dropping an assumption only makes the claim
// stronger, so those that are not polynomial are dropped.
func (d *decider) reduce(g *gap) *reduction {
	r := &reduction{d: d, target: g.poly, names: map[algebra.Var]string{}}
	seen := map[algebra.Var]bool{}
	var visit func(p algebra.Poly)
	visit = func(p algebra.Poly) {
		for _, v := range p.Vars() {
			if seen[v] {
				continue
			}
			seen[v] = true
			r.vars = append(r.vars, v)
			r.describe(v)
			if q, a := d.ring.Relation(v); q > 0 {
				if len(g.wells) > 0 { // everything is written in the traces
					if t, err := d.inTraces(a); err == nil {
						a = t
					}
				}
				visit(a)
				r.zero = append(r.zero, relation{v, q, a})
			}
		}
	}
	visit(g.poly)
	for _, w := range g.wells {
		visit(w.poly())
		r.zero = append(r.zero, w)
	}
	for _, c := range d.assumed {
		p, ok := c.value.IsPoly()
		if !ok || slices.ContainsFunc(p.Vars(), func(v algebra.Var) bool { return d.ring.Symbol(v).Kind >= jet.Cosine }) {
			continue
		}
		if !slices.ContainsFunc(p.Vars(), func(v algebra.Var) bool { return seen[v] }) {
			continue
		}
		strict := true
		switch c.relation {
		case "<", "<=":
			p, strict = p.Neg(), c.relation == "<"
		case ">", ">=":
			strict = c.relation == ">"
		default:
			continue
		}
		visit(p)
		r.assume(p, strict)
	}
	slices.Sort(r.vars)
	for _, v := range r.vars {
		r.names[v] = d.ring.Name(v)
		if g.turned != nil && g.turned.names[v] != "" {
			r.names[v] = g.turned.names[v]
		}
	}
	slices.SortFunc(r.zero, func(a, b relation) int { return int(a.v - b.v) })
	r.claim = r.statement()
	return r
}

// describe adds what is known of the sign of a variable.
func (r *reduction) describe(v algebra.Var) {
	s := r.d.ring.Symbol(v)
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
func (r *reduction) assume(p algebra.Poly, strict bool) {
	c, q := p.Primitive()
	if c.Sign() < 0 {
		q = q.Neg()
	}
	if q.IsZero() {
		return
	}
	for i, g := range r.positive {
		if g.Poly.Equal(q) {
			r.positive[i].Strict = g.Strict || strict
			return
		}
	}
	r.positive = append(r.positive, gram.Constraint{Poly: q, Strict: strict})
}

// statement is the claim in the checker's terms.
func (r *reduction) statement() *certificate.Claim {
	c := &certificate.Claim{Target: r.polynomial(r.target)}
	for _, v := range r.vars {
		c.Variables = append(c.Variables, r.names[v])
	}
	for _, g := range r.positive {
		c.Positive = append(c.Positive, certificate.Constraint{Poly: r.polynomial(g.Poly), Strict: g.Strict})
	}
	for _, h := range r.zero {
		c.Zero = append(c.Zero, r.polynomial(h.poly()))
	}
	return c
}

func (r *reduction) polynomial(p algebra.Poly) certificate.Polynomial {
	var out certificate.Polynomial
	for m, c := range p.Terms() {
		t := certificate.Term{C: c.String()}
		for _, pw := range m.Powers() {
			if t.M == nil {
				t.M = map[string]int{}
			}
			t.M[r.names[pw.Var]] = pw.Exp
		}
		out = append(out, t)
	}
	return out
}

func (r *reduction) squares(list []gram.Square) []certificate.Square {
	var out []certificate.Square
	for _, s := range list {
		out = append(out, certificate.Square{Weight: s.Weight.String(), Factors: s.Factors, Base: r.polynomial(s.Base)})
	}
	return out
}

// certify turns a proof into a certificate, and checks it with the checker.
func (r *reduction) certify(p *gram.Proof) (*certificate.Certificate, error) {
	expand := func(list []gram.Square) algebra.Poly {
		var sum algebra.Poly
		for _, s := range list {
			t := s.Base.Mul(s.Base).Scale(s.Weight)
			for _, f := range s.Factors {
				t = t.Mul(r.positive[f].Poly)
			}
			sum = sum.Add(t)
		}
		return sum
	}
	rest := r.target
	if len(p.Multiplier) > 0 {
		rest = rest.Mul(expand(p.Multiplier))
	}
	rest = rest.Sub(expand(p.Squares))
	cert := &certificate.Certificate{Multiplier: r.squares(p.Multiplier), Squares: r.squares(p.Squares)}
	cert.Cofactors = r.cofactors(rest)
	return cert, certificate.Check(r.claim, cert)
}

// cofactors writes a polynomial that vanishes modulo the relations as a
// combination of them.
func (r *reduction) cofactors(rest algebra.Poly) []certificate.Polynomial {
	if len(r.zero) == 0 {
		return nil
	}
	total := make([]algebra.Poly, len(r.zero))
	for range 64 {
		for k := len(r.zero) - 1; k >= 0; k-- {
			var quo algebra.Poly
			quo, rest = r.zero[k].divide(rest)
			total[k] = total[k].Add(quo)
		}
		if rest.IsZero() || rest.Err() != nil {
			break
		}
	}
	out := make([]certificate.Polynomial, len(r.zero))
	for k, t := range total {
		out[k] = r.polynomial(t)
	}
	return out
}

// normal is the normal form modulo all relations, newest first.
func (r *reduction) normal(p algebra.Poly) algebra.Poly {
	for range 64 {
		old := p
		for k := len(r.zero) - 1; k >= 0; k-- {
			_, p = r.zero[k].divide(p)
		}
		if p.Err() != nil || p.Equal(old) {
			return p
		}
	}
	return p
}

// divide is monic division by v^q - a.
func (h relation) divide(p algebra.Poly) (quo, rem algebra.Poly) {
	for {
		n := p.Degree(h.v)
		if n < h.degree || p.Err() != nil {
			return quo, p
		}
		lead := p.Coeffs(h.v)[n].Mul(algebra.Variable(h.v).Pow(n - h.degree))
		quo = quo.Add(lead)
		p = p.Sub(lead.Mul(h.poly()))
	}
}

// fromSquares turns completed squares into a proof in polynomials: weights are
// brought over a common denominator, which becomes the multiplier, and split
// into monomials, each a positive number times assumed-positive variables
// times a square.
func (r *reduction) fromSquares(terms []squares.Term) (*gram.Proof, bool) {
	den := algebra.Const(algebra.Int(1))
	for _, t := range terms {
		if _, ok := t.Base.IsPoly(); !ok {
			return nil, false
		}
		for _, f := range t.Weight.Mul(algebra.FromPoly(den)).DenFactors() {
			den = den.Mul(f.Base.Pow(f.Exp))
		}
	}
	p := &gram.Proof{}
	if _, ok := den.IsConst(); !ok {
		m, ok := r.monomialSquares(den, algebra.Const(algebra.Int(1)))
		if !ok {
			return nil, false
		}
		p.Multiplier = m
	} else {
		den = algebra.Const(algebra.Int(1))
	}
	for _, t := range terms {
		w, ok := t.Weight.Mul(algebra.FromPoly(den)).IsPoly()
		base, _ := t.Base.IsPoly()
		if !ok {
			return nil, false
		}
		list, ok := r.monomialSquares(w, base)
		if !ok {
			return nil, false
		}
		p.Squares = append(p.Squares, list...)
	}
	return p, true
}

// monomialSquares writes w·base² as squares, where every term of w is visibly
// non-negative.
func (r *reduction) monomialSquares(w, base algebra.Poly) ([]gram.Square, bool) {
	var out []gram.Square
	for m, c := range w.Terms() {
		sq := gram.Square{Weight: c}
		half := base
		for _, pw := range m.Powers() {
			half = half.Mul(algebra.Variable(pw.Var).Pow(pw.Exp / 2))
			if pw.Exp%2 == 0 {
				continue
			}
			i, negative := r.signOf(pw.Var)
			if i < 0 {
				return nil, false
			}
			if negative {
				sq.Weight = sq.Weight.Neg()
			}
			sq.Factors = append(sq.Factors, i)
		}
		if sq.Weight.Sign() <= 0 {
			return nil, false
		}
		k, prim := half.Primitive()
		sq.Base, sq.Weight = prim, sq.Weight.Mul(k).Mul(k)
		out = append(out, sq)
	}
	return out, true
}

// signOf is the constraint that says v > 0, v >= 0, or the same of -v.
func (r *reduction) signOf(v algebra.Var) (int, bool) {
	for i, g := range r.positive {
		if w, ok := loneVar(algebra.FromPoly(g.Poly)); ok && w == v {
			return i, false
		}
		if w, ok := loneVar(algebra.FromPoly(g.Poly.Neg())); ok && w == v {
			return i, true
		}
	}
	return -1, false
}

// content is a monomial that is visibly non-negative: half² times assumed
// signs.
type content struct {
	half    algebra.Poly
	factors []int
}

// times multiplies squares by the content.
func (c content) times(list []gram.Square) []gram.Square {
	for i, s := range list {
		list[i].Base = s.Base.Mul(c.half)
		list[i].Factors = slices.Concat(s.Factors, c.factors)
	}
	return list
}

// split takes the visibly non-negative monomial out of p.
func (r *reduction) split(p algebra.Poly) (content, algebra.Poly) {
	c := content{half: algebra.Const(algebra.Int(1))}
	whole := c.half
	for _, pw := range p.MonomialContent().Powers() {
		v := algebra.Variable(pw.Var)
		if q, _ := r.d.ring.Relation(pw.Var); q > 0 && pw.Exp > 1 {
			continue // powers of it are not normal forms
		}
		c.half = c.half.Mul(v.Pow(pw.Exp / 2))
		whole = whole.Mul(v.Pow(pw.Exp / 2 * 2))
		if pw.Exp%2 == 1 {
			if i, negative := r.signOf(pw.Var); i >= 0 {
				c.factors = append(c.factors, i)
				whole = whole.Mul(v)
				if negative {
					whole = whole.Neg()
				}
			}
		}
	}
	q, ok := p.DivExact(whole)
	if !ok {
		return content{half: algebra.Const(algebra.Int(1))}, p
	}
	return c, q
}

// problem is the reduction in the terms of the search, with the monomial
// content of the target taken out.
func (r *reduction) problem() (*gram.Problem, content) {
	c, target := r.split(r.normal(r.target))
	return r.problemFor(target), c
}

// problemFor is the problem of another target on the same set.
func (r *reduction) problemFor(target algebra.Poly) *gram.Problem {
	p := &gram.Problem{Target: target, Positive: r.positive}
	if len(r.zero) > 0 {
		p.Reduce = r.normal
	}
	groups := map[int][]algebra.Var{}
	for _, v := range r.vars {
		if s := r.d.ring.Symbol(v); s.Kind == jet.Derivative {
			groups[s.Index.Order()] = append(groups[s.Index.Order()], v)
		}
	}
	for order := range jet.MaxOrder + 1 {
		if len(groups[order]) > 0 {
			p.Groups = append(p.Groups, groups[order])
		}
	}
	return p
}
