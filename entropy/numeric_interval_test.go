package entropy_test

import (
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/interval"
	"creaseproof/entropy/jet"
)

// around is a narrow interval about a rational number.
func around(t *testing.T, num, den int64) interval.Interval {
	t.Helper()
	v := interval.Point(float64(num)).Div(interval.Point(float64(den)))
	require.False(t, v.IsEmpty())
	return v
}

// Compiled formulas evaluated over intervals contain the values that exact
// arithmetic and multiprecision enclosures give at rational points, constants
// such as 1/7, pi and cos(pi/3) included.
func TestIntervalsAgainstExact(t *testing.T) {
	r := rand.New(rand.NewPCG(19, 20))
	narrow, seen := 0, 0
	for _, text := range []string{
		"div(Sigma)", "div(Sigma(pi/6))", "e", "R_xy", "Sigma_xi u_eta - Sigma(1/3)_z", "norm(u_x, u_y, 1)^3", "norm(grad(R))",
		"sin(u_x) cos(u_y) tan(u_z/9)", "exp(u_x/5) sinh(u_y/7) - cosh(u_z/9) tanh(u_x)",
		"log(1 + u_x^2) sqrt(1 + u_y^2) + erf(u_z)", "abs(u_x - u_y)^(3/2)", "(1 + u_x^2)^(-2/3) + (2 + u_y^4)^(1/3)",
		"d_x(exp(x u_x/20) + erf(u_y)) + d_{xy}(sin(u)/(2 + x^2))", "pi x^3 - 1/7 + eps u^2", "d_z(abs(u_x))",
		"1/10 + 2/10 - 3/10", "0.1 + 0.2 - 0.3 + 0 u_x", "0.1 (1 + u_x) - 0.1 - 0.1 u_x", "d_x((1 + u_x^2)^(1/3))", "sin(pi/5) u_x",
	} {
		set := layered()
		n := parse(set, text)
		exact, ex, err := set.NewExact(t.Context())
		require.NoError(t, err)
		want, err := exact.Scalar(n)
		require.NoError(t, err, text)
		in, num := set.NewNumeric(nil)
		num.Builder.Exact = true
		x, err := in.Scalar(n)
		require.NoError(t, err, text)
		p, err := num.Compile(x)
		require.NoError(t, err, text)
		ws, err := p.NewIntervalWorkspace()
		require.NoError(t, err, text)
		out := make([]interval.Interval, 1)
		for range 30 {
			at := jet.Point{}
			var box []interval.Interval
			for _, in := range num.Inputs() {
				q := smallRat(r)
				assign(t, ex, at, in, q)
				v := q.Big()
				box = append(box, around(t, v.Num().Int64(), v.Denom().Int64()))
			}
			p.EvalInterval(ws, box, out)
			y := ex.Ring.Enclose(want, at, 160)
			if !y.IsBounded() || out[0].IsEmpty() {
				continue
			}
			seen++
			// The value is in y; an interval that misses it misses y.
			lo, hi := new(big.Float).SetFloat64(out[0].Inf()), new(big.Float).SetFloat64(out[0].Sup())
			assert.True(t, lo.Cmp(y.Hi()) <= 0 && y.Lo().Cmp(hi) <= 0, "%s: %v misses %v", text, out[0], y)
			if out[0].Wid() <= 1e-12*(1+out[0].Mag()) {
				narrow++
			}
		}
	}
	assert.Greater(t, seen, 400)
	assert.Greater(t, narrow, seen*3/4)
}
