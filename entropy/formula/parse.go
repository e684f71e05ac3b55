package formula

import (
	"fmt"
	"strings"
	"unicode/utf8"

	"creaseproof/entropy/source"
)

const (
	maxLength = 1 << 20 // bytes of a formula
	maxDepth  = 500     // brackets within brackets
)

// ParseExpr reads a formula. An error is a *source.Error, at the place.
func (s *Scope) ParseExpr(src source.Text) (Node, error) {
	p := newParser(s, src)
	n := p.expr()
	if p.err == nil && p.peek().kind != kEOF {
		p.unexpected(p.peek())
	}
	if p.err != nil {
		return nil, p.err
	}
	return n, nil
}

// parser is a recursive descent over the tokens. Its methods return a nil Node
// after an error, which the lexer holds.
type parser struct {
	lexer
	ahead []token
	depth int
	prev  token // the token taken last
}

func newParser(s *Scope, src source.Text) *parser {
	p := &parser{lexer: lexer{src: src, scope: s}}
	p.screen()
	return p
}

// screen refuses text that no formula can be, before any of it is read.
func (p *parser) screen() {
	s := p.src.S
	if len(s) > maxLength {
		p.fail(0, fmt.Sprintf("the formula is longer than %d bytes", maxLength), "name parts of it in [let]")
		return
	}
	n := 0
	for i, r := range s {
		switch {
		case r == utf8.RuneError:
			if _, size := utf8.DecodeRuneInString(s[i:]); size == 1 {
				p.fail(n, "the formula is not valid UTF-8", "save the file as UTF-8")
				return
			}
		case r < ' ', 0x7f <= r && r < 0xa0:
			p.control(n, r, s[i+utf8.RuneLen(r):])
			return
		}
		n++
	}
	if strings.TrimSpace(s) == "" {
		p.fail(0, "the formula is empty", "")
	}
}

// control refuses a control character, naming the escape of a basic TOML
// string that makes it.
func (p *parser) control(at int, r rune, rest string) {
	escape, example := "", ""
	switch r {
	case '\t':
		escape, example = `\t`, "theta"
	case '\n':
		escape, example = `\n`, "nu"
	case '\b':
		escape, example = `\b`, "beta"
	case '\f':
		escape, example = `\f`, "frac"
	case '\r':
		escape, example = `\r`, "rho"
	case 0x1b:
		escape, example = `\e`, "eta"
	}
	problem := fmt.Sprintf("a control character, U+%04X", r)
	advice := "delete it"
	if escape != "" {
		word := escape[1:] + texWord(rest)
		if _, ok := greekCommand(word); !ok && word != "frac" && word != "times" && word != "right" && word != "tfrac" {
			word = example
		}
		problem += fmt.Sprintf(" (%s)", map[rune]string{
			'\t': "a tab", '\n': "a new line", '\b': "a backspace", '\f': "a form feed", '\r': "a carriage return", 0x1b: "an escape",
		}[r])
		advice = fmt.Sprintf(`write one space; or, in TOML, put the formula in single quotes: in "..." the \%s becomes this character and %q`,
			word, word[1:])
	}
	p.fail(at, problem, advice)
}

func (p *parser) peekAt(k int) token {
	for len(p.ahead) <= k {
		p.ahead = append(p.ahead, p.next())
	}
	if p.err != nil {
		return token{kind: kEOF, at: p.ahead[k].at}
	}
	return p.ahead[k]
}

func (p *parser) peek() token { return p.peekAt(0) }

func (p *parser) take() token {
	t := p.peek()
	copy(p.ahead, p.ahead[1:])
	p.ahead = p.ahead[:len(p.ahead)-1]
	p.prev = t
	return t
}

// refuse fails at a token and returns no node.
func (p *parser) refuse(t token, problem, advice string) Node {
	p.fail(int(t.at), problem, advice)
	return nil
}

// place is where a token stands in the file. A formula that gets this far has
// no line break.
func (p *parser) place(t token) place {
	return place{source.Pos{Line: max(p.src.Line, 1), Col: max(p.src.Col, 1) + int(t.at)}}
}

func (p *parser) spelled(t token) string { return clip(p.src.S[t.from:t.to]) }

// either is the advice that offers two readings.
func either(one, two string) string { return fmt.Sprintf("write %q or %q", one, two) }

func isSign(k kind) bool { return k == '+' || k == '-' }

// expr := [+|-] term {(+|-) term}
func (p *parser) expr() Node {
	start := p.peek()
	neg := start.kind == '-'
	if isSign(start.kind) {
		p.take()
	}
	var terms []Term
	for {
		if t := p.peek(); isSign(t.kind) {
			return p.refuse(t, "two signs in a row", `put the second in parentheses, as in "a - (-b)"`)
		}
		x := p.term()
		if x == nil {
			return nil
		}
		terms = append(terms, Term{Neg: neg, X: x})
		t := p.peek()
		if !isSign(t.kind) {
			break
		}
		neg = p.take().kind == '-'
	}
	if len(terms) == 1 && !neg {
		return terms[0].X
	}
	return &Sum{place: p.place(start), Terms: terms}
}

// term := jx {(* | / | ·) jx}
func (p *parser) term() Node {
	start := p.peek()
	x, _ := p.juxt()
	if x == nil {
		return nil
	}
	factors := []Factor{{Op: Star, X: x}}
	for {
		var op Op
		switch t := p.peek(); t.kind {
		case '*':
			op = Star
		case '/':
			op = Slash
		case kDot:
			op = Dot
		case kPower:
			return p.refuse(t, "** is no sign of the formula language", `write "^" for a power, "*" for a product`)
		default:
			if len(factors) == 1 {
				return x
			}
			return &Product{place: p.place(start), Factors: factors}
		}
		sign := p.take()
		if t := p.peek(); isSign(t.kind) {
			return p.refuse(t, fmt.Sprintf("a sign after %q", p.spelled(sign)), `put the signed factor in parentheses, as in "a*(-b)"`)
		}
		// \frac{a}{b} c/d and the like: a fraction that begins a product is
		// its first two factors, so that printing in TeX can be read back.
		if first, ok := x.(*Product); ok && len(factors) == 1 && start.kind == kFrac {
			factors = append([]Factor(nil), first.Factors...)
		}
		y, n := p.juxt()
		if y == nil {
			return nil
		}
		if op == Slash && n > 1 {
			return p.refuseSlash(sign, factors, y.(*Juxt))
		}
		factors = append(factors, Factor{Op: op, X: y})
	}
}

// refuseSlash refuses a / b c.
func (p *parser) refuseSlash(sign token, factors []Factor, y *Juxt) Node {
	left := Node(&Product{Factors: factors})
	if len(factors) == 1 {
		left = factors[0].X
	}
	divided := &Product{Factors: append(factors[:len(factors):len(factors)], Factor{Slash, y.Factors[0]})}
	group := Text(&Juxt{Factors: append([]Node{divided}, y.Factors[1:]...)})
	return p.refuse(sign, "a division by factors written side by side has two readings",
		either(clip(group), clip(Text(left)+"/("+Text(y)+")")))
}

// startsFactor reports whether a factor can begin with the token.
func startsFactor(k kind) bool {
	switch k {
	case kNum, kIdent, '(', '[', '{', kOpen, kFrac, kSqrt, kRoot, '|':
		return true
	}
	return false
}

// juxt := pow {pow}; n is how many were joined.
func (p *parser) juxt() (x Node, n int) {
	start := p.peek()
	x = p.power()
	if x == nil {
		return nil, 0
	}
	factors := []Node{x}
	for {
		t := p.peek()
		if !startsFactor(t.kind) {
			break
		}
		last := factors[len(factors)-1]
		if c, ok := last.(*Component); ok && t.kind == '(' && !t.space && c.Angle == nil && c.Of != "nu" && p.prev.kind != ')' {
			of, sub := c.Of, c.Index
			return p.refuse(t, "a parenthesis right after a component has two readings",
				either(fmt.Sprintf("%s(...)_%s", of, sub), fmt.Sprintf("%s_%s*(...)", of, sub))), 0
		}
		number := t.kind == kNum || t.kind == '(' && p.peekAt(1).kind == kNum && p.peekAt(2).kind == ')'
		y := p.power()
		if y == nil {
			return nil, 0
		}
		if _, ok := y.(*Num); ok || number {
			return p.refuseNumber(t, last, y), 0
		}
		factors = append(factors, y)
	}
	if len(factors) == 1 {
		return x, 1
	}
	return &Juxt{place: p.place(start), Factors: factors}, len(factors)
}

// leadingNum is the number that the text of a factor begins with, nil where it
// begins otherwise.
func leadingNum(n Node) *Num {
	for {
		switch x := n.(type) {
		case *Num:
			return x
		case *Power:
			n = x.Base
		case *DotNu:
			n = x.X
		default:
			return nil
		}
	}
}

// refuseNumber refuses x 2, 2 3, x(2) and x 10^2.
func (p *parser) refuseNumber(t token, last, factor Node) Node {
	num := leadingNum(factor)
	if num == nil {
		return p.refuse(t, "a number after a factor", `write "*" between them`)
	}
	product := Text(&Product{Factors: []Factor{{Star, last}, {Star, factor}}})
	_, power := last.(*Power)
	other := Text(last)
	if power {
		other = "(" + other + ")"
	}
	if _, ok := last.(*Num); ok && t.kind == kNum {
		other += Text(factor)
	} else if e, ok := factor.(*Power); ok {
		other = "(" + other + "^" + Text(num) + ")^" + exponentText(e.Exp)
	} else {
		other += "^" + Text(num)
	}
	return p.refuse(t, fmt.Sprintf("the number %s after a factor has two readings", clip(Text(num))), either(clip(product), clip(other)))
}
