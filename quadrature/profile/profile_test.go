package profile_test

import (
	"context"
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
	"creaseproof/quadrature/profile"
)

// compiled is the profile cost of a planar model with the Laplacian as its
// bending.
func compiled(t *testing.T, residual string) *entropy.ProfileProgram {
	set := &entropy.Setting{Coordinates: []string{"x", "y"}, Unknowns: []string{"u"}, Constants: []string{"eps"},
		Lets: map[string]formula.Node{"R": nil, "L": nil}}
	scope, err := set.Scope(false)
	require.NoError(t, err)
	parse := func(s string) formula.Node {
		n, err := scope.ParseExpr(source.Text{S: s})
		require.NoError(t, err)
		return n
	}
	set.Lets["R"], set.Lets["L"] = parse(residual), parse("u_xx + u_yy")
	set.Model = entropy.Model{Residual: parse("R"), Bending: parse("L"), Energy: parse("R^2/(2 eps) + eps L^2/2")}
	p, err := set.NewProfile(t.Context())
	require.NoError(t, err)
	pp, err := p.Compile(nil)
	require.NoError(t, err)
	return pp
}

// The same residual written so that it is no polynomial has the same cost.
func TestSameCost(t *testing.T) {
	poly := compiled(t, "(1 - u_x^2 - u_y^2)/2")
	other := compiled(t, "(1 - exp(log(u_x^2 + u_y^2)))/2 + sqrt(exp(u_x)) - exp(u_x/2) + abs(u_x)^2/4 - u_x^2/4 + 0*tanh(u_x)")
	for a := 0.1; a < 3; a += 0.37 {
		plus, minus := []float64{math.Cos(a), math.Sin(a)}, []float64{math.Cos(2 + a), math.Sin(2 + a)}
		dx, dy := plus[0]-minus[0], plus[1]-minus[1]
		size := math.Hypot(dx, dy)
		nu := []float64{dx / size, dy / size}
		one, _, err := profile.Cost(t.Context(), poly, []float64{0, 0}, plus, minus, nu)
		require.NoError(t, err)
		two, estimate, err := profile.Cost(t.Context(), other, []float64{0, 0}, plus, minus, nu)
		require.NoError(t, err)
		assert.InEpsilon(t, size*size*size/12, one, 1e-13)
		assert.LessOrEqual(t, math.Abs(one-two), estimate+1e-13*one)
	}
}

// R = 1 - |p|: ∫_{-1}^{1} (1 - |p|) dp = 1 across the origin.
func TestKink(t *testing.T) {
	pp := compiled(t, "1 - norm(u_x, u_y)")
	require.False(t, pp.Polynomial())
	cost, estimate, err := profile.Cost(t.Context(), pp, []float64{0, 0}, []float64{1, 0}, []float64{-1, 0}, []float64{1, 0})
	require.NoError(t, err)
	assert.LessOrEqual(t, math.Abs(cost-1), estimate+1e-15)
	assert.Less(t, estimate, 1e-12)
	d := profile.Density(t.Context(), pp)
	assert.InEpsilon(t, 1, d([]float64{0, 0}, []float64{1, 0}, []float64{-1, 0}, []float64{1, 0}), 1e-12)
}

// An integral that diverges has no value, and neither has a trace that is none.
func TestNotFinite(t *testing.T) {
	pp := compiled(t, "(4 - u_x^2 - u_y^2)/(1 - u_x^2)")
	d := profile.Density(t.Context(), pp)
	assert.True(t, math.IsNaN(d([]float64{0, 0}, []float64{2, 0}, []float64{-2, 0}, []float64{1, 0})))
	pp = compiled(t, "1 - u_x^2 - u_y^2")
	nan := math.NaN()
	_, _, err := profile.Cost(t.Context(), pp, []float64{0, 0}, []float64{nan, 0}, []float64{-1, 0}, []float64{1, 0})
	assert.Error(t, err)
}

func TestCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	_, _, err := profile.Cost(ctx, compiled(t, "1 - norm(u_x, u_y)"), []float64{0, 0}, []float64{1, 0}, []float64{-1, 0}, []float64{1, 0})
	assert.ErrorIs(t, err, context.Canceled)
}
