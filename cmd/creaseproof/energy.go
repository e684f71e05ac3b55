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
more than the case allows (within, else 1e-9 of it), and refuted where the enclosure
misses it; where there is no enclosure the reason is given.
A surface on which a check fails has no energy, and is wrong input: the traces off
the well, u discontinuous across it, the jump of the gradient not normal to it.

A CASE is a file, a folder (all files *.toml in it), the name of a built-in case,
or - for standard input; without one, every built-in case is taken.`,
		Example: `  creaseproof energy mine.toml
  creaseproof energy crease-paraboloid --only "paraboloid front" --json
  creaseproof energy`,
		ValidArgsFunction: completeCase,
		RunE: func(cmd *cobra.Command, args []string) error {
			defer c.begin()()
			say := &complaints{w: s.err}
			list, bad, err := load(cmd.Context(), args, s.in, say)
			if err != nil {
				return err
			}
			opt := run.EnergyOptions{Only: c.only, Timeout: time.Duration(c.timeout), Jobs: c.jobs}
			opt.Certify = certify
			kept := list[:0]
			for _, k := range list {
				if countSurfaces(k, &opt) > 0 || len(c.only) == 0 && len(args) > 0 {
					kept = append(kept, k)
				}
			}
			if len(kept) == 0 && len(c.only) > 0 && bad == 0 {
				return fmt.Errorf("no surface has a name that contains %q", c.only)
			}
			return energy(cmd.Context(), kept, opt, s, say, request{json: c.json, bad: bad})
		},
	}
	c.flags(cmd, "surfaces")
	cmd.Flags().BoolVar(&certify, "certify", false, "enclose the energy: a claim is then proved or refuted")
	return cmd
}

func countSurfaces(c *cases.Case, opt *run.EnergyOptions) int {
	n := 0
	for i := range c.File.Surfaces {
		if opt.Selected(c.File.Surfaces[i].Name) {
			n++
		}
	}
	return n
}

func energy(ctx context.Context, list []*cases.Case, opt run.EnergyOptions, s streams, say *complaints, q request) error {
	total := 0
	for _, c := range list {
		total += countSurfaces(c, &opt)
	}
	p := newProgress(s, total)
	text := &energyText{sheet: sheet{w: s.out, style: style(s.colour), width: s.width}, opt: &opt, together: s.together}
	p.inside("surfaces", 0, 0)
	opt.Report = func(r *run.EnergyResult) {
		p.report(func() {
			if !q.json {
				text.result(r)
			}
			if r.Err != nil {
				say.add(r.Err)
			}
		})
		p.inside(r.Surface.Name, 0, 0)
	}
	out := run.Energy(ctx, list, opt)
	p.end()
	if q.json {
		if err := writeJSON(s.out, out.Document(list)); err != nil {
			return err
		}
	} else {
		for _, c := range list {
			if len(c.File.Surfaces) == 0 {
				text.header(c)
				fmt.Fprintln(s.out, "  no surfaces")
			}
		}
		text.summary(out, total, q.bad)
	}
	return finish(s, out.Interrupted, q.bad > 0 || out.Faulty(), out.Met())
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
