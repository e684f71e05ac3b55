package adversary

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"runtime"
	"sync"
)

// Problem is a search for a point of negative margin in Dim real coordinates.
// The functions are called from several goroutines at once.
type Problem struct {
	Dim int

	// Value is the margin at x, which it does not keep or change. NaN and
	// infinite values count as large.
	Value func(x []float64) float64

	// Gradient stores the gradient of Value at x in grad. Where it is nil
	// central differences are used, which resolve violations down to a margin
	// of about -1e-9.
	Gradient func(grad, x []float64)

	// Starts stores start i, counted from 0, in x. It is deterministic: the
	// worst samples first, say, and then draws from a generator seeded with i.
	Starts func(i int, x []float64)

	// Scale holds a typical positive size of each coordinate; nil means 1.
	Scale []float64

	// Lower and Upper, nil or of length Dim, bound the coordinates; infinite
	// entries stand for no bound. The descents stay within, starts are moved
	// within, and so are the rational points given to Verify, except that a
	// bound itself may be tried: Verify must refuse it where it is excluded.
	Lower, Upper []float64

	// Verify reports, by exact arithmetic, whether x is a counterexample. It
	// does not keep or change x.
	Verify func(x []*big.Rat) bool

	// Polish, where not nil, returns the exact minimiser of the gap in
	// coordinate i with the others fixed, and false where there is none.
	Polish func(x []*big.Rat, i int) (*big.Rat, bool)
}

// Options are budgets of work. Zero values stand for the defaults.
type Options struct {
	Seed        uint64 // of the evolution strategy
	Starts      int    // number of starts: 64
	Iterations  int    // of one descent: 200
	Evaluations int    // calls of Value and Gradient altogether, checked after each batch: 20,000,000
	Checks      int    // calls of Verify for one start: 400; as many again to simplify a witness
	Jobs        int    // goroutines: the number of processors; the result does not depend on it
}

func (o Options) withDefaults() Options {
	set := func(v *int, def int) {
		if *v <= 0 {
			*v = def
		}
	}
	set(&o.Starts, 64)
	set(&o.Iterations, 200)
	set(&o.Evaluations, 20_000_000)
	set(&o.Checks, 400)
	set(&o.Jobs, runtime.GOMAXPROCS(0))
	return o
}

// Result is the outcome of a search. The counts and the best point are those of
// the starts up to the one that succeeded, or of all that were made.
type Result struct {
	Witness     []*big.Rat // nil if none was found; accepted by Verify
	BestMargin  float64    // least value met, in floating point: no proof of anything
	BestPoint   []float64
	Starts      int
	Iterations  int
	Evaluations int
	Checks      int
}

// batch is the number of starts between which success and budgets are looked at.
const batch = 8

// Search looks for a witness. Where ctx ends, it returns the result of the
// batches completed, and the error of ctx. Panics of the functions of p are
// not recovered.
func Search(ctx context.Context, p Problem, opts Options) (Result, error) {
	best := Result{BestMargin: large}
	if err := p.check(); err != nil {
		return best, fmt.Errorf("adversary: %w", err)
	}
	o := opts.withDefaults()
	for first := 0; first < o.Starts; first += batch {
		if best.Evaluations >= o.Evaluations {
			break
		}
		n := min(batch, o.Starts-first)
		trials, err := runBatch(ctx, &p, o, first, n)
		if err != nil {
			return best, fmt.Errorf("adversary: after %d starts: %w", best.Starts, err)
		}
		for _, t := range trials {
			best.Starts++
			best.Iterations += t.Iterations
			best.Evaluations += t.Evaluations
			best.Checks += t.Checks
			if t.BestMargin < best.BestMargin {
				best.BestMargin, best.BestPoint = t.BestMargin, t.BestPoint
			}
			if t.Witness != nil {
				best.Witness = t.Witness
				return best, nil
			}
		}
	}
	return best, nil
}

func (p *Problem) check() error {
	switch {
	case p.Dim < 1:
		return fmt.Errorf("dimension %d, want at least 1", p.Dim)
	case p.Value == nil || p.Starts == nil || p.Verify == nil:
		return errors.New("the functions Value, Starts and Verify are required")
	}
	for _, s := range [][]float64{p.Scale, p.Lower, p.Upper} {
		if s != nil && len(s) != p.Dim {
			return fmt.Errorf("%d scales or bounds for %d coordinates", len(s), p.Dim)
		}
	}
	for i, s := range p.Scale {
		if !(s > 0 && s < large) {
			return fmt.Errorf("scale %v of coordinate %d is not positive and finite", s, i)
		}
	}
	for i := range p.Dim {
		if lo, hi := p.bounds(i); !(lo < hi) {
			return fmt.Errorf("bounds %v and %v of coordinate %d", lo, hi, i)
		}
	}
	return nil
}

// runBatch makes n trials from start first on. Once one has succeeded those of
// higher index are stopped: they cannot matter.
func runBatch(ctx context.Context, p *Problem, o Options, first, n int) ([]Result, error) {
	trials := make([]Result, n)
	stops := make([]context.CancelFunc, n)
	contexts := make([]context.Context, n)
	for k := range n {
		contexts[k], stops[k] = context.WithCancel(ctx)
		defer stops[k]()
	}
	work := make(chan int, n)
	for k := range n {
		work <- k
	}
	close(work)
	var wg sync.WaitGroup
	for range min(o.Jobs, n) {
		wg.Go(func() {
			for k := range work {
				if contexts[k].Err() != nil {
					continue
				}
				trials[k] = newTrial(contexts[k], p, o, first+k).run()
				if trials[k].Witness != nil {
					for _, stop := range stops[k+1:] {
						stop()
					}
				}
			}
		})
	}
	wg.Wait()
	for k := range n {
		if trials[k].Witness != nil {
			return trials[:k+1], nil
		}
		if ctx.Err() != nil {
			return nil, ctx.Err()
		}
	}
	return trials, nil
}
