package statement

import (
	"fmt"
	"math/big"
	"strings"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/export"
)

// pair is a formula as a tree, and its value in normal form.
type pair struct {
	x export.Expr
	f algebra.Fraction
}

// trees is the arithmetic that builds trees beside exact values.
type trees struct {
	*entropy.Exact
	vars  map[string]algebra.Var
	frame *entropy.Frame              // where derivatives are named along its axes
	put   map[algebra.Var]export.Expr // numbers for indeterminates
	size  int
}

// maxSize bounds the nodes of all trees together.
const maxSize = 400_000

var errSize = fmt.Errorf("%w: the formula is too long when it is written out", export.ErrUnsupported)

func (t *trees) made(x export.Expr, f algebra.Fraction, err error) (pair, error) {
	if err == nil && t.size > maxSize {
		err = errSize
	}
	return pair{x, f}, err
}

func isNumber(x export.Expr, s string) bool { n, ok := x.(export.Number); return ok && string(n) == s }

func (t *trees) sum(a, b export.Expr) export.Expr {
	switch {
	case isNumber(a, "0"):
		return b
	case isNumber(b, "0"):
		return a
	}
	t.size++
	if s, ok := a.(export.Sum); ok {
		return append(s[:len(s):len(s)], b)
	}
	return export.Sum{a, b}
}

func (t *trees) product(a, b export.Expr) export.Expr {
	switch {
	case isNumber(a, "0") || isNumber(b, "0"):
		return export.Number("0")
	case isNumber(a, "1"):
		return b
	case isNumber(b, "1"):
		return a
	}
	t.size++
	if s, ok := a.(export.Product); ok {
		return append(s[:len(s):len(s)], b)
	}
	return export.Product{a, b}
}

func neg(a export.Expr) export.Expr {
	if isNumber(a, "0") {
		return a
	}
	if n, ok := a.(export.Negation); ok {
		return n.X
	}
	return export.Negation{X: a}
}

// name is the name of an indeterminate: at frame angle 0, derivatives along the
// coordinates of the frame's plane are those along its axes, and are named so.
func (t *trees) name(v algebra.Var) string {
	name := t.Ring.Name(v)
	s := t.Ring.Symbol(v)
	if t.frame == nil || s.Kind != jet.Derivative || s.Index.Order() == 0 {
		return name
	}
	before, after := t.Ring.Unknowns[s.Place]+"_", ""
	switch s.Side {
	case jet.Mean:
		before, after = "{"+before, "}"
	case jet.Difference:
		before, after = "["+before, "]"
	case jet.PlusSide:
		after = "(+)"
	case jet.MinusSide:
		after = "(-)"
	}
	var along strings.Builder
	for i, k := range s.Index {
		if k == 0 {
			continue
		}
		axis := t.Ring.Coordinates[i]
		for j, p := range t.frame.Plane {
			if i == p {
				axis = t.frame.Axes[j]
			}
		}
		along.WriteString(strings.Repeat(axis, int(k)))
	}
	return before + along.String() + after
}

// variable is an indeterminate of the ring as a tree.
func (t *trees) variable(v algebra.Var) export.Expr {
	if x, ok := t.put[v]; ok {
		return x
	}
	name := t.name(v)
	t.vars[name] = v
	return export.Variable(name)
}

// written is a normal form as a tree.
func (t *trees) written(f algebra.Fraction) export.Expr {
	top := t.writtenPoly(f.Num())
	var below export.Expr = export.Number("1")
	for _, d := range f.DenFactors() {
		b := t.writtenPoly(d.Base)
		if d.Exp > 1 {
			b = export.Power{Base: b, Exp: d.Exp}
		}
		below = t.product(below, b)
	}
	if isNumber(below, "1") {
		return top
	}
	return export.Quotient{Num: top, Den: below}
}

func (t *trees) writtenPoly(p algebra.Poly) export.Expr {
	var sum export.Expr = export.Number("0")
	for m, c := range p.Terms() {
		var x export.Expr = export.Number("1")
		if a := c.Abs(); !a.IsOne() || len(m.Powers()) == 0 {
			x = export.Number(a.String())
		}
		for _, pw := range m.Powers() {
			y := t.variable(pw.Var)
			if pw.Exp > 1 && !isNumber(y, "0") && !isNumber(y, "1") {
				y = export.Power{Base: y, Exp: pw.Exp}
			}
			x = t.product(x, y)
		}
		if c.Sign() < 0 {
			x = neg(x)
		}
		sum = t.sum(sum, x)
	}
	return sum
}

func (t *trees) atom(f algebra.Fraction, err error) (pair, error) {
	if err != nil {
		return pair{}, err
	}
	return t.made(t.written(f), f, nil)
}

// derive applies a derivation, given on indeterminates, to a tree.
func (t *trees) derive(x export.Expr, d func(v algebra.Var) (algebra.Fraction, error)) (export.Expr, error) {
	zero := export.Expr(export.Number("0"))
	if t.size > maxSize {
		return zero, errSize
	}
	switch x := x.(type) {
	case export.Number:
		return zero, nil
	case export.Variable:
		v, ok := t.vars[string(x)]
		if !ok {
			return zero, fmt.Errorf("%w: the name %s", export.ErrUnsupported, x)
		}
		f, err := d(v)
		return t.written(f), err
	case export.Negation:
		y, err := t.derive(x.X, d)
		return neg(y), err
	case export.Sum:
		sum := zero
		for _, y := range x {
			z, err := t.derive(y, d)
			if err != nil {
				return zero, err
			}
			sum = t.sum(sum, z)
		}
		return sum, nil
	case export.Product:
		sum := zero
		for i, y := range x {
			z, err := t.derive(y, d)
			if err != nil {
				return zero, err
			}
			for k, w := range x {
				if k != i {
					z = t.product(z, w)
				}
			}
			sum = t.sum(sum, z)
		}
		return sum, nil
	case export.Power:
		z, err := t.derive(x.Base, d)
		if err != nil || isNumber(z, "0") {
			return zero, err
		}
		var outer export.Expr = export.Number(fmt.Sprint(x.Exp))
		switch {
		case x.Exp == 2:
			outer = t.product(outer, x.Base)
		case x.Exp != 1:
			outer = t.product(outer, export.Power{Base: x.Base, Exp: x.Exp - 1})
		}
		return t.product(outer, z), nil
	case export.Quotient:
		n, err := t.derive(x.Num, d)
		if err != nil {
			return zero, err
		}
		m, err := t.derive(x.Den, d)
		if err != nil {
			return zero, err
		}
		if isNumber(m, "0") {
			if isNumber(n, "0") {
				return zero, nil
			}
			return export.Quotient{Num: n, Den: x.Den}, nil
		}
		top := t.sum(t.product(n, x.Den), neg(t.product(x.Num, m)))
		return export.Quotient{Num: top, Den: export.Power{Base: x.Den, Exp: 2}}, nil
	}
	return zero, fmt.Errorf("%w: a formula of type %T", export.ErrUnsupported, x)
}

// The arithmetic of package entropy.

func (t *trees) Rational(x *big.Rat) pair {
	var e export.Expr = export.Number(new(big.Rat).Abs(x).RatString())
	if x.Sign() < 0 {
		e = neg(e)
	}
	return pair{e, t.Exact.Rational(x)}
}

func (t *trees) Pi() pair                  { p, _ := t.atom(t.Exact.Pi(), nil); return p }
func (t *trees) Coordinate(i int) pair     { p, _ := t.atom(t.Exact.Coordinate(i), nil); return p }
func (t *trees) Constant(name string) pair { p, _ := t.atom(t.Exact.Constant(name), nil); return p }

func (t *trees) Jet(u int, j jet.Index, side jet.Side) (pair, error) {
	return t.atom(t.Exact.Jet(u, j, side))
}

func (t *trees) Normal(i int) (pair, error) { return t.atom(t.Exact.Normal(i)) }

func (t *trees) Add(a, b pair) (pair, error) {
	f, err := t.Exact.Add(a.f, b.f)
	return t.made(t.sum(a.x, b.x), f, err)
}

func (t *trees) Neg(a pair) pair { return pair{neg(a.x), t.Exact.Neg(a.f)} }

func (t *trees) Mul(a, b pair) (pair, error) {
	f, err := t.Exact.Mul(a.f, b.f)
	return t.made(t.product(a.x, b.x), f, err)
}

func (t *trees) Quo(a, b pair) (pair, error) {
	f, err := t.Exact.Quo(a.f, b.f)
	return t.made(export.Quotient{Num: a.x, Den: b.x}, f, err)
}

func (t *trees) Power(a pair, e *big.Rat) (pair, error) {
	f, err := t.Exact.Power(a.f, e)
	if err != nil {
		return pair{}, err
	}
	if !e.IsInt() || !e.Num().IsInt64() {
		return t.made(t.written(f), f, nil)
	}
	n := int(e.Num().Int64())
	switch {
	case n == 0:
		return t.made(export.Number("1"), f, nil)
	case n == 1:
		return t.made(a.x, f, nil)
	case n < 0:
		return t.made(export.Quotient{Num: export.Number("1"), Den: export.Power{Base: a.x, Exp: -n}}, f, nil)
	}
	return t.made(export.Power{Base: a.x, Exp: n}, f, nil)
}

func (t *trees) Function(name string, x pair) (pair, error) {
	return t.atom(t.Exact.Function(name, x.f))
}

func (t *trees) Norm(parts []pair) (pair, error) {
	fs := make([]algebra.Fraction, len(parts))
	for i, p := range parts {
		fs[i] = p.f
	}
	return t.atom(t.Exact.Norm(fs))
}

func (t *trees) Total(x pair, i int) (pair, error) {
	e, err := t.derive(x.x, func(v algebra.Var) (algebra.Fraction, error) { return t.Ring.Total(jet.Of(v), i) })
	if err != nil {
		return pair{}, err
	}
	f, err := t.Exact.Total(x.f, i)
	return t.made(e, f, err)
}

func (t *trees) Sup(angle string, x pair) (pair, error) {
	return t.atom(t.Exact.Sup(angle, x.f))
}

// Euler is Σ_J (-D)_J ∂x/∂u_J.
func (t *trees) Euler(x pair, unknown int) (pair, error) {
	var sum export.Expr = export.Number("0")
	for _, v := range t.Ring.Support(x.f) {
		s := t.Ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Place != unknown {
			continue
		}
		index := s.Index
		e, err := t.derive(x.x, func(w algebra.Var) (algebra.Fraction, error) { return t.Ring.Partial(jet.Of(w), v) })
		if err != nil {
			return pair{}, err
		}
		for i, k := range index {
			for range k {
				if e, err = t.derive(e, func(w algebra.Var) (algebra.Fraction, error) { return t.Ring.Total(jet.Of(w), i) }); err != nil {
					return pair{}, err
				}
			}
		}
		if index.Order()%2 == 1 {
			e = neg(e)
		}
		sum = t.sum(sum, e)
	}
	f, err := t.Exact.Euler(x.f, unknown)
	return t.made(sum, f, err)
}

var _ entropy.Arithmetic[pair] = (*trees)(nil)
