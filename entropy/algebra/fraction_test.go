package algebra

import (
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// fractionShapes are small: sums of fractions grow fast.
var fractionShapes = []shape{{1, 3, 2, 3}, {2, 3, 2, 3}, {3, 3, 2, 3}, {8, 3, 1, 3}}

func randomFraction(r *rand.Rand, s shape) Fraction {
	f := FromPoly(randomPoly(r, s))
	for range r.IntN(3) {
		if d := randomPoly(r, s); !d.IsZero() {
			f = f.Mul(FromPoly(d).Pow(-1 - r.IntN(2)))
		}
	}
	return f
}

func checkFraction(t *testing.T, f Fraction) {
	t.Helper()
	require.NoError(t, f.Err())
	checkCanonical(t, f.num)
	if f.num.IsZero() {
		require.Empty(t, f.den)
	}
	for i, d := range f.den {
		checkCanonical(t, d.Base)
		require.Positive(t, d.Exp)
		c, _ := d.Base.Primitive()
		require.True(t, c.IsOne())
		_, constant := d.Base.IsConst()
		require.False(t, constant)
		_, ok := f.num.DivExact(d.Base)
		require.False(t, ok, "a base divides the numerator")
		for j, e := range f.den {
			if i != j {
				_, ok := d.Base.DivExact(e.Base)
				require.False(t, ok, "a base divides another")
			}
			if i < j {
				require.Negative(t, d.Base.compareTo(e.Base))
			}
		}
	}
}

// eachFraction runs f on random fractions.
func eachFraction(t *testing.T, rounds int, f func(r *rand.Rand, draw func() Fraction)) {
	for i, s := range fractionShapes {
		r := rand.New(rand.NewPCG(uint64(i), 2))
		for range rounds {
			f(r, func() Fraction {
				g := randomFraction(r, s)
				checkFraction(t, g)
				return g
			})
		}
	}
}

// sameByCrossing compares without the arithmetic of fractions.
func sameByCrossing(f, g Fraction) bool {
	return f.Num().Mul(g.Den()).Equal(g.Num().Mul(f.Den()))
}

func TestFractionsAgainstCrossMultiplication(t *testing.T) {
	eachFraction(t, 40, func(_ *rand.Rand, draw func() Fraction) {
		f, g := draw(), draw()
		a, b, c, d := f.Num(), f.Den(), g.Num(), g.Den()
		for _, x := range []struct {
			got      Fraction
			num, den Poly
		}{
			{f.Add(g), a.Mul(d).Add(c.Mul(b)), b.Mul(d)},
			{f.Sub(g), a.Mul(d).Sub(c.Mul(b)), b.Mul(d)},
			{f.Mul(g), a.Mul(c), b.Mul(d)},
			{f.Neg(), a.Neg(), b},
			{f.Scale(Frac64(-2, 3)), a.Scale(Int(-2)), b.Scale(Int(3))},
			{f.Pow(3), a.Pow(3), b.Pow(3)},
			{f.Deriv(-3), a.Deriv(-3).Mul(b).Sub(a.Mul(b.Deriv(-3))), b.Mul(b)},
		} {
			checkFraction(t, x.got)
			require.True(t, x.got.Num().Mul(x.den).Equal(x.num.Mul(x.got.Den())))
		}
		require.Equal(t, sameByCrossing(f, g), f.Equal(g))
		require.True(t, f.Equal(f))
		require.False(t, f.Equal(f.Add(FromPoly(Const(Int(1))))))
		inv, ok := f.Inv()
		require.Equal(t, !f.IsZero(), ok)
		if ok {
			checkFraction(t, inv)
			require.True(t, inv.Num().Mul(a).Equal(inv.Den().Mul(b)))
			q, ok := g.Quo(f)
			require.True(t, ok)
			checkFraction(t, q)
			require.True(t, q.Equal(g.Mul(inv)))
			one, constant := f.Mul(inv).IsConst()
			require.True(t, constant)
			require.True(t, one.IsOne())
		}
	})
}

func TestFractionField(t *testing.T) {
	eachFraction(t, 15, func(r *rand.Rand, draw func() Fraction) {
		f, g, h := draw(), draw(), draw()
		require.True(t, f.Add(g).Equal(g.Add(f)))
		require.True(t, f.Add(g).Add(h).Equal(f.Add(g.Add(h))))
		require.True(t, f.Mul(g.Add(h)).Equal(f.Mul(g).Add(f.Mul(h))))
		require.True(t, f.Sub(f).IsZero())
		require.True(t, f.Add(g).Sub(g).Equal(f))
		require.True(t, f.Mul(g).Deriv(4).Equal(f.Deriv(4).Mul(g).Add(f.Mul(g.Deriv(4)))))
		p := f.Mul(FromPoly(f.Den()))
		got, ok := p.IsPoly()
		require.True(t, ok, "a polynomial is recognised")
		require.True(t, got.Equal(f.Num()))
		at := map[Var]Rat{}
		value := func(v Var) Rat {
			if _, ok := at[v]; !ok {
				at[v] = Frac64(r.Int64N(19)-9, 1+r.Int64N(5))
			}
			return at[v]
		}
		x, ok1 := f.Eval(value)
		y, ok2 := g.Eval(value)
		if ok1 && ok2 {
			s, ok := f.Add(g).Eval(value)
			require.True(t, ok)
			require.True(t, s.Equal(x.Add(y)))
			s, ok = f.Mul(g).Eval(value)
			require.True(t, ok)
			require.True(t, s.Equal(x.Mul(y)))
		}
	})
}

func TestFractionSubst(t *testing.T) {
	eachFraction(t, 25, func(r *rand.Rand, draw func() Fraction) {
		f, g, h := draw(), draw(), draw()
		if f.Num().TotalDegree() > 6 || f.Den().TotalDegree() > 6 {
			return
		}
		m := map[Var]Fraction{-3: g, 4: h}
		s := f.SubstMany(m)
		base := func(v Var) Rat { return Frac64(int64(v)*3+2, 7) }
		gv, ok1 := g.Eval(base)
		hv, ok2 := h.Eval(base)
		want, ok3 := f.Eval(func(v Var) Rat {
			switch v {
			case -3:
				return gv
			case 4:
				return hv
			}
			return base(v)
		})
		if s.Err() != nil {
			require.ErrorIs(t, s.Err(), ErrDivision)
			require.False(t, ok1 && ok2 && ok3)
			return
		}
		checkFraction(t, s)
		if ok1 && ok2 && ok3 {
			got, ok := s.Eval(base)
			require.True(t, ok)
			require.True(t, got.Equal(want))
		}
	})
}

func TestFractionSplitsBases(t *testing.T) {
	x := variables(3)
	one := Const(Int(1))
	a, b, c := x[0].Add(one), x[0].Mul(x[1]).Add(one), x[2].Sub(x[0])
	inv := func(p Poly) Fraction {
		f, ok := FromPoly(p).Inv()
		require.True(t, ok)
		return f
	}
	sum := inv(a.Mul(b)).Add(inv(b.Mul(c)))
	checkFraction(t, sum)
	want := FromPoly(a.Add(c)).Mul(inv(a)).Mul(inv(b)).Mul(inv(c))
	assert.True(t, sum.Equal(want))
	// The common factor is found, so no square of b appears.
	assert.Equal(t, 4, sum.Den().TotalDegree())
	square := inv(a.Mul(a).Mul(b))
	assert.Len(t, square.DenFactors(), 2)
	// Partial cancelling of a base.
	f := inv(a.Mul(b)).Mul(FromPoly(b.Mul(c)))
	assert.True(t, f.Num().Equal(c) && f.Den().Equal(a))
	// The base is divided by another that comes later.
	g := inv(a.Mul(b)).Add(inv(a))
	checkFraction(t, g)
	assert.True(t, g.Den().Equal(a.Mul(b)))
	assert.True(t, g.Num().Equal(b.Add(one)))
}

func TestFractionVars(t *testing.T) {
	x := variables(4)
	f, _ := FromPoly(x[3]).Quo(FromPoly(x[1].Add(x[0])))
	assert.Equal(t, []Var{0, 1, 3}, f.Vars())
	assert.True(t, f.Has(0) && f.Has(3))
	assert.False(t, f.Has(2))
	_, ok := f.IsConst()
	assert.False(t, ok)
	_, ok = f.IsPoly()
	assert.False(t, ok)
	g := FromFactors(x[0], []Factor{{x[0].Mul(x[1]).Scale(Int(-2)), 2}, {Const(Int(3)), 1}})
	checkFraction(t, g)
	assert.True(t, g.Equal(FromFactors(Const(Frac64(1, 12)), []Factor{{x[1], 2}, {x[0], 1}})))
	assert.ErrorIs(t, FromFactors(x[0], []Factor{{x[1], 0}}).Err(), ErrExponent)
}

func TestFractionEvalAtPole(t *testing.T) {
	f, _ := FromPoly(Variable(0)).Inv()
	_, ok := f.Eval(func(Var) Rat { return Rat{} })
	assert.False(t, ok)
	_, ok = Fraction{}.Inv()
	assert.False(t, ok)
	_, ok = f.Quo(Fraction{})
	assert.False(t, ok)
}
