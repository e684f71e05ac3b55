package gram

import (
	"context"
	"testing"

	"creaseproof/entropy/algebra"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// The layered Young bound at frame angle 0, times 2 eps, with the curvature
// term left open: 2 eps (e - div Sigma) + x 2 eps² K. The only x is -2.
func TestFitFindsTheCurvatureTerm(t *testing.T) {
	names := map[string]algebra.Var{}
	p := &Problem{Target: parse(t, names, "r^2 + e^2 (a + c)^2 - 2 e r (a - c)"), Positive: []Constraint{{Poly: parse(t, names, "e"), Strict: true}}}
	k := parse(t, names, "2 e^2 (a c - b^2)")
	effort, _ := Efforts("normal")
	x, ok := Fit(context.Background(), p, []algebra.Poly{k}, nil, effort)
	require.True(t, ok)
	assert.InDelta(t, -2, x[0], 1e-3)
	for _, cost := range []float64{1, -1} {
		y, ok := Fit(context.Background(), p, []algebra.Poly{k}, []float64{cost}, effort)
		require.True(t, ok)
		assert.InDelta(t, -2, y[0], 1e-2)
	}
}

func TestFitFindsTheEndsOfAnInterval(t *testing.T) {
	names := map[string]algebra.Var{}
	p := &Problem{Target: parse(t, names, "x^2 + y^2")}
	f := parse(t, names, "x y")
	effort, _ := Efforts("normal")
	for _, cost := range []float64{1, -1} {
		x, ok := Fit(context.Background(), p, []algebra.Poly{f}, []float64{cost}, effort)
		require.True(t, ok)
		assert.InDelta(t, -2*cost, x[0], 1e-5)
	}
	_, ok := Fit(context.Background(), &Problem{Target: parse(t, names, "x^2 - y^2")}, []algebra.Poly{f}, nil, effort)
	assert.False(t, ok, "x^2 - y^2 + t x y is never a sum of squares")
}
