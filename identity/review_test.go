package identity_test

import (
	"testing"

	"creaseproof/entropy"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
)

func supposing(list ...string) func(*identity.Claim) {
	return func(c *identity.Claim) {
		for _, a := range list {
			c.Assume = append(c.Assume, assumptionAt(c, a))
		}
	}
}

// assumptionAt parses an assumption of a claim, which at a jump may name nu.
func assumptionAt(c *identity.Claim, text string) entropy.Assumption {
	sc, err := c.Setting.Scope(c.Jump)
	if err != nil {
		panic(err)
	}
	return parseAssumption(sc, text)
}

// The normal of a jump is that of traces on the well, also where an assumption
// names it.
func TestAssumptionsOnTheNormal(t *testing.T) {
	for states, want := range map[string][]identity.Verdict{
		"nu_z = {u_x} nu_x + {u_y} nu_y":      {identity.Proved},
		"{u_x} nu_x + {u_y} nu_y >= 0":        {identity.Proved, identity.Supported},
		"{u_x} nu_x + {u_y} nu_y >= 1/100000": {identity.Refuted, identity.Supported},
		"[u_z] >= 0":                          {identity.Refuted},
	} {
		rec := decide(t, state(t, layered, states, atJump, supposing("nu_z > 0")))
		assert.Contains(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
}

// Assumptions that are equations are used in proofs, and never sampled past.
func TestAssumptionsThatAreEquations(t *testing.T) {
	for states, want := range map[string]identity.Verdict{
		"u_x <= u_y": identity.Proved, "u_x^2 <= u_y^2": identity.Proved, "u_x <= u_y - 1": identity.Refuted, "u_x + 1 >= 2 u_y": identity.Refuted,
	} {
		rec := decide(t, state(t, layered, states, supposing("u_x = u_y")))
		if want == identity.Refuted {
			assert.Contains(t, []identity.Verdict{identity.Refuted, identity.Open}, rec.Verdict, states)
			continue
		}
		assert.Equal(t, want, rec.Verdict, "%s: %+v", states, rec)
	}
}

// A set of best values is that for all admissible jets: an assumption that
// holds the constant changes them, and is not followed.
func TestBestWithAssumptionsOnTheConstant(t *testing.T) {
	best := func(c *identity.Claim) { c.Best = "delta" }
	rec := decide(t, state(t, theory{coordinates: layered.coordinates, unknowns: layered.unknowns, constants: []string{"delta"}}, "delta u_x^2 <= u_x^2", best,
		supposing("u_x - delta > 0", "1/2 - u_x > 0")))
	assert.Equal(t, identity.Open, rec.Verdict, "%+v", rec)
	rec = decide(t, state(t, theory{coordinates: layered.coordinates, unknowns: layered.unknowns, constants: []string{"delta"}}, "delta u_x^2 <= u_x^2", best))
	assert.Equal(t, identity.Proved, rec.Verdict)
	assert.Equal(t, "delta <= 1", rec.Solution)
}
