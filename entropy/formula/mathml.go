package formula

import (
	"html"
	"math/big"
	"strings"
)

// MathML prints a formula as one math element, with the elements math, mrow,
// mi, mn, mo, mfrac, msqrt, msup, msub, msubsup and mtext of MathML Core, so
// that a browser shows it without a script.
func MathML(n Node) string {
	var w mathWriter
	w.open()
	w.expr(n)
	w.close()
	return w.String()
}

// The invisible operators of MathML.
const (
	applyFunction  = "&#x2061;"
	invisibleTimes = "&#x2062;"
)

type mathWriter struct{ strings.Builder }

func (w *mathWriter) open() {
	w.WriteString(`<math xmlns="http://www.w3.org/1998/Math/MathML"><mrow>`)
}

func (w *mathWriter) close() { w.WriteString("</mrow></math>") }

// tag prints an element whose content is markup.
func (w *mathWriter) tag(name string, content func()) {
	w.WriteString("<" + name + ">")
	content()
	w.WriteString("</" + name + ">")
}

// leaf prints an element whose content is text.
func (w *mathWriter) leaf(name, text string) {
	w.tag(name, func() { w.WriteString(html.EscapeString(text)) })
}

// mo prints an operator; entities in it are kept.
func (w *mathWriter) mo(op string) { w.WriteString("<mo>" + op + "</mo>") }

// row prints n as one element.
func (w *mathWriter) row(n Node) { w.tag("mrow", func() { w.expr(n) }) }

// around prints n between brackets as one element.
func (w *mathWriter) around(left string, n Node, right string) {
	w.tag("mrow", func() {
		w.mo(left)
		w.expr(n)
		w.mo(right)
	})
}

func (w *mathWriter) expr(n Node) {
	s, ok := n.(*Sum)
	if !ok {
		w.term(n)
		return
	}
	for i, t := range s.Terms {
		if t.Neg {
			w.mo("−")
		} else if i > 0 {
			w.mo("+")
		}
		w.term(t.X)
	}
}

func (w *mathWriter) term(n Node) {
	x, ok := n.(*Product)
	if !ok {
		w.juxt(n)
		return
	}
	rest := x.Factors
	if len(rest) > 1 && rest[1].Op == Slash {
		w.frac(rest[0].X, rest[1].X)
		rest = rest[2:]
	} else if len(rest) > 0 {
		w.juxt(rest[0].X)
		rest = rest[1:]
	}
	for _, f := range rest {
		if f.Op == Slash {
			w.mo("/")
		} else {
			w.mo("⋅")
		}
		if _, ok := f.X.(*Juxt); ok && f.Op == Slash {
			w.around("(", f.X, ")")
		} else {
			w.juxt(f.X)
		}
	}
}

func (w *mathWriter) frac(a, b Node) {
	w.tag("mfrac", func() {
		w.row(a)
		w.row(b)
	})
}

func (w *mathWriter) juxt(n Node) {
	x, ok := n.(*Juxt)
	if !ok {
		w.factor(n)
		return
	}
	for i, f := range x.Factors {
		if i > 0 {
			w.mo(invisibleTimes)
		}
		if i > 0 && leadingNum(f) != nil {
			w.around("(", f, ")")
		} else {
			w.factor(f)
		}
	}
}

func (w *mathWriter) factor(n Node) {
	switch x := n.(type) {
	case *Product:
		if isFrac(n) {
			w.frac(x.Factors[0].X, x.Factors[1].X)
			return
		}
	case *Power:
		w.power(x)
		return
	case *DotNu:
		w.tag("mrow", func() {
			w.primary(x.X)
			w.mo("⋅")
			w.leaf("mi", "ν")
		})
		return
	}
	w.primary(n)
}

func (w *mathWriter) power(x *Power) {
	exponent := func() { w.exponent(x.Exp) }
	if d, ok := x.Base.(*Deriv); ok {
		w.tag("msubsup", func() {
			w.name(d.Of)
			w.sub(d.By)
			exponent()
		})
		return
	}
	w.tag("msup", func() {
		w.primary(x.Base)
		exponent()
	})
}

func (w *mathWriter) exponent(e *big.Rat) {
	w.tag("mrow", func() {
		if e.Sign() < 0 {
			w.mo("−")
		}
		w.leaf("mn", new(big.Int).Abs(e.Num()).String())
		if !e.IsInt() {
			w.mo("/")
			w.leaf("mn", e.Denom().String())
		}
	})
}

// primary prints a node as one element.
func (w *mathWriter) primary(n Node) {
	switch x := n.(type) {
	case *Num:
		w.leaf("mn", decimal(x.Value))
	case *Name:
		w.name(x.ID)
	case *Deriv:
		w.tag("msub", func() {
			w.name(x.Of)
			w.sub(x.By)
		})
	case *Field:
		w.field(x.ID, x.Angle)
	case *Component:
		w.tag("msub", func() {
			w.field(x.Of, x.Angle)
			w.sub([]string{x.Index})
		})
	case *TotalDeriv:
		w.tag("mrow", func() {
			w.tag("msub", func() {
				w.leaf("mo", "d")
				w.sub(x.By)
			})
			w.around("(", x.Arg, ")")
		})
	case *Call:
		w.call(x)
	case *Jump:
		w.around("[", x.X, "]")
	case *Average:
		w.around("{", x.X, "}")
	case nil:
		w.leaf("mtext", "?")
	default:
		w.around("(", n, ")")
	}
}

func (w *mathWriter) field(id string, angle Node) {
	if angle == nil {
		w.name(id)
		return
	}
	w.tag("mrow", func() {
		w.name(id)
		w.mo(applyFunction)
		w.around("(", angle, ")")
	})
}

func (w *mathWriter) name(id string) {
	if r, ok := greekRune(id); ok {
		id = string(r)
	}
	w.leaf("mi", id)
}

func (w *mathWriter) sub(by []string) {
	w.tag("mrow", func() {
		for _, s := range by {
			w.name(s)
		}
	})
}

func (w *mathWriter) call(x *Call) {
	if x.Func == "sqrt" && len(x.Args) == 1 {
		w.tag("msqrt", func() { w.expr(x.Args[0]) })
		return
	}
	w.tag("mrow", func() {
		w.leaf("mi", x.Func)
		w.mo(applyFunction)
		w.args(x.Args)
	})
}

// args prints arguments between parentheses.
func (w *mathWriter) args(args []Node) {
	w.tag("mrow", func() {
		w.mo("(")
		for i, a := range args {
			if i > 0 {
				w.mo(",")
			}
			w.row(a)
		}
		w.mo(")")
	})
}

// MathML prints the claim as one math element.
func (s *Statement) MathML() string {
	var w mathWriter
	w.open()
	field := func(f *Field) {
		if f == nil {
			w.leaf("mtext", "?")
		} else {
			w.primary(f)
		}
	}
	call := func(name string, fields []*Field) {
		w.leaf("mi", name)
		w.mo(applyFunction)
		w.tag("mrow", func() {
			w.mo("(")
			for i, f := range fields {
				if i > 0 {
					w.mo(",")
				}
				field(f)
			}
			w.mo(")")
		})
	}
	switch s.Relation {
	case Integrable:
		field(s.Field)
		w.mo("∈")
		w.tag("msup", func() {
			w.leaf("mi", "L")
			w.exponent(s.Exponent)
		})
	case Entropy:
		call("entropy", []*Field{s.Field})
	case Span:
		call("span", s.Generators)
		w.mo("=")
		field(s.Field)
	default:
		w.row(s.Left)
		w.mo(map[Relation]string{Equal: "=", LessEqual: "≤", GreaterEqual: "≥"}[s.Relation])
		w.row(s.Right)
	}
	w.close()
	return w.String()
}
