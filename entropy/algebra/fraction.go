package algebra

import "slices"

// Fraction is a rational function over the rationals. It is immutable; the zero
// value is 0. The denominator is kept as a product of powers of distinct bases:
// polynomials that are not constant, with coprime integer coefficients and a
// positive leading one, none of which divides another. No base divides the
// numerator. That makes IsZero, IsPoly and Equal exact, though numerator and
// denominator may still have a common factor.
//
// A Fraction is poisoned where its numerator is; see Poly. A Fraction is a formal
// quotient: where its denominator vanishes it has no value, even if another
// representation would.
type Fraction struct {
	num Poly
	den []Factor // sorted; nil where num is 0 or poisoned
}

// Factor is a power of a polynomial; Exp is at least 1.
type Factor struct {
	Base Poly
	Exp  int
}

// FromPoly returns p as a fraction.
func FromPoly(p Poly) Fraction { return Fraction{num: p} }

// Err returns nil, or why f was lost.
func (f Fraction) Err() error { return f.num.Err() }

// Num returns the numerator.
func (f Fraction) Num() Poly { return f.num }

// Den returns the denominator, expanded.
func (f Fraction) Den() Poly {
	if f.Err() != nil {
		return f.num
	}
	return expand(f.den)
}

func expand(den []Factor) Poly {
	d := Const(Int(1))
	for _, x := range den {
		d = d.Mul(x.Base.Pow(x.Exp))
	}
	return d
}

// DenFactors returns the denominator as it is kept, in a fixed order.
func (f Fraction) DenFactors() []Factor { return slices.Clone(f.den) }

// IsZero reports whether f is 0; a poisoned fraction is not.
func (f Fraction) IsZero() bool { return f.num.IsZero() }

// IsPoly returns f as a polynomial where it is one.
func (f Fraction) IsPoly() (Poly, bool) {
	if f.Err() != nil || len(f.den) > 0 {
		return Poly{}, false
	}
	return f.num, true
}

// IsConst returns the value of f where it is constant.
func (f Fraction) IsConst() (Rat, bool) {
	if len(f.den) > 0 {
		return Rat{}, false
	}
	return f.num.IsConst()
}

// Equal reports whether f = g; false where either is poisoned, or the
// comparison reaches a limit.
func (f Fraction) Equal(g Fraction) bool {
	if f.Err() != nil || g.Err() != nil {
		return false
	}
	if len(f.den) == 0 && len(g.den) == 0 {
		return f.num.Equal(g.num)
	}
	return f.Sub(g).IsZero()
}

// Vars returns the indeterminates of numerator and denominator, sorted.
func (f Fraction) Vars() []Var {
	vars := f.num.Vars()
	for _, d := range f.den {
		vars = union(vars, d.Base.r.vars)
	}
	return slices.Clone(vars)
}

// Has reports whether v occurs in numerator or denominator.
func (f Fraction) Has(v Var) bool {
	if f.num.Has(v) {
		return true
	}
	for _, d := range f.den {
		if d.Base.Has(v) {
			return true
		}
	}
	return false
}

// Neg returns -f.
func (f Fraction) Neg() Fraction { return Fraction{f.num.Neg(), f.den} }

// Scale returns c f.
func (f Fraction) Scale(c Rat) Fraction { return over(f.num.Scale(c), f.den) }

// over pairs a numerator with a denominator that needs no cancelling.
func over(num Poly, den []Factor) Fraction {
	if num.r == nil || num.r.err != nil || len(den) == 0 {
		return Fraction{num: num}
	}
	return Fraction{num, den}
}

// Add returns f + g, over the least common multiple of the denominators as they
// are kept.
func (f Fraction) Add(g Fraction) Fraction {
	switch {
	case f.Err() != nil || g.IsZero():
		return f
	case g.Err() != nil || f.IsZero():
		return g
	case len(f.den) == 0 && len(g.den) == 0:
		return Fraction{num: f.num.Add(g.num)}
	}
	basis, split := common(f.den, g.den)
	a, b := f.num, g.num
	den := make([]Factor, 0, len(basis))
	for _, x := range basis {
		if x.a < x.b {
			a = a.Mul(x.base.Pow(x.b - x.a))
		} else if x.b < x.a {
			b = b.Mul(x.base.Pow(x.a - x.b))
		}
		den = append(den, Factor{x.base, max(x.a, x.b)})
	}
	num := a.Add(b)
	// An irreducible base with different exponents divides exactly one summand.
	return reduce(num, den, func(i int) bool {
		return split || basis[i].a == basis[i].b || !irreducible(basis[i].base)
	})
}

// Sub returns f - g.
func (f Fraction) Sub(g Fraction) Fraction { return f.Add(g.Neg()) }

// Mul returns f g.
func (f Fraction) Mul(g Fraction) Fraction {
	switch {
	case f.Err() != nil || g.IsZero() && g.Err() == nil:
		if f.Err() != nil {
			return f
		}
		return g
	case g.Err() != nil || f.IsZero():
		if g.Err() != nil {
			return g
		}
		return f
	case len(f.den) == 0 && len(g.den) == 0:
		return Fraction{num: f.num.Mul(g.num)}
	}
	fd, gd := f.den, g.den
	a, b := f.num, g.num
	a, gd = cancel(a, gd)
	b, fd = cancel(b, fd)
	basis, _ := common(fd, gd)
	den := make([]Factor, len(basis))
	for i, x := range basis {
		if x.a+x.b > MaxExponent {
			return Fraction{num: poison(errExponent)}
		}
		den[i] = Factor{x.base, x.a + x.b}
	}
	return reduce(a.Mul(b), den, func(int) bool { return true })
}

// Inv returns 1/f, and false where f is 0. It is poisoned, and true, where f is
// and where a limit is reached.
func (f Fraction) Inv() (Fraction, bool) {
	if f.Err() != nil {
		return f, true
	}
	if f.IsZero() {
		return Fraction{}, false
	}
	unit, den, err := factors(f.num)
	if err != nil {
		return Fraction{num: poison(err)}, true
	}
	inv, _ := unit.Inv()
	return reduce(expand(f.den).Scale(inv), den, func(int) bool { return true }), true
}

// Quo returns f/g, and false where g is 0.
func (f Fraction) Quo(g Fraction) (Fraction, bool) {
	if f.Err() != nil {
		return f, true
	}
	if c, ok := g.IsConst(); ok {
		i, ok := c.Inv()
		return f.Scale(i), ok
	}
	if len(g.den) == 0 && len(f.den) == 0 {
		if q, ok := f.num.DivExact(g.num); ok {
			return Fraction{num: q}, true
		}
	}
	i, ok := g.Inv()
	if !ok {
		return Fraction{}, false
	}
	return f.Mul(i), true
}

// Pow returns f to the power n; f to the power 0 is 1. A negative power of 0 is
// poisoned with ErrDivision.
func (f Fraction) Pow(n int) Fraction {
	if f.Err() != nil {
		return f
	}
	if n < 0 {
		i, ok := f.Inv()
		switch {
		case !ok:
			return Fraction{num: poison(ErrDivision)}
		case n < -MaxExponent:
			return Fraction{num: poison(errExponent)}
		}
		return i.Pow(-n)
	}
	if n == 0 {
		return FromPoly(Const(Int(1)))
	}
	den := slices.Clone(f.den)
	for i := range den {
		if n > MaxExponent/den[i].Exp {
			return Fraction{num: poison(errExponent)}
		}
		den[i].Exp *= n
	}
	return reduce(f.num.Pow(n), den, func(i int) bool { return n > 1 && !irreducible(den[i].Base) })
}

// Deriv returns the partial derivative in v.
func (f Fraction) Deriv(v Var) Fraction {
	if f.Err() != nil || len(f.den) == 0 {
		return Fraction{num: f.num.Deriv(v)}
	}
	// With N/prod(b^e) and B the product of the bases that contain v, it is
	// (N' B - N sum(e b' B/b)) / (B prod(b^e)).
	den := slices.Clone(f.den)
	num := f.num.Deriv(v)
	var sum Poly
	for i := range den {
		if !den[i].Base.Has(v) {
			continue
		}
		num = num.Mul(den[i].Base)
		t := den[i].Base.Deriv(v).Scale(Int(int64(den[i].Exp)))
		for j := range den {
			if j != i && den[j].Base.Has(v) {
				t = t.Mul(f.den[j].Base)
			}
		}
		sum = sum.Add(t)
		den[i].Exp++
	}
	return reduce(num.Sub(f.num.Mul(sum)), den, func(int) bool { return true })
}

// Eval returns the value of f where each indeterminate v is at(v); it is exact.
// It returns false where a base of the denominator vanishes, and where f is
// poisoned or the value beyond MaxBits.
func (f Fraction) Eval(at func(Var) Rat) (Rat, bool) {
	r, ok := f.num.Eval(at)
	for i := 0; i < len(f.den) && ok; i++ {
		var x Rat
		if x, ok = f.den[i].Base.Eval(at); !ok {
			break
		}
		if x, ok = x.Pow(-f.den[i].Exp); ok {
			r = r.Mul(x)
		}
	}
	if !ok || r.BitLen() > MaxBits {
		return Rat{}, false
	}
	return r, true
}
