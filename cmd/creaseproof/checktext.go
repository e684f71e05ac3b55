package main

import (
	"cmp"
	"fmt"
	"maps"
	"slices"
	"strings"
	"unicode/utf8"

	"creaseproof/cases"
	"creaseproof/cases/run"
	"creaseproof/identity"
)

// checkText writes the results of check for people to read.
type checkText struct {
	sheet
	opt   *run.Options
	names int // columns of the names of the current case
}

// How much of a record is shown; all of it is in the document.
const (
	mostFormula = 240 // runes of a remainder or a list of conditions
	mostDetails = 6   // details
	mostDetail  = 200 // runes of one
)

// measure finds the width of the names of a case.
func (t *checkText) measure(c *cases.Case) {
	t.names = 0
	for _, cl := range c.Claims {
		if t.opt.Selected(cl.Name) {
			t.names = max(t.names, min(utf8.RuneCountInString(cl.Name), mostName))
		}
	}
}

// result writes one claim.
func (t *checkText) result(r *run.Result) {
	if r.Case != t.current {
		t.header(r.Case)
		t.measure(r.Case)
	}
	if r.Err != nil {
		t.nothing(r.Claim.Name, t.names, "without meaning, see the error")
		return
	}
	rec := r.Record
	line := fmt.Sprintf("  %s  %s  %s", t.mark(r.Met()), t.style.verdict(rec.Verdict, pad(string(rec.Verdict), 9)), pad(r.Claim.Name, t.names))
	if rec.Method != "" {
		line += "  " + t.style.faint(rec.Method)
	}
	fmt.Fprintln(t.w, strings.TrimRight(line, " "))
	if rec.Solution != "" {
		t.note("solution", rec.Solution)
	}
	if rec.Witness != nil {
		t.witness(rec.Witness)
	}
	if rec.Remainder != "" {
		t.note("remainder", clip(rec.Remainder, mostFormula))
	}
	if rec.Reason != "" {
		t.note("", rec.Reason)
	}
	t.counts(rec)
	for i, d := range rec.Details {
		if i == mostDetails {
			t.note("", fmt.Sprintf("and %d more", len(rec.Details)-i))
			break
		}
		if !strings.Contains(rec.Solution, d) {
			t.note("", clip(d, mostDetail))
		}
	}
	if len(rec.Assumptions) > 0 {
		t.note("provided that", clip(strings.Join(rec.Assumptions, ", "), mostFormula))
	}
	if e := rec.Equality; e != nil && len(e.Conditions) > 0 {
		what := strings.Join(e.Conditions, ", ")
		switch {
		case e.Consistent == "no":
			what = "never"
		case len(e.Jet) > 0:
			what += "; for instance at " + assignments(e.Jet)
		}
		t.note("equality", what)
	}
	if !r.Met() {
		want := string(r.Claim.Expected.Verdict)
		if r.Claim.Expected.Solution != "" {
			want += " with " + r.Claim.Expected.Solution
		}
		t.lines(t.style.alarm, "expected "+want)
	}
}

// counts says how far a claim without an exact decision was tried.
func (t *checkText) counts(rec *identity.Record) {
	if rec.Verdict != identity.Supported && rec.Verdict != identity.Open || rec.Samples == 0 && rec.Searches == 0 {
		return
	}
	s := fmt.Sprintf("seed %d", rec.Seed)
	if !strings.Contains(rec.Reason, "not a proof") {
		s = fmt.Sprintf("no counterexample in %d samples and %s, seed %d: a numerical check is not a proof",
			rec.Samples, count(rec.Searches, "search", "searches"), rec.Seed)
	}
	if rec.Margin != nil {
		s += fmt.Sprintf(", least margin met %.3g", *rec.Margin)
	}
	t.note("", s)
}

// witness writes the point at which a claim fails.
func (t *checkText) witness(w *identity.Witness) {
	var parts []string
	if len(w.Jet) > 0 {
		parts = append(parts, assignments(w.Jet))
	}
	for _, k := range byLength(w.Angle) {
		parts = append(parts, fmt.Sprintf("(cos, sin)(%s) = (%s, %s)", k, w.Angle[k].Cos, w.Angle[k].Sin))
	}
	for _, side := range []struct {
		name   string
		values map[string]string
	}{{"plus", w.Plus}, {"minus", w.Minus}, {"nu", w.Normal}} {
		if len(side.values) == 0 {
			continue
		}
		parts = append(parts, side.name+" ("+assignments(side.values)+")")
	}
	if len(parts) > 0 {
		t.note("at", strings.Join(parts, ", "))
	}
	if w.Left != "" || w.Right != "" {
		t.note("", "left side "+w.Left+", right side "+w.Right)
	}
}

// assignments are names with their values.
func assignments(m map[string]string) string {
	var list []string
	for _, k := range byLength(m) {
		list = append(list, k+" = "+m[k])
	}
	return strings.Join(list, ", ")
}

// byLength are the keys of a map, short ones first.
func byLength[V any](m map[string]V) []string {
	return slices.SortedFunc(maps.Keys(m), func(a, b string) int {
		return cmp.Or(cmp.Compare(len(a), len(b)), cmp.Compare(a, b))
	})
}

// without names the cases that have no claims.
func (t *checkText) without(list []*cases.Case) {
	for _, c := range list {
		if len(c.Claims) == 0 {
			t.header(c)
			fmt.Fprintln(t.w, "  no claims")
		}
	}
}

// summary writes the last line.
func (t *checkText) summary(out *run.Outcome, total, unread int) {
	if total == 0 {
		return
	}
	var parts []string
	decided, met := 0, 0
	for _, v := range verdicts {
		if n := out.Count(v); n > 0 {
			parts = append(parts, t.style.verdict(v, fmt.Sprintf("%d %s", n, v)))
			decided += n
		}
	}
	for _, r := range out.Results {
		if r.Met() {
			met++
		}
	}
	if n := len(out.Results) - decided; n > 0 {
		parts = append(parts, fmt.Sprintf("%d without meaning", n))
	}
	if n := total - len(out.Results); n > 0 {
		parts = append(parts, fmt.Sprintf("%d not reached", n))
	}
	t.last(count(total, "claim", "claims"), parts, tally{met, decided - met, unread, decided < total})
}
