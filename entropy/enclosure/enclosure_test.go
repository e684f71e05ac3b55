package enclosure_test

import (
	"fmt"
	"math/big"
	"math/rand/v2"
	"testing"

	"creaseproof/entropy/enclosure"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

type (
	ctx      = enclosure.Context
	interval = enclosure.Interval
)

func rat(s string) *big.Rat {
	r, ok := new(big.Rat).SetString(s)
	if !ok {
		panic("bad rational " + s)
	}
	return r
}

func sign(t *testing.T, x interval) int {
	t.Helper()
	s, ok := x.Sign()
	require.True(t, ok, "%v does not settle its sign", x)
	return s
}

func TestFromRat(t *testing.T) {
	c := ctx{Prec: 53}
	assert.True(t, c.FromRat(rat("3/4")).IsPoint())
	third := c.FromRat(rat("1/3"))
	assert.False(t, third.IsPoint())
	assert.True(t, third.Contains(rat("1/3")))
	lo, _ := third.Lo().Rat(nil)
	hi, _ := third.Hi().Rat(nil)
	assert.Equal(t, -1, lo.Cmp(rat("1/3")))
	assert.Equal(t, 1, hi.Cmp(rat("1/3")))
	assert.False(t, third.Contains(new(big.Rat).Sub(lo, rat("1e-40"))), "exact comparison at the end")
	assert.True(t, third.Contains(lo))
	assert.True(t, third.Contains(hi))
}

// Exact arithmetic of rationals must stay inside, and close.
func TestArithmeticContainment(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for _, p := range []uint{16, 53, 128, 300} {
		c := ctx{Prec: p}
		for range 300 {
			a, b := randomRat(rng), randomRat(rng)
			x, y := c.FromRat(a), c.FromRat(b)
			require.True(t, c.Add(x, y).Contains(new(big.Rat).Add(a, b)))
			require.True(t, c.Sub(x, y).Contains(new(big.Rat).Sub(a, b)))
			require.True(t, c.Mul(x, y).Contains(new(big.Rat).Mul(a, b)))
			require.True(t, c.Sqr(x).Contains(new(big.Rat).Mul(a, a)))
			require.True(t, c.Abs(x).Contains(new(big.Rat).Abs(a)))
			require.True(t, c.Neg(x).Contains(new(big.Rat).Neg(a)))
			if b.Sign() != 0 {
				q := c.Quo(x, y)
				require.True(t, q.Contains(new(big.Rat).Quo(a, b)))
				require.True(t, tight(q, p, 8), "%v", q)
			}
			n := rng.IntN(12)
			require.True(t, c.PowInt(x, n).Contains(power(a, n)))
			if a.Sign() != 0 {
				require.True(t, c.PowInt(x, -n).Contains(new(big.Rat).Inv(power(a, n))))
			}
			q := 1 + rng.IntN(80)
			root := c.Root(c.Abs(x), q)
			require.True(t, c.PowInt(root, q).Contains(new(big.Rat).Abs(a)), "root %d of %v", q, a)
		}
	}
}

func power(a *big.Rat, n int) *big.Rat {
	r := big.NewRat(1, 1)
	for range n {
		r.Mul(r, a)
	}
	return r
}

// randomRat draws numbers over many orders of magnitude, and small integers.
func randomRat(rng *rand.Rand) *big.Rat {
	switch rng.IntN(4) {
	case 0:
		return big.NewRat(int64(rng.IntN(21)-10), 1)
	case 1:
		return big.NewRat(int64(rng.IntN(2001)-1000), int64(1+rng.IntN(100)))
	}
	r := big.NewRat(rng.Int64()-rng.Int64(), 1+rng.Int64())
	k := rng.IntN(80) - 40
	s := new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), uint(max(k, -k))))
	if k < 0 {
		return r.Quo(r, s)
	}
	return r.Mul(r, s)
}

// tight reports whether the width is at most ulps units in the last of p bits.
func tight(x interval, p uint, ulps int64) bool {
	if !x.IsBounded() {
		return false
	}
	w := x.Width()
	if w.Sign() == 0 {
		return true
	}
	m := new(big.Float).Abs(x.Lo())
	m.SetMantExp(m, -int(p))
	m.Mul(m, new(big.Float).SetInt64(2*ulps))
	return w.Cmp(m) <= 0
}

// Products and quotients of wide intervals contain products of members, for all
// combinations of signs.
func TestWideArithmetic(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	c := ctx{Prec: 53}
	for range 2000 {
		a0, a1, b0, b1 := small(rng), small(rng), small(rng), small(rng)
		x, y := c.FromRats(a0, a1), c.FromRats(b0, b1)
		a, b := between(rng, a0, a1), between(rng, b0, b1)
		require.True(t, c.Mul(x, y).Contains(new(big.Rat).Mul(a, b)))
		require.True(t, c.Sub(x, y).Contains(new(big.Rat).Sub(a, b)))
		require.True(t, c.Sqr(x).Contains(new(big.Rat).Mul(a, a)))
		n := rng.IntN(5)
		require.True(t, c.PowInt(x, n).Contains(power(a, n)))
		q := c.Quo(x, y)
		if y.Contains(new(big.Rat)) {
			require.True(t, q.IsEntire())
			continue
		}
		require.False(t, q.IsEntire())
		require.True(t, q.Contains(new(big.Rat).Quo(a, b)))
	}
}

func small(rng *rand.Rand) *big.Rat { return big.NewRat(int64(rng.IntN(13)-6), int64(1+rng.IntN(3))) }

func between(rng *rand.Rand, a, b *big.Rat) *big.Rat {
	t := big.NewRat(int64(rng.IntN(65)), 64)
	d := new(big.Rat).Sub(b, a)
	return d.Add(a, d.Mul(d, t))
}

func TestWideArithmeticIsSharp(t *testing.T) {
	c := ctx{Prec: 53}
	iv := func(a, b string) interval { return c.FromRats(rat(a), rat(b)) }
	same := func(want, got interval) {
		t.Helper()
		assert.True(t, want.Within(got) && got.Within(want), "want %v, got %v", want, got)
	}
	same(iv("-6", "9"), c.Mul(iv("-2", "3"), iv("-1", "3")))
	same(iv("0", "9"), c.Sqr(iv("-2", "3")))
	same(iv("-8", "27"), c.PowInt(iv("-2", "3"), 3))
	same(iv("0", "81"), c.PowInt(iv("-2", "3"), 4))
	same(iv("-1", "3/2"), c.Quo(iv("-2", "3"), iv("2", "4")))
	same(iv("-3/2", "1"), c.Quo(iv("-2", "3"), iv("-4", "-2")))
	same(iv("0", "3"), c.Abs(iv("-2", "3")))
	same(iv("2", "3"), c.Sqrt(iv("4", "9")))
	same(iv("2", "3"), c.Root(iv("32", "243"), 5))
	same(iv("1/8", "1"), c.PowInt(iv("1", "2"), -3))
	same(c.Int(1), c.PowInt(iv("-1", "1"), 0))
}

func TestRootIsExactOnPowers(t *testing.T) {
	c := ctx{Prec: 64}
	for q := 2; q <= 64; q++ {
		x := c.PowInt(c.Int(3), q)
		if !x.IsPoint() {
			continue
		}
		r := c.Root(x, q)
		require.True(t, r.IsPoint(), "q = %d", q)
		require.True(t, r.Contains(rat("3")))
	}
	assert.True(t, c.Sqrt(c.FromRat(rat("9/16"))).IsPoint())
	assert.False(t, c.Sqrt(c.Int(2)).IsPoint())
	assert.Equal(t, 0, sign(t, c.Sqrt(c.Int(0))))
}

func TestUndefined(t *testing.T) {
	c := ctx{Prec: 64}
	zero, one := c.Int(0), c.Int(1)
	touching := c.FromRats(rat("0"), rat("1"))
	for name, x := range map[string]interval{
		"log 0":            c.Log(zero),
		"log -1":           c.Log(c.Int(-1)),
		"log [0, 1]":       c.Log(touching),
		"1/0":              c.Quo(one, zero),
		"0/0":              c.Quo(zero, zero),
		"1/[0, 1]":         c.Quo(one, touching),
		"sqrt -1":          c.Sqrt(c.Int(-1)),
		"sqrt [-1, 1]":     c.Sqrt(c.FromRats(rat("-1"), rat("1"))),
		"root 0":           c.Root(one, 0),
		"root -3":          c.Root(one, -3),
		"0^-1":             c.PowInt(zero, -1),
		"tan [1, 2]":       c.Tan(c.FromRats(rat("1"), rat("2"))),
		"tan [0, 10]":      c.Tan(c.FromRats(rat("0"), rat("10"))),
		"0 log(-1)":        c.Mul(zero, c.Log(c.Int(-1))),
		"log(-1)^0":        c.PowInt(c.Log(c.Int(-1)), 0),
		"sin log(-1)":      c.Sin(c.Log(c.Int(-1))),
		"exp log(-1)":      c.Exp(c.Log(c.Int(-1))),
		"erf log(-1)":      c.Erf(c.Log(c.Int(-1))),
		"zero value":       {},
		"log(-1) - itself": c.Sub(c.Log(c.Int(-1)), c.Log(c.Int(-1))),
	} {
		assert.True(t, x.IsEntire(), "%s = %v", name, x)
		_, ok := x.Sign()
		assert.False(t, ok, name)
	}
}

func TestPredicates(t *testing.T) {
	c := ctx{}
	a, b := c.FromRats(rat("1"), rat("2")), c.FromRats(rat("2"), rat("3"))
	assert.False(t, enclosure.Less(a, b), "a common end")
	assert.False(t, enclosure.Disjoint(a, b))
	d := c.FromRats(rat("5/2"), rat("3"))
	assert.True(t, enclosure.Less(a, d))
	assert.False(t, enclosure.Less(d, a))
	assert.True(t, enclosure.Disjoint(d, a))
	assert.False(t, enclosure.Disjoint(a, enclosure.Entire()))
	_, ok := c.FromRats(rat("0"), rat("1")).Sign()
	assert.False(t, ok, "zero is not excluded")
	assert.Equal(t, 0, sign(t, c.Sub(c.Int(3), c.Int(3))))
	assert.True(t, enclosure.Union(a, enclosure.Entire()).IsEntire())
	w, _ := a.Width().Float64()
	assert.Equal(t, 1.0, w)
}

func TestText(t *testing.T) {
	c := ctx{Prec: 200}
	for _, k := range []struct {
		x      interval
		digits int
		lo, hi string
	}{
		{c.FromRat(rat("1/3")), 5, "0.33333", "0.33334"},
		{c.FromRat(rat("-1/3")), 5, "-0.33334", "-0.33333"},
		{c.FromRat(rat("999999")), 3, "999000", "1000000"},
		{c.FromRat(rat("1/8")), 10, "0.125", "0.125"},
		{c.Int(0), 3, "0", "0"},
		{c.Int(-7), 1, "-7", "-7"},
		{c.Int(1000), 2, "1000", "1000"},
		{c.FromRat(rat("3e-20")), 2, "2.9e-20", "3.1e-20"},
		{c.FromRat(rat("123456789e20")), 4, "1.234e28", "1.235e28"},
		{c.Pi(), 17, "3.1415926535897932", "3.1415926535897933"},
		{c.FromRats(rat("-1"), rat("12.5")), 3, "-1", "12.5"},
		{enclosure.Entire(), 3, "-Inf", "+Inf"},
		{c.Exp(c.Int(1000000)), 3, "1e434294", "1e434295"},
		{c.Exp(c.Int(-1000000)), 3, "1e-434295", "1e-434294"},
		{c.Exp(c.Int(3000000)), 3, "1e1085736", "+Inf"},
	} {
		lo, hi := k.x.Text(k.digits)
		assert.Equal(t, k.lo, lo)
		assert.Equal(t, k.hi, hi)
	}
	rng := rand.New(rand.NewPCG(5, 6))
	for range 2000 {
		r := randomRat(rng)
		x := c.FromRat(r)
		lo, hi := x.Text(1 + rng.IntN(20))
		require.True(t, rat(lo).Cmp(r) <= 0 && rat(hi).Cmp(r) >= 0, "%s ≤ %v ≤ %s", lo, r, hi)
	}
}

// A sign that double precision gets wrong.
func ExampleContext_Exp() {
	c := enclosure.Context{Prec: 128}
	// exp(x) - 1 - x - x²/2 at x = 10^-12 is about 1.7e-37.
	x := c.FromRat(big.NewRat(1, 1_000_000_000_000))
	d := c.Sub(c.Exp(x), c.Add(c.Int(1), c.Add(x, c.Quo(c.Sqr(x), c.Int(2)))))
	s, certain := d.Sign()
	fmt.Println(s, certain)
	// Output: 1 true
}

func ExampleInterval_Text() {
	lo, hi := enclosure.Context{Prec: 100}.Pi().Text(10)
	fmt.Println(lo, hi)
	// Output: 3.141592653 3.141592654
}
