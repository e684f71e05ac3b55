package jet_test

import (
	"context"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Cosine and sine of every multiple of π/60 against the standard library: the
// quadrants, the square roots of multiples of π/12, and turns of π/d.
func TestRationalAngles(t *testing.T) {
	for n := int64(-130); n <= 130; n++ {
		require.NoError(t, refined(t, func(r *jet.Ring) error {
			c, s, err := r.CosSin(jet.Of(r.PiVar()).Scale(algebra.Frac64(n, 60)))
			if err != nil {
				return err
			}
			x, _ := r.Enclose(c, nil, 128).Lo().Float64()
			y, _ := r.Enclose(s, nil, 128).Lo().Float64()
			a := float64(n) / 60 * math.Pi
			assert.InDelta(t, math.Cos(a), x, 1e-14, "cos of %d pi/60", n)
			assert.InDelta(t, math.Sin(a), y, 1e-14, "sin of %d pi/60", n)
			one, err := r.Reduce(c.Mul(c).Add(s.Mul(s)))
			k, _ := one.IsConst()
			assert.True(t, k.IsOne())
			return err
		}))
	}
}

// Random integer combinations of two angles obey the addition theorems, in
// any order of reading.
func TestAnglesInAnyOrder(t *testing.T) {
	rng := rand.New(rand.NewPCG(31, 1))
	for range 60 {
		p := [3]int64{rng.Int64N(9) - 4, rng.Int64N(9) - 4, rng.Int64N(9) - 4}
		q := [3]int64{rng.Int64N(9) - 4, rng.Int64N(9) - 4, rng.Int64N(9) - 4}
		d := 1 + rng.Int64N(4)
		require.NoError(t, refined(t, func(r *jet.Ring) error {
			a, b := jet.Of(r.ConstantVar("a")), jet.Of(r.ConstantVar("b"))
			angle := func(k [3]int64) algebra.Fraction {
				return a.Scale(algebra.Frac64(k[0], d)).Add(b.Scale(algebra.Int(k[1]))).Add(jet.Of(r.PiVar()).Scale(algebra.Frac64(k[2], 6)))
			}
			c1, s1, err := r.CosSin(angle(p))
			if err != nil {
				return err
			}
			c2, s2, err := r.CosSin(angle(q))
			if err != nil {
				return err
			}
			c3, s3, err := r.CosSin(angle(p).Add(angle(q)))
			if err != nil {
				return err
			}
			x, err := r.Reduce(c3.Sub(c1.Mul(c2).Sub(s1.Mul(s2))))
			require.NoError(t, err)
			assert.True(t, x.IsZero(), "%v %v: %s", p, q, r.Format(x))
			x, err = r.Reduce(s3.Sub(s1.Mul(c2).Add(c1.Mul(s2))))
			require.NoError(t, err)
			assert.True(t, x.IsZero(), "%v %v: %s", p, q, r.Format(x))
			return nil
		}))
	}
}

// A trigonometric polynomial agrees with its harmonics at random angles.
func TestHarmonicsAgainstValues(t *testing.T) {
	rng := rand.New(rand.NewPCG(32, 1))
	for range 60 {
		r := ringOf(t, 1, 1)
		c, s, err := r.CosSin(jet.Of(r.ConstantVar("theta")))
		require.NoError(t, err)
		var f algebra.Fraction
		for range 5 {
			term := jet.Whole(rng.Int64N(11) - 5).Mul(c.Pow(rng.IntN(5))).Mul(s.Pow(rng.IntN(5)))
			f, err = r.Add(f, term)
			require.NoError(t, err)
		}
		h, err := r.Harmonics(f, "theta")
		require.NoError(t, err)
		for range 3 {
			x := algebra.Frac64(rng.Int64N(200)-100, 17)
			at := jet.Point{r.ConstantVar("theta"): x}
			want, _ := r.Enclose(f, at, 128).Lo().Float64()
			value := func(g algebra.Fraction) float64 { y, _ := r.Enclose(g, at, 128).Lo().Float64(); return y }
			got := value(h.Mean)
			for _, w := range h.Waves {
				got += value(w.Cos)*math.Cos(float64(w.K)*x.Float64()) + value(w.Sin)*math.Sin(float64(w.K)*x.Float64())
			}
			assert.InDelta(t, want, got, 1e-9)
		}
	}
	r := ringOf(t, 1, 1)
	theta := jet.Of(r.ConstantVar("theta"))
	e, err := r.Exp(theta)
	require.NoError(t, err)
	_, err = r.Harmonics(e, "theta")
	require.ErrorIs(t, err, jet.ErrOutside)
	_, err = r.Harmonics(theta, "theta")
	require.ErrorIs(t, err, jet.ErrOutside)
}

// What a sign shows must be so at random points.
func TestVisibleSignsAtPoints(t *testing.T) {
	rng := rand.New(rand.NewPCG(33, 1))
	shown := 0
	for range 800 {
		require.NoError(t, refined(t, func(r *jet.Ring) error {
			a, b, c := r.ConstantVar("a"), r.ConstantVar("b"), r.ConstantVar("c")
			r.Assume(a, jet.Positive)
			r.Assume(b, jet.NonPositive)
			f, err := randomTree(rng, 3, 3).exact(r, []algebra.Fraction{jet.Of(a), jet.Of(b), jet.Of(c)})
			if err != nil {
				if _, ok := err.(*jet.FinerAngles); ok {
					return err
				}
				return nil
			}
			nonNegative, positive := r.VisiblyNonNegative(f), r.VisiblyPositive(f)
			if !nonNegative && !positive {
				return nil
			}
			require.True(t, nonNegative || !positive, "positive but not non-negative: %s", r.Format(f))
			shown++
			for range 12 {
				at := jet.Point{a: algebra.Frac64(1+rng.Int64N(20), 4), b: algebra.Frac64(-rng.Int64N(20), 4), c: algebra.Frac64(rng.Int64N(41)-20, 4)}
				holds := true
				for _, k := range r.Conditions() {
					holds = holds && k.Holds(r, at)
				}
				if s, ok := r.Sign(f, at); ok && holds {
					require.GreaterOrEqual(t, s, 0, r.Format(f))
					if positive {
						require.Positive(t, s, r.Format(f))
					}
				}
			}
			return nil
		}))
	}
	require.Greater(t, shown, 100)
}

func TestSqrtRat(t *testing.T) {
	for n := int64(0); n < 200; n++ {
		s, ok := jet.SqrtRat(algebra.Frac64(n, 49))
		root := math.Round(math.Sqrt(float64(n)))
		assert.Equal(t, root*root == float64(n), ok)
		if ok {
			assert.True(t, s.Mul(s).Equal(algebra.Frac64(n, 49)))
		}
	}
	_, ok := jet.SqrtRat(algebra.Int(-4))
	assert.False(t, ok)
	big1 := new(big.Int).Exp(big.NewInt(12345678901), big.NewInt(8), nil)
	s, ok := jet.SqrtRat(algebra.FromBig(new(big.Rat).SetInt(big1)))
	assert.True(t, ok)
	assert.Equal(t, 0, s.Big().Num().Cmp(new(big.Int).Exp(big.NewInt(12345678901), big.NewInt(4), nil)))
}

// An exact value is the value, and a sign is never taken from an enclosure
// that is undefined.
func TestPointsWhereValuesAreUndefined(t *testing.T) {
	r := ringOf(t, 1, 1)
	a := r.ConstantVar("a")
	root, err := r.Root(jet.Of(a), 2)
	require.NoError(t, err)
	log, err := r.Log(jet.Of(a))
	require.NoError(t, err)
	inv, err := r.Quo(jet.Whole(1), jet.Of(a))
	require.NoError(t, err)
	for _, f := range []algebra.Fraction{root, log, inv} {
		_, ok := r.Sign(f, jet.Point{a: algebra.Int(-4)})
		_, exact := r.Exact(f, jet.Point{a: algebra.Int(-4)})
		if !f.Equal(inv) {
			assert.False(t, ok, r.Format(f))
			assert.False(t, exact, r.Format(f))
			assert.Equal(t, "undefined", r.Show(f, jet.Point{a: algebra.Int(-4)}))
		}
	}
	_, ok := r.Sign(inv, jet.Point{a: {}})
	assert.False(t, ok)
	x, ok := r.Exact(root, jet.Point{a: algebra.Frac64(9, 4)})
	assert.True(t, ok)
	assert.True(t, x.Equal(algebra.Frac64(3, 2)))
	_, ok = r.Exact(root, jet.Point{a: algebra.Int(2)})
	assert.False(t, ok)
	s, ok := r.Sign(root.Sub(jet.Rational(big.NewRat(14142135623730950, 10000000000000000))), jet.Point{a: algebra.Int(2)})
	assert.True(t, ok)
	assert.Equal(t, 1, s)
	// A zero is certain only in exact arithmetic: sqrt(5 + 2 sqrt 6) - sqrt 2 - sqrt 3.
	r6, _ := r.Root(jet.Whole(6), 2)
	r2, _ := r.Root(jet.Whole(2), 2)
	r3, _ := r.Root(jet.Whole(3), 2)
	n, err := r.Root(jet.Whole(5).Add(r6.Scale(algebra.Int(2))), 2)
	require.NoError(t, err)
	_, ok = r.Sign(n.Sub(r2).Sub(r3), nil)
	assert.False(t, ok)
}

func TestPowersOfNegativeNumbers(t *testing.T) {
	r, err := jet.NewRing(context.Background(), nil, nil)
	require.NoError(t, err)
	_, err = r.Root(jet.Whole(-8), 3)
	assert.Error(t, err)
	_, err = r.Root(jet.Whole(-1), 2)
	assert.Error(t, err)
	_, err = r.Log(jet.Whole(-1))
	assert.Error(t, err)
	_, err = r.Log(jet.Whole(0))
	assert.Error(t, err)
	_, err = r.Root(jet.Whole(4), 0)
	assert.ErrorIs(t, err, jet.ErrOutside)
}
