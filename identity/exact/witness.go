package exact

import (
	"maps"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// Refuted fills the record with a point at which the two sides certainly
// differ. The caller has settled that exactly.
func (d *Problem) Refuted(method string, at jet.Point, left, right algebra.Fraction) {
	d.Rec.Verdict, d.Rec.Method = claim.Refuted, method
	d.ShowWitness(at, left, right)
}

// ShowWitness writes a point into the record, with both sides there.
func (d *Problem) ShowWitness(at jet.Point, left, right algebra.Fraction) {
	if d.Claim.Jump {
		at = d.filled(at, nil)
	}
	d.showPoint(at, d.Ring.Show(left, at), d.Ring.Show(right, at), func(f algebra.Fraction) string { return d.Ring.Show(f, at) })
}

// showPoint writes a point, the values of both sides, and what show makes of
// the traces.
func (d *Problem) showPoint(at jet.Point, left, right string, show func(algebra.Fraction) string) {
	w := &claim.Witness{Jet: map[string]string{}, Left: left, Right: right}
	for v, x := range at {
		s := d.Ring.Symbol(v)
		switch {
		case s.Kind == jet.Cosine:
			if w.Angle == nil {
				w.Angle = map[string]claim.CosSin{}
			}
			w.Angle[d.Ring.Format(s.Arg)] = claim.CosSin{Cos: x.String(), Sin: at[s.Partner].String()}
		case s.Kind == jet.Derivative && s.Side != jet.NoSide, s.Kind >= jet.Cosine, s.Kind == jet.Constant && s.Place < 0:
		default:
			w.Jet[s.Name] = x.String()
		}
	}
	for j, f := range d.parameters {
		w.Jet[d.Ring.JetName(0, j)] = d.Ring.Show(f, at)
	}
	if d.Claim.Jump {
		d.showTraces(w, show)
	}
	d.showDetermined(w, at)
	d.Rec.Witness = w
}

// filled completes a point at a jump by what its traces and normal depend on
// beside it. The claim does not depend on that, so any values do that make the
// gradient jump: components that are free jump by one.
func (d *Problem) filled(at jet.Point, roots map[algebra.Var]enclosure.Interval) jet.Point {
	var all []algebra.Fraction
	for i := range d.Ring.Coordinates {
		for _, side := range []jet.Side{jet.PlusSide, jet.MinusSide} {
			if f, err := d.Ring.Jet(0, jet.Index{}.Plus(i), side); err == nil {
				all = append(all, f)
			}
		}
		if nu, err := d.Ex.Normal(i); err == nil {
			all = append(all, nu)
		}
	}
	out := at.Clone()
	for _, v := range append(d.Ring.Support(all...), d.Ring.Kernels(all...)...) {
		_, known := at[v]
		_, enclosed := roots[v]
		s := d.Ring.Symbol(v)
		switch {
		case known || enclosed:
		case s.Kind == jet.Coordinate, s.Kind == jet.Derivative && s.Side != jet.Difference:
			out[v] = algebra.Rat{}
		case s.Kind == jet.Constant, s.Kind == jet.Derivative:
			out[v] = algebra.Int(1)
		}
	}
	return out
}

// showDetermined writes the derivatives that the equations determine. Jets in
// them that the sides do not depend on are free, and taken as zero.
func (d *Problem) showDetermined(w *claim.Witness, at jet.Point) {
	at = at.Clone()
	for _, e := range d.solved {
		values := map[jet.Index]algebra.Fraction{e.index: e.Value}
		maps.Copy(values, e.derived)
		for _, x := range values {
			for _, v := range d.Ring.Support(x) {
				if s := d.Ring.Symbol(v); s.Kind == jet.Derivative {
					y, ok := at[v]
					if !ok {
						at[v] = algebra.Rat{}
					}
					w.Jet[s.Name] = y.String()
				}
			}
		}
		for j, x := range values {
			v, err := d.Ring.JetVar(e.unknown, j, jet.NoSide)
			if text := d.Ring.Show(x, at); err == nil && text != "undefined" {
				w.Jet[d.Ring.Name(v)] = text
			}
		}
	}
}

// showTraces writes the traces of the gradient and the unit normal.
func (d *Problem) showTraces(w *claim.Witness, show func(algebra.Fraction) string) {
	w.Plus, w.Minus, w.Normal = map[string]string{}, map[string]string{}, map[string]string{}
	for i, c := range d.Ring.Coordinates {
		j := jet.Index{}.Plus(i)
		for _, side := range []jet.Side{jet.PlusSide, jet.MinusSide} {
			f, err := d.Ring.Jet(0, j, side)
			if err != nil {
				continue
			}
			x := show(f)
			if side == jet.PlusSide {
				w.Plus[d.Ring.Unknowns[0]+"_"+c] = x
			} else {
				w.Minus[d.Ring.Unknowns[0]+"_"+c] = x
			}
		}
		if nu, err := d.Ex.Normal(i); err == nil {
			w.Normal[c] = show(nu)
		}
	}
}
