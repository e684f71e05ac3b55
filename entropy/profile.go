package entropy

import (
	"context"
	"errors"
	"fmt"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

// ErrNoProfile says that a model has no one-dimensional profile cost of the
// kind computed here, and why.
var ErrNoProfile = errors.New("no profile cost")

// Profile is the cost per area of the one-dimensional transition between two
// traces p⁻, p⁺ on the well, q = p⁺ - p⁻ parallel to the unit normal ν:
//
//	∫_0^1 |R(p⁻ + s q)| |L(q ⊗ ν)| ds
//
// for a model with residual R, bending L and the energy R²/(2 c) + c L²/2 with
// a constant c. Where L depends on the gradient it is taken at p⁻ + s q too.
//
// It is the minimum of the energy of profiles that stay on the segment: with
// s as the variable, R²/(2c) + c L²/2 >= |R| |L|, with equality for a suitable
// speed of the transition (Modica and Mortola, Un esempio di Γ-convergenza,
// Boll. Un. Mat. Ital. B 14 (1977) 285–299).
type Profile struct {
	set               *Setting
	ring              *jet.Ring
	residual, bending algebra.Fraction
	// degrees in the gradient, -1 where not polynomial
	degree, bendingDegree int
}

// NewProfile checks in exact arithmetic that the model has a profile cost: the
// energy is R²/(2 c) + c L²/2 with a declared constant c; R depends on the
// gradient of one unknown, coordinates and constants other than c; and L is
// linear in the second derivatives, with coefficients that depend on the same.
// Otherwise the error wraps ErrNoProfile.
func (s *Setting) NewProfile(ctx context.Context) (*Profile, error) {
	refuse := func(format string, args ...any) (*Profile, error) {
		return nil, fmt.Errorf("%w: %s", ErrNoProfile, fmt.Sprintf(format, args...))
	}
	m := s.Model
	switch {
	case m.Residual == nil || m.Bending == nil || m.Energy == nil:
		return refuse("the model does not give a residual, a bending and an energy")
	case len(s.Unknowns) != 1:
		return refuse("the model has %d unknowns", len(s.Unknowns))
	}
	in, ex, err := s.NewExact(ctx)
	if err != nil {
		return nil, err
	}
	p := &Profile{set: s, ring: ex.Ring}
	if p.residual, err = in.Scalar(m.Residual); err != nil {
		return nil, err
	}
	if p.bending, err = in.Scalar(m.Bending); err != nil {
		return nil, err
	}
	e, err := in.Scalar(m.Energy)
	if err != nil {
		return nil, err
	}
	for _, v := range ex.Ring.Support(p.residual) {
		if y := ex.Ring.Symbol(v); y.Kind == jet.Derivative && y.Index.Order() != 1 {
			return refuse("the residual depends on %s", y.Name)
		}
	}
	if reason, err := p.linear(); err != nil {
		return nil, err
	} else if reason != "" {
		return refuse("%s", reason)
	}
	ok, err := p.declared(e)
	if err != nil {
		return nil, err
	}
	if !ok {
		return refuse("the energy is not R^2/(2 c) + c L^2/2 with a constant c")
	}
	p.degree, p.bendingDegree = p.gradientDegree(p.residual), p.gradientDegree(p.bending)
	if p.bendingDegree > 0 {
		p.bendingDegree-- // the second derivative
	}
	return p, nil
}

// linear checks that L is linear in the second derivatives; otherwise it says
// why not.
func (p *Profile) linear() (reason string, err error) {
	r := p.ring
	rest := p.bending
	for _, v := range r.Support(p.bending) {
		y := r.Symbol(v)
		if y.Kind != jet.Derivative || y.Index.Order() == 1 {
			continue
		}
		if y.Index.Order() != 2 {
			return "the bending depends on " + y.Name, nil
		}
		d, err := r.Partial(p.bending, v)
		if err != nil {
			return "", err
		}
		for _, w := range r.Support(d) {
			if z := r.Symbol(w); z.Kind == jet.Derivative && z.Index.Order() == 2 {
				return "the bending is not linear in the second derivatives", nil
			}
		}
		t, err := r.Mul(d, jet.Of(v))
		if err != nil {
			return "", err
		}
		if rest, err = r.Sub(rest, t); err != nil {
			return "", err
		}
	}
	if !rest.IsZero() {
		return "the bending is not linear in the second derivatives", r.Err(rest)
	}
	return "", nil
}

// declared reports whether the energy is R²/(2c) + c L²/2 for a constant c.
func (p *Profile) declared(e algebra.Fraction) (bool, error) {
	r := p.ring
	free := func(c algebra.Var) bool {
		for _, v := range r.Support(p.residual, p.bending) {
			if v == c {
				return false
			}
		}
		return true
	}
	for _, name := range p.set.Constants {
		c := r.ConstantVar(name)
		if !free(c) {
			continue
		}
		r2, err := r.Mul(p.residual, p.residual)
		if err != nil {
			return false, err
		}
		if r2, err = r.Quo(r2, jet.Of(c).Scale(algebra.Int(2))); err != nil {
			return false, err
		}
		l2, err := r.Mul(p.bending, p.bending)
		if err != nil {
			return false, err
		}
		if l2, err = r.Mul(l2, jet.Of(c).Scale(algebra.Frac64(1, 2))); err != nil {
			return false, err
		}
		d, err := r.Sub(e, r2.Add(l2))
		if err != nil {
			return false, err
		}
		if err := r.Err(d); err != nil {
			return false, err
		}
		if d.IsZero() {
			return true, nil
		}
	}
	return false, nil
}

// gradientDegree is the total degree in jets, -1 where f is not polynomial in
// them.
func (p *Profile) gradientDegree(f algebra.Fraction) int {
	jets := func(vs []algebra.Var) bool {
		for _, v := range vs {
			if p.ring.Symbol(v).Kind == jet.Derivative {
				return true
			}
		}
		return false
	}
	for _, k := range p.ring.Kernels(f) {
		if jets(p.ring.Support(p.ring.Symbol(k).Arg)) {
			return -1
		}
	}
	for _, d := range f.DenFactors() {
		if jets(d.Base.Vars()) {
			return -1
		}
	}
	degree := 0
	for m := range f.Num().Terms() {
		n := 0
		for _, pw := range m.Powers() {
			if p.ring.Symbol(pw.Var).Kind == jet.Derivative {
				n += pw.Exp
			}
		}
		degree = max(degree, n)
	}
	return degree
}

// Polynomial reports whether the integrand is the absolute value of a
// polynomial in s, so that its integral is one of finitely many operations.
func (p *Profile) Polynomial() bool {
	return p.degree >= 0 && p.bendingDegree >= 0 && p.degree+p.bendingDegree <= maxProfileDegree
}

// Layered reports whether the model is the layered one of its dimension, the
// last coordinate z being the height: R = u_z - |grad_perp u|²/2 and L the
// horizontal Laplacian. Its jump energy is then also the integral of
// |[grad_perp u]|³/12 over horizontal slices. The comparison is exact.
func (p *Profile) Layered() bool {
	n := len(p.set.Coordinates)
	if n < 2 {
		return false
	}
	u := p.set.Unknowns[0]
	d := func(i, times int) formula.Node {
		by := []string{p.set.Coordinates[i]}
		if times == 2 {
			by = append(by, by[0])
		}
		return formula.NewDeriv(u, by...)
	}
	in := &Interpreter[algebra.Fraction]{Setting: p.set, Arith: &Exact{Ring: p.ring}}
	r := []formula.Term{{X: d(n-1, 1)}}
	var l []formula.Term
	for i := range n - 1 {
		square := formula.NewPower(d(i, 1), twoRat)
		r = append(r, formula.Term{Neg: true, X: formula.NewQuotient(square, formula.NewInt(2))})
		l = append(l, formula.Term{X: d(i, 2)})
	}
	same := func(terms []formula.Term, f algebra.Fraction) bool {
		x, err := in.Scalar(formula.NewSum(terms...))
		return err == nil && x.Equal(f)
	}
	return same(r, p.residual) && same(l, p.bending)
}
