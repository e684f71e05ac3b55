package entropy_test

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
)

func floats(x []algebra.Rat) []float64 {
	out := make([]float64, len(x))
	for i, v := range x {
		out[i] = v.Float64()
	}
	return out
}

// The layered cost is |q_perp|⁴/(12 |q|), exactly, at random rational traces
// on the well, and the compiled cost agrees with it.
func TestLayeredProfile(t *testing.T) {
	set := layered()
	p, err := set.NewProfile(t.Context())
	require.NoError(t, err)
	assert.True(t, p.Polynomial())
	assert.True(t, p.Layered())
	pp, err := p.Compile(nil)
	require.NoError(t, err)
	half := algebra.Frac64(1, 2)
	r := rand.New(rand.NewPCG(1, 1))
	for range 200 {
		var q2 algebra.Rat
		plus, minus := make([]algebra.Rat, 3), make([]algebra.Rat, 3)
		for i := range 2 {
			plus[i], minus[i] = smallRat(r), smallRat(r)
			plus[2] = plus[2].Add(half.Mul(plus[i]).Mul(plus[i]))
			minus[2] = minus[2].Add(half.Mul(minus[i]).Mul(minus[i]))
			q := plus[i].Sub(minus[i])
			q2 = q2.Add(q.Mul(q))
		}
		c, err := p.Exact(plus, minus, nil)
		require.NoError(t, err)
		assert.True(t, c.Numerator.Equal(q2.Mul(q2).Mul(algebra.Frac64(1, 12))), "%v %v", plus, minus)
		if q2.IsZero() {
			continue
		}
		size := math.Sqrt(c.SquaredJump.Float64())
		want := c.Numerator.Float64() / size
		fp, fm, nu := floats(plus), floats(minus), make([]float64, 3)
		for i := range nu {
			nu[i] = (fp[i] - fm[i]) / size
		}
		got, bound := pp.Cost([]float64{0, 0, 0}, fp, fm, nu)
		assert.Zero(t, bound)
		assert.InEpsilon(t, want, got, 1e-12)
		// The other orientation costs the same.
		for i := range nu {
			nu[i] = -nu[i]
		}
		got, _ = pp.Cost([]float64{0, 0, 0}, fm, fp, nu)
		assert.InEpsilon(t, want, got, 1e-12)
	}
}

// The planar eikonal cost with R = (1 - |p|²)/2 is |q|³/12, exactly; twice
// that with R twice as large.
func TestEikonalProfile(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 2))
	for _, test := range []struct {
		residual string
		factor   algebra.Rat
	}{{"(1 - u_x^2 - u_y^2)/2", algebra.Frac64(1, 12)}, {"1 - u_x^2 - u_y^2", algebra.Frac64(1, 6)}} {
		p, err := plane(test.residual).NewProfile(t.Context())
		require.NoError(t, err)
		assert.False(t, p.Layered())
		for range 200 {
			plus, minus := make([]algebra.Rat, 2), make([]algebra.Rat, 2)
			plus[0], plus[1] = circle(r)
			minus[0], minus[1] = circle(r)
			c, err := p.Exact(plus, minus, nil)
			require.NoError(t, err)
			dx, dy := plus[0].Sub(minus[0]), plus[1].Sub(minus[1])
			q2 := dx.Mul(dx).Add(dy.Mul(dy))
			if q2.IsZero() {
				continue
			}
			// |q|³ = |q|⁴/|q|
			assert.True(t, c.SquaredJump.Equal(q2))
			assert.True(t, c.Numerator.Equal(q2.Mul(q2).Mul(test.factor)))
		}
	}
}

// Residuals of degree four: one of one sign, and one that changes sign inside
// the segment, at rational and at irrational places.
func TestQuarticProfile(t *testing.T) {
	at := func(x, y int64) []algebra.Rat { return []algebra.Rat{algebra.Int(x), algebra.Int(y)} }
	origin := []float64{0, 0}

	// R = (1 - u_x²)²(2 + u_y) vanishes at u_x = ±1; between them it is
	// positive. ∫ (1 - (2s-1)²)² 2 ds = 2·8/15, L(q ⊗ ν) = 2.
	p, err := plane("(1 - u_x^2)^2 (2 + u_y)").NewProfile(t.Context())
	require.NoError(t, err)
	c, err := p.Exact(at(1, 0), at(-1, 0), nil)
	require.NoError(t, err)
	assert.Equal(t, "64/15", c.Numerator.String()) // times |q| = 2
	pp, err := p.Compile(nil)
	require.NoError(t, err)
	got, bound := pp.Cost(origin, []float64{1, 0}, []float64{-1, 0}, []float64{1, 0})
	assert.InEpsilon(t, 32.0/15, got, 1e-14)
	assert.Zero(t, bound)

	// R = u_x (1 - u_x²): ∫_{-1}^{1} |p - p³| dp = 1/2, and L has no further
	// factor: the cost is 1/2.
	p, err = plane("u_x (1 - u_x^2)").NewProfile(t.Context())
	require.NoError(t, err)
	c, err = p.Exact(at(1, 0), at(-1, 0), nil)
	require.NoError(t, err)
	assert.Equal(t, "1", c.Numerator.String()) // over |q| = 2
	pp, err = p.Compile(nil)
	require.NoError(t, err)
	got, bound = pp.Cost(origin, []float64{1, 0}, []float64{-1, 0}, []float64{1, 0})
	assert.InDelta(t, 0.5, got, 1e-14+bound)
	assert.Less(t, bound, 1e-12)

	// R = (p² - 2)(1 - p²) changes sign at ±1 on the way from -√2 to √2, which
	// are s = (1 ± 1/√2)/2.
	p, err = plane("(u_x^2 - 2) (1 - u_x^2)").NewProfile(t.Context())
	require.NoError(t, err)
	pp, err = p.Compile(nil)
	require.NoError(t, err)
	root := math.Sqrt2
	got, bound = pp.Cost(origin, []float64{root, 0}, []float64{-root, 0}, []float64{1, 0})
	f := func(x float64) float64 { return -math.Pow(x, 5)/5 + x*x*x - 2*x } // ∫ (p²-2)(1-p²)
	want := 2 * (math.Abs(f(1)-f(0)) + math.Abs(f(root)-f(1)))
	assert.InDelta(t, want, got, 1e-13+bound)
	assert.Less(t, bound, 1e-12)
}

// A bending whose coefficients depend on the gradient is taken along the
// segment.
func TestBendingWithGradient(t *testing.T) {
	set := plane("(1 - u_x^2 - u_y^2)/2")
	set.Lets["L"] = parse(set, "(1 + u_x^2) u_xx + u_yy")
	p, err := set.NewProfile(t.Context())
	require.NoError(t, err)
	c, err := p.Exact([]algebra.Rat{algebra.Int(1), {}}, []algebra.Rat{algebra.Int(-1), {}}, nil)
	require.NoError(t, err)
	// ∫_{-1}^{1} (1-p²)/2 (1+p²) dp = 1 - 1/5
	assert.Equal(t, "8/5", c.Numerator.String()) // over |q| = 2
	pp, err := p.Compile(nil)
	require.NoError(t, err)
	got, _ := pp.Cost([]float64{0, 0}, []float64{1, 0}, []float64{-1, 0}, []float64{1, 0})
	assert.InEpsilon(t, 0.8, got, 1e-14)
}

func TestNoProfile(t *testing.T) {
	for _, test := range []struct{ r, l, e, want string }{
		{"u_z - (u_x^2 + u_y^2)/2", "u_xx + u_yy", "R^2/eps + eps L^2/2", "the energy is not"},
		{"u_z - (u_x^2 + u_y^2)/2", "u_xx + u_yy", "R^2/(2 eps) + eps L^2/2 + u_xx", "the energy is not"},
		{"u_z - (u_x^2 + u_y^2)/2", "u_xx + u_yy", "R^2 + L^2/4", "the energy is not"},
		{"eps (u_z - u_x^2)", "u_xx + u_yy", "R^2/(2 eps) + eps L^2/2", "the energy is not"},
		{"u_z - u_x^2", "u_xx^2", "R^2/(2 eps) + eps L^2/2", "not linear"},
		{"u_z - u_x^2", "u_xx + 1", "R^2/(2 eps) + eps L^2/2", "not linear"},
		{"u_z - u_x^2", "u_xxx", "R^2/(2 eps) + eps L^2/2", "depends on u_xxx"},
		{"u_z - u^2", "u_xx", "R^2/(2 eps) + eps L^2/2", "depends on u"},
		{"u_z - u_xx", "u_xx", "R^2/(2 eps) + eps L^2/2", "depends on u_xx"},
	} {
		set := layered()
		set.Lets["R"], set.Lets["L"], set.Lets["e"] = parse(set, test.r), parse(set, test.l), parse(set, test.e)
		_, err := set.NewProfile(t.Context())
		assert.ErrorIs(t, err, entropy.ErrNoProfile, test.want)
		assert.ErrorContains(t, err, test.want)
	}
	set := layered()
	set.Model = entropy.Model{}
	_, err := set.NewProfile(t.Context())
	assert.ErrorIs(t, err, entropy.ErrNoProfile)
}

// The same energy, written otherwise, is recognised; the layered model in
// other words too.
func TestProfileRecognised(t *testing.T) {
	set := layered()
	set.Lets["R"] = parse(set, "-(norm(u_x, u_y)^2 - 2 u_z)/2")
	set.Lets["L"] = parse(set, "d_x(u_x) + u_yy")
	set.Lets["e"] = parse(set, "(R^2 + eps^2 L^2)/(2 eps)")
	p, err := set.NewProfile(t.Context())
	require.NoError(t, err)
	assert.True(t, p.Layered())
	set.Lets["L"] = parse(set, "u_xx + u_zz")
	p, err = set.NewProfile(t.Context())
	require.NoError(t, err)
	assert.False(t, p.Layered())
}

func TestExactProfileRefuses(t *testing.T) {
	p, err := plane("(1 - u_x^2 - u_y^2)/2").NewProfile(t.Context())
	require.NoError(t, err)
	on := []algebra.Rat{algebra.Int(1), {}}
	off := []algebra.Rat{algebra.Int(1), algebra.FromBig(big.NewRat(1, 1e15))}
	_, err = p.Exact(off, on, nil)
	assert.ErrorContains(t, err, "plus trace is off the well")
	_, err = p.Exact(on, off, nil)
	assert.ErrorContains(t, err, "minus trace is off the well")
	_, err = p.Exact(on, on[:1], nil)
	assert.ErrorIs(t, err, entropy.ErrShape)
	c, err := p.Exact(on, on, nil)
	require.NoError(t, err)
	assert.True(t, c.Numerator.IsZero())

	with := plane("(c - u_x^2 - u_y^2)/2", "c")
	p, err = with.NewProfile(t.Context())
	require.NoError(t, err)
	_, err = p.Compile(nil)
	assert.ErrorContains(t, err, "the constant c has no value")
	_, err = p.Exact(on, on, nil)
	require.NoError(t, err) // no jump
	_, err = p.Exact(on, []algebra.Rat{algebra.Int(-1), {}}, nil)
	assert.ErrorContains(t, err, "depends on c")
	c, err = p.Exact(on, []algebra.Rat{algebra.Int(-1), {}}, map[string]algebra.Rat{"c": algebra.Int(1)})
	require.NoError(t, err)
	assert.Equal(t, "4/3", c.Numerator.String()) // 2⁴/12
}

// A residual that is not polynomial has no closed cost, but an integrand.
func TestTranscendentalProfile(t *testing.T) {
	p, err := plane("1 - norm(u_x, u_y)").NewProfile(t.Context())
	require.NoError(t, err)
	assert.False(t, p.Polynomial())
	pp, err := p.Compile(nil)
	require.NoError(t, err)
	assert.False(t, pp.Polynomial())
	assert.InEpsilon(t, 2*0.5, pp.Integrand(0.25, []float64{0, 0}, []float64{1, 0}, []float64{-1, 0}, []float64{1, 0}), 1e-15)
}
