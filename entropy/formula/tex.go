package formula

import (
	"math/big"
	"strings"
)

// TeX prints a formula in TeX's mathematical mode, with commands of plain TeX
// and amsmath, and so that parsing it in the scope it came from gives an equal
// tree (see Same) where the tree is one that the parser makes.
func TeX(n Node) string {
	var w texWriter
	w.expr(n)
	return w.String()
}

type texWriter struct{ strings.Builder }

func (w *texWriter) put(parts ...string) {
	for _, s := range parts {
		w.WriteString(s)
	}
}

func (w *texWriter) around(open string, n Node, end string) {
	w.put(open)
	w.expr(n)
	w.put(end)
}

func (w *texWriter) parens(n Node) { w.around(`\left(`, n, `\right)`) }

// expr prints any node where nothing stands beside it.
func (w *texWriter) expr(n Node) {
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

// isFrac reports whether a node is printed as a fraction with a bar, and so
// needs no brackets beside a factor.
func isFrac(n Node) bool {
	x, ok := n.(*Product)
	return ok && len(x.Factors) == 2 && x.Factors[1].Op == Slash
}

func (w *texWriter) frac(a, b Node) { w.around(`\frac{`, a, "}"); w.around("{", b, "}") }

// term prints a node between signs. A product that begins with a division
// begins with a bar: the parser takes its parts as the first two factors.
func (w *texWriter) term(n Node) {
	switch x := n.(type) {
	case *Product:
		w.product(x)
	case *DotNu:
		w.dotNu(x)
	default:
		w.juxt(n)
	}
}

func (w *texWriter) product(x *Product) {
	rest := x.Factors
	if len(rest) > 1 && rest[1].Op == Slash {
		w.frac(rest[0].X, rest[1].X)
		rest = rest[2:]
	} else if len(rest) > 0 {
		if isFrac(rest[0].X) {
			w.parens(rest[0].X)
		} else {
			w.juxt(rest[0].X)
		}
		rest = rest[1:]
	}
	for _, f := range rest {
		if f.Op != Slash {
			w.put(` \cdot `)
			w.juxt(f.X)
			continue
		}
		w.put(" / ")
		if _, ok := f.X.(*Juxt); ok {
			w.parens(f.X)
		} else {
			w.juxt(f.X)
		}
	}
}

// juxt prints a factor of a product.
func (w *texWriter) juxt(n Node) {
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

// factor prints a node that others stand beside.
func (w *texWriter) factor(n Node) {
	if x, ok := n.(*Product); ok && isFrac(n) {
		w.frac(x.Factors[0].X, x.Factors[1].X)
		return
	}
	if x, ok := n.(*Power); ok {
		w.primary(x.Base)
		w.put("^{", texExponent(x.Exp), "}")
		return
	}
	w.primary(n)
}

// dotNu prints X.nu where no factor stands beside it.
func (w *texWriter) dotNu(x *DotNu) {
	w.primary(x.X)
	w.put(` \cdot \nu`)
}

// primary prints a node as the base of a power or of .nu.
func (w *texWriter) primary(n Node) {
	switch x := n.(type) {
	case *Num:
		w.put(decimal(x.Value))
	case *Name:
		w.put(texName(x.ID))
	case *Deriv:
		w.put(texName(x.Of))
		w.sub(x.By)
	case *Field:
		w.field(x.ID, x.Angle)
	case *Component:
		w.field(x.Of, x.Angle)
		w.sub([]string{x.Index})
	case *TotalDeriv:
		w.put(`\mathrm{d}`)
		w.sub(x.By)
		w.parens(x.Arg)
	case *Call:
		w.call(x)
	case *Jump:
		w.around(`\left[`, x.X, `\right]`)
	case *Average:
		w.around(`\left\{`, x.X, `\right\}`)
	case nil:
		w.put("?")
	default:
		w.parens(n)
	}
}

func (w *texWriter) field(id string, angle Node) {
	w.put(texName(id))
	if angle != nil {
		w.parens(angle)
	}
}

func (w *texWriter) sub(by []string) {
	w.put("_{")
	for i, s := range by {
		t := texName(s)
		if i > 0 && strings.HasPrefix(texName(by[i-1]), `\`) && t[0] != '\\' {
			w.put(" ")
		}
		w.put(t)
	}
	w.put("}")
}

func (w *texWriter) call(x *Call) {
	if x.Func == "sqrt" && len(x.Args) == 1 {
		w.around(`\sqrt{`, x.Args[0], "}")
		return
	}
	switch x.Func {
	case "sin", "cos", "tan", "sinh", "cosh", "tanh", "exp", "log", "sup":
		w.put(`\`, x.Func)
	default:
		w.put(`\operatorname{`, x.Func, "}")
	}
	w.put(`\left(`)
	for i, a := range x.Args {
		if i > 0 {
			w.put(", ")
		}
		w.expr(a)
	}
	w.put(`\right)`)
}

// texName is a folded name: a Greek letter, one letter, or a word in \mathit.
func texName(name string) string {
	if s, ok := texGreek(name); ok {
		return s
	}
	if len(name) == 1 {
		return name
	}
	return `\mathit{` + name + "}"
}

func texExponent(e *big.Rat) string {
	if e.IsInt() {
		return e.Num().String()
	}
	return e.RatString()
}

// TeX prints the claim in TeX's mathematical mode.
func (s *Statement) TeX() string {
	switch s.Relation {
	case LessEqual:
		return TeX(s.Left) + ` \le ` + TeX(s.Right)
	case GreaterEqual:
		return TeX(s.Left) + ` \ge ` + TeX(s.Right)
	case Integrable:
		return fieldOr(s.Field, TeX) + ` \in L^{` + texExponent(s.Exponent) + "}"
	case Entropy:
		return `\operatorname{entropy}\left(` + fieldOr(s.Field, TeX) + `\right)`
	case Span:
		var parts []string
		for _, g := range s.Generators {
			parts = append(parts, fieldOr(g, TeX))
		}
		return `\operatorname{span}\left(` + strings.Join(parts, ", ") + `\right) = ` + fieldOr(s.Field, TeX)
	}
	return TeX(s.Left) + " = " + TeX(s.Right)
}
