package jet

import (
	"fmt"

	"creaseproof/entropy/algebra"
)

// maxName bounds the name of a kernel, in bytes. Names hold those of the kernels
// inside, often several times.
const maxName = 1 << 16

// kernel finds or makes the kernel of the given kind and argument.
func (r *Ring) kernel(s Symbol) (algebra.Var, error) {
	key := fmt.Sprintf("%d|%d|%s", s.Kind, s.Degree, s.Arg.String(func(v algebra.Var) string { return fmt.Sprintf("#%d", v) }))
	if v, ok := r.kernels[key]; ok {
		return v, nil
	}
	if len(s.Name) > maxName {
		return 0, fmt.Errorf("%w: a function nested so deep that its name has %d characters", algebra.ErrLimit, len(s.Name))
	}
	if len(r.symbols) >= MaxSymbols {
		return 0, fmt.Errorf("%w: more than %d indeterminates", algebra.ErrLimit, MaxSymbols)
	}
	v := r.add(s)
	r.kernels[key] = v
	return v, nil
}

// require records a condition, unless it shows or is recorded already.
func (r *Ring) require(value algebra.Fraction, need Need) {
	switch need {
	case NeedNonNegative:
		if r.VisiblyNonNegative(value) {
			return
		}
	case NeedPositive:
		if r.VisiblyPositive(value) {
			return
		}
	case NeedNonZero:
		if r.VisiblyPositive(value) || r.VisiblyPositive(value.Neg()) {
			return
		}
	}
	for _, c := range r.conditions {
		if c.Need == need && c.Value.Equal(value) {
			return
		}
	}
	r.conditions = append(r.conditions, Condition{value, need})
}

// combination writes f as a rational combination of basis elements, and
// reports whether that is possible.
func combination(f algebra.Fraction, basis []algebra.Fraction) ([]algebra.Rat, bool) {
	if len(basis) == 0 {
		return nil, false
	}
	all := append([]algebra.Fraction{f}, basis...)
	den := algebra.Const(algebra.Int(1))
	type power struct {
		base algebra.Poly
		exp  int
	}
	var lcm []power
	for _, g := range all {
		for _, d := range g.DenFactors() {
			found := false
			for i := range lcm {
				if lcm[i].base.Equal(d.Base) {
					lcm[i].exp, found = max(lcm[i].exp, d.Exp), true
				}
			}
			if !found {
				lcm = append(lcm, power{d.Base, d.Exp})
			}
		}
	}
	for _, p := range lcm {
		den = den.Mul(p.base.Pow(p.exp))
	}
	rows := map[algebra.Monomial]int{}
	var a [][]algebra.Rat
	var b []algebra.Rat
	for k, g := range all {
		num, ok := g.Mul(algebra.FromPoly(den)).IsPoly()
		if !ok {
			return nil, false
		}
		for m, c := range num.Terms() {
			i, ok := rows[m]
			if !ok {
				i = len(a)
				rows[m] = i
				a = append(a, make([]algebra.Rat, len(basis)))
				b = append(b, algebra.Rat{})
			}
			if k == 0 {
				b[i] = c
			} else {
				a[i][k-1] = c
			}
		}
	}
	x, _, ok := algebra.SolveRat(a, b)
	return x, ok
}

func (r *Ring) args(vs []algebra.Var) []algebra.Fraction {
	out := make([]algebra.Fraction, len(vs))
	for i, v := range vs {
		out[i] = r.symbols[v].Arg
	}
	return out
}

// Exp is exp f. Exponents that are rational combinations of earlier ones
// become products of powers of their exponentials, so that
// exp(a + b) = exp a · exp b holds literally; exp(k log a) becomes a^k.
func (r *Ring) Exp(f algebra.Fraction) (algebra.Fraction, error) {
	if f.IsZero() {
		return Whole(1), nil
	}
	out := Whole(1)
	for _, v := range f.Vars() {
		s := r.symbols[v]
		if s.Kind != Logarithm {
			continue
		}
		k := f.Deriv(v)
		c, ok := k.IsConst()
		if !ok {
			continue
		}
		p, err := r.Pow(s.Arg, c)
		if err != nil {
			return p, err
		}
		if out, err = r.Mul(out, p); err != nil {
			return out, err
		}
		f = f.Sub(Of(v).Scale(c))
	}
	if f.IsZero() {
		return out, nil
	}
	x, ok := combination(f, r.args(r.expBasis))
	if n, d, isNumber := smallFraction(f); !ok && isNumber && n != 1 {
		// exp(n/d) as a power of exp(1/d), which other numbers are powers of too.
		e, err := r.Exp(Rational(algebra.Frac64(1, d).Big()))
		if err != nil {
			return out, err
		}
		if e, err = r.PowInt(e, int(n)); err != nil {
			return e, err
		}
		return r.Mul(out, e)
	}
	if !ok {
		e, err := r.kernel(Symbol{Kind: Exponential, Name: "exp(" + r.Format(f) + ")", Arg: f, Sign: Positive})
		if err != nil {
			return out, err
		}
		r.expBasis = append(r.expBasis, e)
		return r.Mul(out, Of(e))
	}
	for i, q := range x {
		if q.IsZero() {
			continue
		}
		p, err := r.Pow(Of(r.expBasis[i]), q)
		if err != nil {
			return p, err
		}
		if out, err = r.Mul(out, p); err != nil {
			return out, err
		}
	}
	return out, nil
}

// smallFraction is the n and d of a number n/d that is small enough for a
// power.
func smallFraction(f algebra.Fraction) (n, d int64, ok bool) {
	c, ok := f.IsConst()
	if !ok {
		return 0, 0, false
	}
	b := c.Big()
	if !b.Num().IsInt64() || !b.Denom().IsInt64() {
		return 0, 0, false
	}
	n, d = b.Num().Int64(), b.Denom().Int64()
	return n, d, n <= 1<<20 && n >= -(1<<20) && d <= 64
}

// Log is log f for f > 0; the condition is recorded where it does not show.
func (r *Ring) Log(f algebra.Fraction) (algebra.Fraction, error) {
	if f.IsZero() {
		return f, fmt.Errorf("log of zero")
	}
	if c, ok := f.IsConst(); ok && c.Sign() < 0 {
		return f, fmt.Errorf("log of the negative number %s", c)
	}
	if err := r.Err(f); err != nil {
		return f, err
	}
	r.require(f, NeedPositive)
	var out algebra.Fraction
	rest := Whole(1)
	take := func(base algebra.Poly, e int) error {
		c, p := base.Primitive()
		if c.Sign() < 0 {
			c, p = c.Neg(), p.Neg()
		}
		if err := r.addLogRat(&out, c, e); err != nil {
			return err
		}
		mono := p.MonomialContent()
		if q, ok := p.DivExact(algebra.FromTerms([]algebra.Term{{Mono: mono, Coef: algebra.Int(1)}})); ok {
			for _, pw := range mono.Powers() {
				s := r.symbols[pw.Var]
				switch {
				case s.Kind == Exponential:
					out = out.Add(s.Arg.Scale(algebra.Int(int64(pw.Exp * e))))
				case s.Kind == Root && s.Sign != AnySign:
					// As a factor of what is positive the root is not zero.
					l, err := r.Log(s.Arg)
					if err != nil {
						return err
					}
					out = out.Add(l.Scale(algebra.Frac64(int64(pw.Exp*e), int64(s.Degree))))
				case s.Sign == Positive || r.requiredPositive(pw.Var):
					if err := r.addLog(&out, Of(pw.Var), e*pw.Exp); err != nil {
						return err
					}
				case s.Sign == Negative:
					if err := r.addLog(&out, Of(pw.Var).Neg(), e*pw.Exp); err != nil {
						return err
					}
					if e*pw.Exp%2 != 0 {
						rest = rest.Neg()
					}
				default:
					rest = rest.Mul(Of(pw.Var).Pow(e * pw.Exp))
				}
			}
			p = q
		}
		if one, ok := p.IsConst(); ok && one.IsOne() {
			return nil
		}
		if r.visiblyPositivePoly(p) {
			for { // the logarithm of a square
				t, ok := r.sqrtPoly(p)
				if !ok || !r.visiblyPositivePoly(t) {
					break
				}
				p, e = t, 2*e
			}
			return r.addLog(&out, algebra.FromPoly(p), e)
		}
		rest = rest.Mul(algebra.FromPoly(p).Pow(e))
		return nil
	}
	if err := take(f.Num(), 1); err != nil {
		return out, err
	}
	for _, d := range f.DenFactors() {
		if err := take(d.Base, -d.Exp); err != nil {
			return out, err
		}
	}
	if c, ok := rest.IsConst(); !ok || !c.IsOne() {
		rest, err := r.Reduce(rest)
		if err != nil {
			return rest, err
		}
		if err := r.addLog(&out, rest, 1); err != nil {
			return out, err
		}
	}
	return r.Reduce(out)
}

// requiredPositive reports whether what was read before rests on v > 0.
func (r *Ring) requiredPositive(v algebra.Var) bool {
	for _, c := range r.conditions {
		if w, ok := loneVar(c.Value.Num()); ok && w == v && c.Need == NeedPositive && len(c.Value.DenFactors()) == 0 {
			return true
		}
	}
	return false
}

func (r *Ring) addLog(out *algebra.Fraction, f algebra.Fraction, times int) error {
	l, err := r.kernel(Symbol{Kind: Logarithm, Name: "log(" + r.Format(f) + ")", Arg: f})
	if err != nil {
		return err
	}
	*out = out.Add(Of(l).Scale(algebra.Int(int64(times))))
	return nil
}

func (r *Ring) addLogRat(out *algebra.Fraction, c algebra.Rat, times int) error {
	for _, pf := range factorRat(c) {
		if err := r.addLog(out, Rational(pf.base.Big()), times*pf.exp); err != nil {
			return err
		}
	}
	return nil
}

// Erf is erf f; erf(-a) = -erf a is built in.
func (r *Ring) Erf(f algebra.Fraction) (algebra.Fraction, error) {
	if f.IsZero() {
		return f, nil
	}
	if _, c := f.Num().Leading(); c.Sign() < 0 {
		g, err := r.Erf(f.Neg())
		return g.Neg(), err
	}
	v, err := r.kernel(Symbol{Kind: ErrorFunction, Name: "erf(" + r.Format(f) + ")", Arg: f})
	return Of(v), err
}

// Hyperbolic functions through exp: which is "sinh", "cosh" or "tanh".
func (r *Ring) Hyperbolic(which string, f algebra.Fraction) (algebra.Fraction, error) {
	e, err := r.Exp(f)
	if err != nil {
		return e, err
	}
	inv, err := r.Quo(Whole(1), e)
	if err != nil {
		return inv, err
	}
	half := algebra.Frac64(1, 2)
	sinh := e.Sub(inv).Scale(half)
	cosh := e.Add(inv).Scale(half)
	switch which {
	case "sinh":
		return r.Reduce(sinh)
	case "cosh":
		return r.Reduce(cosh)
	}
	// tanh = (e² - 1)/(e² + 1) has one denominator that shows its sign.
	sq, err := r.Mul(e, e)
	if err != nil {
		return sq, err
	}
	return r.Quo(sq.Sub(Whole(1)), sq.Add(Whole(1)))
}
