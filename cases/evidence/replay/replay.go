// Package replay verifies evidence of any kind: that of a claim (package
// evidence), of the energy of a surface (package energies) and of a limit
// (package approximations). It links none of the search for proofs and
// counterexamples.
package replay

import (
	"context"
	"errors"
	"fmt"
	"io"
	"maps"
	"slices"
	"strings"

	"creaseproof/cases/evidence"
	"creaseproof/cases/evidence/approximations"
	"creaseproof/cases/evidence/energies"
	"creaseproof/cases/evidence/sealed"
)

// Report is what a file of evidence is about, and what is stated in it.
type Report struct {
	Case   string
	Name   string // of the claim, surface or limit, with its values
	States string // the verdict or outcome, and what it rests on
	// Numerical says that the statement rests on floating-point arithmetic, so
	// that the audit has repeated the computation and proved nothing.
	Numerical bool
}

// Open opens a file that stands beside the evidence.
type Open func(name string) (io.ReadCloser, error)

// File verifies one file. A nil error means that its statement follows, or for a
// numerical one that the same computation, done again, agrees with it to the
// stated errors. Nothing in a file makes it panic.
func File(ctx context.Context, data []byte, open Open) (r Report, err error) {
	defer func() {
		if p := recover(); p != nil {
			err = fmt.Errorf("internal error: %.300s", fmt.Sprint(p))
		}
	}()
	names, err := sealed.Names(data)
	if err != nil {
		return r, err
	}
	switch {
	case names["surface"] != nil:
		return surface(ctx, data, open)
	case names["approximation"] != nil:
		return approximation(ctx, data)
	case names["claim"] != nil:
		return claim(ctx, data)
	}
	return r, errors.New("this is no evidence: it names neither a claim nor a surface nor an approximation")
}

func claim(ctx context.Context, data []byte) (r Report, err error) {
	f, err := evidence.Audit(ctx, data)
	if f != nil {
		r = Report{Case: f.Case, Name: f.Claim, States: string(f.Verdict)}
	}
	return r, err
}

func surface(ctx context.Context, data []byte, open Open) (r Report, err error) {
	f, err := energies.Audit(ctx, data, energies.Open(open))
	if f == nil {
		return r, err
	}
	r = Report{Case: f.Case, Name: f.Surface + with(f.Values), Numerical: f.Kind == energies.Numerical}
	verdict := string(f.Verdict)
	if verdict == "" {
		verdict = "no energy claimed"
	}
	r.States = verdict
	switch f.Kind {
	case energies.Enclosure:
		r.States += ", enclosed"
		if len(f.Enclosure) == 2 {
			r.States += fmt.Sprintf(" in [%s, %s]", f.Enclosure[0], f.Enclosure[1])
		}
	case energies.Exact:
		r.States += ", by exact arithmetic"
	default:
		r.States += fmt.Sprintf(", %.15g", f.Energy)
		if f.Error != nil {
			r.States += fmt.Sprintf(" ± %.1e", *f.Error)
		}
	}
	if f.Claimed != nil { // the case is that in the file, which another may have written
		r.States += fmt.Sprintf(", claimed %.15g", *f.Claimed)
	}
	return r, err
}

func approximation(ctx context.Context, data []byte) (r Report, err error) {
	f, err := approximations.Audit(ctx, data)
	if f == nil {
		return r, err
	}
	r = Report{Case: f.Case, Name: f.Approximation + with(f.Values), States: f.Outcome, Numerical: true}
	if f.Unfinished {
		r.States = fmt.Sprintf("unfinished, after %d eps", len(f.Eps))
	}
	if f.Target != nil {
		r.States += fmt.Sprintf(", jump energy %.15g", *f.Target)
		if f.TargetClaimed {
			r.States += " as claimed"
		}
	}
	return r, err
}

// with names the values.
func with(values map[string]string) string {
	var parts []string
	for _, k := range slices.Sorted(maps.Keys(values)) {
		parts = append(parts, k+" = "+values[k])
	}
	if len(parts) == 0 {
		return ""
	}
	return " (" + strings.Join(parts, ", ") + ")"
}
