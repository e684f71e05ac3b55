package exact

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// NullLagrangians lists what may be added to a gap: the minors, and then, where
// more than those are asked for, the total derivatives that integrate a term
// of the gap by parts.
func (d *Problem) NullLagrangians(g *Gap, atLeast int) ([]NullLagrangian, error) {
	list, err := d.Minors(g)
	if err != nil || atLeast <= len(list) {
		return list, err
	}
	return d.byParts(g, list)
}

// byParts adds D_i(u_J m) for each term u_{J+i} m of the gap, m a product of
// jets and constants.
func (d *Problem) byParts(g *Gap, list []NullLagrangian) ([]NullLagrangian, error) {
	if len(g.Value.DenFactors()) > 0 || g.Value.Num().Len() > maxNull {
		return list, nil
	}
	for m := range g.Value.Num().Terms() {
		for _, pw := range m.Powers() {
			s := d.Ring.Symbol(pw.Var)
			if s.Kind != jet.Derivative || s.Side != jet.NoSide {
				continue
			}
			rest := slices.Clone(m.Powers())
			rest = slices.DeleteFunc(rest, func(p algebra.Power) bool { return p.Var == pw.Var })
			if pw.Exp > 1 {
				rest = append(rest, algebra.Power{Var: pw.Var, Exp: pw.Exp - 1})
			}
			for i := range d.Ring.Coordinates {
				if s.Index[i] == 0 || len(list) >= maxNull {
					continue
				}
				lower := s.Index
				lower[i]--
				f, err := d.Ring.Jet(s.Place, lower, jet.NoSide)
				if err != nil {
					return nil, err
				}
				p := f.Mul(algebra.FromPoly(algebra.FromTerms([]algebra.Term{{Mono: algebra.NewMonomial(rest...), Coef: algebra.Int(1)}})))
				n, err := d.Ring.Total(p, i)
				if err != nil {
					return nil, err
				}
				if n.IsZero() || len(n.DenFactors()) > 0 {
					continue
				}
				if c, _ := n.Num().Primitive(); !c.IsOne() {
					inv, ok := c.Inv()
					if !ok {
						continue
					}
					n, p = n.Scale(inv), p.Scale(inv)
				}
				if slices.ContainsFunc(list, func(o NullLagrangian) bool { return o.Value.Equal(n) || o.Value.Equal(n.Neg()) }) {
					continue
				}
				l := NullLagrangian{Value: n, Minor: n, Coef: jet.Whole(1), Potential: make([]algebra.Fraction, len(d.Ring.Coordinates))}
				l.Potential[i] = p
				list = append(list, l)
			}
		}
	}
	return list, nil
}

// Cancel solves gap + Σ x_k N_k = 0 over the rationals.
func (d *Problem) Cancel(g *Gap, list []NullLagrangian) ([]algebra.Rat, bool) {
	polys := []algebra.Poly{g.Value.Num()}
	if len(g.Value.DenFactors()) > 0 || len(list) == 0 {
		return nil, false
	}
	for _, l := range list {
		p, ok := l.Value.IsPoly()
		if !ok {
			return nil, false
		}
		polys = append(polys, p)
	}
	var rows [][]algebra.Rat
	row := map[string]int{}
	var right []algebra.Rat
	for k, p := range polys {
		for m, c := range p.Terms() {
			key := algebra.FromTerms([]algebra.Term{{Mono: m, Coef: algebra.Int(1)}})
			name := d.Ring.Format(algebra.FromPoly(key))
			r, ok := row[name]
			if !ok {
				r = len(rows)
				row[name] = r
				rows, right = append(rows, make([]algebra.Rat, len(list))), append(right, algebra.Rat{})
			}
			if k == 0 {
				right[r] = c.Neg()
			} else {
				rows[r][k-1] = c
			}
		}
	}
	x, _, ok := algebra.SolveRat(rows, right)
	return x, ok
}
