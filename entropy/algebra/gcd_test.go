package algebra

import (
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestGCDDividesAndIsGreatest(t *testing.T) {
	drawn := 0
	for i, s := range []shape{{1, 4, 4, 4}, {2, 4, 2, 4}, {3, 4, 2, 4}, {8, 4, 1, 4}} {
		r := rand.New(rand.NewPCG(uint64(i), 3))
		for range 60 {
			a, b, c := randomPoly(r, s), randomPoly(r, s), randomPoly(r, s)
			if a.IsZero() || b.IsZero() || c.IsZero() {
				continue
			}
			g, greatest := GCD(a.Mul(c), b.Mul(c))
			require.NoError(t, g.Err())
			u, ok := a.Mul(c).DivExact(g)
			require.True(t, ok)
			v, ok := b.Mul(c).DivExact(g)
			require.True(t, ok)
			unit := g.Content()
			require.True(t, unit.IsOne())
			require.True(t, greatest)
			drawn++
			_, c = c.Primitive()
			_, ok = g.DivExact(c)
			require.True(t, ok, "a common factor is missed")
			rest, _ := GCD(u, v)
			require.True(t, rest.Equal(Const(Int(1))), "the cofactors have a common factor")
			// The other order gives the same.
			h, ok := GCD(b.Mul(c), a.Mul(c))
			require.Equal(t, ok, g.Equal(h))
		}
	}
	require.Greater(t, drawn, 50)
}

func TestGCDKnown(t *testing.T) {
	x, y := Variable(0), Variable(1)
	one := Const(Int(1))
	for _, c := range []struct{ a, b, want Poly }{
		{Poly{}, Poly{}, Poly{}},
		{Poly{}, x.Scale(Int(-2)), x},
		{Const(Int(6)), Const(Int(4)), one},
		{x, y, one},
		{x.Pow(3).Mul(y), x.Pow(2).Mul(y.Pow(4)), x.Pow(2).Mul(y)},
		{x.Pow(2).Sub(y.Pow(2)), x.Sub(y).Pow(2), x.Sub(y)},
		{x.Pow(12).Sub(one), x.Pow(8).Sub(one), x.Pow(4).Sub(one)},
		{x.Pow(2).Add(one), x.Pow(3).Add(one), one},
		{x.Add(y).Pow(4).Mul(x.Sub(y)), x.Add(y).Pow(2).Mul(x.Sub(one)), x.Add(y).Pow(2)},
	} {
		got, greatest := GCD(c.a, c.b)
		require.True(t, greatest)
		require.True(t, got.Equal(c.want))
	}
	// D. E. Knuth, The Art of Computer Programming, volume 2, section 4.6.1,
	// example (6): coprime, with long intermediate coefficients.
	p := fromCoeffs(-5, 2, 8, -3, -3, 0, 1, 0, 1)
	q := fromCoeffs(21, -9, -4, 0, 5, 0, 3)
	got, greatest := GCD(p, q)
	require.True(t, greatest)
	require.True(t, got.Equal(one))
}

// fromCoeffs returns a polynomial in indeterminate 0, constant term first.
func fromCoeffs(cs ...int64) Poly {
	var p Poly
	for i, c := range cs {
		p = p.Add(Variable(0).Pow(i).Scale(Int(c)))
	}
	return p
}

func TestGCDGivesUpInTime(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 5))
	s := shape{6, 60, 6, 30}
	a, b, c := randomPoly(r, s), randomPoly(r, s), randomPoly(r, s)
	g, greatest := GCD(a.Mul(c), b.Mul(c))
	require.NoError(t, g.Err())
	if !greatest {
		require.True(t, g.Equal(Const(Int(1))))
	}
	_, ok := a.Mul(c).DivExact(g)
	require.True(t, ok)
}

func TestSquareFree(t *testing.T) {
	for i, s := range []shape{{1, 3, 2, 3}, {2, 3, 1, 3}, {4, 3, 1, 3}} {
		r := rand.New(rand.NewPCG(uint64(i), 4))
		for range 40 {
			p := randomPoly(r, s).Mul(randomPoly(r, s).Pow(2)).Mul(randomPoly(r, s).Pow(3))
			unit, factors, complete := SquareFree(p)
			require.True(t, complete)
			prod := Const(unit)
			for j, f := range factors {
				prod = prod.Mul(f.Base.Pow(f.Exp))
				for _, v := range f.Base.Vars() {
					g, ok := GCD(f.Base, f.Base.Deriv(v))
					require.True(t, ok)
					require.False(t, g.Has(v), "a factor has a square")
				}
				for _, h := range factors[:j] {
					g, _ := GCD(f.Base, h.Base)
					require.True(t, g.Equal(Const(Int(1))))
				}
			}
			require.True(t, prod.Equal(p))
		}
	}
	x := Variable(0)
	_, factors, _ := SquareFree(x.Pow(5).Mul(x.Add(Const(Int(1))).Pow(2)))
	require.Len(t, factors, 2)
}

func TestModularArithmetic(t *testing.T) {
	m := big.NewInt(prime)
	require.True(t, m.ProbablyPrime(20))
	r := rand.New(rand.NewPCG(6, 6))
	for range 2000 {
		a, b := r.Uint64N(prime), r.Uint64N(prime)
		if r.IntN(10) == 0 {
			a = prime - 1
		}
		x, y := new(big.Int).SetUint64(a), new(big.Int).SetUint64(b)
		want := new(big.Int).Mul(x, y)
		assert.Equal(t, want.Mod(want, m).Uint64(), mulMod(a, b))
		want.Sub(x, y)
		assert.Equal(t, want.Mod(want, m).Uint64(), subMod(a, b))
		if a != 0 {
			assert.Equal(t, uint64(1), mulMod(a, inverseMod(a)))
		}
		c := r.Int64() - r.Int64()
		assert.Equal(t, want.Mod(big.NewInt(c), m).Uint64(), intMod(Int(c)))
		sq := Int(c).Mul(Int(c)).Mul(Int(-5))
		assert.Equal(t, want.Mod(sq.Big().Num(), m).Uint64(), intMod(sq))
	}
}
