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
