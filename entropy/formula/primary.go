package formula

import (
	"fmt"
	"math/big"
)

// primary := NUM | NAME[_sub] | FUNCTION(args) | FIELD(angle) | (expr) |
// [expr] | {expr} | \frac{..}{..} | \sqrt{..}
func (p *parser) primary() Node {
	start := p.peek()
	var n Node
	switch start.kind {
	case kNum:
		p.take()
		n = p.num(start)
	case kIdent:
		n = p.name()
	case '(':
		n = p.group('(', ')')
	case '[':
		if !p.scope.jump {
			return p.refuse(start, "[f] is a jump, which only a claim at a jump has", `write parentheses, "(f)"`)
		}
		if x := p.group('[', ']'); x != nil {
			n = &Jump{place: p.place(start), X: x}
		}
	case '{', kOpen:
		if !p.scope.jump {
			return p.refuse(start, "{f} is an average, which only a claim at a jump has", `write parentheses, "(f)"`)
		}
		end := kClose
		if start.kind == '{' {
			end = '}'
		}
		if x := p.group(start.kind, end); x != nil {
			n = &Average{place: p.place(start), X: x}
		}
	case kFrac:
		n = p.frac()
	case kSqrt:
		n = p.sqrt()
	case kRoot:
		p.take()
		if t := p.peek(); t.kind != '(' {
			return p.refuse(start, "a root without parentheses does not show where it ends", either("sqrt(x) y", "sqrt(x y)"))
		}
		if x := p.group('(', ')'); x != nil {
			n = &Call{place: p.place(start), Func: "sqrt", Args: []Node{x}}
		}
	default:
		p.unexpected(start)
	}
	if n == nil {
		return nil
	}
	if t := p.peek(); t.kind == '_' {
		return p.misplacedSubscript(t, n)
	}
	return n
}

// misplacedSubscript refuses a subscript, at its _, after something that takes
// none.
func (p *parser) misplacedSubscript(t token, n Node) Node {
	sub := "x"
	if u := p.peekAt(1); u.kind == kIdent {
		sub = clip(u.text)
	} else if v := p.peekAt(2); u.kind == '{' && v.kind == kIdent && p.peekAt(3).kind == '}' {
		sub = clip(v.text)
	}
	derivative := fmt.Sprintf("d_%s(%s)", sub, clip(Text(n)))
	switch x := n.(type) {
	case *Deriv:
		return p.refuse(t, "a second subscript", fmt.Sprintf("write all of it in one, %q", clip(Text(x))+sub))
	case *Component:
		return p.refuse(t, "a component has no further subscript", fmt.Sprintf("write %q for its derivative", derivative))
	case *Call:
		if x.Func != "grad" || len(x.Args) != 1 {
			break
		}
		return p.refuse(t, "a subscript stands on a name only", fmt.Sprintf("write %q for that component of the gradient", fmt.Sprintf("d_%s(%s)", sub, clip(Text(x.Args[0])))))
	}
	return p.refuse(t, "a subscript stands on a name only", fmt.Sprintf("write %q for a derivative", derivative))
}

func (p *parser) num(t token) Node {
	if p.err != nil {
		return nil
	}
	v, ok := new(big.Rat).SetString(t.text)
	if !ok {
		return p.refuse(t, fmt.Sprintf("%q is no number", clip(t.text)), "")
	}
	return &Num{place: p.place(t), Value: v}
}

// group reads open expr close.
func (p *parser) group(open, end kind) Node {
	t, ok := p.open(open)
	if !ok {
		return nil
	}
	x := p.expr()
	if x == nil || !p.close(t, end) {
		return nil
	}
	return x
}

// open takes an opening bracket and goes one level deeper.
func (p *parser) open(k kind) (token, bool) {
	t := p.take()
	if p.err != nil {
		return t, false
	}
	if t.kind != k {
		p.unexpected(t)
		return t, false
	}
	if p.depth++; p.depth > maxDepth {
		p.refuse(t, fmt.Sprintf("brackets are nested more than %d deep", maxDepth), "name parts of the formula in [let]")
		return t, false
	}
	return t, true
}

func bracket(k kind) string {
	switch k {
	case kOpen:
		return `\{`
	case kClose:
		return `\}`
	}
	return string(rune(k))
}

// close takes the bracket that closes the one at open.
func (p *parser) close(open token, end kind) bool {
	t := p.peek()
	if p.err != nil {
		return false
	}
	if t.kind == end {
		p.take()
		p.depth--
		return true
	}
	col := p.place(open).pos.Col
	switch t.kind {
	case kEOF:
		p.refuse(open, fmt.Sprintf("%q is never closed", bracket(open.kind)), fmt.Sprintf("add %q", bracket(end)))
	case ')', ']', '}', kClose:
		p.refuse(t, fmt.Sprintf("%q closes the %q of column %d", p.spelled(t), bracket(open.kind), col), fmt.Sprintf("write %q", bracket(end)))
	case ',':
		p.refuse(t, "a list of formulas is no formula", "only a function has several arguments, and a vector is a field")
	default:
		p.unexpected(t)
	}
	return false
}

func (p *parser) frac() Node {
	start := p.take()
	var parts [2]Node
	for i := range parts {
		if t := p.peek(); t.kind != '{' {
			return p.refuse(start, `both parts of \frac stand in braces`, `write \frac{a}{b}`)
		}
		if parts[i] = p.group('{', '}'); parts[i] == nil {
			return nil
		}
	}
	return &Product{place: p.place(start), Factors: []Factor{{Star, parts[0]}, {Slash, parts[1]}}}
}

func (p *parser) sqrt() Node {
	start := p.take()
	var x Node
	switch t := p.peek(); t.kind {
	case '{':
		x = p.group('{', '}')
	case '[':
		n := "n"
		if u := p.peekAt(1); u.kind == kNum {
			n = u.text
		}
		return p.refuse(t, `\sqrt takes square roots only`, fmt.Sprintf("write x^(1/%s)", clip(n)))
	default:
		return p.refuse(start, `the argument of \sqrt stands in braces`, `write \sqrt{a}`)
	}
	if x == nil {
		return nil
	}
	return &Call{place: p.place(start), Func: "sqrt", Args: []Node{x}}
}

// unexpected refuses a token where a formula, or its end, should stand.
func (p *parser) unexpected(t token) {
	problem, advice := fmt.Sprintf("%q is out of place", p.spelled(t)), ""
	switch t.kind {
	case kEOF:
		problem, advice = "the formula ends too early", "complete it"
	case ')', ']', '}', kClose:
		problem, advice = fmt.Sprintf("%q closes nothing", p.spelled(t)), "delete it, or open it before"
	case '|':
		problem, advice = "bars have two readings", `write "abs(a)" for the absolute value of a number or "norm(a, b)" for the length of a vector`
	case '.':
		problem, advice = "a full stop is no product", `write "*" for a product, "0.5" for a number, "X.nu" for a normal component`
	case '*', '/', kDot, kPower:
		problem, advice = fmt.Sprintf("%q has no factor before it", p.spelled(t)), ""
	case '^', kSuper:
		problem, advice = "an exponent has no base before it", ""
	case '_':
		problem, advice = "a subscript has no name before it", ""
	case ',':
		problem, advice = "a comma is out of place", "only a function has several arguments; write 0.5 for a decimal"
	case '=', kLE, kGE:
		problem, advice = fmt.Sprintf("%q makes a claim, where a formula should stand", p.spelled(t)), "write one side of it"
	case kStrict:
		advice = strictAdvice(t.text)
	case kIn:
		problem, advice = `"in" stands only in a claim such as "Sigma in L^1"`, ""
	}
	p.refuse(t, problem, advice)
}

func strictAdvice(sign string) string {
	switch sign {
	case "<", `\lt`:
		return `write "<=": strict inequalities are not decided`
	case ">", `\gt`:
		return `write ">=": strict inequalities are not decided`
	case "==":
		return `write "=" for an equation`
	}
	return `write "=" and expect "refuted" to claim that two sides differ`
}
