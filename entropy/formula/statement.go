package formula

import (
	"fmt"
	"math/big"

	"creaseproof/entropy/source"
)

// ParseStatement reads a claim. An error is a *source.Error, at the place.
func (s *Scope) ParseStatement(src source.Text) (*Statement, error) {
	p := newParser(s, src)
	st := p.statement()
	if p.err == nil && p.peek().kind != kEOF {
		p.afterStatement(p.peek())
	}
	if p.err != nil {
		return nil, p.err
	}
	return st, nil
}

func (p *parser) statement() *Statement {
	start := p.peek()
	if start.kind == kIdent {
		switch start.text {
		case "entropy":
			return p.entropyClaim()
		case "span":
			return p.spanClaim()
		}
	}
	left := p.expr()
	if left == nil {
		return nil
	}
	st := &Statement{Left: left}
	switch t := p.peek(); t.kind {
	case '=':
		st.Relation = Equal
	case kLE:
		st.Relation = LessEqual
	case kGE:
		st.Relation = GreaterEqual
	case kIn:
		f, ok := left.(*Field)
		if !ok {
			p.refuse(start, `a field stands before "in"`, `write it as in "Sigma in L^1"`)
			return nil
		}
		return p.integrable(f)
	case kEOF:
		p.refuse(t, "a claim has a relation", `write "A = B", "A <= B", "A >= B", "Sigma in L^1", "entropy(Sigma)" or "span(F, G) = Sigma"`)
		return nil
	case kStrict:
		p.refuse(t, fmt.Sprintf("%q is no relation of a claim", p.spelled(t)), strictAdvice(t.text))
		return nil
	default:
		p.unexpected(t)
		return nil
	}
	p.take()
	if st.Right = p.expr(); st.Right == nil {
		return nil
	}
	return st
}

// afterStatement refuses what follows a whole claim.
func (p *parser) afterStatement(t token) {
	switch t.kind {
	case '=', kLE, kGE, kStrict, kIn:
		p.refuse(t, "a claim has one relation", `write two claims, "a <= b" and "b <= c"`)
	default:
		p.unexpected(t)
	}
}

// fieldArg reads a field, with an angle or without.
func (p *parser) fieldArg(what string) *Field {
	t := p.peek()
	x := p.expr()
	if x == nil {
		return nil
	}
	f, ok := x.(*Field)
	if !ok {
		p.refuse(t, fmt.Sprintf("%s is about a field", what), `write the name of a field, as in "Sigma" or "Sigma(0)"`)
	}
	return f
}

func (p *parser) entropyClaim() *Statement {
	p.take()
	open, ok := p.open('(')
	if !ok {
		return nil
	}
	f := p.fieldArg("entropy(F)")
	if f == nil || !p.close(open, ')') {
		return nil
	}
	return &Statement{Relation: Entropy, Field: f}
}

func (p *parser) spanClaim() *Statement {
	p.take()
	open, ok := p.open('(')
	if !ok {
		return nil
	}
	st := &Statement{Relation: Span}
	for {
		f := p.fieldArg("span(F, G)")
		if f == nil {
			return nil
		}
		st.Generators = append(st.Generators, f)
		if p.peek().kind != ',' {
			break
		}
		p.take()
	}
	if !p.close(open, ')') {
		return nil
	}
	if t := p.peek(); t.kind != '=' {
		p.refuse(t, "span(...) stands before = and a field", `write it as in "span(Sigma(0), Sigma(pi/4)) = Sigma"`)
		return nil
	}
	p.take()
	if st.Field = p.fieldArg("span(F, G) ="); st.Field == nil {
		return nil
	}
	return st
}

// integrable reads in L^NUM after a field.
func (p *parser) integrable(f *Field) *Statement {
	p.take()
	t := p.take()
	if p.err != nil {
		return nil
	}
	if t.kind != kIdent || t.text != "L" || p.peek().kind != '^' {
		p.refuse(t, `"in" stands before a space L^p`, `write it as in "Sigma in L^1" or "Sigma in L^(3/2)"`)
		return nil
	}
	p.take()
	at := p.peek()
	var exp *big.Rat
	switch at.kind {
	case kNum, '(', '{', kFrac:
		exp, _ = p.exponent(f)
	default:
		if p.err == nil {
			p.refuse(at, "the exponent of L is a positive number", `write it as in "Sigma in L^1" or "Sigma in L^(3/2)"`)
		}
	}
	if exp == nil {
		return nil
	}
	if exp.Sign() <= 0 || !inRange(exp) {
		p.refuse(at, fmt.Sprintf("the exponent of L is positive, its numerator and denominator at most %d", maxExponent), "")
		return nil
	}
	if u := p.peek(); u.kind == '/' {
		p.refuse(u, "a division after the exponent of L", fmt.Sprintf("write \"L^(%s/...)\"", exp.RatString()))
		return nil
	}
	return &Statement{Relation: Integrable, Field: f, Exponent: exp}
}
