package jet

import (
	"math/big"
	"strconv"
	"strings"

	"creaseproof/entropy/algebra"
)

// Format prints a value in the formula grammar.
func (r *Ring) Format(f algebra.Fraction) string {
	if err := f.Err(); err != nil {
		return "(" + err.Error() + ")"
	}
	dens := f.DenFactors()
	if len(dens) == 0 {
		return r.FormatPoly(f.Num())
	}
	// A rational factor goes above and below the bar as whole numbers.
	c, num := f.Num().Primitive()
	top, bottom := algebra.FromBig(new(big.Rat).SetInt(c.Big().Num())), algebra.FromBig(new(big.Rat).SetInt(c.Big().Denom()))
	num = num.Scale(top)
	n := r.FormatPoly(num)
	if num.Len() != 1 {
		n = "(" + n + ")"
	}
	var d []string
	if !bottom.IsOne() {
		d = append(d, bottom.String())
	}
	for _, x := range dens {
		b := r.FormatPoly(x.Base)
		if x.Base.Len() != 1 {
			b = "(" + b + ")"
		}
		d = append(d, power(b, x.Exp))
	}
	den := strings.Join(d, " ")
	if len(d) > 1 || strings.ContainsAny(den, " *") && dens[0].Base.Len() == 1 {
		den = "(" + den + ")"
	}
	return n + "/" + den
}

// FormatPoly prints a polynomial in the formula grammar, terms in the order
// of the polynomial.
func (r *Ring) FormatPoly(p algebra.Poly) string { return r.FormatPolyNamed(p, r.Name) }

// FormatPolyNamed prints a polynomial with names of the caller's.
func (r *Ring) FormatPolyNamed(p algebra.Poly, name func(algebra.Var) string) string {
	if err := p.Err(); err != nil {
		return "(" + err.Error() + ")"
	}
	if p.IsZero() {
		return "0"
	}
	var b strings.Builder
	first := true
	for m, c := range p.Terms() {
		switch {
		case first && c.Sign() < 0:
			b.WriteString("-")
		case !first && c.Sign() < 0:
			b.WriteString(" - ")
		case !first:
			b.WriteString(" + ")
		}
		first = false
		c = c.Abs()
		mono := formatMonomial(m, name)
		switch {
		case mono == "":
			b.WriteString(c.String())
		case c.IsOne():
			b.WriteString(mono)
		case c.IsInt():
			b.WriteString(c.String() + " " + mono)
		default:
			b.WriteString(c.String() + "*" + mono)
		}
	}
	return b.String()
}

func formatMonomial(m algebra.Monomial, name func(algebra.Var) string) string {
	var parts []string
	for _, pw := range m.Powers() {
		parts = append(parts, power(name(pw.Var), pw.Exp))
	}
	return strings.Join(parts, " ")
}

func power(base string, e int) string {
	if e == 1 {
		return base
	}
	if strings.HasSuffix(base, ")") && strings.Contains(base, "^(1/") {
		base = "(" + base + ")"
	}
	return base + "^" + strconv.Itoa(e)
}
