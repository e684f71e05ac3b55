package run

import (
	"context"
	"errors"
	"fmt"
	"time"

	"creaseproof/cases"
	"creaseproof/entropy/source"
	"creaseproof/identity"
)

// Options say how claims are decided.
type Options struct {
	identity.Options

	Only    []string      // claims whose name contains one of these; none means all
	Timeout time.Duration // for all claims together; 0 means no end

	// Report is called with each result as soon as those before it are there,
	// from the goroutine of Check.
	Report func(*Result)
}

// Selected reports whether a claim of that name is asked for.
func (o *Options) Selected(name string) bool { return selected(o.Only, name) }

// Check decides the claims of the cases, several at once, Jobs of them or as
// many as there are cores. No verdict depends on that number.
//
// When the context ends, Check returns soon with the claims that were decided
// by then. A claim that is not decided when Timeout is over is open. A panic
// while a claim is decided makes that claim open, and no other.
func Check(ctx context.Context, list []*cases.Case, opt Options) *Outcome {
	return check(ctx, list, opt, identity.Decide)
}

type decide func(context.Context, *identity.Claim, identity.Options) (*identity.Record, error)

func check(ctx context.Context, list []*cases.Case, opt Options, decide decide) *Outcome {
	type todo struct {
		c     *cases.Case
		claim *cases.Claim
	}
	var claims []todo
	for _, c := range list {
		for _, cl := range c.Claims {
			if opt.Selected(cl.Name) {
				claims = append(claims, todo{c, cl})
			}
		}
	}
	inner, cancel := limited(ctx, opt.Timeout)
	defer cancel()
	out := &Outcome{}
	emit := func(_ int, r *Result) {
		out.Results = append(out.Results, r)
		if opt.Report != nil {
			opt.Report(r)
		}
	}
	results, emitted := pool(inner, len(claims), opt.Jobs, func(i int) *Result {
		return attempt(inner, claims[i].c, claims[i].claim, opt.Options, decide)
	}, emit)
	// What is left was not decided, or comes after what was not: either
	// because ctx ended or at the timeout.
	out.Interrupted = ctx.Err() != nil && emitted < len(claims)
	for i := emitted; i < len(claims); i++ {
		r := results[i]
		if r == nil && out.Interrupted {
			continue
		}
		if r == nil {
			r = &Result{Case: claims[i].c, Claim: claims[i].claim, Record: &identity.Record{
				Claim: claims[i].claim.Name, Verdict: identity.Open,
				Reason: fmt.Sprintf("not decided within the %v allowed", opt.Timeout),
			}}
		}
		emit(i, r)
	}
	return out
}

// attempt decides one claim; nil where the context stopped it.
func attempt(ctx context.Context, c *cases.Case, claim *cases.Claim, opt identity.Options, decide decide) (r *Result) {
	start := time.Now()
	defer func() {
		if p := recover(); p != nil {
			r = &Result{Case: c, Claim: claim, Failed: true, Record: &identity.Record{
				Claim: claim.Name, Verdict: identity.Open, Reason: internal(p),
			}}
		}
		if r != nil {
			r.Elapsed = time.Since(start)
		}
	}()
	if ctx.Err() != nil {
		return nil
	}
	record, err := decide(ctx, claim.Claim, opt)
	switch {
	case err == nil:
		return &Result{Case: c, Claim: claim, Record: record}
	case stopped(ctx, err):
		return nil
	}
	return &Result{Case: c, Claim: claim, Err: met(c.Place(err, claim.Pos), claim)}
}

// met adds the name of the claim to an error that stands on another line, such
// as in a named formula.
func met(err error, claim *cases.Claim) error {
	var placed *source.Error
	if !errors.As(err, &placed) || placed.Line == claim.Pos.Line {
		return err
	}
	e := *placed
	e.Problem = fmt.Sprintf("%s (in the claim %q)", cases.Clip(e.Problem, 300), cases.Clip(claim.Name, 60))
	return &e
}

// stopped reports whether an error says only that the context ended.
func stopped(ctx context.Context, err error) bool {
	return ctx.Err() != nil && (errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded))
}

// internal is the reason given for a failure of the program itself.
func internal(p any) string { return "internal error: " + cases.Clip(fmt.Sprint(p), 300) }
