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
