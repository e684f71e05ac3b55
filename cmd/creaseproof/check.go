package main

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"time"

	"creaseproof/cases"
	"creaseproof/cases/library"
	"creaseproof/cases/run"
	"creaseproof/identity"
	"creaseproof/identity/gram"

	"github.com/spf13/cobra"
)

func newCheck(s streams) *cobra.Command {
	var c common
	var evidence string
	opt := run.Options{Options: identity.DefaultOptions()}
	cmd := &cobra.Command{
		Use:   "check [CASE...]",
		Short: "Decide every claim",
		Long: `Decide every claim of the cases, and compare the verdicts with what the cases expect.

A claim is proved or refuted by exact arithmetic or by enclosures with outward
rounding, and by nothing else. It is supported where samples and searches found no
counterexample, which is no proof; and open where it was not decided.

A CASE is a file, a folder (all files *.toml in it), the name of a built-in case,
or - for standard input; without one, every built-in case is taken.`,
		Example: `  creaseproof check mine.toml
  creaseproof check layered-rotated --only "Young bound" --json
  creaseproof check mine.toml --evidence proofs
  creaseproof check mine.toml --samples 5000000 --seed 7 --timeout 60`,
		ValidArgsFunction: completeCase,
		RunE: func(cmd *cobra.Command, args []string) error {
			defer c.begin()()
			opt.Only, opt.Timeout, opt.Jobs = c.only, time.Duration(c.timeout), c.jobs
			say := &complaints{w: s.err}
			list, bad, err := load(cmd.Context(), args, s.in, say)
			if err != nil {
				return err
			}
			if list = selected(list, &opt); len(list) == 0 && len(opt.Only) > 0 && bad == 0 {
				return fmt.Errorf("no claim has a name that contains %q", opt.Only)
			}
			return check(cmd.Context(), list, opt, s, say, request{c.json, bad, len(args) == 0, evidence})
		},
	}
	c.flags(cmd, "claims")
	cmd.Flags().StringVar(&evidence, "evidence", "", "write what each verdict rests on into the `folder`: for audit, as TeX, and for Coq")
	cmd.Flags().Var(&effort{&opt.Effort}, "effort", "how long proofs are searched for: `low, normal or high`; more effort only decides more")
	cmd.Flags().Var(&whole[uint64]{&opt.Seed, 0}, "seed", "`number` that the random samples and searches start from")
	cmd.Flags().Var(&whole[int64]{&opt.Samples, 1}, "samples", "random jets to draw for an inequality that is not decided exactly")
	return cmd
}

// selected are the cases that have a claim of the names asked for.
func selected(list []*cases.Case, opt *run.Options) []*cases.Case {
	if len(opt.Only) == 0 {
		return list
	}
	var out []*cases.Case
	for _, c := range list {
		for _, cl := range c.Claims {
			if opt.Selected(cl.Name) {
				out = append(out, c)
				break
			}
		}
	}
	return out
}

// completeCase offers the built-in cases to the shell, beside files.
func completeCase(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
	return library.Names(), cobra.ShellCompDirectiveDefault
}

// request is how a command was called and what came of reading its cases.
type request struct {
	json bool
	bad  int  // cases that could not be read
	all  bool // the built-in cases, since none was named

	evidence string // folder; empty for none
}

// keep is where evidence goes, nil for nowhere.
func (q *request) keep() *run.Evidence {
	if q.evidence == "" {
		return nil
	}
	return run.NewEvidence(q.evidence)
}

// kept says what evidence was written, and reports whether some was not.
func (q *request) kept(s streams, e *run.Evidence, one, many string) (lost bool) {
	if e == nil {
		return false
	}
	n, err := e.Written()
	switch {
	case n > 0:
		fmt.Fprintf(s.err, "evidence for %s in %s\n", count(n, one, many), q.evidence)
	case err == nil:
		fmt.Fprintf(s.err, "no %s to write evidence of\n", one)
	}
	if err != nil {
		fmt.Fprintf(s.err, "creaseproof: evidence is missing: %s\n", clip(err.Error(), 2000))
	}
	return err != nil
}

func check(ctx context.Context, list []*cases.Case, opt run.Options, s streams, say *complaints, q request) error {
	p := newProgress(s, total(list, &opt))
	opt.Progress = p.inside
	text := &checkText{sheet: sheet{w: s.out, style: style(s.colour), width: s.width}, opt: &opt}
	proofs := q.keep()
	opt.Report = func(r *run.Result) {
		p.report(func() {
			if !q.json {
				text.result(r)
			}
			if r.Err != nil {
				say.add(r.Err)
			}
		})
		if proofs != nil {
			proofs.Claim(context.WithoutCancel(ctx), r, opt.Seed)
		}
	}
	out := run.Check(ctx, list, opt)
	p.end()
	if q.json {
		if err := writeJSON(s.out, out.Document(list)); err != nil {
			return err
		}
	} else {
		if !q.all {
			text.without(list)
		}
		text.summary(out, total(list, &opt), q.bad)
	}
	lost := q.kept(s, proofs, "verdict", "verdicts")
	return finish(s, out.Interrupted, q.bad > 0 || lost || out.Faulty(), out.Met())
}

func total(list []*cases.Case, opt *run.Options) int {
	n := 0
	for _, c := range list {
		for _, cl := range c.Claims {
			if opt.Selected(cl.Name) {
				n++
			}
		}
	}
	return n
}

func writeJSON(w io.Writer, doc any) error {
	e := json.NewEncoder(w)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	return e.Encode(doc)
}

// effort is the flag of that name.
type effort struct{ value *string }

func (e *effort) String() string {
	if e.value == nil {
		return ""
	}
	return *e.value
}

func (e *effort) Type() string { return "effort" }

func (e *effort) Set(s string) error {
	if _, ok := gram.Efforts(s); !ok {
		return errors.New("write low, normal or high")
	}
	*e.value = s
	return nil
}
