package algebra

import (
	"strconv"
	"strings"
)

// String writes p on one line with the given names, larger terms first:
// "3/2*x^2 y - z + 1". A poisoned polynomial is written as its error.
func (p Poly) String(name func(Var) string) string {
	if p.r == nil {
		return "0"
	}
	if p.r.err != nil {
		return "(" + p.r.err.Error() + ")"
	}
	var b strings.Builder
	first := true
	for m, c := range p.Terms() {
		switch {
		case first && c.Sign() < 0:
			b.WriteByte('-')
		case !first && c.Sign() < 0:
			b.WriteString(" - ")
		case !first:
			b.WriteString(" + ")
		}
		first = false
		c = c.Abs()
		switch {
		case m == One:
			b.WriteString(c.String())
			continue
		case c.IsOne():
		case c.IsInt():
			b.WriteString(c.String())
			b.WriteByte(' ')
		default:
			b.WriteString(c.String())
			b.WriteByte('*')
		}
		b.WriteString(m.String(name))
	}
	return b.String()
}

// String writes m with the given names, as "x^2 y".
func (m Monomial) String(name func(Var) string) string {
	if m == One {
		return "1"
	}
	if !m.Valid() {
		return "(" + ErrExponent.Error() + ")"
	}
	var b strings.Builder
	for i := range m.len() {
		v, e := m.at(i)
		if i > 0 {
			b.WriteByte(' ')
		}
		b.WriteString(name(v))
		if e > 1 {
			b.WriteByte('^')
			b.WriteString(strconv.Itoa(e))
		}
	}
	return b.String()
}

// String writes f on one line with the given names, the denominator as the
// product that is kept: "(x + 1)/(y^2 (x - 1))". A poisoned fraction is written
// as its error.
func (f Fraction) String(name func(Var) string) string {
	num := f.num.String(name)
	if len(f.den) == 0 {
		return num
	}
	if f.num.Len() > 1 {
		num = "(" + num + ")"
	}
	var b strings.Builder
	for i, d := range f.den {
		if i > 0 {
			b.WriteByte(' ')
		}
		s := d.Base.String(name)
		if m, c := d.Base.Leading(); d.Base.Len() > 1 || !c.IsOne() || m.Degree() > 1 {
			s = "(" + s + ")"
		}
		b.WriteString(s)
		if d.Exp > 1 {
			b.WriteByte('^')
			b.WriteString(strconv.Itoa(d.Exp))
		}
	}
	den := b.String()
	if len(f.den) > 1 {
		den = "(" + den + ")"
	}
	return num + "/" + den
}
