package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

// Budgets of solving equations for derivatives.
const (
	maxSolveSteps   = 64
	maxIntegrations = 12 // integrability conditions that join the equations
)

// equation is an equation of a claim, or one that follows from others.
type equation struct {
	node    formula.Node // as written; nil for what follows from others
	poly    algebra.Poly // what vanishes, where node is nil
	derived bool         // an integrability condition
}

// solveAll solves equations for derivatives, one after the other: what one
// determines is put into the others, and an equation whose derivative another
// determines is looked at again. Where two determine a derivative in two ways,
// the difference joins the equations (the integrability conditions of an
// orthonomic system; Seiler, Involution, Springer 2010, chapter 2). It reports
// false where some equation of the claim is not solved. An integrability
// condition that is not solved makes d.hidden true: then the equations have
// consequences that are not followed.
func (d *Problem) solveAll(queue []*equation, restricted []*solved) (eqs []*solved, ok bool, err error) {
	eqs = slices.Clone(restricted)
	joined := 0
	for range maxSolveSteps {
		if len(queue) == 0 {
			if queue, err = d.integrabilityConditions(eqs); err != nil {
				return nil, false, err
			}
			if len(queue) == 0 || d.hidden {
				return eqs, true, nil
			}
			if joined += len(queue); joined > maxIntegrations {
				break
			}
		}
		q := queue[0]
		queue = queue[1:]
		p, ok, err := d.rewritten(q, eqs)
		if err != nil {
			return nil, false, err
		}
		if ok && p.IsZero() {
			continue
		}
		if _, isConst := p.IsConst(); ok && isConst {
			d.Open("the equations contradict each other: no jet satisfies them and all their derivatives")
			return nil, false, nil
		}
		var s *solved
		if ok {
			if s, ok = d.solve(algebra.FromPoly(p), eqs); !ok {
				s, ok = d.solve(algebra.FromPoly(p), restricted)
			}
		}
		if !ok && q.derived {
			d.hidden = true
			continue
		}
		if !ok {
			return nil, false, nil
		}
		kept := slices.Clone(restricted)
		for _, e := range eqs[len(restricted):] {
			if !d.conflict(e, s) {
				kept = append(kept, e)
				continue
			}
			v, err := d.Ring.JetVar(e.unknown, e.index, jet.NoSide)
			if err != nil {
				return nil, false, err
			}
			queue = append(queue, &equation{poly: jet.Of(v).Sub(e.Value).Num()})
		}
		eqs = append(kept, s)
	}
	d.hidden = true
	if slices.ContainsFunc(queue, func(q *equation) bool { return !q.derived }) {
		return nil, false, nil
	}
	return eqs, true, nil
}

// rewritten is an equation with all that the solved ones determine put in, by
// its square-free part. It reports false where that is not possible: what is
// determined stands inside a root or another function.
func (d *Problem) rewritten(q *equation, eqs []*solved) (algebra.Poly, bool, error) {
	if len(eqs) > 0 {
		d.Ring.SetRewriter(d.rewriter(eqs))
		d.In.Reset()
	}
	f := algebra.FromPoly(q.poly)
	if q.node != nil {
		var err error
		if f, err = d.In.Scalar(q.node); err != nil {
			return q.poly, false, err
		}
		return d.zeroSet(f.Num()), true, nil
	}
	put := map[algebra.Var]algebra.Fraction{}
	for _, v := range d.Ring.Support(f) {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Derivative {
			continue
		}
		x, err := d.Ring.Jet(s.Place, s.Index, s.Side)
		if err != nil {
			return q.poly, false, err
		}
		if w, ok := LoneVar(x); !ok || w != v {
			put[v] = x
		}
	}
	for _, k := range d.Ring.Kernels(f) {
		for _, v := range d.Ring.Support(d.Ring.Symbol(k).Arg) {
			if _, ok := put[v]; ok {
				return q.poly, false, nil
			}
		}
	}
	f, err := d.Ring.Reduce(f.SubstMany(put))
	return d.zeroSet(f.Num()), err == nil, err
}

// integrabilityConditions are the differences of what solved equations make of
// the derivatives that two of them determine, where they are not zero.
func (d *Problem) integrabilityConditions(eqs []*solved) ([]*equation, error) {
	if len(eqs) > 0 {
		d.Ring.SetRewriter(d.rewriter(eqs))
		d.In.Reset()
	}
	var out []*equation
	for i, e := range eqs {
		for _, f := range eqs[:i] {
			if e.unknown != f.unknown {
				continue
			}
			var top jet.Index
			for k := range top {
				top[k] = max(e.index[k], f.index[k])
			}
			a, err := d.Ring.TotalIndex(e.Value, top.Minus(e.index))
			if err != nil {
				return nil, err
			}
			b, err := d.Ring.TotalIndex(f.Value, top.Minus(f.index))
			if err != nil {
				return nil, err
			}
			diff, err := d.Ring.Sub(a, b)
			if err != nil {
				return nil, err
			}
			if !diff.IsZero() {
				out = append(out, &equation{poly: diff.Num(), derived: true})
			}
		}
	}
	return out, nil
}

// conflict reports whether the equation s determines what e is about: the
// derivative of e, or one in its value.
func (d *Problem) conflict(e, s *solved) bool {
	if e.unknown == s.unknown && (e.index.Covers(s.index) || s.index.Covers(e.index)) {
		return true
	}
	return slices.ContainsFunc(d.Ring.Support(e.Value), func(w algebra.Var) bool {
		t := d.Ring.Symbol(w)
		return t.Kind == jet.Derivative && t.Place == s.unknown && t.Index.Covers(s.index)
	})
}

// solve finds a derivative that f = 0 determines: f is linear in it with a
// factor that is visibly not zero, and holds no derivative of it. Equations
// already solved must not hold derivatives of it, nor it of theirs. Among the
// candidates the one of lowest order is taken, the last coordinate first, and
// an unknown itself only where there is no other.
func (d *Problem) solve(f algebra.Fraction, eqs []*solved) (*solved, bool) {
	num := f.Num()
	inKernels := map[algebra.Var]bool{}
	for _, k := range d.Ring.Kernels(algebra.FromPoly(num)) {
		for _, v := range d.Ring.Support(d.Ring.Symbol(k).Arg) {
			inKernels[v] = true
		}
	}
	var jets []algebra.Var
	for _, v := range d.Ring.Support(algebra.FromPoly(num)) {
		if d.Ring.Symbol(v).Kind == jet.Derivative {
			jets = append(jets, v)
		}
	}
	rank := func(v algebra.Var) [jet.MaxCoordinates + 1]int {
		s := d.Ring.Symbol(v)
		var k [jet.MaxCoordinates + 1]int
		if k[0] = s.Index.Order(); k[0] == 0 {
			k[0] = jet.MaxProlonged + 1
		}
		for i := range s.Index {
			k[i+1] = int(s.Index[i])
		}
		return k
	}
	slices.SortStableFunc(jets, func(a, b algebra.Var) int {
		x, y := rank(a), rank(b)
		return slices.Compare(x[:], y[:])
	})
	for _, v := range jets {
		s := d.Ring.Symbol(v)
		if num.Degree(v) != 1 || inKernels[v] {
			continue
		}
		co := num.Coeffs(v)
		lead := algebra.FromPoly(co[1])
		if !d.Ring.VisiblyPositive(lead) && !d.Ring.VisiblyPositive(lead.Neg()) {
			continue
		}
		if slices.ContainsFunc(jets, func(w algebra.Var) bool {
			t := d.Ring.Symbol(w)
			return w != v && t.Place == s.Place && t.Index.Covers(s.Index)
		}) {
			continue
		}
		value, err := d.Ring.Quo(algebra.FromPoly(co[0]).Neg(), lead)
		if err != nil {
			continue
		}
		found := &solved{s.Place, s.Index, value, nil}
		if !slices.ContainsFunc(eqs, func(e *solved) bool { return d.conflict(e, found) || d.conflict(found, e) }) {
			return found, true
		}
	}
	return nil, false
}
