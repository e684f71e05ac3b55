package formula

import (
	"fmt"
	"math/big"
)

// maxExponent bounds the numerator and the denominator of an exponent.
const maxExponent = 1000000

// power := prim [. nu] [^ exponent]
func (p *parser) power() Node {
	start := p.peek()
	base := p.primary()
	if base == nil {
		return nil
	}
	if p.dotNu() {
		base = &DotNu{place: p.place(start), X: base}
		if p.dotNu() {
			return p.refuse(p.prev, "a normal component of a normal component", `write ".nu" once`)
		}
	}
	t := p.peek()
	var exp *big.Rat
	var bare bool // written without brackets
	switch t.kind {
	case '^':
		p.take()
		exp, bare = p.exponent(base)
	case kSuper:
		exp = p.raised(p.take())
	default:
		return base
	}
	if exp == nil {
		return nil
	}
	if !inRange(exp) {
		return p.refuse(t, fmt.Sprintf("an exponent has a numerator and a denominator of at most %d", maxExponent), "write a smaller exponent")
	}
	x := &Power{place: p.place(start), Base: base, Exp: exp}
	return p.afterPower(x, bare)
}

// dotNu takes .nu or ·nu where they come next.
func (p *parser) dotNu() bool {
	if k := p.peek().kind; k != '.' && k != kDot {
		return false
	}
	if t := p.peekAt(1); t.kind != kIdent || t.text != "nu" || p.peekAt(2).kind == '_' {
		return false
	}
	p.take()
	p.take()
	return true
}

// afterPower refuses what may not follow a power.
func (p *parser) afterPower(x *Power, bare bool) Node {
	base, exp := clip(Text(x.Base)), clip(exponentText(x.Exp))
	switch t := p.peek(); t.kind {
	case '^', kSuper:
		upper := "..."
		if t.kind == kSuper {
			upper = t.text
		} else if u := p.peekAt(1); u.kind == kNum || u.kind == kIdent {
			upper = p.spelled(u)
		}
		return p.refuse(t, "a power of a power has two readings",
			either(fmt.Sprintf("(%s^%s)^%s", base, exp, upper), fmt.Sprintf("%s^(%s^%s)", base, exp, upper)))
	case '_':
		sub := "..."
		if u := p.peekAt(1); u.kind == kIdent {
			sub = clip(u.text)
		}
		return p.refuse(t, "a subscript after a power has two readings",
			either(fmt.Sprintf("%s_%s^%s", base, sub, exp), fmt.Sprintf("d_%s(%s^%s)", sub, base, exp)))
	case '/':
		u := p.peekAt(1)
		if !bare || u.kind != kNum || !x.Exp.IsInt() || x.Exp.Num().CmpAbs(big.NewInt(1)) != 0 {
			return x
		}
		e := x.Exp.RatString()
		return p.refuse(t, fmt.Sprintf("a power %s followed by a division has two readings", e),
			either(fmt.Sprintf("%s^(%s/%s)", base, e, p.spelled(u)), fmt.Sprintf("(%s^%s)/%s", base, e, p.spelled(u))))
	case '.', kDot:
		if u := p.peekAt(1); u.kind != kIdent || u.text != "nu" || p.peekAt(2).kind == '_' {
			return x
		}
		return p.refuse(t, "a normal component after a power has two readings",
			either(fmt.Sprintf("(%s^%s).nu", base, exp), fmt.Sprintf("(%s.nu)^%s", base, exp)))
	}
	return x
}

// raised is the exponent in superscript digits.
func (p *parser) raised(t token) *big.Rat {
	digits := t.text
	if len(digits) > 1 && digits[0] == '-' {
		digits = digits[1:]
	}
	exp, ok := new(big.Rat), len(t.text) <= 20
	for i := 0; i < len(digits); i++ {
		ok = ok && digits[i] != '-'
	}
	if ok {
		exp, ok = exp.SetString(t.text)
	}
	if !ok {
		p.refuse(t, "an exponent that is no number", "write ^n")
		return nil
	}
	return exp
}

// exponent reads what stands after ^.
func (p *parser) exponent(base Node) (exp *big.Rat, bare bool) {
	start := p.peek()
	var n Node
	switch start.kind {
	case kNum:
		p.take()
		n, bare = p.num(start), true
	case '+', '-':
		p.take()
		bare = true
		t := p.peek()
		if t.kind == kNum {
			p.take()
			n = p.num(t)
			if start.kind == '-' && n != nil {
				n = &Sum{Terms: []Term{{Neg: true, X: n}}}
			}
		} else if p.err == nil {
			p.refuse(t, "a sign in an exponent stands before a number", "put the exponent in parentheses")
			return nil, false
		}
	case '(':
		n = p.group('(', ')')
	case '{':
		n = p.group('{', '}')
	case kFrac:
		n = p.primary()
	case kIdent:
		p.take()
		if t := p.peek(); t.kind == '^' {
			upper := "..."
			if u := p.peekAt(1); u.kind == kNum || u.kind == kIdent {
				upper = p.spelled(u)
			}
			b, e := clip(Text(base)), p.spelled(start)
			p.refuse(t, "a power of a power has two readings",
				either(fmt.Sprintf("(%s^%s)^%s", b, e, upper), fmt.Sprintf("%s^(%s^%s)", b, e, upper)))
			return nil, false
		}
		return p.symbolic(start, base, p.spelled(start)), false
	case kEOF:
		if p.err == nil {
			p.refuse(start, "the formula ends where an exponent should stand", "")
		}
		return nil, false
	default:
		p.refuse(start, fmt.Sprintf("%q where an exponent should stand", p.spelled(start)), "write a number, or p/q in parentheses")
		return nil, false
	}
	if n == nil {
		return nil, false
	}
	exp, ok := fraction(n)
	if !ok {
		return p.symbolic(start, base, Text(n)), false
	}
	if exp == nil {
		p.refuse(start, "a division by zero in an exponent", "")
	}
	return exp, bare
}

func (p *parser) symbolic(t token, base Node, exp string) *big.Rat {
	p.refuse(t, "an exponent is one number or one fraction of numbers",
		fmt.Sprintf("write %q for a power that is a formula", fmt.Sprintf("exp(%s*log(%s))", parenthesise(clip(exp)), clip(Text(base)))))
	return nil
}

func parenthesise(s string) string {
	for _, r := range s {
		if !isNameRune(r) {
			return "(" + s + ")"
		}
	}
	return s
}

// fraction is the value of [-]a or [-]a/b; ok is false for any other node, the
// value nil where b is 0.
func fraction(n Node) (value *big.Rat, ok bool) {
	switch x := n.(type) {
	case *Num:
		return x.Value, true
	case *Sum:
		if len(x.Terms) != 1 || !x.Terms[0].Neg {
			return nil, false
		}
		v, ok := fraction(x.Terms[0].X)
		if v == nil {
			return nil, ok
		}
		return new(big.Rat).Neg(v), ok
	case *Product:
		if len(x.Factors) != 2 || x.Factors[1].Op != Slash {
			return nil, false
		}
		a, ok := integer(x.Factors[0].X)
		if !ok {
			return nil, false
		}
		b, ok := integer(x.Factors[1].X)
		if !ok {
			return nil, false
		}
		if b.Sign() == 0 {
			return nil, true
		}
		return new(big.Rat).Quo(a, b), true
	}
	return nil, false
}

// integer is the value of [-]a.
func integer(n Node) (*big.Rat, bool) {
	if _, ok := n.(*Product); ok {
		return nil, false
	}
	v, ok := fraction(n)
	return v, ok && v != nil
}

func inRange(r *big.Rat) bool {
	most := big.NewInt(maxExponent)
	return r.Num().CmpAbs(most) <= 0 && r.Denom().CmpAbs(most) <= 0
}
