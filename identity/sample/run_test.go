package sample

import (
	"context"
	"math"
	"slices"
	"sync/atomic"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/program"
)

// The test program is the identity e - 2 eps K - div Sigma
// = (R - eps (u_xixi - u_etaeta))^2/(2 eps) + 2 eps u_xieta^2, and the sum
// bounds the gap.
func TestLayeredProgram(t *testing.T) {
	p := layered(t, 2)
	c := draw(t, Gaussian{}, layeredColumns(), 4)
	out := matrix(2, len(c[0]))
	p.EvalBlock(p.NewWorkspace(), c, out, len(c[0]))
	for j := range c[0] {
		ux, uy, uz, uxx, uxy, uyy := c[0][j], c[1][j], c[2][j], c[3][j], c[4][j], c[5][j]
		eps, cs, sn := c[6][j], c[7][j], c[8][j]
		r := uz - (ux*ux+uy*uy)/2
		xixi := cs*cs*uxx + 2*cs*sn*uxy + sn*sn*uyy
		etaeta := sn*sn*uxx - 2*cs*sn*uxy + cs*cs*uyy
		xieta := (uyy-uxx)*cs*sn + (cs*cs-sn*sn)*uxy
		want := math.Pow(r-eps*(xixi-etaeta), 2)/(2*eps) + 2*eps*xieta*xieta
		require.InDelta(t, want, out[0][j], 1e-13*out[1][j])
		require.LessOrEqual(t, math.Abs(out[0][j]), out[1][j]*(1+1e-14))
	}
	pt, o := []float64{1, 2, 3, -1, 2, 1, 0.5, 0.6, 0.8}, []float64{0, 0}
	p.Eval(p.NewWorkspace(), pt, o)
	// monomials at the point, by hand: of e - 2 eps K, 9 + 3 + 12 + 1/4 + 2 + 4 +
	// 1/4 + 1/4 + 1/2 + 4; of div Sigma, (3 + 1/2 + 2) (2 (9+16)/25 + 4 (12/25) 2)
	assert.InDelta(t, 9+3+12+0.25+2+4+0.25+0.25+0.5+4+5.5*(2+96.0/25), o[1], 1e-12)
}

// brute finds the best points with no shortcut.
func brute(l *Layout, p *program.Program, laws []Law, seed uint64, samples int64, keep int) (best []Point, nonFinite int64) {
	cols, out := matrix(l.Len(), program.BlockSize), matrix(2, program.BlockSize)
	var all []Point
	for k := int64(0); k*program.BlockSize < samples; k++ {
		n := int(min(program.BlockSize, samples-k*program.BlockSize))
		l.fill(laws[k%int64(len(laws))], NewStream(seed, uint64(k)), cols, n)
		p.EvalBlock(p.NewWorkspace(), cols, out, n)
		for j := range n {
			pt := Point{Block: k, Lane: j, Gap: out[0][j], AbsSum: out[1][j]}
			if !isFinite(pt.Gap) {
				nonFinite++
				continue
			}
			if pt.AbsSum != 0 && isFinite(pt.AbsSum) {
				pt.Margin = pt.Gap / pt.AbsSum
			}
			for i := range cols {
				pt.Values = append(pt.Values, cols[i][j])
			}
			all = append(all, pt)
		}
	}
	slices.SortStableFunc(all, func(a, b Point) int {
		switch {
		case a.Margin < b.Margin:
			return -1
		case a.Margin > b.Margin:
			return 1
		}
		return 0
	})
	for _, pt := range all {
		if len(best) == keep {
			break
		}
		if !slices.ContainsFunc(best, func(q Point) bool { return slices.Equal(q.Values, pt.Values) }) {
			best = append(best, pt)
		}
	}
	return best, nonFinite
}

// quotient is u_x^2 - u_x/u_y with the sum u_x^2 + |u_x/u_y|: not defined where
// u_y = 0, with many equal margins on a lattice.
func quotient(t *testing.T) *program.Program {
	b := program.NewBuilder()
	x := b.PowInt(b.Input(0), 2)
	q := b.Quo(b.Input(0), b.Input(1))
	p, err := b.Compile(b.Sub(x, q), b.Add(x, b.Func(program.Abs, q)))
	require.NoError(t, err)
	return p
}

// strict is 1 + u_x^2 with a margin of 1 everywhere.
func strict(t *testing.T) *program.Program {
	b := program.NewBuilder()
	x := b.Add(b.Const(1), b.PowInt(b.Input(0), 2))
	p, err := b.Compile(x, x)
	require.NoError(t, err)
	return p
}

// Run agrees with the search without shortcuts, for any number of goroutines.
func TestRunAgainstBruteForce(t *testing.T) {
	jets := layeredLayout(t)
	plane, err := NewLayout(free(2)) // few columns: the lattice repeats points
	require.NoError(t, err)
	for name, c := range map[string]struct {
		prog *program.Program
		laws []Law
	}{
		"true":     {layered(t, 2), nil},
		"false":    {layered(t, 1.5), nil},
		"wrong":    {layered(t, 0), nil},
		"quotient": {quotient(t), []Law{Lattice{}}},
		"lattice":  {layered(t, 2), []Law{Lattice{Max: 1}}},
		"strict":   {strict(t), []Law{Lattice{}, Gaussian{}}},
	} {
		laws := c.laws
		if laws == nil {
			laws = DefaultLaws()
		}
		layout := jets
		if c.prog.NumInputs() <= 2 {
			layout = plane
		}
		const samples = 40*program.BlockSize + 17
		for _, keep := range []int{1, 7, 300} {
			want, bad := brute(layout, c.prog, laws, 3, samples, keep)
			for _, jobs := range []int{1, 2, 7} {
				opts := Options{Seed: 3, Samples: samples, Jobs: jobs, Laws: c.laws}
				got, err := Run(context.Background(), opts, layout, c.prog, keep)
				require.NoError(t, err)
				require.Equal(t, want, got.Best, "%s, keep %d, jobs %d", name, keep, jobs)
				assert.Equal(t, want[0].Margin, got.MinMargin)
				assert.Equal(t, int64(samples), got.Drawn)
				assert.Equal(t, bad, got.NonFinite)
				assert.Equal(t, samples-bad, got.Valid)
			}
		}
	}
}

func TestRunFindsViolations(t *testing.T) {
	layout := layeredLayout(t)
	opts := Options{Seed: 1, Samples: 200_000}
	res, err := Run(context.Background(), opts, layout, layered(t, 0), 5)
	require.NoError(t, err)
	assert.Less(t, res.MinMargin, -0.1)
	res, err = Run(context.Background(), opts, layout, layered(t, 1.5), 5)
	require.NoError(t, err)
	assert.Less(t, res.MinMargin, -0.01)
	for i, p := range res.Best {
		assert.Len(t, p.Values, layout.Len())
		assert.Equal(t, p.Gap/p.AbsSum, p.Margin)
		assert.Greater(t, p.Values[6], 0.0)
		if i > 0 {
			assert.GreaterOrEqual(t, p.Margin, res.Best[i-1].Margin)
		}
	}

	// for the true bound nothing is left but rounding
	res, err = Run(context.Background(), opts, layout, layered(t, 2), 5)
	require.NoError(t, err)
	assert.Greater(t, res.MinMargin, -1e-14)
	assert.LessOrEqual(t, res.MinMargin, 0.0)
	assert.Equal(t, opts.Samples, res.Valid)

	res, err = Run(context.Background(), opts, layout, strict(t), 5)
	require.NoError(t, err)
	assert.Equal(t, 1.0, res.MinMargin)
}

// A violation confined to |R| < 1e-6 |p|^2 is met near the well.
func TestRunNearASet(t *testing.T) {
	layout := layeredLayout(t)
	b := program.NewBuilder()
	ux, uy, uz := b.Input(0), b.Input(1), b.Input(2)
	p2 := b.Add(b.PowInt(ux, 2), b.PowInt(uy, 2))
	r := b.Sub(uz, b.Quo(p2, b.Const(2)))
	tiny := b.Mul(b.Const(1e-14), b.PowInt(p2, 2))
	gap := b.Sub(b.PowInt(r, 2), tiny)
	prog, err := b.Compile(gap, b.Sum(b.PowInt(uz, 2), b.Mul(b.Func(program.Abs, uz), p2), b.Quo(b.PowInt(p2, 2), b.Const(4)), tiny))
	require.NoError(t, err)
	res, err := b.Compile(r, b.Gradient(r, []int{2})[0])
	require.NoError(t, err)
	step, err := Newton(res, 2, 1)
	require.NoError(t, err)
	near := Options{Seed: 1, Samples: 20_000, Laws: []Law{Near{HeavyTailed{-8, 8}, step}}}
	found, err := Run(context.Background(), near, layout, prog, 1)
	require.NoError(t, err)
	assert.Less(t, found.MinMargin, -1e-15)
	far := Options{Seed: 1, Samples: 20_000, Laws: []Law{HeavyTailed{-8, 8}}}
	missed, err := Run(context.Background(), far, layout, prog, 1)
	require.NoError(t, err)
	assert.Greater(t, missed.MinMargin, 0.0)
}

// stopper cancels after some blocks.
type stopper struct {
	Gaussian
	after  int64
	drawn  atomic.Int64
	cancel context.CancelFunc
}

func (s *stopper) Draw(st *Stream, l *Layout, cols [][]float64, n int) {
	s.Gaussian.Draw(st, l, cols, n)
	if s.drawn.Add(1) == s.after {
		s.cancel()
	}
}

func TestRunIsCancelled(t *testing.T) {
	layout := layeredLayout(t)
	for _, jobs := range []int{1, 4} {
		ctx, cancel := context.WithCancel(context.Background())
		law := &stopper{after: 20, cancel: cancel}
		var last int64
		res, err := Run(ctx, Options{Samples: 1 << 40, Jobs: jobs, Laws: []Law{law}, Progress: func(done, total int64) {
			last = done
			assert.Equal(t, int64(1<<40), total)
		}}, layout, layered(t, 0), 3)
		require.ErrorIs(t, err, context.Canceled)
		assert.GreaterOrEqual(t, res.Drawn, int64(19*program.BlockSize))
		assert.LessOrEqual(t, res.Drawn, int64((20+jobs)*program.BlockSize))
		assert.Equal(t, res.Drawn, last)
		assert.Len(t, res.Best, 3)
		assert.Negative(t, res.MinMargin)

		res, err = Run(ctx, Options{Samples: 1000}, layout, layered(t, 0), 3)
		require.ErrorIs(t, err, context.Canceled)
		assert.Zero(t, res.Drawn)
		assert.Empty(t, res.Best)
		assert.True(t, math.IsInf(res.MinMargin, 1))
	}
}

func TestRunOptions(t *testing.T) {
	layout := layeredLayout(t)
	prog := layered(t, 1)
	calls := 0
	res, err := Run(context.Background(), Options{Samples: 1000, Progress: func(done, total int64) { calls++ }}, layout, prog, 0)
	require.NoError(t, err)
	assert.Positive(t, calls)
	assert.Nil(t, res.Best)
	assert.False(t, math.IsInf(res.MinMargin, 0))

	res, err = Run(context.Background(), Options{Samples: -5}, layout, prog, 3)
	require.NoError(t, err)
	assert.Zero(t, res.Drawn)

	a, err := Run(context.Background(), Options{Seed: 1, Samples: 1000}, layout, prog, 3)
	require.NoError(t, err)
	b, err := Run(context.Background(), Options{Seed: 2, Samples: 1000}, layout, prog, 3)
	require.NoError(t, err)
	assert.NotEqual(t, a.Best, b.Best)

	one, err := prog.Select(0)
	require.NoError(t, err)
	_, err = Run(context.Background(), Options{}, layout, one, 3)
	assert.ErrorIs(t, err, ErrProgram)
	small, err := NewLayout(free(3))
	require.NoError(t, err)
	_, err = Run(context.Background(), Options{}, small, prog, 3)
	assert.ErrorIs(t, err, ErrProgram)
}
