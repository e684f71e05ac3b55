package exact

import (
	"maps"
	"math/big"

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
	w := &claim.Witness{Jet: map[string]string{}, Left: d.Ring.Show(left, at), Right: d.Ring.Show(right, at)}
	shown := map[algebra.Var]bool{} // what the sides depend on
	for _, v := range d.Ring.Support(left, right) {
		shown[v] = true
	}
	for _, v := range d.Ring.Kernels(left, right) {
		shown[v] = true
	}
	for _, g := range d.Ideal { // and what makes it a jet on the equations
		for _, v := range d.Ring.Support(algebra.FromPoly(g)) {
			shown[v] = true
		}
	}
	for v, x := range at {
		s := d.Ring.Symbol(v)
		switch {
		case !shown[v] && (s.Kind != jet.Cosine || !shown[s.Partner]):
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
	if d.Claim.Jump {
		d.showTraces(w, func(f algebra.Fraction) string { return d.Ring.Show(f, at) })
	}
	d.showDetermined(w, at)
	d.Rec.Witness = w
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

// isolatedWitness refutes at a real algebraic point: all jets but one are
// rational, and the last is a simple root of the one generator that holds it,
// isolated by a change of sign.
func (d *Problem) isolatedWitness(g, left, right algebra.Fraction) bool {
	gens := d.Ideal
	if len(d.Wells) > 0 {
		gens = d.Wells
	}
	pts := d.Points(g, left, right)
	for range witnessTries {
		if d.Ctx.Err() != nil {
			return false
		}
		at, roots, ok := pts.drawIsolated(gens)
		if !ok || !pts.admissibleIsolated(at, roots) {
			continue
		}
		x := d.Ring.EncloseAt(g, at, roots, 256)
		if s, ok := x.Sign(); ok && s != 0 {
			d.Refuted("exact division, and a real zero isolated by a change of sign", at, left, right)
			for v, r := range roots {
				lo, hi := r.Text(20)
				if s := d.Ring.Symbol(v); s.Side == jet.NoSide {
					d.Rec.Witness.Jet[s.Name] = "[" + lo + ", " + hi + "]"
				}
			}
			show := func(f algebra.Fraction) string {
				if x, ok := d.Ring.Exact(f, at); ok {
					return x.String()
				}
				lo, hi := d.Ring.EncloseAt(f, at, roots, 256).Text(20)
				return "[" + lo + ", " + hi + "]"
			}
			d.Rec.Witness.Left, d.Rec.Witness.Right = show(left), show(right)
			if d.Claim.Jump {
				d.showTraces(d.Rec.Witness, show)
			}
			return true
		}
	}
	return false
}

// drawIsolated draws rational values for all jets but one of each generator,
// and encloses a root of the generator in that one.
func (p *Points) drawIsolated(gens []algebra.Poly) (jet.Point, map[algebra.Var]enclosure.Interval, bool) {
	at := jet.Point{}
	for _, v := range p.Free {
		at[v] = p.value(v, p.rng.IntN(2) == 0)
	}
	for _, g := range gens { // traces are drawn themselves
		for _, v := range g.Vars() {
			if _, ok := at[v]; !ok {
				at[v] = p.value(v, false)
			}
		}
	}
	for _, c := range p.Angles {
		t := triples[p.rng.IntN(len(triples))]
		at[c] = algebra.Frac64(int64(t[0]), int64(t[2]))
		at[p.d.Ring.Symbol(c).Partner] = algebra.Frac64(int64(t[1]), int64(t[2]))
	}
	for _, s := range p.Signs {
		at[s] = algebra.Int(1 - 2*p.rng.Int64N(2))
	}
	roots := map[algebra.Var]enclosure.Interval{}
	used := map[algebra.Var]bool{} // by generators before
	for _, g := range gens {
		vs := g.Vars()
		if len(vs) == 0 {
			return nil, nil, false
		}
		v := vs[p.rng.IntN(len(vs))]
		if p.d.Ring.Symbol(v).Kind != jet.Derivative || used[v] {
			return nil, nil, false
		}
		for _, w := range vs {
			used[w] = true
		}
		for _, w := range vs {
			if _, taken := roots[w]; taken {
				return nil, nil, false
			}
		}
		values := map[algebra.Var]algebra.Rat{}
		for _, w := range vs {
			if w != v {
				values[w] = at[w]
			}
		}
		lo, hi, ok := signChange(g.EvalPartial(values), v)
		if !ok {
			return nil, nil, false
		}
		roots[v] = enclosure.Context{Prec: 320}.FromRats(lo.Big(), hi.Big())
		delete(at, v)
	}
	p.meansFromTraces(at, roots)
	return at, roots, true
}

// meansFromTraces makes the means and differences follow from the traces.
func (p *Points) meansFromTraces(at jet.Point, roots map[algebra.Var]enclosure.Interval) {
	if !p.d.Claim.Jump {
		return
	}
	c := enclosure.Context{Prec: 320}
	half := c.FromRat(big.NewRat(1, 2))
	for _, v := range p.Free {
		s := p.d.Ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Side < jet.Mean {
			continue
		}
		value := func(side jet.Side) enclosure.Interval {
			w, err := p.d.Ring.JetVar(s.Place, s.Index, side)
			if err != nil {
				return enclosure.Entire()
			}
			if r, ok := roots[w]; ok {
				return r
			}
			return c.FromRat(at[w].Big())
		}
		plus, minus := value(jet.PlusSide), value(jet.MinusSide)
		delete(at, v)
		if s.Side == jet.Mean {
			roots[v] = c.Mul(half, c.Add(plus, minus))
		} else {
			roots[v] = c.Sub(plus, minus)
		}
	}
}

func (p *Points) admissibleIsolated(at jet.Point, roots map[algebra.Var]enclosure.Interval) bool {
	for _, c := range p.d.Assumed {
		s, ok := p.d.Ring.EncloseAt(c.Value, at, roots, 256).Sign()
		want := map[string]int{">": 1, ">=": 1, "<": -1, "<=": -1}[c.Relation]
		if !ok || want == 0 || s != want {
			return false
		}
	}
	for _, c := range p.d.Ring.Conditions() {
		s, ok := p.d.Ring.EncloseAt(c.Value, at, roots, 256).Sign()
		if !ok || s == 0 || s < 0 && c.Need != jet.NeedNonZero {
			return false
		}
	}
	if p.d.Claim.Jump {
		return p.d.jumps(at, roots)
	}
	return p.d.extendsIsolated(at, roots)
}

// signChange isolates a real zero of a polynomial in v alone between two
// rationals at which it has opposite signs, about 2^-240 apart in proportion.
func signChange(h algebra.Poly, v algebra.Var) (lo, hi algebra.Rat, ok bool) {
	if vs := h.Vars(); len(vs) != 1 || vs[0] != v {
		return lo, hi, false
	}
	value := func(x algebra.Rat) int {
		y, _ := h.Eval(func(algebra.Var) algebra.Rat { return x })
		return y.Sign()
	}
	grid := []algebra.Rat{algebra.Int(0), algebra.Frac64(1, 3), algebra.Int(1), algebra.Int(3), algebra.Int(10), algebra.Int(100)}
	for i := 0; i+1 < len(grid) && !ok; i++ {
		for _, sign := range []int64{1, -1} {
			lo, hi = grid[i].Mul(algebra.Int(sign)), grid[i+1].Mul(algebra.Int(sign))
			if value(lo)*value(hi) < 0 {
				ok = true
				break
			}
		}
	}
	if !ok {
		return lo, hi, false
	}
	s := value(lo)
	for range 250 {
		mid := lo.Add(hi).Mul(algebra.Frac64(1, 2))
		switch value(mid) {
		case 0:
			return mid, mid, true
		case s:
			lo = mid
		default:
			hi = mid
		}
	}
	if lo.Cmp(hi) > 0 {
		lo, hi = hi, lo
	}
	return lo, hi, true
}
