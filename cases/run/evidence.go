package run

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"creaseproof/cases/evidence"
	"creaseproof/identity/claim"
	"creaseproof/identity/export"
	"creaseproof/identity/statement"
)

// WriteEvidence writes the evidence of every decided claim into a folder, which
// it makes: CASE__CLAIM.json for the audit and, where the statement can be
// exported, CASE__CLAIM.tex with an align block and CASE__CLAIM.v, a file for the
// Coq proof assistant that needs nothing else. It returns how many claims it
// wrote evidence for.
func WriteEvidence(ctx context.Context, dir string, o *Outcome, seed uint64) (int, error) {
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return 0, fmt.Errorf("the folder for evidence: %w", err)
	}
	names := map[string]int{}
	written := 0
	for _, r := range o.Results {
		if r.Record == nil {
			continue
		}
		f, err := evidence.New(r.Case, r.Claim, r.Record, seed)
		if errors.Is(err, evidence.ErrNone) {
			continue
		}
		if err != nil {
			return written, err
		}
		data, err := f.Encode()
		if err != nil {
			return written, fmt.Errorf("%s: %s: %w", r.Case.Name, r.Record.Claim, err)
		}
		base := slug(r.Case.Name) + "__" + slug(r.Record.Claim)
		if names[base]++; names[base] > 1 {
			base += fmt.Sprintf("_%d", names[base])
		}
		if err := os.WriteFile(filepath.Join(dir, base+".json"), data, 0o666); err != nil {
			return written, err
		}
		written++
		if r.Record.Verdict != claim.Proved {
			continue
		}
		if err := writeProof(ctx, filepath.Join(dir, base), r); err != nil {
			return written, fmt.Errorf("%s: %s: %w", r.Case.Name, r.Record.Claim, err)
		}
	}
	return written, nil
}

// writeProof exports a proved claim as TeX and Coq, where that is supported.
func writeProof(ctx context.Context, base string, r *Result) error {
	s, err := statement.Of(ctx, r.Claim.Claim, r.Record)
	if errors.Is(err, export.ErrUnsupported) {
		return nil
	}
	if err != nil {
		return err
	}
	about := r.Case.Name + ": " + r.Record.Claim
	for ending, make := range map[string]func() (string, error){
		".tex": func() (string, error) { return export.TeX(s, export.TeXOptions{}) },
		".v":   func() (string, error) { return export.Coq(about, s) },
	} {
		text, err := make()
		if errors.Is(err, export.ErrUnsupported) {
			continue
		}
		if err != nil {
			return err
		}
		if err := os.WriteFile(base+ending, []byte(text), 0o666); err != nil {
			return err
		}
	}
	return nil
}

// slug is a name as part of a file name, which has to be a name of a module in
// Coq as well: letters and digits, and one underscore for anything else.
func slug(s string) string {
	var b strings.Builder
	gap := false
	for _, r := range strings.ToLower(s) {
		if r >= 'a' && r <= 'z' || r >= '0' && r <= '9' {
			b.WriteRune(r)
			gap = false
		} else if !gap && b.Len() > 0 {
			b.WriteByte('_')
			gap = true
		}
		if b.Len() > 60 {
			break
		}
	}
	name := strings.Trim(b.String(), "_")
	if name == "" || name[0] >= '0' && name[0] <= '9' {
		name = "c_" + name
	}
	return name
}
