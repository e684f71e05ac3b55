package exact

import (
	"fmt"
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// NullLagrangian is N = div of a potential: a minor of the Hessian or of the
// Jacobian, times a coefficient with which it still is a divergence.
type NullLagrangian struct {
	Value     algebra.Fraction
	Potential []algebra.Fraction
	Minor     algebra.Fraction
	Coef      algebra.Fraction
}

// AddNull is the gap with Σ x_k N_k added, and the potential of that sum, which
// is checked: the divergence of the potential is the sum, exactly.
func (d *Problem) AddNull(g *Gap, list []NullLagrangian, x []algebra.Rat) (*Gap, []algebra.Fraction, error) {
	if len(list) != len(x) {
		return nil, nil, fmt.Errorf("%d coefficients for %d null Lagrangians", len(x), len(list))
	}
	h := &Gap{Left: g.Left, Right: g.Right, Value: g.Value}
	potential := make([]algebra.Fraction, len(d.Ring.Coordinates))
	var rest algebra.Fraction
	for k, l := range list {
		n := l.Value.Scale(x[k])
		h.Value, rest = h.Value.Add(n), rest.Sub(n)
		for i := range potential {
			potential[i] = potential[i].Add(l.Potential[i].Scale(x[k]))
		}
	}
	for i, p := range potential {
		t, err := d.Ring.Total(p, i)
		if err != nil {
			return nil, nil, err
		}
		rest = rest.Add(t)
	}
	rest, err := d.Ring.Reduce(rest)
	if err != nil {
		return nil, nil, err
	}
	if !rest.IsZero() {
		return nil, nil, fmt.Errorf("%w: a null Lagrangian that is not the divergence of its potential", jet.ErrOutside)
	}
	return h, potential, d.Clear(h)
}

// maxNull bounds the null Lagrangians that are combined.
const maxNull = 60

// Minors lists the minors of the Hessian and of the Jacobian, of order two and
// three, that may be added, times the coefficients that stand in the gap beside
// as many derivatives.
func (d *Problem) Minors(g *Gap) ([]NullLagrangian, error) {
	n := len(d.Ring.Coordinates)
	var out []NullLagrangian
	add := func(m *minor) error {
		for _, c := range d.coefficientsBeside(g, m.order, m.rows()) {
			if len(out) >= maxNull {
				return nil
			}
			l, ok, err := d.nullFrom(m, c)
			if err != nil {
				return err
			}
			if ok && !slices.ContainsFunc(out, func(o NullLagrangian) bool { return o.Value.Equal(l.Value) || o.Value.Equal(l.Value.Neg()) }) {
				out = append(out, l)
			}
		}
		return nil
	}
	for u := range d.Ring.Unknowns {
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
		for _, rows := range triples3(n) {
			for _, cols := range triples3(n) {
				m, err := d.hessianThird(u, rows, cols)
				if err != nil {
					return nil, err
				}
				if err := add(m); err != nil {
					return nil, err
				}
			}
		}
		for w := u + 1; w < len(d.Ring.Unknowns); w++ {
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

// minor is the Jacobian of two functions p, q in the coordinates a, b, and
// f·minor = D_a(F q_b) - D_b(F q_a) with F = ∫ f dp; or, with third set, that of
// three functions in three coordinates, p_a M_bc - p_b M_ac + p_c M_ab with the
// minors M of the other two, which is D_a(p M_bc) - D_b(p M_ac) + D_c(p M_ab).
type minor struct {
	order int // of the derivatives in it
	Value algebra.Fraction
	p, q  algebra.Var
	a, b  int
	third *third
}

// third are the minors M_bc, -M_ac, M_ab of a minor of order three, by the
// coordinate that is left out.
type third struct {
	cols  [3]int
	minor [3]algebra.Fraction
}

func (m *minor) rows() int {
	if m.third != nil {
		return 3
	}
	return 2
}

// triples3 are the increasing triples of coordinates.
func triples3(n int) [][3]int {
	var out [][3]int
	for i := range n {
		for j := i + 1; j < n; j++ {
			for k := j + 1; k < n; k++ {
				out = append(out, [3]int{i, j, k})
			}
		}
	}
	return out
}

func (d *Problem) hessianThird(u int, rows, cols [3]int) (*minor, error) {
	p, err := d.Ring.JetVar(u, jet.Index{}.Plus(rows[0]), jet.NoSide)
	if err != nil {
		return nil, err
	}
	m := &minor{p: p, order: 2, third: &third{cols: cols}}
	for k, c := range cols {
		b, e := cols[(k+1)%3], cols[(k+2)%3]
		// The cyclic order carries the sign, whichever of the two is smaller.
		sub, err := d.hessianMinor(u, rows[1], rows[2], b, e)
		if err != nil {
			return nil, err
		}
		m.third.minor[k] = sub.Value
		pc, err := d.Ring.Total(jet.Of(p), c)
		if err != nil {
			return nil, err
		}
		m.Value = m.Value.Add(pc.Mul(sub.Value))
	}
	m.Value, err = d.Ring.Reduce(m.Value)
	return m, err
}

func (d *Problem) minorOf(p, q algebra.Var, a, b, order int) (*minor, error) {
	m := &minor{p: p, q: q, a: a, b: b, order: order}
	part := func(v algebra.Var, i int) (algebra.Fraction, error) { return d.Ring.Total(jet.Of(v), i) }
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
	m.Value, err = d.Ring.Reduce(pa.Mul(qb).Sub(pb.Mul(qa)))
	return m, err
}

func (d *Problem) hessianMinor(u, i, j, a, b int) (*minor, error) {
	p, err := d.Ring.JetVar(u, jet.Index{}.Plus(i), jet.NoSide)
	if err != nil {
		return nil, err
	}
	q, err := d.Ring.JetVar(u, jet.Index{}.Plus(j), jet.NoSide)
	if err != nil {
		return nil, err
	}
	return d.minorOf(p, q, a, b, 2)
}

func (d *Problem) jacobianMinor(u, w, a, b int) (*minor, error) {
	p, err := d.Ring.JetVar(u, jet.Index{}, jet.NoSide)
	if err != nil {
		return nil, err
	}
	q, err := d.Ring.JetVar(w, jet.Index{}, jet.NoSide)
	if err != nil {
		return nil, err
	}
	return d.minorOf(p, q, a, b, 1)
}

// nullFrom multiplies a minor by a coefficient in the constants and in the two
// functions whose Jacobian it is. Other coefficients spoil the divergence.
func (d *Problem) nullFrom(m *minor, c algebra.Fraction) (NullLagrangian, bool, error) {
	var l NullLagrangian
	if m.Value.IsZero() {
		return l, false, nil
	}
	if c.Den().Has(m.p) {
		return l, false, nil
	}
	if m.third != nil {
		if slices.ContainsFunc(c.Vars(), func(v algebra.Var) bool { return d.Ring.Symbol(v).Kind != jet.Constant }) {
			return l, false, nil
		}
		l = NullLagrangian{Value: c.Mul(m.Value), Minor: m.Value, Coef: c, Potential: make([]algebra.Fraction, len(d.Ring.Coordinates))}
		for k, i := range m.third.cols {
			l.Potential[i] = c.Mul(jet.Of(m.p)).Mul(m.third.minor[k])
		}
		return l, true, nil
	}
	for _, v := range c.Vars() {
		if k := d.Ring.Symbol(v).Kind; k != jet.Constant && v != m.p && v != m.q {
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
	l = NullLagrangian{Value: c.Mul(m.Value), Minor: m.Value, Coef: c, Potential: make([]algebra.Fraction, len(d.Ring.Coordinates))}
	qa, err := d.Ring.Total(jet.Of(m.q), m.a)
	if err != nil {
		return l, false, err
	}
	qb, err := d.Ring.Total(jet.Of(m.q), m.b)
	if err != nil {
		return l, false, err
	}
	l.Potential[m.a] = f.Mul(qb)
	l.Potential[m.b] = f.Mul(qa).Neg()
	return l, true, nil
}

// coefficientsBeside are the monomials in constants and lower jets that stand
// beside products of so many derivatives of the given order in the gap.
func (d *Problem) coefficientsBeside(g *Gap, order, factors int) []algebra.Fraction {
	var out []algebra.Fraction
	den := algebra.FromFactors(algebra.Const(algebra.Int(1)), g.Value.DenFactors())
	for m := range g.Value.Num().Terms() {
		var rest []algebra.Power
		degree := 0
		for _, pw := range m.Powers() {
			s := d.Ring.Symbol(pw.Var)
			switch {
			case s.Kind == jet.Derivative && s.Index.Order() == order:
				degree += pw.Exp
			case s.Kind == jet.Cosine || s.Kind == jet.Sine:
			default:
				rest = append(rest, pw)
			}
		}
		if degree != factors {
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

// FormatNull prints N = Σ x_k coef_k minor_k, with the name of a named formula in
// place of a minor, or of a sum of minors with one coefficient, that it equals.
func (d *Problem) FormatNull(list []NullLagrangian, x []algebra.Rat) string {
	type group struct {
		Coef  algebra.Fraction
		Minor algebra.Fraction
	}
	var groups []group
next:
	for k, l := range list {
		if x[k].IsZero() {
			continue
		}
		c := l.Coef.Scale(x[k])
		for i := range groups {
			if groups[i].Coef.Equal(c) {
				groups[i].Minor = groups[i].Minor.Add(l.Minor)
				continue next
			}
		}
		groups = append(groups, group{c, l.Minor})
	}
	var b strings.Builder
	b.WriteString("N = ")
	for i, gr := range groups {
		name := "(" + d.Ring.Format(gr.Minor) + ")"
		for _, let := range sortedLets(d.Claim.Setting.Lets) {
			if v, err := d.In.Scalar(d.Claim.Setting.Lets[let]); err == nil && v.Equal(gr.Minor) {
				name = let
				break
			}
		}
		c := d.Ring.Format(gr.Coef)
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

// FormatPotential says whose divergence N is.
func (d *Problem) FormatPotential(potential []algebra.Fraction) string {
	var parts []string
	for i, p := range potential {
		parts = append(parts, d.Ring.Coordinates[i]+": "+d.Ring.Format(p))
	}
	return "N = div of (" + strings.Join(parts, ", ") + "), so its integral is a boundary term"
}
