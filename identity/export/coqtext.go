package export

import (
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// places gives, for each variable of a ring, what is printed for it.
type places []string

// poly prints a polynomial with integer coefficients.
func (at places) poly(p poly) string {
	if len(p) == 0 {
		return "0"
	}
	var b strings.Builder
	for i, t := range p {
		c := new(big.Rat).Abs(t.coef)
		switch {
		case i > 0 && t.coef.Sign() < 0:
			b.WriteString(" - ")
		case i > 0:
			b.WriteString(" + ")
		case t.coef.Sign() < 0:
			b.WriteString("- ")
		}
		b.WriteString(at.monomial(c, t.exps))
	}
	return b.String()
}

func (at places) monomial(c *big.Rat, exps []int) string {
	var parts []string
	if c.Cmp(big.NewRat(1, 1)) != 0 || degree(exps) == 0 {
		parts = append(parts, coqNumber(c))
	}
	for i, e := range exps {
		switch {
		case e == 1:
			parts = append(parts, at[i])
		case e > 1:
			parts = append(parts, fmt.Sprintf("%s^%d", at[i], e))
		}
	}
	return strings.Join(parts, " * ")
}

// chunk is the length of sums up to which proofs by recursion on their terms
// are fast: their cost is quadratic.
const chunk = 16

// chunked prints p as a sum of short sums.
func (at places) chunked(p poly) string {
	if len(p) <= chunk {
		return at.poly(p)
	}
	var parts []string
	for c := range slices.Chunk(p, chunk) {
		parts = append(parts, "("+at.poly(c)+")")
	}
	return strings.Join(parts, " + ")
}

// factor prints p so that it can stand in a product or under a power.
func (at places) factor(p poly) string {
	if len(p) == 1 && p[0].coef.Cmp(big.NewRat(1, 1)) == 0 && degree(p[0].exps) == 1 {
		return at.poly(p)
	}
	return "(" + at.poly(p) + ")"
}

// over prints n/d.
func (at places) over(n poly, d *big.Int) string {
	if d.IsInt64() && d.Int64() == 1 {
		return at.poly(n)
	}
	return at.factor(n) + " / " + coqInteger(d)
}

func coqNumber(c *big.Rat) string {
	switch {
	case !c.IsInt():
		return fmt.Sprintf("(%s / %s)", coqInteger(c.Num()), coqInteger(c.Denom()))
	case c.Sign() < 0:
		return "(" + coqInteger(c.Num()) + ")"
	}
	return coqInteger(c.Num())
}

// coqInteger prints long numbers in hexadecimal: Coq takes seconds to read
// hundreds of decimal digits, and no time for as many hexadecimal ones.
func coqInteger(n *big.Int) string {
	if n.BitLen() <= 128 {
		return n.String()
	}
	return fmt.Sprintf("%#x", n)
}

// Levels of binding, from the loosest.
const (
	levelSum = iota
	levelProduct
	levelFactor
	levelAtom
)

// tree prints a formula as it is given; ids are the identifiers of variables.
func tree(e Expr, ids map[string]string, level int) string {
	own, s := levelAtom, ""
	switch e := e.(type) {
	case Number:
		x, _ := rational(string(e))
		return coqNumber(x)
	case Variable:
		return ids[string(e)]
	case Sum:
		if len(e) == 0 {
			return "0"
		}
		if len(e) == 1 {
			return tree(e[0], ids, level)
		}
		var b strings.Builder
		for i, x := range e {
			n, isNegative := x.(Negation)
			switch {
			case i > 0 && isNegative:
				b.WriteString(" - " + tree(n.X, ids, levelProduct))
			case i > 0:
				b.WriteString(" + " + tree(x, ids, levelProduct))
			case isNegative:
				b.WriteString("- " + tree(n.X, ids, levelFactor))
			default:
				b.WriteString(tree(x, ids, levelProduct))
			}
		}
		own, s = levelSum, b.String()
	case Product:
		if len(e) == 0 {
			return "1"
		}
		if len(e) == 1 {
			return tree(e[0], ids, level)
		}
		parts := make([]string, len(e))
		for i, x := range e {
			at := levelFactor
			if i == 0 {
				at = levelProduct
			}
			parts[i] = tree(x, ids, at)
		}
		own, s = levelProduct, strings.Join(parts, " * ")
	case Quotient:
		own, s = levelProduct, tree(e.Num, ids, levelProduct)+" / "+tree(e.Den, ids, levelFactor)
	case Power:
		base := tree(e.Base, ids, levelAtom)
		if e.Exp < 0 {
			own, s = levelProduct, fmt.Sprintf("1 / %s^%d", base, -e.Exp)
		} else {
			own, s = levelFactor, fmt.Sprintf("%s^%d", base, e.Exp)
		}
	case Negation:
		own, s = levelSum, "- "+tree(e.X, ids, levelFactor)
	}
	if level > own {
		return "(" + s + ")"
	}
	return s
}

const lineWidth = 96

// wrap breaks s into lines at spaces, where it can before an operator of the
// outer levels. Continuation lines are indented by two more.
func wrap(indent, s string) string {
	var b strings.Builder
	words := strings.Split(s, " ")
	for first := true; len(words) > 0; first = false {
		if !first {
			b.WriteString("\n")
		}
		width, n, preferred := len(indent), 0, 0
		for n < len(words) && (n == 0 || width+1+len(words[n]) <= lineWidth) {
			if n > 0 && breaks[words[n]] {
				preferred = n
			}
			width += 1 + len(words[n])
			n++
		}
		if n < len(words) && preferred > 0 && !breaks[words[n]] {
			n = preferred
		}
		b.WriteString(indent + strings.Join(words[:n], " "))
		words = words[n:]
		if first {
			indent += "  "
		}
	}
	return b.String()
}

var breaks = words(`+ - = <= -> /\ |`)
