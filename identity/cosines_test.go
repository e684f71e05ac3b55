package identity_test

import (
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
)

// Cosines and sines lie on circles, whichever of them a claim holds.
func TestCosinesAreBounded(t *testing.T) {
	for _, c := range []struct {
		states string
		want   identity.Verdict
	}{
		{"cos(a) <= 1", identity.Proved},
		{"cos(a) >= -1", identity.Proved},
		{"cos(a) <= 1 - 1/10^12", identity.Refuted},
		{"sin(a) cos(b) <= 1", identity.Proved},
		{"sin(a) cos(b) <= 999999/1000000", identity.Refuted},
		{"cos(5 a) <= 1", identity.Proved},
		{"cos(3 a) - cos(2 a) <= 2", identity.Proved},
		{"cos(a)^3 <= 1", identity.Proved},
		{"abs(cos(a)) <= 1", identity.Proved},
		{"u_x cos(a) <= abs(u_x)", identity.Proved},
		{"u_x cos(a) <= u_x", identity.Refuted},
		{"1/(2 + cos(a)) <= 1", identity.Proved},
		{"1/(2 + cos(a)) <= 999/1000", identity.Refuted},
		{"1/(2 + cos(a)) >= 1/3", identity.Proved},
	} {
		rec := decide(t, state(t, planarAngles, c.states))
		assert.Equal(t, c.want, rec.Verdict, "%s: %+v", c.states, rec)
	}
}

// High multiples of an angle are bounded as they are written.
func TestCosinesOfHighMultiples(t *testing.T) {
	for _, c := range []struct {
		states string
		want   identity.Verdict
	}{
		{"cos(1000 a) + cos(999 a) <= 2", identity.Proved},
		{"cos(100 a) + cos(99 a) <= 1.99999", identity.Refuted},
		{"3 cos(100 a)^2 sin(77 b) - 2 sin(50 a)^3 <= 5", identity.Proved},
		{"-5 <= (3 cos(100 a)^2 sin(77 b) - 2 sin(50 a)^3)/1", identity.Proved},
		{"cos(500 a)^2/4 + u_x^2 >= 0", identity.Proved},
		{"cos(30 a)^2 <= 1", identity.Proved},
		{"cos(30 a)^2 >= 0", identity.Proved},
		{"cos(30 a)^3 >= 0", identity.Refuted},
		{"cos(30 a)^2/(-1) >= 0", identity.Refuted},
		{"2 cos(30 a) <= 1", identity.Refuted},
		{"u_x cos(30 a) <= 1", identity.Refuted},
	} {
		rec := decide(t, state(t, planarAngles, c.states))
		assert.Equal(t, c.want, rec.Verdict, "%s: %+v", c.states, rec)
	}
}
