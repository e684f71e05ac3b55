package identity

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
func (d *decider) integrable() error {
	st := d.claim.Statement
	field, err := d.in.Field(st.Field)
	if err != nil {
		return err
	}
	recip := map[algebra.Var]algebra.Rat{} // 1/p
	for _, e := range d.claim.Integrability {
		x, err := d.in.Scalar(e.Node)
		if err != nil {
			return err
		}
		v, ok := loneVar(x)
		if !ok || d.ring.Symbol(v).Kind != jet.Derivative {
			return &entropy.Error{At: e.Node.At(), Err: fmt.Errorf("integrability is of derivatives of unknowns")}
		}
		if e.P.Sign() <= 0 {
			return &entropy.Error{At: e.Node.At(), Err: fmt.Errorf("the exponent of %s is not positive", d.ring.Name(v))}
		}
		if recip[v], ok = algebra.FromBig(e.P).Inv(); !ok {
			return &entropy.Error{At: e.Node.At(), Err: fmt.Errorf("the exponent of %s is zero", d.ring.Name(v))}
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
		for _, k := range d.ring.Kernels(f) {
			s := d.ring.Symbol(k)
			if s.Kind == jet.Cosine || s.Kind == jet.Sine {
				continue // bounded, whatever they are of
			}
			if slices.ContainsFunc(d.ring.Support(s.Arg), func(v algebra.Var) bool { return d.ring.Symbol(v).Kind == jet.Derivative }) {
				d.open("%s is not a polynomial in the derivatives: Hölder's inequality on monomials does not apply", s.Name)
				return nil
			}
			if !d.boundedKernel(s) {
				d.open("%s may be unbounded on a bounded domain", s.Name)
				return nil
			}
		}
		for _, b := range den {
			for _, v := range d.ring.Support(algebra.FromPoly(b.Base)) {
				if k := d.ring.Symbol(v).Kind; k == jet.Derivative || k == jet.Coordinate {
					d.open("component %s has the denominator %s: Hölder's inequality on monomials does not apply", d.ring.Coordinates[i], d.ring.FormatPoly(b.Base))
					return nil
				}
			}
		}
		for m := range f.Num().Terms() {
			var sum algebra.Rat
			for _, pw := range m.Powers() {
				if d.ring.Symbol(pw.Var).Kind != jet.Derivative {
					continue
				}
				r, ok := recip[pw.Var]
				if !ok {
					d.open("nothing is said of the integrability of %s", d.ring.Name(pw.Var))
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
					m.String(d.ring.Name), d.ring.Coordinates[i], sum)
			}
		}
		exponent := "infinity"
		if r, ok := worst.Inv(); ok {
			exponent = r.String()
		}
		d.rec.Details = append(d.rec.Details, fmt.Sprintf("%s_%s in L^%s", st.Field.ID, d.ring.Coordinates[i], exponent))
	}
	d.rec.Solution = strings.Join(d.rec.Details, ", ")
	if !holds {
		d.open("%s; that is a sufficient condition only", why)
		return nil
	}
	d.proved("Hölder's inequality on each monomial, bounded domain")
	return nil
}

// boundedKernel reports whether a function of coordinates and constants is
// bounded on every bounded domain: not a logarithm of a coordinate, and no
// function of a quotient by one.
func (d *decider) boundedKernel(s *jet.Symbol) bool {
	varies := func(f algebra.Fraction) bool {
		return slices.ContainsFunc(d.ring.Support(f), func(v algebra.Var) bool { return d.ring.Symbol(v).Kind == jet.Coordinate })
	}
	if s.Kind == jet.Logarithm && varies(s.Arg) {
		return false
	}
	return !slices.ContainsFunc(s.Arg.DenFactors(), func(f algebra.Factor) bool { return varies(algebra.FromPoly(f.Base)) })
}
