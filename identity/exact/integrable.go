package exact

import (
	"fmt"
	"slices"
	"strings"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// integrable decides Sigma in L^q on a bounded domain from the integrability
// of the derivatives in it: by Hölder's inequality a monomial Π u_J^a_J lies
// in L^r with 1/r = Σ a_J/p_J. That is a sufficient condition: failing it
// leaves the claim open.
func (d *Problem) integrable() error {
	st := d.Claim.Statement
	field, err := d.In.Field(st.Field)
	if err != nil {
		return err
	}
	recip := map[algebra.Var]algebra.Rat{} // 1/p
	for _, e := range d.Claim.Integrability {
		x, err := d.In.Scalar(e.Node)
		if err != nil {
			return err
		}
		v, ok := LoneVar(x)
		if !ok || d.Ring.Symbol(v).Kind != jet.Derivative {
			return &entropy.Error{At: e.Node.At(), Err: fmt.Errorf("integrability is of derivatives of unknowns")}
		}
		if e.P.Sign() <= 0 {
			return &entropy.Error{At: e.Node.At(), Err: fmt.Errorf("the exponent of %s is not positive", d.Ring.Name(v))}
		}
		if recip[v], ok = algebra.FromBig(e.P).Inv(); !ok {
			return &entropy.Error{At: e.Node.At(), Err: fmt.Errorf("the exponent of %s is zero", d.Ring.Name(v))}
		}
	}
	want, ok := algebra.FromBig(st.Exponent).Inv()
	if !ok || want.Sign() < 0 {
		return &entropy.Error{At: st.Field.At(), Err: fmt.Errorf("the exponent of L^%s is not positive", st.Exponent.RatString())}
	}
	holds := true
	var why string
	for i, f := range field {
		worst := algebra.Rat{}
		den := f.DenFactors()
		for _, k := range d.Ring.Kernels(f) {
			s := d.Ring.Symbol(k)
			if s.Kind == jet.Cosine || s.Kind == jet.Sine {
				continue // bounded, whatever they are of
			}
			if slices.ContainsFunc(d.Ring.Support(s.Arg), func(v algebra.Var) bool { return d.Ring.Symbol(v).Kind == jet.Derivative }) {
				d.Open("%s is not a polynomial in the derivatives: Hölder's inequality on monomials does not apply", s.Name)
				return nil
			}
			if !d.boundedKernel(s) {
				d.Open("%s may be unbounded on a bounded domain", s.Name)
				return nil
			}
		}
		for _, b := range den {
			for _, v := range d.Ring.Support(algebra.FromPoly(b.Base)) {
				if k := d.Ring.Symbol(v).Kind; k == jet.Derivative || k == jet.Coordinate {
					d.Open("component %s has the denominator %s: Hölder's inequality on monomials does not apply", d.Ring.Coordinates[i], d.Ring.FormatPoly(b.Base))
					return nil
				}
			}
		}
		for m := range f.Num().Terms() {
			var sum algebra.Rat
			for _, pw := range m.Powers() {
				if d.Ring.Symbol(pw.Var).Kind != jet.Derivative {
					continue
				}
				r, ok := recip[pw.Var]
				if !ok {
					d.Open("nothing is said of the integrability of %s", d.Ring.Name(pw.Var))
					return nil
				}
				sum = sum.Add(r.Mul(algebra.Int(int64(pw.Exp))))
			}
			if sum.Cmp(worst) > 0 {
				worst = sum
			}
			if sum.Cmp(want) > 0 && why == "" {
				holds = false
				why = fmt.Sprintf("the monomial %s of component %s is only in L^r with 1/r = %s by Hölder's inequality",
					m.String(d.Ring.Name), d.Ring.Coordinates[i], sum)
			}
		}
		exponent := "infinity"
		if r, ok := worst.Inv(); ok {
			exponent = r.String()
		}
		d.Rec.Details = append(d.Rec.Details, fmt.Sprintf("%s_%s in L^%s", st.Field.ID, d.Ring.Coordinates[i], exponent))
	}
	d.Rec.Solution = strings.Join(d.Rec.Details, ", ")
	if !holds {
		d.Open("%s; that is a sufficient condition only", why)
		return nil
	}
	d.Proved("Hölder's inequality on each monomial, bounded domain")
	return nil
}

// boundedKernel reports whether a function of coordinates and constants is
// bounded on every bounded domain: not a logarithm of a coordinate, and no
// function of a quotient by one.
func (d *Problem) boundedKernel(s *jet.Symbol) bool {
	varies := func(f algebra.Fraction) bool {
		return slices.ContainsFunc(d.Ring.Support(f), func(v algebra.Var) bool { return d.Ring.Symbol(v).Kind == jet.Coordinate })
	}
	if s.Kind == jet.Logarithm && varies(s.Arg) {
		return false
	}
	return !slices.ContainsFunc(s.Arg.DenFactors(), func(f algebra.Factor) bool { return varies(algebra.FromPoly(f.Base)) })
}
