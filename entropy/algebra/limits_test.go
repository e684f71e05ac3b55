package algebra

import (
	"math"
	"runtime"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// allocated returns the bytes f allocates, whether or not they stay in use.
func allocated(f func()) uint64 {
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	f()
	runtime.ReadMemStats(&after)
	return after.TotalAlloc - before.TotalAlloc
}

func manyVariables(n int) Poly {
	ts := make([]Term, n)
	for i := range ts {
		ts[i] = Term{NewMonomial(Power{Var(i), 1}), Int(1)}
	}
	return FromTerms(ts)
}

func powers(n int) []Term {
	ts := make([]Term, n)
	for i := range ts {
		ts[i] = Term{NewMonomial(Power{0, i}), Int(1)}
	}
	return ts
}

func TestLargeExponentsAreCheap(t *testing.T) {
	x, y := Variable(0), Variable(1)
	one := Const(Int(1))
	f := FromPoly(x.Pow(MaxExponent).Mul(Const(Int(3))))
	g := FromPoly(x).Pow(-MaxExponent)
	require.NoError(t, g.Err())
	require.True(t, f.Mul(g).Equal(FromPoly(Const(Int(3)))))
	_, factors, complete := SquareFree(x.Pow(MaxExponent - 2).Mul(y.Add(one).Pow(2)))
	require.True(t, complete)
	require.Len(t, factors, 2)
	d, greatest := GCD(x.Pow(MaxExponent), x.Pow(MaxExponent-1).Mul(y))
	require.True(t, greatest)
	require.True(t, d.Equal(x.Pow(MaxExponent-1)))
	d, _ = GCD(x.Pow(MaxExponent).Sub(one), x.Pow(MaxExponent-1).Sub(y))
	require.True(t, d.Equal(one))
	require.True(t, x.Pow(MaxExponent).Subst(0, y).Equal(y.Pow(MaxExponent)))
	v, ok := x.Pow(MaxExponent).Sub(y).Eval(func(v Var) Rat { return Int(int64(v)*2 - 1) })
	require.True(t, ok)
	require.True(t, v.IsZero(), "(-1)^even - 1")
}

func TestExplosionsArePoisoned(t *testing.T) {
	x := variables(10)
	one := Const(Int(1))
	huge := Const(Int(3)).Pow(80_000)
	require.NoError(t, huge.Err())
	for name, f := range map[string]func() Poly{
		"ten variables":        func() Poly { return sumOf(x...).Pow(60) },
		"trinomial":            func() Poly { return sumOf(x[0], x[1], one).Pow(999_999_999) },
		"binomial":             func() Poly { return sumOf(x[0], one).Pow(999_999_999) },
		"binomial in limit":    func() Poly { return sumOf(x[0], one).Pow(MaxTerms - 1) },
		"fractions":            func() Poly { return sumOf(x[0].Scale(Frac64(1, 3)), x[1].Scale(Frac64(2, 7)), one).Pow(5000) },
		"exponent":             func() Poly { return x[0].Pow(MaxExponent + 1) },
		"exponent product":     func() Poly { return x[0].Pow(MaxExponent).Mul(x[1]) },
		"exponent of exponent": func() Poly { return x[0].Pow(1 << 20).Pow(1 << 20) },
		"largest exponent":     func() Poly { return x[0].Pow(math.MaxInt) },
		"number":               func() Poly { return Const(Int(2)).Pow(999_999_999) },
		"coefficient":          func() Poly { return x[0].Scale(Int(3)).Pow(1_000_000) },
		"bits of a product":    func() Poly { return huge.Mul(huge) },
		"bits of a scaling":    func() Poly { c, _ := huge.IsConst(); return x[0].Mul(huge).Scale(c) },
		"negative power":       func() Poly { return x[0].Pow(-1) },
		"monomial":             func() Poly { return monomialPoly(NewMonomial(Power{0, MaxExponent}, Power{1, 1})) },
		"negative monomial":    func() Poly { return monomialPoly(NewMonomial(Power{0, -1})) },
		"substitution":         func() Poly { return x[0].Pow(100_000_000).Subst(0, sumOf(x[1], one)) },
		"substituted number":   func() Poly { return x[0].Pow(100_000_000).Add(x[1]).Subst(0, Const(Int(2))) },
		"content": func() Poly {
			ts := make([]Term, 3000)
			for i := range ts {
				c, _ := Int(int64(2*i + 3)).Pow(-2000)
				ts[i] = Term{NewMonomial(Power{0, i}), c}
			}
			_, q := FromTerms(ts).Primitive()
			return q
		},
		"powers of one":  func() Poly { return FromTerms(powers(MaxTerms-1)).Subst(0, sumOf(x[0], one)) },
		"many variables": func() Poly { return manyVariables(50_000) },
		"sum of many": func() Poly {
			return manyVariables(5_000).Add(manyVariables(8_000).Subst(0, x[0].Pow(100)))
		},
		"product of many": func() Poly { return manyVariables(1000).Mul(manyVariables(1001)) },
		"coefficients":    func() Poly { return x[0].Pow(MaxExponent).Coeffs(0)[0] },
		"division":        func() Poly { q, _ := x[0].Pow(MaxExponent).Sub(one).DivExact(x[0].Sub(one)); return q },
		"remainder":       func() Poly { _, r := x[0].Pow(MaxExponent).DivMod([]Poly{x[0].Sub(one)}, nil); return r },
		"remainder with numbers": func() Poly {
			_, r := x[0].Pow(MaxExponent).DivMod([]Poly{x[0].Sub(Const(Int(2)))}, nil)
			return r
		},
	} {
		t.Run(name, func(t *testing.T) {
			var p Poly
			used := allocated(func() { p = f() })
			require.Error(t, p.Err())
			require.Zero(t, p.Len())
			require.Less(t, used, uint64(1<<30), "bytes allocated in all")
		})
	}
}

func TestPoisonSpreads(t *testing.T) {
	x, y := Variable(0), Variable(1)
	bad := x.Pow(MaxExponent + 1)
	require.ErrorIs(t, bad.Err(), ErrLimit)
	_, rem := x.DivMod([]Poly{y, bad}, nil)
	quo, rem2 := bad.DivMod([]Poly{y}, nil)
	exact, ok := bad.DivExact(x)
	require.False(t, ok)
	exact2, ok := x.DivExact(bad)
	require.False(t, ok)
	zero, ok := Poly{}.DivExact(bad)
	require.False(t, ok)
	_, prim := bad.Primitive()
	gcd, _ := GCD(bad, x)
	for i, p := range []Poly{
		bad.Add(x), x.Add(bad), bad.Sub(bad), x.Sub(bad), bad.Mul(x), x.Mul(bad), bad.Mul(Poly{}), Poly{}.Mul(bad), bad.Neg(),
		bad.Scale(Int(2)), bad.Scale(Int(0)), bad.Pow(0), bad.Pow(2), bad.Deriv(0), bad.Subst(0, y), x.Subst(0, bad), bad.Coeffs(0)[0],
		x.SubstMany(map[Var]Poly{0: bad, 1: x}), bad.EvalPartial(map[Var]Rat{0: Int(1)}), rem, rem2, quo[0], exact, exact2, zero, prim, gcd,
	} {
		assert.ErrorIs(t, p.Err(), ErrLimit, "case %d", i)
		assert.False(t, p.IsZero())
		assert.False(t, p.Equal(p))
		assert.False(t, p.Equal(Poly{}))
		assert.False(t, Poly{}.Equal(p))
		_, ok := p.IsConst()
		assert.False(t, ok)
		_, ok = p.Eval(func(Var) Rat { return Rat{} })
		assert.False(t, ok)
		assert.Contains(t, p.String(func(Var) string { return "x" }), "limit")
	}
}

func TestPoisonedFraction(t *testing.T) {
	x := Variable(0)
	bad := FromPoly(x.Pow(MaxExponent + 1))
	f, ok := FromPoly(x).Inv()
	require.True(t, ok)
	inv, ok := bad.Inv()
	require.True(t, ok)
	quo, ok := f.Quo(bad)
	require.True(t, ok)
	quo2, ok := bad.Quo(f)
	require.True(t, ok)
	for i, g := range []Fraction{
		bad.Add(f), f.Add(bad), bad.Sub(bad), f.Mul(bad), bad.Mul(f), bad.Mul(Fraction{}), Fraction{}.Mul(bad), bad.Neg(),
		bad.Scale(Int(0)), inv, quo, quo2, bad.Pow(0), bad.Pow(-1), bad.Deriv(0), bad.Subst(0, f), f.Subst(0, bad),
	} {
		assert.ErrorIs(t, g.Err(), ErrLimit, "case %d", i)
		assert.False(t, g.IsZero())
		assert.False(t, g.Equal(g))
		_, ok := g.IsPoly()
		assert.False(t, ok)
		_, ok = g.IsConst()
		assert.False(t, ok)
		_, ok = g.Eval(func(Var) Rat { return Int(1) })
		assert.False(t, ok)
		assert.ErrorIs(t, g.Den().Err(), ErrLimit)
	}
	require.ErrorIs(t, Fraction{}.Pow(-1).Err(), ErrDivision)
	require.ErrorIs(t, f.Subst(0, Fraction{}).Err(), ErrDivision)
	require.ErrorIs(t, FromFactors(x, []Factor{{Poly{}, 1}}).Err(), ErrDivision)
	require.ErrorIs(t, f.Pow(MaxExponent).Pow(2).Err(), ErrLimit)
}
