package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// conditionTries bounds the points at which a condition is looked at.
const conditionTries = 120

// rest settles what the record rests on. A condition on numbers alone must
// certainly hold: a normal form that is not zero may be zero as a number, and
// then something was divided by zero. Any other condition has to hold
// certainly somewhere, or the claim says nothing; it is listed as an
// assumption, unless the assumptions of the claim exclude it.
func (d *Problem) rest() {
	var equations []algebra.Poly
	for _, c := range d.Assumed {
		if d.number(c.Value) && !c.holds(d.Ring, nil) {
			d.unfounded("what is assumed is not certain to hold anywhere: " + d.Ring.Format(c.Value) + " " + c.Relation + " 0")
			return
		}
		if c.Relation == "=" && !c.Value.IsZero() {
			equations = append(equations, c.Value.Num())
		}
	}
	equations = slices.Concat(equations, d.equations, d.Wells)
	if len(equations) > 0 && len(d.Ring.Conditions()) > 0 {
		equations = d.completed(equations)
	}
	for _, c := range d.Ring.Conditions() {
		if d.ofParameters(c.Value) {
			continue
		}
		text := d.Ring.Format(c.Value) + " " + c.Need.String()
		if d.number(c.Value) {
			if !d.everywhere(c) {
				d.unfounded("the claim rests on " + text + ", which is not certain: the number on the left is not told from zero, or has the wrong sign")
				return
			}
			continue
		}
		if d.Ex.NoJump(c) {
			continue
		}
		if d.excluded(c, equations) {
			d.unfounded("the claim rests on " + text + ", which the assumptions or equations exclude")
			return
		}
		if d.Rec.Verdict == claim.Proved && !d.somewhere(c) {
			d.unfounded("the claim rests on " + text + ", and no point was found at which that certainly holds")
			return
		}
		d.Rec.Assumptions = append(d.Rec.Assumptions, text)
	}
}

// unfounded opens a claim and takes back what was said of it.
func (d *Problem) unfounded(reason string) {
	d.Rec = &claim.Record{Claim: d.Rec.Claim, Remainder: d.Rec.Remainder}
	d.Open("%s", Short(reason))
}

// excluded reports whether the value of a condition that it is not zero, or a
// power of it, is in the ideal of the equations that are assumed.
func (d *Problem) excluded(c jet.Condition, equations []algebra.Poly) bool {
	if len(equations) == 0 || c.Need == jet.NeedNonNegative {
		return false
	}
	p := c.Value.Num()
	if len(d.Wells) > 0 {
		var err error
		if p, err = d.InTraces(p); err != nil {
			return false
		}
	}
	for range 3 {
		_, p = p.DivMod(equations, algebra.GradedLex)
		if p = d.Ring.ReducePoly(p); p.IsZero() && p.Err() == nil {
			return true
		}
		if p.Err() != nil || p.Len() > 40 {
			return false
		}
		p = p.Mul(p)
	}
	return false
}

// number reports whether a value depends on no coordinate, constant or jet.
func (d *Problem) number(f algebra.Fraction) bool {
	return !slices.ContainsFunc(d.Ring.Support(f), func(v algebra.Var) bool { return d.Ring.Symbol(v).Kind != jet.Pi })
}

// everywhere reports whether a condition on numbers certainly holds, for both
// orientations.
func (d *Problem) everywhere(c jet.Condition) bool {
	for _, sign := range []int64{1, -1} {
		at := jet.Point{}
		for _, k := range d.Ring.Kernels(c.Value) {
			if s := d.Ring.Symbol(k); s.Kind == jet.Root && s.Sign == jet.AnySign {
				at[k] = algebra.Int(sign)
			}
		}
		if !c.Holds(d.Ring, at) {
			return false
		}
		if len(at) == 0 {
			break
		}
	}
	return true
}

// somewhere reports whether a condition certainly holds at one of the points
// that are tried. A polynomial that is not zero is not zero somewhere.
func (d *Problem) somewhere(c jet.Condition) bool {
	if c.Need == jet.NeedNonZero && len(d.Ring.Kernels(c.Value)) == 0 {
		return true
	}
	pts := d.Points(c.Value)
	vars := d.Ring.Support(c.Value)
	for i := range conditionTries {
		at := jet.Point{}
		for _, v := range vars {
			if d.Ring.Symbol(v).Kind != jet.Pi {
				at[v] = pts.value(v, i%3 == 2)
			}
		}
		if c.Holds(d.Ring, at) {
			return true
		}
	}
	return false
}

// supposition is a sign that the definition of the two sides forces on a
// coordinate, constant or jet.
type supposition struct {
	of   jet.Symbol
	sign jet.Sign
}

// suppositions reads signs off the conditions: sqrt(1/u_x) has a meaning only
// where u_x > 0.
func (d *Problem) suppositions() []supposition {
	var out []supposition
	for _, c := range d.Ring.Conditions() {
		v, sign, ok := d.signOf(c)
		if !ok {
			continue
		}
		s := d.Ring.Symbol(v)
		if s.Sign != jet.AnySign || s.Kind > jet.Derivative || s.Kind == jet.Constant && s.Place < 0 {
			continue
		}
		i := slices.IndexFunc(out, func(o supposition) bool { return o.of.Kind == s.Kind && o.of.Name == s.Name })
		switch {
		case i < 0:
			out = append(out, supposition{*s, sign})
		case sign == jet.Positive || sign == jet.Negative:
			out[i].sign = sign
		}
	}
	return out
}

// signOf reads a sign off v·m >= 0 or v·m > 0, where the sign of m is known.
func (d *Problem) signOf(c jet.Condition) (algebra.Var, jet.Sign, bool) {
	num := c.Value.Num()
	if c.Need == jet.NeedNonZero || num.Len() != 1 {
		return 0, 0, false
	}
	m, k := num.Leading()
	sign, strict := k.Sign(), c.Need == jet.NeedPositive
	found := algebra.Var(-1)
	factor := func(v algebra.Var, exp int, below bool) bool {
		switch s := d.Ring.Symbol(v).Sign; {
		case s == jet.Positive, s == jet.Negative, strict && s != jet.AnySign, below && s != jet.AnySign:
			if exp%2 == 1 && (s == jet.Negative || s == jet.NonPositive) {
				sign = -sign
			}
			return true
		case exp%2 == 0:
			return below || strict // v = 0 would say nothing of the others
		case found >= 0:
			return false
		}
		found, strict = v, strict || below
		return true
	}
	for _, b := range c.Value.DenFactors() {
		v, ok := LoneVar(algebra.FromPoly(b.Base))
		if !ok || !factor(v, b.Exp, true) {
			return 0, 0, false
		}
	}
	below := found
	for _, pw := range m.Powers() {
		if pw.Var == below || !factor(pw.Var, pw.Exp, false) {
			return 0, 0, false
		}
	}
	switch {
	case found < 0:
		return 0, 0, false
	case sign > 0 && strict:
		return found, jet.Positive, true
	case sign > 0:
		return found, jet.NonNegative, true
	case strict:
		return found, jet.Negative, true
	}
	return found, jet.NonPositive, true
}

// suppose makes the ring of a second look know the signs.
func (d *Problem) suppose(list []supposition) error {
	for _, s := range list {
		var v algebra.Var
		var err error
		switch s.of.Kind {
		case jet.Coordinate:
			v = d.Ring.CoordinateVar(s.of.Place)
		case jet.Constant:
			v = d.Ring.ConstantVar(s.of.Name)
		default:
			if v, err = d.Ring.JetVar(s.of.Place, s.of.Index, s.of.Side); err != nil {
				return err
			}
		}
		if d.Ring.Symbol(v).Sign == jet.AnySign {
			d.Ring.Suppose(v, s.sign)
		}
	}
	return nil
}

// rough reports a kernel in f that is not smooth in the jets and coordinates
// where its radicand vanishes, which it may do: the Euler operator then says
// nothing there.
func (d *Problem) rough(f algebra.Fraction) (algebra.Var, bool) {
	for _, k := range d.Ring.Kernels(f) {
		s := d.Ring.Symbol(k)
		if s.Kind != jet.Root || d.Ring.VisiblyPositive(s.Arg) {
			continue
		}
		if v, ok := LoneVar(s.Arg); ok && d.Ring.Symbol(v).Kind == jet.Coordinate {
			continue // defined on one side of an edge of the domain
		}
		if slices.ContainsFunc(d.Ring.Support(s.Arg), func(v algebra.Var) bool {
			kind := d.Ring.Symbol(v).Kind
			return kind == jet.Coordinate || kind == jet.Derivative
		}) {
			return k, true
		}
	}
	return 0, false
}
