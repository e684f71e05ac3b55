package limits

import (
	"math"

	"creaseproof/entropy/source"
	"creaseproof/quadrature/limit"
)

// regular refuses a map whose determinant vanishes at every one of some points,
// or is positive at some and negative at others: then it folds, and a part of the
// region would be counted twice. One that goes round several times is not noticed.
func (r *reader) regular(pos source.Pos, d *limit.Domain) error {
	const points = 128
	s, x, jac := make([]float64, r.n), make([]float64, r.n), make([][]float64, r.n)
	for i := range jac {
		jac[i] = make([]float64, r.n)
	}
	positive, negative := 0, 0
	for k := range points {
		for i := range s {
			_, f := math.Modf(0.5 + [...]float64{0.754877666246693, 0.569840290998053, 0.324717957244746}[i]*float64(k+1))
			s[i] = d.Lo[i] + f*(d.Hi[i]-d.Lo[i])
		}
		d.Map(s, x, jac)
		det, size := determinant(jac), 1.0
		for _, row := range jac {
			norm := 0.0
			for _, v := range row {
				norm = math.Hypot(norm, v)
			}
			size *= norm
		}
		switch {
		case det > 1e-12*size:
			positive++
		case det < -1e-12*size:
			negative++
		}
	}
	switch {
	case positive == 0 && negative == 0:
		return r.c.Fault(pos, "write a map with independent directions", "the region has no volume: the determinant of its map vanishes")
	case positive > 0 && negative > 0:
		return r.c.Fault(pos, "choose the parameters so that the map covers the region once", "the map of the region folds: its determinant changes sign")
	}
	return nil
}

// determinant is that of a matrix of one to three rows.
func determinant(m [][]float64) float64 {
	switch len(m) {
	case 1:
		return m[0][0]
	case 2:
		return m[0][0]*m[1][1] - m[0][1]*m[1][0]
	}
	det := 0.0
	for i := range 3 {
		j, k := (i+1)%3, (i+2)%3
		det += m[0][i] * (m[1][j]*m[2][k] - m[1][k]*m[2][j])
	}
	return det
}
