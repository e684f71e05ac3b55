package algebra

import (
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"
)

func TestRingAgainstNaive(t *testing.T) {
	eachShape(t, 30, func(t *testing.T, r *rand.Rand, draw func() Poly) {
		p, q := draw(), draw()
		np, nq := toNaive(p), toNaive(q)
		requireSame(t, np.plus(nq, 1), p.Add(q))
		requireSame(t, np.plus(nq, -1), p.Sub(q))
		requireSame(t, np.times(nq), p.Mul(q))
		c := randomRat(r, 50)
		requireSame(t, np.times(toNaive(Const(c))), p.Scale(c))
	})
}

func TestRingAxioms(t *testing.T) {
	eachShape(t, 20, func(t *testing.T, _ *rand.Rand, draw func() Poly) {
		p, q, s := draw(), draw(), draw()
		require.True(t, p.Add(q).Equal(q.Add(p)))
		require.True(t, p.Add(q).Add(s).Equal(p.Add(q.Add(s))))
		require.True(t, p.Mul(q).Equal(q.Mul(p)))
		require.True(t, p.Mul(q).Mul(s).Equal(p.Mul(q.Mul(s))))
		require.True(t, p.Mul(q.Add(s)).Equal(p.Mul(q).Add(p.Mul(s))))
		require.True(t, p.Sub(p).IsZero())
		require.True(t, p.Add(Poly{}).Equal(p))
		require.True(t, p.Mul(Const(Int(1))).Equal(p))
		require.True(t, p.Mul(Poly{}).IsZero())
		require.Equal(t, p.Equal(q), p.Sub(q).IsZero())
		require.False(t, p.Equal(p.Add(Const(Int(1)))))
	})
}

func TestPowIsRepeatedProduct(t *testing.T) {
	eachShape(t, 10, func(t *testing.T, _ *rand.Rand, draw func() Poly) {
		p := draw()
		want := Const(Int(1))
		for n := range 4 {
			got := p.Pow(n)
			require.NoError(t, got.Err())
			checkCanonical(t, got)
			require.True(t, want.Equal(got), "power %d", n)
			want = want.Mul(p)
		}
	})
}

func TestDerivative(t *testing.T) {
	eachShape(t, 20, func(t *testing.T, r *rand.Rand, draw func() Poly) {
		p, q := draw(), draw()
		v := Var(7*r.IntN(3) - 3)
		requireSame(t, toNaive(p).deriv(v), p.Deriv(v))
		leibniz := p.Deriv(v).Mul(q).Add(p.Mul(q.Deriv(v)))
		require.True(t, p.Mul(q).Deriv(v).Equal(leibniz))
	})
}

func TestExactDivision(t *testing.T) {
	eachShape(t, 20, func(t *testing.T, _ *rand.Rand, draw func() Poly) {
		p, q := draw(), draw()
		if q.IsZero() {
			_, ok := p.DivExact(q)
			require.False(t, ok)
			return
		}
		quo, ok := p.Mul(q).DivExact(q)
		require.True(t, ok)
		checkCanonical(t, quo)
		require.True(t, quo.Equal(p))
		if quo, ok := p.DivExact(q); ok {
			require.True(t, quo.Mul(q).Equal(p))
		}
		if _, constant := q.IsConst(); !constant {
			_, ok := p.Mul(q).Add(Const(Int(1))).DivExact(q)
			require.False(t, ok)
		}
	})
}

func TestDivisionThatOutgrowsMachineIntegers(t *testing.T) {
	x, y := Variable(0), Variable(1)
	q, ok := x.Pow(100).Add(y).DivExact(x.Sub(y.Scale(Int(2))))
	require.NoError(t, q.Err())
	require.False(t, ok)
	c, _ := Int(2).Pow(100)
	p := x.Pow(100).Sub(y.Pow(100).Scale(c))
	q, ok = p.DivExact(x.Sub(y.Scale(Int(2))))
	require.True(t, ok)
	require.Equal(t, 100, q.Len())
	require.True(t, q.Mul(x.Sub(y.Scale(Int(2)))).Equal(p))
	_, ok = p.Add(y.Pow(100)).DivExact(x.Sub(y.Scale(Int(2))))
	require.False(t, ok)
}

// TestProductsAgree compares the ways of multiplying, which depend on the size
// of coefficients and operands, on the same polynomials.
func TestProductsAgree(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 10))
	for range 50 {
		s := shape{3, 40, 5, 12}
		p, q := randomPoly(r, s), randomPoly(r, s)
		want := p.Mul(q)
		for _, bits := range []int{30, 45, 60, 200} {
			c, _ := Int(2).Pow(bits)
			inv, _ := c.Inv()
			got := p.Scale(c).Mul(q.Scale(c)).Scale(inv).Scale(inv)
			checkCanonical(t, got)
			require.True(t, got.Equal(want))
			got = p.Scale(inv).Mul(q.Scale(c))
			require.True(t, got.Equal(want))
		}
		wide := manyVariables(60)
		require.True(t, p.Mul(wide).Mul(q).Equal(want.Mul(wide)))
		high := Variable(100).Pow(5000)
		require.True(t, p.Mul(high).Mul(q).Equal(want.Mul(high)))
	}
}

func TestDegrees(t *testing.T) {
	x, y := Variable(0), Variable(1)
	p := x.Pow(3).Mul(y).Add(y.Pow(2))
	require.Equal(t, []int{4, 3, 2, 0}, []int{p.TotalDegree(), p.Degree(0), p.Degree(1), p.Degree(2)})
	require.Equal(t, []int{-1, -1}, []int{Poly{}.TotalDegree(), Poly{}.Degree(0)})
	require.Empty(t, Poly{}.Coeffs(0))
	require.Equal(t, []Var{0, 1}, p.Vars())
	require.True(t, p.Has(1))
	require.False(t, p.Has(2))
	m, c := p.Leading()
	require.Equal(t, NewMonomial(Power{1, 1}, Power{0, 3}), m)
	require.True(t, c.IsOne())
	require.Equal(t, 3, m.Exp(0))
	v, ok := Const(Frac64(2, 3)).IsConst()
	require.True(t, ok && v.Equal(Frac64(2, 3)))
	_, ok = p.IsConst()
	require.False(t, ok)
	require.False(t, Poly{}.Has(0))
	// Equal polynomials reached in different ways have one representation.
	require.Equal(t, x.Add(y).Sub(y), x)
	require.Equal(t, x.Pow(40).Add(y).Sub(x.Pow(40)), y)
}

func TestCoeffs(t *testing.T) {
	eachShape(t, 10, func(t *testing.T, r *rand.Rand, draw func() Poly) {
		p := draw()
		v := Var(7*r.IntN(3) - 3)
		if p.Degree(v) > 1000 {
			return
		}
		var sum Poly
		cs := p.Coeffs(v)
		require.Len(t, cs, p.Degree(v)+1)
		for k, c := range cs {
			checkCanonical(t, c)
			require.False(t, c.Has(v))
			sum = sum.Add(c.Mul(Variable(v).Pow(k)))
		}
		require.True(t, sum.Equal(p))
	})
}
