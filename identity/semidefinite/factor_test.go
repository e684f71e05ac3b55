package semidefinite

import (
	"context"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

func TestPotrf(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 5))
	for _, n := range []int{1, 63, 64, 65, 200} {
		g := mat.NewDense(n, n, nil)
		for i := range n {
			for j := range n {
				g.Set(i, j, rng.NormFloat64())
			}
			g.Set(i, i, g.At(i, i)+float64(n))
		}
		var a mat.SymDense
		a.SymOuterK(1, g)
		f := mat.DenseCopyOf(&a)
		ok, err := potrf(context.Background(), f.RawMatrix().Data, n)
		require.NoError(t, err)
		require.True(t, ok)
		l := mat.NewTriDense(n, mat.Lower, f.RawMatrix().Data)
		var product mat.Dense
		product.Mul(l, l.T())
		assert.True(t, mat.EqualApprox(&product, &a, 1e-9*float64(n*n)))

		last := n - 1
		a.SetSym(last, last, -1)
		ok, err = potrf(context.Background(), mat.DenseCopyOf(&a).RawMatrix().Data, n)
		require.NoError(t, err)
		assert.False(t, ok)
	}
}

func TestIndependentRows(t *testing.T) {
	rng := rand.New(rand.NewPCG(2, 5))
	opt, err := Options{}.withDefaults()
	require.NoError(t, err)
	for range 20 {
		p := randomFeasible(rng, []int{4, -3}, 6, 1, 0.5)
		p.Free[0].Terms = nil
		rank := len(p.A)
		x := make([]float64, rank)
		for range 5 {
			var row SparseSym
			var b float64
			for i := range x {
				x[i] = rng.NormFloat64()
				b += x[i] * p.B[i]
				for _, e := range p.A[i] {
					e.Value *= x[i]
					row = append(row, e)
				}
			}
			p.A, p.B = append(p.A, row), append(p.B, b)
		}
		q, f := p.merged()
		keep, ray, err := independent(context.Background(), &q, f, opt)
		require.NoError(t, err)
		assert.Nil(t, ray)
		assert.Len(t, keep, rank)

		q.B[8] += 1e-3
		_, ray, err = independent(context.Background(), &q, f, opt)
		require.NoError(t, err)
		require.NotNil(t, ray)
		assert.InDelta(t, 1, floats.Dot(q.B, ray), 1e-9)
		var square float64
		for _, m := range blockMatrix(p, ray, p.A) {
			square += mat.Norm(m, 2)
		}
		assert.Less(t, square, 1e-8)
	}
}
