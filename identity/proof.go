package identity

import (
	"errors"
	"fmt"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
	"creaseproof/identity/gram"
	"creaseproof/identity/squares"
)

// prove searches for a certificate of a gap: completed squares, sums of
// squares, and squaring away roots. A certificate that does not rest on
// continuity is preferred. It reports whether the claim is proved.
func (d *decider) prove(g *gap, done []squares.Term) (bool, error) {
	r := d.reduce(g)
	type found struct {
		method string
		proof  *gram.Proof
		cert   *certificate.Certificate
	}
	var second *found
	if len(done) > 0 {
		if p, ok := r.fromSquares(done); ok {
			if cert, err := r.certify(p); err == nil {
				if !certificate.UsesContinuity(r.claim, cert) {
					d.certified("completing squares", g, r, p, cert)
					return true, nil
				}
				second = &found{"completing squares", p, cert}
			}
		}
	}
	if len(d.ideal) > 0 || len(d.wells) > len(g.wells) {
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
		d.certified(second.method, g, r, second.proof, second.cert)
		return true, nil
	}
	cert, steps, err := d.squareRoots(r, effort, 3)
	if err != nil || cert == nil {
		return false, err
	}
	d.certified("squaring, and sum of squares", g, r, &gram.Proof{}, cert)
	d.rec.Details, d.rec.Equality = steps, nil
	return true, nil
}

// proveOnWells searches for a certificate in the traces themselves, with the
// wells on both sides as equations.
func (d *decider) proveOnWells() (bool, error) {
	g, err := d.gap()
	if err != nil {
		return false, err
	}
	for _, w := range d.wells {
		rel, ok := monic(w)
		if !ok {
			return false, nil
		}
		g.wells = append(g.wells, rel)
	}
	if g.poly, err = d.inTraces(g.poly); err != nil {
		return false, err
	}
	if err := d.removeAngle(g); err != nil {
		return false, err
	}
	return d.prove(g, nil)
}

// monic writes w = 0 as a relation for an indeterminate in which w is monic up
// to a constant.
func monic(w algebra.Poly) (relation, bool) {
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
		return relation{v, n, algebra.Variable(v).Pow(n).Sub(w.Scale(inv))}, true
	}
	return relation{}, false
}

// sumOfSquares is one search, its result checked; no certificate and no error
// where none was found.
func (d *decider) sumOfSquares(r *reduction, effort gram.Effort) (*gram.Proof, *certificate.Certificate, error) {
	problem, m := r.problem()
	p, pic, err := gram.Prove(d.ctx, problem, effort)
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
		return nil, nil, fmt.Errorf("%w: a certificate that the checker refuses: %w", jet.ErrOutside, err)
	}
	return p, cert, nil
}

// squareRoots proves x - y >= 0 from x² - y² >= 0, where x holds the terms of
// the target that are visibly non-negative and -y the others: some of the roots
// in them are then gone. No certificate and no error where
// that does not apply or leads nowhere.
func (d *decider) squareRoots(r *reduction, effort gram.Effort, depth int) (*certificate.Certificate, []string, error) {
	root := false
	for _, v := range r.target.Vars() {
		root = root || d.ring.Symbol(v).Kind == jet.Root
	}
	if depth == 0 || !root {
		return nil, nil, nil
	}
	one := algebra.Const(algebra.Int(1))
	var x, y algebra.Poly
	for m, c := range r.target.Terms() {
		t := algebra.FromTerms([]algebra.Term{{Mono: m, Coef: c}})
		if d.ring.VisiblyNonNegative(algebra.FromPoly(t)) {
			x = x.Add(t)
		} else {
			y = y.Sub(t)
		}
	}
	left, okx := r.monomialSquares(x, one)
	if !okx || x.IsZero() {
		return nil, nil, nil
	}
	next := *r
	next.target = x.Mul(x).Sub(y.Mul(y))
	if next.target.Err() != nil {
		return nil, nil, nil
	}
	next.claim = next.statement()
	step := short("the square of " + r.format(x) + " is at least the square of " + r.format(y) + ":")
	reduced := next
	reduced.target = next.normal(next.target)
	var inner *certificate.Certificate
	var steps []string
	if reduced.target.IsZero() {
		inner = &certificate.Certificate{Cofactors: next.cofactors(next.target)}
	} else {
		p, cert, err := d.sumOfSquares(&next, effort)
		if err != nil {
			return nil, nil, err
		}
		if cert != nil {
			inner = cert
			for _, s := range p.Squares {
				steps = append(steps, short(r.term(s)))
			}
		} else {
			// The reduced form has fewer roots: go on with it.
			deeper, more, err := d.squareRoots(&reduced, effort, depth-1)
			if err != nil || deeper == nil {
				return nil, nil, err
			}
			// Its target differs from the literal one by multiples of the relations.
			deeper.Squaring.Cofactors = addPolynomials(deeper.Squaring.Cofactors, next.cofactors(next.target.Sub(reduced.target)))
			inner, steps = deeper, more
		}
	}
	cert := &certificate.Certificate{Squaring: &certificate.Squaring{Left: r.squares(left), Right: r.polynomial(y), Proof: inner}}
	if len(r.zero) > 0 {
		cert.Squaring.Cofactors = make([]certificate.Polynomial, len(r.zero))
	}
	if err := certificate.Check(r.claim, cert); err != nil && depth == 3 {
		return nil, nil, fmt.Errorf("%w: a certificate that the checker refuses: %w", jet.ErrOutside, err)
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
