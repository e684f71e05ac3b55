package main

import (
	"context"
	"fmt"
	"time"

	"creaseproof/cases"
	"creaseproof/cases/run"

	"github.com/spf13/cobra"
)

func newEnergy(s streams) *cobra.Command {
	var c common
	var evidence string
	var certify bool
	cmd := &cobra.Command{
		Use:   "energy [CASE...]",
		Short: "Integrate the jump energy over each surface",
		Long: `Integrate the jump energy over each surface of the cases, and compare it with the
energy that the case claims.

An energy comes with an estimate of its error. A claimed energy is supported where
the number agrees within that; a number computed in floating point proves nothing.
With --certify the energies of polygons, patches and graphs are enclosed by
outward-rounded arithmetic. A claim is proved where the energy differs from it by no
more than the case allows (within, else 1e-9 of it), and refuted where it differs by
more than within, or without within is not equal; where there is no enclosure the
reason is given. What a patch covers twice counts twice.
A surface on which a check fails has no energy, and is wrong input: the traces off
the well, u discontinuous across it, the jump of the gradient not normal to it.

With --evidence a file is written for each energy as soon as it is shown: the case, the
numbers, and what they rest on. audit verifies enclosures and exact energies,
and repeats the others.

A CASE is a file, a folder (all files *.toml in it), the name of a built-in case,
or - for standard input; without one, every built-in case is taken.`,
		Example: `  creaseproof energy mine.toml
  creaseproof energy crease-paraboloid --only "paraboloid front" --json
  creaseproof energy mine.toml --certify --evidence proofs
  creaseproof energy`,
		ValidArgsFunction: completeCase,
		RunE: func(cmd *cobra.Command, args []string) error {
			defer c.begin()()
			say := &complaints{w: s.err}
			opt := run.EnergyOptions{Only: c.only, Timeout: time.Duration(c.timeout), Jobs: c.jobs}
			opt.Certify = certify
			it := items{"surface", "surfaces", "energy", "energies", c.only, func(k *cases.Case) int { return countEnergy(k, &opt) }}
			list, bad, err := it.chosen(cmd.Context(), args, s, say)
			if err != nil {
				return err
			}
			return energyOf(cmd.Context(), newBatch(it, request{json: c.json, bad: bad, evidence: evidence}, s, say, list), opt)
		},
	}
	c.flags(cmd, "surfaces")
	cmd.Flags().BoolVar(&certify, "certify", false, "enclose the energy: a claim is then proved or refuted")
	cmd.Flags().StringVar(&evidence, "evidence", "", "write into the `folder` what audit can verify or repeat")
	return cmd
}

func countEnergy(c *cases.Case, opt *run.EnergyOptions) int {
	n := 0
	for i := range c.File.Surfaces {
		if opt.Selected(c.File.Surfaces[i].Name) {
			n++
		}
	}
	return n
}

func energyOf(ctx context.Context, b *batch, opt run.EnergyOptions) error {
	text := &energyText{sheet: sheet{w: b.s.out, style: style(b.s.colour), width: b.s.width}, opt: &opt, together: b.s.together}
	opt.Report = func(r *run.EnergyResult) {
		b.report(r.Surface.Name, func() { text.result(r) }, r.Err)
		if b.evidence != nil {
			b.evidence.Surface(context.WithoutCancel(ctx), r, opt.Certify)
		}
	}
	out := run.Energy(ctx, b.list, opt)
	return b.end(out, out.Interrupted, out.Document(b.list), &text.sheet, func() { text.summary(out, b.total(b.list), b.bad) })
}

// finish is the exit status of a command that ran.
func finish(s streams, interrupted, bad, met bool) error {
	switch {
	case interrupted:
		fmt.Fprintln(s.err, "creaseproof: interrupted")
		return status(exitInterrupted)
	case bad:
		return status(exitBadInput)
	case !met:
		return status(exitNotMet)
	}
	return nil
}
