package formula

import (
	"math/big"
	"slices"
)

// Same reports whether two formulas are the same tree. Positions do not
// count, and a raised dot is the same as a star.
func Same(a, b Node) bool {
	switch x := a.(type) {
	case nil:
		return b == nil
	case *Num:
		y, ok := b.(*Num)
		return ok && sameRat(x.Value, y.Value)
	case *Name:
		y, ok := b.(*Name)
		return ok && x.ID == y.ID
	case *Deriv:
		y, ok := b.(*Deriv)
		return ok && x.Of == y.Of && slices.Equal(x.By, y.By)
	case *Field:
		y, ok := b.(*Field)
		return ok && sameField(x, y)
	case *Component:
		y, ok := b.(*Component)
		return ok && x.Of == y.Of && x.Index == y.Index && Same(x.Angle, y.Angle)
	case *TotalDeriv:
		y, ok := b.(*TotalDeriv)
		return ok && slices.Equal(x.By, y.By) && Same(x.Arg, y.Arg)
	case *Call:
		y, ok := b.(*Call)
		return ok && x.Func == y.Func && slices.EqualFunc(x.Args, y.Args, Same)
	case *Sum:
		y, ok := b.(*Sum)
		return ok && slices.EqualFunc(x.Terms, y.Terms, func(s, t Term) bool {
			return s.Neg == t.Neg && Same(s.X, t.X)
		})
	case *Product:
		y, ok := b.(*Product)
		return ok && slices.EqualFunc(x.Factors, y.Factors, func(f, g Factor) bool {
			return (f.Op == Slash) == (g.Op == Slash) && Same(f.X, g.X)
		})
	case *Juxt:
		y, ok := b.(*Juxt)
		return ok && slices.EqualFunc(x.Factors, y.Factors, Same)
	case *Power:
		y, ok := b.(*Power)
		return ok && sameRat(x.Exp, y.Exp) && Same(x.Base, y.Base)
	case *DotNu:
		y, ok := b.(*DotNu)
		return ok && Same(x.X, y.X)
	case *Jump:
		y, ok := b.(*Jump)
		return ok && Same(x.X, y.X)
	case *Average:
		y, ok := b.(*Average)
		return ok && Same(x.X, y.X)
	}
	return false
}

func sameRat(a, b *big.Rat) bool {
	if a == nil || b == nil {
		return a == b
	}
	return a.Cmp(b) == 0
}

func sameField(a, b *Field) bool {
	if a == nil || b == nil {
		return a == b
	}
	return a.ID == b.ID && Same(a.Angle, b.Angle)
}

// Same reports whether two claims say the same, in the sense of Same.
func (s *Statement) Same(t *Statement) bool {
	return s.Relation == t.Relation && Same(s.Left, t.Left) && Same(s.Right, t.Right) &&
		sameField(s.Field, t.Field) && sameRat(s.Exponent, t.Exponent) &&
		slices.EqualFunc(s.Generators, t.Generators, sameField)
}

// Walk visits n and what it holds, parents first and in the order of writing;
// what a node holds is left out where visit returns false for it.
func Walk(n Node, visit func(Node) bool) {
	if n == nil || !visit(n) {
		return
	}
	switch x := n.(type) {
	case *Field:
		Walk(x.Angle, visit)
	case *Component:
		Walk(x.Angle, visit)
	case *TotalDeriv:
		Walk(x.Arg, visit)
	case *Call:
		for _, a := range x.Args {
			Walk(a, visit)
		}
	case *Sum:
		for _, t := range x.Terms {
			Walk(t.X, visit)
		}
	case *Product:
		for _, f := range x.Factors {
			Walk(f.X, visit)
		}
	case *Juxt:
		for _, f := range x.Factors {
			Walk(f, visit)
		}
	case *Power:
		Walk(x.Base, visit)
	case *DotNu:
		Walk(x.X, visit)
	case *Jump:
		Walk(x.X, visit)
	case *Average:
		Walk(x.X, visit)
	}
}

// Walk visits every formula of the claim.
func (s *Statement) Walk(visit func(Node) bool) {
	Walk(s.Left, visit)
	for _, g := range s.Generators {
		Walk(g, visit)
	}
	Walk(s.Right, visit)
	if s.Field != nil {
		Walk(s.Field, visit)
	}
}
