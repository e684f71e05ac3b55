package entropy_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// assign gives a value to an input, in the exact ring and as a float.
func assign(t *testing.T, ex *entropy.Exact, at jet.Point, in entropy.Input, x algebra.Rat) float64 {
	var v algebra.Var
	var err error
	switch in.Kind {
	case entropy.CoordinateInput:
		v = ex.Ring.CoordinateVar(in.Place)
	case entropy.ConstantInput:
		v = ex.Ring.ConstantVar(in.Name)
	case entropy.JetInput:
		v, err = ex.Ring.JetVar(in.Place, in.Index, in.Side)
	}
	require.NoError(t, err)
	at[v] = x
	return x.Float64()
}

// Compiled formulas, total derivatives and operators included, against
// enclosures at random rational points.
func TestNumericAgainstExact(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for _, text := range []string{
		"div(Sigma)", "div(Sigma(pi/6))", "e", "d_x(R)", "R_xy", "L_z", "u_xieta", "u_{xi xi}^2 - u_etaeta",
		"Sigma_xi u_eta - Sigma(1/3)_z", "norm(u_x, u_y, 1)^3", "norm(Sigma)", "norm(grad(R))", "div(grad(R))",
		"sin(u_x) cos(u_y) tan(u_z/9)", "exp(u_x/5) sinh(u_y/7) - cosh(u_z/9) tanh(u_x)",
		"log(1 + u_x^2) sqrt(1 + u_y^2) + erf(u_z)", "abs(u_x - u_y)^(3/2)", "(1 + u_x^2)^(-2/3) + (2 + u_y^4)^(1/3)",
		"d_x(exp(x u_x/20) + erf(u_y)) + d_{xy}(sin(u)/(2 + x^2))", "pi x^3 - 1/7 + eps u^2", "d_z(abs(u_x))",
	} {
		set := layered()
		n := parse(set, text)
		exact, ex, err := set.NewExact(t.Context())
		require.NoError(t, err)
		want, err := exact.Scalar(n)
		require.NoError(t, err, text)
		in, num := set.NewNumeric(nil)
		x, err := in.Scalar(n)
		require.NoError(t, err, text)
		sized, err := num.Sized().Scalar(n)
		require.NoError(t, err, text)
		p, err := num.Compile(x, sized.Value, sized.Size)
		require.NoError(t, err, text)
		out := make([]float64, 3)
		for range 20 {
			at := jet.Point{}
			var values []float64
			for _, in := range num.Inputs() {
				values = append(values, assign(t, ex, at, in, smallRat(r)))
			}
			p.Eval(p.NewWorkspace(), values, out)
			y := ex.Ring.Enclose(want, at, 120)
			if !y.IsBounded() { // a pole
				continue
			}
			mid, _ := y.Lo().Float64()
			assert.InDelta(t, mid, out[0], 1e-12*math.Max(1, math.Max(math.Abs(mid), out[2])), text)
			assert.Equal(t, out[0], out[1], text)
			assert.GreaterOrEqual(t, out[2], math.Abs(out[0])*(1-1e-14), text)
		}
	}
}

// The size of a value is the sum of the absolute values of its terms.
func TestSized(t *testing.T) {
	set := layered()
	for text, want := range map[string]float64{
		"R":                      10 + (9+16)/2.0,
		"u_x - u_y":              7,
		"(u_x + u_y)^2":          49,
		"(u_x - u_y)^2":          1 + 2*1*(7-1),
		"(u_x - u_y) (u_x + 1)":  7*4 + 1*4 - 4,
		"(u_x - u_y)/(u_x - 1)":  (7 + 0.5*(4-2)) / 2,
		"exp(u_x - 3) - u_y":     5,
		"1/(u_x - u_y) + 0*u_xx": 7,
	} {
		_, num := set.NewNumeric(nil,
			entropy.Input{Kind: entropy.JetInput, Index: jet.Index{1}},
			entropy.Input{Kind: entropy.JetInput, Index: jet.Index{0, 1}},
			entropy.Input{Kind: entropy.JetInput, Index: jet.Index{0, 0, 1}})
		x, err := num.Sized().Scalar(parse(set, text))
		require.NoError(t, err)
		p, err := num.Compile(x.Size)
		require.NoError(t, err)
		out := make([]float64, 1)
		p.Eval(p.NewWorkspace(), append([]float64{3, 4, 10}, make([]float64, len(num.Inputs()))...), out)
		assert.InEpsilon(t, want, out[0], 1e-14, text)
	}
}

func TestNumericRefuses(t *testing.T) {
	set := layered()
	for text, want := range map[string]string{
		"euler(u_x^2)":           "Euler operator",
		"sup(theta, Sigma_z)":    "supremum",
		"1/(u_x - u_x)":          "vanishes identically",
		"d_x(u_xxxxxxxx)":        "order 9",
		"u_x + d_xxxxx(u_xxxxx)": "order",
	} {
		in, _ := set.NewNumeric(nil)
		_, err := in.Scalar(parse(set, text))
		assert.ErrorContains(t, err, want, text)
	}
}

// Suprema over the angle: the k of each, and what has none.
func TestSuprema(t *testing.T) {
	set := layered()
	for text, want := range map[string][]int{
		"sup(theta, Sigma_z)":                                     {2},
		"sup(theta, u_xi) + sup(theta, u_x)":                      {1, 0},
		"sup(theta, u_xi^3 - 3 u_xi u_eta^2)/sup(theta, Sigma_x)": {3, 2},
		"u_x": nil,
	} {
		got, err := set.Suprema(t.Context(), parse(set, text), false)
		require.NoError(t, err, text)
		assert.Equal(t, want, got, text)
		if want == nil {
			continue
		}
		// The compiled supremum does not depend on the angle of the inputs.
		in, num := set.NewNumeric(nil)
		num.Suprema = got
		num.Declare(entropy.Input{Kind: entropy.ConstantInput, Name: "theta"},
			entropy.Input{Kind: entropy.CosineInput, Name: "theta"}, entropy.Input{Kind: entropy.SineInput, Name: "theta"})
		x, err := in.Scalar(parse(set, text))
		require.NoError(t, err)
		p, err := num.Compile(x)
		require.NoError(t, err)
		values := make([]float64, len(num.Inputs()))
		out := make([]float64, 2)
		for i, angle := range []float64{0, 1.1} { // any angle will do
			for k := range values {
				values[k] = 0.3 + float64(k*k%7)
			}
			values[0], values[1], values[2] = angle, math.Cos(angle), math.Sin(angle)
			p.Eval(p.NewWorkspace(), values, out[i:i+1])
		}
		assert.InEpsilon(t, out[0], out[1], 1e-12, text)
	}
	_, err := set.Suprema(t.Context(), parse(set, "sup(theta, u_xi^3)"), false)
	assert.ErrorIs(t, err, jet.ErrOutside)
	_, err = set.Suprema(t.Context(), parse(set, "sup(theta, u_xi) u_eta"), false)
	assert.ErrorContains(t, err, "theta has no value")
}
