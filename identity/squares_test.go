package identity_test

import (
	"context"
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

var squaresTheory = theory{coordinates: []string{"x", "y"}, unknowns: []string{"u"}, constants: []string{"eps", "a", "b"}, assume: []string{"eps > 0", "b >= 0"}}

var weights = []string{"eps", "1", "2/3", "a^2", "b", "(1 + eps)", "1/eps"}

func combination(rng *rand.Rand, of []string) string {
	var parts []string
	for _, v := range of {
		if c := rng.IntN(7) - 3; c != 0 {
			parts = append(parts, fmt.Sprintf("(%d) %s", c, v))
		}
	}
	if len(parts) == 0 {
		return of[0]
	}
	return strings.Join(parts, " + ")
}

// decideSmall decides with small budgets.
func decideSmall(t testing.TB, c *identity.Claim) *identity.Record {
	t.Helper()
	opt := identity.DefaultOptions()
	opt.Samples, opt.Starts = 4000, 6
	rec, err := identity.Decide(context.Background(), c, opt)
	require.NoError(t, err)
	return rec
}

// Sums of squares with weights that are not negative are never refuted; most
// are proved.
func TestRandomSumsOfSquares(t *testing.T) {
	rng := rand.New(rand.NewPCG(41, 1))
	second := []string{"u_xx", "u_xy", "u_yy", "u_x", "u_y u_x", "a u_y"}
	proved := 0
	const trials = 40
	for range trials {
		var terms []string
		for range 1 + rng.IntN(3) {
			w := weights[rng.IntN(len(weights))]
			terms = append(terms, fmt.Sprintf("%s*(%s)^2", w, combination(rng, second)))
		}
		states := strings.Join(terms, " + ") + " >= 0"
		rec := decideSmall(t, state(t, squaresTheory, states))
		require.NotEqual(t, identity.Refuted, rec.Verdict, "%s: %+v", states, rec)
		if rec.Verdict == identity.Proved {
			proved++
		}
	}
	t.Logf("%d of %d sums of squares are proved", proved, trials)
	assert.Greater(t, proved, trials/2)
}

// Fewer squares than indeterminates, less a square of a form independent of
// them: negative in some direction. Never proved, and the witness holds.
func TestRandomIndefiniteForms(t *testing.T) {
	rng := rand.New(rand.NewPCG(42, 1))
	second := []string{"u_xx", "u_xy", "u_yy", "u_x", "u_y"}
	refuted := 0
	const trials = 40
	for range trials {
		var terms []string
		for range 1 + rng.IntN(3) { // of four free ones: u is left for the form taken away
			w := weights[rng.IntN(len(weights))]
			terms = append(terms, fmt.Sprintf("%s*(%s)^2", w, combination(rng, second)))
		}
		loss := []string{"1", "1/1000000", "eps", "a^2"}[rng.IntN(4)]
		states := strings.Join(terms, " + ") + fmt.Sprintf(" >= %s*(u + %s)^2", loss, combination(rng, second))
		claim := state(t, squaresTheory, states)
		rec := decideSmall(t, claim)
		require.NotEqual(t, identity.Proved, rec.Verdict, "%s: %+v", states, rec)
		if rec.Verdict == identity.Refuted {
			recheckWitness(t, claim, rec)
			refuted++
		}
	}
	t.Logf("%d of %d indefinite forms are refuted", refuted, trials)
	assert.Greater(t, refuted, trials*3/4)
}

func TestInequalitiesAtTheEdge(t *testing.T) {
	proved, refuted := identity.Proved, identity.Refuted
	for _, c := range []struct {
		states string
		edits  []edit
		not    identity.Verdict
	}{
		{"u_x^2 >= 0", nil, refuted},
		{"eps u_x^2 + u_y^2/eps >= 2 u_x u_y", nil, refuted},
		{"eps u_x^2 + u_y^2/eps >= 201/100*u_x u_y", nil, proved},
		{"a u_x^2 + u_y^2 >= 0", nil, proved},
		{"a u_x^2 + u_y^2 >= 0", []edit{assuming(t, "a >= 0")}, refuted},
		{"b u_x^2 + 2 u_x + 1 >= 0", nil, proved},
		{"b u_x^2 + 2 b u_x + b >= 0", nil, refuted},
		{"b u_x^2 + 2 b u_x + 1 >= 0", []edit{assuming(t, "b <= 1")}, refuted},
		{"1/u_x >= 0", nil, proved},
		{"1/u_x^2 >= 0", nil, refuted},
		{"u_x/(u_x^2 + 1) <= 1/2", nil, refuted},
		{"u_x/(u_x^2 + 1) <= 499999/1000000", nil, proved},
		{"sqrt(u_x^2 + u_y^2) >= u_x", nil, refuted},
		{"sqrt(u_x^2 + u_y^2) <= abs(u_x)", nil, proved},
		{"u_x >= 0 sqrt(u_x)", nil, refuted}, // only where the root is defined
		{"u_x^3 >= -1", nil, proved},
		{"u_x^4 - 2 u_x^2 >= -1", nil, refuted},
		{"u_x^4 - 2 u_x^2 >= -999999/1000000", nil, proved},
		{"u_x^4 u_y^2 + u_x^2 u_y^4 + 1 >= 3 u_x^2 u_y^2", nil, refuted},      // Motzkin
		{"u_x^4 u_y^2 + u_x^2 u_y^4 + 1 >= 301/100*u_x^2 u_y^2", nil, proved}, // below Motzkin
		{"cos(a) <= 1", nil, refuted},
		{"cos(a) <= 9/10", nil, proved},
		{"sin(a) cos(a) <= 1/2", nil, refuted},
		{"sin(a) cos(a) <= 49/100", nil, proved},
		{"tanh(u_x) <= 1", nil, refuted},
		{"exp(u_x) >= 1 + u_x", nil, refuted},
		{"exp(u_x) >= 1 + 101/100*u_x", nil, proved},
		{"u_x >= 0", []edit{assuming(t, "u_x >= 1")}, refuted},
		{"u_x >= 1", []edit{assuming(t, "u_x >= 1")}, refuted},
		{"u_x >= 2", []edit{assuming(t, "u_x >= 1")}, proved},
	} {
		claim, ok := tryState(t, squaresTheory, c.states, c.edits...)
		if !ok {
			continue // strict inequalities are not in the grammar
		}
		rec := decideSmall(t, claim)
		assert.NotEqual(t, c.not, rec.Verdict, "%s: %+v", c.states, rec)
		if rec.Verdict == identity.Refuted {
			recheckWitness(t, claim, rec)
		}
	}
}

// Inequalities between numbers are settled by enclosures.
func TestInequalitiesOfNumbers(t *testing.T) {
	for states, want := range map[string]identity.Verdict{
		"pi <= 22/7":                              identity.Proved,
		"pi >= 22/7":                              identity.Refuted,
		"355/113 >= pi":                           identity.Proved,
		"exp(pi) - pi <= 20":                      identity.Proved,
		"exp(pi) - pi >= 20":                      identity.Refuted,
		"sqrt(2) + sqrt(3) >= 22/7":               identity.Proved,
		"exp(pi sqrt(163)) >= 262537412640768744": identity.Refuted,
		"exp(pi sqrt(163)) <= 262537412640768744": identity.Proved,
		"erf(1) + cos(1) <= tanh(3) + 2/5":        identity.Proved,
		"0 >= 1":                                  identity.Refuted,
		"1 >= 1":                                  identity.Proved,
	} {
		rec := decideSmall(t, state(t, plane, states))
		assert.Equal(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
	rec := decideSmall(t, state(t, plane, "sqrt(5 + 2 sqrt(6)) <= sqrt(2) + sqrt(3)"))
	assert.NotEqual(t, identity.Refuted, rec.Verdict)
}

func TestSpan(t *testing.T) {
	th := layered
	th.fields = map[string]map[string]string{
		"Sigma": layered.fields["Sigma"],
		"A":     {"x": "u_x"}, "B": {"y": "u_x"}, "C": {"x": "eps u_x", "y": "u_x"}, "D": {"x": "u_x", "z": "u_y"},
		"E": {"x": "u_x/(1 + u_x^2)"}, "F": {"x": "(4 cos(pi/5)^2 - 2 cos(pi/5) - 1) u_y"},
		"N": {},
	}
	for states, want := range map[string][]identity.Verdict{
		"span(Sigma(0), Sigma(pi/4)) = Sigma":           {identity.Proved},
		"span(Sigma(pi/4), Sigma(0)) = Sigma":           {identity.Proved},
		"span(Sigma(pi/7), Sigma(pi/3)) = Sigma":        {identity.Proved, identity.Open},
		"span(Sigma(0), Sigma(pi/2)) = Sigma":           {identity.Refuted},
		"span(Sigma(0), Sigma(pi)) = Sigma":             {identity.Refuted},
		"span(Sigma(0)) = Sigma(pi/2)":                  {identity.Proved},
		"span(Sigma(0)) = Sigma(pi/3)":                  {identity.Refuted},
		"span(Sigma) = Sigma(0)":                        {identity.Refuted},
		"span(Sigma, Sigma(theta + pi/4)) = Sigma(0)":   {identity.Proved},
		"span(Sigma, Sigma(0), Sigma(pi/4)) = Sigma(1)": {identity.Proved, identity.Open},
		"span(A, B) = C":                                {identity.Proved},
		"span(A) = C":                                   {identity.Refuted},
		"span(A, B) = D":                                {identity.Refuted},
		"span(A, C) = B":                                {identity.Proved},
		"span(A) = E":                                   {identity.Open, identity.Refuted},
		"span(A) = F":                                   {identity.Open, identity.Proved},
		"span(A) = N":                                   {identity.Proved},
		"span(N) = A":                                   {identity.Refuted},
		"span(N) = N":                                   {identity.Proved},
	} {
		claim, ok := tryState(t, th, states)
		require.True(t, ok, states)
		rec, err := decided(t, claim)
		require.NoError(t, err, states)
		assert.Contains(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
}
