package identity

import (
	"fmt"
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/gram"
	"creaseproof/identity/squares"
)

// nullLagrangian is N = div of a potential: a minor of the Hessian or of the
// Jacobian, times a coefficient with which it still is a divergence.
type nullLagrangian struct {
	value     algebra.Fraction
	potential []algebra.Fraction
	minor     algebra.Fraction
	coef      algebra.Fraction
}

// maxNull bounds the null Lagrangians that are combined.
const maxNull = 60

// upToDivergence decides A <= B up to a divergence: it looks for a combination
// N of minors, each the divergence of a potential, with gap + N >= 0 for all
// jets, and reports N.
func (d *decider) upToDivergence() error {
	if len(d.claim.Given) > 0 || d.claim.Jump || len(d.claim.Modulo) > 0 {
		return fmt.Errorf("a claim up to a divergence is about all smooth u: take `given`, `at` and other `modulo` away")
	}
	g, err := d.gap()
	if err != nil {
		return err
	}
	if ok, err := d.withNull(g, nil, nil); err != nil || ok {
		if ok {
			d.rec.Solution = "N = 0"
		}
		return err
	}
	list, err := d.minors(g)
	if err != nil {
		return err
	}
	if len(list) > 0 {
		if x, ok := d.fitNull(g, list); ok {
			for _, try := range roundings(x) {
				if ok, err := d.withNull(g, list, try); err != nil || ok {
					return err
				}
			}
		}
	}
	if err := d.ctx.Err(); err != nil {
		return err
	}
	d.rec.Details = nil
	d.open("no combination of minors was found that makes the gap non-negative for all jets")
	// What is known pointwise, which is no refutation of the claim.
	pts := d.gapPoints(g)
	if at, ok := d.cheapCounterexample(g, pts); ok {
		d.rec.Reason += "; pointwise, without a divergence, the inequality fails at the witness, which does not refute it up to a divergence"
		d.witness(at, g.left, g.right)
	}
	return nil
}

// cheapCounterexample is a point at which the gap is negative, from completed
// squares and from small rational points.
func (d *decider) cheapCounterexample(g *gap, pts *points) (jet.Point, bool) {
	res := squares.Complete(d.ctx, d.ring, g.poly, d.squareVars(g.poly))
	for _, rest := range res.Rests {
		value := algebra.FromPoly(rest.Poly)
		for range 60 {
			at, ok := pts.next()
			if !ok {
				return nil, false
			}
			if s, ok := d.ring.Sign(value, at); ok && s < 0 && d.lift(rest.Steps, at) && d.falseAt(g, pts, at) {
				return d.simplify(g, pts, at), true
			}
		}
	}
	for range 200 {
		at, ok := pts.next()
		if !ok {
			return nil, false
		}
		if d.falseAt(g, pts, at) {
			return d.simplify(g, pts, at), true
		}
	}
	return nil, false
}

// withNull tries to prove gap + Σ x_k N_k >= 0, and on success records N.
func (d *decider) withNull(g *gap, list []nullLagrangian, x []algebra.Rat) (bool, error) {
	h := &gap{left: g.left, right: g.right, value: g.value}
	var n algebra.Fraction
	potential := make([]algebra.Fraction, len(d.ring.Coordinates))
	for k, l := range list {
		n = n.Add(l.value.Scale(x[k]))
		for i := range potential {
			potential[i] = potential[i].Add(l.potential[i].Scale(x[k]))
		}
	}
	h.value = h.value.Add(n)
	if err := d.clear(h); err != nil {
		return false, err
	}
	if h.value.IsZero() {
		d.proved("exact normal form: both sides are equal up to a divergence")
	} else {
		if err := d.removeAngle(h); err != nil {
			return false, err
		}
		res := squares.Complete(d.ctx, d.ring, h.poly, d.squareVars(h.poly))
		ok, err := d.prove(h, res.Terms)
		if err != nil || !ok {
			return false, err
		}
	}
	if len(list) == 0 {
		return true, nil
	}
	// N is the divergence of its potential: exactly, or it is not used.
	rest := n.Neg()
	for i, p := range potential {
		t, err := d.ring.Total(p, i)
		if err != nil {
			return false, err
		}
		rest = rest.Add(t)
	}
	rest, err := d.ring.Reduce(rest)
	if err != nil || !rest.IsZero() {
		return false, err
	}
	d.rec.Solution = "N = " + d.formatNull(list, x)
	var parts []string
	for i, p := range potential {
		parts = append(parts, d.ring.Coordinates[i]+": "+d.ring.Format(p))
	}
	d.rec.Details = append(d.rec.Details, "N = div of ("+strings.Join(parts, ", ")+"), so its integral is a boundary term")
	return true, nil
}

// formatNull prints Σ x_k coef_k minor_k, with the name of a named formula in
// place of a minor, or of a sum of minors with one coefficient, that it equals.
func (d *decider) formatNull(list []nullLagrangian, x []algebra.Rat) string {
	type group struct {
		coef  algebra.Fraction
		minor algebra.Fraction
	}
	var groups []group
next:
	for k, l := range list {
		if x[k].IsZero() {
			continue
		}
		c := l.coef.Scale(x[k])
		for i := range groups {
			if groups[i].coef.Equal(c) {
				groups[i].minor = groups[i].minor.Add(l.minor)
				continue next
			}
		}
		groups = append(groups, group{c, l.minor})
	}
	var b strings.Builder
	for i, gr := range groups {
		name := "(" + d.ring.Format(gr.minor) + ")"
		for _, let := range sortedLets(d.claim.Setting.Lets) {
			if v, err := d.in.Scalar(d.claim.Setting.Lets[let]); err == nil && v.Equal(gr.minor) {
				name = let
				break
			}
		}
		c := d.ring.Format(gr.coef)
		if i > 0 {
			if strings.HasPrefix(c, "-") {
				b.WriteString(" - ")
				c = c[1:]
			} else {
				b.WriteString(" + ")
			}
		}
		switch {
		case c == "1":
			b.WriteString(name)
		case c == "-1":
			b.WriteString("-" + name)
		case strings.Contains(c, "/") || strings.Contains(c, " + "):
			b.WriteString("(" + c + ") " + name)
		default:
			b.WriteString(c + " " + name)
		}
	}
	return b.String()
}

func sortedLets[V any](m map[string]V) []string {
	out := make([]string, 0, len(m))
	for k := range m {
		out = append(out, k)
	}
	slices.Sort(out)
	return out
}

// fitNull finds, numerically, a combination with which the gap is a sum of
// squares. With a frame angle it looks at angle 0, which is necessary.
func (d *decider) fitNull(g *gap, list []nullLagrangian) ([]float64, bool) {
	h := *g
	value := g.value
	sub := map[algebra.Var]algebra.Fraction{}
	if f := d.claim.Setting.Frame; f != nil {
		if c, s, ok := d.frameAngle(f.Angle); ok {
			sub[c], sub[s] = jet.Whole(1), algebra.Fraction{}
		}
	}
	h.value = value.SubstMany(sub)
	if d.clear(&h) != nil {
		return nil, false
	}
	var free []algebra.Poly
	for _, l := range list {
		f, ok := l.value.SubstMany(sub).Quo(h.factor)
		if !ok {
			return nil, false
		}
		p, ok := f.IsPoly()
		if !ok {
			return nil, false
		}
		free = append(free, p)
	}
	r := d.reduce(&h)
	effort, _ := gram.Efforts(d.opt.Effort)
	return gram.Fit(d.ctx, r.problemFor(h.poly), free, nil, effort)
}

// roundings are vectors of rationals near x, from coarse to fine.
func roundings(x []float64) [][]algebra.Rat {
	var out [][]algebra.Rat
	for level := range 5 {
		v := make([]algebra.Rat, len(x))
		ok := true
		for k, y := range x {
			c := gram.Recognise(y)
			if len(c) == 0 {
				ok = false
				break
			}
			v[k] = c[max(0, len(c)-1-level)]
		}
		if ok && !slices.ContainsFunc(out, func(w []algebra.Rat) bool {
			return slices.EqualFunc(v, w, func(a, b algebra.Rat) bool { return a.Equal(b) })
		}) {
			out = append(out, v)
		}
	}
	return out
}

// minors lists the minors of order two (and three, in the Hessian) that may be
// added, times the coefficients that the quadratic part of the gap shows.
func (d *decider) minors(g *gap) ([]nullLagrangian, error) {
	n := len(d.ring.Coordinates)
	var out []nullLagrangian
	add := func(m *minor) error {
		for _, c := range d.quadraticCoefficients(g, m.order) {
			if len(out) >= maxNull {
				return nil
			}
			l, ok, err := d.nullFrom(m, c)
			if err != nil {
				return err
			}
			if ok && !slices.ContainsFunc(out, func(o nullLagrangian) bool { return o.value.Equal(l.value) || o.value.Equal(l.value.Neg()) }) {
				out = append(out, l)
			}
		}
		return nil
	}
	for u := range d.ring.Unknowns {
		for i := range n {
			for j := i + 1; j < n; j++ {
				for a := range n {
					for b := a + 1; b < n; b++ {
						m, err := d.hessianMinor(u, i, j, a, b)
						if err != nil {
							return nil, err
						}
						if err := add(m); err != nil {
							return nil, err
						}
					}
				}
			}
		}
		for w := u + 1; w < len(d.ring.Unknowns); w++ {
			for i := range n {
				for j := i + 1; j < n; j++ {
					m, err := d.jacobianMinor(u, w, i, j)
					if err != nil {
						return nil, err
					}
					if err := add(m); err != nil {
						return nil, err
					}
				}
			}
		}
	}
	return out, nil
}

// minor is f·minor = D_a(F q_b) - D_b(F q_a) with F = ∫ f dp: p and q are two
// functions whose Jacobian in the coordinates a, b it is.
type minor struct {
	order int // of the derivatives in it
	value algebra.Fraction
	p, q  algebra.Var
	a, b  int
}

func (d *decider) minorOf(p, q algebra.Var, a, b, order int) (*minor, error) {
	m := &minor{p: p, q: q, a: a, b: b, order: order}
	part := func(v algebra.Var, i int) (algebra.Fraction, error) { return d.ring.Total(jet.Of(v), i) }
	pa, err := part(p, a)
	if err != nil {
		return nil, err
	}
	qb, err := part(q, b)
	if err != nil {
		return nil, err
	}
	pb, err := part(p, b)
	if err != nil {
		return nil, err
	}
	qa, err := part(q, a)
	if err != nil {
		return nil, err
	}
	m.value, err = d.ring.Reduce(pa.Mul(qb).Sub(pb.Mul(qa)))
	return m, err
}

func (d *decider) hessianMinor(u, i, j, a, b int) (*minor, error) {
	p, err := d.ring.JetVar(u, jet.Index{}.Plus(i), jet.NoSide)
	if err != nil {
		return nil, err
	}
	q, err := d.ring.JetVar(u, jet.Index{}.Plus(j), jet.NoSide)
	if err != nil {
		return nil, err
	}
	return d.minorOf(p, q, a, b, 2)
}

func (d *decider) jacobianMinor(u, w, a, b int) (*minor, error) {
	p, err := d.ring.JetVar(u, jet.Index{}, jet.NoSide)
	if err != nil {
		return nil, err
	}
	q, err := d.ring.JetVar(w, jet.Index{}, jet.NoSide)
	if err != nil {
		return nil, err
	}
	return d.minorOf(p, q, a, b, 1)
}

// nullFrom multiplies a minor by a coefficient in the constants and in the two
// functions whose Jacobian it is. Other coefficients spoil the divergence.
func (d *decider) nullFrom(m *minor, c algebra.Fraction) (nullLagrangian, bool, error) {
	var l nullLagrangian
	if m.value.IsZero() {
		return l, false, nil
	}
	for _, v := range c.Vars() {
		if k := d.ring.Symbol(v).Kind; k != jet.Constant && v != m.p && v != m.q {
			return l, false, nil
		}
	}
	// F = ∫ f dp, f polynomial in p.
	num := c.Num()
	var integral algebra.Poly
	for e, co := range num.Coeffs(m.p) {
		integral = integral.Add(co.Mul(algebra.Variable(m.p).Pow(e + 1)).Scale(algebra.Frac64(1, int64(e+1))))
	}
	f := algebra.FromFactors(integral, c.DenFactors())
	l = nullLagrangian{value: c.Mul(m.value), minor: m.value, coef: c, potential: make([]algebra.Fraction, len(d.ring.Coordinates))}
	qa, err := d.ring.Total(jet.Of(m.q), m.a)
	if err != nil {
		return l, false, err
	}
	qb, err := d.ring.Total(jet.Of(m.q), m.b)
	if err != nil {
		return l, false, err
	}
	l.potential[m.a] = f.Mul(qb)
	l.potential[m.b] = f.Mul(qa).Neg()
	return l, true, nil
}

// quadraticCoefficients are the monomials in constants and lower jets that
// stand beside products of two derivatives of the given order in the gap.
func (d *decider) quadraticCoefficients(g *gap, order int) []algebra.Fraction {
	var out []algebra.Fraction
	den := algebra.FromFactors(algebra.Const(algebra.Int(1)), g.value.DenFactors())
	for m := range g.value.Num().Terms() {
		var rest []algebra.Power
		degree := 0
		for _, pw := range m.Powers() {
			s := d.ring.Symbol(pw.Var)
			switch {
			case s.Kind == jet.Derivative && s.Index.Order() == order:
				degree += pw.Exp
			case s.Kind == jet.Cosine || s.Kind == jet.Sine:
			default:
				rest = append(rest, pw)
			}
		}
		if degree != 2 {
			continue
		}
		c := algebra.FromPoly(algebra.FromTerms([]algebra.Term{{Mono: algebra.NewMonomial(rest...), Coef: algebra.Int(1)}})).Mul(den)
		if content, p := c.Num().Primitive(); !content.IsOne() {
			c = algebra.FromFactors(p, c.DenFactors())
		}
		// The denominator may hold a number; only the shape matters.
		if !slices.ContainsFunc(out, func(o algebra.Fraction) bool {
			q, ok := o.Quo(c)
			if !ok {
				return false
			}
			_, same := q.IsConst()
			return same
		}) {
			out = append(out, c)
		}
	}
	return out
}
