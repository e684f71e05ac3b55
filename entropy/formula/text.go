package formula

import (
	"math/big"
	"strings"
)

// Text prints a formula on one line of ASCII, so that parsing it in the scope
// it came from gives an equal tree (see Same) where the tree is one that the
// parser makes. Printing may add brackets, so the text of a formula nested
// nearly as deep as the parser allows can be too deep for it.
func Text(n Node) string {
	var w textWriter
	w.expr(n)
	return w.String()
}

type textWriter struct{ strings.Builder }

func (w *textWriter) put(parts ...string) {
	for _, s := range parts {
		w.WriteString(s)
	}
}

func (w *textWriter) parens(n Node) {
	w.put("(")
	w.expr(n)
	w.put(")")
}

// expr prints any node where nothing stands beside it.
func (w *textWriter) expr(n Node) {
	s, ok := n.(*Sum)
	if !ok {
		w.term(n)
		return
	}
	for i, t := range s.Terms {
		switch {
		case i == 0 && t.Neg:
			w.put("-")
		case i > 0 && t.Neg:
			w.put(" - ")
		case i > 0:
			w.put(" + ")
		}
		w.term(t.X)
	}
}

// term prints a node between signs.
func (w *textWriter) term(n Node) {
	x, ok := n.(*Product)
	if !ok {
		w.juxt(n)
		return
	}
	for i, f := range x.Factors {
		if i > 0 && f.Op == Slash {
			w.put("/")
		} else if i > 0 {
			w.put("*")
		}
		if _, ok := f.X.(*Juxt); ok && i > 0 && f.Op == Slash {
			w.parens(f.X)
		} else {
			w.juxt(f.X)
		}
	}
}

// juxt prints a factor of a product.
func (w *textWriter) juxt(n Node) {
	x, ok := n.(*Juxt)
	if !ok {
		w.factor(n)
		return
	}
	for i, f := range x.Factors {
		if i > 0 {
			w.put(" ")
		}
		switch {
		case i > 0 && leadingNum(f) != nil:
			w.parens(f)
		case i+1 < len(x.Factors) && opens(f):
			w.parens(f)
		default:
			w.factor(f)
		}
	}
}

// opens reports whether a parenthesis after the factor would be read as the
// angle of a field or refused as the argument of a total derivative. Such a
// factor stands in parentheses unless it is last.
func opens(n Node) bool {
	switch x := n.(type) {
	case *Field:
		return x.Angle == nil
	case *Deriv:
		return x.Of == "d"
	}
	return false
}

// factor prints a node that others stand beside.
func (w *textWriter) factor(n Node) {
	switch x := n.(type) {
	case *Power:
		w.primary(x.Base)
		w.put("^", exponentText(x.Exp))
	case *DotNu:
		w.primary(x.X)
		w.put(".nu")
	default:
		w.primary(n)
	}
}

// primary prints a node as the base of a power or of .nu.
func (w *textWriter) primary(n Node) {
	switch x := n.(type) {
	case *Num:
		w.put(decimal(x.Value))
	case *Name:
		w.put(x.ID)
	case *Deriv:
		w.put(x.Of, "_", strings.Join(x.By, ""))
	case *Field:
		w.field(x.ID, x.Angle)
	case *Component:
		w.field(x.Of, x.Angle)
		w.put("_", x.Index)
	case *TotalDeriv:
		w.put("d_", strings.Join(x.By, ""))
		w.parens(x.Arg)
	case *Call:
		w.put(x.Func, "(")
		for i, a := range x.Args {
			if i > 0 {
				w.put(", ")
			}
			w.expr(a)
		}
		w.put(")")
	case *Jump:
		w.put("[")
		w.expr(x.X)
		w.put("]")
	case *Average:
		w.put("{")
		w.expr(x.X)
		w.put("}")
	case nil:
		w.put("?")
	default:
		w.parens(n)
	}
}

func (w *textWriter) field(id string, angle Node) {
	w.put(id)
	if angle != nil {
		w.parens(angle)
	}
}

// exponentText is an exponent as it stands after ^. The exponents 1 and -1
// stand in parentheses, because x^1/2 is refused.
func exponentText(e *big.Rat) string {
	if e.IsInt() && e.Sign() >= 0 && e.Num().Cmp(big.NewInt(1)) != 0 {
		return e.Num().String()
	}
	return "(" + e.RatString() + ")"
}

// decimal writes a finite decimal exactly; any other number as a fraction in
// parentheses.
func decimal(v *big.Rat) string {
	if v.Sign() < 0 {
		return "(-" + decimal(new(big.Rat).Neg(v)) + ")"
	}
	if v.IsInt() {
		return v.Num().String()
	}
	places, finite := v.FloatPrec()
	if !finite {
		return "(" + v.String() + ")"
	}
	return v.FloatString(places)
}

// Text prints the claim on one line of ASCII.
func (s *Statement) Text() string {
	switch s.Relation {
	case LessEqual:
		return Text(s.Left) + " <= " + Text(s.Right)
	case GreaterEqual:
		return Text(s.Left) + " >= " + Text(s.Right)
	case Integrable:
		if s.Exponent.IsInt() {
			return fieldOr(s.Field, Text) + " in L^" + s.Exponent.Num().String()
		}
		return fieldOr(s.Field, Text) + " in L^(" + s.Exponent.RatString() + ")"
	case Entropy:
		return "entropy(" + fieldOr(s.Field, Text) + ")"
	case Span:
		var parts []string
		for _, g := range s.Generators {
			parts = append(parts, fieldOr(g, Text))
		}
		return "span(" + strings.Join(parts, ", ") + ") = " + fieldOr(s.Field, Text)
	}
	return Text(s.Left) + " = " + Text(s.Right)
}

// fieldOr prints a field, "?" where there is none.
func fieldOr(f *Field, printed func(Node) string) string {
	if f == nil {
		return "?"
	}
	return printed(f)
}
