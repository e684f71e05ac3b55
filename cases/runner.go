package cases

import (
	"context"
	"errors"
	"fmt"
	"runtime"
	"strings"
	"sync"
	"time"

	"creaseproof/identity"
)

// Options say how claims are decided.
type Options struct {
	identity.Options

	Only    []string      // claims whose name contains one of these; none means all
	Timeout time.Duration // for all claims together; 0 means no end

	// Report is called with each result as soon as those before it are there,
	// from one goroutine.
	Report func(*Result)
}

// grace is how long a claim that was told to stop may take to do so; after
// that it is left behind.
const grace = 300 * time.Millisecond

// Selected reports whether a name is one of those asked for.
func (o *Options) Selected(name string) bool {
	if len(o.Only) == 0 {
		return true
	}
	for _, part := range o.Only {
		if strings.Contains(name, part) {
			return true
		}
	}
	return false
}

// Check decides the claims of the cases, several at once, Jobs of them or as
// many as there are cores. No verdict depends on that number.
//
// When the context ends, Check returns soon with the claims that were decided
// by then. A claim that is not decided when Timeout is over is open. A panic
// while a claim is decided makes that claim open, and no other.
func Check(ctx context.Context, list []*Case, opt Options) *Outcome {
	return check(ctx, list, opt, identity.Decide)
}

type decide func(context.Context, *identity.Claim, identity.Options) (*identity.Record, error)

func check(ctx context.Context, list []*Case, opt Options, decide decide) *Outcome {
	var todo []*Result
	for _, c := range list {
		for _, cl := range c.Claims {
			if opt.Selected(cl.Name) {
				todo = append(todo, &Result{Case: c, Claim: cl})
			}
		}
	}
	jobs := opt.Jobs
	if jobs <= 0 {
		jobs = runtime.GOMAXPROCS(0)
	}
	inner, cancel := ctx, context.CancelFunc(func() {})
	if opt.Timeout > 0 {
		inner, cancel = context.WithTimeout(ctx, opt.Timeout)
	}
	defer cancel()

	next := make(chan int)
	ended := make(chan ended, len(todo)) // never blocks, even with nobody left to listen
	var workers sync.WaitGroup
	for range min(jobs, len(todo)) {
		workers.Go(func() {
			for i := range next {
				ended <- attempt(inner, todo[i].Claim, opt.Options, decide, i)
			}
		})
	}
	go func() {
		defer close(next)
		for i := range todo {
			select {
			case next <- i:
			case <-inner.Done():
				return
			}
		}
	}()
	go func() {
		workers.Wait()
		close(ended)
	}()

	out := &Outcome{}
	collect(inner, todo, ended, func(r *Result) {
		out.Results = append(out.Results, r)
		if opt.Report != nil {
			opt.Report(r)
		}
	})
	// What is left was not decided, either because ctx ended or at the timeout.
	out.Interrupted = ctx.Err() != nil && len(out.Results) < len(todo)
	for _, r := range todo[len(out.Results):] {
		switch {
		case r.Record != nil || r.Err != nil:
		case out.Interrupted:
			continue
		default:
			r.Record = &identity.Record{
				Claim: r.Claim.Name, Verdict: identity.Open,
				Reason: fmt.Sprintf("not decided within the %v allowed", opt.Timeout),
			}
		}
		out.Results = append(out.Results, r)
		if opt.Report != nil {
			opt.Report(r)
		}
	}
	return out
}

// ended is what a worker hands back.
type ended struct {
	index   int
	record  *identity.Record
	err     error
	elapsed time.Duration
	failed  bool
}

// collect takes what the workers hand back and emits the results that have
// none missing before them. Once ctx ends it waits for the workers no longer
// than the grace, and emits nothing after the first result that is missing.
func collect(ctx context.Context, todo []*Result, from <-chan ended, emit func(*Result)) {
	done := ctx.Done()
	var late <-chan time.Time
	emitted := 0
	for {
		select {
		case e, ok := <-from:
			if !ok {
				return
			}
			r := todo[e.index]
			r.Record, r.Elapsed, r.Failed = e.record, e.elapsed, e.failed
			if e.err != nil {
				r.Err = r.Case.Place(e.err, r.Claim.pos)
			}
			for emitted < len(todo) && (todo[emitted].Record != nil || todo[emitted].Err != nil) {
				emit(todo[emitted])
				emitted++
			}
		case <-done:
			done = nil
			timer := time.NewTimer(grace)
			defer timer.Stop()
			late = timer.C
		case <-late:
			return
		}
	}
}

// attempt decides one claim. A claim stopped by the context comes back with
// neither a record nor an error.
func attempt(ctx context.Context, c *Claim, opt identity.Options, decide decide, index int) (e ended) {
	start := time.Now()
	defer func() {
		e.index, e.elapsed = index, time.Since(start)
		if p := recover(); p != nil {
			e.failed, e.err = true, nil
			e.record = &identity.Record{Claim: c.Name, Verdict: identity.Open, Reason: "internal error: " + clip(fmt.Sprint(p), 300)}
		}
	}()
	if ctx.Err() != nil {
		return e
	}
	record, err := decide(ctx, c.Claim, opt)
	switch {
	case err == nil:
		e.record = record
	case ctx.Err() != nil && (errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded)):
	default:
		e.err = err
	}
	return e
}
