package limits

import (
	"errors"
	"sync"

	"creaseproof/quadrature/limit"
)

// integral is what came of one eps.
type integral struct {
	energy limit.Energy
	err    error
	done   bool
	panic  any
}

var errPanic = errors.New("a failure of the program")

// energies integrates the problem at every eps, several at once, each with a
// problem of its own. After an error no further eps is begun; what is not done
// comes after it.
func (r *reader) energies(p *limit.Problem, eps []float64, jobs int) []integral {
	out := make([]integral, len(eps))
	if jobs <= 1 || len(eps) == 1 {
		for i := range eps {
			if out[i] = r.integral(&p, eps[i]); out[i].err != nil {
				break
			}
		}
		return out
	}
	next := make(chan int)
	stop := make(chan struct{})
	var once sync.Once
	var workers sync.WaitGroup
	for range min(jobs, len(eps)) {
		workers.Go(func() {
			var own *limit.Problem
			for i := range next {
				out[i] = r.integral(&own, eps[i])
				if out[i].err != nil {
					once.Do(func() { close(stop) })
				}
			}
		})
	}
	func() {
		defer close(next)
		for i := range eps {
			select {
			case next <- i:
			case <-stop:
				return
			}
		}
	}()
	workers.Wait()
	for _, x := range out {
		if x.panic != nil {
			panic(x.panic) // in the goroutine of the caller
		}
	}
	return out
}

// integral integrates at one eps, and makes the problem if there is none yet. A
// panic is kept for the goroutine of the caller.
func (r *reader) integral(p **limit.Problem, eps float64) (x integral) {
	defer func() {
		if e := recover(); e != nil {
			x.panic, x.done, x.err = e, true, errPanic
		}
	}()
	x.done = true
	if *p == nil {
		if *p, x.err = r.problem(); x.err != nil {
			*p = nil
			return x
		}
	}
	x.energy, x.err = (*p).Integrate(r.ctx, eps)
	return x
}
