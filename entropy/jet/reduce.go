package jet

import (
	"creaseproof/entropy/algebra"
)

// Relation is the q and the polynomial a of v^q = a; q is 0 where v is free. a
// holds indeterminates older than v and, for the cosine of a fraction of π,
// lower powers of v.
func (r *Ring) Relation(v algebra.Var) (q int, a algebra.Poly) {
	switch s := &r.symbols[v]; s.Kind {
	case Cosine:
		if s.Degree > 0 {
			return s.Degree, s.Value
		}
	case Sine:
		if s.Degree > 0 {
			return s.Degree, s.Value
		}
		c := algebra.Variable(s.Partner)
		return 2, algebra.Const(algebra.Int(1)).Sub(c.Mul(c))
	case Root:
		return s.Degree, s.Arg.Num()
	}
	return 0, algebra.Poly{}
}

// ReducePoly rewrites p by the relations of the kernels in it, newest first:
// a relation holds only older indeterminates, so one pass is enough.
func (r *Ring) ReducePoly(p algebra.Poly) algebra.Poly {
	for i := len(r.related) - 1; i >= 0; i-- {
		v := r.related[i]
		q, a := r.Relation(v)
		if p.Err() != nil || p.Degree(v) < q {
			continue
		}
		coeffs := p.Coeffs(v)
		if a.Has(v) {
			p = foldPowers(coeffs, v, q, a)
			continue
		}
		powers := []algebra.Poly{algebra.Const(algebra.Int(1))} // of a
		var out algebra.Poly
		for k, c := range coeffs {
			if c.IsZero() {
				continue
			}
			for len(powers) <= k/q {
				powers = append(powers, powers[len(powers)-1].Mul(a))
			}
			out = out.Add(c.Mul(powers[k/q]).Mul(algebra.Variable(v).Pow(k % q)))
		}
		p = out
	}
	return p
}

// foldPowers is Σ coeffs[k] v^k reduced by v^q = a, a of lower degree in v.
func foldPowers(coeffs []algebra.Poly, v algebra.Var, q int, a algebra.Poly) algebra.Poly {
	x, low := algebra.Variable(v), a.Coeffs(v)
	var out algebra.Poly
	power := algebra.Const(algebra.Int(1)) // v^k, reduced
	for k, c := range coeffs {
		if k > 0 {
			co := power.Coeffs(v)
			power = power.Mul(x)
			if len(co) == q {
				power = power.Sub(co[q-1].Mul(x.Pow(q)))
				for i, b := range low {
					power = power.Add(co[q-1].Mul(b).Mul(x.Pow(i)))
				}
			}
		}
		out = out.Add(c.Mul(power))
	}
	return out
}

// holdsRelated reports whether a kernel with a relation occurs in p.
func (r *Ring) holdsRelated(p algebra.Poly) bool {
	for _, v := range r.related {
		if p.Has(v) {
			return true
		}
	}
	return false
}

// Reduce brings a value to normal form: numerator and denominators reduced by
// the relations, no bare root left in a denominator. A denominator that
// reduces to zero gives ErrDivisionByZero.
func (r *Ring) Reduce(f algebra.Fraction) (algebra.Fraction, error) {
	if err := r.Err(f); err != nil {
		return f, err
	}
	if len(r.related) == 0 {
		return f, nil
	}
	f, err := r.reduceDenominators(f)
	if err != nil {
		return f, err
	}
	num := f.Num()
	if !r.holdsRelated(num) {
		return f, r.Err(f)
	}
	red := r.ReducePoly(num)
	if err := red.Err(); err != nil {
		return f, err
	}
	if red.Equal(num) {
		return f, nil
	}
	out := algebra.FromFactors(red, f.DenFactors())
	return out, r.Err(out)
}

func (r *Ring) reduceDenominators(f algebra.Fraction) (algebra.Fraction, error) {
	dirty := false
	for _, d := range f.DenFactors() {
		if r.holdsRelated(d.Base) {
			dirty = true
		}
	}
	if !dirty {
		return f, nil
	}
	out := algebra.FromPoly(f.Num())
	changed := false
	for _, d := range f.DenFactors() {
		base := d.Base
		if !r.holdsRelated(base) {
			out = out.Mul(algebra.FromPoly(base).Pow(-d.Exp))
			continue
		}
		if v, ok := loneVar(base); ok {
			if q, a := r.Relation(v); q > 0 && r.symbols[v].Kind == Root {
				k := (d.Exp + q - 1) / q
				out = out.Mul(algebra.FromPoly(algebra.Variable(v).Pow(k*q - d.Exp)))
				out = out.Mul(algebra.FromPoly(a).Pow(-k))
				changed = true
				continue
			}
		}
		red := r.ReducePoly(base)
		if red.IsZero() {
			return f, ErrDivisionByZero
		}
		if !red.Equal(base) {
			changed = true
		}
		out = out.Mul(algebra.FromPoly(red).Pow(-d.Exp))
	}
	if !changed {
		return f, r.Err(f)
	}
	if err := r.Err(out); err != nil {
		return out, err
	}
	// Rationalising may leave an older root alone in a denominator.
	return r.reduceDenominators(out)
}

// loneVar reports the indeterminate that p is, if it is one.
func loneVar(p algebra.Poly) (algebra.Var, bool) {
	if p.Len() != 1 {
		return 0, false
	}
	m, c := p.Leading()
	pw := m.Powers()
	if len(pw) != 1 || pw[0].Exp != 1 || !c.IsOne() {
		return 0, false
	}
	return pw[0].Var, true
}

// Mul is the reduced product.
func (r *Ring) Mul(a, b algebra.Fraction) (algebra.Fraction, error) { return r.Reduce(a.Mul(b)) }

// Add is the reduced sum.
func (r *Ring) Add(a, b algebra.Fraction) (algebra.Fraction, error) { return r.Reduce(a.Add(b)) }

// Sub is the reduced difference.
func (r *Ring) Sub(a, b algebra.Fraction) (algebra.Fraction, error) { return r.Reduce(a.Sub(b)) }

// Quo is the reduced quotient.
func (r *Ring) Quo(a, b algebra.Fraction) (algebra.Fraction, error) {
	if err := r.Err(b); err != nil {
		return b, err
	}
	inv, ok := b.Inv()
	if !ok {
		return b, ErrDivisionByZero
	}
	r.require(b, NeedNonZero)
	return r.Reduce(a.Mul(inv))
}

// PowInt is a to an integer power. Intermediate results are reduced, so that
// a root or a sine does not grow.
func (r *Ring) PowInt(a algebra.Fraction, n int) (algebra.Fraction, error) {
	if n < 0 {
		inv, err := r.Quo(Whole(1), a)
		if err != nil {
			return inv, err
		}
		return r.PowInt(inv, -n)
	}
	if len(r.related) == 0 || a.Num().Len() <= 1 {
		return r.Reduce(a.Pow(n))
	}
	out := Whole(1)
	var err error
	for ; n > 0; n >>= 1 {
		if n&1 == 1 {
			if out, err = r.Mul(out, a); err != nil {
				return out, err
			}
		}
		if n > 1 {
			if a, err = r.Mul(a, a); err != nil {
				return a, err
			}
		}
	}
	return out, nil
}
