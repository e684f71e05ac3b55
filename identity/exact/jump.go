package exact

import (
	"errors"
	"fmt"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/jet"
)

// atJump makes the traces those of admissible jumps: p⁺ and p⁻ on the well,
// the normal parallel to their difference. A well that determines one
// derivative is solved for it on either side; another well is kept as a pair
// of polynomials, one in each trace.
func (d *Problem) atJump(restricted []*solved) error {
	res := d.Claim.Setting.Model.Residual
	if res == nil {
		return errors.New(`a claim at a jump needs the residual of a [model]: its zero set is the well`)
	}
	if len(d.Ring.Unknowns) != 1 {
		d.Open("jumps of several unknowns are outside what is decided")
		return nil
	}
	fixed := func(unknown int, j jet.Index) (algebra.Fraction, bool) {
		for _, e := range restricted {
			if e.unknown == unknown && j.Covers(e.index) {
				if j == e.index {
					return e.Value, true
				}
				return algebra.Fraction{}, true
			}
		}
		return algebra.Fraction{}, false
	}
	d.In.Jump = false
	d.Ring.SetRewriter(func(u int, j jet.Index, side jet.Side) (algebra.Fraction, bool, error) {
		x, ok := fixed(u, j)
		return x, ok, nil
	})
	r, err := d.In.Scalar(res)
	if err != nil {
		return err
	}
	d.In.Reset()
	d.In.Jump = true
	for _, v := range d.Ring.Support(r) {
		if s := d.Ring.Symbol(v); s.Kind == jet.Derivative && s.Index.Order() != 1 {
			d.Open("the residual holds %s: at a jump it must be a function of the gradient", s.Name)
			return nil
		}
	}
	zeros := d.realZeros(d.zeroSet(r.Num()))
	if empty(zeros) {
		d.Open("the residual has no real zeros: there is no well")
		return nil
	}
	r = algebra.FromPoly(zeros[0]) // has the same zeros, if it is alone
	well, isSolved := d.solve(r, nil)
	isSolved = isSolved && len(zeros) == 1
	if !isSolved && len(d.Ring.Kernels(r)) > 0 {
		d.Open("the residual is not polynomial in the gradient")
		return nil
	}
	onSide := func(f algebra.Fraction, side jet.Side) (algebra.Fraction, error) {
		m := map[algebra.Var]algebra.Fraction{}
		for _, v := range d.Ring.Support(f) {
			if s := d.Ring.Symbol(v); s.Kind == jet.Derivative {
				x, err := d.Ring.Jet(s.Place, s.Index, side)
				if err != nil {
					return x, err
				}
				m[v] = x
			}
		}
		return d.Ring.Reduce(f.SubstMany(m))
	}
	d.jumpRewriter = func(u int, j jet.Index, side jet.Side) (algebra.Fraction, bool, error) {
		if x, ok := fixed(u, j); ok {
			if side == jet.Difference {
				x = algebra.Fraction{}
			}
			return x, true, nil
		}
		if isSolved && j == well.index && (side == jet.PlusSide || side == jet.MinusSide) {
			x, err := onSide(well.Value, side)
			return x, err == nil, err
		}
		return algebra.Fraction{}, false, nil
	}
	d.Ring.SetRewriter(d.jumpRewriter)
	if isSolved {
		return nil
	}
	for _, side := range []jet.Side{jet.PlusSide, jet.MinusSide} {
		for _, z := range zeros {
			m := map[algebra.Var]algebra.Poly{}
			for _, v := range z.Vars() {
				if s := d.Ring.Symbol(v); s.Kind == jet.Derivative {
					w, err := d.Ring.JetVar(s.Place, s.Index, side)
					if err != nil {
						return err
					}
					m[v] = algebra.Variable(w)
				}
			}
			d.Wells = append(d.Wells, z.SubstMany(m))
		}
	}
	if len(zeros) > 1 {
		return d.tracesDiffer()
	}
	return nil
}

// tracesDiffer opens the claim where the wells make both traces equal.
func (d *Problem) tracesDiffer() error {
	basis := d.completed(d.Wells)
	for i := range d.Ring.Coordinates {
		f, err := d.difference(i)
		if err != nil {
			return err
		}
		q, err := d.InTraces(f.Num())
		if err != nil {
			return err
		}
		if _, rem := q.DivMod(basis, algebra.GradedLex); !rem.IsZero() {
			return nil
		}
	}
	d.Open("the well is one point: there are no jumps")
	return nil
}

// difference is the plus trace of a derivative minus the other.
func (d *Problem) difference(i int) (algebra.Fraction, error) {
	plus, err := d.Ring.Jet(0, jet.Index{}.Plus(i), jet.PlusSide)
	if err != nil {
		return plus, err
	}
	minus, err := d.Ring.Jet(0, jet.Index{}.Plus(i), jet.MinusSide)
	return plus.Sub(minus), err
}

// whereTracesDiffer reports whether g vanishes on the wells wherever the traces
// differ: the product of g with each component of their difference vanishes, and
// some component is not zero.
func (d *Problem) whereTracesDiffer(g algebra.Fraction) (bool, error) {
	if !d.Claim.Jump || len(d.Wells) == 0 {
		return false, nil
	}
	for i := range d.Ring.Coordinates {
		q, err := d.difference(i)
		if err != nil {
			return false, err
		}
		rest, err := d.onIdeal(g.Mul(q))
		if err != nil || !rest.IsZero() {
			return false, err
		}
	}
	return true, nil
}

// InTraces writes a polynomial in the means and differences of the traces as
// one in the traces themselves.
func (d *Problem) InTraces(p algebra.Poly) (algebra.Poly, error) {
	m := map[algebra.Var]algebra.Poly{}
	for _, v := range p.Vars() {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Side == jet.NoSide {
			continue
		}
		plus, err := d.Ring.JetVar(s.Place, s.Index, jet.PlusSide)
		if err != nil {
			return p, err
		}
		minus, err := d.Ring.JetVar(s.Place, s.Index, jet.MinusSide)
		if err != nil {
			return p, err
		}
		switch s.Side {
		case jet.Mean:
			m[v] = algebra.Variable(plus).Add(algebra.Variable(minus)).Scale(algebra.Frac64(1, 2))
		case jet.Difference:
			m[v] = algebra.Variable(plus).Sub(algebra.Variable(minus))
		}
	}
	return p.SubstMany(m), nil
}

// Traces completes a point in the means and differences by the traces.
func (d *Problem) Traces(at jet.Point) error {
	for v, x := range at.Clone() {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Side != jet.Difference {
			continue
		}
		mean, err := d.Ring.JetVar(s.Place, s.Index, jet.Mean)
		if err != nil {
			return err
		}
		m, ok := at[mean]
		if !ok {
			return fmt.Errorf("a jump without a mean")
		}
		for _, side := range []jet.Side{jet.PlusSide, jet.MinusSide} {
			w, err := d.Ring.JetVar(s.Place, s.Index, side)
			if err != nil {
				return err
			}
			h := x.Mul(algebra.Frac64(1, 2))
			if side == jet.MinusSide {
				h = h.Neg()
			}
			at[w] = m.Add(h)
		}
	}
	return nil
}

// jumps reports whether the gradient certainly jumps at a point: some
// component of the difference of the traces is not zero there, or is free.
func (d *Problem) jumps(at jet.Point, wide map[algebra.Var]enclosure.Interval) bool {
	for i := range d.Ring.Coordinates {
		plus, err := d.Ring.Jet(0, jet.Index{}.Plus(i), jet.PlusSide)
		if err != nil {
			return false
		}
		minus, err := d.Ring.Jet(0, jet.Index{}.Plus(i), jet.MinusSide)
		if err != nil {
			return false
		}
		q, err := d.Ring.Sub(plus, minus)
		if err != nil {
			return false
		}
		if v, ok := LoneVar(q); ok && !d.onWell(i) {
			_, known := at[v]
			_, enclosed := wide[v]
			if !known && !enclosed && d.Ring.Symbol(v).Side == jet.Difference {
				return true
			}
		}
		if wide == nil {
			if s, ok := d.Ring.Sign(q, at); ok && s != 0 {
				return true
			}
		} else if s, ok := d.Ring.EncloseAt(q, at, wide, 256).Sign(); ok && s != 0 {
			return true
		}
	}
	return false
}

// onWell reports whether a well that is not solved holds the derivative by
// coordinate i, so that it is not free.
func (d *Problem) onWell(i int) bool {
	return slices.ContainsFunc(d.Wells, func(w algebra.Poly) bool {
		return slices.ContainsFunc(w.Vars(), func(v algebra.Var) bool {
			s := d.Ring.Symbol(v)
			return s.Kind == jet.Derivative && s.Index == jet.Index{}.Plus(i)
		})
	})
}
