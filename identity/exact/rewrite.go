package exact

import (
	"errors"
	"fmt"

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
	restricted := eqs
	if len(eqs) > 0 {
		d.Ring.SetRewriter(d.rewriter(eqs))
		d.In.Reset()
	}
	var all []algebra.Poly
	var queue []*equation
	for _, m := range d.Claim.Modulo {
		f, err := d.In.Scalar(m)
		if err != nil {
			return err
		}
		if f.IsZero() {
			continue
		}
		if c, ok := f.IsConst(); ok {
			return &entropy.Error{At: m.At(), Err: fmt.Errorf("the equation is %s = 0 on the jets that are looked at: there are none", c)}
		}
		zeros := d.realZeros(d.zeroSet(f.Num()))
		all = append(all, zeros...)
		switch {
		case empty(zeros):
			d.Open("an equation has no real zeros: no jet satisfies it")
			return nil
		case len(zeros) == 1:
			queue = append(queue, &equation{node: m})
		default:
			for _, z := range zeros {
				queue = append(queue, &equation{poly: z})
			}
		}
	}
	eqs, ok, err := d.solveAll(queue, restricted)
	if err != nil || d.Rec.Verdict != "" {
		return err
	}
	if !ok { // some equation is not solved: keep all as an ideal
		d.Ideal, d.equations, eqs, d.hidden = all, all, restricted, false
	}
	d.Ring.SetRewriter(nil)
	if len(eqs) > 0 {
		d.Ring.SetRewriter(d.rewriter(eqs))
	}
	d.In.Reset()
	d.solved = eqs[len(restricted):]
	return nil
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
