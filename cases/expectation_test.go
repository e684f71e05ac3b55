package cases

import (
	"testing"

	"github.com/stretchr/testify/assert"

	"creaseproof/identity/claim"
)

func TestSameSolution(t *testing.T) {
	for _, c := range []struct {
		a, b string
		same bool
	}{
		{"c = 4/3", "c = 4/3", true},
		{"c=4/3", "c = 4/3", true},
		{"c = 8/6", "c = 4/3", true},
		{"c = 1.5", "c = 3/2", true},
		{"b = 2, a = 1", "a = 1, b = 2", true},
		{"κ = 2", "kappa = 2", true},
		{"c = 4/3", "c = 3/4", false},
		{"c = 1", "d = 1", false},
		{"a = 1", "a = 1, b = 2", false},
		{"c = eps + 1", "c = eps + 1", true},
		{"c = 1/0", "c = 1/0", true},
		{"c = 4/3", "", false},
		{"c free", "c free", true},
		{"κ  free", "kappa free", true},
		{"c free, b = 2", "b = 4/2, c free", true},
		{"c free", "b free", false},
		{"c free", "c = 0", false},
		{"c free", "c = free", false},
		{"c free", "", false},
		{"c = 1", "c = 1 or c = 2", false},
	} {
		assert.Equal(t, c.same, sameSolution(c.a, c.b), "%q and %q", c.a, c.b)
	}
}

func TestMet(t *testing.T) {
	rec := func(v claim.Verdict, s string) *claim.Record { return &claim.Record{Verdict: v, Solution: s} }
	proved := Expectation{Verdict: claim.Proved}
	assert.True(t, proved.Met(rec(claim.Proved, "c = 7")))
	assert.False(t, proved.Met(rec(claim.Supported, "")), "supported is not proved")
	assert.False(t, proved.Met(nil))
	solution := Expectation{Verdict: claim.Proved, Solution: "c = 4/3"}
	assert.True(t, solution.Met(rec(claim.Proved, "c = 4/3")))
	assert.False(t, solution.Met(rec(claim.Proved, "c = 2")))
	assert.False(t, solution.Met(rec(claim.Open, "c = 4/3")), "a solution that is not proved")
	assert.True(t, Expectation{Verdict: claim.Refuted}.Met(rec(claim.Refuted, "")))
}
