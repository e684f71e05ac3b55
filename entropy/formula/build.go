package formula

import "math/big"

// NewNum is the number v: a Num where v is a non-negative finite decimal, the
// fraction a/b where it is no decimal, and a Sum with one negative term where
// it is negative.
func NewNum(v *big.Rat) Node {
	if v.Sign() < 0 {
		return NewNeg(NewNum(new(big.Rat).Neg(v)))
	}
	if _, finite := v.FloatPrec(); finite {
		return &Num{Value: new(big.Rat).Set(v)}
	}
	a, b := new(big.Rat).SetInt(v.Num()), new(big.Rat).SetInt(v.Denom())
	return NewQuotient(&Num{Value: a}, &Num{Value: b})
}

// NewInt is the number v.
func NewInt(v int64) Node { return NewNum(new(big.Rat).SetInt64(v)) }

// NewName is a bare name, folded already.
func NewName(id string) Node { return &Name{ID: id} }

// NewDeriv is the derivative of an unknown or named formula by coordinates or
// axes; the bare name where there are none.
func NewDeriv(of string, by ...string) Node {
	if len(by) == 0 {
		return NewName(of)
	}
	return &Deriv{Of: of, By: append([]string(nil), by...)}
}

// NewField is a field, at another angle where angle is not nil.
func NewField(id string, angle Node) *Field { return &Field{ID: id, Angle: angle} }

// NewComponent is a component of a field or of "nu".
func NewComponent(of string, angle Node, index string) Node {
	return &Component{Of: of, Angle: angle, Index: index}
}

// NewTotalDeriv is d_by(arg); arg itself where by is empty.
func NewTotalDeriv(arg Node, by ...string) Node {
	if len(by) == 0 {
		return arg
	}
	return &TotalDeriv{By: append([]string(nil), by...), Arg: arg}
}

// NewCall is a named function of its arguments.
func NewCall(f string, args ...Node) Node {
	return &Call{Func: f, Args: append([]Node(nil), args...)}
}

// NewSum is a sum of signed terms: 0 of none, and the term itself of one that
// is not negative. A term that is a Sum with one negative term changes sign
// instead.
func NewSum(terms ...Term) Node {
	if len(terms) == 0 {
		return NewInt(0)
	}
	if len(terms) == 1 && !terms[0].Neg {
		return terms[0].X
	}
	s := &Sum{Terms: append([]Term(nil), terms...)}
	for i, t := range s.Terms {
		if x, ok := t.X.(*Sum); ok && len(x.Terms) == 1 {
			s.Terms[i] = Term{Neg: t.Neg != x.Terms[0].Neg, X: x.Terms[0].X}
		}
	}
	if len(s.Terms) == 1 && !s.Terms[0].Neg {
		return s.Terms[0].X
	}
	return s
}

// NewNeg is -x.
func NewNeg(x Node) Node { return NewSum(Term{Neg: true, X: x}) }

// NewProduct is a product written with stars: 1 of none, the factor itself of
// one. A first factor that is a Product itself is continued.
func NewProduct(factors ...Node) Node {
	switch len(factors) {
	case 0:
		return NewInt(1)
	case 1:
		return factors[0]
	}
	p := &Product{}
	for i, x := range factors {
		if first, ok := x.(*Product); ok && i == 0 {
			p.Factors = append(p.Factors, first.Factors...)
			continue
		}
		p.Factors = append(p.Factors, Factor{Op: Star, X: x})
	}
	return p
}

// NewQuotient is a/b. An a that is a Product itself is continued.
func NewQuotient(a, b Node) Node {
	p := &Product{Factors: []Factor{{Op: Star, X: a}}}
	if first, ok := a.(*Product); ok {
		p.Factors = append([]Factor(nil), first.Factors...)
	}
	p.Factors = append(p.Factors, Factor{Op: Slash, X: b})
	return p
}

// NewJuxt is a product written side by side: 1 of none, the factor itself of
// one. A number may stand first only; with one elsewhere it is NewProduct.
func NewJuxt(factors ...Node) Node {
	if len(factors) < 2 {
		return NewProduct(factors...)
	}
	for _, x := range factors[1:] {
		if _, ok := x.(*Num); ok {
			return NewProduct(factors...)
		}
	}
	return &Juxt{Factors: append([]Node(nil), factors...)}
}

// NewPower is base^exp; base itself where exp is 1.
func NewPower(base Node, exp *big.Rat) Node {
	if exp.IsInt() && exp.Num().IsInt64() && exp.Num().Int64() == 1 {
		return base
	}
	return &Power{Base: base, Exp: new(big.Rat).Set(exp)}
}

// NewDotNu is x.nu.
func NewDotNu(x Node) Node { return &DotNu{X: x} }

// NewJump is [x].
func NewJump(x Node) Node { return &Jump{X: x} }

// NewAverage is {x}.
func NewAverage(x Node) Node { return &Average{X: x} }
