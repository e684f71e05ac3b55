package exact

import (
	"fmt"
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// span decides span(F1, F2, …) = F: F is a combination of the generators with
// coefficients that depend on the angles and constants only. The monomials of
// the components in jets and coordinates give a linear system for them, over
// the exact field of trigonometric polynomials and roots.
func (d *Problem) span() error {
	st := d.Claim.Statement
	target, err := d.In.Field(st.Field)
	if err != nil {
		return err
	}
	var a [][]algebra.Fraction
	var b []algebra.Fraction
	rows := map[string]int{}
	row := func(comp int, m algebra.Monomial) int {
		key := fmt.Sprint(comp, " ", m.String(d.Ring.Name))
		i, ok := rows[key]
		if !ok {
			i = len(a)
			rows[key] = i
			a = append(a, make([]algebra.Fraction, len(st.Generators)))
			b = append(b, algebra.Fraction{})
		}
		return i
	}
	all := [][]algebra.Fraction{target}
	for _, g := range st.Generators {
		v, err := d.In.Field(g)
		if err != nil {
			return err
		}
		all = append(all, v)
	}
	for k, v := range all {
		for comp, f := range v {
			if err := d.split(f, func(m algebra.Monomial, c algebra.Fraction) {
				i := row(comp, m)
				if k == 0 {
					b[i] = b[i].Add(c)
				} else {
					a[i][k-1] = a[i][k-1].Add(c)
				}
			}); err != nil {
				return err
			}
		}
	}
	for i := range a {
		for k := range a[i] {
			if a[i][k], err = d.Ring.Reduce(a[i][k]); err != nil {
				return err
			}
		}
		if b[i], err = d.Ring.Reduce(b[i]); err != nil {
			return err
		}
	}
	x, ok, err := d.solveReduced(a, b)
	if err != nil {
		return err
	}
	names := make([]string, len(st.Generators))
	for k, g := range st.Generators {
		names[k] = formula.Text(g)
	}
	if !ok && d.pinned() || !ok && !d.independent(slices.Concat(all...)...) {
		d.Open("the linear system of the coefficients has no solution in normal form, but kernels in it may depend on each other")
		return nil
	}
	if !ok {
		d.Rec.Verdict = claim.Refuted
		d.Rec.Method = "linear algebra on the coefficients, exact"
		d.Rec.Solution = "none"
		d.Rec.Reason = formula.Text(st.Field) + " is no combination of " + strings.Join(names, ", ") + ": the linear system of the coefficients has no solution"
		return nil
	}
	var parts []string
	for k := range x {
		parts = append(parts, coefficient(d.Ring.FormatHarmonic(x[k]))+names[k])
		d.Rec.Coefficients = append(d.Rec.Coefficients, d.Ring.FormatHarmonic(x[k]))
	}
	d.Rec.Solution = formula.Text(st.Field) + " = " + strings.Join(parts, " + ")
	d.Proved("linear algebra on the coefficients, exact")
	return nil
}

// coefficient brackets a printed factor where it is a sum.
func coefficient(s string) string {
	if strings.ContainsAny(s, "+-/") {
		return "(" + s + ") "
	}
	return s + " "
}

// split hands out the coefficients of f over monomials in jets and
// coordinates. The coefficients hold constants and kernels of constants.
func (d *Problem) split(f algebra.Fraction, yield func(algebra.Monomial, algebra.Fraction)) error {
	for _, k := range f.Vars() {
		if s := d.Ring.Symbol(k); s.Kind >= jet.Cosine {
			for _, v := range d.Ring.Support(s.Arg) {
				if d.Ring.Symbol(v).Kind != jet.Constant && d.Ring.Symbol(v).Kind != jet.Pi {
					return fmt.Errorf("%w: a span of fields with %s in them", jet.ErrOutside, s.Name)
				}
			}
		}
	}
	varies := func(v algebra.Var) bool {
		k := d.Ring.Symbol(v).Kind
		return k == jet.Derivative || k == jet.Coordinate
	}
	for _, v := range f.Den().Vars() {
		if varies(v) {
			return fmt.Errorf("%w: a span of fields that are not polynomial in the jet", jet.ErrOutside)
		}
	}
	one := algebra.FromFactors(algebra.Const(algebra.Int(1)), f.DenFactors())
	for m, c := range f.Num().Terms() {
		var vary, rest []algebra.Power
		for _, pw := range m.Powers() {
			if varies(pw.Var) {
				vary = append(vary, pw)
			} else {
				rest = append(rest, pw)
			}
		}
		co := algebra.FromPoly(algebra.FromTerms([]algebra.Term{{Mono: algebra.NewMonomial(rest...), Coef: c}}))
		yield(algebra.NewMonomial(vary...), co.Mul(one))
	}
	return nil
}

// solveReduced is Gaussian elimination in which every value is kept reduced
// by the relations of the kernels, so that a pivot that is zero is seen to be.
// A solution is multiplied out before it is returned.
func (d *Problem) solveReduced(a [][]algebra.Fraction, b []algebra.Fraction) ([]algebra.Fraction, bool, error) {
	n := 0
	if len(a) > 0 {
		n = len(a[0])
	}
	m := make([][]algebra.Fraction, len(a))
	for i := range a {
		m[i] = append(append([]algebra.Fraction(nil), a[i]...), b[i])
	}
	pivot := make([]int, n)
	r := 0
	for c := range n {
		pivot[c] = -1
		i, err := d.pivot(m[r:], c)
		if err != nil {
			return nil, false, err
		}
		if i >= 0 {
			m[r], m[r+i] = m[r+i], m[r]
			pivot[c] = r
		}
		if pivot[c] < 0 {
			continue
		}
		for i := range m {
			if i == r || m[i][c].IsZero() {
				continue
			}
			f, err := d.Ring.Quo(m[i][c], m[r][c])
			if err != nil {
				return nil, false, err
			}
			for k := c; k <= n; k++ {
				if m[i][k], err = d.Ring.Sub(m[i][k], f.Mul(m[r][k])); err != nil {
					return nil, false, err
				}
			}
		}
		r++
	}
	for i := r; i < len(m); i++ {
		switch rest := m[i][n]; {
		case rest.IsZero():
		case d.number(rest) && !d.everywhere(jet.Condition{Value: rest, Need: jet.NeedNonZero}):
			return nil, false, fmt.Errorf("%w: whether %s is zero is not certain", jet.ErrOutside, Short(d.Ring.Format(rest)))
		default:
			return nil, false, nil
		}
	}
	x := make([]algebra.Fraction, n)
	for c := range n {
		if pivot[c] < 0 {
			continue
		}
		var err error
		if x[c], err = d.Ring.Quo(m[pivot[c]][n], m[pivot[c]][c]); err != nil {
			return nil, false, err
		}
	}
	for i := range a {
		sum := b[i].Neg()
		for k := range x {
			sum = sum.Add(a[i][k].Mul(x[k]))
		}
		sum, err := d.Ring.Reduce(sum)
		if err != nil {
			return nil, false, err
		}
		if !sum.IsZero() {
			return nil, false, fmt.Errorf("%w: the solution of the coefficients does not multiply out", jet.ErrOutside)
		}
	}
	return x, true, nil
}

// pivot is the first row whose entry in column c is not zero, -1 where there
// is none: a number that certainly is not, where there is one. A number that
// is not told from zero is no pivot, and no zero either.
func (d *Problem) pivot(rows [][]algebra.Fraction, c int) (int, error) {
	best, unsure := -1, -1
	for i, row := range rows {
		switch {
		case row[c].IsZero():
		case !d.number(row[c]):
			if best < 0 {
				best = i
			}
		case d.everywhere(jet.Condition{Value: row[c], Need: jet.NeedNonZero}):
			return i, nil
		default:
			unsure = i
		}
	}
	if best < 0 && unsure >= 0 {
		return -1, fmt.Errorf("%w: whether %s is zero is not certain", jet.ErrOutside, Short(d.Ring.Format(rows[unsure][c])))
	}
	return best, nil
}
