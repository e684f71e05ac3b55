package identity_test

import (
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
)

// Assumptions bear on a claim through variables that it does not hold, in
// whatever order they stand.
func TestLinkedAssumptions(t *testing.T) {
	for _, c := range []struct {
		states string
		assume []string
		holds  bool
	}{
		{"u_x >= 0", []string{"u_x >= u_y", "u_y >= 0"}, true},
		{"u_x >= 0", []string{"u_y >= 0", "u_x >= u_y"}, true},
		{"u_x >= 0", []string{"a >= b", "b >= 0", "u_y >= a", "u_x >= u_y"}, true},
		{"u_x >= 0", []string{"a >= b", "b >= -1", "u_y >= a", "u_x >= u_y"}, false},
		{"u_x >= 0", []string{"u_y >= -1/1000000", "u_x >= u_y"}, false},
		{"u_x >= 0", []string{"u_y >= 0", "u_x + u_y >= 0"}, false},
		{"u_x^2 <= 1", []string{"u_x^2 + u_y^2 <= 1"}, true},
		{"u_x^2 <= 1 - 1/1000000", []string{"u_x^2 + u_y^2 <= 1"}, false},
		{"u_x^2 <= 1", []string{"u_x^2 + u_y <= 1", "u_y >= 0"}, true},
		{"u_x^2 <= 1", []string{"u_x^2 + u_y <= 1"}, false},
	} {
		rec := decide(t, state(t, plane, c.states, assuming(t, c.assume...)))
		if c.holds {
			assert.Equal(t, identity.Proved, rec.Verdict, "%s: %v: %+v", c.states, c.assume, rec)
		} else {
			assert.Equal(t, identity.Refuted, rec.Verdict, "%s: %v: %+v", c.states, c.assume, rec)
		}
	}
}
