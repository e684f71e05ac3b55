package main

import (
	"context"
	"fmt"
	"time"

	"creaseproof/cases"
	"creaseproof/cases/run"

	"github.com/spf13/cobra"
)

func newLimit(s streams) *cobra.Command {
	var c common
	cmd := &cobra.Command{
		Use:   "limit [CASE...]",
		Short: "Compare energies of smooth approximations with the jump energy as eps falls",
		Long: `Integrate the energy of smooth approximations at a falling sequence of eps, and
compare it with the jump energy: the one-dimensional profile of a planar wall,
the smooth front of branches, or their mollified maximum or minimum.

Shown for each eps are the energy, its two parts R^2/(2 eps) (compression) and
eps L^2/2 (bending), eps times the integral of the curvature K, and the gap to
the jump energy; below, the order in eps at which the gap falls, with the
standard error of the fit, and the energy extrapolated to eps = 0. The outcome is

  sharp     the relative gap at the smallest eps is as small as is asked
  above     the limit is above the jump energy: the approximation is not optimal
  below     the limit is below it: the domain or the claimed energy is not right
  infinite  the approximation has infinite energy
  open      none of these can be said

and expect in the case file says which is expected (sharp otherwise). All of it
is floating-point arithmetic and proves nothing.

A CASE is a file, a folder (all files *.toml in it), the name of a built-in case,
or - for standard input; without one, every built-in case is taken.`,
		Example: `  creaseproof limit mine.toml
  creaseproof limit limit-walls --only "exact profile" --json
  creaseproof limit`,
		ValidArgsFunction: completeCase,
		RunE: func(cmd *cobra.Command, args []string) error {
			defer c.begin()()
			say := &complaints{w: s.err}
			list, bad, err := load(cmd.Context(), args, s.in, say)
			if err != nil {
				return err
			}
			opt := run.LimitOptions{Only: c.only, Timeout: time.Duration(c.timeout), Jobs: c.jobs}
			kept := list[:0]
			for _, k := range list {
				if countLimits(k, &opt) > 0 || len(c.only) == 0 && len(args) > 0 {
					kept = append(kept, k)
				}
			}
			if len(kept) == 0 && len(c.only) > 0 && bad == 0 {
				return fmt.Errorf("no limit has a name that contains %q", c.only)
			}
			return limits(cmd.Context(), kept, opt, s, say, request{json: c.json, bad: bad})
		},
	}
	c.flags(cmd, "limits")
	return cmd
}

func countLimits(c *cases.Case, opt *run.LimitOptions) int {
	n := 0
	for i := range c.File.Limits {
		if opt.Selected(c.File.Limits[i].Name) {
			n++
		}
	}
	return n
}

func limits(ctx context.Context, list []*cases.Case, opt run.LimitOptions, s streams, say *complaints, q request) error {
	total := 0
	for _, c := range list {
		total += countLimits(c, &opt)
	}
	p := newProgress(s, total)
	text := &limitText{sheet: sheet{w: s.out, style: style(s.colour), width: s.width}}
	p.inside("limits", 0, 0)
	opt.Report = func(r *run.LimitResult) {
		p.report(func() {
			if !q.json {
				text.result(r)
			}
			if r.Err != nil {
				say.add(r.Err)
			}
		})
		p.inside(r.Limit.Name, 0, 0)
	}
	out := run.Limit(ctx, list, opt)
	p.end()
	if q.json {
		if err := writeJSON(s.out, out.Document(list)); err != nil {
			return err
		}
	} else {
		for _, c := range list {
			if len(c.File.Limits) == 0 {
				text.header(c)
				fmt.Fprintln(s.out, "  no limits")
			}
		}
		text.summary(out, total, q.bad)
	}
	return finish(s, out.Interrupted, q.bad > 0 || out.Faulty(), out.Met())
}
