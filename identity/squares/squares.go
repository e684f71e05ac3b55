package squares

import (
	"context"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// Term is Weight·Base², Weight visibly non-negative.
type Term struct {
	Weight, Base algebra.Fraction
}

// Step says that the completed square vanishes where Var^Power = Value.
type Step struct {
	Var   algebra.Var
	Power int
	Value algebra.Fraction
}

// Rest is a polynomial that was left over, and the minimisers that led to it,
// in the order in which they were found: a value may hold the indeterminates
// of later steps.
type Rest struct {
	Poly  algebra.Poly
	Steps []Step
}

// Result is a proof, or what was left over.
type Result struct {
	Proved bool
	Terms  []Term
	Rests  []Rest
}

// Budgets of work.
const (
	maxNodes = 200  // polynomials looked at
	maxTerms = 4000 // of one of them
	maxRests = 12
)

type search struct {
	ctx   context.Context
	r     *jet.Ring
	vars  []algebra.Var
	nodes int
	rests []Rest
}

// Complete tries to prove p >= 0, completing squares in the given
// indeterminates, earlier ones first.
func Complete(ctx context.Context, r *jet.Ring, p algebra.Poly, vars []algebra.Var) Result {
	s := &search{ctx: ctx, r: r, vars: vars}
	terms, ok := s.prove(r.ReducePoly(p), nil)
	if ok && s.multipliesOut(p, terms) {
		return Result{Proved: true, Terms: terms}
	}
	return Result{Rests: s.rests}
}

// multipliesOut checks that the sum of the terms is p.
func (s *search) multipliesOut(p algebra.Poly, terms []Term) bool {
	sum := algebra.FromPoly(p).Neg()
	for _, t := range terms {
		if !s.r.VisiblyNonNegative(t.Weight) {
			return false
		}
		sum = sum.Add(t.Weight.Mul(t.Base).Mul(t.Base))
	}
	sum, err := s.r.Reduce(sum)
	return err == nil && sum.IsZero()
}

func (s *search) prove(p algebra.Poly, steps []Step) ([]Term, bool) {
	s.nodes++
	if p.Err() != nil || s.ctx.Err() != nil {
		return nil, false
	}
	if p.IsZero() {
		return nil, true
	}
	if s.r.VisiblyNonNegative(algebra.FromPoly(p)) {
		return []Term{{algebra.FromPoly(p), jet.Whole(1)}}, true
	}
	outer, q := s.content(p)
	if s.nodes < maxNodes && q.Len() <= maxTerms {
		for _, v := range s.vars {
			terms, ok := s.complete(q, v, steps)
			if ok {
				for i := range terms {
					terms[i].Weight = terms[i].Weight.Mul(outer)
				}
				return terms, true
			}
			if s.nodes >= maxNodes {
				break
			}
		}
	}
	if len(s.rests) < maxRests {
		s.rests = append(s.rests, Rest{q, slices.Clone(steps)})
	}
	return nil, false
}

// content splits off the monomial factor that is visibly non-negative.
func (s *search) content(p algebra.Poly) (outer algebra.Fraction, rest algebra.Poly) {
	var keep []algebra.Power
	for _, pw := range p.MonomialContent().Powers() {
		e := pw.Exp
		if sign := s.r.Symbol(pw.Var).Sign; sign != jet.Positive && sign != jet.NonNegative {
			e -= e % 2
		}
		if e > 0 {
			keep = append(keep, algebra.Power{Var: pw.Var, Exp: e})
		}
	}
	m := algebra.FromTerms([]algebra.Term{{Mono: algebra.NewMonomial(keep...), Coef: algebra.Int(1)}})
	q, ok := p.DivExact(m)
	if !ok {
		return jet.Whole(1), p
	}
	return algebra.FromPoly(m), q
}

// complete completes the square in v, or in a power of v.
func (s *search) complete(q algebra.Poly, v algebra.Var, steps []Step) ([]Term, bool) {
	deg := q.Degree(v)
	if deg < 2 || deg%2 == 1 {
		return nil, false
	}
	k := deg / 2
	co := q.Coeffs(v)
	for e, c := range co {
		if e%k != 0 && !c.IsZero() {
			return nil, false
		}
	}
	a, b, c := co[2*k], co[k], co[0]
	if !s.r.VisiblyNonNegative(algebra.FromPoly(a)) {
		return nil, false
	}
	four := algebra.Int(4)
	rest := s.r.ReducePoly(a.Mul(c).Scale(four).Sub(b.Mul(b)))
	inv, ok := algebra.FromPoly(a.Scale(four)).Inv()
	if !ok || rest.Err() != nil {
		return nil, false
	}
	weight := inv // of what rest proves
	if d, ok := rest.DivExact(a); ok {
		rest, weight = d, jet.Rational(algebra.Frac64(1, 4).Big())
	}
	half, ok := algebra.FromPoly(a.Scale(algebra.Int(2))).Inv()
	if !ok {
		return nil, false
	}
	step := Step{v, k, algebra.FromPoly(b).Neg().Mul(half)}
	terms, ok := s.prove(rest, append(slices.Clone(steps), step))
	if !ok {
		return nil, false
	}
	for i := range terms {
		terms[i].Weight = terms[i].Weight.Mul(weight)
	}
	base := algebra.FromPoly(a.Scale(algebra.Int(2)).Mul(algebra.Variable(v).Pow(k)).Add(b))
	// inv·base² with the common factor of base and a taken out: (1/4a)(2a x + b)².
	return append([]Term{s.tidy(inv, base)}, terms...), true
}

// tidy moves a common square factor from the base into the weight, so that
// 1/(4a)·(2a v + b)² prints as a·(v + b/2a)² does.
func (s *search) tidy(weight, base algebra.Fraction) Term {
	c, p := base.Num().Primitive()
	m := p.MonomialContent()
	mono := algebra.FromTerms([]algebra.Term{{Mono: m, Coef: algebra.Int(1)}})
	q, ok := p.DivExact(mono)
	if !ok {
		return Term{weight, base}
	}
	f := algebra.FromPoly(mono).Scale(c)
	return Term{weight.Mul(f).Mul(f), algebra.FromPoly(q)}
}
