package exact

import (
	"fmt"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// Parametrise replaces the wells on both sides of a jump by a rational
// parametrisation, where the well is a smooth irreducible quadric with a
// rational point: the line from that point in direction w meets it once more,
// at base + t w with t = -b(w)/a(w), and these points are dense in it. The
// directions are then free. It reports whether that was possible.
func (d *Problem) Parametrise() (bool, error) {
	if len(d.Wells) != 2 || d.assumedOfJets() {
		return false, nil
	}
	on := map[jet.Side]map[jet.Index]algebra.Fraction{}
	for k, side := range []jet.Side{jet.PlusSide, jet.MinusSide} {
		m, ok, err := d.parametriseOne(d.Wells[k], side)
		if err != nil || !ok {
			return false, err
		}
		on[side] = m
	}
	old := d.jumpRewriter
	d.Ring.SetRewriter(func(u int, j jet.Index, side jet.Side) (algebra.Fraction, bool, error) {
		if x, ok := on[side][j]; ok {
			return x, true, nil
		}
		return old(u, j, side)
	})
	d.Wells = nil
	d.In.Reset()
	d.Ex.ResetNormal()
	return true, nil
}

// assumedOfJets reports whether an assumption or a bound holds a derivative:
// it was read before the parameters were put in.
func (d *Problem) assumedOfJets() bool {
	return slices.ContainsFunc(d.Assumed, func(c Constraint) bool {
		return slices.ContainsFunc(d.Ring.Support(c.Value), func(v algebra.Var) bool { return d.Ring.Symbol(v).Kind == jet.Derivative })
	})
}

// ParametriseZeros does the same for an inequality about first derivatives on
// the zeros of one equation.
func (d *Problem) ParametriseZeros(g *Gap) (bool, error) {
	if d.assumedOfJets() || len(d.equations) != 1 || len(d.Ring.Unknowns) != 1 || len(d.solved) > 0 {
		return false, nil
	}
	for _, v := range d.Ring.Support(g.Value, g.Left, g.Right, algebra.FromPoly(d.equations[0])) {
		if s := d.Ring.Symbol(v); s.Kind == jet.Derivative && s.Index.Order() != 1 {
			return false, nil
		}
	}
	m, ok, err := d.parametriseOne(d.equations[0], jet.NoSide)
	if err != nil || !ok {
		return false, err
	}
	d.Ring.SetRewriter(func(_ int, j jet.Index, side jet.Side) (algebra.Fraction, bool, error) {
		x, ok := m[j]
		if !ok && j.Order() > 1 {
			return x, false, fmt.Errorf("%w: a second derivative on a parametrised well", jet.ErrOutside)
		}
		return x, ok && side == jet.NoSide, nil
	})
	d.Ideal, d.equations, d.parameters = nil, nil, m
	d.In.Reset()
	return true, nil
}

func (d *Problem) parametriseOne(g algebra.Poly, side jet.Side) (map[jet.Index]algebra.Fraction, bool, error) {
	if g.TotalDegree() != 2 {
		return nil, false, nil
	}
	var vars []algebra.Var
	for _, v := range g.Vars() {
		if d.Ring.Symbol(v).Kind != jet.Derivative {
			return nil, false, nil // a well with symbolic constants
		}
		vars = append(vars, v)
	}
	base, ok := (&Points{d: d}).latticeZero(g, vars)
	if !ok || len(vars) < 2 || !smoothQuadric(g, vars, base) {
		return nil, false, nil
	}
	w := make([]algebra.Poly, len(vars))
	for i, v := range vars {
		w[i] = algebra.Variable(d.Ring.FreshConstant(fmt.Sprintf("w%d(%s)", i+1, d.Ring.Name(v))))
	}
	// g(base + t w) = t (b + a t)
	var a, b algebra.Poly
	for i, v := range vars {
		dv := g.Deriv(v)
		x, ok := dv.Eval(func(u algebra.Var) algebra.Rat { return base[u] })
		if !ok {
			return nil, false, nil
		}
		b = b.Add(w[i].Scale(x))
		for k, u := range vars {
			c, _ := dv.Deriv(u).IsConst()
			a = a.Add(w[i].Mul(w[k]).Scale(c.Mul(algebra.Frac64(1, 2))))
		}
	}
	t, err := d.Ring.Quo(algebra.FromPoly(b.Neg()), algebra.FromPoly(a))
	if err != nil {
		return nil, false, err
	}
	out := map[jet.Index]algebra.Fraction{}
	for i, v := range vars {
		x, err := d.Ring.Reduce(jet.Rational(base[v].Big()).Add(t.Mul(algebra.FromPoly(w[i]))))
		if err != nil {
			return nil, false, err
		}
		out[d.Ring.Symbol(v).Index] = x
	}
	return out, true, nil
}

// smoothQuadric reports whether the base point is a smooth point of a quadric
// whose projective matrix has rank three at least, which makes it irreducible.
func smoothQuadric(g algebra.Poly, vars []algebra.Var, base map[algebra.Var]algebra.Rat) bool {
	at := func(u algebra.Var) algebra.Rat { return base[u] }
	n := len(vars)
	m := make([][]algebra.Rat, n+1)
	smooth := false
	for i := range m {
		m[i] = make([]algebra.Rat, n+1)
	}
	for i, v := range vars {
		dv := g.Deriv(v)
		x, _ := dv.Eval(at)
		smooth = smooth || !x.IsZero()
		m[i][n], m[n][i] = x, x // moved to the base point, where g itself is zero
		for k, u := range vars {
			m[i][k], _ = dv.Deriv(u).IsConst()
		}
	}
	return smooth && rank(m) >= 3
}

// rank is the rank of a matrix, which is changed.
func rank(m [][]algebra.Rat) int {
	r := 0
	for c := 0; c < len(m) && r < len(m); c++ {
		p := -1
		for i := r; i < len(m); i++ {
			if !m[i][c].IsZero() {
				p = i
				break
			}
		}
		if p < 0 {
			continue
		}
		m[r], m[p] = m[p], m[r]
		for i := r + 1; i < len(m); i++ {
			f, _ := m[i][c].Quo(m[r][c])
			for k := c; k < len(m); k++ {
				m[i][k] = m[i][k].Sub(f.Mul(m[r][k]))
			}
		}
		r++
	}
	return r
}
