package main

import (
	"context"
	"time"

	"creaseproof/cases"
	"creaseproof/cases/run"

	"github.com/spf13/cobra"
)

func newLimit(s streams) *cobra.Command {
	var c common
	var evidence string
	cmd := &cobra.Command{
		Use:   "limit [CASE...]",
		Short: "Compare energies of smooth approximations with the jump energy as eps falls",
		Long: `Integrate the energy of smooth approximations at a falling sequence of eps, and
compare it with the jump energy: the one-dimensional profile of a planar wall,
the smooth front of branches, or a combination of branches convolved in space
with a kernel of radius width eps, where branches are evaluated up to that
distance outside of the domain.

Shown for each eps are the energy, its two parts R^2/(2 eps) (compression) and
eps L^2/2 (bending; of another energy, what it is without second derivatives and
the rest), eps times the integral of the curvature K, and the gap to the jump energy; below, the order in eps at which the gap falls, with the
standard error of the fit, and the energy extrapolated to eps = 0. The outcome is

  sharp     the relative gap at the smallest eps is as small as is asked
  above     the limit is above the jump energy: the approximation is not optimal
  below     the limit is below it: the domain or the claimed energy is not right
  infinite  the approximation has infinite energy
  open      none of these can be said

and expect in the case file says which is expected (sharp otherwise). All of it
is floating-point arithmetic and proves nothing.

With --evidence a file is written for each approximation as soon as it is shown:
the case and the numbers, which audit repeats.

A CASE is a file, a folder (all files *.toml in it), the name of a built-in case,
or - for standard input; without one, every built-in case is taken.`,
		Example: `  creaseproof limit mine.toml
  creaseproof limit limit-walls --only "exact profile" --json
  creaseproof limit mine.toml --evidence numbers
  creaseproof limit`,
		ValidArgsFunction: completeCase,
		RunE: func(cmd *cobra.Command, args []string) error {
			defer c.begin()()
			say := &complaints{w: s.err}
			opt := run.LimitOptions{Only: c.only, Timeout: time.Duration(c.timeout), Jobs: c.jobs}
			it := items{"limit", "limits", "approximation", "approximations", c.only, func(k *cases.Case) int { return countLimit(k, &opt) }}
			list, bad, err := it.chosen(cmd.Context(), args, s, say)
			if err != nil {
				return err
			}
			return limitsOf(cmd.Context(), newBatch(it, request{json: c.json, bad: bad, evidence: evidence}, s, say, list), opt)
		},
	}
	c.flags(cmd, "limits")
	cmd.Flags().StringVar(&evidence, "evidence", "", "write into the `folder` what audit can verify or repeat")
	return cmd
}

func countLimit(c *cases.Case, opt *run.LimitOptions) int {
	n := 0
	for i := range c.File.Limits {
		if opt.Selected(c.File.Limits[i].Name) {
			n++
		}
	}
	return n
}

func limitsOf(ctx context.Context, b *batch, opt run.LimitOptions) error {
	text := &limitText{sheet: sheet{w: b.s.out, style: style(b.s.colour), width: b.s.width}}
	opt.Report = func(r *run.LimitResult) {
		b.report(r.Limit.Name, func() { text.result(r) }, r.Err)
		if b.evidence != nil {
			b.evidence.Limit(r)
		}
	}
	out := run.Limit(ctx, b.list, opt)
	return b.end(out, out.Interrupted, out.Document(b.list), &text.sheet, func() { text.summary(out, b.total(b.list), b.bad) })
}
