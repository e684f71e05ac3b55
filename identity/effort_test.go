package identity_test

import (
	"context"
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// More effort decides more, and never turns one decided verdict into another.
func TestEffortOnlyDecidesMore(t *testing.T) {
	decided := func(v identity.Verdict) bool { return v == identity.Proved || v == identity.Refuted }
	gained := 0
	for _, states := range []string{
		"s1^2 >= 3 s2", "s2^2 >= 3 s1 s3", "s2^2 >= 301/100*s1 s3",
		"u_x^4 u_y^2 + u_x^2 u_y^4 + 1 >= 3 u_x^2 u_y^2",
		"u_x^4 u_y^2 + u_x^2 u_y^4 + 1 >= (3 + 1/1000000) u_x^2 u_y^2",
		"u_x^4 u_y^2 + u_y^4 u_z^2 + u_z^4 u_x^2 >= 3 u_x^2 u_y^2 u_z^2",
		"u^4 + u_x^2 u_y^2 + u_y^2 u_z^2 + u_z^2 u_x^2 >= 4 u u_x u_y u_z",
		"u_x^2 u_y^2 >= u_x u_y - 1/4", "u_x^2 u_y^2 >= u_x u_y - 249/1000",
	} {
		var last identity.Verdict
		for i, effort := range []string{"low", "normal", "high"} {
			opt := identity.DefaultOptions()
			opt.Effort, opt.Samples, opt.Starts = effort, 20_000, 16
			rec, err := identity.Decide(context.Background(), state(t, hessian3, states), opt)
			require.NoError(t, err)
			if i > 0 && decided(last) {
				assert.Equal(t, last, rec.Verdict, "%s: %s", states, effort)
			} else if i > 0 && decided(rec.Verdict) {
				gained++
			}
			last = rec.Verdict
		}
		assert.True(t, decided(last), "%s is %s", states, last)
	}
	assert.Positive(t, gained, "some claim needs more than the least effort")
}
