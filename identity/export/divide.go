package export

import (
	"fmt"
	"math/big"
	"slices"

	"creaseproof/identity/certificate"
)

// Cofactors divides p by equations h_k = 0: p = Σ cofactor_k h_k + remainder.
// Each h_k must be monic, up to a constant, in one of its variables; it is
// divided by with respect to the newest of these, the last in the list of
// variables, and equations with newer such variables are used first. This
// brings p to normal form for relations such as c² + s² = 1 and r² = a that are
// adjoined one after the other. It fails with ErrUnsupported where an equation
// is monic in no variable.
func Cofactors(variables []string, p certificate.Polynomial, equations []certificate.Polynomial) (
	cofactors []certificate.Polynomial, remainder certificate.Polynomial, err error) {
	r, err := newRing(variables)
	if err != nil {
		return nil, nil, err
	}
	q, err := r.read(p)
	if err != nil {
		return nil, nil, err
	}
	hs, err := r.readAll(equations, "equation")
	if err != nil {
		return nil, nil, err
	}
	cs, rest, err := r.divide(q, hs)
	if err != nil {
		return nil, nil, err
	}
	for _, c := range cs {
		cofactors = append(cofactors, r.write(c))
	}
	return cofactors, r.write(rest), nil
}

func (r *ring) divide(p poly, hs []poly) ([]poly, poly, error) {
	type divisor struct {
		k, variable int
	}
	var order []divisor
	for k, h := range hs {
		v := r.monicIn(h)
		if v < 0 {
			return nil, nil, fmt.Errorf("%w: equation %d is monic in no variable", ErrUnsupported, k)
		}
		order = append(order, divisor{k, v})
	}
	slices.SortStableFunc(order, func(a, b divisor) int { return b.variable - a.variable })
	cofactors := make([]poly, len(hs))
	for _, d := range order {
		q, rest, err := divideBy(p, hs[d.k], d.variable)
		if err != nil {
			return nil, nil, err
		}
		cofactors[d.k], p = q, rest
	}
	return cofactors, p, nil
}

// monicIn is the newest variable in which the leading coefficient of h is a
// number, or -1.
func (r *ring) monicIn(h poly) int {
	for v := len(r.names) - 1; v >= 0; v-- {
		if top, _ := leading(h, v); top != nil && degree(top.exps) == top.exps[v] && top.exps[v] > 0 {
			return v
		}
	}
	return -1
}

// leading is the only term of greatest degree in variable v, nil if there are
// several.
func leading(h poly, v int) (*term, int) {
	top, n := -1, 0
	var out *term
	for i, t := range h {
		switch {
		case t.exps[v] > top:
			top, n, out = t.exps[v], 1, &h[i]
		case t.exps[v] == top:
			n++
		}
	}
	if n != 1 {
		return nil, top
	}
	return out, top
}

func divideBy(p, h poly, v int) (quotient, rest poly, err error) {
	top, n := leading(h, v)
	inverse := new(big.Rat).Inv(top.coef)
	for {
		var part poly
		for _, t := range p {
			if t.exps[v] < n {
				continue
			}
			e := slices.Clone(t.exps)
			e[v] -= n
			part = append(part, term{new(big.Rat).Mul(t.coef, inverse), e})
		}
		if len(part) == 0 {
			return quotient, p, nil
		}
		m, err := mul(part, h)
		if err != nil {
			return nil, nil, err
		}
		quotient, p = add(quotient, part), sub(p, m)
		if len(p) > maxTerms {
			return nil, nil, fmt.Errorf("%w: a remainder of %d terms", ErrUnsupported, len(p))
		}
	}
}
