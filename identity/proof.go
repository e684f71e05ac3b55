package identity

import (
	"errors"
	"fmt"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
	"creaseproof/identity/exact"
	"creaseproof/identity/gram"
	"creaseproof/identity/squares"
)

// prove searches for a certificate of a gap: completed squares, sums of
// squares, and squaring away roots. A certificate that does not rest on
// continuity is preferred. It reports whether the claim is proved.
func (d *decider) prove(g *exact.Gap, done []squares.Term) (bool, error) {
	r := d.reduction(g)
	var second *gram.Proof // by completed squares, where its multiplier may vanish
	if len(done) > 0 {
		if p, ok := r.fromSquares(done); ok {
			if r.strict(p.Multiplier) {
				if cert, err := r.certify(p); err == nil {
					d.certified("completing squares", g, r, p, cert)
					return true, nil
				}
			}
			second = p
		}
	}
	if (len(d.Ideal) > 0 || len(d.Wells) > 0) && len(g.Wells) == 0 {
		return false, nil // equations that are not part of the reduction
	}
	effort, ok := gram.Efforts(d.opt.Effort)
	if !ok {
		return false, fmt.Errorf("unknown effort %q", d.opt.Effort)
	}
	if second != nil {
		effort.Multiplier = 0 // another multiplier would be no better
	}
	p, cert, err := d.sumOfSquares(r, effort)
	switch {
	case err != nil:
		return false, err
	case cert != nil:
		d.certified("sum of squares", g, r, p, cert)
		return true, nil
	case second != nil:
		if cert, err := r.certify(second); err == nil {
			d.certified("completing squares", g, r, second, cert)
			return true, nil
		}
	}
	cert, steps, err := d.squareRoots(r, effort, 3)
	if err != nil || cert == nil {
		return false, err
	}
	d.certified("squaring, and sum of squares", g, r, &gram.Proof{}, cert)
	d.Rec.Details, d.Rec.Equality = steps, nil
	return true, nil
}

// refuteOnWells looks at some exact points of the well, which settles most of
// what is false before a proof is searched for.
func (d *decider) refuteOnWells() (bool, error) {
	g, err := d.Gap()
	if err != nil {
		return false, err
	}
	pts := d.GapPoints(g)
	for range 150 {
		at, ok := pts.Next()
		if !ok {
			break
		}
		if d.FalseAt(g, pts, at) {
			d.Refuted("exact arithmetic at a rational point of the well", at, g.Left, g.Right)
			return true, nil
		}
	}
	return false, d.Ctx.Err()
}

// strict reports a multiplier that is 1, or visibly positive everywhere.
func (r *reduction) strict(m []gram.Square) bool {
	return len(m) == 0 || slices.ContainsFunc(m, func(s gram.Square) bool {
		_, constant := s.Base.IsConst()
		return constant && !slices.ContainsFunc(s.Factors, func(f int) bool { return !r.Positive[f].Strict })
	})
}

// proveOnWells searches for a certificate in the traces themselves, with the
// wells on both sides as equations.
func (d *decider) proveOnWells() (bool, error) {
	g, ok, err := d.GapOnWells()
	if err != nil || !ok {
		return false, err
	}
	ok, err = d.prove(g, nil)
	d.Rec.OnWells = ok
	return ok, err
}

// sumOfSquares is one search, its result checked; no certificate and no error
// where none was found.
func (d *decider) sumOfSquares(r *reduction, effort gram.Effort) (*gram.Proof, *certificate.Certificate, error) {
	problem, m := r.problem()
	if problem.Target.IsZero() { // the equations alone say so
		p := &gram.Proof{}
		if cert, err := r.certify(p); err == nil {
			return p, cert, nil
		}
		return nil, nil, nil
	}
	p, pic, err := gram.Prove(d.Ctx, problem, effort)
	if linked := r.linked(problem); errors.Is(err, gram.ErrNotFound) && len(linked) > 0 {
		problem.Beside = append(problem.Beside, linked...)
		if q, _, again := gram.Prove(d.Ctx, problem, effort); again == nil {
			p, err = q, nil
		}
	}
	switch {
	case errors.Is(err, gram.ErrNotFound):
		d.picture = pic
		return nil, nil, nil
	case err != nil:
		return nil, nil, err
	}
	p.Squares = m.times(p.Squares)
	cert, err := r.certify(p)
	if err != nil {
		return nil, nil, nil // what the checker refuses was no proof
	}
	return p, cert, nil
}

// squareRoots proves x - y >= 0 from x² - y² >= 0, where x holds the terms of
// the target that are visibly non-negative and -y the others: some of the roots
// in them are then gone. No certificate and no error where
// that does not apply or leads nowhere.
func (d *decider) squareRoots(r *reduction, effort gram.Effort, depth int) (*certificate.Certificate, []string, error) {
	root := false
	for _, v := range r.Target.Vars() {
		root = root || d.Ring.Symbol(v).Kind == jet.Root
	}
	if depth == 0 || !root {
		return nil, nil, nil
	}
	for _, rootsOnly := range []bool{false, true} {
		cert, steps, err := d.squareOnce(r, effort, depth, rootsOnly)
		if err != nil || cert != nil {
			return cert, steps, err
		}
	}
	return nil, nil, nil
}

// squareOnce squares x >= y, where x holds the terms that are visibly
// non-negative: all of them, or only those with a root.
func (d *decider) squareOnce(r *reduction, effort gram.Effort, depth int, rootsOnly bool) (*certificate.Certificate, []string, error) {
	one := algebra.Const(algebra.Int(1))
	var x, y algebra.Poly
	for m, c := range r.Target.Terms() {
		t := algebra.FromTerms([]algebra.Term{{Mono: m, Coef: c}})
		holdsRoot := slices.ContainsFunc(t.Vars(), func(v algebra.Var) bool { return d.Ring.Symbol(v).Kind == jet.Root })
		if d.Ring.VisiblyNonNegative(algebra.FromPoly(t)) && (holdsRoot || !rootsOnly) {
			x = x.Add(t)
		} else {
			y = y.Sub(t)
		}
	}
	left, okx := r.monomialSquares(x, one)
	if !okx || x.IsZero() {
		return nil, nil, nil
	}
	next := r.with(x.Mul(x).Sub(y.Mul(y)))
	if next.Target.Err() != nil {
		return nil, nil, nil
	}
	step := exact.Short("the square of " + r.Format(x) + " is at least the square of " + r.Format(y) + ":")
	reduced := r.with(next.Normal(next.Target))
	var inner *certificate.Certificate
	var steps []string
	if reduced.Target.IsZero() {
		inner = &certificate.Certificate{Cofactors: next.Cofactors(next.Target)}
	} else {
		p, cert, err := d.sumOfSquares(next, effort)
		if err != nil {
			return nil, nil, err
		}
		if cert != nil {
			inner = cert
			for _, s := range p.Squares {
				steps = append(steps, exact.Short(r.term(s)))
			}
		} else {
			// The reduced form has fewer roots: go on with it.
			deeper, more, err := d.squareRoots(reduced, effort, depth-1)
			if err != nil || deeper == nil {
				return nil, nil, err
			}
			// Its target differs from the literal one by multiples of the relations.
			deeper.Squaring.Cofactors = addPolynomials(deeper.Squaring.Cofactors, next.Cofactors(next.Target.Sub(reduced.Target)))
			inner, steps = deeper, more
		}
	}
	cert := &certificate.Certificate{Squaring: &certificate.Squaring{Left: r.squares(left), Right: r.Polynomial(y), Proof: inner}}
	if len(r.Zero) > 0 {
		cert.Squaring.Cofactors = make([]certificate.Polynomial, len(r.Zero))
	}
	if certificate.Check(r.Claim, cert) != nil && depth == 3 {
		return nil, nil, nil // what the checker refuses was no proof
	}
	return cert, append([]string{step}, steps...), nil
}

// addPolynomials adds lists of polynomials; an empty list is zero, and the
// lists of the first are so here.
func addPolynomials(a, b []certificate.Polynomial) []certificate.Polynomial {
	if len(a) == 0 {
		return b
	}
	out := make([]certificate.Polynomial, len(a))
	for i := range a {
		out[i] = append(append(certificate.Polynomial{}, a[i]...), b[i]...)
	}
	return out
}
