package identity

import (
	"context"

	"creaseproof/entropy/algebra"
	"creaseproof/identity/claim"
	"creaseproof/identity/exact"
	"creaseproof/identity/gram"
)

// The types of claims and records are those of package claim.
type (
	Claim       = claim.Claim
	Record      = claim.Record
	Verdict     = claim.Verdict
	Restriction = claim.Restriction
	Bound       = claim.Bound
	Exponent    = claim.Exponent
	Witness     = claim.Witness
	CosSin      = claim.CosSin
	Equality    = claim.Equality
	End         = claim.End
)

// The verdicts.
const (
	Proved    = claim.Proved
	Refuted   = claim.Refuted
	Supported = claim.Supported
	Open      = claim.Open
)

// Options bound the work. Budgets count work, not seconds, so that the same
// seed gives the same verdict on any machine and any number of cores.
type Options struct {
	Seed    uint64
	Samples int64  // of random jets for an inequality
	Starts  int    // of descents of the adversary
	Effort  string // of the search for certificates: low, normal or high
	Jobs    int    // cores to use; no verdict depends on it

	Progress func(claim string, done, total int64)
}

// DefaultOptions are the budgets that the program uses.
func DefaultOptions() Options {
	return Options{Seed: 1, Samples: 200_000, Starts: 48, Effort: "normal"}
}

// decider decides the inequality of a problem.
type decider struct {
	*exact.Problem
	opt       Options
	picture   *gram.Picture  // what the last search for a certificate saw
	vanishing []algebra.Poly // what has to vanish for equality in the last certificate
}

// Decide decides a claim. An error says that the claim means nothing (an
// unknown name, a division by zero), or that ctx ended; a claim that cannot be
// decided within the limits gives a record with the verdict Open.
func Decide(ctx context.Context, c *Claim, opt Options) (*Record, error) {
	return exact.Decide(ctx, c, opt.Seed, func(p *exact.Problem) error {
		d := &decider{Problem: p, opt: opt}
		return d.inequality()
	})
}
