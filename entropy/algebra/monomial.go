package algebra

import (
	"cmp"
	"encoding/binary"
	"math"
	"slices"
)

// Var is an indeterminate. Its name, if any, is held elsewhere.
type Var int32

// Power is a power of an indeterminate; Exp is at least 1.
type Power struct {
	Var Var
	Exp int
}

// Monomial is a product of powers of distinct indeterminates. It is immutable
// and comparable with ==; the zero value is 1. A monomial whose degree would be
// above MaxExponent, or that would have a negative exponent, is not valid: every
// operation on it gives an invalid one, and a polynomial built from it is
// poisoned.
type Monomial struct {
	s string // eight bytes for each power, sorted by Var
}

// One is the monomial 1.
var One Monomial

var invalid = Monomial{"!"}

// NewMonomial returns the product of the powers. The same Var may occur more
// than once; powers with exponent 0 are left out.
func NewMonomial(powers ...Power) Monomial {
	ps := slices.Clone(powers)
	slices.SortStableFunc(ps, func(a, b Power) int { return cmp.Compare(a.Var, b.Var) })
	out := ps[:0]
	deg := 0
	for _, p := range ps {
		if p.Exp < 0 || p.Exp > MaxExponent {
			return invalid
		}
		if deg += p.Exp; deg > MaxExponent {
			return invalid
		}
		switch n := len(out); {
		case p.Exp == 0:
		case n > 0 && out[n-1].Var == p.Var:
			out[n-1].Exp += p.Exp
		default:
			out = append(out, p)
		}
	}
	return encode(out)
}

// encode needs sorted powers of distinct indeterminates with exponents >= 1.
func encode(ps []Power) Monomial {
	if len(ps) == 0 {
		return One
	}
	var buf [128]byte
	b := buf[:0]
	for _, p := range ps {
		b = binary.BigEndian.AppendUint32(b, uint32(p.Var))
		b = binary.BigEndian.AppendUint32(b, uint32(p.Exp))
	}
	return Monomial{string(b)}
}

func (m Monomial) len() int { return len(m.s) / 8 }

func (m Monomial) at(i int) (Var, int) {
	s := m.s[8*i : 8*i+8]
	v := uint32(s[0])<<24 | uint32(s[1])<<16 | uint32(s[2])<<8 | uint32(s[3])
	e := uint32(s[4])<<24 | uint32(s[5])<<16 | uint32(s[6])<<8 | uint32(s[7])
	return Var(v), int(e)
}

// Valid reports whether m is a monomial at all; see Monomial.
func (m Monomial) Valid() bool { return len(m.s)%8 == 0 }

// Powers returns the powers, sorted by Var.
func (m Monomial) Powers() []Power {
	ps := make([]Power, m.len())
	for i := range ps {
		ps[i].Var, ps[i].Exp = m.at(i)
	}
	return ps
}

// Exp returns the exponent of v.
func (m Monomial) Exp(v Var) int {
	for i := range m.len() {
		if w, e := m.at(i); w == v {
			return e
		}
	}
	return 0
}

// Degree returns the total degree, and -1 where m is not valid.
func (m Monomial) Degree() int {
	if !m.Valid() {
		return -1
	}
	d := 0
	for i := range m.len() {
		_, e := m.at(i)
		d += e
	}
	return d
}

// Mul returns m o.
func (m Monomial) Mul(o Monomial) Monomial {
	switch {
	case !m.Valid() || !o.Valid():
		return invalid
	case m.s == "":
		return o
	case o.s == "":
		return m
	case m.Degree()+o.Degree() > MaxExponent:
		return invalid
	}
	ps := make([]Power, 0, 16)
	merge(m, o, func(v Var, a, b int) bool {
		ps = append(ps, Power{v, a + b})
		return true
	})
	return encode(ps)
}

// Divides reports whether m divides o.
func (m Monomial) Divides(o Monomial) bool {
	_, ok := o.Div(m)
	return ok
}

// Div returns m/o, and false where o does not divide m.
func (m Monomial) Div(o Monomial) (Monomial, bool) {
	if !m.Valid() || !o.Valid() {
		return invalid, false
	}
	ps := make([]Power, 0, 16)
	ok := merge(m, o, func(v Var, a, b int) bool {
		if a > b {
			ps = append(ps, Power{v, a - b})
		}
		return a >= b
	})
	if !ok {
		return One, false
	}
	return encode(ps), true
}

// merge calls f for each indeterminate of m or o, in order, with its exponents
// in both, until f returns false.
func merge(m, o Monomial, f func(v Var, a, b int) bool) bool {
	i, j := 0, 0
	for i < m.len() || j < o.len() {
		v, a := Var(math.MaxInt32), 0
		w, b := v, 0
		if i < m.len() {
			v, a = m.at(i)
		}
		if j < o.len() {
			w, b = o.at(j)
		}
		switch {
		case j == o.len() || i < m.len() && v < w:
			b = 0
			i++
		case i == m.len() || w < v:
			v, a = w, 0
			j++
		default:
			i, j = i+1, j+1
		}
		if !f(v, a, b) {
			return false
		}
	}
	return true
}

// GradedLex is the order in which polynomials keep their terms: first the total
// degree, then the exponent of the smallest Var at which a and b differ. It
// returns the sign of a - b.
func GradedLex(a, b Monomial) int {
	if a == b {
		return 0
	}
	if c := cmp.Compare(a.Degree(), b.Degree()); c != 0 {
		return c
	}
	r := 0
	merge(a, b, func(_ Var, x, y int) bool {
		r = cmp.Compare(x, y)
		return r == 0
	})
	return r
}

// Lex returns the order in which the exponents of the given indeterminates
// decide first, in the order given, and GradedLex decides between equals. It
// eliminates them: a remainder of DivMod is free of them where it can be.
func Lex(vars ...Var) func(a, b Monomial) int {
	vars = slices.Clone(vars)
	return func(a, b Monomial) int {
		for _, v := range vars {
			if c := cmp.Compare(a.Exp(v), b.Exp(v)); c != 0 {
				return c
			}
		}
		return GradedLex(a, b)
	}
}
