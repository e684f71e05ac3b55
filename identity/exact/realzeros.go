package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// realZeros are polynomials whose common real zeros are those of p. With
//
//	4 a p = (2 a v^k + b)² + (4 a c - b²),   p = a v^2k + b v^k + c, a > 0,
//
// and a rest that is non-negative by the same rule, or since its monomials have
// even powers, p vanishes where the square and the rest do; that holds for
// power series too, so for the system with all total derivatives. A constant
// among the polynomials says that there are no real zeros. Where nothing of
// this shows, the answer is p alone.
func (d *Problem) realZeros(p algebra.Poly) []algebra.Poly {
	if p.Len() > maxPairTerms || len(d.Ring.Kernels(algebra.FromPoly(p))) > 0 {
		return []algebra.Poly{p}
	}
	for _, q := range []algebra.Poly{p, p.Neg()} {
		if list, ok := d.zerosOf(q, 0); ok && len(list) > 0 && !slices.ContainsFunc(list, d.ofPlaces) {
			return list
		}
	}
	return []algebra.Poly{p}
}

// ofPlaces reports a polynomial that holds coordinates and no derivative: its
// zeros are places, on which no function is looked at.
func (d *Problem) ofPlaces(p algebra.Poly) bool {
	coordinate, derivative := false, false
	for _, v := range p.Vars() {
		coordinate = coordinate || d.Ring.Symbol(v).Kind == jet.Coordinate
		derivative = derivative || d.Ring.Symbol(v).Kind == jet.Derivative
	}
	return coordinate && !derivative
}

// maxZerosDepth bounds the squares that are completed one in the other.
const maxZerosDepth = 6

func (d *Problem) zerosOf(p algebra.Poly, depth int) ([]algebra.Poly, bool) {
	if p.Err() != nil || depth > maxZerosDepth || p.Len() > maxPairTerms {
		return nil, false
	}
	if list, ok := d.evenZeros(p); ok {
		return list, true
	}
	for _, v := range p.Vars() {
		n := p.Degree(v)
		if d.Ring.Symbol(v).Kind != jet.Derivative || n == 0 || n%2 == 1 {
			continue
		}
		co := p.Coeffs(v)
		k := n / 2
		other := false // powers of v
		for e, c := range co {
			other = other || e%k != 0 && !c.IsZero()
		}
		a, b, c := co[n], co[k], co[0]
		if even, strict := d.evenPowers(a); other || !even || !strict {
			continue
		}
		rest := a.Mul(c).Scale(algebra.Int(4)).Sub(b.Mul(b))
		list, ok := d.zerosOf(rest, depth+1)
		if !ok {
			continue
		}
		base := a.Scale(algebra.Int(2)).Mul(algebra.Variable(v).Pow(k)).Add(b)
		return append([]algebra.Poly{radical(base)}, list...), true
	}
	return nil, false
}

// evenZeros are the zeros of a polynomial whose monomials are non-negative:
// each of them vanishes.
func (d *Problem) evenZeros(p algebra.Poly) ([]algebra.Poly, bool) {
	if even, strict := d.evenPowers(p); !even {
		return nil, false
	} else if strict {
		return []algebra.Poly{algebra.Const(algebra.Int(1))}, true
	}
	var out []algebra.Poly
	for m := range p.Terms() {
		q := algebra.Const(algebra.Int(1))
		for _, pw := range m.Powers() {
			if d.Ring.Symbol(pw.Var).Sign != jet.Positive {
				q = q.Mul(algebra.Variable(pw.Var))
			}
		}
		if !slices.ContainsFunc(out, q.Equal) {
			out = append(out, q)
		}
	}
	return out, true
}

// evenPowers reports whether the coefficients of p are positive, with even
// powers of all indeterminates but positive ones and non-negative constants.
// A jet that is only not negative may turn negative nearby. strict says that p
// is certainly positive.
func (d *Problem) evenPowers(p algebra.Poly) (even, strict bool) {
	for m, c := range p.Terms() {
		positive := true
		for _, pw := range m.Powers() {
			s := d.Ring.Symbol(pw.Var)
			constant := s.Kind == jet.Constant && s.Sign == jet.NonNegative
			if pw.Exp%2 == 1 && s.Sign != jet.Positive && !constant {
				return false, false
			}
			positive = positive && s.Sign == jet.Positive
		}
		if c.Sign() <= 0 {
			return false, false
		}
		strict = strict || positive
	}
	return true, strict
}

// empty reports a system that holds a constant which is not zero.
func empty(system []algebra.Poly) bool {
	return slices.ContainsFunc(system, func(p algebra.Poly) bool {
		_, ok := p.IsConst()
		return ok && !p.IsZero()
	})
}
