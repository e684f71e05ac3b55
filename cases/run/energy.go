package run

import (
	"context"
	"fmt"
	"slices"
	"time"

	"creaseproof/cases"

	"creaseproof/cases/casefile"
	"creaseproof/cases/creases"
	"creaseproof/identity"
)

// EnergyOptions say how surfaces are integrated.
type EnergyOptions struct {
	creases.Options

	Jobs    int           // cores to use, 0 for all; no result depends on it
	Only    []string      // surfaces whose name contains one of these; none means all
	Timeout time.Duration // for all surfaces together; 0 means no end

	// Report is called with each result as soon as those before it are there,
	// from the goroutine of Energy.
	Report func(*EnergyResult)
}

// Selected reports whether a surface of that name is asked for.
func (o *EnergyOptions) Selected(name string) bool { return selected(o.Only, name) }

// EnergyResult is what came of one surface: one value for each combination of
// its parameters. An error is a mistake in the file with its place; values
// found before it are kept.
type EnergyResult struct {
	Case    *cases.Case
	Surface *casefile.Surface
	Values  []creases.Result
	Err     error // of a formula or a key; or the first refusal that was not expected
	Failed  bool  // inside the program; the last value is open and says so

	partial bool // the context ended before the last value
}

// Met reports whether all values are as the file expects.
func (r *EnergyResult) Met() bool {
	for _, v := range r.Values {
		if !v.Met {
			return false
		}
	}
	return r.Err == nil && !r.Failed
}

// Unread reports whether the surface, or one of its values, means nothing: there
// is an error, and no value that shows it.
func (r *EnergyResult) Unread() bool {
	return r.Err != nil && !slices.ContainsFunc(r.Values, func(v creases.Result) bool { return !v.Met })
}

// EnergyOutcome is what came of all surfaces, in the order of the cases and of
// their surfaces.
type EnergyOutcome struct {
	Results     []*EnergyResult
	Interrupted bool // the context ended; what was not computed is left out
}

// Faulty reports whether some surface means nothing or was refused.
func (o *EnergyOutcome) Faulty() bool {
	for _, r := range o.Results {
		if r.Err != nil {
			return true
		}
	}
	return false
}

// Met reports whether every surface is as the file expects.
func (o *EnergyOutcome) Met() bool {
	for _, r := range o.Results {
		if !r.Met() {
			return false
		}
	}
	return true
}

// Energy integrates over the surfaces of the cases, several at once. It ends
// early as Check does: at an interruption with the values found by then, at
// the timeout with values that are open.
func Energy(ctx context.Context, list []*cases.Case, opt EnergyOptions) *EnergyOutcome {
	return energy(ctx, list, opt, func(ctx context.Context, c *cases.Case, s *casefile.Surface) ([]creases.Result, error) {
		return creases.New(c.Setting, c.File.Path).Evaluate(ctx, s, opt.Options)
	})
}

type integrate func(context.Context, *cases.Case, *casefile.Surface) ([]creases.Result, error)

func energy(ctx context.Context, list []*cases.Case, opt EnergyOptions, integrate integrate) *EnergyOutcome {
	type todo struct {
		c *cases.Case
		s *casefile.Surface
	}
	var surfaces []todo
	for _, c := range list {
		for i := range c.File.Surfaces {
			if s := &c.File.Surfaces[i]; opt.Selected(s.Name) {
				surfaces = append(surfaces, todo{c, s})
			}
		}
	}
	inner, cancel := limited(ctx, opt.Timeout)
	defer cancel()
	out := &EnergyOutcome{}
	cut := false
	emit := func(_ int, r *EnergyResult) {
		if r.partial {
			if ctx.Err() != nil {
				cut = true
			} else {
				r.Values = append(r.Values, unfinished(r.Surface, fmt.Sprintf("not computed within the %v allowed", opt.Timeout)))
			}
		}
		out.Results = append(out.Results, r)
		if opt.Report != nil {
			opt.Report(r)
		}
	}
	results, emitted := pool(inner, len(surfaces), opt.Jobs, func(i int) *EnergyResult {
		return surface(inner, surfaces[i].c, surfaces[i].s, integrate)
	}, emit)
	out.Interrupted = ctx.Err() != nil && emitted < len(surfaces)
	for i := emitted; i < len(surfaces); i++ {
		r := results[i]
		if r == nil && out.Interrupted {
			continue
		}
		if r == nil {
			r = &EnergyResult{Case: surfaces[i].c, Surface: surfaces[i].s, partial: true}
		}
		emit(i, r)
	}
	out.Interrupted = out.Interrupted || cut
	return out
}

// surface integrates over one surface; nil where the context stopped it before
// the first value.
func surface(ctx context.Context, c *cases.Case, s *casefile.Surface, integrate integrate) (r *EnergyResult) {
	defer func() {
		if p := recover(); p != nil {
			r = &EnergyResult{Case: c, Surface: s, Failed: true, Values: []creases.Result{unfinished(s, internal(p))}}
		}
	}()
	if ctx.Err() != nil {
		return nil
	}
	if combinations(s) > maxCombinations {
		err := c.Fault(s.Values[0].Name.Pos, "make a surface for each part of them", "the values have more than %d combinations", maxCombinations)
		return &EnergyResult{Case: c, Surface: s, Err: err}
	}
	values, err := integrate(ctx, c, s)
	r = &EnergyResult{Case: c, Surface: s, Values: values}
	switch {
	case err == nil:
		r.Err = refusal(c, s, values)
	case !stopped(ctx, err):
		r.Err = c.Place(err, s.Pos)
	case len(values) == 0:
		return nil
	default:
		r.partial = true
	}
	return r
}

// maxCombinations bounds how often one surface is repeated.
const maxCombinations = 10_000

// combinations is how often a surface is repeated, at most one more than is
// allowed.
func combinations(s *casefile.Surface) int {
	n := 1
	for _, v := range s.Values {
		if n *= len(v.List); n > maxCombinations {
			return maxCombinations + 1
		}
	}
	return n
}

// refusal is an error at the place of a surface that has no energy because its
// shape or its traces are wrong, unless the file expects that.
func refusal(c *cases.Case, s *casefile.Surface, values []creases.Result) error {
	for _, v := range values {
		if v.Energy != nil || v.Met {
			continue
		}
		with := ""
		for _, p := range s.Values {
			with += fmt.Sprintf(", %s = %s", p.Name.S, v.Values[p.Name.S])
		}
		return c.Fault(s.Pos, "", "%q%s has no energy: %s", cases.Clip(s.Name, 40), cases.Clip(with, 80), v.Reason)
	}
	return nil
}

// unfinished is a value that was not computed.
func unfinished(s *casefile.Surface, reason string) creases.Result {
	expected := identity.Supported
	if s.Expect != nil {
		expected = identity.Verdict(s.Expect.S)
	}
	return creases.Result{Surface: s.Name, Verdict: identity.Open, Expected: expected, Reason: reason}
}
