package jet_test

import (
	"testing"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Numbers in cosines of fractions of π that are zero have a normal form that
// is zero, and others do not: Σ cos(2πk/n) over k prime to n is the Möbius
// function of n, and cos(2πk/n) over all k sums to zero.
func TestSumsOfCosines(t *testing.T) {
	mobius := map[int64]int64{3: -1, 5: -1, 7: -1, 9: 0, 10: 1, 11: -1, 14: 1, 15: 1, 20: 0, 21: 1, 30: -1, 42: -1, 45: 0, 60: 0}
	gcd := func(a, b int64) int64 {
		for b != 0 {
			a, b = b, a%b
		}
		return a
	}
	for n, mu := range mobius {
		require.NoError(t, refined(t, func(r *jet.Ring) error {
			var coprime, all algebra.Fraction
			for k := range n {
				c, s, err := r.CosSin(jet.Of(r.PiVar()).Scale(algebra.Frac64(2*k, n)))
				if err != nil {
					return err
				}
				if gcd(k, n) == 1 {
					coprime = coprime.Add(c)
				}
				all = all.Add(c).Add(s)
			}
			coprime, err := r.Reduce(coprime)
			require.NoError(t, err)
			got, ok := coprime.IsConst()
			if n%4 == 0 && !ok { // √2 and √3 beside the cosine
				return nil
			}
			assert.True(t, ok && got.Equal(algebra.Int(mu)), "order %d: %s", n, r.Format(coprime))
			all, err = r.Reduce(all)
			require.NoError(t, err)
			assert.True(t, all.IsZero(), "order %d: %s", n, r.Format(all))
			return nil
		}))
	}
}

// sin² + cos² = 1 and the double angle, in the field of cos(π/n).
func TestTurnsByMinimalPolynomials(t *testing.T) {
	for n := int64(2); n <= 60; n++ {
		if n == 8 || n == 24 {
			continue // the double angle is read as square roots
		}
		require.NoError(t, refined(t, func(r *jet.Ring) error {
			c, s, err := r.CosSin(jet.Of(r.PiVar()).Scale(algebra.Frac64(1, n)))
			if err != nil {
				return err
			}
			one, err := r.Reduce(c.Mul(c).Add(s.Mul(s)))
			require.NoError(t, err)
			k, ok := one.IsConst()
			assert.True(t, ok && k.IsOne(), "%d: %s", n, r.Format(one))
			c2, s2, err := r.CosSin(jet.Of(r.PiVar()).Scale(algebra.Frac64(2, n)))
			if err != nil {
				return err
			}
			for _, zero := range []algebra.Fraction{c.Mul(c).Scale(algebra.Int(2)).Sub(jet.Whole(1)).Sub(c2), c.Mul(s).Scale(algebra.Int(2)).Sub(s2)} {
				zero, err = r.Reduce(zero)
				require.NoError(t, err)
				assert.True(t, zero.IsZero(), "%d: %s", n, r.Format(zero))
			}
			return nil
		}))
	}
}

// The orientation has two signs; its absolute value is 1, and the root of 1
// is 1.
func TestOrientationIsNoRoot(t *testing.T) {
	r := ringOf(t, 1, 1)
	sigma, err := r.Orientation()
	require.NoError(t, err)
	for _, f := range []algebra.Fraction{sigma, sigma.Scale(algebra.Int(-3))} {
		a, err := r.Abs(f)
		require.NoError(t, err)
		k, ok := a.IsConst()
		assert.True(t, ok && k.Sign() > 0, "%s", r.Format(a))
	}
	x, err := r.Jet(0, jet.Index{1}, jet.NoSide)
	require.NoError(t, err)
	a, err := r.Abs(sigma.Mul(x))
	require.NoError(t, err)
	b, err := r.Abs(x)
	require.NoError(t, err)
	assert.True(t, a.Equal(b), "%s", r.Format(a))
	again, err := r.Orientation()
	require.NoError(t, err)
	assert.True(t, again.Equal(sigma))
	one, err := r.Reduce(sigma.Mul(sigma))
	require.NoError(t, err)
	k, ok := one.IsConst()
	assert.True(t, ok && k.IsOne())
	assert.False(t, r.VisiblyNonNegative(sigma))
}

// A trigonometric polynomial in a multiple or a fraction of the angle.
func TestHarmonicsOfMultiples(t *testing.T) {
	for _, q := range []algebra.Rat{algebra.Int(2), algebra.Frac64(1, 2), algebra.Frac64(-3, 4)} {
		r := ringOf(t, 1, 1)
		c, s, err := r.CosSin(jet.Of(r.ConstantVar("theta")).Scale(q))
		require.NoError(t, err)
		h, err := r.Harmonics(c.Scale(algebra.Int(3)).Add(s), "theta")
		require.NoError(t, err)
		require.Len(t, h.Waves, 1)
		assert.Equal(t, 1, h.Waves[0].K)
		assert.True(t, h.Unit.Equal(q))
	}
}

// An angle that is split off gives the same normal form in any order, with
// any rest beside it.
func TestSplitAngle(t *testing.T) {
	for range 2 {
		require.NoError(t, refined(t, func(r *jet.Ring) error {
			theta := jet.Of(r.ConstantVar("theta"))
			r.SplitAngle(r.ConstantVar("theta"))
			c, s, err := r.CosSin(theta.Scale(algebra.Frac64(2, 3)).Add(jet.Whole(1)))
			if err != nil {
				return err
			}
			h, err := r.Harmonics(c.Mul(s), "theta")
			require.NoError(t, err)
			assert.True(t, h.Unit.Equal(algebra.Frac64(1, 3)), "%s", h.Unit)
			require.Len(t, h.Waves, 1)
			assert.Equal(t, 4, h.Waves[0].K)
			return nil
		}))
	}
}

// log t² = 2 log t for a t that is visibly positive.
func TestLogarithmOfSquare(t *testing.T) {
	r := ringOf(t, 1, 1)
	x, err := r.Jet(0, jet.Index{1}, jet.NoSide)
	require.NoError(t, err)
	p := x.Mul(x).Add(jet.Whole(1))
	a, err := r.Log(p.Pow(4))
	require.NoError(t, err)
	b, err := r.Log(p)
	require.NoError(t, err)
	assert.True(t, a.Equal(b.Scale(algebra.Int(4))), "%s", r.Format(a))
}
