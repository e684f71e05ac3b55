package creases

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/jet"
	"creaseproof/quadrature/certified"
)

// writer writes exact values as operations on a tape, at given places in the
// ranges of the parameters.
type writer struct {
	ring  *jet.Ring
	tape  *certified.Tape
	place map[algebra.Var]certified.Ref // of the parameters
	masks map[algebra.Var]uint8
	done  map[algebra.Var]certified.Ref
	fault string // what has no value
}

func newWriter(ring *jet.Ring, vars []algebra.Var, place []certified.Ref, tape *certified.Tape) *writer {
	w := &writer{ring: ring, tape: tape, place: map[algebra.Var]certified.Ref{}, masks: map[algebra.Var]uint8{}, done: map[algebra.Var]certified.Ref{}}
	for i, v := range vars {
		w.place[v], w.masks[v] = place[i], 1<<i
	}
	return w
}

// mask is the set of parameters that an indeterminate depends on.
func (w *writer) mask(v algebra.Var) uint8 {
	if m, ok := w.masks[v]; ok {
		return m
	}
	var m uint8
	if s := w.ring.Symbol(v); s.Kind >= jet.Cosine {
		for _, u := range s.Arg.Vars() {
			m |= w.mask(u)
		}
	}
	w.masks[v] = m
	return m
}

// group is a part of a polynomial: a monomial in what depends on the
// parameters, times a number.
type group struct {
	mono algebra.Monomial
	coef []algebra.Term
}

// groups splits a polynomial.
func (w *writer) groups(p algebra.Poly) (list []group) {
	at := map[algebra.Monomial]int{}
	for m, c := range p.Terms() {
		var free, fixed []algebra.Power
		for _, pw := range m.Powers() {
			if w.mask(pw.Var) != 0 {
				free = append(free, pw)
			} else {
				fixed = append(fixed, pw)
			}
		}
		mono := algebra.NewMonomial(free...)
		i, ok := at[mono]
		if !ok {
			i = len(list)
			at[mono] = i
			list = append(list, group{mono: mono})
		}
		list[i].coef = append(list[i].coef, algebra.Term{Mono: algebra.NewMonomial(fixed...), Coef: c})
	}
	return list
}

// number encloses a value without parameters.
func (w *writer) number(f algebra.Fraction) certified.Ref {
	x := w.ring.Enclose(f, nil, precision)
	if !x.IsBounded() {
		w.fault = w.ring.Format(f)
		return w.tape.Const(interval.Entire())
	}
	return w.tape.Const(certified.Outward(x))
}

func (w *writer) monomial(m algebra.Monomial) certified.Ref {
	out := w.tape.Const(interval.Point(1))
	for _, pw := range m.Powers() {
		out = w.tape.Mul(out, w.tape.Pow(w.variable(pw.Var), pw.Exp))
	}
	return out
}

func (w *writer) poly(p algebra.Poly) certified.Ref {
	sum := w.tape.Const(interval.Point(0))
	for _, g := range w.groups(p) {
		c := w.number(algebra.FromPoly(algebra.FromTerms(slices.Clone(g.coef))))
		sum = w.tape.Add(sum, w.tape.Mul(c, w.monomial(g.mono)))
	}
	return sum
}

func (w *writer) fraction(f algebra.Fraction) certified.Ref {
	if f.Err() != nil {
		w.fault = f.Err().Error()
		return w.tape.Const(interval.Entire())
	}
	out := w.poly(f.Num())
	for _, d := range f.DenFactors() {
		out = w.tape.Quo(out, w.tape.Pow(w.poly(d.Base), d.Exp))
	}
	return out
}

func (w *writer) variable(v algebra.Var) certified.Ref {
	if r, ok := w.place[v]; ok {
		return r
	}
	if r, ok := w.done[v]; ok {
		return r
	}
	var r certified.Ref
	if w.mask(v) == 0 {
		r = w.number(jet.Of(v))
	} else {
		s := w.ring.Symbol(v)
		a := w.fraction(s.Arg)
		switch s.Kind {
		case jet.Cosine:
			r = w.tape.Cos(a)
		case jet.Sine:
			r = w.tape.Sin(a)
		case jet.Root:
			if t, ok := squareRoot(s.Arg); ok && s.Degree == 2 {
				r = w.tape.Abs(w.poly(t))
				break
			}
			r = w.tape.Root(a, s.Degree)
		case jet.Exponential:
			r = w.tape.Exp(a)
		case jet.Logarithm:
			r = w.tape.Log(a)
		case jet.ErrorFunction:
			r = w.tape.Erf(a)
		}
	}
	w.done[v] = r
	return r
}

// factors writes f as a sum of products of a function of the first parameter
// and one of the second, where the normal form shows that.
func (w *writer) factors(f algebra.Fraction) (list [][2]certified.Ref, ok bool) {
	const most = 24
	one := w.tape.Const(interval.Point(1))
	den := [2]certified.Ref{one, one}
	for _, d := range f.DenFactors() {
		var mask uint8
		for _, v := range d.Base.Vars() {
			mask |= w.mask(v)
		}
		if mask == 3 {
			return nil, false
		}
		k := int(mask >> 1)
		den[k] = w.tape.Mul(den[k], w.tape.Pow(w.poly(d.Base), d.Exp))
	}
	type part struct {
		second algebra.Monomial
		first  []algebra.Term
	}
	var parts []part
	at := map[algebra.Monomial]int{}
	for m, c := range f.Num().Terms() {
		var first, second []algebra.Power
		for _, pw := range m.Powers() {
			switch w.mask(pw.Var) {
			case 3:
				return nil, false
			case 2:
				second = append(second, pw)
			default:
				first = append(first, pw)
			}
		}
		key := algebra.NewMonomial(second...)
		i, known := at[key]
		if !known {
			if len(parts) == most {
				return nil, false
			}
			i = len(parts)
			at[key] = i
			parts = append(parts, part{second: key})
		}
		parts[i].first = append(parts[i].first, algebra.Term{Mono: algebra.NewMonomial(first...), Coef: c})
	}
	for _, p := range parts {
		list = append(list, [2]certified.Ref{
			w.tape.Quo(w.poly(algebra.FromTerms(p.first)), den[0]),
			w.tape.Quo(w.monomial(p.second), den[1]),
		})
	}
	return list, true
}

// squareRoot is a polynomial with the square f, if there is one: its leading
// terms one by one, and the square compared. Written as an absolute value a root
// of a square has narrow enclosures about its zeros.
func squareRoot(f algebra.Fraction) (t algebra.Poly, ok bool) {
	p, ok := f.IsPoly()
	if !ok || p.IsZero() || p.Err() != nil {
		return p, false
	}
	m, c := p.Leading()
	root, ok := jet.SqrtRat(c)
	if !ok {
		return p, false
	}
	var half []algebra.Power
	for _, pw := range m.Powers() {
		if pw.Exp%2 != 0 {
			return p, false
		}
		half = append(half, algebra.Power{Var: pw.Var, Exp: pw.Exp / 2})
	}
	lead := algebra.FromTerms([]algebra.Term{{Mono: algebra.NewMonomial(half...), Coef: root}})
	t = lead
	for range p.Len() {
		rest := p.Sub(t.Mul(t))
		if rest.IsZero() {
			return t, true
		}
		lm, lc := rest.Leading()
		next, ok := algebra.FromTerms([]algebra.Term{{Mono: lm, Coef: lc}}).DivExact(lead.Scale(algebra.Int(2)))
		if !ok {
			return p, false
		}
		t = t.Add(next)
	}
	return t, p.Sub(t.Mul(t)).IsZero()
}
