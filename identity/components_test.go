package identity_test

import (
	"testing"

	"creaseproof/entropy/jet"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// A component that is not decided hides no component that is refuted.
func TestUndecidedComponents(t *testing.T) {
	for _, c := range []struct {
		residual, x, y string
	}{
		{"u_x u_y", "abs(u_x) u_y", "0"},
		{"u_x^4 + u_x^2 u_y^2 + u_y^4", "u_x", "0"},
	} {
		th := wellOf(c.residual, map[string]map[string]string{"S": {"x": c.x, "y": c.y}})
		rec, err := decided(t, state(t, th, "entropy(S)"))
		require.NoError(t, err)
		assert.Equal(t, identity.Refuted, rec.Verdict, "%s: %+v", c.residual, rec)
	}
}

// A witness shows all that it rests on.
func TestWitnessesAreComplete(t *testing.T) {
	rec := decide(t, state(t, plane, "u_x <= 0", assuming(t, "a < u_x", "a > 5")))
	require.Equal(t, identity.Refuted, rec.Verdict)
	assert.Contains(t, rec.Witness.Jet, "a")
	for _, states := range []string{"[u_x]^2 = 5", "[u_x]^2 <= 5", "[u_y] = 0"} {
		rec, err := decided(t, state(t, wellOf("u_y - a u_x^2/2 - b", nil), states, atJump))
		require.NoError(t, err)
		require.Equal(t, identity.Refuted, rec.Verdict, states)
		for _, m := range []map[string]string{rec.Witness.Plus, rec.Witness.Minus, rec.Witness.Normal} {
			assert.Len(t, m, 2)
			for k, v := range m {
				assert.NotEqual(t, "undefined", v, "%s: %s: %+v", states, k, rec.Witness)
			}
		}
		assert.NotEqual(t, rec.Witness.Plus, rec.Witness.Minus)
		assert.Contains(t, rec.Witness.Jet, "a")
		assert.Contains(t, rec.Witness.Jet, "b")
	}
	rec, err := decided(t, state(t, wellOf("u_x^4 + a^2 - 3", nil), "[u_x]^2 <= 1", atJump))
	require.NoError(t, err)
	require.Equal(t, identity.Refuted, rec.Verdict)
	for k, v := range rec.Witness.Plus {
		assert.NotEqual(t, "undefined", v, "%s: %+v", k, rec.Witness)
		assert.NotContains(t, v, "Inf", "%s: %+v", k, rec.Witness)
	}
}

func TestContradictoryRestrictions(t *testing.T) {
	_, err := decided(t, state(t, plane, "u_x = 1", given(t, 0, "x"), restricting(t, 0, byX, "2")))
	assert.Error(t, err)
	_, err = decided(t, state(t, plane, "u_x = 1", given(t, 0, "x"), restricting(t, 0, byX, "1")))
	assert.NoError(t, err)
	_, err = decided(t, state(t, plane, "u_x = 1", restricting(t, 0, byX, "2"), restricting(t, 0, jet.Index{2}, "3")))
	assert.Error(t, err)
	_, err = decided(t, state(t, plane, "u_x = 1", restricting(t, 0, byX, "2"), restricting(t, 0, jet.Index{2}, "0")))
	assert.NoError(t, err)
	_, err = decided(t, state(t, plane, "u_y = 1", restricting(t, 0, byX, "2"), modulo(t, "u_x - 1")))
	assert.Error(t, err)
}
