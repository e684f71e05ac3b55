package exact

import (
	"fmt"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// entropy decides entropy(Sigma): the symmetric part of D Σ(p) vanishes on the
// real zeros of the residual R(p), a statement about jets at one point. Where
// R divides it exactly, sym(D Σ) = R A with A reported.
func (d *Problem) entropy() error {
	res := d.Claim.Setting.Model.Residual
	if res == nil {
		return &entropy.Error{At: d.Claim.Statement.Field.At(), Err: fmt.Errorf("entropy() needs the residual of a [model]")}
	}
	if len(d.Claim.Given) > 0 {
		return &entropy.Error{At: d.Claim.Statement.Field.At(), Err: fmt.Errorf("entropy() is about every gradient"), Advice: "take given away"}
	}
	if len(d.Ring.Unknowns) != 1 {
		d.Open("entropy() is about fields of one gradient; the case has %d unknowns", len(d.Ring.Unknowns))
		return nil
	}
	r, err := d.In.Scalar(res)
	if err != nil {
		return err
	}
	field, err := d.In.Field(d.Claim.Statement.Field)
	if err != nil {
		return err
	}
	for _, v := range d.Ring.Support(append(field[:len(field):len(field)], r)...) {
		s := d.Ring.Symbol(v)
		if s.Kind == jet.Derivative && s.Index.Order() != 1 || s.Kind == jet.Coordinate {
			d.Open("entropy() is about functions of the gradient alone; %s occurs", s.Name)
			return nil
		}
	}
	n := len(field)
	grad := make([]algebra.Var, n)
	for i := range grad {
		if grad[i], err = d.Ring.JetVar(0, jet.Index{}.Plus(i), jet.NoSide); err != nil {
			return err
		}
	}
	part := make([][]algebra.Fraction, n)
	for i := range part {
		part[i] = make([]algebra.Fraction, n)
		for k := range part[i] {
			if part[i][k], err = d.Ring.Partial(field[i], grad[k]); err != nil {
				return err
			}
		}
	}
	half := algebra.Frac64(1, 2)
	divides := true
	var entries [][2]int
	for i := range n {
		for k := i; k < n; k++ {
			entries = append(entries, [2]int{i, k})
		}
	}
	done, err := d.components(len(entries), func(e int) (bool, error) {
		i, k := entries[e][0], entries[e][1]
		second, err := d.Ring.Jet(0, jet.Index{}.Plus(i).Plus(k), jet.NoSide)
		if err != nil {
			return true, err
		}
		if second.IsZero() {
			return false, nil // by a restriction: the entry multiplies nothing
		}
		sym, err := d.Ring.Reduce(part[i][k].Add(part[k][i]).Scale(half))
		if err != nil {
			return true, err
		}
		a, ok, err := d.Divide(sym, r)
		if err != nil {
			return true, err
		}
		if ok && !a.IsZero() {
			d.Rec.Details = append(d.Rec.Details, fmt.Sprintf("sym(D %s)_%s%s = R A with A = %s, R A = %s", d.Claim.Statement.Field.ID,
				d.Ring.Coordinates[i], d.Ring.Coordinates[k], d.Ring.FormatHarmonic(a), d.Ring.FormatHarmonic(sym)))
		}
		if ok {
			return false, nil
		}
		divides = false
		return d.vanishesOnWell(sym, r)
	})
	if err != nil || done {
		return err
	}
	if divides {
		d.Proved("exact division: sym(D " + d.Claim.Statement.Field.ID + ") = R A")
		return nil
	}
	d.Proved("exact: sym(D " + d.Claim.Statement.Field.ID + ") vanishes on the zeros of the residual")
	return nil
}

// divide is sym/r where that is exact modulo the relations of the kernels.
func (d *Problem) Divide(sym, r algebra.Fraction) (algebra.Fraction, bool, error) {
	if sym.IsZero() {
		return sym, true, nil
	}
	if r.IsZero() {
		return sym, false, nil
	}
	quo, rem := sym.Num().DivMod([]algebra.Poly{r.Num()}, algebra.GradedLex)
	if err := rem.Err(); err != nil {
		return sym, false, err
	}
	if !d.Ring.ReducePoly(rem).IsZero() {
		return sym, false, nil
	}
	// sym = (quo·num(r))/den(sym), r = num(r)/den(r).
	a := algebra.FromFactors(quo[0], sym.DenFactors()).Mul(algebra.FromPoly(r.Den()))
	a, err := d.Ring.Reduce(a)
	if err != nil {
		return a, false, err
	}
	back, err := d.Ring.Sub(a.Mul(r), sym)
	return a, err == nil && back.IsZero(), err
}

// vanishesOnWell decides whether a value that R does not divide still vanishes
// on the real zeros of R. It reports true where the claim is settled.
func (d *Problem) vanishesOnWell(sym, r algebra.Fraction) (bool, error) {
	rad := d.zeroSet(r.Num()) // has the same zeros
	num := algebra.FromPoly(rad)
	zeros := d.realZeros(rad)
	if empty(zeros) || d.Ring.VisiblyPositive(num) || d.Ring.VisiblyPositive(num.Neg()) {
		return false, nil // no real zeros at all
	}
	if len(zeros) > 1 {
		_, rem := sym.Num().DivMod(d.completed(zeros), algebra.GradedLex)
		if rem = d.Ring.ReducePoly(rem); rem.IsZero() && rem.Err() == nil {
			return false, nil
		}
	}
	if _, ok, err := d.Divide(sym, num); ok || err != nil {
		return err != nil, err
	}
	if s, ok := d.solve(num, nil); ok {
		// The well is a graph: put it in.
		v, err := d.Ring.JetVar(s.unknown, s.index, jet.NoSide)
		if err != nil {
			return true, err
		}
		rest, err := d.Ring.Reduce(sym.Subst(v, s.Value))
		if err != nil {
			return true, err
		}
		if rest.IsZero() {
			return false, nil
		}
	}
	d.Ideal = zeros
	d.Rec.Remainder = Short(d.Ring.Format(sym))
	pts := d.Points(sym)
	for range witnessTries {
		at, ok := pts.Next()
		if !ok {
			break
		}
		if s, ok := d.Ring.Sign(sym, at); ok && s != 0 {
			d.Refuted("a zero of the residual at which sym(D "+d.Claim.Statement.Field.ID+") is not zero", at, sym, algebra.Fraction{})
			return true, nil
		}
	}
	if d.isolatedWitness(sym, sym, algebra.Fraction{}) {
		return true, nil
	}
	d.Open("the residual does not divide sym(D %s) exactly, and no exact real zero of the residual was found at which it is not zero", d.Claim.Statement.Field.ID)
	return true, d.Ctx.Err()
}
