package program

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func partial(b *Builder, x Ref, k int) Ref {
	return b.Diff(x, func(i int) Ref {
		if i == k {
			return b.Const(1)
		}
		return b.Const(0)
	})
}

// Derivatives of the functions against their well-known formulas, written out.
func TestDerivativesOfFunctions(t *testing.T) {
	known := map[Func]func(x float64) float64{
		Sin:  math.Cos,
		Cos:  func(x float64) float64 { return -math.Sin(x) },
		Tan:  func(x float64) float64 { return 1 / (math.Cos(x) * math.Cos(x)) },
		Sinh: math.Cosh,
		Cosh: math.Sinh,
		Tanh: func(x float64) float64 { return 1 - math.Tanh(x)*math.Tanh(x) },
		Exp:  math.Exp,
		Log:  func(x float64) float64 { return 1 / x },
		Sqrt: func(x float64) float64 { return 0.5 / math.Sqrt(x) },
		Cbrt: func(x float64) float64 { return math.Pow(x, -2.0/3) / 3 },
		Erf:  func(x float64) float64 { return 2 / math.Sqrt(math.Pi) * math.Exp(-x*x) },
		Abs:  func(x float64) float64 { return 1 },
		Sign: func(x float64) float64 { return 0 },
	}
	require.Len(t, known, int(funcEnd)-1)
	for f, want := range known {
		b := NewBuilder()
		x := b.Func(f, b.Input(0))
		p, err := b.Compile(partial(b, x, 0), b.Gradient(x, []int{0})[0])
		require.NoError(t, err)
		out := make([]float64, 2)
		for _, v := range []float64{0.25, 0.9, 1.5, 3} {
			p.Eval(p.NewWorkspace(), []float64{v}, out)
			assert.InDelta(t, want(v), out[0], 1e-13*(1+math.Abs(want(v))), "%v'(%v)", f, v)
			assert.Equal(t, out[0], out[1], f)
		}
	}
}

// Diff and Gradient against each other and against central differences, on
// random formulas.
func TestDerivativesOfRandomFormulas(t *testing.T) {
	compared, nonzero := 0, 0
	for seed := range uint64(400) {
		r := rand.New(rand.NewPCG(seed, 2))
		b := NewBuilder()
		const inputs = 3
		pool := randomPool(b, r, inputs, 4+int(seed%12), true)
		f := pool[len(pool)-1]
		grad := b.Gradient(f.ref, []int{2, 0, 1})
		p, err := b.Compile(partial(b, f.ref, 2), partial(b, f.ref, 0), partial(b, f.ref, 1),
			grad[0], grad[1], grad[2])
		require.NoError(t, err)
		out := make([]float64, 6)
		for range 10 {
			x := make([]float64, inputs)
			for i := range x {
				x[i] = 0.5 + 1.5*r.Float64()
			}
			p.Eval(p.NewWorkspace(), x, out)
			for j, i := range []int{2, 0, 1} {
				// Two step widths; where they disagree the formula is too rough
				// here for the comparison.
				d1, ok1 := central(f, x, i, 1e-4)
				d2, ok2 := central(f, x, i, 5e-5)
				v, _ := f.eval(x)
				scale := 1 + math.Abs(d1) + math.Abs(v)
				if !ok1 || !ok2 || math.Abs(d1-d2) > 1e-6*scale {
					continue
				}
				compared++
				if d1 != 0 {
					nonzero++
				}
				require.InDelta(t, d2, out[j], 2e-6*scale, "seed %d, input %d at %v", seed, i, x)
				require.InDelta(t, out[j], out[3+j], 1e-9*scale, "seed %d, input %d at %v", seed, i, x)
			}
		}
	}
	assert.Greater(t, compared, 4000)
	assert.Greater(t, nonzero, 1500)
}

func central(f pair, x []float64, i int, h float64) (float64, bool) {
	y := append([]float64(nil), x...)
	y[i] = x[i] + h
	up, ok := f.eval(y)
	y[i] = x[i] - h
	down, okd := f.eval(y)
	return (up - down) / (2 * h), ok && okd
}

// A total derivative: D u = u_x, D u_x = u_xx gives D(u u_x) = u_x^2 + u u_xx.
func TestTotalDerivative(t *testing.T) {
	b := NewBuilder()
	u, ux, uxx := b.Input(0), b.Input(1), b.Input(2)
	d := b.Diff(b.Mul(u, ux), func(i int) Ref { return []Ref{ux, uxx, 0}[i] })
	assert.Equal(t, b.Add(b.Mul(ux, ux), b.Mul(u, uxx)), d)
}

// Repeated squaring shares everything: without memoisation the derivative of
// x^(2^60) written as sixty nested squares would have 2^60 terms.
func TestDerivativeDoesNotGrow(t *testing.T) {
	b := NewBuilder()
	x := b.Input(0)
	s := x
	for range 60 {
		s = b.Mul(s, b.Add(s, b.Const(1e-30)))
	}
	n := b.Len()
	d := partial(b, s, 0)
	require.Less(t, b.Len(), 6*n)
	d2 := partial(b, d, 0)
	require.Less(t, b.Len(), 40*n)
	p, err := b.Compile(d, d2)
	require.NoError(t, err)
	out := make([]float64, 2)
	p.Eval(p.NewWorkspace(), []float64{1}, out)
	assert.InEpsilon(t, math.Exp2(60), out[0], 1e-9)
	assert.InEpsilon(t, math.Exp2(60)*(math.Exp2(60)-1), out[1], 1e-9)
}

// The gradient of the product of n inputs costs a multiple of n, not n^2.
func TestGradientIsCheap(t *testing.T) {
	const n = 200
	b := NewBuilder()
	var xs []Ref
	var ks []int
	for i := range n {
		xs = append(xs, b.Input(i))
		ks = append(ks, i)
	}
	g := b.Gradient(b.Product(xs...), ks)
	p, err := b.Compile(g...)
	require.NoError(t, err)
	assert.Less(t, p.NumOps(), 4*n)
	in, out := make([]float64, n), make([]float64, n)
	for i := range in {
		in[i] = 1
	}
	in[3] = 2
	p.Eval(p.NewWorkspace(), in, out)
	assert.Equal(t, 1.0, out[3])
	assert.Equal(t, 2.0, out[4])
}

func TestGradientOfUnusedInput(t *testing.T) {
	b := NewBuilder()
	x := b.Mul(b.Input(0), b.Input(1))
	assert.Equal(t, []Ref{b.Const(0), b.Input(0), b.Input(0)}, b.Gradient(x, []int{7, 1, 1}))
}
