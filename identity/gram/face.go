package gram

import (
	"math"
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"

	"gonum.org/v1/gonum/mat"
)

func sortedCells(row sparse) [][3]int {
	out := make([][3]int, 0, len(row))
	for k := range row {
		out = append(out, k)
	}
	slices.SortFunc(out, func(a, b [3]int) int { return slices.Compare(a[:], b[:]) })
	return out
}

// restrict keeps the part of the face on which the given vectors (in the
// coordinates of Y) vanish: Y v = 0 for each of them.
func (b *block) restrict(kernel [][]algebra.Rat) {
	if len(kernel) == 0 || b.order() == 0 {
		return
	}
	_, null, ok := algebra.SolveRat(kernel, make([]algebra.Rat, len(kernel)))
	if !ok {
		return
	}
	face := make([][]algebra.Rat, len(b.face))
	for i, row := range b.face {
		face[i] = make([]algebra.Rat, len(null))
		for c, z := range null {
			var s algebra.Rat
			for k, x := range row {
				if !x.IsZero() && !z[k].IsZero() {
					s = s.Add(x.Mul(z[k]))
				}
			}
			face[i][c] = s
		}
	}
	b.face = face
}

// atZero restricts a block by an exact zero of the target: the vector of the
// basis there lies in the kernel, if the factor is positive there.
func (b *block) atZero(z Point) {
	value := func(v algebra.Var) algebra.Rat { return z[v] }
	f, ok := b.factor.Eval(value)
	if !ok || f.Sign() <= 0 || b.order() == 0 || b.multiplier {
		return
	}
	vec := make([]algebra.Rat, b.order())
	for i, m := range b.basis {
		x, ok := algebra.FromTerms([]algebra.Term{{Mono: m, Coef: algebra.Int(1)}}).Eval(value)
		if !ok {
			return
		}
		if x.IsZero() {
			continue
		}
		for r, n := range b.face[i] {
			if !n.IsZero() {
				vec[r] = vec[r].Add(n.Mul(x))
			}
		}
	}
	if slices.ContainsFunc(vec, func(x algebra.Rat) bool { return !x.IsZero() }) {
		b.restrict([][]algebra.Rat{vec})
	}
}

// rationalSpan brings numerical vectors to reduced row echelon form and
// recognises its entries as rationals. It reports false where some entry is no
// small rational to the tolerance.
func rationalSpan(vectors [][]float64, rankTol, entryTol float64) ([][]algebra.Rat, bool) {
	if len(vectors) == 0 {
		return nil, true
	}
	n := len(vectors[0])
	m := make([][]float64, len(vectors))
	for i, v := range vectors {
		m[i] = slices.Clone(v)
	}
	used := make([]bool, n)
	rank := 0
	for rank < len(m) {
		// Full pivoting, with a preference for the first columns of a tie.
		bi, bk, best := -1, -1, rankTol
		for i := rank; i < len(m); i++ {
			for k := range n {
				if !used[k] && math.Abs(m[i][k]) > best*(1+1e-6) {
					bi, bk, best = i, k, math.Abs(m[i][k])
				}
			}
		}
		if bi < 0 {
			break
		}
		m[rank], m[bi] = m[bi], m[rank]
		used[bk] = true
		p := m[rank][bk]
		for k := range n {
			m[rank][k] /= p
		}
		for i := range m {
			if i == rank {
				continue
			}
			if f := m[i][bk]; f != 0 {
				for k := range n {
					m[i][k] -= f * m[rank][k]
				}
			}
		}
		rank++
	}
	out := make([][]algebra.Rat, rank)
	for i := range out {
		out[i] = make([]algebra.Rat, n)
		for k := range n {
			x, ok := recognise(m[i][k], entryTol)
			if !ok {
				return nil, false
			}
			out[i][k] = x
		}
	}
	return out, true
}

// recognise is the simplest rational within tol of x, if its denominator is
// small enough for that to be no accident.
func recognise(x, tol float64) (algebra.Rat, bool) {
	if math.IsNaN(x) || math.Abs(x) > 1e6 {
		return algebra.Rat{}, false
	}
	if math.Abs(x) < tol {
		return algebra.Rat{}, true
	}
	limit := int64(min(1/math.Sqrt(tol*20*math.Max(1, math.Abs(x))), 5000))
	p0, q0, p1, q1 := int64(0), int64(1), int64(1), int64(0)
	y := x
	for range 40 {
		a := math.Floor(y)
		if math.Abs(a) > 1e7 {
			break
		}
		p0, p1 = p1, int64(a)*p1+p0
		q0, q1 = q1, int64(a)*q1+q0
		if q1 > limit {
			break
		}
		if math.Abs(x-float64(p1)/float64(q1)) <= tol*math.Max(1, math.Abs(x)) {
			return algebra.FromBig(big.NewRat(p1, q1)), true
		}
		if y == a {
			break
		}
		y = 1 / (y - a)
	}
	return algebra.Rat{}, false
}

// eigen is the spectral decomposition of a symmetric matrix, ascending.
func eigen(y mat.Symmetric) (values []float64, vectors *mat.Dense, ok bool) {
	var es mat.EigenSym
	if !es.Factorize(y, true) {
		return nil, nil, false
	}
	vectors = &mat.Dense{}
	es.VectorsTo(vectors)
	return es.Values(nil), vectors, true
}
