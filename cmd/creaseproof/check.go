package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"time"

	"creaseproof/cases"
	"creaseproof/identity"

	"github.com/spf13/cobra"
)

func newCheck(s streams) *cobra.Command {
	var c common
	opt := cases.Options{Options: identity.DefaultOptions()}
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
  creaseproof check mine.toml --samples 5000000 --seed 7 --timeout 60`,
		RunE: func(cmd *cobra.Command, args []string) error {
			end, err := c.begin()
			if err != nil {
				return err
			}
			defer end()
			if opt.Samples < 1 {
				return errors.New("--samples: write the number of random jets to draw, at least 1")
			}
			opt.Only, opt.Timeout, opt.Jobs = c.only, time.Duration(c.timeout), c.jobs
			list, bad, err := load(cmd.Context(), args, s)
			if err != nil {
				return err
			}
			if list = selected(list, &opt); len(list) == 0 && len(opt.Only) > 0 && !bad {
				return fmt.Errorf("no claim has a name that contains %q", opt.Only)
			}
			return check(cmd, list, opt, c.json, bad, len(args) == 0, s)
		},
	}
	c.flags(cmd, "claims")
	cmd.Flags().Uint64Var(&opt.Seed, "seed", opt.Seed, "`number` that the random samples and searches start from")
	cmd.Flags().Int64Var(&opt.Samples, "samples", opt.Samples, "random jets to draw for an inequality that is not decided exactly")
	return cmd
}

// selected are the cases that have a claim of the names asked for.
func selected(list []*cases.Case, opt *cases.Options) []*cases.Case {
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

func check(cmd *cobra.Command, list []*cases.Case, opt cases.Options, asJSON, bad, all bool, s streams) error {
	p := newProgress(s, total(list, &opt))
	opt.Progress = p.inside
	text := &checkText{sheet: sheet{w: s.out, style: style(s.colour), width: s.width}, opt: &opt}
	opt.Report = func(r *cases.Result) {
		p.clear()
		if r.Err != nil {
			complain(s.err, r.Err)
		} else if !asJSON {
			text.result(r)
		}
		p.step()
	}
	out := cases.Check(cmd.Context(), list, opt)
	p.clear()
	if asJSON {
		if err := writeJSON(s.out, out.Document(list)); err != nil {
			return err
		}
	} else {
		if !all {
			text.without(list)
		}
		text.summary(out, total(list, &opt))
	}
	return finish(s, out.Interrupted, bad || out.Faulty(), out.Met())
}

func total(list []*cases.Case, opt *cases.Options) int {
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
