package export

import (
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// fraction is num / Π den^power, each den with integer coefficients and not
// constant.
type fraction struct {
	num poly
	den []factor
}

type factor struct {
	p     poly
	key   string
	power int
}

// evaluate brings a tree to a common denominator, which is the least common
// multiple as far as equal factors are seen.
func (r *ring) evaluate(e Expr) (fraction, error) {
	switch e := e.(type) {
	case Number:
		x, err := rational(string(e))
		return fraction{num: r.constant(x)}, err
	case Variable:
		i, ok := r.index[string(e)]
		if !ok {
			return fraction{}, fmt.Errorf("variable %q is not declared", string(e))
		}
		return fraction{num: r.variable(i)}, nil
	case Sum:
		return r.fold(e, fraction{}, r.plus)
	case Product:
		return r.fold(e, r.one(), r.times)
	case Negation:
		x, err := r.evaluate(e.X)
		x.num = scale(big.NewRat(-1, 1), x.num)
		return x, err
	case Quotient:
		x, err := r.evaluate(e.Num)
		if err != nil {
			return x, err
		}
		y, err := r.inverse(e.Den)
		if err != nil {
			return y, err
		}
		return r.times(x, y)
	case Power:
		if e.Exp < 0 {
			return r.inverse(Power{e.Base, -e.Exp})
		}
		x, err := r.evaluate(e.Base)
		if err != nil {
			return x, err
		}
		return r.power(x, e.Exp)
	}
	return fraction{}, fmt.Errorf("a formula has a missing or unknown part: %T", e)
}

func (r *ring) power(x fraction, n int) (fraction, error) {
	out := r.one()
	for range n {
		var err error
		if out, err = r.times(out, x); err != nil {
			return out, err
		}
	}
	return out, nil
}

// inverse evaluates 1/e. Factors of e stay apart, so that they become factors
// of the denominator.
func (r *ring) inverse(e Expr) (fraction, error) {
	switch e := e.(type) {
	case Product:
		out := r.one()
		for _, f := range e {
			x, err := r.inverse(f)
			if err != nil {
				return x, err
			}
			if out, err = r.times(out, x); err != nil {
				return out, err
			}
		}
		return out, nil
	case Quotient:
		return r.evaluate(Quotient{e.Den, e.Num})
	case Negation:
		x, err := r.inverse(e.X)
		x.num = scale(big.NewRat(-1, 1), x.num)
		return x, err
	case Power:
		if e.Exp < 0 {
			return r.evaluate(Power{e.Base, -e.Exp})
		}
		x, err := r.inverse(e.Base)
		if err != nil {
			return x, err
		}
		return r.power(x, e.Exp)
	}
	x, err := r.evaluate(e)
	if err != nil {
		return x, err
	}
	return r.invert(x)
}

func (r *ring) one() fraction { return fraction{num: r.constant(big.NewRat(1, 1))} }

func (r *ring) fold(list []Expr, out fraction, op func(x, y fraction) (fraction, error)) (fraction, error) {
	for _, e := range list {
		x, err := r.evaluate(e)
		if err != nil {
			return x, err
		}
		if out, err = op(out, x); err != nil {
			return out, err
		}
	}
	return out, nil
}

func (r *ring) times(x, y fraction) (fraction, error) {
	num, err := mul(x.num, y.num)
	den := slices.Clone(x.den)
	for _, f := range y.den {
		if i := find(den, f.key); i >= 0 {
			den[i].power += f.power
		} else {
			den = append(den, f)
		}
	}
	return fraction{num, den}, err
}

func (r *ring) plus(x, y fraction) (fraction, error) {
	den := slices.Clone(x.den)
	for _, f := range y.den {
		if i := find(den, f.key); i >= 0 {
			den[i].power = max(den[i].power, f.power)
		} else {
			den = append(den, f)
		}
	}
	a, err := r.lift(x, den)
	if err != nil {
		return x, err
	}
	b, err := r.lift(y, den)
	return fraction{add(a, b), den}, err
}

// lift is the numerator of x over den.
func (r *ring) lift(x fraction, den []factor) (poly, error) {
	num := x.num
	for _, f := range den {
		n := f.power
		if i := find(x.den, f.key); i >= 0 {
			n -= x.den[i].power
		}
		for range n {
			var err error
			if num, err = mul(num, f.p); err != nil {
				return nil, err
			}
		}
	}
	return num, nil
}

func (r *ring) invert(x fraction) (fraction, error) {
	if len(x.num) == 0 {
		return x, fmt.Errorf("division by zero")
	}
	num, err := r.lift(fraction{num: r.constant(big.NewRat(1, 1))}, x.den)
	if err != nil {
		return x, err
	}
	if c, ok := isConstant(x.num); ok {
		return fraction{num: scale(new(big.Rat).Inv(c), num)}, nil
	}
	c, n := primitive(x.num)
	num = scale(new(big.Rat).Inv(c), num)
	return fraction{num, []factor{{n, polyKey(n), 1}}}, nil
}

// primitive is c and n with p = c·n, n with coprime integer coefficients of
// which the first in the graded order is positive. p is not zero.
func primitive(p poly) (c *big.Rat, n poly) {
	c, n = content(collect(p))
	if n[0].coef.Sign() < 0 {
		return c.Neg(c), scale(big.NewRat(-1, 1), n)
	}
	return c, n
}

// content is c > 0 and n with p = c·n, n with coprime integer coefficients and
// its terms in the order of p. p is not zero.
func content(p poly) (c *big.Rat, n poly) {
	n, d := integral(p)
	g := new(big.Int)
	for _, t := range n {
		g.GCD(nil, nil, g, new(big.Int).Abs(t.coef.Num()))
	}
	c = new(big.Rat).SetFrac(g, d)
	return c, scale(new(big.Rat).Inv(c), p)
}

func find(den []factor, key string) int {
	return slices.IndexFunc(den, func(f factor) bool { return f.key == key })
}

func polyKey(p poly) string {
	var b strings.Builder
	for _, t := range collect(p) {
		fmt.Fprintf(&b, "%s*%v+", t.coef.RatString(), t.exps)
	}
	return b.String()
}
