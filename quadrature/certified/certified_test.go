package certified_test

import (
	"context"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/interval"
	"creaseproof/quadrature/certified"
)

var ec = enclosure.Context{Prec: 200}

// overlap reports whether an enclosure of float64 numbers and one of 200 bits
// have a number in common; the second is so narrow that this is containment.
func overlap(x interval.Interval, y enclosure.Interval) bool {
	return !x.Disjoint(certified.Outward(y))
}

func rat(a, b int64) *big.Rat { return big.NewRat(a, b) }

func TestClosedForms(t *testing.T) {
	for _, c := range []struct {
		name  string
		build func(*certified.Tape) certified.Ref
		want  enclosure.Interval
		width float64 // relative
	}{
		{"x^30", func(t *certified.Tape) certified.Ref { return t.Pow(t.Param(0), 30) }, ec.FromRat(rat(1, 31)), 1e-13},
		{"exp x", func(t *certified.Tape) certified.Ref { return t.Exp(t.Param(0)) }, ec.Sub(ec.Exp(ec.Int(1)), ec.Int(1)), 1e-13},
		{"1/(1 + x)", func(t *certified.Tape) certified.Ref {
			return t.Quo(t.Rat(rat(1, 1)), t.Add(t.Param(0), t.Rat(rat(1, 1))))
		}, ec.Log(ec.Int(2)), 1e-13},
		{"1/(1 + x^2), second parameter", func(t *certified.Tape) certified.Ref {
			return t.Quo(t.Rat(rat(1, 1)), t.Add(t.Pow(t.Param(1), 2), t.Rat(rat(1, 1))))
		}, ec.Quo(ec.Pi(), ec.Int(4)), 1e-13},
		{"sqrt x", func(t *certified.Tape) certified.Ref { return t.Root(t.Param(0), 2) }, ec.FromRat(rat(2, 3)), 1e-11},
		{"cube root", func(t *certified.Tape) certified.Ref { return t.Root(t.Param(0), 3) }, ec.FromRat(rat(3, 4)), 1e-11},
		{"|2 x - 1/3|", func(t *certified.Tape) certified.Ref {
			return t.Root(t.Pow(t.Add(t.Mul(t.Rat(rat(2, 1)), t.Param(0)), t.Rat(rat(-1, 3))), 2), 2)
		}, ec.FromRat(rat(13, 18)), 1e-11},
		{"log(1 + x)", func(t *certified.Tape) certified.Ref { return t.Log(t.Add(t.Param(0), t.Rat(rat(1, 1)))) },
			ec.Sub(ec.Mul(ec.Int(2), ec.Log(ec.Int(2))), ec.Int(1)), 1e-13},
		{"sin + cos", func(t *certified.Tape) certified.Ref { return t.Add(t.Sin(t.Param(0)), t.Cos(t.Param(0))) },
			ec.Add(ec.Sub(ec.Int(1), ec.Cos(ec.Int(1))), ec.Sin(ec.Int(1))), 1e-13},
		{"erf", func(t *certified.Tape) certified.Ref { return t.Erf(t.Param(0)) },
			ec.Add(ec.Erf(ec.Int(1)), ec.Quo(ec.Sub(ec.Exp(ec.Int(-1)), ec.Int(1)), ec.Sqrt(ec.Pi()))), 1e-13},
		{"1/(1 + x + y)", func(t *certified.Tape) certified.Ref {
			return t.Quo(t.Rat(rat(1, 1)), t.Add(t.Add(t.Param(0), t.Param(1)), t.Rat(rat(1, 1))))
		}, ec.Sub(ec.Mul(ec.Int(3), ec.Log(ec.Int(3))), ec.Mul(ec.Int(4), ec.Log(ec.Int(2)))), 1e-11},
		{"exp(x y) x", func(t *certified.Tape) certified.Ref {
			return t.Mul(t.Exp(t.Mul(t.Param(0), t.Param(1))), t.Param(0))
		}, ec.Sub(ec.Exp(ec.Int(1)), ec.Int(2)), 1e-11},
	} {
		var tape certified.Tape
		r, err := tape.Integrate(t.Context(), c.build(&tape), certified.Options{})
		require.NoError(t, err, c.name)
		assert.True(t, overlap(r.Value, c.want), "%s: %v misses %v", c.name, r.Value, c.want)
		assert.LessOrEqual(t, r.Value.Wid(), c.width*r.Value.Mag(), "%s: %v, %d cells", c.name, r.Value, r.Cells)
		off := ec.Mul(c.want, ec.FromRat(rat(10000001, 10000000)))
		assert.False(t, overlap(r.Value, off), "%s: a value off by 1e-7 is not excluded", c.name)
	}
}

// An integrand that is not bounded has no bounded enclosure.
func TestUnbounded(t *testing.T) {
	var tape certified.Tape
	x := tape.Param(0)
	for _, f := range []certified.Ref{
		tape.Quo(tape.Rat(rat(1, 1)), x),
		tape.Quo(tape.Rat(rat(1, 1)), tape.Root(x, 2)),
		tape.Log(x),
		tape.Quo(tape.Rat(rat(1, 1)), tape.Add(x, tape.Rat(rat(-1, 3)))),
	} {
		r, err := tape.Integrate(t.Context(), f, certified.Options{MaxCells: 400})
		require.NoError(t, err)
		assert.False(t, r.Value.IsBounded(), "%v", r.Value)
	}
}

func TestSigns(t *testing.T) {
	var tape certified.Tape
	x, y := tape.Param(0), tape.Param(1)
	f := tape.Add(tape.Mul(x, tape.Add(x, tape.Rat(rat(-1, 1)))), tape.Rat(rat(26, 100))) // x² - x + 0.26
	assert.True(t, tape.Positive(f, 12))
	g := tape.Add(tape.Mul(x, tape.Add(y, tape.Rat(rat(-1, 1)))), tape.Rat(rat(26, 100)))
	assert.False(t, tape.NonNegative(g, 12))
	assert.True(t, tape.NonNegative(x, 3))
	assert.False(t, tape.Positive(x, 12))
}

// A constant known by an interval gives the integrals for all its values.
func TestConstantsByIntervals(t *testing.T) {
	var tape certified.Tape
	c, err := interval.New(1, 1+0x1p-30)
	require.NoError(t, err)
	f := tape.Quo(tape.Const(interval.Point(1)), tape.Add(tape.Const(c), tape.Param(0)))
	r, err := tape.Integrate(t.Context(), f, certified.Options{})
	require.NoError(t, err)
	for _, a := range []float64{1, 1 + 0x1p-31, 1 + 0x1p-30} {
		assert.True(t, r.Value.Contains(math.Log((1+a)/a)))
	}
	assert.Less(t, r.Value.Wid(), 1e-8)
}

// Kinks and roots in the second parameter only, and absolute values.
func TestAbs(t *testing.T) {
	var tape certified.Tape
	x := tape.Add(tape.Mul(tape.Rat(rat(2, 1)), tape.Param(0)), tape.Rat(rat(-1, 3)))
	for _, f := range []certified.Ref{tape.Abs(x), tape.Mul(tape.Abs(tape.Mul(x, tape.Rat(rat(-1, 1)))), tape.Exp(tape.Mul(tape.Rat(rat(0, 1)), tape.Param(1))))} {
		r, err := tape.Integrate(t.Context(), f, certified.Options{})
		require.NoError(t, err)
		assert.True(t, overlap(r.Value, ec.FromRat(rat(13, 18))), "%v", r.Value)
		assert.Less(t, r.Value.Wid(), 1e-11)
	}
}

// Random rational functions against their partial fractions: the integral of
// a/(x + b) is a log((1 + b)/b).
func TestRandom(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for range 50 {
		var tape certified.Tape
		sum, want := tape.Rat(rat(0, 1)), ec.Int(0)
		for range 3 {
			a, b := rat(rng.Int64N(41)-20, 1+rng.Int64N(9)), rat(1+rng.Int64N(20), 1+rng.Int64N(40))
			sum = tape.Add(sum, tape.Quo(tape.Rat(a), tape.Add(tape.Param(0), tape.Rat(b))))
			bi := ec.FromRat(b)
			want = ec.Add(want, ec.Mul(ec.FromRat(a), ec.Log(ec.Quo(ec.Add(bi, ec.Int(1)), bi))))
		}
		r, err := tape.Integrate(t.Context(), sum, certified.Options{})
		require.NoError(t, err)
		assert.True(t, overlap(r.Value, want), "%v misses %v", r.Value, want)
		assert.Less(t, r.Value.Wid(), 1e-10)
	}
}

func TestCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	var tape certified.Tape
	_, err := tape.Integrate(ctx, tape.Root(tape.Param(0), 2), certified.Options{})
	assert.ErrorIs(t, err, context.Canceled)
}
