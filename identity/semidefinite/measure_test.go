package semidefinite

import (
	"context"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// What a run measures in scaled units is what the report measures anew.
func TestMeasuresAgree(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 3))
	for n := range 8 {
		p := randomFeasible(rng, []int{5, -3}, 4, 1, 0.6)
		for i := range p.A {
			p.B[i] *= 1e3
		}
		for k := range p.C {
			p.C[k].Value *= 1e2
		}
		opt, err := Options{MaxIterations: n}.withDefaults()
		require.NoError(t, err)
		q, f := p.merged()
		keep, ray, err := independent(context.Background(), &q, f, opt)
		require.NoError(t, err)
		require.Nil(t, ray)
		s := newSolver(context.Background(), compile(&q, f, keep, opt), opt)
		status := IterationLimit
		if n == 0 {
			s.start()
			s.residuals()
			s.keep(s.measure(), 0)
		} else {
			status, err = s.run()
			require.NoError(t, err)
		}
		got := s.best
		want, err := report(&q, s, status, nil)
		require.NoError(t, err)
		tol := 1e-10
		assert.InDelta(t, want.PrimalInfeasibility, got.primal, tol*(1+want.PrimalInfeasibility))
		assert.InDelta(t, want.DualInfeasibility, got.dual, tol*(1+want.DualInfeasibility))
		assert.InDelta(t, want.Gap, got.gap, tol*(1+want.Gap))
	}
}

func TestRayError(t *testing.T) {
	p := Problem{
		Blocks: []int{2, -1},
		A:      []SparseSym{{{0, 0, 1, 3}}, {{1, 0, 0, -1}}},
		B:      []float64{1, 1},
		Free:   []FreeVariable{{Terms: []FreeTerm{{1, 5}}}},
	}
	assert.InDelta(t, 6, p.rayError([]float64{2, 0}), 1e-12)
	assert.InDelta(t, 5, p.rayError([]float64{0, 1}), 1e-12)
	assert.InDelta(t, 20, p.rayError([]float64{0, -4}), 1e-12)
	p.Free = nil
	assert.Zero(t, p.rayError([]float64{0, 1}))
	assert.InDelta(t, 4, p.rayError([]float64{0, -4}), 1e-12)
}
