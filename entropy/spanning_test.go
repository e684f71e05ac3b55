package entropy_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy"
	"creaseproof/entropy/jet"
)

func family(components map[string]string) *entropy.Setting {
	return setting(&entropy.Setting{
		Coordinates: []string{"x", "y", "z"}, Unknowns: []string{"u"}, Constants: []string{"c"},
		Frame: &entropy.Frame{Plane: [2]int{0, 1}, Axes: [2]string{"xi", "eta"}, Angle: "theta"},
	}, nil, components)
}

func TestSpanningPair(t *testing.T) {
	for _, test := range []struct {
		field map[string]string
		want  string
		k     int
	}{
		{map[string]string{"xi": "u_z u_xi - u_xi u_eta^2/2 - u_xi^3/6", "eta": "-(u_z u_eta - u_eta u_xi^2/2 - u_eta^3/6)", "z": "(u_eta^2 - u_xi^2)/2"},
			"Sigma = cos(2 theta) Sigma(0) + sin(2 theta) Sigma(pi/4)", 2},
		{map[string]string{"z": "u_xi"}, "Sigma = cos(theta) Sigma(0) + sin(theta) Sigma(pi/2)", 1},
		{map[string]string{"z": "u_xi^3 - 3 u_xi u_eta^2"}, "Sigma = cos(3 theta) Sigma(0) + sin(3 theta) Sigma(pi/6)", 3},
		{map[string]string{"z": "sqrt(c^2 + 1) u_xi/(1 + u_z^2)"}, "Sigma = cos(theta) Sigma(0) + sin(theta) Sigma(pi/2)", 1},
		// Spans of dimension 1 and 2 with other trigonometric polynomials.
		{map[string]string{"z": "u_z (2 + cos(theta))"}, "Sigma = (2/3 + 1/3*cos(theta)) Sigma(0) + 0 Sigma(pi/2)", 0},
		{map[string]string{"z": "u_z + u_x cos(theta)"}, "Sigma = cos(theta) Sigma(0) + (1 - cos(theta)) Sigma(pi/2)", 0},
		{map[string]string{"xi": "u_xi", "eta": "u_eta"}, "Sigma = 1 Sigma(0) + 0 Sigma(pi/2)", 0},
	} {
		p, err := family(test.field).SpanningPair(t.Context(), "Sigma")
		if assert.NoError(t, err, test.want) {
			assert.Equal(t, test.want, p.String())
			assert.Equal(t, test.k, p.Harmonic)
		}
	}
}

// The pair spans numerically too, at random angles and gradients.
func TestSpanningPairNumerically(t *testing.T) {
	set := layered()
	p, err := set.CompileField("Sigma", nil)
	require.NoError(t, err)
	r := rand.New(rand.NewPCG(7, 8))
	at0, at45, whole := make([]float64, 3), make([]float64, 3), make([]float64, 3)
	for range 100 {
		g := []float64{r.NormFloat64(), r.NormFloat64(), r.NormFloat64()}
		theta := 10 * r.NormFloat64()
		p.At(at0, g, 0)
		p.At(at45, g, math.Pi/4)
		p.At(whole, g, theta)
		for i := range whole {
			assert.InDelta(t, whole[i], math.Cos(2*theta)*at0[i]+math.Sin(2*theta)*at45[i], 1e-12)
		}
	}
}

func TestNoSpanningPair(t *testing.T) {
	for _, field := range []map[string]string{
		{"z": "u_xi + u_xi^2"},                // harmonics 0, 1 and 2
		{"z": "u_xi^3"},                       // 1 and 3
		{"xi": "u_xi u_z", "z": "u_eta u_xi"}, // 0 and 2
	} {
		_, err := family(field).SpanningPair(t.Context(), "Sigma")
		assert.ErrorIs(t, err, entropy.ErrNoPair, "%v", field)
	}
	_, err := family(map[string]string{"z": "theta u_x"}).SpanningPair(t.Context(), "Sigma")
	assert.ErrorIs(t, err, jet.ErrOutside)
	_, err = setting(&entropy.Setting{Coordinates: []string{"x"}, Unknowns: []string{"u"}}, nil, map[string]string{"x": "u_x"}).SpanningPair(t.Context(), "Sigma")
	assert.ErrorContains(t, err, "no frame")
}
