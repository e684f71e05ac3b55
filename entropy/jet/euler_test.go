package jet_test

import (
	"context"
	"fmt"
	"math/rand/v2"
	"testing"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func ringOf(t testing.TB, coords, unknowns int) *jet.Ring {
	t.Helper()
	r, err := jet.NewRing(context.Background(), []string{"x", "y", "z", "t"}[:coords], []string{"u", "v", "w"}[:unknowns])
	require.NoError(t, err)
	return r
}

func randomIndex(rng *rand.Rand, coords, order int) jet.Index {
	var j jet.Index
	for range rng.IntN(order + 1) {
		j[rng.IntN(coords)]++
	}
	return j
}

// randomLagrangian is a random function of jets up to an order, coordinates
// and a constant; some hold quotients and kernels.
func randomLagrangian(t testing.TB, r *jet.Ring, rng *rand.Rand, order int, kernels bool) algebra.Fraction {
	t.Helper()
	n, m := len(r.Coordinates), len(r.Unknowns)
	jetOf := func() algebra.Fraction {
		f, err := r.Jet(rng.IntN(m), randomIndex(rng, n, order), jet.NoSide)
		require.NoError(t, err)
		return f
	}
	var sum algebra.Fraction
	for range 1 + rng.IntN(3) {
		term := jet.Rational(algebra.Frac64(rng.Int64N(9)-4, 1+rng.Int64N(4)).Big())
		for range 1 + rng.IntN(3) {
			switch rng.IntN(6) {
			case 0:
				term = term.Mul(jet.Of(r.CoordinateVar(rng.IntN(n))))
			case 1:
				term = term.Mul(jet.Of(r.ConstantVar("a")))
			default:
				term = term.Mul(jetOf())
			}
		}
		sum = sum.Add(term)
	}
	if !kernels {
		return sum
	}
	j := jetOf()
	one := jet.Whole(1)
	var k algebra.Fraction
	var err error
	switch rng.IntN(5) {
	case 0:
		k, err = r.Root(one.Add(j.Mul(j)), 2)
	case 1:
		k, err = r.Exp(j)
	case 2:
		k, _, err = r.CosSin(j)
	case 3:
		k, err = r.Quo(jetOf(), one.Add(j.Mul(j)))
	case 4:
		k, err = r.Erf(j)
	}
	require.NoError(t, err)
	return sum.Add(k.Mul(jetOf()))
}

// The kernel of the Euler operator holds every total divergence, and a
// Lagrangian that is a divergence plus u_J² is not one: its Euler expression
// is 2 (-1)^|J| u_2J (Olver, Applications of Lie Groups to Differential
// Equations, 2nd ed., Springer 1993, section 4.1, theorem 4.7).
func TestEulerOperatorOfDivergences(t *testing.T) {
	rng := rand.New(rand.NewPCG(21, 4))
	for trial := range 220 {
		coords, unknowns := 1+rng.IntN(3), 1+rng.IntN(2)
		r := ringOf(t, coords, unknowns)
		order := 1 + rng.IntN(2)
		kernels := trial%3 == 2
		if kernels {
			order = 1
		}
		var div algebra.Fraction
		for i := range coords {
			f, err := r.Total(randomLagrangian(t, r, rng, order, kernels), i)
			require.NoError(t, err)
			div, err = r.Add(div, f)
			require.NoError(t, err)
		}
		for a := range unknowns {
			e, err := r.Euler(div, a)
			require.NoError(t, err)
			require.True(t, e.IsZero(), "E(%s) = %s", r.Format(div), r.Format(e))
		}
		j := randomIndex(rng, coords, 2)
		a := rng.IntN(unknowns)
		u, err := r.Jet(a, j, jet.NoSide)
		require.NoError(t, err)
		e, err := r.Euler(div.Add(u.Mul(u)), a)
		require.NoError(t, err)
		twice := j
		for i := range twice {
			twice[i] *= 2
		}
		want, err := r.Jet(a, twice, jet.NoSide)
		require.NoError(t, err)
		want = want.Scale(algebra.Int(int64(2 - 4*(j.Order()%2))))
		require.True(t, e.Equal(want), "E = %s, want %s", r.Format(e), r.Format(want))
	}
}

// Minors of the Jacobian matrix, and of the Hessian as that of a gradient, are
// null Lagrangians (Olver, loc. cit., theorem 4.7 and example 4.8).
func TestJacobianNullLagrangians(t *testing.T) {
	for n := 2; n <= 3; n++ {
		r := ringOf(t, n, n)
		d := func(a, i int) algebra.Fraction {
			f, err := r.Jet(a, jet.Index{}.Plus(i), jet.NoSide)
			require.NoError(t, err)
			return f
		}
		var det func(rows, cols []int) algebra.Fraction
		det = func(rows, cols []int) algebra.Fraction {
			if len(rows) == 0 {
				return jet.Whole(1)
			}
			var sum algebra.Fraction
			for k, c := range cols {
				rest := append(append([]int(nil), cols[:k]...), cols[k+1:]...)
				m := d(rows[0], c).Mul(det(rows[1:], rest))
				if k%2 == 1 {
					m = m.Neg()
				}
				sum = sum.Add(m)
			}
			return sum
		}
		minors := [][]int{{0, 1}}
		if n == 3 {
			minors = append(minors, []int{0, 2}, []int{1, 2}, []int{0, 1, 2})
		}
		for _, rows := range minors {
			for _, cols := range minors {
				if len(rows) != len(cols) {
					continue
				}
				m := det(rows, cols)
				for a := range n {
					e, err := r.Euler(m, a)
					require.NoError(t, err)
					require.True(t, e.IsZero())
					// its square is none
					if e, err = r.Euler(m.Mul(m), rows[0]); assert.NoError(t, err) {
						assert.False(t, e.IsZero())
					}
				}
			}
		}
	}
}

// E(2 R L) = 4 K and E(u K) = 3 K for the layered model.
func TestEulerOfTheLayeredModel(t *testing.T) {
	r := ringOf(t, 3, 1)
	d := func(j jet.Index) algebra.Fraction {
		f, err := r.Jet(0, j, jet.NoSide)
		require.NoError(t, err)
		return f
	}
	ux, uy, uz := d(jet.Index{1}), d(jet.Index{0, 1}), d(jet.Index{0, 0, 1})
	uxx, uyy, uxy := d(jet.Index{2}), d(jet.Index{0, 2}), d(jet.Index{1, 1})
	res := uz.Sub(ux.Mul(ux).Add(uy.Mul(uy)).Scale(algebra.Frac64(1, 2)))
	curv := uxx.Mul(uyy).Sub(uxy.Mul(uxy))
	e, err := r.Euler(res.Mul(uxx.Add(uyy)).Scale(algebra.Int(2)), 0)
	require.NoError(t, err)
	assert.True(t, e.Equal(curv.Scale(algebra.Int(4))), r.Format(e))
	e, err = r.Euler(d(jet.Index{}).Mul(curv), 0)
	require.NoError(t, err)
	assert.True(t, e.Equal(curv.Scale(algebra.Int(3))), r.Format(e))
}

// D_i are derivations that commute.
func TestTotalDerivativesCommute(t *testing.T) {
	rng := rand.New(rand.NewPCG(22, 4))
	for trial := range 100 {
		r := ringOf(t, 2, 2)
		f := randomLagrangian(t, r, rng, 2, trial%2 == 1)
		g := randomLagrangian(t, r, rng, 1, trial%4 == 1)
		total := func(h algebra.Fraction, i int) algebra.Fraction {
			d, err := r.Total(h, i)
			require.NoError(t, err)
			return d
		}
		diff, err := r.Sub(total(total(f, 0), 1), total(total(f, 1), 0))
		require.NoError(t, err)
		require.True(t, diff.IsZero(), r.Format(f))
		fg, err := r.Mul(f, g)
		require.NoError(t, err)
		leibniz := f.Mul(total(g, 0)).Add(g.Mul(total(f, 0)))
		diff, err = r.Sub(total(fg, 0), leibniz)
		require.NoError(t, err)
		require.True(t, diff.IsZero(), r.Format(f)+" times "+r.Format(g))
	}
}

func TestLimitsOfJets(t *testing.T) {
	r := ringOf(t, 1, 1)
	f, err := r.Jet(0, jet.Index{jet.MaxProlonged}, jet.NoSide)
	require.NoError(t, err)
	_, err = r.Total(f, 0)
	require.ErrorIs(t, err, algebra.ErrLimit)
	_, err = r.JetVar(0, jet.Index{jet.MaxProlonged + 1}, jet.NoSide)
	require.ErrorIs(t, err, algebra.ErrLimit)
	_, err = jet.NewRing(context.Background(), make([]string, jet.MaxCoordinates+1), nil)
	require.Error(t, err)
	_, err = jet.NewRing(context.Background(), nil, make([]string, jet.MaxUnknowns+1))
	require.Error(t, err)
	_, err = r.Quo(f, algebra.Fraction{})
	require.ErrorIs(t, err, jet.ErrDivisionByZero)
}

// A power that would explode ends with an error that says so, with and
// without kernels that have relations in it.
func TestPowersThatExplode(t *testing.T) {
	r := ringOf(t, 2, 1)
	sum := jet.Whole(1)
	for _, j := range []jet.Index{{}, {1}, {0, 1}, {2}, {1, 1}, {0, 2}, {3}, {2, 1}, {1, 2}} {
		f, err := r.Jet(0, j, jet.NoSide)
		require.NoError(t, err)
		sum = sum.Add(f)
	}
	_, err := r.PowInt(sum, 60)
	require.ErrorIs(t, err, algebra.ErrLimit)
	c, _, err := r.CosSin(jet.Of(r.ConstantVar("a")))
	require.NoError(t, err)
	_, err = r.PowInt(sum.Add(c), 60)
	require.ErrorIs(t, err, algebra.ErrLimit)
	for _, e := range []int64{1 << 20, 1<<20 + 1} {
		_, err = r.Pow(sum, algebra.Int(e))
		require.ErrorIs(t, err, algebra.ErrLimit)
	}
	_, err = r.Pow(sum, algebra.Frac64(1, 65))
	require.ErrorIs(t, err, jet.ErrOutside)
}

func TestCancelledContext(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	r, err := jet.NewRing(ctx, []string{"x"}, []string{"u"})
	require.NoError(t, err)
	f, err := r.Jet(0, jet.Index{1}, jet.NoSide)
	require.NoError(t, err)
	cancel()
	_, err = r.Mul(f, f)
	require.ErrorIs(t, err, context.Canceled)
	_, err = r.Total(f.Mul(f), 0)
	require.ErrorIs(t, err, context.Canceled)
}

func ExampleRing_Euler() {
	r, _ := jet.NewRing(context.Background(), []string{"x", "y"}, []string{"u"})
	ux, _ := r.Jet(0, jet.Index{1}, jet.NoSide)
	uy, _ := r.Jet(0, jet.Index{0, 1}, jet.NoSide)
	// The Dirichlet energy.
	e, _ := r.Euler(ux.Mul(ux).Add(uy.Mul(uy)), 0)
	fmt.Println(r.Format(e))
	// Output: -2 u_xx - 2 u_yy
}

func ExampleRing_Total() {
	r, _ := jet.NewRing(context.Background(), []string{"x", "y"}, []string{"u"})
	u, _ := r.Jet(0, jet.Index{}, jet.NoSide)
	c, _, _ := r.CosSin(u)
	d, _ := r.Total(jet.Of(r.CoordinateVar(0)).Mul(c), 0)
	fmt.Println(r.Format(d))
	// Output: -x sin(u) u_x + cos(u)
}
