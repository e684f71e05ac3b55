package exact

import (
	"errors"
	"fmt"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// solved is an equation u_J = value, and all its total derivatives with it.
type solved struct {
	unknown int
	index   jet.Index
	Value   algebra.Fraction
	derived map[jet.Index]algebra.Fraction
}

// rewrite installs what restricts the jets of the claim: restrictions, the
// equations of modulo, the well at a jump. Equations that determine one
// derivative are solved for it; the others are kept as an ideal.
func (d *Problem) rewrite() error {
	var eqs []*solved
	for _, r := range d.Claim.Restrict {
		v, err := d.In.Scalar(r.Value)
		if err != nil {
			return err
		}
		for _, w := range d.Ring.Support(v) {
			if d.Ring.Symbol(w).Kind != jet.Constant && d.Ring.Symbol(w).Kind != jet.Pi {
				return &entropy.Error{At: r.Value.At(), Err: fmt.Errorf("a restriction to %s, which is not constant", d.Ring.Format(v))}
			}
		}
		eqs = append(eqs, &solved{r.Unknown, r.Index, v, nil})
	}
	if err := d.contradictory(eqs); err != nil {
		return err
	}
	if d.Claim.Jump {
		if len(d.Claim.Modulo) > 0 {
			return &entropy.Error{At: d.Claim.Modulo[0].At(), Err: errors.New("a claim at a jump is already on the well on both sides"), Advice: "take modulo away"}
		}
		return d.atJump(eqs)
	}
	fixed := len(eqs)
	var all []algebra.Poly
	for _, m := range d.Claim.Modulo {
		if len(eqs) > 0 {
			d.Ring.SetRewriter(d.rewriter(eqs))
			d.In.Reset()
		}
		f, err := d.In.Scalar(m)
		if err != nil {
			return err
		}
		if f.IsZero() {
			continue
		}
		if c, ok := f.IsConst(); ok {
			return &entropy.Error{At: m.At(), Err: fmt.Errorf("the equation is %s = 0 on what is restricted before it: the claim is about no jets", c)}
		}
		p := radical(f.Num())
		all = append(all, p)
		if s, ok := d.solve(algebra.FromPoly(p), eqs); ok {
			eqs = append(eqs, s)
		} else {
			d.Ideal = append(d.Ideal, p)
		}
	}
	if len(d.Ideal) > 0 { // equations that are not solved: keep all as an ideal
		d.Ideal, d.equations, eqs = all, all, eqs[:fixed]
	}
	if len(eqs) > 0 {
		d.Ring.SetRewriter(d.rewriter(eqs))
		d.In.Reset()
	}
	d.solved = eqs[min(fixed, len(eqs)):]
	return d.compatible(eqs)
}

// contradictory refuses restrictions that contradict each other or what is
// given.
func (d *Problem) contradictory(restricted []*solved) error {
	for i, e := range restricted {
		at := d.Claim.Restrict[i].Value.At()
		name := d.Ring.Unknowns[e.unknown]
		for _, f := range restricted {
			if f.unknown == e.unknown && f.index != e.index && e.index.Covers(f.index) && !e.Value.IsZero() {
				return &entropy.Error{At: at, Err: fmt.Errorf("restrictions that contradict each other: a derivative of a derivative of %s that is constant is zero, not %s", name, d.Ring.Format(e.Value))}
			}
		}
		body, ok := d.Claim.Given[e.unknown]
		if !ok || d.Claim.Jump {
			continue
		}
		u, err := d.In.Scalar(body)
		if err != nil {
			return err
		}
		x, err := d.Ring.TotalIndex(u, e.index)
		if err != nil {
			return err
		}
		if diff, err := d.Ring.Sub(x, e.Value); err != nil {
			return err
		} else if !diff.IsZero() {
			return &entropy.Error{At: at, Err: fmt.Errorf("a restriction to %s, but with the given %s this derivative is %s", d.Ring.Format(e.Value), name, d.Ring.Format(x)), Advice: "take the restriction away"}
		}
	}
	return nil
}

// rewriter replaces u_J by what the equation for some u_K, J covering K, makes
// of it. Restrictions to constants have vanishing derivatives by themselves.
func (d *Problem) rewriter(eqs []*solved) jet.Rewriter {
	for _, e := range eqs {
		e.derived = nil // made when fewer equations were known
	}
	busy := map[string]bool{}
	return func(unknown int, j jet.Index, side jet.Side) (algebra.Fraction, bool, error) {
		if side != jet.NoSide {
			return algebra.Fraction{}, false, nil
		}
		for _, e := range eqs {
			if e.unknown != unknown || !j.Covers(e.index) {
				continue
			}
			if x, ok := e.derived[j]; ok {
				return x, true, nil
			}
			key := fmt.Sprint(unknown, j)
			if busy[key] || j.Order() > jet.MaxProlonged {
				return algebra.Fraction{}, false, fmt.Errorf("%w: the equations do not determine %v without going round in a circle", jet.ErrOutside, j)
			}
			busy[key] = true
			defer delete(busy, key)
			x, err := d.Ring.TotalIndex(e.Value, j.Minus(e.index))
			if err != nil {
				return x, false, err
			}
			if e.derived == nil {
				e.derived = map[jet.Index]algebra.Fraction{}
			}
			e.derived[j] = x
			return x, true, nil
		}
		return algebra.Fraction{}, false, nil
	}
}

// solve finds a derivative that f = 0 determines: f is linear in it with a
// factor that is visibly not zero, and holds no derivative of it. Equations
// already solved must not hold derivatives of it, nor it of theirs. Among the
// candidates the one of lowest order is taken, the last coordinate first.
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
		k[0] = s.Index.Order()
		for i := range s.Index {
			k[i+1] = int(s.Index[i])
		}
		return k
	}
	slices.SortStableFunc(jets, func(a, b algebra.Var) int {
		x, y := rank(a), rank(b)
		return slices.Compare(x[:], y[:])
	})
next:
	for _, v := range jets {
		s := d.Ring.Symbol(v)
		if s.Index.Order() == 0 || num.Degree(v) != 1 || inKernels[v] {
			continue
		}
		co := num.Coeffs(v)
		lead := algebra.FromPoly(co[1])
		if !d.Ring.VisiblyPositive(lead) && !d.Ring.VisiblyPositive(lead.Neg()) {
			continue
		}
		for _, w := range jets {
			if t := d.Ring.Symbol(w); w != v && t.Place == s.Place && t.Index.Covers(s.Index) {
				continue next
			}
		}
		value, err := d.Ring.Quo(algebra.FromPoly(co[0]).Neg(), lead)
		if err != nil {
			continue
		}
		for _, e := range eqs {
			if e.unknown == s.Place && (e.index.Covers(s.Index) || s.Index.Covers(e.index)) {
				continue next
			}
			for _, w := range d.Ring.Support(e.Value) {
				if t := d.Ring.Symbol(w); t.Kind == jet.Derivative && t.Place == s.Place && t.Index.Covers(s.Index) {
					continue next
				}
			}
			for _, w := range d.Ring.Support(value) {
				if t := d.Ring.Symbol(w); t.Kind == jet.Derivative && t.Place == e.unknown && t.Index.Covers(e.index) {
					continue next
				}
			}
		}
		return &solved{s.Place, s.Index, value, nil}, true
	}
	return nil, false
}
