package semidefinite

import (
	"context"
	"math"
	"math/rand/v2"
	"sync/atomic"
	"testing"
	"time"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestBadInput(t *testing.T) {
	good := func() Problem {
		p := theta(5)
		p.Blocks = []int{5, -2}
		p.A[0] = append(p.A[0], Entry{1, 0, 0, 1}, Entry{1, 1, 1, 1})
		p.Free = []FreeVariable{{Cost: 1, Terms: []FreeTerm{{0, 1}}}}
		return p
	}
	require.NoError(t, func() error { p := good(); return p.Validate() }())
	for name, spoil := range map[string]func(*Problem){
		"no blocks":           func(p *Problem) { p.Blocks = nil },
		"block of order 0":    func(p *Problem) { p.Blocks[1] = 0 },
		"block of order min":  func(p *Problem) { p.Blocks[1] = math.MinInt },
		"block index":         func(p *Problem) { p.A[1][0].Block = 2 },
		"negative block":      func(p *Problem) { p.A[1][0].Block = -1 },
		"row index":           func(p *Problem) { p.A[1][0].Row = 5 },
		"negative row":        func(p *Problem) { p.A[1][0].Row = -1 },
		"column index":        func(p *Problem) { p.C[0].Col = 5 },
		"off the diagonal":    func(p *Problem) { p.A[0][5].Col = 1 },
		"fewer right sides":   func(p *Problem) { p.B = p.B[1:] },
		"fewer matrices":      func(p *Problem) { p.A = p.A[1:] },
		"infinite right side": func(p *Problem) { p.B[0] = math.Inf(-1) },
		"entry not a number":  func(p *Problem) { p.A[2][0].Value = math.NaN() },
		"cost not a number":   func(p *Problem) { p.C[2].Value = math.NaN() },
		"free cost":           func(p *Problem) { p.Free[0].Cost = math.Inf(1) },
		"free row":            func(p *Problem) { p.Free[0].Terms[0].Row = 6 },
		"free negative row":   func(p *Problem) { p.Free[0].Terms[0].Row = -1 },
		"free value":          func(p *Problem) { p.Free[0].Terms[0].Value = math.NaN() },
	} {
		p := good()
		spoil(&p)
		s, err := Solve(context.Background(), p, Options{})
		assert.ErrorIs(t, err, ErrInvalid, name)
		assert.Nil(t, s, name)
	}
}

func TestBadOptions(t *testing.T) {
	for _, opt := range []Options{
		{Feasibility: -1}, {Gap: math.NaN()}, {Infeasibility: math.Inf(1)}, {MaxIterations: -1}, {Mode: 3}, {Mode: -1},
		{Mode: CentralPoint}, {Mode: CentralPoint, Barrier: math.NaN()}, {MemoryLimit: -1},
	} {
		_, err := Solve(context.Background(), theta(5), opt)
		assert.Error(t, err, opt)
	}
}

func TestTooLarge(t *testing.T) {
	for _, n := range []int{1 << 20, -1 << 20, math.MaxInt, math.MinInt + 1} {
		p := Problem{Blocks: []int{n}, A: []SparseSym{{{0, 0, 0, 1}}}, B: []float64{1}}
		_, err := Solve(context.Background(), p, Options{})
		assert.ErrorIs(t, err, ErrTooLarge)
	}
	_, err := Solve(context.Background(), theta(5), Options{MemoryLimit: 100})
	assert.ErrorIs(t, err, ErrTooLarge)
}

func TestIterationLimit(t *testing.T) {
	s := solve(t, theta(5), Options{MaxIterations: 3})
	assert.Equal(t, IterationLimit, s.Status)
	assert.Equal(t, 3, s.Iterations)
	// A larger budget goes on from there.
	last := math.Inf(1)
	for n := 1; n < 7; n++ {
		s := solve(t, theta(5), Options{MaxIterations: n})
		assert.Less(t, s.Gap+s.PrimalInfeasibility+s.DualInfeasibility, last)
		last = s.Gap + s.PrimalInfeasibility + s.DualInfeasibility
	}
}

// countdown is a context that is done after some questions.
type countdown struct {
	context.Context
	left *atomic.Int64
}

func (c countdown) Err() error {
	if c.left.Add(-1) < 0 {
		return context.Canceled
	}
	return nil
}

func TestCancelledAnywhere(t *testing.T) {
	p := randomFeasible(rand.New(rand.NewPCG(1, 2)), []int{10, -2}, 20, 1, 0.3)
	for n := 0; ; n++ {
		var left atomic.Int64
		left.Store(int64(n))
		s, err := Solve(countdown{context.Background(), &left}, p, Options{})
		if err == nil {
			assert.Equal(t, Optimal, s.Status)
			assert.Greater(t, n, 20)
			return
		}
		require.ErrorIs(t, err, context.Canceled)
		require.Nil(t, s)
	}
}

func TestDeadline(t *testing.T) {
	ctx, cancel := context.WithTimeout(context.Background(), time.Millisecond)
	defer cancel()
	_, err := Solve(ctx, largeProgram(), Options{})
	assert.ErrorIs(t, err, context.DeadlineExceeded)
}

func TestExtremeNumbers(t *testing.T) {
	values := []float64{0, 1, -1, 1e300, -1e300, 1e-300, 5e-324, math.MaxFloat64, 1e160, 1e20, -1e-20}
	rng := rand.New(rand.NewPCG(6, 6))
	pick := func() float64 { return values[rng.IntN(len(values))] }
	for range 400 {
		p := Problem{Blocks: []int{1 + rng.IntN(3), -1 - rng.IntN(2)}}
		random := func() (a SparseSym) {
			for range rng.IntN(5) {
				if rng.IntN(3) == 0 {
					i := rng.IntN(-p.Blocks[1])
					a = append(a, Entry{1, i, i, pick()})
				} else {
					a = append(a, Entry{0, rng.IntN(p.Blocks[0]), rng.IntN(p.Blocks[0]), pick()})
				}
			}
			return a
		}
		p.C = random()
		for range rng.IntN(5) {
			p.A, p.B = append(p.A, random()), append(p.B, pick())
		}
		for range rng.IntN(2) {
			f := FreeVariable{Cost: pick()}
			for i := range p.A {
				f.Terms = append(f.Terms, FreeTerm{i, pick()})
			}
			p.Free = append(p.Free, f)
		}
		for _, opt := range []Options{{}, {Mode: AnalyticCentre}, {Mode: CentralPoint, Barrier: 1e-3}} {
			s, err := Solve(context.Background(), p, opt)
			if err != nil {
				require.ErrorIs(t, err, ErrBreakdown)
				require.Nil(t, s)
				continue
			}
			requireFinite(t, s)
		}
	}
}

func TestInputIsKept(t *testing.T) {
	p := randomFeasible(rand.New(rand.NewPCG(1, 3)), []int{4, -2}, 4, 1, 0.5)
	q := randomFeasible(rand.New(rand.NewPCG(1, 3)), []int{4, -2}, 4, 1, 0.5)
	solve(t, p, Options{})
	assert.Equal(t, q, p)
}
