package creases_test

import (
	"math"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// The error of a profile cost that is computed by quadrature is in the error
// of the energy: on a segment of length 1 the energy is ∫ |R(p)| dp between
// the traces.
func TestErrorOfNumericalProfile(t *testing.T) {
	head := func(r string) string { return strings.Replace(eikonalHead, "(1 - u_x^2 - u_y^2)/2", r, 1) }
	for _, test := range []struct {
		residual, plus, minus string
		want                  float64
	}{
		{"sin(u_x) + u_y", "pi x", "-2 pi x", 6},
		{"sin(u_x) + u_y", "3 pi x", "-4 pi x", 14},
		{"cos(u_x) - 1 + abs(u_y)", "2 pi x", "-4 pi x", 6 * math.Pi},
		{"1 - sqrt(u_x^2 + u_y^2)", "x", "-x", 1},
	} {
		r := one(t, head(test.residual)+`plus  = "`+test.plus+`"
minus = "`+test.minus+`"
polygon = [["0", "0"], ["0", "1"]]
`)
		require.NotNil(t, r.Energy, r.Reason)
		assert.LessOrEqual(t, math.Abs(*r.Energy-test.want), *r.Error, test.residual)
		assert.LessOrEqual(t, *r.Error, 1e-11*test.want, test.residual)
	}
}
