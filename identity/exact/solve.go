package exact

import (
	"fmt"
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// solveFor finds the constants of claim.Solve that make every value zero, for
// all jets and coordinates: the coefficients of all monomials in these must
// vanish, which is a linear system over the rational functions of the other
// constants. Solutions must not depend on jets, and are put in. It returns the
// values with the solution in place (zero, then, unless something is wrong:
// the caller still looks). Where there is none the record says so.
func (d *Problem) solveFor(gaps []algebra.Fraction) ([]algebra.Fraction, error) {
	unknown := make([]algebra.Var, len(d.Claim.Solve))
	for i, name := range d.Claim.Solve {
		unknown[i] = d.Ring.ConstantVar(name)
	}
	rows, err := d.coefficients(gaps, unknown)
	if err != nil {
		return nil, err
	}
	if len(rows) == 0 { // nothing is asked of the unknowns
		rows = append(rows, algebra.Poly{})
	}
	a := make([][]algebra.Fraction, 0, len(rows))
	b := make([]algebra.Fraction, 0, len(rows))
	for _, p := range rows {
		row := make([]algebra.Fraction, len(unknown))
		rest := p
		for i, v := range unknown {
			if p.Degree(v) > 1 {
				return d.solveNonlinear(gaps, rows, unknown)
			}
			c := p.Deriv(v)
			if slices.ContainsFunc(unknown, c.Has) {
				return d.solveNonlinear(gaps, rows, unknown)
			}
			row[i] = algebra.FromPoly(c)
			rest = rest.Sub(c.Mul(algebra.Variable(v)))
		}
		a, b = append(a, row), append(b, algebra.FromPoly(rest.Neg()))
	}
	x, ok, err := d.solveReduced(a, b)
	if err != nil {
		return nil, err
	}
	if !ok && (d.pinned() || !d.independent(gaps...)) {
		return d.solveAtPoints(gaps, unknown)
	}
	if !ok {
		d.Rec.Verdict = claim.Refuted
		d.Rec.Method = "linear system of the coefficients, exact"
		d.Rec.Solution = "none"
		d.Rec.Reason = "no value of " + strings.Join(d.Claim.Solve, ", ") + " makes the claim true: the linear system of the coefficients has no solution"
		return nil, nil
	}
	if d.contradicted() {
		return d.solveAtPoints(gaps, unknown)
	}
	free := d.undetermined(a, len(unknown))
	var parts []string
	sub := map[algebra.Var]algebra.Fraction{}
	for i, v := range unknown {
		if free[i] {
			parts = append(parts, d.Claim.Solve[i]+" free")
			sub[v] = x[i] // one solution stands for all; the others differ by free parameters
			continue
		}
		parts = append(parts, d.Claim.Solve[i]+" = "+d.Ring.Format(x[i]))
		sub[v] = x[i]
	}
	d.Rec.Solution = strings.Join(parts, ", ")
	if slices.Contains(free, false) && d.pinned() && !d.determined(gaps, unknown, free) {
		d.Open("%s makes the claim true, but equations and assumptions hold the jets where other values may do so too", d.Rec.Solution)
		return nil, nil
	}
	if !slices.Contains(free, true) {
		if ok, err := d.allowed(sub); err != nil || !ok {
			d.forbidden()
			return nil, err
		}
	}
	return d.substitute(gaps, sub)
}

// forbidden refutes a claim whose only solution contradicts an assumption.
func (d *Problem) forbidden() {
	d.Rec.Verdict, d.Rec.Method = claim.Refuted, "coefficients and assumptions, exact"
	d.Rec.Reason = "what makes all coefficients vanish, " + d.Rec.Solution + ", contradicts an assumption"
	d.Rec.Solution = "none"
}

// allowed reports whether values of the unknowns may satisfy the assumptions.
// Where that depends on other constants the record says so.
func (d *Problem) allowed(sub map[algebra.Var]algebra.Fraction) (bool, error) {
	for _, c := range d.Assumed {
		if !slices.ContainsFunc(d.Ring.Support(c.Value), func(v algebra.Var) bool { _, ok := sub[v]; return ok }) {
			continue
		}
		f, err := d.Ring.Reduce(c.Value.SubstMany(sub))
		if err != nil {
			return false, err
		}
		switch s, ok := d.Ring.Sign(f, nil); {
		case ok:
			if !(Constraint{jet.Whole(int64(s)), c.Relation}).holds(d.Ring, nil) {
				return false, nil
			}
		case d.Ring.VisiblyPositive(f) && c.Relation[0] == '<', d.Ring.VisiblyPositive(f.Neg()) && c.Relation[0] == '>':
			return false, nil
		default:
			d.Rec.Assumptions = append(d.Rec.Assumptions, d.Ring.Format(f)+" "+c.Relation+" 0")
		}
	}
	return true, nil
}

func (d *Problem) substitute(gaps []algebra.Fraction, sub map[algebra.Var]algebra.Fraction) ([]algebra.Fraction, error) {
	out := make([]algebra.Fraction, len(gaps))
	for i, g := range gaps {
		f, err := d.Ring.Reduce(g.SubstMany(sub))
		if err != nil {
			return nil, err
		}
		out[i] = f
	}
	return out, nil
}

// fixed reports whether an indeterminate is a number or a constant that the
// solution may depend on: not the angle of the frame, for the solution holds
// at every angle.
func (d *Problem) fixed(v algebra.Var) bool {
	s := d.Ring.Symbol(v)
	switch frame := d.Claim.Setting.Frame; {
	case s.Kind == jet.Constant:
		return frame == nil || s.Name != frame.Angle
	case s.Kind == jet.Pi:
		return true
	case s.Kind >= jet.Cosine:
		one, ok := s.Arg.IsConst()
		if s.Kind == jet.Root && ok && one.IsOne() {
			return false // an orientation takes both signs
		}
		return !slices.ContainsFunc(d.Ring.Support(s.Arg), func(w algebra.Var) bool { return !d.fixed(w) })
	}
	return false
}

// coefficients lists the coefficients of the numerators over monomials in all
// that varies: jets, coordinates, the angle of the frame, and kernels of them.
// They are polynomials in what is fixed.
func (d *Problem) coefficients(gaps []algebra.Fraction, unknown []algebra.Var) ([]algebra.Poly, error) {
	for _, k := range d.Ring.Kernels(gaps...) {
		for _, v := range d.Ring.Support(d.Ring.Symbol(k).Arg) {
			if slices.Contains(unknown, v) {
				return nil, fmt.Errorf("%w: solving for %s inside %s", jet.ErrOutside, d.Ring.Name(v), d.Ring.Name(k))
			}
		}
	}
	var out []algebra.Poly
	for _, g := range gaps {
		rest, err := d.onIdeal(g)
		if err != nil {
			return nil, err
		}
		for _, f := range g.DenFactors() {
			if slices.ContainsFunc(unknown, f.Base.Has) {
				return nil, fmt.Errorf("%w: solving for a constant in a denominator", jet.ErrOutside)
			}
		}
		groups := map[algebra.Monomial][]algebra.Term{}
		var keys []algebra.Monomial
		for m, c := range d.onAssumed(rest.Num(), unknown...).Terms() {
			var varying, constant []algebra.Power
			for _, pw := range m.Powers() {
				if d.fixed(pw.Var) {
					constant = append(constant, pw)
				} else {
					varying = append(varying, pw)
				}
			}
			key := algebra.NewMonomial(varying...)
			if _, ok := groups[key]; !ok {
				keys = append(keys, key)
			}
			groups[key] = append(groups[key], algebra.Term{Mono: algebra.NewMonomial(constant...), Coef: c})
		}
		for _, k := range keys {
			out = append(out, algebra.FromTerms(groups[k]))
		}
	}
	return out, nil
}

// undetermined marks the unknowns that the system leaves free: those whose
// column is a combination of the columns before them.
func (d *Problem) undetermined(a [][]algebra.Fraction, n int) []bool {
	free := make([]bool, n)
	for i := range n {
		// Column i = combination of the other columns?
		lhs := make([][]algebra.Fraction, len(a))
		rhs := make([]algebra.Fraction, len(a))
		for r, row := range a {
			lhs[r] = slices.Concat(row[:i], row[i+1:])
			rhs[r] = row[i]
		}
		_, ok, err := d.solveReduced(lhs, rhs)
		free[i] = ok && err == nil
	}
	return free
}

// solveNonlinear handles one unknown: the rational roots common to all
// coefficients that are polynomials in it alone.
func (d *Problem) solveNonlinear(gaps []algebra.Fraction, rows []algebra.Poly, unknown []algebra.Var) ([]algebra.Fraction, error) {
	if len(unknown) != 1 {
		return nil, fmt.Errorf("%w: the coefficients are not linear in %s", jet.ErrOutside, strings.Join(d.Claim.Solve, ", "))
	}
	v := unknown[0]
	var first algebra.Poly
	for _, p := range rows {
		if vs := p.Vars(); len(vs) == 1 && vs[0] == v && (first.IsZero() || p.Degree(v) < first.Degree(v)) {
			first = p
		}
	}
	if first.IsZero() {
		return nil, fmt.Errorf("%w: no coefficient holds %s alone", jet.ErrOutside, d.Claim.Solve[0])
	}
	roots, complete := rationalRoots(first, v)
	var good []string
	var kept []algebra.Fraction
	for _, x := range roots {
		sub, err := d.substitute(gaps, map[algebra.Var]algebra.Fraction{v: jet.Rational(x.Big())})
		if err != nil {
			return nil, err
		}
		all := true
		for _, g := range sub {
			rest, err := d.onIdeal(g)
			if err != nil {
				return nil, err
			}
			all = all && d.onAssumed(rest.Num()).IsZero()
		}
		if all {
			if all, err = d.allowed(map[algebra.Var]algebra.Fraction{v: jet.Rational(x.Big())}); err != nil {
				return nil, err
			}
		}
		if all {
			good = append(good, d.Claim.Solve[0]+" = "+x.String())
			kept = sub
		}
	}
	switch {
	case !complete:
		return nil, fmt.Errorf("%w: %s solves an equation with roots that are not rational", jet.ErrOutside, d.Claim.Solve[0])
	case len(good) == 0 && (d.pinned() || !d.independent(gaps...)):
		return nil, fmt.Errorf("%w: no rational value solves the normal form, but kernels in it may depend on each other", jet.ErrOutside)
	case len(good) == 0:
		d.Rec.Verdict, d.Rec.Method, d.Rec.Solution = claim.Refuted, "rational roots of the coefficients, exact", "none"
		d.Rec.Reason = "no value of " + d.Claim.Solve[0] + " makes all coefficients vanish"
		return nil, nil
	}
	d.Rec.Solution = strings.Join(good, " or ")
	if d.pinned() {
		d.Open("%s makes the claim true, but equations and assumptions hold the jets where other values may do so too", d.Rec.Solution)
		return nil, nil
	}
	return kept, nil
}

// rationalRoots are the distinct rational roots of a polynomial in v alone;
// complete is false where it may have real roots that are not rational.
func rationalRoots(p algebra.Poly, v algebra.Var) (roots []algebra.Rat, complete bool) {
	for p.Degree(v) > 0 {
		co := p.Coeffs(v)
		if co[0].IsZero() {
			roots = appendNew(roots, algebra.Rat{})
			p, _ = p.DivExact(algebra.Variable(v))
			continue
		}
		if p.Degree(v) <= 2 {
			x, ok := rationalRoot(p, v, false)
			if !ok {
				a, _ := co[p.Degree(v)].IsConst()
				c, _ := co[0].IsConst()
				b, _ := co[1].IsConst()
				disc := b.Mul(b).Sub(algebra.Int(4).Mul(a).Mul(c))
				return roots, p.Degree(v) == 2 && disc.Sign() < 0
			}
			roots = appendNew(roots, x)
			if y, ok := rationalRoot(p, v, true); ok && p.Degree(v) == 2 {
				roots = appendNew(roots, y)
			}
			return roots, true
		}
		_, prim := p.Primitive()
		x, ok := divisorRoot(prim, v)
		if !ok {
			return roots, false
		}
		roots = appendNew(roots, x)
		q, ok := p.DivExact(algebra.Variable(v).Sub(algebra.Const(x)))
		if !ok {
			return roots, false
		}
		p = q
	}
	return roots, true
}

func appendNew(list []algebra.Rat, x algebra.Rat) []algebra.Rat {
	if slices.ContainsFunc(list, x.Equal) {
		return list
	}
	return append(list, x)
}

// divisorRoot tries the quotients of small divisors of the end coefficients.
func divisorRoot(p algebra.Poly, v algebra.Var) (algebra.Rat, bool) {
	co := p.Coeffs(v)
	c0, _ := co[0].IsConst()
	cn, _ := co[len(co)-1].IsConst()
	n0, ok0 := c0.Abs().Int64()
	nn, okn := cn.Abs().Int64()
	if !ok0 || !okn {
		return algebra.Rat{}, false
	}
	const limit = 2000
	for a := int64(1); a <= min(n0, limit); a++ {
		if n0%a != 0 {
			continue
		}
		for b := int64(1); b <= min(nn, limit); b++ {
			if nn%b != 0 {
				continue
			}
			for _, x := range []algebra.Rat{algebra.Frac64(a, b), algebra.Frac64(-a, b)} {
				if y, ok := p.Eval(func(algebra.Var) algebra.Rat { return x }); ok && y.IsZero() {
					return x, true
				}
			}
		}
	}
	return algebra.Rat{}, false
}
