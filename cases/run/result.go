package run

import (
	"time"

	"creaseproof/cases"

	"creaseproof/identity"
)

// Result is what came of one claim. Exactly one of Record and Err is set.
type Result struct {
	Case    *cases.Case
	Claim   *cases.Claim
	Record  *identity.Record
	Err     error // the claim means nothing: a mistake in the file, with its place
	Elapsed time.Duration
	Failed  bool // inside the program; the record is open and says so
}

// Met reports whether the claim is as the file expects.
func (r *Result) Met() bool {
	return r.Err == nil && !r.Failed && r.Claim.Expected.Met(r.Record)
}

// Outcome is what came of all claims, in the order of the cases and of their
// claims.
type Outcome struct {
	Results     []*Result
	Interrupted bool // the context ended; claims that were not decided are left out
}

// Faulty reports whether some claim means nothing.
func (o *Outcome) Faulty() bool {
	for _, r := range o.Results {
		if r.Err != nil {
			return true
		}
	}
	return false
}

// Met reports whether every claim is as the file expects.
func (o *Outcome) Met() bool {
	for _, r := range o.Results {
		if !r.Met() {
			return false
		}
	}
	return true
}

// Count is the number of claims with the verdict.
func (o *Outcome) Count(v identity.Verdict) int {
	n := 0
	for _, r := range o.Results {
		if r.Record != nil && r.Record.Verdict == v {
			n++
		}
	}
	return n
}
