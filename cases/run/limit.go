package run

import (
	"context"
	"fmt"
	"runtime"
	"time"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
	"creaseproof/cases/limits"
)

// LimitOptions say how approximations are integrated.
type LimitOptions struct {
	Jobs    int           // cores to use, 0 for all; no result depends on it
	Only    []string      // limits whose name contains one of these; none means all
	Timeout time.Duration // for all limits together; 0 means no end

	// Report is called with each result as soon as those before it are there,
	// from the goroutine of Limit.
	Report func(*LimitResult)
}

// Selected reports whether a limit of that name is asked for.
func (o *LimitOptions) Selected(name string) bool { return selected(o.Only, name) }

// LimitResult is what came of one limit: one value for each combination of its
// parameters. An error is a mistake in the file with its place; values found
// before it are kept.
type LimitResult struct {
	Case   *cases.Case
	Limit  *casefile.Limit
	Values []limits.Value
	Err    error
	Failed bool // inside the program; the last value says so

	partial bool // the context ended before the last value
}

// Met reports whether all values are as the file expects.
func (r *LimitResult) Met() bool {
	for _, v := range r.Values {
		if !v.Met {
			return false
		}
	}
	return r.Err == nil && !r.Failed
}

// LimitOutcome is what came of all limits, in the order of the cases and of
// their limits.
type LimitOutcome struct {
	Results     []*LimitResult
	Interrupted bool // the context ended; what was not computed is open
}

// Faulty reports whether some limit means nothing.
func (o *LimitOutcome) Faulty() bool {
	for _, r := range o.Results {
		if r.Err != nil {
			return true
		}
	}
	return false
}

// Met reports whether every limit is as the file expects.
func (o *LimitOutcome) Met() bool {
	for _, r := range o.Results {
		if !r.Met() {
			return false
		}
	}
	return true
}

// Limit integrates the approximations of the cases, several at once. It ends
// early as Energy does: at an interruption with the energies found by then, at
// the timeout with values that are open.
func Limit(ctx context.Context, list []*cases.Case, opt LimitOptions) *LimitOutcome {
	return integrateLimits(ctx, list, opt, nil)
}

type approximate func(context.Context, *cases.Case, *casefile.Limit) ([]limits.Value, error)

func integrateLimits(ctx context.Context, list []*cases.Case, opt LimitOptions, approximate approximate) *LimitOutcome {
	var todo []*LimitResult
	for _, c := range list {
		for i := range c.File.Limits {
			if l := &c.File.Limits[i]; opt.Selected(l.Name) {
				todo = append(todo, &LimitResult{Case: c, Limit: l})
			}
		}
	}
	if approximate == nil {
		jobs := opt.Jobs
		if jobs <= 0 {
			jobs = runtime.GOMAXPROCS(0)
		}
		jobs = max(1, jobs/max(1, len(todo))) // for each limit
		approximate = func(ctx context.Context, c *cases.Case, l *casefile.Limit) ([]limits.Value, error) {
			return limits.Evaluate(ctx, c, l, jobs)
		}
	}
	inner, cancel := limited(ctx, opt.Timeout)
	defer cancel()
	out := &LimitOutcome{}
	cut := false
	emit := func(_ int, r *LimitResult) {
		if r.partial {
			reason := "interrupted"
			if ctx.Err() != nil {
				cut = true
			} else {
				reason = fmt.Sprintf("not computed within the %v allowed", opt.Timeout)
			}
			r.cutShort(reason)
		}
		out.Results = append(out.Results, r)
		if opt.Report != nil {
			opt.Report(r)
		}
	}
	results, emitted := pool(inner, len(todo), opt.Jobs, func(i int) *LimitResult {
		return limitOf(inner, todo[i].Case, todo[i].Limit, approximate)
	}, emit)
	out.Interrupted = ctx.Err() != nil && emitted < len(todo)
	for i := emitted; i < len(todo); i++ {
		r := results[i]
		if r == nil {
			r = todo[i]
			r.partial = true
		}
		emit(i, r)
	}
	out.Interrupted = out.Interrupted || cut
	return out
}

// cutShort says that the last value, or the first that is missing, was not
// finished.
func (r *LimitResult) cutShort(reason string) {
	if n := len(r.Values); n == 0 || r.Values[n-1].Complete {
		r.Values = append(r.Values, limits.Empty(r.Limit))
	}
	v := &r.Values[len(r.Values)-1]
	if n := len(v.Eps); n > 0 {
		reason += fmt.Sprintf(", after %d of %d eps", n, len(r.Limit.Eps))
	}
	v.Outcome, v.Met, v.Reason = limits.Undecided, false, reason
}

// limitOf evaluates one limit; nil where the context stopped it before the
// first energy.
func limitOf(ctx context.Context, c *cases.Case, l *casefile.Limit, approximate approximate) (r *LimitResult) {
	defer func() {
		if p := recover(); p != nil {
			r = &LimitResult{Case: c, Limit: l, Failed: true}
			r.cutShort(internal(p))
		}
	}()
	if ctx.Err() != nil {
		return nil
	}
	values, err := approximate(ctx, c, l)
	r = &LimitResult{Case: c, Limit: l, Values: values}
	switch {
	case err == nil:
	case !stopped(ctx, err):
		r.Err = c.Place(err, l.Pos)
	case len(values) == 0:
		return nil
	default:
		r.partial = true
	}
	return r
}
