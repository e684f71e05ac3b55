package program

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// checkPool compares compiled formulas with plain Go, block with single
// evaluation, and selected outputs with all of them.
func checkPool(t *testing.T, seed uint64, inputs, steps int) (compared int) {
	t.Helper()
	r := rand.New(rand.NewPCG(seed, 1))
	b := NewBuilder()
	pool := randomPool(b, r, inputs, steps, false)
	chosen := []pair{pool[len(pool)-1]}
	for range 4 {
		chosen = append(chosen, pool[r.IntN(len(pool))])
	}
	var refs []Ref
	for _, p := range chosen {
		refs = append(refs, p.ref)
	}
	p, err := b.Compile(refs...)
	require.NoError(t, err)
	require.Equal(t, inputs, p.NumInputs())
	require.Equal(t, len(refs), p.NumOutputs())
	sel, err := p.Select(3, 0)
	require.NoError(t, err)

	n := 1 + r.IntN(2*BlockSize)
	in, out := block(p.NumInputs(), n), block(p.NumOutputs(), n)
	part := block(2, n)
	for j := range n {
		for i, v := range randomPoint(r, inputs) {
			in[i][j] = v
		}
	}
	p.EvalBlock(p.NewWorkspace(), in, out, n)
	sel.EvalBlock(sel.NewWorkspace(), in, part, n)

	ws := p.NewWorkspace()
	x, y := make([]float64, inputs), make([]float64, len(refs))
	for j := range n {
		for i := range x {
			x[i] = in[i][j]
		}
		p.Eval(ws, x, y)
		for k := range y {
			require.True(t, same(y[k], out[k][j]), "seed %d: block differs: %v, %v", seed, y[k], out[k][j])
			if want, ok := chosen[k].eval(x); ok {
				compared++
				require.Equal(t, want, y[k]+0, "seed %d output %d at %v", seed, k, x)
			}
		}
		require.True(t, same(out[3][j], part[0][j]) && same(out[0][j], part[1][j]), "seed %d: selection", seed)
	}
	return compared
}

func block(k, n int) [][]float64 {
	s := make([][]float64, k)
	for i := range s {
		s[i] = make([]float64, n)
	}
	return s
}

// The compiled program agrees with plain Go exactly, not only to rounding:
// simplification and fusion keep every rounding.
func TestRandomFormulas(t *testing.T) {
	compared := 0
	for seed := range uint64(300) {
		compared += checkPool(t, seed, 1+int(seed%5), 5+int(seed%60))
	}
	assert.Greater(t, compared, 50000)
}

func FuzzFormulas(f *testing.F) {
	f.Add(uint64(1), uint8(3), uint8(20))
	f.Add(uint64(99), uint8(1), uint8(200))
	f.Fuzz(func(t *testing.T, seed uint64, inputs, steps uint8) {
		checkPool(t, seed, 1+int(inputs%6), int(steps))
	})
}

func TestSimplification(t *testing.T) {
	b := NewBuilder()
	x, y := b.Input(0), b.Input(1)
	zero, one := b.Const(0), b.Const(1)
	assert.Equal(t, zero, b.Const(math.Copysign(0, -1)))
	assert.Equal(t, zero, b.Mul(x, zero))
	assert.Equal(t, x, b.Mul(one, x))
	assert.Equal(t, x, b.Add(zero, x))
	assert.Equal(t, x, b.Sub(x, zero))
	assert.Equal(t, zero, b.Sub(x, x))
	assert.Equal(t, b.Neg(x), b.Sub(zero, x))
	assert.Equal(t, x, b.Neg(b.Neg(x)))
	assert.Equal(t, b.Add(x, y), b.Add(y, x))
	assert.Equal(t, b.Mul(x, y), b.Mul(b.Neg(y), b.Neg(x)))
	assert.Equal(t, b.Sub(x, y), b.Add(x, b.Neg(y)))
	assert.Equal(t, b.Mul(b.Const(0.25), x), b.Quo(x, b.Const(4)))
	assert.Equal(t, b.Mul(x, x), b.PowInt(x, 2))
	assert.Equal(t, one, b.PowInt(x, 0))
	assert.Equal(t, b.Func(Abs, x), b.Func(Abs, b.Neg(x)))
	assert.Equal(t, b.Const(3), b.Func(Sqrt, b.Const(9)))
	assert.NotEqual(t, zero, b.Quo(zero, x), "0/x is not defined at 0")
	assert.NotEqual(t, b.Sub(x, y), b.Sub(y, x))
	assert.NotEqual(t, b.Mul(b.Const(1.0/3), x), b.Quo(x, b.Const(3)), "roundings differ")
	n := b.Len()
	b.Mul(b.Add(y, x), b.Add(x, y))
	assert.Equal(t, n+1, b.Len(), "x+y is shared")
	require.NoError(t, b.Err())
}

func TestNonFiniteConstants(t *testing.T) {
	b := NewBuilder()
	q := b.Quo(b.Const(1), b.Const(0))
	l := b.Func(Log, b.Const(-1))
	h := b.Mul(b.Const(1e300), b.Const(1e300))
	z := b.Mul(b.Const(0), b.Const(math.Inf(1)))
	p, err := b.Compile(q, l, h, z, b.Sub(b.Input(0), q))
	require.NoError(t, err)
	out := make([]float64, 5)
	p.Eval(p.NewWorkspace(), []float64{1}, out)
	assert.True(t, math.IsInf(out[0], 1))
	assert.True(t, math.IsNaN(out[1]))
	assert.True(t, math.IsInf(out[2], 1))
	assert.True(t, math.IsNaN(out[3]))
	assert.True(t, math.IsInf(out[4], -1))
}

func TestOutputs(t *testing.T) {
	b := NewBuilder()
	x := b.Input(2)
	s := b.Add(x, b.Const(1))
	// an input, a constant, a value used further, the same twice
	p, err := b.Compile(x, b.Const(7), s, s, b.Mul(s, s))
	require.NoError(t, err)
	assert.Equal(t, 3, p.NumInputs())
	out := make([]float64, 5)
	p.Eval(p.NewWorkspace(), []float64{0, 0, 4}, out)
	assert.Equal(t, []float64{4, 7, 5, 5, 25}, out)
	for k := range out {
		sel, err := p.Select(k)
		require.NoError(t, err)
		one := make([]float64, 1)
		sel.Eval(sel.NewWorkspace(), []float64{0, 0, 4}, one)
		assert.Equal(t, out[k], one[0], k)
	}
	_, err = p.Select(5)
	assert.Error(t, err)
	_, err = p.Select(1, 1)
	assert.Error(t, err)
}

func TestPowers(t *testing.T) {
	b := NewBuilder()
	x := b.Input(0)
	exps := []float64{-3, -2.5, -0.5, -1, 0, 0.5, 1, 1.5, 2, 3, 7, 7.5, 13, 1.0 / 3, 2.2, -8.25}
	var refs []Ref
	for _, e := range exps {
		refs = append(refs, b.Pow(x, e))
	}
	p, err := b.Compile(refs...)
	require.NoError(t, err)
	out := make([]float64, len(exps))
	for _, v := range []float64{0.3, 1, 2.5, 77} {
		p.Eval(p.NewWorkspace(), []float64{v}, out)
		for k, e := range exps {
			assert.InEpsilon(t, math.Pow(v, e), out[k], 4e-15, "%v^%v", v, e)
		}
	}
	p.Eval(p.NewWorkspace(), []float64{-2}, out)
	assert.Equal(t, -0.125, out[0])
	assert.True(t, math.IsNaN(out[1]) && math.IsNaN(out[14]))
	assert.Equal(t, 4.0, out[8])

	// a large exponent costs a logarithmic number of products
	q, err := b.Compile(b.PowInt(x, 999999999))
	require.NoError(t, err)
	assert.Less(t, q.NumOps(), 60)
	y := make([]float64, 1)
	q.Eval(q.NewWorkspace(), []float64{1 + 1e-9}, y)
	assert.InEpsilon(t, math.Pow(1+1e-9, 999999999), y[0], 1e-6)
	assert.Equal(t, b.PowInt(b.Const(3), 5), b.Const(243))
}

func TestErrors(t *testing.T) {
	try := func(f func(b *Builder) Ref) error {
		b := NewBuilder()
		b.MaxNodes = 50
		_, err := b.Compile(f(b))
		assert.Equal(t, b.Err() == nil, err == nil)
		return err
	}
	assert.ErrorIs(t, try(func(b *Builder) Ref { return b.Add(b.Input(0), 1000) }), ErrInvalidRef)
	assert.ErrorIs(t, try(func(b *Builder) Ref { return b.Neg(-1) }), ErrInvalidRef)
	assert.ErrorIs(t, try(func(b *Builder) Ref { return 99 }), ErrInvalidRef)
	assert.ErrorIs(t, try(func(b *Builder) Ref { return b.Input(-1) }), ErrInvalidInput)
	assert.ErrorIs(t, try(func(b *Builder) Ref { return b.Input(1 << 40) }), ErrInvalidInput)
	assert.ErrorIs(t, try(func(b *Builder) Ref { return b.PowInt(b.Input(0), math.MinInt) }), ErrExponent)
	assert.ErrorIs(t, try(func(b *Builder) Ref { return b.Func(200, b.Input(0)) }), ErrInvalidFunc)
	assert.ErrorIs(t, try(func(b *Builder) Ref {
		x := b.Input(0)
		for range 1000 {
			x = b.Func(Sin, x)
		}
		return x
	}), ErrTooManyNodes)
	assert.NoError(t, try(func(b *Builder) Ref { return b.Func(Sin, b.Input(0)) }))
}

// A chain far deeper than any call stack should be asked to follow.
func TestDeepGraph(t *testing.T) {
	const depth = 100_000
	b := NewBuilder()
	x := b.Input(0)
	s := x
	for range depth {
		s = b.Func(Sin, b.Add(s, x))
	}
	g := b.Gradient(s, []int{0})
	d := b.Diff(s, func(int) Ref { return b.Const(1) })
	p, err := b.Compile(s, d, g[0])
	require.NoError(t, err)
	out := make([]float64, 3)
	p.Eval(p.NewWorkspace(), []float64{0.1}, out)
	assert.InDelta(t, out[1], out[2], 1e-9)
	assert.NotZero(t, out[1])
}

// The sum of n products needs a bounded number of slots.
func TestSlotsAreReused(t *testing.T) {
	b := NewBuilder()
	var terms []Ref
	for i := range 1000 {
		terms = append(terms, b.Mul(b.Func(Sin, b.Input(i)), b.Func(Cos, b.Input(i+1))))
	}
	p, err := b.Compile(b.Sum(terms...), b.Product(terms...))
	require.NoError(t, err)
	// the terms are shared by the two outputs; without the product, far less
	q, err := p.Select(0)
	require.NoError(t, err)
	assert.LessOrEqual(t, q.NumOps(), 3999)

	// a reused slot does not keep what was in it before
	x, y := b.Input(0), b.Input(1)
	s := b.Func(Exp, b.Mul(b.Func(Sin, x), b.Func(Cos, y)))
	u := b.Func(Log, b.Mul(b.Func(Tan, x), b.Func(Tanh, y)))
	two, err := b.Compile(s, u)
	require.NoError(t, err)
	for k := range 2 {
		part, err := two.Select(k)
		require.NoError(t, err)
		assert.Equal(t, 4, part.NumOps())
	}
	r, err := b.Compile(b.Sum(terms...))
	require.NoError(t, err)
	assert.LessOrEqual(t, r.temps, 4)
	assert.Equal(t, 3999, r.NumOps())
}

func TestDeadCode(t *testing.T) {
	b := NewBuilder()
	x := b.Input(0)
	for range 100 {
		b.Func(Exp, b.Add(x, b.Const(float64(b.Len()))))
	}
	p, err := b.Compile(b.Add(x, b.Input(1)))
	require.NoError(t, err)
	assert.Equal(t, 1, p.NumOps())
	assert.Len(t, p.code, 1)
}

func TestEvalDoesNotAllocate(t *testing.T) {
	b := NewBuilder()
	p, err := b.Compile(b.Func(Sqrt, b.Add(b.PowInt(b.Input(0), 2), b.PowInt(b.Input(1), 4))))
	require.NoError(t, err)
	ws := p.NewWorkspace()
	in, out := block(2, 700), block(1, 700)
	p.EvalBlock(ws, in, out, 700)
	assert.Zero(t, testing.AllocsPerRun(10, func() { p.EvalBlock(ws, in, out, 700) }))
	x, y := []float64{1, 2}, []float64{0}
	assert.Zero(t, testing.AllocsPerRun(10, func() { p.Eval(ws, x, y) }))
}
