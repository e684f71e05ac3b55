package creases_test

import (
	"testing"

	"github.com/stretchr/testify/assert"

	"creaseproof/identity/claim"
)

// On a level set a trace off the well, or a jump of u, far below the tolerances
// of floating-point numbers is found by enclosures at points of the surface. A
// residual that vanishes on the surface alone is none.
func TestSmallFaultsOnALevelSet(t *testing.T) {
	const front = "level = \"x^2 + y^2 - (7/5) z\"\n" + wide
	for _, test := range []struct{ plus, minus, says string }{
		{"-7/10", "-(x^2 + y^2)/(2 z) + 10^(-20)*(x^2 + y^2 - (7/5) z)", "the minus trace is off the well at"},
		{"-7/10", "-(x^2 + y^2)/(2 z) + 10^(-25)", "u is discontinuous across the surface at"},
		{"-7/10", "-(x^2 + y^2)/(2 z) + (x^2 + y^2 - (7/5) z)^2", ""},
		{"-7/10", "-(x^2 + y^2)/(2 z)", ""},
	} {
		r := one(t, layeredHead+"plus = \""+test.plus+"\"\nminus = \""+test.minus+"\"\n"+front)
		if test.says == "" {
			assert.NotNil(t, r.Energy, "%s: %s", test.minus, r.Reason)
			continue
		}
		assert.Nil(t, r.Energy, test.minus)
		assert.Equal(t, claim.Open, r.Verdict)
		assert.Contains(t, r.Reason, test.says)
		assert.Contains(t, r.Reason, "by an enclosure")
	}
}
