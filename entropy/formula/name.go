package formula

import (
	"fmt"
	"strings"
)

// name reads what begins with a name.
func (p *parser) name() Node {
	t := p.take()
	id := t.text
	after := p.peek()
	if p.err != nil {
		return nil
	}
	declared := p.scope.kinds[id]
	switch {
	case IsFunction(id):
		return p.call(t)
	case id == "nu":
		if after.kind != '_' {
			return p.refuse(t, "the normal nu stands in X.nu and nu_x only", `write "X.nu" for a normal component, "nu_x" for a component of nu`)
		}
		return p.component(t, nil)
	case id == "pi":
		if after.kind == '_' {
			return p.refuse(after, "pi has no subscript", "")
		}
		return &Name{place: p.place(t), ID: id}
	case IsReserved(id):
		return p.refuse(t, fmt.Sprintf("%q stands in claims only, not in a formula", id), "")
	case id == "d" && declared == Undeclared && after.kind == '_':
		return p.totalDeriv(t)
	}
	switch declared {
	case Undeclared:
		problem, advice := p.scope.unknownName(id)
		return p.refuse(t, problem, advice)
	case Axis:
		return p.refuse(t, fmt.Sprintf("the frame axis %q stands in subscripts only", id), fmt.Sprintf("write it as in \"u_%s\"", id))
	case FieldName:
		return p.field(t)
	case Unknown, Let:
		if after.kind != '_' {
			return &Name{place: p.place(t), ID: id}
		}
		by := p.subscript()
		if by == nil {
			return nil
		}
		if u := p.peek(); id == "d" && u.kind == '(' {
			sub := clip(strings.Join(by, ""))
			return p.refuse(t, fmt.Sprintf("where d is %s, a parenthesis after d_%s has two readings", article(declared), sub),
				fmt.Sprintf("write \"d_%s*(...)\" for the product; for the total derivative rename the %s d", sub, declared))
		}
		return &Deriv{place: p.place(t), Of: id, By: by}
	}
	if after.kind == '_' {
		return p.refuse(after, fmt.Sprintf("the %s %q has no subscript", declared, id),
			"subscripts stand on unknowns, named formulas, fields and nu")
	}
	return &Name{place: p.place(t), ID: id}
}

// subscript reads _ and the names after it; nil after an error.
func (p *parser) subscript() []string {
	p.take()
	t := p.peek()
	switch t.kind {
	case kIdent, kIn:
		p.take()
		by := p.split(t)
		if u := p.peek(); by != nil && u.kind == kIdent && !u.space && (t.tex || u.tex) {
			p.refuse(u, "a name run on to a subscript has two readings",
				either(fmt.Sprintf("_{%s %s}", clip(t.text), clip(u.text)), fmt.Sprintf("_{%s} %s", clip(t.text), clip(u.text))))
			return nil
		}
		return by
	case '{':
		p.take()
	default:
		if p.err == nil {
			p.refuse(t, "a subscript is made of names of coordinates and axes", `write it as in "u_x" or "u_{x y}"`)
		}
		return nil
	}
	var by []string
	for {
		u := p.take()
		switch {
		case p.err != nil:
			return nil
		case u.kind == '}' && by != nil:
			return by
		case u.kind == kIdent:
			names := p.split(u)
			if names == nil {
				return nil
			}
			by = append(by, names...)
		case u.kind == kEOF:
			p.refuse(t, `"{" is never closed`, `add "}"`)
			return nil
		case u.kind == '}':
			p.refuse(u, "an empty subscript", `write it as in "u_x"`)
			return nil
		case u.kind == ',':
			p.refuse(u, "a comma in a subscript", `write spaces, as in "u_{x y}"`)
			return nil
		default:
			p.refuse(u, "a subscript is made of names of coordinates and axes", `write it as in "u_{x y}"`)
			return nil
		}
	}
}

// split reads a run of letters as coordinates and axes.
func (p *parser) split(t token) []string {
	by := p.scope.Subscript(t.text)
	if by != nil || p.err != nil {
		return by
	}
	advice := "no coordinate is declared"
	if len(p.scope.code) > 0 {
		advice = "the coordinates and axes are " + clip(strings.Join(p.scope.code, ", "))
	}
	base := strings.TrimRight(t.text, "0123456789")
	if digits := t.text[len(base):]; digits != "" && len(t.text) <= maxName && p.scope.Subscript(base) != nil {
		advice = fmt.Sprintf("write \"_%s^%s\" for a power", base, digits)
	}
	p.refuse(t, fmt.Sprintf("the subscript %q is not made of coordinates and axes", clip(t.text)), advice)
	return nil
}

// field reads FIELD, FIELD(angle) and their components.
func (p *parser) field(t token) Node {
	var angle Node
	if p.peek().kind == '(' {
		if angle = p.group('(', ')'); angle == nil {
			return nil
		}
	}
	if p.peek().kind == '_' {
		return p.component(t, angle)
	}
	return &Field{place: p.place(t), ID: t.text, Angle: angle}
}

// component reads the subscript of a field or of nu.
func (p *parser) component(t token, angle Node) Node {
	sub := p.peek()
	by := p.subscript()
	if by == nil {
		return nil
	}
	if len(by) != 1 {
		return p.refuse(sub, fmt.Sprintf("a component of %q has one coordinate or axis, not %d", t.text, len(by)),
			fmt.Sprintf("write %q for its derivative", fmt.Sprintf("d_%s(%s_%s)", clip(strings.Join(by[1:], "")), t.text, by[0])))
	}
	return &Component{place: p.place(t), Of: t.text, Angle: angle, Index: by[0]}
}

// totalDeriv reads d_x(f), its d being taken.
func (p *parser) totalDeriv(t token) Node {
	by := p.subscript()
	if by == nil {
		return nil
	}
	sub := strings.Join(by, "")
	if u := p.peek(); u.kind != '(' {
		if p.err != nil {
			return nil
		}
		return p.refuse(t, "d_x takes its argument in parentheses", fmt.Sprintf("write \"d_%s(f)\"", clip(sub)))
	}
	x := p.group('(', ')')
	if x == nil {
		return nil
	}
	return &TotalDeriv{place: p.place(t), By: by, Arg: x}
}

// call reads the arguments of a named function, whose name is taken.
func (p *parser) call(t token) Node {
	f := t.text
	open := p.peek()
	if open.kind != '(' {
		return p.refuseCall(t, open)
	}
	open, ok := p.open('(')
	if !ok {
		return nil
	}
	if p.peek().kind == ')' {
		return p.refuse(p.peek(), fmt.Sprintf("%s has no argument", f), fmt.Sprintf("write %q", usage(f)))
	}
	var args []Node
	for {
		first := p.peek()
		x := p.expr()
		if x == nil {
			return nil
		}
		if !p.argument(f, len(args), first, x) {
			return nil
		}
		args = append(args, x)
		if p.peek().kind != ',' {
			break
		}
		p.take()
	}
	if !p.close(open, ')') {
		return nil
	}
	if n := functions[f]; len(args) < n.least || len(args) > n.most {
		return p.refuse(t, fmt.Sprintf("%s takes %s, not %d", f, count(n.least, n.most), len(args)), fmt.Sprintf("write %q", usage(f)))
	}
	return &Call{place: p.place(t), Func: f, Args: args}
}

// argument checks an argument that must be a name of some kind.
func (p *parser) argument(f string, i int, t token, x Node) bool {
	kind := Undeclared
	switch {
	case f == "sup" && i == 0:
		kind = Angle
	case f == "euler" && i == 1:
		kind = Unknown
	default:
		return true
	}
	if n, ok := x.(*Name); ok && p.scope.kinds[n.ID] == kind {
		return true
	}
	p.refuse(t, fmt.Sprintf("argument %d of %s is the name of %s", i+1, f, article(kind)), fmt.Sprintf("write %q", usage(f)))
	return false
}

func article(k Kind) string {
	if k == Unknown {
		return "an " + k.String()
	}
	return "a " + k.String()
}

func count(least, most int) string {
	switch {
	case least == 1 && most == 1:
		return "one argument"
	case most == 2 && least == 2:
		return "two arguments"
	case most == 2:
		return "one or two arguments"
	}
	return "one argument or more"
}

func usage(f string) string {
	switch f {
	case "norm":
		return "norm(a, b)"
	case "div":
		return "div(F)"
	case "euler":
		return "euler(f, u)"
	case "sup":
		return "sup(theta, f)"
	}
	return f + "(x)"
}

// refuseCall refuses sin x, sin^2(x) and the bare sin.
func (p *parser) refuseCall(t, next token) Node {
	f := t.text
	if p.err != nil {
		return nil
	}
	switch next.kind {
	case '^', kSuper:
		e := "2"
		if next.kind == kSuper {
			e = clip(next.text)
		} else if u := p.peekAt(1); u.kind == kNum {
			e = clip(u.text)
		}
		return p.refuse(t, fmt.Sprintf("a power of the name %s has two readings", f),
			either(fmt.Sprintf("%s(x)^%s", f, e), fmt.Sprintf("%s(x^%s)", f, e)))
	case kNum, kIdent:
		x := p.spelled(next)
		if u := p.peekAt(1); u.kind == kIdent || u.kind == kNum {
			y := p.spelled(u)
			return p.refuse(t, fmt.Sprintf("%s without parentheses has two readings", f),
				either(fmt.Sprintf("%s(%s) %s", f, x, y), fmt.Sprintf("%s(%s %s)", f, x, y)))
		}
		return p.refuse(t, fmt.Sprintf("%s without parentheses has two readings", f),
			either(fmt.Sprintf("%s(%s)", f, x), fmt.Sprintf("%s(%s ...)", f, x)))
	}
	return p.refuse(t, fmt.Sprintf("%s takes its argument in parentheses", f), fmt.Sprintf("write %q", usage(f)))
}
