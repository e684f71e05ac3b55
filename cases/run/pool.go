package run

import (
	"context"
	"runtime"
	"strings"
	"sync"
	"time"
)

// grace is how long a piece of work that was told to stop may take to do so;
// after that it is left behind.
const grace = 300 * time.Millisecond

// pool does n pieces of work, jobs of them at once (0 means as many as there
// are cores). Work returns nil where ctx stopped it. The results are emitted
// in order, from this goroutine, each as soon as those before it are there.
//
// Once ctx ends, pool waits for what was begun no longer than the grace. It
// returns all results, nil where there is none, and how many were emitted.
func pool[T any](ctx context.Context, n, jobs int, work func(i int) *T, emit func(i int, x *T)) (results []*T, emitted int) {
	if jobs <= 0 {
		jobs = runtime.GOMAXPROCS(0)
	}
	type ended struct {
		index int
		value *T
	}
	next := make(chan int)
	back := make(chan ended, n) // never blocks, even with nobody left to listen
	var workers sync.WaitGroup
	for range min(jobs, n) {
		workers.Go(func() {
			for i := range next {
				back <- ended{i, work(i)}
			}
		})
	}
	go func() {
		defer close(next)
		for i := range n {
			select {
			case next <- i:
			case <-ctx.Done():
				return
			}
		}
	}()
	go func() {
		workers.Wait()
		close(back)
	}()

	results = make([]*T, n)
	done := ctx.Done()
	var late <-chan time.Time
	for {
		select {
		case e, ok := <-back:
			if !ok {
				return results, emitted
			}
			results[e.index] = e.value
			for emitted < n && results[emitted] != nil {
				emit(emitted, results[emitted])
				emitted++
			}
		case <-done:
			done = nil
			timer := time.NewTimer(grace)
			defer timer.Stop()
			late = timer.C
		case <-late:
			return results, emitted
		}
	}
}

// limited is ctx with an end after the timeout, if that is positive.
func limited(ctx context.Context, timeout time.Duration) (context.Context, context.CancelFunc) {
	if timeout <= 0 {
		return context.WithCancel(ctx)
	}
	return context.WithTimeout(ctx, timeout)
}

// selected reports whether a name contains one of the parts asked for; no
// parts select every name.
func selected(only []string, name string) bool {
	for _, part := range only {
		if strings.Contains(name, part) {
			return true
		}
	}
	return len(only) == 0
}
