package jet

import (
	"fmt"
	"math/big"

	"creaseproof/entropy/algebra"
)

// Pow is f to a rational power; where the power is no integer, f must be
// non-negative, and that is recorded as a condition where it does not show.
func (r *Ring) Pow(f algebra.Fraction, e algebra.Rat) (algebra.Fraction, error) {
	b := e.Big()
	if !b.Num().IsInt64() || !b.Denom().IsInt64() || b.Denom().Int64() > 64 {
		return f, fmt.Errorf("%w: the exponent %s", ErrOutside, e)
	}
	n, q := b.Num().Int64(), b.Denom().Int64()
	if n > 1<<20 || n < -(1<<20) {
		return f, fmt.Errorf("%w: the exponent %s", algebra.ErrLimit, e)
	}
	if q == 1 {
		return r.PowInt(f, int(n))
	}
	g, err := r.Root(f, int(q))
	if err != nil {
		return g, err
	}
	return r.PowInt(g, int(n))
}

// Abs is |f|.
func (r *Ring) Abs(f algebra.Fraction) (algebra.Fraction, error) {
	if f.IsZero() {
		return f, nil
	}
	num, err := r.absPoly(f.Num())
	if err != nil {
		return num, err
	}
	for _, d := range f.DenFactors() {
		b := algebra.FromPoly(d.Base).Pow(d.Exp)
		if d.Exp%2 == 1 {
			a, err := r.absPoly(d.Base)
			if err != nil {
				return a, err
			}
			b = a.Mul(algebra.FromPoly(d.Base).Pow(d.Exp - 1))
		}
		if num, err = r.Quo(num, b); err != nil {
			return num, err
		}
	}
	return num, nil
}

func (r *Ring) absPoly(p algebra.Poly) (algebra.Fraction, error) {
	switch {
	case r.visiblyNonNegativePoly(p):
		return algebra.FromPoly(p), nil
	case r.visiblyNonNegativePoly(p.Neg()):
		return algebra.FromPoly(p.Neg()), nil
	}
	if s, ok := r.numberSign(p); ok {
		return algebra.FromPoly(p.Scale(algebra.Int(int64(s)))), nil
	}
	c, q := p.Primitive()
	out := Rational(c.Abs().Big())
	// Split the monomial content: |a b| = |a| |b|.
	mono := q.MonomialContent()
	for _, pw := range mono.Powers() {
		v := Of(pw.Var)
		if s := r.symbols[pw.Var].Sign; pw.Exp%2 == 1 && (s == Negative || s == NonPositive) {
			out = out.Mul(v.Pow(pw.Exp).Neg())
			continue
		}
		if pw.Exp%2 == 1 && !r.nonNegativeVar(pw.Var) {
			a, err := r.absKernel(algebra.Variable(pw.Var))
			if err != nil {
				return a, err
			}
			out = out.Mul(a).Mul(v.Pow(pw.Exp - 1))
			continue
		}
		out = out.Mul(v.Pow(pw.Exp))
	}
	rest, ok := q.DivExact(algebra.FromTerms([]algebra.Term{{Mono: mono, Coef: algebra.Int(1)}}))
	if !ok {
		return out, q.Err()
	}
	switch {
	case r.visiblyNonNegativePoly(rest):
		out = out.Mul(algebra.FromPoly(rest))
	case r.visiblyNonNegativePoly(rest.Neg()):
		out = out.Mul(algebra.FromPoly(rest.Neg()))
	default:
		if _, ok := r.sqrtPoly(rest); ok {
			out = out.Mul(algebra.FromPoly(rest))
			break
		}
		if _, ok := r.sqrtPoly(rest.Neg()); ok {
			out = out.Mul(algebra.FromPoly(rest.Neg()))
			break
		}
		a, err := r.absKernel(rest)
		if err != nil {
			return a, err
		}
		out = out.Mul(a)
	}
	return r.Reduce(out)
}

// absKernel is |p| as the root of p².
func (r *Ring) absKernel(p algebra.Poly) (algebra.Fraction, error) {
	sq := r.ReducePoly(p.Mul(p))
	if c, ok := sq.IsConst(); ok && c.Sign() > 0 { // as for an orientation
		return r.rootRat(c, 2)
	}
	return r.rootKernel(sq, 2, "abs("+r.FormatPoly(p)+")")
}

// rootKernel is the non-negative q-th root of p as a kernel. The root of 1 is
// no kernel: the one that looks like it is the orientation, which has two signs.
func (r *Ring) rootKernel(p algebra.Poly, q int, name string) (algebra.Fraction, error) {
	if c, ok := p.IsConst(); ok && c.IsOne() {
		return Whole(1), nil
	}
	n := len(r.symbols)
	sign := NonNegative
	if r.visiblyPositivePoly(p) {
		sign = Positive
	}
	v, err := r.kernel(Symbol{Kind: Root, Name: name, Arg: algebra.FromPoly(p), Degree: q, Sign: sign})
	if err != nil {
		return algebra.Fraction{}, err
	}
	if int(v) == n {
		r.related = append(r.related, v)
	}
	return Of(v), nil
}

// Root is the q-th root of f, f non-negative, the root too. What is a perfect
// power is taken out (as an absolute value where its sign does not show);
// factors known to be positive get roots of their own, as do the primes of
// the rational content, so that √a·√b = √(ab) holds literally for these.
func (r *Ring) Root(f algebra.Fraction, q int) (algebra.Fraction, error) {
	return r.root(f, q, false)
}

// root is Root; sure says that f >= 0 for all values of its indeterminates.
func (r *Ring) root(f algebra.Fraction, q int, sure bool) (algebra.Fraction, error) {
	if q < 1 {
		return f, fmt.Errorf("%w: a root of degree %d", ErrOutside, q)
	}
	if f.IsZero() || q == 1 {
		return f, nil
	}
	if err := r.Err(f); err != nil {
		return f, err
	}
	if c, ok := f.IsConst(); ok && c.Sign() < 0 {
		return f, fmt.Errorf("a root of the negative number %s", c)
	}
	if !sure {
		r.require(f, NeedNonNegative)
	}
	num := f.Num()
	out := Whole(1)
	for _, d := range f.DenFactors() {
		k, rem := d.Exp/q, d.Exp%q
		if rem > 0 {
			num = num.Mul(d.Base.Pow(q - rem))
			k++
		}
		if q%2 == 1 && k%2 == 1 && !r.visiblyNonNegativePoly(d.Base) {
			// An odd power of what may be negative would turn the sign under
			// the root.
			num = num.Mul(d.Base.Pow(q))
			k++
		}
		b := algebra.FromPoly(d.Base)
		if q%2 == 0 && k%2 == 1 {
			a, err := r.absPoly(d.Base)
			if err != nil {
				return a, err
			}
			b = a.Mul(b.Pow(k - 1))
		} else {
			b = b.Pow(k)
		}
		var err error
		if out, err = r.Quo(out, b); err != nil {
			return out, err
		}
	}
	g, err := r.rootPoly(r.ReducePoly(num), q, sure)
	if err != nil {
		return g, err
	}
	return r.Mul(out, g)
}

func (r *Ring) rootPoly(p algebra.Poly, q int, sure bool) (algebra.Fraction, error) {
	if err := p.Err(); err != nil {
		return algebra.Fraction{}, err
	}
	if p.IsZero() {
		return algebra.Fraction{}, nil
	}
	c, prim := p.Primitive()
	if c.Sign() < 0 { // keep the sign with the polynomial: the content is then positive
		c, prim = c.Neg(), prim.Neg()
	}
	out, err := r.rootRat(c, q)
	if err != nil {
		return out, err
	}
	mono := prim.MonomialContent()
	rest, ok := prim.DivExact(algebra.FromTerms([]algebra.Term{{Mono: mono, Coef: algebra.Int(1)}}))
	if !ok {
		return out, prim.Err()
	}
	vanish := false // what was taken out may
	for _, pw := range mono.Powers() {
		g, left, err := r.rootPower(pw, q)
		if err != nil {
			return g, err
		}
		out = out.Mul(g)
		rest = rest.Mul(algebra.Variable(pw.Var).Pow(left))
		sign := r.symbols[pw.Var].Sign
		vanish = vanish || left < pw.Exp && sign != Positive && sign != Negative
	}
	if k, ok := rest.IsConst(); ok && k.IsOne() {
		return r.Reduce(out)
	}
	if q%2 == 0 {
		if t, ok := r.sqrtPoly(rest); ok {
			a, err := r.absPoly(t)
			if err != nil {
				return a, err
			}
			if q > 2 {
				if a, err = r.Root(a, q/2); err != nil {
					return a, err
				}
			}
			return r.Mul(out, a)
		}
	}
	if vanish && !sure && !r.visiblyNonNegativePoly(rest) {
		// Where that vanishes the rest may be negative: it stays.
		if out, err = r.rootRat(c, q); err != nil {
			return out, err
		}
		rest = prim
	}
	g, err := r.rootKernel(rest, q, rootName(r.FormatPoly(rest), q))
	if err != nil {
		return g, err
	}
	return r.Mul(out, g)
}

// rootPower takes the root of v^e as far as the sign of v allows, and returns
// the power of v that has to stay under the common root.
func (r *Ring) rootPower(pw algebra.Power, q int) (algebra.Fraction, int, error) {
	v := Of(pw.Var)
	s := r.symbols[pw.Var]
	if s.Kind == Root && s.Sign >= NonNegative && pw.Exp > 0 {
		// A root of a root: keep it under the sign, as one kernel.
		g, err := r.rootKernel(algebra.Variable(pw.Var), q, rootName(s.Name, q))
		if err != nil {
			return g, 0, err
		}
		return g.Pow(pw.Exp), 0, nil
	}
	k, rem := pw.Exp/q, pw.Exp%q
	if q%2 == 1 && k%2 == 1 && !r.nonNegativeVar(pw.Var) {
		k, rem = k-1, rem+q // what is taken out must not be negative
	}
	out := v.Pow(k)
	if q%2 == 0 && k%2 == 1 && !r.nonNegativeVar(pw.Var) {
		a, err := r.absPoly(algebra.Variable(pw.Var))
		if err != nil {
			return a, 0, err
		}
		out = a.Mul(v.Pow(k - 1))
	}
	if rem > 0 && r.nonNegativeVar(pw.Var) {
		g, err := r.rootKernel(algebra.Variable(pw.Var), q, rootName(s.Name, q))
		if err != nil {
			return g, 0, err
		}
		return out.Mul(g.Pow(rem)), 0, nil
	}
	return out, rem, nil
}

func (r *Ring) rootRat(c algebra.Rat, q int) (algebra.Fraction, error) {
	out := Whole(1)
	for _, pf := range factorRat(c) {
		e := pf.exp
		k := e / q
		if e < 0 && e%q != 0 {
			k-- // floor
		}
		rem := e - k*q
		if k != 0 {
			c, ok := pf.base.Pow(k)
			if !ok {
				return out, fmt.Errorf("%w: a power of %s", algebra.ErrLimit, pf.base)
			}
			out = out.Scale(c)
		}
		if rem > 0 {
			g, err := r.rootKernel(algebra.Const(pf.base), q, rootName(pf.base.String(), q))
			if err != nil {
				return g, err
			}
			out = out.Mul(g.Pow(rem))
		}
	}
	return out, nil
}

func rootName(arg string, q int) string {
	if q == 2 {
		return "sqrt(" + arg + ")"
	}
	return fmt.Sprintf("(%s)^(1/%d)", arg, q)
}

// sqrtPoly is a t with t² = p, if p is a square of a polynomial. The leading
// terms of t follow one by one; the result is checked by squaring it.
func (r *Ring) sqrtPoly(p algebra.Poly) (algebra.Poly, bool) {
	m, c := p.Leading()
	root, ok := SqrtRat(c)
	if !ok {
		return p, false
	}
	var half []algebra.Power
	for _, pw := range m.Powers() {
		if pw.Exp%2 != 0 {
			return p, false
		}
		half = append(half, algebra.Power{Var: pw.Var, Exp: pw.Exp / 2})
	}
	lead := algebra.FromTerms([]algebra.Term{{Mono: algebra.NewMonomial(half...), Coef: root}})
	t := lead
	rem := p.Sub(t.Mul(t))
	for steps := 0; !rem.IsZero(); steps++ {
		if rem.Err() != nil || steps > p.Len() {
			return p, false
		}
		lm, lc := rem.Leading()
		next, ok := algebra.FromTerms([]algebra.Term{{Mono: lm, Coef: lc}}).DivExact(lead.Scale(algebra.Int(2)))
		if !ok {
			return p, false
		}
		// rem - 2 t next - next²
		rem = rem.Sub(t.Scale(algebra.Int(2)).Add(next).Mul(next))
		t = t.Add(next)
	}
	return t, r.ReducePoly(t.Mul(t)).Equal(r.ReducePoly(p))
}

// SqrtRat is the rational square root of c, if it has one.
func SqrtRat(c algebra.Rat) (algebra.Rat, bool) {
	b := c.Big()
	if b.Sign() < 0 {
		return c, false
	}
	n, d := new(big.Int).Sqrt(b.Num()), new(big.Int).Sqrt(b.Denom())
	s := new(big.Rat).SetFrac(n, d)
	if new(big.Rat).Mul(s, s).Cmp(b) != 0 {
		return c, false
	}
	return algebra.FromBig(s), true
}

type primePower struct {
	base algebra.Rat
	exp  int
}

// factorRat writes a positive rational as a product of powers: of the primes
// below 1000, and of what is left of numerator and denominator.
func factorRat(c algebra.Rat) []primePower {
	var out []primePower
	split := func(n *big.Int, sign int) {
		n = new(big.Int).Set(n)
		for p := int64(2); p < 1000 && n.Cmp(big.NewInt(1)) > 0; p++ {
			bp := big.NewInt(p)
			e := 0
			for {
				q, m := new(big.Int).QuoRem(n, bp, new(big.Int))
				if m.Sign() != 0 {
					break
				}
				n, e = q, e+1
			}
			if e > 0 {
				out = append(out, primePower{algebra.Int(p), sign * e})
			}
		}
		if n.Cmp(big.NewInt(1)) > 0 {
			e := 1
			if s := new(big.Int).Sqrt(n); new(big.Int).Mul(s, s).Cmp(n) == 0 {
				n, e = s, 2
			}
			out = append(out, primePower{algebra.FromBig(new(big.Rat).SetInt(n)), sign * e})
		}
	}
	split(c.Big().Num(), 1)
	split(c.Big().Denom(), -1)
	return out
}

// oddRoot is the rational q-th root of a non-negative a, q odd, if it has one.
func oddRoot(a algebra.Rat, q int) (algebra.Rat, bool) {
	b := a.Big()
	n, ok1 := intRoot(b.Num(), q)
	d, ok2 := intRoot(b.Denom(), q)
	if !ok1 || !ok2 {
		return a, false
	}
	return algebra.FromBig(new(big.Rat).SetFrac(n, d)), true
}

// intRoot is the exact q-th root of n >= 0, by bisection on the bits.
func intRoot(n *big.Int, q int) (*big.Int, bool) {
	x := new(big.Int)
	exp := big.NewInt(int64(q))
	for bit := n.BitLen()/q + 1; bit >= 0; bit-- {
		x.SetBit(x, bit, 1)
		if new(big.Int).Exp(x, exp, nil).Cmp(n) > 0 {
			x.SetBit(x, bit, 0)
		}
	}
	return x, new(big.Int).Exp(x, exp, nil).Cmp(n) == 0
}
