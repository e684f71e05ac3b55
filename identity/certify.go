package identity

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
	"creaseproof/identity/exact"
	"creaseproof/identity/gram"
	"creaseproof/identity/squares"
)

// reduction is a reduced gap, with what the search needs.
type reduction struct {
	*exact.Reduction
	d *decider
}

func (d *decider) reduction(g *exact.Gap) *reduction {
	return &reduction{d.Problem.Reduce(g), d}
}

// with is the same reduction with another target.
func (r *reduction) with(target algebra.Poly) *reduction {
	red := *r.Reduction
	red.Target = target
	red.Claim = red.Statement()
	return &reduction{&red, r.d}
}

func (r *reduction) squares(list []gram.Square) []certificate.Square {
	var out []certificate.Square
	for _, s := range list {
		out = append(out, certificate.Square{Weight: s.Weight.String(), Factors: s.Factors, Base: r.Polynomial(s.Base)})
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
				t = t.Mul(r.Positive[f].Poly)
			}
			sum = sum.Add(t)
		}
		return sum
	}
	rest := r.Target
	if len(p.Multiplier) > 0 {
		rest = rest.Mul(expand(p.Multiplier))
	}
	rest = rest.Sub(expand(p.Squares))
	cert := &certificate.Certificate{Multiplier: r.squares(p.Multiplier), Squares: r.squares(p.Squares)}
	cert.Cofactors = r.Cofactors(rest)
	return cert, certificate.Check(r.Claim, cert)
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
			i, negative := r.SignOf(pw.Var)
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
		if q, _ := r.d.Ring.Relation(pw.Var); q > 0 && pw.Exp > 1 {
			continue // powers of it are not normal forms
		}
		c.half = c.half.Mul(v.Pow(pw.Exp / 2))
		whole = whole.Mul(v.Pow(pw.Exp / 2 * 2))
		if pw.Exp%2 == 1 {
			if i, negative := r.SignOf(pw.Var); i >= 0 {
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
	c, target := r.split(r.Normal(r.Target))
	return r.problemFor(target), c
}

// problemFor is the problem of another target on the same set.
func (r *reduction) problemFor(target algebra.Poly) *gram.Problem {
	p := &gram.Problem{Target: target}
	for _, g := range r.Positive {
		p.Positive = append(p.Positive, gram.Constraint{Poly: g.Poly, Strict: g.Strict})
	}
	if len(r.Zero) > 0 {
		p.Reduce = r.Normal
	}
	groups := map[int][]algebra.Var{}
	for _, v := range r.Vars {
		if s := r.d.Ring.Symbol(v); (s.Kind == jet.Sine || s.Kind == jet.Cosine) && s.Degree == 0 && !target.Has(v) && target.Has(s.Partner) {
			p.Beside = append(p.Beside, v)
		}
		if s := r.d.Ring.Symbol(v); s.Kind == jet.Derivative {
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

// linked are the variables that assumptions link to those of a problem, which
// does not hold them itself.
func (r *reduction) linked(p *gram.Problem) []algebra.Var {
	known := append(p.Target.Vars(), p.Beside...)
	n := len(known)
	for more := true; more; {
		more = false
		for _, g := range p.Positive {
			vars := g.Poly.Vars()
			if !slices.ContainsFunc(vars, func(v algebra.Var) bool { return slices.Contains(known, v) }) {
				continue
			}
			for _, v := range vars {
				if !slices.Contains(known, v) {
					known, more = append(known, v), true
				}
			}
		}
	}
	return known[n:]
}
