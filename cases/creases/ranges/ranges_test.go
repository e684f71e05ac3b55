package ranges_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/creases/ranges"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/program"
	"creaseproof/entropy/source"
)

// The enclosures on boxes contain the compiled values and derivatives at
// points of the boxes.
func TestContainment(t *testing.T) {
	set := &entropy.Setting{Coordinates: []string{"x", "y", "z"}, Unknowns: []string{"u"}, Lets: map[string]formula.Node{}}
	scope, err := set.Scope(false)
	require.NoError(t, err)
	rng := rand.New(rand.NewPCG(1, 2))
	for _, text := range []string{
		"-(x^2 + y^2)/(2 z)", "sqrt((x - 1)^2 + y^2) - sqrt((x + 1)^2 + y^2) - 1", "norm(x, y - z/3) + x^3 y - 7/10", "exp(-x^2) sin(3 y) + log(4 + z)",
		"x^2 + y^2 + z^2 - 1", "cosh(x) + tanh(y) sinh(z)", "erf(x) cos(y) + tan(z/3)", "(4 + x)^(3/2)/(5 + y)^2", "abs(x - y) z", "pi x - x",
	} {
		node, err := scope.ParseExpr(source.Text{File: "t", Line: 1, Col: 1, S: text})
		require.NoError(t, err, text)
		in, tape := ranges.New(set)
		r, err := in.Scalar(node)
		require.NoError(t, err, text)
		e := tape.Evaluator()
		var inputs []entropy.Input
		for i := range 3 {
			inputs = append(inputs, entropy.Input{Kind: entropy.CoordinateInput, Place: i})
		}
		exact, num := set.NewNumeric(nil, inputs...)
		v, err := exact.Scalar(node)
		require.NoError(t, err, text)
		outs := []program.Ref{v}
		for i := range 3 {
			d, err := num.Total(v, i)
			require.NoError(t, err)
			outs = append(outs, d)
		}
		p, err := num.Compile(outs...)
		require.NoError(t, err)
		ws := p.NewWorkspace()
		box, g := make([]interval.Interval, 3), make([]interval.Interval, 3)
		x, out := make([]float64, 3), make([]float64, 4)
		for range 300 {
			width := math.Exp2(-10 * rng.Float64())
			var lo [3]float64
			for i := range box {
				lo[i] = 4*rng.Float64() - 2
				box[i] = interval.Point(lo[i]).ConvexHull(interval.Point(lo[i] + width))
			}
			e.At(box)
			e.Gradient(r, g)
			for range 10 {
				for i := range x {
					x[i] = lo[i] + width*rng.Float64()
				}
				p.Eval(ws, x, out)
				slack := 1e-12 * (1 + math.Abs(out[0]))
				i := e.Value(r)
				assert.True(t, i.Inf()-slack <= out[0] && out[0] <= i.Sup()+slack, "%s at %v: %v not in %v", text, x, out[0], i)
				for k := range g {
					d := out[k+1]
					slack := 1e-12 * (1 + math.Abs(d))
					assert.True(t, g[k].Inf()-slack <= d && d <= g[k].Sup()+slack, "%s derivative %d at %v: %v not in %v", text, k, x, d, g[k])
				}
				if t.Failed() {
					t.FailNow()
				}
			}
		}
	}
}

// Across a pole, or where a formula is not defined on all of a box, the sign of
// a derivative says nothing.
func TestNotContinuous(t *testing.T) {
	set := &entropy.Setting{Coordinates: []string{"x", "y"}, Unknowns: []string{"u"}, Lets: map[string]formula.Node{}}
	scope, err := set.Scope(false)
	require.NoError(t, err)
	side := func(lo, hi float64) interval.Interval { return interval.Point(lo).ConvexHull(interval.Point(hi)) }
	for _, test := range []struct {
		text           string
		lo, hi         float64 // of x
		continuous     bool
		certain, other bool // signs of the derivatives
	}{
		{"sqrt(x) + y", -1, 2, false, false, false},
		{"sqrt(x) + y", 0, 2, true, true, true},
		{"log(x) + y", -1, 2, false, false, false},
		{"log(x) + y", 0, 2, false, false, false},
		{"log(x) + y", 1, 2, true, true, true},
		{"tan(x) + y", 1, 2, false, false, false},
		{"tan(x) + y", -1, 1, true, true, true},
		{"x^(-1) + y", -1, 2, false, false, false},
		{"x^(-1) + y", 1, 2, true, true, true},
		{"1/x + y", -1, 2, false, false, false},
		{"1/x + y", 1, 2, true, true, true},
		{"x^(3/2) + y", -1, 2, false, false, false},
		{"x^(3/2) + y", 1, 2, true, true, true},
		{"x^(-1/2) + y", 0, 2, false, false, false},
		{"abs(x) + y", -1, 2, true, false, true},
		{"sqrt(x^2 + 1) + y", -1, 2, true, false, true},
		{"exp(sqrt(x)) + y", -1, 2, false, false, false},
		{"norm(x, y) - 2*y", -1, 2, true, false, true},
	} {
		node, err := scope.ParseExpr(source.Text{File: "t", Line: 1, Col: 1, S: test.text})
		require.NoError(t, err, test.text)
		in, tape := ranges.New(set)
		r, err := in.Scalar(node)
		require.NoError(t, err, test.text)
		e := tape.Evaluator()
		e.At([]interval.Interval{side(test.lo, test.hi), side(-1, 1)})
		g := make([]interval.Interval, 2)
		e.Gradient(r, g)
		certain := func(i interval.Interval) bool { return i.Inf() > 0 || i.Sup() < 0 }
		assert.Equal(t, test.continuous, e.Continuous(r), "%s on [%g, %g]", test.text, test.lo, test.hi)
		assert.Equal(t, test.certain, certain(g[0]), "%s on [%g, %g]: %v", test.text, test.lo, test.hi, g)
		assert.Equal(t, test.other, certain(g[1]), "%s on [%g, %g]: %v", test.text, test.lo, test.hi, g)
	}
}

func TestRefusals(t *testing.T) {
	set := &entropy.Setting{Coordinates: []string{"x", "y"}, Unknowns: []string{"u"}, Lets: map[string]formula.Node{}}
	scope, err := set.Scope(false)
	require.NoError(t, err)
	for _, text := range []string{"u_x", "euler(u)", "d_x(x^2)"} {
		node, err := scope.ParseExpr(source.Text{File: "t", Line: 1, Col: 1, S: text})
		if err != nil {
			continue
		}
		in, _ := ranges.New(set)
		_, err = in.Scalar(node)
		assert.Error(t, err, text)
	}
}
