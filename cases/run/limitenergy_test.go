package run

import (
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"

	"creaseproof/cases"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/limits"
)

const planarEikonal = `[space]
coordinates = ["x", "y"]
unknowns = ["u"]
constants = ["eps"]
[let]
R = "(1 - u_x^2 - u_y^2)/2"
L = "u_xx + u_yy"
[model]
residual = "R"
bending = "L"
energy = "R^2/(2 eps) + eps L^2/2"
`

// both are the limit of a front and the surface of the same branches.
func both(name, shape, eps string) string {
	return fmt.Sprintf("[[surface]]\nname = \"%s\"\n%s\n[[limit]]\nname = \"%s\"\napproximation = \"front\"\n%s\neps = [%s]\n", name, shape, name, shape, eps)
}

// compare requires that each target is the energy of the surface of the same name.
func compare(t *testing.T, text string, tol float64) []limits.Value {
	t.Helper()
	list := []*cases.Case{parsed(t, text)}
	surfaces := Energy(t.Context(), list, EnergyOptions{})
	fronts := Limit(t.Context(), list, LimitOptions{})
	require.Len(t, fronts.Results, len(surfaces.Results))
	var out []limits.Value
	for i, r := range fronts.Results {
		require.NoError(t, r.Err)
		require.NoError(t, surfaces.Results[i].Err)
		v, s := r.Values[0], surfaces.Results[i].Values[0]
		require.NotNil(t, v.Target, v.Reason)
		require.NotNil(t, s.Energy, s.Reason)
		assert.InEpsilon(t, *s.Energy, *v.Target, tol, r.Limit.Name)
		out = append(out, v)
	}
	return out
}

// Points with |P - F1| - |P - F2| or |P - F1| + |P - F2| constant, for foci
// outside of the domain, and a vertex of each inside.
func TestRidgesOfFoci(t *testing.T) {
	if testing.Short() {
		t.Skip("integrates for a while")
	}
	const one, other = "sqrt((x + 1)^2 + y^2)", "sqrt((x - 1)^2 + y^2)"
	var text strings.Builder
	text.WriteString(planarEikonal)
	for _, c := range [][3]string{
		{"hyperbola", "'" + one + "', '" + other + " + 1/2'", "x = ['-1/2', '1/2'], y = ['-1', '1']"},
		{"ellipse", "'" + one + "', '3 - " + other + "'", "x = ['-1/2', '1/2'], y = ['1/2', '3/2']"},
		{"ellipse to its end", "'" + one + "', '3 - " + other + "'", "x = ['-1', '2'], y = ['1/4', '5/4']"},
		{"both", "'" + one + "', '3 - " + other + "', '" + other + " + 1/2'", "x = ['-3/4', '3/4'], y = ['1/4', '3/2']"},
	} {
		text.WriteString(both(c[0], "branches = ["+c[1]+"]\ncombine = 'min'\nbox = { "+c[2]+" }", "'1/160', '1/640', '1/2560'"))
	}
	for _, v := range compare(t, text.String(), 1e-10) {
		assert.Equal(t, limits.Sharp, v.Outcome, v.Approximation)
		require.NotNil(t, v.Rate, v.Approximation)
		assert.InDelta(t, 1, *v.Rate, .02, v.Approximation)
		assert.InEpsilon(t, *v.Target, *v.Limit, 1e-6, v.Approximation)
	}
}

// The jump energy of a limit is found over fibres, that of a surface by polygons.
func TestTargetsAreEnergies(t *testing.T) {
	if testing.Short() {
		t.Skip("integrates for a while")
	}
	const random = 4
	rng := rand.New(rand.NewPCG(5, 11))
	of := func(n int) int { return rng.IntN(2*n+1) - n }
	var text strings.Builder
	text.WriteString(layeredCase)
	for k := range random {
		var list []string
		op, box := []string{"max", "min"}[k%2], "x = ['-1', '1'], y = ['-9/10', '11/10'], z = ['0', '1']"
		for range 2 + k%3 {
			p, q := of(15), of(15)
			list = append(list, fmt.Sprintf("'(%d/10) x + (%d/10) y + (%d/200) z + (%d/10)'", p, q, p*p+q*q, of(3)))
		}
		text.WriteString(both(fmt.Sprint("case ", k), "branches = ["+strings.Join(list, ", ")+"]\ncombine = '"+op+"'\nbox = { "+box+" }", "'1'"))
	}
	compare(t, text.String(), 1e-10)
}

func TestDomainWithoutVolume(t *testing.T) {
	for _, energy := range []string{"", "energy = '0'\n"} {
		out := Limit(t.Context(), []*cases.Case{parsed(t, planarEikonal+`[[limit]]
name = 'flat'
approximation = 'front'
branches = ['1 - x', '1 + x']
combine = 'min'
region = { map = ['s', '2 s'], over = { s = ['-1', '1'], t = ['0', '1'] } }
eps = ['1/10']
`+energy)}, LimitOptions{})
		assert.ErrorContains(t, out.Results[0].Err, "no volume")
	}
}
