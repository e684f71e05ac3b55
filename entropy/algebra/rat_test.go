package algebra

import (
	"math"
	"math/big"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// checkRat checks the value of r and the invariants of its representation.
func checkRat(t *testing.T, want *big.Rat, r Rat) {
	t.Helper()
	n, d := want.Num(), want.Denom()
	fits := n.IsInt64() && n.Int64() != math.MinInt64 && d.IsInt64()
	f, _ := want.Float64()
	back, err := ParseRat(r.String())
	for what, ok := range map[string]bool{
		"value":          want.Cmp(r.Big()) == 0,
		"representation": fits == (r.b == nil),
		"lowest terms":   !fits || r == Rat{n: n.Int64(), dm: d.Int64() - 1},
		"Sign":           want.Sign() == r.Sign(),
		"IsInt":          want.IsInt() == r.IsInt(),
		"String":         want.RatString() == r.String(),
		"Float64":        f == r.Float64(),
		"BitLen":         max(n.BitLen(), d.BitLen()) == r.BitLen(),
		"ParseRat":       err == nil && back.Equal(r),
	} {
		if !ok {
			t.Fatalf("%s of %v is wrong: %v", what, want, r)
		}
	}
}

func checkPair(t *testing.T, x, y *big.Rat) {
	t.Helper()
	a, b := FromBig(x), FromBig(y)
	checkRat(t, x, a)
	checkRat(t, new(big.Rat).Add(x, y), a.Add(b))
	checkRat(t, new(big.Rat).Sub(x, y), a.Sub(b))
	checkRat(t, new(big.Rat).Mul(x, y), a.Mul(b))
	checkRat(t, new(big.Rat).Neg(x), a.Neg())
	checkRat(t, new(big.Rat).Abs(x), a.Abs())
	q, ok := a.Quo(b)
	if ok != (y.Sign() != 0) {
		t.Fatalf("quotient by %v: %v", y, ok)
	}
	if ok {
		checkRat(t, new(big.Rat).Quo(x, y), q)
	}
	if a.Cmp(b) != x.Cmp(y) || a.Equal(b) != (x.Cmp(y) == 0) {
		t.Fatalf("comparison of %v and %v", x, y)
	}
}

// edges are integers at which machine arithmetic overflows.
func edges() []int64 {
	es := []int64{0, 1, 2, 3, 6, 1 << 31, 3037000499, 3037000500, 1<<32 - 1, 1 << 32, 1 << 53, 1<<53 + 1, 1 << 62, math.MaxInt64 / 3, math.MaxInt64 - 1, math.MaxInt64, math.MinInt64}
	for _, e := range es {
		if e > 0 {
			es = append(es, -e)
		}
	}
	return es
}

func TestRatAtTheLimitsOfInt64(t *testing.T) {
	var all []*big.Rat
	for i, n := range edges() {
		all = append(all, new(big.Rat).SetInt64(n))
		for j, d := range edges() {
			if d != 0 && (i+j)%3 == 0 {
				all = append(all, big.NewRat(n, d))
				checkRat(t, big.NewRat(n, d), Frac64(n, d))
			}
		}
		checkRat(t, new(big.Rat).SetInt64(n), Int(n))
	}
	// One beyond on each side.
	beyond := new(big.Int).Lsh(big.NewInt(1), 63)
	all = append(all, new(big.Rat).SetInt(beyond), new(big.Rat).SetFrac(big.NewInt(1), beyond),
		new(big.Rat).SetInt(new(big.Int).Sub(new(big.Int).Neg(beyond), big.NewInt(1))))
	for i, x := range all {
		for j := i % 7; j < len(all); j += 7 {
			checkPair(t, x, all[j])
		}
	}
}

func FuzzRat(f *testing.F) {
	f.Add(int64(1), int64(2), int64(3), int64(4))
	f.Add(int64(math.MinInt64), int64(-1), int64(math.MinInt64), int64(math.MinInt64))
	f.Add(int64(math.MaxInt64), int64(math.MaxInt64-1), int64(math.MinInt64), int64(3))
	f.Add(int64(0), int64(7), int64(1)<<62, int64(1)<<62)
	f.Fuzz(func(t *testing.T, a, b, c, d int64) {
		if b == 0 || d == 0 {
			return
		}
		checkPair(t, big.NewRat(a, b), big.NewRat(c, d))
		x, y := Frac64(a, b), Frac64(c, d)
		checkPair(t, x.Mul(y).Big(), y.Add(x).Big())
		require.True(t, x.Add(y).Sub(y).Equal(x), "(x + y) - y")
	})
}

func TestRatZeroValue(t *testing.T) {
	var z Rat
	assert.True(t, z.IsZero())
	assert.Equal(t, "0", z.String())
	assert.True(t, z.Add(Int(3)).Equal(Int(3)))
	assert.Equal(t, Int(0), z)
	_, ok := z.Inv()
	assert.False(t, ok)
	_, ok = Int(1).Quo(z)
	assert.False(t, ok)
	assert.Panics(t, func() { Frac64(1, 0) })
}

func TestRatFromFloat(t *testing.T) {
	for _, f := range []float64{0, 1, -1, 0.1, -2.5, math.Pi, 1 << 62, 1 << 63, -(1 << 63), 1e300, math.MaxFloat64, math.SmallestNonzeroFloat64, 1e-300} {
		r, ok := FromFloat(f)
		require.True(t, ok)
		checkRat(t, new(big.Rat).SetFloat64(f), r)
		require.Equal(t, f, r.Float64())
	}
	for _, f := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		_, ok := FromFloat(f)
		require.False(t, ok)
	}
}

func TestRatInt64(t *testing.T) {
	for _, n := range edges() {
		got, ok := Int(n).Int64()
		require.True(t, ok)
		require.Equal(t, n, got)
	}
	for _, r := range []Rat{Frac64(1, 2), Int(math.MaxInt64).Add(Int(1)), Frac64(1, math.MinInt64)} {
		_, ok := r.Int64()
		require.False(t, ok, "%v", r)
	}
}

func TestRatPow(t *testing.T) {
	for _, r := range []Rat{Int(0), Int(1), Int(-1), Int(2), Frac64(-2, 3), Int(math.MinInt64)} {
		want := Int(1)
		for n := range 9 {
			got, ok := r.Pow(n)
			require.True(t, ok)
			require.True(t, got.Equal(want), "%v^%d", r, n)
			inv, ok := r.Pow(-n)
			require.Equal(t, n == 0 || !r.IsZero(), ok)
			if ok {
				require.True(t, inv.Mul(got).IsOne(), "%v^-%d", r, n)
			}
			want = want.Mul(r)
		}
	}
	one, ok := Int(-1).Pow(math.MaxInt)
	assert.True(t, ok)
	assert.True(t, one.Equal(Int(-1)))
	for _, r := range []Rat{Int(2), Frac64(1, 2), Int(-3)} {
		for _, n := range []int{math.MaxInt, math.MinInt, 999_999_999, -999_999_999, MaxBits + 1} {
			_, ok := r.Pow(n)
			assert.False(t, ok, "%v^%d", r, n)
		}
	}
}

func TestParseRat(t *testing.T) {
	for s, want := range map[string]Rat{
		"3": Int(3), "-3/4": Frac64(-3, 4), "0.25": Frac64(1, 4), "+7": Int(7), "6/4": Frac64(3, 2),
		"2e-3": Frac64(1, 500), "1.5e2": Int(150), "000": Int(0), "-0": Int(0), "0.1": Frac64(1, 10),
		"9223372036854775808": Int(math.MaxInt64).Add(Int(1)), "-9223372036854775808": Int(math.MinInt64),
	} {
		got, err := ParseRat(s)
		require.NoError(t, err, s)
		require.True(t, got.Equal(want), "%s is %v", s, got)
	}
	for _, s := range []string{
		"", "-", "+-1", "1/0", "1/00", "1/-2", "1/2/3", "1.5/2", ".5", "5.", "1_000", "0x10", "1e", "e3", "1e5.0", "1 ", " 1",
		"inf", "NaN", "1e999999999", "1e-999999999", "1e99999999999999999999", "\x00", "１",
	} {
		_, err := ParseRat(s)
		require.Error(t, err, "%q", s)
	}
	long := make([]byte, 1_000_000)
	for i := range long {
		long[i] = '9'
	}
	_, err := ParseRat(string(long))
	require.ErrorIs(t, err, ErrLimit)
	require.Less(t, len(err.Error()), 200)
}
