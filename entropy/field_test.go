package entropy_test

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

func smallRat(r *rand.Rand) algebra.Rat {
	return algebra.Frac64(r.Int64N(41)-20, 1+r.Int64N(9))
}

// circle is a rational point of the unit circle.
func circle(r *rand.Rand) (c, s algebra.Rat) {
	t := algebra.Frac64(r.Int64N(19)-9, 1+r.Int64N(7))
	one := algebra.Int(1)
	inv, _ := one.Add(t.Mul(t)).Inv()
	return one.Sub(t.Mul(t)).Mul(inv), t.Add(t).Mul(inv)
}

// The compiled field against exact arithmetic at random rational gradients and
// rational points of the circle.
func TestFieldAgainstExact(t *testing.T) {
	set := layered()
	p, err := set.CompileField("Sigma", nil)
	require.NoError(t, err)
	assert.Equal(t, 3, p.Dim())
	assert.Equal(t, 3, p.GradientLen())
	in, ex, err := set.NewExact(t.Context())
	require.NoError(t, err)
	want, err := in.Field(formula.NewField("Sigma", nil))
	require.NoError(t, err)
	cos, sin, err := ex.Ring.CosSin(ex.Constant("theta"))
	require.NoError(t, err)
	r := rand.New(rand.NewPCG(1, 2))
	dst := make([]float64, 3)
	for range 500 {
		at := jet.Point{}
		grad := make([]float64, 3)
		size := 1.0
		for i := range grad {
			x := smallRat(r)
			v, err := ex.Ring.JetVar(0, jet.Index{}.Plus(i), jet.NoSide)
			require.NoError(t, err)
			at[v], grad[i] = x, x.Float64()
			size += math.Abs(grad[i])
		}
		c, s := circle(r)
		at[cos.Vars()[0]], at[sin.Vars()[0]] = c, s
		p.AtTurn(dst, grad, c.Float64(), s.Float64())
		for i, f := range want {
			x, ok := ex.Ring.Exact(f, at)
			require.True(t, ok)
			assert.InDelta(t, x.Float64(), dst[i], 1e-14*size*size*size)
		}
		turned := make([]float64, 3)
		p.At(turned, grad, math.Atan2(s.Float64(), c.Float64()))
		for i := range dst {
			assert.InDelta(t, dst[i], turned[i], 1e-14*size*size*size)
		}
	}
}

// A batch is what the points are one by one, to the last bit, for any number
// of points.
func TestBatch(t *testing.T) {
	p, err := layered().CompileField("Sigma", nil)
	require.NoError(t, err)
	r := rand.New(rand.NewPCG(3, 4))
	for _, n := range []int{0, 1, 255, 1024, 1025, 9999} {
		grads, dst := make([][]float64, n), make([][]float64, n)
		for i := range grads {
			grads[i] = []float64{r.NormFloat64(), r.NormFloat64(), r.NormFloat64()}
			dst[i] = make([]float64, 3)
		}
		require.NoError(t, p.Batch(t.Context(), dst, grads, 0.7))
		one := make([]float64, 3)
		for i := range grads {
			p.At(one, grads[i], 0.7)
			require.Equal(t, one, dst[i])
		}
	}
}

func TestBatchRefuses(t *testing.T) {
	p, err := layered().CompileField("Sigma", nil)
	require.NoError(t, err)
	assert.ErrorIs(t, p.Batch(t.Context(), make([][]float64, 1), nil, 0), entropy.ErrShape)
	dst := [][]float64{{0, 0, 0}, {7, 7, 7}}
	assert.ErrorIs(t, p.Batch(t.Context(), dst, [][]float64{{1, 2, 3}, {1, 2}}, 0), entropy.ErrShape)
	assert.Equal(t, []float64{7, 7, 7}, dst[1])
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	assert.ErrorIs(t, p.Batch(ctx, [][]float64{{0, 0, 0}}, [][]float64{{1, 2, 3}}, 0), context.Canceled)
}

// The field of u in closed form agrees with the field of its gradient, given
// as a function, and with exact formulas.
func TestFieldOfUnknownAndGradient(t *testing.T) {
	set := layered()
	u := parse(set, "exp(x) sin(y) + x^2 z - y/(2 + z^2)")
	of, err := set.CompileFieldOf("Sigma", map[string]formula.Node{"u": u}, nil)
	require.NoError(t, err)
	p, err := set.CompileField("Sigma", nil)
	require.NoError(t, err)
	along := p.Along(func(x, g []float64) {
		w := 2 + x[2]*x[2]
		g[0] = math.Exp(x[0])*math.Sin(x[1]) + 2*x[0]*x[2]
		g[1] = math.Exp(x[0])*math.Cos(x[1]) - 1/w
		g[2] = x[0]*x[0] + 2*x[1]*x[2]/(w*w)
	}, 0.3)
	r := rand.New(rand.NewPCG(5, 6))
	a, b := make([]float64, 3), make([]float64, 3)
	for range 100 {
		x := []float64{r.NormFloat64(), r.NormFloat64(), r.NormFloat64()}
		of.At(a, x, 0.3)
		along(x, b)
		for i := range a {
			assert.InEpsilon(t, b[i], a[i], 1e-10)
		}
	}

	// Exact: both ways of writing it have the same normal form, and another
	// gradient has not.
	gradient := []formula.Node{
		parse(set, "exp(x) sin(y) + 2 x z"), parse(set, "exp(x) cos(y) - 1/(2 + z^2)"), parse(set, "x^2 + 2 y z/(2 + z^2)^2"),
	}
	in, ex, err := set.NewExact(t.Context())
	require.NoError(t, err)
	diff := func(gradient []formula.Node) (zeros int) {
		one, err := set.FieldOfGradient("Sigma", gradient, nil)
		require.NoError(t, err)
		two, err := set.FieldOfUnknowns("Sigma", []formula.Node{u}, nil)
		require.NoError(t, err)
		for i := range one {
			d, err := in.Scalar(formula.NewSum(formula.Term{X: one[i]}, formula.Term{Neg: true, X: two[i]}))
			require.NoError(t, err)
			require.NoError(t, ex.Ring.Err(d))
			if d.IsZero() {
				zeros++
			}
		}
		return zeros
	}
	assert.Equal(t, 3, diff(gradient))
	gradient[1] = parse(set, "exp(x) cos(y) + 1/(2 + z^2)")
	assert.Less(t, diff(gradient), 3)
}

func TestCompileFieldRefuses(t *testing.T) {
	base := func() *entropy.Setting {
		return &entropy.Setting{Coordinates: []string{"x", "y"}, Unknowns: []string{"u"}, Constants: []string{"c"}}
	}
	for _, test := range []struct{ x, want string }{
		{"u_xx", "the derivative u_xx has no value"},
		{"u u_x", "the unknown u has no value"},
		{"x u_x", "the coordinate x has no value"},
		{"c u_x", "the constant c has no value"},
		{"c", "the constant c has no value"},
		{"1/(u_x - u_x)", "vanishes identically"},
		{"euler(u_x^2)", "Euler"},
	} {
		set := setting(base(), nil, map[string]string{"x": test.x})
		_, err := set.CompileField("Sigma", nil)
		require.Error(t, err, test.x)
		assert.ErrorContains(t, err, test.want, test.x)
	}
	set := setting(base(), nil, map[string]string{"x": "c u_x"})
	p, err := set.CompileField("Sigma", map[string]float64{"c": 3})
	require.NoError(t, err)
	dst := make([]float64, 2)
	p.At(dst, []float64{5, 7}, 0)
	assert.Equal(t, []float64{15, 0}, dst)
	_, err = set.CompileField("Tau", nil)
	assert.ErrorContains(t, err, "not a field")
	_, err = set.CompileFieldOf("Sigma", map[string]formula.Node{"v": formula.NewInt(0)}, nil)
	assert.Error(t, err)
	_, err = set.FieldOfGradient("Sigma", nil, nil)
	assert.ErrorIs(t, err, entropy.ErrShape)
}

// Formulas are compiled in the form they are written in: expanded, this one
// loses every digit.
func TestNoExpansion(t *testing.T) {
	set := setting(&entropy.Setting{Coordinates: []string{"x", "y"}, Unknowns: []string{"u"}}, nil,
		map[string]string{"x": "(u_x - 1)^9", "y": "0"})
	p, err := set.CompileField("Sigma", nil)
	require.NoError(t, err)
	dst := make([]float64, 2)
	p.At(dst, []float64{1 + 0x1p-20, 0}, 0)
	assert.Equal(t, math.Ldexp(1, -180), dst[0])
}

func BenchmarkFieldBatch(b *testing.B) {
	p, err := layered().CompileField("Sigma", nil)
	require.NoError(b, err)
	const n = 1 << 16
	grads, dst := make([][]float64, n), make([][]float64, n)
	for i := range grads {
		grads[i], dst[i] = []float64{float64(i), 1, 2}, make([]float64, 3)
	}
	for b.Loop() {
		if err := p.Batch(b.Context(), dst, grads, 0.3); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(n)*float64(b.N)/b.Elapsed().Seconds(), "fields/s")
}
