package limits

import (
	"fmt"
	"maps"
	"math"
	"math/big"
	"strings"

	"creaseproof/cases/assumption"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/quadrature/limit"
)

// assume refuses values and eps for which an assumption of the case does not
// hold, in the whole of the domain as far as a few points of it show.
func (r *reader) assume(d *limit.Domain) error {
	for i := range r.l.Eps {
		set := *r.set
		set.Lets = maps.Clone(set.Lets)
		var with []string
		for _, v := range r.l.Values {
			with = append(with, v.Name.S+" = "+r.chosen[v.Name.S])
		}
		if r.small != "" {
			eps, err := r.scope.ParseExpr(r.l.Eps[i])
			if err != nil {
				return err
			}
			set.Lets[r.small] = eps
			with = append(with, r.small+" = "+strings.TrimSpace(r.l.Eps[i].S))
		}
		in, ex, err := set.NewExact(r.ctx)
		if err != nil {
			return err
		}
		text := ""
		if len(with) > 0 {
			text = " for " + strings.Join(with, ", ")
		}
		reason := assumption.Broken(set.Assume, assumption.Values{In: in, Exact: ex, Text: text, At: func() (list []assumption.Point) {
			ec := enclosure.Context{Prec: assumption.Precision}
			for _, x := range r.points(d) {
				p := assumption.Point{Wide: map[algebra.Var]enclosure.Interval{}, Text: fmt.Sprintf(" at (%s) = %s", strings.Join(r.set.Coordinates, ", "), point(x))}
				for k, v := range x {
					if q := new(big.Rat).SetFloat64(v); q != nil {
						p.Wide[ex.Ring.CoordinateVar(k)] = ec.FromRat(q)
					}
				}
				list = append(list, p)
			}
			return list
		}})
		if r.ctx.Err() != nil {
			return r.ctx.Err()
		}
		if reason != "" {
			return r.c.Fault(r.l.Pos, "change the values, or the assumption if it is not needed", "%s", reason)
		}
		if r.small == "" {
			break
		}
	}
	return nil
}

// points are a few points inside the domain.
func (r *reader) points(d *limit.Domain) (list [][]float64) {
	jac := make([][]float64, r.n)
	for i := range jac {
		jac[i] = make([]float64, r.n)
	}
	for k := range 9 {
		s, x := make([]float64, r.n), make([]float64, r.n)
		for i := range s {
			_, f := math.Modf(0.5 + 0.618033988749895*float64((k+1)*(i+1)) + 0.1*float64(i))
			s[i] = d.Lo[i] + f*(d.Hi[i]-d.Lo[i])
		}
		copy(x, s)
		if d.Map != nil {
			d.Map(s, x, jac)
		}
		list = append(list, x)
	}
	return list
}
