package limit

import (
	"context"
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func sweep(t *testing.T, p *Problem, eps ...float64) (list []Energy) {
	t.Helper()
	for _, e := range eps {
		x, err := p.Integrate(t.Context(), e)
		require.NoError(t, err)
		assert.True(t, x.Met)
		list = append(list, x)
	}
	return list
}

func rate(list []Energy, target float64) *Rate {
	var eps, gap, err []float64
	for _, e := range list {
		eps, gap, err = append(eps, e.Eps), append(gap, e.Energy-target), append(err, e.Error+1e-14*target)
	}
	return FitRate(eps, gap, err)
}

var root = math.Sqrt(3) / 2

// The energies of creases in closed form, over fibres.
func TestSharp(t *testing.T) {
	t.Parallel()
	for name, c := range map[string]struct {
		p            *Problem
		energy, area float64
	}{
		"wall":       {problem(box(-1, 1, 0, 1, 0, 1), &Front{}, layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0)), 2. / 3, 1},
		"oblique":    {problem(box(-2, 1, 0, 1, 0, 1), &Front{}, layeredBranch(1, 0, 0), layeredBranch(0, 0, 0)), 1. / 12, math.Sqrt(1.25)},
		"paraboloid": {problem(cylinder(0, 2.5, 0.5, 3), &Front{}, focal, layeredBranch(0, 0, -0.7)), 2 * math.Pi * 0.49 / 3 * math.Log(6), math.NaN()},
		"three":      {problem(cylinder(0, 1, 0, 1), &Front{}, layeredBranch(1, 0, 0), layeredBranch(-.5, root, 0), layeredBranch(-.5, -root, 0)), 1.5 * root, 3},
		"rectangle":  {problem(box(-1, 1, -.5, .5), &Front{Min: true}, affine(1, -1, 0), affine(1, 1, 0), affine(.5, 0, -1), affine(.5, 0, 1)), 4. / 3, 1 + 2*math.Sqrt2},
		"parabola":   {problem(box(-2, 2, -1, 1.5), &Front{Min: true}, fromPoint(0, 1), affine(1, 0, 1)), 2 * math.Pi / 3, math.NaN()},
	} {
		energy, estimate, area, err := c.p.Sharp(t.Context())
		require.NoError(t, err, name)
		assert.InEpsilon(t, c.energy, energy, 1e-8, name)
		assert.LessOrEqual(t, math.Abs(energy-c.energy), estimate+1e-14, name)
		if !math.IsNaN(c.area) {
			assert.InEpsilon(t, c.area, area, 1e-8, name)
		}
	}
}

func TestWallIsExponential(t *testing.T) {
	p := problem(box(-1, 1, 0, 1, 0, 1), &Front{}, layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0))
	list := sweep(t, p, .2, .1, .05, .025)
	// On |x| < 1 the energy is ∫ eps L² = (2/3) (3 tanh a - tanh³ a)/2 with a = 1/(2 eps).
	for _, e := range list {
		th := math.Tanh(0.5 / e.Eps)
		assert.InEpsilon(t, (3*th-th*th*th)/3, e.Energy, 1e-12)
		assert.InEpsilon(t, 1, e.Compression/e.Bending, 1e-12)
	}
	assert.Nil(t, rate(list, 2./3), "below rounding")
}

func TestParaboloidIsOfSecondOrder(t *testing.T) {
	t.Parallel()
	p := problem(cylinder(0, 2.5, 0.5, 3), &Front{}, focal, layeredBranch(0, 0, -0.7))
	target := 2 * math.Pi * 0.49 / 3 * math.Log(6)
	list := sweep(t, p, .05, .025, .0125, .00625, .003125)
	r := rate(list, target)
	require.NotNil(t, r)
	assert.InDelta(t, 2, r.Value, 0.02)
	assert.Less(t, r.Deviation, 0.01)
	assert.Equal(t, 5, r.Used)
	last := list[4]
	assert.InEpsilon(t, target, last.Energy, 1e-3)
	assert.InEpsilon(t, 1, last.Compression/last.Bending, 1e-3)
	assert.NotNil(t, rate(list, target*1.01), "a wrong target")
	assert.Less(t, math.Abs(rate(list, target*1.01).Value), 1.5, "a wrong target")
}

func TestThreeFrontsAreOfFirstOrder(t *testing.T) {
	t.Parallel()
	// With a² = (2/√3) the gap is 1.73 eps times the height for unit slopes.
	p := problem(cylinder(0, 1, 0, 1), &Front{}, layeredBranch(1, 0, 0), layeredBranch(-.5, root, 0), layeredBranch(-.5, -root, 0))
	list := sweep(t, p, .025, .00625, .0015625)
	r := rate(list, 1.5*root)
	require.NotNil(t, r)
	assert.InDelta(t, 1, r.Value, 0.02)
	last := list[2]
	assert.InDelta(t, 1.73, (last.Energy-1.5*root)/last.Eps, 0.01)
	// The curvature is a boundary term: eps ∫K = eps (area of the triangle of slopes).
	assert.InDelta(t, 0.75*math.Sqrt(3)*last.Eps, last.Curvature, 1e-3*last.Eps)
	assert.InEpsilon(t, 1, last.Compression/last.Bending, 1e-9)
}

func TestMollifiedAndWrongProfilesStayAbove(t *testing.T) {
	t.Parallel()
	d := box(-1, 1, 0, 2)
	for _, s := range []Smoothing{
		&Mollifier{},
		&Wall{Profile: func(x float64) (float64, float64) { th := math.Tanh(x); return (1 + th) / 2, (1 - th*th) / 2 }},
	} {
		p := problem(d, s, affine(1, -1, 0), affine(1, 1, 0))
		p.Combine = minimum(2)
		list := sweep(t, p, .05, .025, .0125)
		var eps, energy, err []float64
		for _, e := range list {
			eps, energy, err = append(eps, e.Eps), append(energy, e.Energy), append(err, e.Error)
		}
		limit, estimate := Extrapolate(eps, energy, err)
		assert.Greater(t, limit, 4./3*1.005+5*estimate)
		assert.Less(t, estimate, 1e-9)
	}
}

func TestInfiniteEnergy(t *testing.T) {
	t.Parallel()
	for name, p := range map[string]*Problem{
		"cone in a box":      problem(box(-1, 1, -1, 1, 0, 1), &Front{}, cone(1), layeredBranch(0, 0, .25)),
		"cone in a cylinder": problem(cylinder(0, 1, 0, 1), &Front{}, cone(1), layeredBranch(0, 0, .25)),
		"cone off centre":    problem(box(-.3, 1.1, -.7, 1, 0, 1), &Front{}, layeredBranch(0, 0, .25), cone(1)),
		"vortex":             problem(box(-1, 1, -1, 1), &Front{}, fromPoint(.1, .2), affine(-2, 1, 0)),
	} {
		_, err := p.Integrate(t.Context(), .1)
		var infinite *InfiniteError
		require.ErrorAs(t, err, &infinite, name)
		assert.NotEmpty(t, err.Error())
	}
	// An axis outside of the domain, a branch that loses, and an isolated
	// point in space with |∇²u|² ~ 1/ρ² are finite.
	radial := func(x []float64, j *Jet) {
		r := math.Sqrt(x[0]*x[0] + x[1]*x[1] + x[2]*x[2])
		j.U = r
		for a := range 3 {
			j.P[a] = x[a] / r
			for b := range 3 {
				j.H[a*3+b] = -x[a] * x[b] / (r * r * r)
			}
			j.H[a*3+a] += 1 / r
		}
	}
	for name, p := range map[string]*Problem{
		"axis outside": problem(box(.5, 1, .5, 1, 0, 1), &Front{}, cone(1), layeredBranch(0, 0, .25)),
		"loses":        problem(box(-1, 1, -1, 1), &Front{Min: true}, fromPoint(0, 0), affine(-30, 1, 0)),
		"point":        problem(box(-1, 1, -1, 1, -1, 1), &Front{}, radial, layeredBranch(0, 0, -9)),
	} {
		w, err := newWalk(t.Context(), p, .1, false)
		require.NoError(t, err)
		assert.Nil(t, w.singular(), name)
	}
}

func TestOptimalProfile(t *testing.T) {
	// The layered profile is the logistic function.
	f, err := Optimal(func(s float64) float64 { return s * (1 - s) / 2 }, func(float64) float64 { return 1 })
	require.NoError(t, err)
	for x := -30.; x <= 30; x += 0.37 {
		s, slope := f(x)
		assert.InEpsilon(t, 1/(1+math.Exp(-x/2)), s, 1e-12)
		assert.InEpsilon(t, s/(1+math.Exp(x/2))/2, slope, 1e-4)
	}
	// ds/dτ = s (1 - s²) with s(0) = 1/2: s = 1/√(1 + 3 exp(-2τ)).
	f, err = Optimal(func(s float64) float64 { return s * (1 - s) * (1 + s) }, func(float64) float64 { return 1 })
	require.NoError(t, err)
	for x := -10.; x <= 10; x += 0.31 {
		s, _ := f(x)
		assert.InEpsilon(t, 1/math.Sqrt(1+3*math.Exp(-2*x)), s, 1e-12)
	}
	_, err = Optimal(func(s float64) float64 { return s * (1 - s) * math.Abs(s-.3) }, func(s float64) float64 { return s - .3 })
	assert.ErrorIs(t, err, ErrNoTransition)
}

// Derivatives of the smoothings against differences.
func TestSmoothingsAreConsistent(t *testing.T) {
	fine := newOrders(3, true)
	for _, s := range []Smoothing{&Front{}, &Front{Min: true}, &Mollifier{Width: 2, dim: 3, rules: [2]*orders{fine, fine}}} {
		p := problem(box(-1, 1, -1, 1, .5, 1), s, focal, layeredBranch(.3, .1, -.2), layeredBranch(-.2, .2, -.15))
		at := func(x ...float64) Jet {
			out := NewJet(3)
			s.Smooth(p, x, .1, &out)
			return out
		}
		x := []float64{.31, -.17, .7}
		mid := at(x...)
		for i := range 3 {
			const h = 4e-3
			move := func(d float64) Jet {
				y := append([]float64(nil), x...)
				y[i] += d
				return at(y...)
			}
			a, b, c, d := move(h), move(-h), move(2*h), move(-2*h)
			diff := func(f func(j *Jet) float64) float64 { return (8*(f(&a)-f(&b)) - f(&c) + f(&d)) / (12 * h) }
			assert.InDelta(t, diff(func(j *Jet) float64 { return j.U }), mid.P[i], 1e-5)
			for k := range 3 {
				assert.InDelta(t, diff(func(j *Jet) float64 { return j.P[k] }), mid.H[i*3+k], 1e-3)
			}
		}
	}
}

func TestRateAndExtrapolation(t *testing.T) {
	eps := []float64{.4, .2, .1, .05}
	gap, energy, err := make([]float64, 4), make([]float64, 4), make([]float64, 4)
	for i, e := range eps {
		gap[i], err[i] = 3*math.Pow(e, 1.5), 1e-9
		energy[i] = 2 + e - 3*e*e
	}
	r := FitRate(eps, gap, err)
	assert.InDelta(t, 1.5, r.Value, 1e-12)
	assert.InDelta(t, 0, r.Deviation, 1e-6)
	assert.Nil(t, FitRate(eps, []float64{1, .1, .01, 1e-10}, err), "below rounding")
	assert.Nil(t, FitRate(eps[:1], gap[:1], err[:1]))
	assert.True(t, math.IsNaN(FitRate(eps[:2], gap[:2], err[:2]).Deviation))
	limit, estimate := Extrapolate(eps, energy, err)
	assert.InDelta(t, 2, limit, estimate)
	assert.Less(t, estimate, 1e-6)
	_, estimate = Extrapolate(eps[:1], energy[:1], err[:1])
	assert.True(t, math.IsInf(estimate, 1))
}

func TestInterruptedAndEmpty(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	p := problem(box(-1, 1, 0, 1, 0, 1), &Front{}, layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0))
	_, err := p.Integrate(ctx, .1)
	assert.ErrorIs(t, err, context.Canceled)
	p.Domain = box(-1, 1, 1, 1, 0, 1)
	_, err = p.Integrate(t.Context(), .1)
	assert.ErrorIs(t, err, ErrDomain)
	p.Domain = box(-1, 1, 0, 1, 0, 1)
	p.Domain.Map = func(s, x []float64, jac [][]float64) {
		x[0], x[1], x[2] = s[0], s[1], s[0]/3+s[1]
		copy(jac[0], []float64{1, 0, 1. / 3})
		copy(jac[1], []float64{0, 1, 1})
		clear(jac[2])
	}
	_, err = p.Integrate(t.Context(), .1)
	assert.ErrorIs(t, err, ErrDomain)
	_, _, _, err = p.Sharp(t.Context())
	assert.ErrorIs(t, err, ErrDomain)
	p.Domain = box(-1, 1, 0, 1, 0, 1)
	p.MaxWork = 10_000
	_, err = p.Integrate(t.Context(), .1)
	assert.ErrorIs(t, err, ErrWork)
	p.MaxWork = 0
	p.MaxEvaluations = 1000
	e, err := p.Integrate(t.Context(), .1)
	require.NoError(t, err)
	assert.False(t, e.Met)
}

// An energy that is as good as 0 has no digits to chase; its crease is outside.
func TestNothingInside(t *testing.T) {
	for name, p := range map[string]*Problem{
		"wall":      front(box(.5, 1, 0, 1, 0, 1), layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0)),
		"parabola":  front(box(0, .25, 0, .25, 1, 2), focal, flat),
		"two walls": front(box(.5, 1, -.1, .1, 0, 1), layeredBranch(1, 0, 0), layeredBranch(0, 1, 0), layeredBranch(-1, 0, 0)),
	} {
		for _, eps := range []float64{.1, .02, .002} {
			e, err := p.Integrate(t.Context(), eps)
			require.NoError(t, err, name)
			assert.Less(t, e.Evaluations, 50_000, name)
			assert.True(t, e.Met, name)
		}
	}
}

// Where one direction of fibres does, it is taken; elsewhere it would miss what
// is beyond a tangent.
func TestOneDirectionWhereItDoes(t *testing.T) {
	for name, c := range map[string]struct {
		p    *Problem
		even bool
	}{
		"wall":                {front(box(-1, 1, 0, 1, 0, 1), layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0)), true},
		"oblique":             {front(box(-2, 1, 0, 1, 0, 1), layeredBranch(1, 0, 0), layeredBranch(0, 0, 0)), true},
		"disc":                {front(cylinder(0, 1, 0, 1), layeredBranch(1, 0, 0), layeredBranch(-.5, root, 0), layeredBranch(-.5, -root, 0)), true},
		"cylinder":            {front(cylinder(0, 2.5, .5, 3), focal, flat), true},
		"pyramid":             {closed["pyramid"].p, true},
		"box":                 {closed["paraboloid"].p, false},
		"a quarter":           {closed["a quarter"].p, false},
		"arc":                 {closed["arc"].p, false},
		"leaves through ends": {closed["parabola"].p, false},
	} {
		w, err := newWalk(t.Context(), c.p, .02, false)
		require.NoError(t, err)
		assert.Equal(t, c.even, w.even, name)
	}
	disc := front(cylinder(0, 1, 0, 1), layeredBranch(1, 0, 0), layeredBranch(-.5, root, 0), layeredBranch(-.5, -root, 0))
	e, err := disc.Integrate(t.Context(), .025)
	require.NoError(t, err)
	assert.Less(t, e.Error, 1e-9)
	assert.Less(t, e.Evaluations, 1_500_000)
}
