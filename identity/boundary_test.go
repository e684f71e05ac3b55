package identity_test

import (
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
)

// Bounds that miss the least value by far less than floating point resolves
// are refuted, those beyond it are not.
func TestNearMissesOnTheBoundary(t *testing.T) {
	for _, c := range []struct {
		states string
		assume []string
		fails  bool
	}{
		{"u_x + u_y <= 1.41421356", []string{"u_x^2 + u_y^2 <= 1"}, true},
		{"u_x + u_y <= 1.41421356237309504880168872420969807856967187537694", []string{"u_x^2 + u_y^2 <= 1"}, true},
		{"u_x + u_y <= 1.41421356237309504880168872420969807856967187537694", []string{"u_x^2 + u_y^2 < 1"}, true},
		{"u_x + u_y <= 1.41421356237309504880168872420969807856967187537695", []string{"u_x^2 + u_y^2 <= 1"}, false},
		{"u_x u_y <= 0.4999999", []string{"u_x^2 + u_y^2 + a^2 <= 1"}, true},
		{"u_x u_y <= 0.4999999999999999999", []string{"u_x^2 + u_y^2 + a^2 <= 1"}, true},
		{"u_x u_y <= 0.5", []string{"u_x^2 + u_y^2 + a^2 <= 1"}, false},
		{"u_x + u_y + a <= 1.7320508", []string{"u_x^2 + u_y^2 + a^2 <= 1", "u_x >= u_y"}, true},
		{"u_x + u_y + a <= 1.7320509", []string{"u_x^2 + u_y^2 + a^2 <= 1", "u_x >= u_y"}, false},
		{"u_x^2 + u_y^2 >= 2.00000000001", []string{"u_x + u_y > 2"}, true},
		{"u_x^2 + u_y^2 >= 2", []string{"u_x + u_y > 2"}, false},
		{"u_x >= 0", []string{"u_x u_y >= 0", "u_y >= 0"}, true},
	} {
		rec := decide(t, state(t, plane, c.states, assuming(t, c.assume...)))
		if c.fails {
			assert.Equal(t, identity.Refuted, rec.Verdict, "%s: %v: %+v", c.states, c.assume, rec)
		} else {
			assert.Contains(t, []identity.Verdict{identity.Proved, identity.Supported}, rec.Verdict, "%s: %v: %+v", c.states, c.assume, rec)
		}
	}
}

// Least values that are approached only at infinity.
func TestNearMissesAtInfinity(t *testing.T) {
	for states, want := range map[string][]identity.Verdict{
		"(u_x u_y - 1)^2 + u_x^2 >= 1/10^30":                          {identity.Refuted},
		"(u_x u_y - 1)^2 + u_x^4 >= 1/10^30":                          {identity.Refuted},
		"(u_x^2 u_y - 1)^2 + u_x^4 + (u_y a - 3)^2 >= 1/10^30":        {identity.Refuted},
		"(u_x u_y - 1)^2 + u_x^2 >= 0":                                {identity.Proved},
		"(u_x u_y - 1)^2 + u_x^2 + u_y^2 + 1/10^30 >= 0":              {identity.Proved},
		"(u_x u_y - 1)^2 + u_x^2 + 1/10^30 >= 1/10^30":                {identity.Proved},
		"(u_x u_y - 1)^2 + (u_x - u_y)^2 + 1/10^30 >= 1.0001 / 10^30": {identity.Refuted},
	} {
		rec := decide(t, state(t, plane, states))
		assert.Contains(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
}
