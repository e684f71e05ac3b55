package semidefinite

import (
	"context"
	"math"
	"slices"

	"gonum.org/v1/gonum/floats"
)

const (
	// dependence is the squared distance of a row of norm one from the span of
	// others below which it is taken to be a combination of them.
	dependence = 1e-13
	// inconsistency is the relative difference of right sides that is put down
	// to rounding.
	inconsistency = 1e-7
)

// independent returns the rows of p that are kept. If a row that is not kept
// contradicts the others, it returns the multipliers of a dual ray.
func independent(ctx context.Context, p *Problem, f [][]float64, opt Options) (keep []int, ray []float64, err error) {
	norm := make([]float64, len(p.A))
	for i, a := range p.A {
		norm[i] = math.Hypot(a.norm(), floats.Norm(f[i], 2))
		switch {
		case norm[i] > 0:
			keep = append(keep, i)
		case p.B[i] != 0:
			ray = make([]float64, len(p.A))
			ray[i] = 1 / p.B[i]
			return nil, ray, nil
		}
	}
	if len(keep) == 0 || p.disjoint() {
		return keep, nil, nil
	}

	gram, err := p.gram(ctx, f, keep, norm)
	if err != nil {
		return nil, nil, err
	}
	l, pivots, err := pivoted(ctx, gram, len(keep))
	if err != nil {
		return nil, nil, err
	}
	n, rank := len(keep), len(pivots)
	if rank == n {
		return keep, nil, nil
	}
	kept := make([]int, 0, n)
	basic := make([]bool, n)
	for _, j := range pivots {
		kept = append(kept, keep[j])
		basic[j] = true
	}
	for t, i := range keep {
		if basic[t] {
			continue
		}
		// The combination x of the pivots: Lᵀ x = l.
		x := slices.Clone(l[t*n : t*n+rank])
		for k := rank - 1; k >= 0; k-- {
			p := pivots[k]
			x[k] /= l[p*n+k]
			floats.AddScaled(x[:k], -x[k], l[p*n:p*n+k])
		}
		y := make([]float64, len(p.A))
		y[i] = 1 / norm[i]
		gap, size := p.B[i]/norm[i], math.Abs(p.B[i]/norm[i])
		for k, j := range pivots {
			r := keep[j]
			y[r] = -x[k] / norm[r]
			gap += y[r] * p.B[r]
			size += math.Abs(y[r] * p.B[r])
		}
		if math.Abs(gap) <= inconsistency*size {
			continue
		}
		floats.Scale(1/gap, y)
		if allFinite(y) {
			if eta := p.rayError(y); eta <= opt.Infeasibility {
				return nil, y, nil
			}
		}
		kept = append(kept, i)
	}
	slices.Sort(kept)
	return kept, nil, nil
}

// pivoted factors a Gram matrix of order n, given by its lower triangle, as
// L Lᵀ with the largest pivot first, and the first of equal ones. The rows of L
// are in the order of the matrix, its columns in that of the pivots.
func pivoted(ctx context.Context, gram []float64, n int) (l []float64, pivots []int, err error) {
	l = make([]float64, n*n)
	left := make([]float64, n)
	for i := range left {
		left[i] = gram[i*n+i]
	}
	for k := range n {
		if err := ctx.Err(); err != nil {
			return nil, nil, err
		}
		p := floats.MaxIdx(left)
		if !(left[p] > dependence) {
			return l, pivots, nil
		}
		root := math.Sqrt(left[p])
		pivots = append(pivots, p)
		for i := range n {
			if math.IsInf(left[i], -1) || i == p {
				continue
			}
			v := gram[max(i, p)*n+min(i, p)] - floats.Dot(l[i*n:i*n+k], l[p*n:p*n+k])
			v /= root
			l[i*n+k] = v
			left[i] -= v * v
		}
		l[p*n+k] = root
		left[p] = math.Inf(-1) // Used.
	}
	return l, pivots, nil
}

// disjoint reports whether no two rows of p, which is merged, have entries at
// the same place.
func (p *Problem) disjoint() bool {
	if len(p.Free) > 0 {
		return false
	}
	type place struct{ block, row, col int }
	seen := make(map[place]bool)
	for _, a := range p.A {
		for _, e := range a {
			at := place{e.Block, e.Row, e.Col}
			if seen[at] {
				return false
			}
			seen[at] = true
		}
	}
	return true
}

// gram returns the lower triangle of the Gram matrix of the rows, scaled to norm one.
func (p *Problem) gram(ctx context.Context, f [][]float64, keep []int, norm []float64) ([]float64, error) {
	n := len(keep)
	gram := make([]float64, n*n)
	dense := shape(p.Blocks).zero()
	for s, i := range keep {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		p.addMatrix(dense, 1/norm[i], p.A[i])
		for t := s; t < n; t++ {
			j := keep[t]
			gram[t*n+s] = (p.inner(p.A[j], dense) + floats.Dot(f[i], f[j])/norm[i]) / norm[j]
		}
		for _, e := range p.A[i] {
			if order := p.Blocks[e.Block]; order < 0 {
				dense[e.Block][e.Row] = 0
			} else {
				dense[e.Block][e.Row*order+e.Col] = 0
				dense[e.Block][e.Col*order+e.Row] = 0
			}
		}
	}
	return gram, nil
}

// rayError returns the eta of a dual ray y with b'y = 1.
func (p *Problem) rayError(y []float64) float64 {
	s := shape(p.Blocks).zero()
	for i, a := range p.A {
		p.addMatrix(s, -y[i], a)
	}
	var work eigenWork
	eta := max(0, -shape(p.Blocks).least(s, &work))
	if r := p.freeAdjoint(y); len(r) > 0 {
		eta = max(eta, floats.Norm(r, 2))
	}
	return eta
}

// freeAdjoint returns F'y.
func (p *Problem) freeAdjoint(y []float64) []float64 {
	r := make([]float64, len(p.Free))
	for k, v := range p.Free {
		for _, t := range v.Terms {
			r[k] += t.Value * y[t.Row]
		}
	}
	return r
}
