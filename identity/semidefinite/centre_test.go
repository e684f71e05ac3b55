package semidefinite

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/mat"
)

func TestCentreOfTrace(t *testing.T) {
	// trace X = 3 has the centre 3 I / n; the cost is ignored.
	for _, n := range []int{4, -4} {
		p := Problem{Blocks: []int{n}, A: make([]SparseSym, 1), B: []float64{3}, C: SparseSym{{0, 0, 0, 100}}}
		for i := range 4 {
			p.A[0] = append(p.A[0], Entry{0, i, i, 1})
		}
		s := solve(t, p, Options{Mode: AnalyticCentre})
		require.Equal(t, Optimal, s.Status)
		for i := range 4 {
			assert.InDelta(t, 0.75, s.X[0].At(i, i), 1e-9)
			assert.InDelta(t, 4.0/3, s.S[0].At(i, i), 1e-7)
		}
		assert.InDelta(t, 0, s.X[0].At(0, 3), 1e-9)
		assert.InDelta(t, -4.0/3, s.Y[0], 1e-7)
	}
}

func TestCentralPoint(t *testing.T) {
	// minimise x + 3y - mu (log x + log y), x + y = 1: mu/x - 1 = mu/y - 3.
	p := Problem{
		Blocks: []int{-2}, C: SparseSym{{0, 0, 0, 1}, {0, 1, 1, 3}},
		A: []SparseSym{{{0, 0, 0, 1}, {0, 1, 1, 1}}}, B: []float64{1},
	}
	for _, mu := range []float64{1e-3, 0.5, 20} {
		s := solve(t, p, Options{Mode: CentralPoint, Barrier: mu})
		require.Equal(t, Optimal, s.Status)
		x, y := s.X[0].At(0, 0), s.X[0].At(1, 1)
		assert.InDelta(t, 1, x+y, 1e-9)
		assert.InDelta(t, mu/x-1, mu/y-3, 1e-5*(1+mu))
	}
}

func TestCentralPointScales(t *testing.T) {
	// minimise 200x + 300y - mu (log x + log y), x + y = 50.
	p := Problem{
		Blocks: []int{-2}, C: SparseSym{{0, 0, 0, 200}, {0, 1, 1, 300}},
		A: []SparseSym{{{0, 0, 0, 1}, {0, 1, 1, 1}}}, B: []float64{50},
	}
	for _, mu := range []float64{1, 500, 1e4} {
		s := solve(t, p, Options{Mode: CentralPoint, Barrier: mu})
		require.Equal(t, Optimal, s.Status)
		x, y := s.X[0].At(0, 0), s.X[0].At(1, 1)
		assert.InDelta(t, 50, x+y, 1e-6)
		assert.InDelta(t, mu/x-200, mu/y-300, 1e-4)
		assert.InEpsilon(t, mu, x*s.S[0].At(0, 0), 1e-6)
	}
}

func TestCentreIsStationary(t *testing.T) {
	// X⁻¹ is in the span of the A_i at the centre: X⁻¹ = -Σ y_i A_i.
	rng := rand.New(rand.NewPCG(2, 8))
	for range 5 {
		p := randomSOS(rng, monomials(3, 2), 12, nil)
		s := solve(t, p, Options{Mode: AnalyticCentre})
		require.Equal(t, Optimal, s.Status)
		var product mat.Dense
		y := append([]float64(nil), s.Y...)
		for i := range y {
			y[i] = -y[i]
		}
		product.Mul(s.X[0], blockMatrix(p, y, p.A)[0])
		for i := range 10 {
			product.Set(i, i, product.At(i, i)-1)
		}
		assert.InDelta(t, 0, mat.Norm(&product, 2), 1e-6)
	}
}

func TestCentreOfFace(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 4))
	basis := monomials(3, 2)
	for trial := range 12 {
		count := 1 + trial%4
		var zeros [][]float64
		for range count {
			zeros = append(zeros, []float64{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()})
		}
		p := randomSOS(rng, basis, 12, zeros)
		s := solve(t, p, Options{Mode: AnalyticCentre})
		assert.Contains(t, []Status{Optimal, NearOptimal}, s.Status)
		assert.Less(t, s.PrimalInfeasibility, 1e-7)
		k, err := NumericalKernel(s.X[0], 1e-5)
		require.NoError(t, err)
		require.Equal(t, count, k.Dimension)
		assert.Greater(t, k.Gap, 1e3)
		for _, z := range zeros {
			v := evaluate(basis, z)
			normalise(v)
			var inside mat.VecDense
			inside.MulVec(k.Vectors.T(), mat.NewVecDense(len(v), v))
			assert.InDelta(t, 1, mat.Norm(&inside, 2), 1e-10, "evaluation at a zero is in the kernel")
		}
	}
}

func TestCentreOfUnboundedSet(t *testing.T) {
	p := Problem{Blocks: []int{2}, A: []SparseSym{{{0, 0, 0, 1}}}, B: []float64{1}}
	s := solve(t, p, Options{Mode: AnalyticCentre})
	require.Equal(t, DualInfeasible, s.Status)
	assert.InDelta(t, 1, mat.Trace(s.X[0]), 1e-9)
	assert.InDelta(t, 1, s.X[0].At(1, 1), 1e-7)
	assert.LessOrEqual(t, s.Ray, 1e-8)
}

func TestNumericalKernel(t *testing.T) {
	x := mat.NewSymDense(3, []float64{2, 0, 0, 0, 1e-12, 0, 0, 0, 1})
	k, err := NumericalKernel(x, 1e-6)
	require.NoError(t, err)
	assert.Equal(t, 1, k.Dimension)
	assert.InDelta(t, 1, math.Abs(k.Vectors.At(1, 0)), 1e-12)
	assert.InEpsilon(t, 1e12, k.Gap, 1e-6)
	x.SetSym(1, 1, 0.5)
	k, err = NumericalKernel(x, 1e-6)
	require.NoError(t, err)
	assert.Zero(t, k.Dimension)
	assert.Nil(t, k.Vectors)
	assert.InEpsilon(t, 0.25e6, k.Gap, 1e-6)
	// Just outside of the kernel, and just inside.
	for _, c := range []struct {
		value     float64
		dimension int
	}{{2.1e-6, 0}, {1.9e-6, 1}} {
		x.SetSym(1, 1, c.value)
		k, err = NumericalKernel(x, 1e-6)
		require.NoError(t, err)
		assert.Equal(t, c.dimension, k.Dimension)
	}
	k, err = NumericalKernel(mat.NewSymDense(2, nil), 1e-6)
	require.NoError(t, err)
	assert.Equal(t, 2, k.Dimension)

	for _, r := range []float64{0, -1, 1, math.NaN(), math.Inf(1)} {
		_, err = NumericalKernel(x, r)
		assert.Error(t, err)
	}
	_, err = NumericalKernel(&mat.SymDense{}, 1e-6)
	assert.ErrorIs(t, err, ErrInvalid)
	_, err = NumericalKernel(nil, 1e-6)
	assert.ErrorIs(t, err, ErrInvalid)
	x.SetSym(0, 2, math.NaN())
	_, err = NumericalKernel(x, 1e-6)
	assert.ErrorIs(t, err, ErrInvalid)
}
