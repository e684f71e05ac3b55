package export

import (
	"fmt"
	"math/big"
	"strings"
)

// typesetter writes formulas as TeX.
type typesetter struct {
	ring *ring
	ids  map[string]string
}

func texNumber(c *big.Rat) string {
	if c.IsInt() {
		return c.Num().String()
	}
	sign := ""
	if c.Sign() < 0 {
		sign = "-"
	}
	return fmt.Sprintf(`%s\tfrac{%s}{%s}`, sign, new(big.Int).Abs(c.Num()), c.Denom())
}

// texPower is a name to a power.
func texPower(name string, e int) string {
	if e == 1 {
		return name
	}
	for f := range texFunctions {
		if rest, ok := strings.CutPrefix(name, `\`+f); ok && rest != "" && strings.ContainsAny(rest[:1], " (") {
			return fmt.Sprintf(`\%s^{%d}%s`, f, e, rest)
		}
	}
	if strings.Contains(name, "^") && !strings.HasPrefix(name, "[") && !strings.HasPrefix(name, `\`) {
		return fmt.Sprintf("(%s)^{%d}", name, e)
	}
	return fmt.Sprintf("%s^{%d}", name, e)
}

// monomial prints powers; functions come last, so that what follows them is no
// part of their argument.
func (w *typesetter) monomial(exps []int) string {
	var plain, functions []string
	for i, e := range exps {
		if e == 0 {
			continue
		}
		name := w.ids[w.ring.names[i]]
		if s := texPower(name, e); strings.HasPrefix(name, `\cos`) || strings.HasPrefix(name, `\sin`) {
			functions = append(functions, s)
		} else {
			plain = append(plain, s)
		}
	}
	return strings.Join(append(plain, functions...), " ")
}

// polyTerms prints the terms of p with their signs.
func (w *typesetter) polyTerms(p poly) []string {
	var out []string
	for i, t := range p {
		sign := "+ "
		if t.coef.Sign() < 0 {
			sign = "- "
			if i == 0 {
				sign = "-"
			}
		} else if i == 0 {
			sign = ""
		}
		c, m := new(big.Rat).Abs(t.coef), w.monomial(t.exps)
		switch {
		case m == "":
			m = texNumber(c)
		case c.Cmp(big.NewRat(1, 1)) != 0:
			m = texNumber(c) + " " + m
		}
		out = append(out, sign+m)
	}
	if out == nil {
		return []string{"0"}
	}
	return out
}

func (w *typesetter) poly(p poly, group bool) string {
	s := strings.Join(w.polyTerms(p), " ")
	if group && len(p) > 1 {
		return brackets(s)
	}
	return s
}

// brackets are as large as fractions ask for. They may be broken over lines.
func brackets(s string) string {
	if strings.Contains(s, `\frac`) {
		return `\Bigl(` + s + `\Bigr)`
	}
	return `\bigl(` + s + `\bigr)`
}

func (w *typesetter) parenthesised(pieces []string) string {
	if len(pieces) == 1 && len(splitTerms(pieces[0])) == 1 {
		return pieces[0]
	}
	return brackets(strings.Join(pieces, " "))
}

// sum prints a sum of products in pieces.
func (w *typesetter) sum(list []product, positive []premise) []string {
	var out []string
	for i, t := range list {
		out = append(out, w.terms(w.part(t, positive), i == 0)...)
	}
	return out
}

// terms prints a part in pieces between which a line may be broken.
func (w *typesetter) terms(x *part, first bool) []string {
	sign := "+ "
	switch {
	case x.c.Sign() < 0 && first:
		sign = "-"
	case x.c.Sign() < 0:
		sign = "- "
	case first:
		sign = ""
	}
	above, below := w.sides(x)
	c := new(big.Rat).Abs(x.c)
	hasMore := x.square != nil
	var front string
	switch {
	case below != "":
		if !c.IsInt() {
			below = join(c.Denom().String(), below)
		}
		if c.Num().String() != "1" || above == "" {
			above = join(c.Num().String(), above)
		}
		front = fmt.Sprintf(`\frac{%s}{%s}`, above, below)
	case c.Cmp(big.NewRat(1, 1)) == 0 && (above != "" || hasMore):
		front = above
	default:
		front = join(texNumber(c), above)
	}
	if !hasMore {
		return []string{sign + front}
	}
	pieces := w.polyTerms(x.square)
	pieces[0] = sign + join(front, `\bigl(`+pieces[0])
	pieces[len(pieces)-1] += `\bigr)^{2}`
	if all := strings.Join(pieces, " "); visible(all) <= unbroken {
		return []string{all}
	}
	return pieces
}

// unbroken is the number of signs up to which a square stays on one line.
const unbroken = 50

func join(a, b string) string { return strings.TrimSpace(a + " " + b) }

// sides prints what a part has above and below the line, without its number.
func (w *typesetter) sides(x *part) (above, below string) {
	up, down := make([]int, len(x.exps)), make([]int, len(x.exps))
	for i, e := range x.exps {
		up[i], down[i] = max(e, 0), max(-e, 0)
	}
	above, below = w.monomial(up), w.monomial(down)
	for _, g := range x.others {
		s := w.poly(g.p, true)
		if n := max(g.power, -g.power); n > 1 {
			s += fmt.Sprintf("^{%d}", n)
		}
		switch {
		case g.power > 0:
			above = join(above, s)
		case g.power < 0:
			below = join(below, s)
		}
	}
	return above, below
}

// summands prints a tree in pieces, the terms of its outermost sum.
func (w *typesetter) summands(e Expr) []string {
	list, ok := e.(Sum)
	if !ok || len(list) == 0 {
		list = Sum{e}
	}
	var out []string
	for i, x := range list {
		n, isNegative := x.(Negation)
		switch {
		case i > 0 && isNegative:
			out = append(out, "- "+w.tree(n.X, levelProduct))
		case i > 0:
			out = append(out, "+ "+w.tree(x, levelProduct))
		case isNegative:
			out = append(out, "-"+w.tree(n.X, levelProduct))
		default:
			out = append(out, w.tree(x, levelProduct))
		}
	}
	return out
}

// tree prints a formula as it is given.
func (w *typesetter) tree(e Expr, level int) string {
	own, s := levelAtom, ""
	switch e := e.(type) {
	case Number:
		x, _ := rational(string(e))
		if s = texNumber(x); x.Sign() < 0 {
			own = levelSum
		}
	case Variable:
		s = w.ids[string(e)]
		if strings.Contains(s, "^") && !strings.HasPrefix(s, "[") && !strings.HasPrefix(s, `\`) {
			own = levelFactor
		}
	case Sum:
		if len(e) == 1 {
			return w.tree(e[0], level)
		}
		if len(e) == 0 {
			return "0"
		}
		own, s = levelSum, strings.Join(w.summands(e), " ")
	case Product:
		if len(e) == 1 {
			return w.tree(e[0], level)
		}
		if len(e) == 0 {
			return "1"
		}
		var b strings.Builder
		for i, x := range e {
			f := w.tree(x, levelFactor)
			if i > 0 {
				if c := f[0]; c >= '0' && c <= '9' || strings.HasPrefix(f, `\tfrac`) {
					b.WriteString(` \cdot`)
				}
				b.WriteByte(' ')
			}
			b.WriteString(f)
		}
		own, s = levelProduct, b.String()
	case Quotient:
		own, s = levelFactor, fmt.Sprintf(`\frac{%s}{%s}`, w.tree(e.Num, levelSum), w.tree(e.Den, levelSum))
	case Power:
		if x, ok := e.Base.(Variable); ok {
			s = texPower(w.ids[string(x)], e.Exp)
		} else {
			s = fmt.Sprintf("%s^{%d}", w.tree(e.Base, levelAtom), e.Exp)
		}
		own = levelFactor
	case Negation:
		own, s = levelSum, "-"+w.tree(e.X, levelProduct)
	}
	if level > own {
		return brackets(s)
	}
	return s
}
