package exact

import (
	"creaseproof/entropy/algebra"
)

// Range is what the assumptions and the box say of one indeterminate; nil ends
// are open to infinity. Strict ends may be excluded.
type Range struct{ Lo, Hi *algebra.Rat }

// Range collects the bounds of v that stand by themselves: assumptions and box
// entries that are affine in v and hold nothing else.
func (d *Problem) Range(v algebra.Var) Range {
	var r Range
	for _, c := range d.Assumed {
		at, lower, both, ok := c.bound(v)
		if !ok {
			continue
		}
		if (lower || both) && (r.Lo == nil || at.Cmp(*r.Lo) > 0) {
			r.Lo = &at
		}
		if (!lower || both) && (r.Hi == nil || at.Cmp(*r.Hi) < 0) {
			r.Hi = &at
		}
	}
	return r
}

// Bounds reports whether a constraint is such a bound of one indeterminate.
func (c Constraint) Bounds() bool {
	p, ok := c.Value.IsPoly()
	return ok && len(p.Vars()) == 1 && p.Degree(p.Vars()[0]) == 1
}

// bound reads the constraint as v >= at, v <= at, or v = at.
func (c Constraint) bound(v algebra.Var) (at algebra.Rat, lower, both, ok bool) {
	p, ok := c.Value.IsPoly()
	if !ok || !c.Bounds() || !p.Has(v) {
		return at, false, false, false
	}
	co := p.Coeffs(v)
	a, _ := co[1].IsConst()
	b, _ := co[0].IsConst()
	if at, ok = b.Neg().Quo(a); !ok {
		return at, false, false, false
	}
	lower = (c.Relation == ">" || c.Relation == ">=") == (a.Sign() > 0)
	return at, lower, c.Relation == "=", true
}

// into moves x into the range, well inside where it was outside.
func (r Range) into(x algebra.Rat, part algebra.Rat) algebra.Rat {
	low := r.Lo != nil && x.Cmp(*r.Lo) <= 0
	high := r.Hi != nil && x.Cmp(*r.Hi) >= 0
	switch {
	case !low && !high:
		return x
	case r.Lo != nil && r.Hi != nil:
		return r.Lo.Add(r.Hi.Sub(*r.Lo).Mul(part))
	case low:
		return r.Lo.Add(part)
	}
	return r.Hi.Sub(part)
}
