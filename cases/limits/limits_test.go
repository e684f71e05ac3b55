package limits_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"creaseproof/cases"
	"creaseproof/cases/limits"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

const header = `[space]
coordinates = ["x", "y"]
unknowns = ["u"]
constants = ["eps"]
[let]
R = "(1 - u_x^2 - u_y^2)/2"
[model]
residual = "R"
bending = "u_xx + u_yy"
energy = "%s"
[[limit]]
name = "wall"
`

const usual = "R^2/(2 eps) + eps (u_xx + u_yy)^2/2"

// wall is the transition between x and -x over a unit length of the wall.
const wall = `approximation = "profile"
plus = "x"
minus = "-x"
box = { x = ["-1", "1"], y = ["0", "1"] }
`

func evaluate(t *testing.T, energy, text string) (limits.Value, error) {
	t.Helper()
	if !strings.Contains(text, "eps =") {
		text += `eps = ["1/20", "1/40", "1/80"]` + "\n"
	}
	c, err := cases.Parse("wall.toml", append(fmt.Appendf(nil, header, energy), text...))
	require.NoError(t, err)
	list, err := limits.Evaluate(t.Context(), c, &c.File.Limits[0], 1)
	if err != nil {
		return limits.Value{}, c.Place(err, c.File.Limits[0].Pos)
	}
	require.Len(t, list, 1)
	return list[0], nil
}

// The cost of a transition under a R²/eps + b eps L² is 2 sqrt(ab) ∫|R||L|, from
// completing the square, and both parts of it are equal: here ∫|R||L| is 2/3.
func TestOptimalProfileOfOtherWeights(t *testing.T) {
	for _, w := range []struct{ a, b float64 }{{.5, .5}, {1, .125}, {.25, 1}, {3, 3}} {
		v, err := evaluate(t, fmt.Sprintf("%g R^2/eps + %g eps (u_xx + u_yy)^2", w.a, w.b), wall+`energy = "2/3"`+"\n")
		require.NoError(t, err)
		want := 2 * math.Sqrt(w.a*w.b) * 2 / 3
		assert.InEpsilon(t, want, v.Energy[2], 1e-9)
		assert.InEpsilon(t, want/2, v.Compression[2], 1e-9, "%v", w)
		assert.InEpsilon(t, want/2, v.Bending[2], 1e-9, "%v", w)
		assert.InDelta(t, 1, *v.Equipartition, 1e-9)
	}
	// A front has the width of the usual weights.
	v, err := evaluate(t, "R^2/(4 eps) + eps (u_xx^2 + 2 u_xy^2 + u_yy^2)", `approximation = "front"
branches = ["x", "-x"]
combine = "max"
box = { x = ["-1", "1"], y = ["0", "1"] }
energy = "sqrt(4/9)"
`)
	require.NoError(t, err)
	assert.InEpsilon(t, 4, 1 / *v.Equipartition, 1e-9)
	assert.InEpsilon(t, v.Energy[2], v.Compression[2]+v.Bending[2], 1e-12)
	assert.Equal(t, limits.Above, v.Outcome)
}

func TestGivenProfiles(t *testing.T) {
	for _, p := range []string{
		"(1 - tanh(s/2))/2", "(1 + 0.9 tanh(s/2))/2", "(1 + 0.999 tanh(s/2))/2", "1/2 + s/2", "s", "0", "1/(1 + s^2)",
		"(1 + s/abs(s))/2", "(1 + tanh(s/2))/2 + exp(-s^2)/(s - 1)", "(1 + (s - 3)/abs(s - 3))/4 + (1 + tanh(s))/4", "sqrt(s)/sqrt(s)", "(1 + tanh(1/s))/2",
	} {
		_, err := evaluate(t, usual, wall+"profile = '"+p+"'\n")
		require.Error(t, err, p)
		assert.Contains(t, err.Error(), "wall.toml:17:", p)
		assert.Contains(t, err.Error(), "the profile", p)
	}
	// R = 2 S (1 - S) and L = 2 S'/eps, so the energy is ∫ 2 S² (1 - S)² + 2 S'² ds.
	for p, want := range map[string]float64{
		"(1 + tanh(s/2))/2":                     2. / 3,
		"(1 + tanh(s/2 - 3))/2":                 2. / 3, // shifted
		"(1 + tanh(s))/2":                       1./6 + 2./3,
		"(1 + s/sqrt(1 + s^2))/2":               math.Pi / 4, // 1 - (2S - 1)² = 1/(1 + s²), S' = (1 + s²)^(-3/2)/2: π/16 + 3π/16
		"1/2 + (abs(s + 1) - abs(s - 1))/4":     1 + 2./15,   // ∫ (1 - s²)²/8 + 1/2 over |s| < 1
		"(1 + tanh(s/2))/2 + exp(-s^2)/1000000": math.Nextafter(2./3, 1),
	} {
		v, err := evaluate(t, usual, wall+"energy = '2/3'\nprofile = '"+p+"'\n")
		if assert.NoError(t, err, p) {
			assert.InEpsilon(t, want, v.Energy[2], 2e-6, p)
			assert.Equal(t, want > 0.667, v.Outcome == limits.Above, p)
		}
	}
}

func TestRegionsThatFold(t *testing.T) {
	const front = "approximation = 'front'\nbranches = ['x', '-x']\ncombine = 'min'\n"
	for _, r := range []string{
		`map = ["s^2 - 1/2", "t"], over = { s = ["-1", "1"], t = ["0", "1"] }`,
		`map = ["s + t - 1/2", "2 s + 2 t"], over = { s = ["-1", "1"], t = ["0", "1"] }`,
		`map = ["s", "0"], over = { s = ["-1", "1"], t = ["0", "1"] }`,
	} {
		_, err := evaluate(t, usual, front+"region = { "+r+" }\n")
		if assert.Error(t, err, r) {
			assert.Contains(t, err.Error(), "wall.toml:16:", r)
			assert.Regexp(t, "folds|no volume", err.Error(), r)
		}
	}
	for _, r := range []string{
		`map = ["-s", "t"], over = { s = ["-1", "1"], t = ["0", "1"] }`,
		`map = ["r cos(a)", "r sin(a)"], over = { r = ["0", "1/2"], a = ["0", "2 pi"] }`,
		`map = ["s^3", "t"], over = { s = ["-1", "1"], t = ["0", "1"] }`,
	} {
		v, err := evaluate(t, usual, front+"eps = ['1/40', '1/80', '1/160']\nenergy = '2/3'\nregion = { "+r+" }\n")
		if assert.NoError(t, err, r) {
			assert.Equal(t, limits.Sharp, v.Outcome, r)
		}
	}
}

// A limit is not told from eps that are not small, nor from one energy.
func TestNotSettled(t *testing.T) {
	v, err := evaluate(t, usual, wall+"eps = ['1000000', '100', '1']\n")
	require.NoError(t, err)
	assert.Equal(t, limits.Undecided, v.Outcome)
	assert.Greater(t, *v.LimitError, math.Abs(*v.Limit-2./3), "the estimate covers the error")

	v, err = evaluate(t, usual, wall+"eps = ['1/10']\nenergy = '1/2'\n")
	require.NoError(t, err)
	assert.Equal(t, limits.Undecided, v.Outcome)
	assert.Nil(t, v.Limit)
	assert.NotContains(t, v.Reason, "Inf")

	v, err = evaluate(t, usual, wall+"energy = '0'\nexpect = 'above'\n")
	require.NoError(t, err)
	assert.True(t, v.Met)
	assert.NotContains(t, v.Reason, "%", "nothing is a share of zero")
}

func judged(target float64, eps, energy []float64) limits.Value {
	none := 0.0
	v := limits.Value{Eps: eps, Energy: energy, Compression: energy, Bending: energy, Error: make([]float64, len(eps)),
		Target: &target, TargetError: &none, Expected: limits.Sharp, Outcome: limits.Undecided}
	v.Judge(nil)
	return v
}

func TestGapThatGrows(t *testing.T) {
	eps := []float64{.1, .05, .025, .0125}
	v := judged(1, eps, []float64{1.00001, 1.00002, 1.00004, 1.00008})
	assert.Equal(t, limits.Undecided, v.Outcome, "like 1/eps")
	assert.Contains(t, v.Reason, "grows")
	v = judged(1, eps, []float64{1.01, 1.0001, 0.9997, 0.9998})
	assert.Equal(t, limits.Sharp, v.Outcome, "the gap changes its sign")
	v = judged(1, eps, []float64{1.0001, 1.0004, 1.00042, 1.000421})
	assert.Equal(t, limits.Sharp, v.Outcome, "to a limit within what is allowed")
}

func TestExponentialGap(t *testing.T) {
	eps := []float64{.2, .1, .05}
	var fast, second []float64
	for _, e := range eps {
		fast, second = append(fast, 1+math.Exp(-1/e)), append(second, 1+e*e/100)
	}
	v := judged(1, eps, fast)
	assert.True(t, v.Exponential())
	assert.Nil(t, v.Rate)
	v = judged(1, eps, second)
	assert.False(t, v.Exponential())
	require.NotNil(t, v.Rate)
	assert.InDelta(t, 2, *v.Rate, 1e-9)
}
