package semidefinite

import (
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

func inner(a, b []float64) float64 { return floats.Dot(a, b) }

func norm(a []float64) float64 { return floats.Norm(a, 2) }

// The checks below read a Problem entry by entry and share nothing with the solver.

// blockMatrix returns Σ t_i a_i as one dense matrix per block.
func blockMatrix(p Problem, t []float64, a []SparseSym) []*mat.SymDense {
	out := make([]*mat.SymDense, len(p.Blocks))
	for k, n := range p.Blocks {
		out[k] = mat.NewSymDense(max(n, -n), nil)
	}
	for i := range a {
		for _, e := range a[i] {
			m := out[e.Block]
			m.SetSym(e.Row, e.Col, m.At(e.Row, e.Col)+t[i]*e.Value)
		}
	}
	return out
}

func trace(a, b []*mat.SymDense) float64 {
	var sum float64
	for k := range a {
		n := a[k].SymmetricDim()
		for i := range n {
			for j := range n {
				sum += a[k].At(i, j) * b[k].At(i, j)
			}
		}
	}
	return sum
}

func leastEigenvalue(t *testing.T, a []*mat.SymDense) float64 {
	t.Helper()
	least := math.Inf(1)
	for _, m := range a {
		var e mat.EigenSym
		require.True(t, e.Factorize(m, false))
		least = min(least, e.Values(nil)[0])
	}
	return least
}

// image returns <A_i, X> + (F z)_i.
func image(p Problem, x []*mat.SymDense, z []float64) []float64 {
	r := make([]float64, len(p.A))
	for i := range p.A {
		r[i] = trace(blockMatrix(p, []float64{1}, p.A[i:i+1]), x)
	}
	for k, v := range p.Free {
		for _, f := range v.Terms {
			r[f.Row] += f.Value * z[k]
		}
	}
	return r
}

// freeImage returns F'y.
func freeImage(p Problem, y []float64) []float64 {
	r := make([]float64, len(p.Free))
	for k, v := range p.Free {
		for _, f := range v.Terms {
			r[k] += f.Value * y[f.Row]
		}
	}
	return r
}

// checkOptimal checks the conditions of Karush, Kuhn and Tucker.
func checkOptimal(t *testing.T, p Problem, s *Solution, tol float64) {
	t.Helper()
	require.Equal(t, Optimal, s.Status)
	r := image(p, s.X, s.Z)
	floats.Sub(r, p.B)
	assert.LessOrEqual(t, norm(r), tol*(1+norm(p.B)), "primal residual")

	one := []float64{1}
	c := blockMatrix(p, one, []SparseSym{p.C})
	slack := blockMatrix(p, s.Y, p.A)
	var square float64
	for k := range c {
		var d mat.Dense
		d.Sub(c[k], slack[k])
		d.Sub(&d, s.S[k])
		square += mat.Norm(&d, 2) * mat.Norm(&d, 2)
	}
	f := freeImage(p, s.Y)
	primal, dual := trace(c, s.X), inner(p.B, s.Y)
	for k, v := range p.Free {
		f[k] -= v.Cost
		primal += v.Cost * s.Z[k]
	}
	scale := 1 + math.Sqrt(trace(c, c))
	assert.LessOrEqual(t, math.Sqrt(square)+norm(f), 2*tol*scale, "dual residual")

	assert.Positive(t, leastEigenvalue(t, s.X), "X")
	assert.Positive(t, leastEigenvalue(t, s.S), "S")
	size := 1 + math.Abs(primal) + math.Abs(dual)
	assert.LessOrEqual(t, math.Abs(primal-dual), tol*size, "gap")
	assert.LessOrEqual(t, trace(s.X, s.S), tol*size, "complementarity")
	assert.InDelta(t, primal, s.PrimalObjective, 1e-9*size)
	assert.InDelta(t, dual, s.DualObjective, 1e-9*size)
}

// checkDualRay checks b'y = 1, F'y = 0 and -Σ y_i A_i ⪰ -eta I.
func checkDualRay(t *testing.T, p Problem, s *Solution, eta float64) {
	t.Helper()
	require.Equal(t, PrimalInfeasible, s.Status)
	assert.InDelta(t, 1, inner(p.B, s.Y), 1e-9)
	minus := append([]float64(nil), s.Y...)
	floats.Scale(-1, minus)
	slack := blockMatrix(p, minus, p.A)
	assert.GreaterOrEqual(t, leastEigenvalue(t, slack), -eta)
	assert.LessOrEqual(t, norm(freeImage(p, s.Y)), eta)
	assert.LessOrEqual(t, s.Ray, eta)
	for k := range slack {
		assert.True(t, mat.EqualApprox(slack[k], s.S[k], 1e-9*(1+mat.Norm(slack[k], 2))))
	}
}

// checkPrimalRay checks <C, X> + c'z = -1, X ⪰ 0 and <A_i, X> + (F z)_i = 0.
func checkPrimalRay(t *testing.T, p Problem, s *Solution, eta float64) {
	t.Helper()
	require.Equal(t, DualInfeasible, s.Status)
	cost := trace(blockMatrix(p, []float64{1}, []SparseSym{p.C}), s.X)
	for k, v := range p.Free {
		cost += v.Cost * s.Z[k]
	}
	assert.InDelta(t, -1, cost, 1e-9)
	assert.Positive(t, leastEigenvalue(t, s.X))
	assert.LessOrEqual(t, norm(image(p, s.X, s.Z)), eta)
	assert.InDelta(t, norm(image(p, s.X, s.Z)), s.Ray, 1e-12)
}

func requireFinite(t *testing.T, s *Solution) {
	t.Helper()
	values := []float64{s.PrimalObjective, s.DualObjective, s.PrimalInfeasibility, s.DualInfeasibility, s.Gap, s.Ray}
	values = append(values, s.Y...)
	values = append(values, s.Z...)
	for _, list := range [][]*mat.SymDense{s.X, s.S} {
		for _, m := range list {
			values = append(values, m.RawSymmetric().Data...)
		}
	}
	require.True(t, allFinite(values))
	require.NotEqual(t, Unknown, s.Status)
}
