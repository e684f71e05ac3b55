package identity

import (
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
	"creaseproof/identity/exact"
	"creaseproof/identity/gram"
)

// certified records a claim proved by a certificate that the checker accepted.
func (d *decider) certified(method string, g *exact.Gap, r *reduction, p *gram.Proof, cert *certificate.Certificate) {
	d.Proved(method + ", certificate checked")
	d.Rec.Reduced, d.Rec.Certificate = r.Claim, cert
	switch certificate.WhereMultiplierVanishes(r.Claim, cert) {
	case certificate.Continuity:
		d.Rec.Reason = "the certificate has a multiplier that may vanish; there the claim holds by continuity"
	case certificate.WithTarget:
		d.Rec.Reason = "the certificate has a multiplier that may vanish; there both sides are equal"
	}
	for _, s := range p.Squares {
		d.Rec.Details = append(d.Rec.Details, exact.Short(r.term(s)))
	}
	if len(p.Multiplier) > 0 {
		var m []string
		for _, s := range p.Multiplier {
			m = append(m, r.term(s))
		}
		d.Rec.Details = append(d.Rec.Details, exact.Short("after multiplying the gap by "+d.inverse(g)+strings.Join(m, " + ")))
	} else if f := d.inverse(g); f != "" {
		d.Rec.Details = append(d.Rec.Details, exact.Short("after multiplying the gap by "+strings.TrimSuffix(f, " times ")))
	}
	d.Rec.Equality = r.equality(g, p)
}

// inverse is the factor that cleared denominators, for the record.
func (d *decider) inverse(g *exact.Gap) string {
	if c, ok := g.Factor.IsConst(); ok && c.IsOne() {
		return ""
	}
	inv, ok := g.Factor.Inv()
	if !ok {
		return ""
	}
	return d.Ring.Format(inv) + " times "
}

// term prints weight · factors · base².
func (r *reduction) term(s gram.Square) string {
	w := algebra.Const(s.Weight)
	for _, f := range s.Factors {
		w = w.Mul(r.Positive[f].Poly)
	}
	text := r.Format(w)
	if w.Len() > 1 {
		text = "(" + text + ")"
	}
	if c, ok := s.Base.IsConst(); ok && c.IsOne() {
		return text
	}
	base := r.Format(s.Base)
	if s.Base.Len() > 1 || strings.ContainsAny(base, " ^") {
		base = "(" + base + ")"
	}
	if text == "1" {
		return base + "^2"
	}
	sep := " "
	if strings.Contains(text, "/") && !strings.HasSuffix(text, ")") {
		sep = "*"
	}
	return text + sep + base + "^2"
}

// format prints a polynomial in the names of the reduction.
func (r *reduction) Format(p algebra.Poly) string {
	return r.d.Ring.FormatPolyNamed(p, func(v algebra.Var) string { return r.Names[v] })
}

// equality is the system of squares that must vanish, in reduced echelon form
// over its monomials, and an exact jet at which it does.
func (r *reduction) equality(g *exact.Gap, p *gram.Proof) *Equality {
	var list []algebra.Poly
	for _, s := range p.Squares {
		q := s.Base
		for _, f := range s.Factors {
			if !r.Positive[f].Strict {
				q = q.Mul(r.Positive[f].Poly)
			}
		}
		list = append(list, q)
	}
	r.d.vanishing = list
	list = echelon(list)
	eq := &Equality{Consistent: "unknown"}
	for _, q := range list {
		if _, ok := q.IsConst(); ok {
			return &Equality{Conditions: []string{"never"}, Consistent: "no"}
		}
		eq.Conditions = append(eq.Conditions, r.condition(q))
	}
	if at, ok := r.equalityPoint(g, list); ok {
		eq.Consistent, eq.Jet = "yes", map[string]string{}
		for _, v := range r.Vars {
			if x, ok := at[v]; ok {
				eq.Jet[r.Names[v]] = x.String()
			}
		}
	}
	return eq
}

// echelon brings polynomials to reduced row echelon form over their monomials,
// largest first, without those that vanish.
func echelon(list []algebra.Poly) []algebra.Poly {
	var out []algebra.Poly
	for _, p := range list {
		for _, q := range out {
			p = without(p, q)
		}
		if p.IsZero() || p.Err() != nil {
			continue
		}
		_, p = p.Primitive()
		for i, q := range out {
			_, out[i] = without(q, p).Primitive()
		}
		out = append(out, p)
	}
	return out
}

// without removes the leading monomial of q from p.
func without(p, q algebra.Poly) algebra.Poly {
	lead, c := q.Leading()
	for m, x := range p.Terms() {
		if m == lead {
			f, ok := x.Quo(c)
			if !ok {
				return p
			}
			return p.Sub(q.Scale(f))
		}
	}
	return p
}

// condition prints q = 0, as R = … where the residual stands in it with a
// constant factor.
func (r *reduction) condition(q algebra.Poly) string {
	res := r.d.Claim.Setting.Model.Residual
	if res == nil || r.d.Claim.Jump {
		return r.vanish(q)
	}
	f, err := r.d.In.Scalar(res)
	if err != nil {
		return r.vanish(q)
	}
	for _, v := range f.Num().Vars() {
		if f.Num().Degree(v) != 1 || q.Degree(v) != 1 {
			continue
		}
		a, rest := q.Coeffs(v)[1], algebra.FromPoly(q)
		b := f.Deriv(v)
		k, ok := algebra.FromPoly(a).Quo(b)
		if !ok || slices.ContainsFunc(k.Vars(), func(w algebra.Var) bool { return r.d.Ring.Symbol(w).Kind != jet.Constant }) {
			continue
		}
		rest = rest.Sub(k.Mul(f))
		if rest.Num().Len() >= q.Len() {
			continue
		}
		name := "R"
		if n, ok := res.(*formula.Name); ok {
			name = n.ID
		}
		value, ok := rest.Neg().Quo(k)
		if !ok {
			continue
		}
		return name + " = " + r.formatFraction(value)
	}
	return r.vanish(q)
}

// vanish prints q = 0, without factors that are strictly positive.
func (r *reduction) vanish(q algebra.Poly) string {
	for _, pw := range q.MonomialContent().Powers() {
		if i, _ := r.SignOf(pw.Var); i >= 0 && r.Positive[i].Strict {
			if p, ok := q.DivExact(algebra.Variable(pw.Var).Pow(pw.Exp)); ok {
				q = p
			}
		}
	}
	return r.Format(q) + " = 0"
}

func (r *reduction) formatFraction(f algebra.Fraction) string {
	if p, ok := f.IsPoly(); ok {
		return r.Format(p)
	}
	return "(" + r.Format(f.Num()) + ")/(" + r.Format(f.Den()) + ")"
}

// equalityPoint looks for an exact admissible point where all conditions hold
// and the gap is zero.
func (r *reduction) equalityPoint(g *exact.Gap, list []algebra.Poly) (jet.Point, bool) {
	d := r.d
	pts := d.GapPoints(g)
	for range 60 {
		at := pts.Draw()
		if at == nil {
			continue
		}
		if !pts.OnVariety(at, list) {
			continue
		}
		if d.Consistent(pts, at) && pts.Admissible(at) {
			if x, ok := d.Ring.Exact(g.Value, at); ok && x.IsZero() {
				return at, true
			}
		}
	}
	return nil, false
}
