package exact

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// ErrIsolated says that a witness is no rational point.
var ErrIsolated = errors.New("the witness is known by enclosures only")

// Replay rebuilds the point of a recorded witness of an inequality: its jets,
// angles and traces, and the orientation of the normal. What the record leaves
// out, because the sides do not depend on it, is given simple values within
// the assumptions. The wells and equations must vanish at the point exactly.
func (d *Problem) Replay(w *claim.Witness, p *Points) (jet.Point, error) {
	at := jet.Point{}
	used := 0
	for v := range algebra.Var(d.Ring.Len()) {
		s := d.Ring.Symbol(v)
		if s.Kind > jet.Derivative || s.Kind == jet.Derivative && s.Side != jet.NoSide || s.Kind == jet.Constant && s.Place < 0 {
			continue
		}
		text, ok := w.Jet[s.Name]
		if !ok {
			continue
		}
		x, err := rational(text)
		if err != nil {
			return nil, fmt.Errorf("%s: %w", s.Name, err)
		}
		at[v], used = x, used+1
	}
	if used != len(w.Jet) {
		// Derivatives of the equations may hold jets that were not met yet.
		if err := d.replayOthers(w, at); err != nil {
			return nil, err
		}
	}
	used = 0
	for v := range algebra.Var(d.Ring.Len()) {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Cosine {
			continue
		}
		a, ok := w.Angle[d.Ring.Format(s.Arg)]
		if !ok {
			continue
		}
		c, err := rational(a.Cos)
		if err != nil {
			return nil, err
		}
		sn, err := rational(a.Sin)
		if err != nil {
			return nil, err
		}
		if !c.Mul(c).Add(sn.Mul(sn)).IsOne() {
			return nil, fmt.Errorf("(%s, %s) is no point of the circle", a.Cos, a.Sin)
		}
		at[v], at[s.Partner], used = c, sn, used+1
	}
	if used != len(w.Angle) {
		return nil, fmt.Errorf("the witness names angles that do not occur in the claim")
	}
	if d.Claim.Jump {
		if err := d.replayTraces(w, p, at); err != nil {
			return nil, err
		}
	}
	for _, v := range p.Free {
		if _, ok := at[v]; !ok {
			at[v] = p.simple(v)
		}
	}
	for _, c := range p.Angles {
		if _, ok := at[c]; !ok {
			at[c], at[d.Ring.Symbol(c).Partner] = algebra.Int(1), algebra.Rat{}
		}
	}
	for _, g := range slices.Concat(d.Wells, d.Ideal) {
		if x, ok := d.Ring.Exact(algebra.FromPoly(g), at); !ok || !x.IsZero() {
			return nil, errors.New("the witness does not lie on the well or the equations")
		}
	}
	return at, nil
}

// replayOthers makes the jets that a witness names and the ring does not hold.
func (d *Problem) replayOthers(w *claim.Witness, at jet.Point) error {
	known := map[string]bool{}
	for v := range at {
		known[d.Ring.Name(v)] = true
	}
	names := map[string]bool{}
	for n := range w.Jet {
		names[n] = !known[n]
	}
	var visit func(u int, j jet.Index, from int) error
	visit = func(u int, j jet.Index, from int) error {
		if n := d.Ring.JetName(u, j); names[n] {
			v, err := d.Ring.JetVar(u, j, jet.NoSide)
			if err != nil {
				return err
			}
			x, err := rational(w.Jet[n])
			if err != nil {
				return err
			}
			at[v], names[n] = x, false
		}
		if j.Order() == jet.MaxOrder {
			return nil
		}
		for i := from; i < len(d.Ring.Coordinates); i++ {
			if err := visit(u, j.Plus(i), i); err != nil {
				return err
			}
		}
		return nil
	}
	for u := range d.Ring.Unknowns {
		if err := visit(u, jet.Index{}, 0); err != nil {
			return err
		}
	}
	for n, missing := range names {
		if missing {
			return fmt.Errorf("the witness names %s, which does not occur in the claim", n)
		}
	}
	return nil
}

func rational(s string) (algebra.Rat, error) {
	if strings.HasPrefix(s, "[") {
		return algebra.Rat{}, ErrIsolated
	}
	return algebra.ParseRat(s)
}

// simple is a simple value that the sign and the bounds of v allow.
func (p *Points) simple(v algebra.Var) algebra.Rat {
	x := algebra.Int(1)
	if s := p.d.Ring.Symbol(v).Sign; s == jet.Negative || s == jet.NonPositive {
		x = x.Neg()
	}
	return p.d.Range(v).into(x, algebra.Frac64(1, 2))
}

// replayTraces puts the traces of a jump in, and the orientation for which the
// normal is the recorded one.
func (d *Problem) replayTraces(w *claim.Witness, p *Points, at jet.Point) error {
	for i, c := range d.Ring.Coordinates {
		name := d.Ring.Unknowns[0] + "_" + c
		plus, err := rational(w.Plus[name])
		if err != nil {
			return fmt.Errorf("plus %s: %w", name, err)
		}
		minus, err := rational(w.Minus[name])
		if err != nil {
			return fmt.Errorf("minus %s: %w", name, err)
		}
		j := jet.Index{}.Plus(i)
		for side, x := range map[jet.Side]algebra.Rat{
			jet.PlusSide: plus, jet.MinusSide: minus, jet.Difference: plus.Sub(minus), jet.Mean: plus.Add(minus).Mul(algebra.Frac64(1, 2)),
		} {
			v, err := d.Ring.JetVar(0, j, side)
			if err != nil {
				return err
			}
			at[v] = x
		}
	}
	for _, sigma := range []int64{1, -1} {
		for _, s := range p.Signs {
			at[s] = algebra.Int(sigma)
		}
		if d.normalShows(w, at) {
			return d.tracesAgree(w, at)
		}
	}
	return errors.New("the recorded normal is not parallel to the jump of the traces")
}

func (d *Problem) normalShows(w *claim.Witness, at jet.Point) bool {
	for i, c := range d.Ring.Coordinates {
		nu, err := d.Ex.Normal(i)
		if err != nil || d.Ring.Show(nu, at) != w.Normal[c] {
			return false
		}
	}
	return len(w.Normal) == len(d.Ring.Coordinates)
}

// tracesAgree checks derivatives that the well determines against the record.
func (d *Problem) tracesAgree(w *claim.Witness, at jet.Point) error {
	for i, c := range d.Ring.Coordinates {
		name := d.Ring.Unknowns[0] + "_" + c
		for side, m := range map[jet.Side]map[string]string{jet.PlusSide: w.Plus, jet.MinusSide: w.Minus} {
			f, err := d.Ring.Jet(0, jet.Index{}.Plus(i), side)
			if err != nil {
				return err
			}
			if x := d.Ring.Show(f, at); x != m[name] {
				return fmt.Errorf("the trace of %s is %s, not %s", name, x, m[name])
			}
		}
	}
	return nil
}

// Shows reports whether a recorded witness has the given sides at a point.
func (d *Problem) Shows(w *claim.Witness, g *Gap, at jet.Point) bool {
	return d.Ring.Show(g.Left, at) == w.Left && d.Ring.Show(g.Right, at) == w.Right
}
