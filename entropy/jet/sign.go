package jet

import "creaseproof/entropy/algebra"

// A sign shows where every term has even powers, or odd powers only of
// indeterminates whose sign is known, and all terms agree. Nothing deeper is
// tried here.

func (r *Ring) nonNegativeVar(v algebra.Var) bool {
	s := r.symbols[v].Sign
	return s == Positive || s == NonNegative
}

// termSign is +1, -1 or 0 (unknown) for the sign of a monomial with its
// coefficient, where it never takes the other sign; strict is false where it
// may vanish.
func (r *Ring) termSign(m algebra.Monomial, c algebra.Rat) (sign int, strict bool) {
	sign, strict = c.Sign(), true
	for _, pw := range m.Powers() {
		s := r.symbols[pw.Var].Sign
		if s != Positive && s != Negative {
			strict = false
		}
		if pw.Exp%2 == 0 {
			continue
		}
		switch s {
		case Positive, NonNegative:
		case Negative, NonPositive:
			sign = -sign
		default:
			return 0, false
		}
	}
	return sign, strict
}

func (r *Ring) visiblyNonNegativePoly(p algebra.Poly) bool {
	if p.Err() != nil {
		return false
	}
	for m, c := range p.Terms() {
		if s, _ := r.termSign(m, c); s <= 0 {
			return r.shiftedSquare(p) || r.radicand(p)
		}
	}
	return true
}

// radicand recognises a positive multiple of what stands under an even root:
// it is not negative wherever that root is defined.
func (r *Ring) radicand(p algebra.Poly) bool {
	for _, v := range r.related {
		s := &r.symbols[v]
		if s.Kind != Root || s.Degree%2 == 1 {
			continue
		}
		a := s.Arg.Num()
		if a.Len() != p.Len() {
			continue
		}
		_, ca := a.Leading()
		_, cp := p.Leading()
		if k, ok := cp.Quo(ca); ok && k.Sign() > 0 && a.Scale(k).Equal(p) {
			return true
		}
	}
	return false
}

// shiftedSquare recognises c² ≤ 1 in the shape 1 - cos², which the reduction
// of sines produces: a polynomial that is non-negative once every cos² is
// written as 1 - sin².
func (r *Ring) shiftedSquare(p algebra.Poly) bool {
	if len(r.cosines) == 0 {
		return false
	}
	changed := false
	for _, c := range r.cosines {
		if p.Degree(c) < 2 {
			continue
		}
		s := algebra.Variable(r.symbols[c].Partner)
		rest := algebra.Const(algebra.Int(1)).Sub(s.Mul(s))
		var out algebra.Poly
		pow := algebra.Const(algebra.Int(1))
		for k, co := range p.Coeffs(c) {
			if k > 0 && k%2 == 0 {
				pow = pow.Mul(rest)
			}
			out = out.Add(co.Mul(pow).Mul(algebra.Variable(c).Pow(k % 2)))
		}
		p, changed = out, true
	}
	if !changed || p.Err() != nil {
		return false
	}
	for m, c := range p.Terms() {
		if s, _ := r.termSign(m, c); s <= 0 {
			return false
		}
	}
	return true
}

// numberSign is the sign of a number that is certainly not zero; false for all
// that depends on indeterminates or on the orientation.
func (r *Ring) numberSign(p algebra.Poly) (int, bool) {
	f := algebra.FromPoly(p)
	for _, v := range r.Support(f) {
		if r.symbols[v].Kind != Pi {
			return 0, false
		}
	}
	for _, v := range r.Kernels(f) {
		if s := &r.symbols[v]; s.Kind == Root && s.Sign == AnySign {
			return 0, false
		}
	}
	s, ok := r.Sign(f, nil)
	return s, ok && s != 0
}

func (r *Ring) visiblyPositivePoly(p algebra.Poly) bool {
	if p.Err() != nil || p.IsZero() {
		return false
	}
	some := false
	for m, c := range p.Terms() {
		s, strict := r.termSign(m, c)
		if s <= 0 {
			return false
		}
		some = some || strict
	}
	return some
}

// VisiblyNonNegative reports whether f >= 0 shows term by term from the
// assumed signs. False means only that it does not show.
func (r *Ring) VisiblyNonNegative(f algebra.Fraction) bool {
	return r.visibly(f, r.visiblyNonNegativePoly)
}

// VisiblyPositive reports whether f > 0 shows term by term from the assumed
// signs.
func (r *Ring) VisiblyPositive(f algebra.Fraction) bool {
	return r.visibly(f, r.visiblyPositivePoly)
}

func (r *Ring) visibly(f algebra.Fraction, num func(algebra.Poly) bool) bool {
	if f.Err() != nil {
		return false
	}
	sign := 1
	for _, d := range f.DenFactors() {
		switch {
		case d.Exp%2 == 0, r.visiblyNonNegativePoly(d.Base):
		case r.visiblyNonNegativePoly(d.Base.Neg()):
			sign = -sign
		default:
			return false
		}
	}
	n := f.Num()
	if sign < 0 {
		n = n.Neg()
	}
	return num(n)
}
