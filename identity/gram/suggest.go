package gram

import (
	"math"
	"slices"

	"creaseproof/entropy/algebra"

	"gonum.org/v1/gonum/mat"
)

// maxPoints bounds the points of a picture.
const maxPoints = 24

// suggest reads points off a numerical matrix of one block: the eigenvector of
// the largest eigenvalue of a moment matrix, or that of the smallest of a Gram
// matrix, is the vector of the monomials at a point where the target vanishes
// or would be negative (Henrion and Lasserre 2005 extract points in this way).
// Ratios of its entries give the coordinates.
func (a *ansatz) suggest(pic *Picture, n int, m *mat.SymDense, largest bool) {
	b := a.blocks[n]
	if len(pic.Points) >= maxPoints || b.order() == 0 || b.multiplier {
		return
	}
	values, vectors, ok := eigen(m)
	if !ok {
		return
	}
	c := 0
	if largest {
		c = len(values) - 1
	}
	w := make([]float64, len(b.basis)) // in the monomials
	for i := range w {
		for r, x := range b.face[i] {
			if !x.IsZero() {
				w[i] += x.Float64() * vectors.At(r, c)
			}
		}
	}
	point := map[algebra.Var]float64{}
	for _, v := range a.vars {
		if x, ok := ratio(b.basis, w, v); ok {
			point[v] = x
		}
	}
	if len(point) == len(a.vars) {
		pic.Points = append(pic.Points, point)
	}
}

// ratio is w[m v]/w[m] for the monomial m of largest w, or the root of
// w[m v²]/w[m].
func ratio(basis []algebra.Monomial, w []float64, v algebra.Var) (float64, bool) {
	best, value := 0.0, 0.0
	for power := 1; power <= 2; power++ {
		by := algebra.NewMonomial(algebra.Power{Var: v, Exp: power})
		for i, m := range basis {
			k := slices.Index(basis, m.Mul(by))
			if k < 0 || math.Abs(w[i]) <= best {
				continue
			}
			best, value = math.Abs(w[i]), w[k]/w[i]
			if power == 2 {
				value = math.Sqrt(math.Abs(value))
			}
		}
		if best > 0 {
			break
		}
	}
	return value, best > 1e-6 && !math.IsNaN(value) && !math.IsInf(value, 0)
}
