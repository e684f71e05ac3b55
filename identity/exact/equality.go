package exact

import (
	"fmt"
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// witnessTries bounds the points looked at for a witness of an equation.
const witnessTries = 400

// maxSame bounds the points at which the sides are not told apart by
// enclosures: after so many they are taken to be equal.
const maxSame = 12

// equality decides A = B: for all jets, on the solutions of equations, up to
// a divergence, or over admissible jumps; with constants to solve for or not.
func (d *Problem) equality() error {
	left, right, err := d.sides()
	if err != nil {
		return err
	}
	gaps := make([]algebra.Fraction, len(left))
	for i := range left {
		if gaps[i], err = d.Ring.Sub(left[i], right[i]); err != nil {
			return err
		}
	}
	method := "exact normal form"
	if d.Claim.Divergence {
		return d.divergence(gaps)
	}
	if len(d.Claim.Modulo) > 0 {
		method = "exact, on the zeros of the equations and of their derivatives"
	}
	if d.Claim.Jump {
		method = "exact, on the well on both sides"
	}
	if len(d.Claim.Solve) > 0 {
		if gaps, err = d.solveFor(gaps); err != nil || d.Rec.Verdict != "" {
			return err
		}
	}
	done, err := d.components(len(gaps), func(i int) (bool, error) { return d.vanishes(gaps[i], left[i], right[i]) })
	if err == nil && !done {
		d.Proved(method)
	}
	return err
}

// vanishes decides whether g = left - right is zero. It reports true where
// the claim is settled by that: g is not zero, or it is not decided.
func (d *Problem) vanishes(g, left, right algebra.Fraction) (bool, error) {
	if g.IsZero() {
		return false, nil
	}
	if err := d.Ring.Err(g); err != nil {
		return true, err
	}
	rest, err := d.onIdeal(g)
	if err != nil {
		return true, err
	}
	if rest = algebra.FromPoly(d.onAssumed(rest.Num())); rest.IsZero() {
		return false, nil
	}
	if ok, err := d.oneRoot(g); err != nil || ok {
		return err != nil, err
	}
	if d.vanishingNumbers(rest.Num()) {
		return false, nil
	}
	if ok, err := d.whereTracesDiffer(g); err != nil || ok {
		return err != nil, err
	}
	d.Rec.Remainder = Short(d.Ring.Format(rest))
	pts := d.Points(g, left, right)
	same := 0
	for range witnessTries {
		at, ok := pts.Next()
		if !ok || same == maxSame {
			break
		}
		s, ok := d.Ring.Sign(g, at)
		if ok && s != 0 {
			d.Refuted("exact normal form, and a point where the sides differ", at, left, right)
			return true, nil
		}
		if !ok {
			same++
		}
	}
	if err := d.Ctx.Err(); err != nil {
		return true, err
	}
	switch {
	case len(d.Ideal) > 0 || len(d.Wells) > 0:
		if d.isolatedWitness(g, left, right) {
			return true, nil
		}
		d.Open("the remainder after exact division is not zero, and no exact real zero of the equations was found at which it is not zero")
	case d.isolatedWitness(g, left, right):
		return true, nil
	default:
		d.Open("the difference has a normal form that is not zero, but no rational point was found at which it certainly differs from zero: kernels in it may depend on each other in a way that is not normalised")
	}
	return true, nil
}

// onIdeal is the remainder of g by the generators of the ideal, or by the
// wells on both sides of a jump. One polynomial for each side, in separate
// indeterminates, form a Gröbner basis as they stand; more are completed.
func (d *Problem) onIdeal(g algebra.Fraction) (algebra.Fraction, error) {
	gens := d.Wells
	num := g.Num()
	switch {
	case len(d.Wells) > 0:
		var err error
		if num, err = d.InTraces(num); err != nil {
			return g, err
		}
	case len(d.Ideal) > 0:
		var err error
		if gens, err = d.prolong(num); err != nil {
			return g, err
		}
	default:
		return g, nil
	}
	num = d.Ring.ReducePoly(num)
	_, rem := num.DivMod(gens, algebra.GradedLex)
	rem = d.Ring.ReducePoly(rem)
	if (len(d.Ideal) > 0 || len(d.Wells) > 2) && !rem.IsZero() && rem.Err() == nil {
		// The division depends on the order of the generators until they are
		// completed to a Gröbner basis.
		if len(d.basis) == 0 || d.basisOf != len(gens) {
			d.basis, d.basisOf = d.completed(gens), len(gens)
		}
		_, rem = num.DivMod(d.basis, algebra.GradedLex)
		rem = d.Ring.ReducePoly(rem)
	}
	if err := rem.Err(); err != nil {
		return g, err
	}
	return algebra.FromPoly(rem), nil
}

// prolong is the ideal's generators with their total derivatives, up to the
// order of the jets in num.
func (d *Problem) prolong(num algebra.Poly) ([]algebra.Poly, error) {
	order := 0
	for _, v := range d.Ring.Support(algebra.FromPoly(num)) {
		if s := d.Ring.Symbol(v); s.Kind == jet.Derivative {
			order = max(order, s.Index.Order())
		}
	}
	gens := append([]algebra.Poly(nil), d.Ideal...)
	for from := 0; from < len(gens); from++ {
		g := gens[from]
		top := 0
		for _, v := range g.Vars() {
			if s := d.Ring.Symbol(v); s.Kind == jet.Derivative {
				top = max(top, s.Index.Order())
			}
		}
		if top >= order {
			continue
		}
		for i := range d.Ring.Coordinates {
			f, err := d.Ring.Total(algebra.FromPoly(g), i)
			if err != nil {
				return nil, err
			}
			known := f.IsZero()
			for _, h := range gens {
				known = known || h.Equal(f.Num())
			}
			if !known {
				gens = append(gens, f.Num())
			}
		}
		if len(gens) > 400 {
			return nil, fmt.Errorf("%w: more than 400 derivatives of the equations", algebra.ErrLimit)
		}
	}
	d.Ideal = gens
	return gens, nil
}

// oneRoot proves α r + β = 0 for a single root r = √a: α² a = β², and the
// signs of α and β are visibly opposite.
func (d *Problem) oneRoot(g algebra.Fraction) (bool, error) {
	for _, v := range g.Num().Vars() {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Root || s.Degree != 2 || s.Sign == jet.AnySign || g.Num().Degree(v) != 1 {
			continue
		}
		co := g.Num().Coeffs(v)
		kernels := d.Ring.Kernels(algebra.FromPoly(co[0]), algebra.FromPoly(co[1]))
		if len(kernels) > 0 && kernels[len(kernels)-1] > v {
			continue // a newer kernel may hold this root inside
		}
		a, b := algebra.FromPoly(co[1]), algebra.FromPoly(co[0])
		opposite := d.Ring.VisiblyNonNegative(a) && d.Ring.VisiblyNonNegative(b.Neg()) ||
			d.Ring.VisiblyNonNegative(a.Neg()) && d.Ring.VisiblyNonNegative(b)
		if !opposite {
			continue
		}
		diff, err := d.Ring.Reduce(a.Mul(a).Mul(s.Arg).Sub(b.Mul(b)))
		if err != nil {
			return false, err
		}
		if diff, err = d.onIdeal(diff); err != nil {
			return false, err
		}
		if diff.IsZero() {
			return true, nil
		}
	}
	return false, nil
}

// divergence decides A = B up to a divergence, by the Euler operator.
func (d *Problem) divergence(gaps []algebra.Fraction) error {
	if len(gaps) != 1 {
		return fmt.Errorf("a vector cannot be a divergence")
	}
	if len(d.Claim.Given) > 0 {
		return fmt.Errorf("a claim up to a divergence is about every u: take `given` away")
	}
	if d.Claim.Jump {
		return fmt.Errorf("a claim up to a divergence is about smooth u: take `at` away")
	}
	if len(d.Claim.Modulo) > 0 {
		return fmt.Errorf("a claim is up to a divergence or on the zeros of equations, not both")
	}
	var euler []algebra.Fraction
	for a := range d.Ring.Unknowns {
		e, err := d.Ring.Euler(gaps[0], a)
		if err != nil {
			return err
		}
		euler = append(euler, e)
	}
	zero := !slices.ContainsFunc(euler, func(e algebra.Fraction) bool { return !e.IsZero() })
	if len(d.Claim.Solve) > 0 && !zero && d.held() {
		d.Open("the Euler expression is not zero for all constants, but with derivatives that are held constant that does not exclude a divergence")
		return nil
	}
	if len(d.Claim.Solve) > 0 {
		var err error
		if euler, err = d.solveFor(euler); err != nil || d.Rec.Verdict != "" {
			return err
		}
	}
	done, err := d.components(len(euler), func(a int) (bool, error) { return d.eulerVanishes(euler[a], a) })
	if err != nil || done {
		return err
	}
	if k, ok := d.rough(gaps[0]); ok {
		d.Open("the Euler expression is zero, but %s is not smooth where what is under the root vanishes, and there a divergence is not excluded or shown", d.Ring.Name(k))
		return nil
	}
	d.Proved("Euler operator")
	if len(gaps[0].DenFactors()) > 0 {
		d.Rec.Assumptions = append(d.Rec.Assumptions, "a divergence where the denominators do not vanish")
	}
	return nil
}

// eulerVanishes decides whether the Euler expression e by an unknown is zero.
// It reports true where it is not, or where that is not decided.
func (d *Problem) eulerVanishes(e algebra.Fraction, unknown int) (bool, error) {
	if e.IsZero() {
		return false, nil
	}
	if err := d.Ring.Err(e); err != nil {
		return true, err
	}
	if d.held() {
		// u_x^2 = D_z(z u_x^2) where u_xz vanishes.
		d.Open("the Euler expression is not zero, but with derivatives that are held constant that does not exclude a divergence")
		return true, nil
	}
	d.Rec.Remainder = Short(fmt.Sprintf("euler(left - right, %s) = %s", d.Ring.Unknowns[unknown], d.Ring.Format(e)))
	pts := d.Points(e)
	for range witnessTries {
		at, ok := pts.Next()
		if !ok {
			break
		}
		if s, ok := d.Ring.Sign(e, at); ok && s != 0 {
			d.Refuted("Euler operator", at, e, algebra.Fraction{})
			d.Rec.Reason = "the Euler expression of left minus right is not zero at the witness; left is its value there"
			return true, nil
		}
	}
	if err := d.Ctx.Err(); err != nil {
		return true, err
	}
	d.Open("the Euler expression is not zero in normal form, but no rational point was found at which it certainly differs from zero")
	return true, nil
}

// Short keeps a printed formula within what a record should hold.
func Short(s string) string {
	const limit = 2000
	if r := []rune(s); len(r) > limit {
		s = string(r[:limit])
		if i := strings.LastIndexAny(s, "+-"); i > 0 {
			s = s[:i]
		}
		return s + fmt.Sprintf("… (%d characters in all)", len(r))
	}
	return s
}
