package sample

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"
	"sync"
	"sync/atomic"
	"time"

	"creaseproof/entropy/program"
)

// Options says what Run draws.
type Options struct {
	// Seed determines all points, together with the laws and the layout.
	Seed uint64
	// Samples is the number of points.
	Samples int64
	// Jobs is the number of goroutines; 0 means GOMAXPROCS. Results do not
	// depend on it.
	Jobs int
	// Laws are taken in turn, one for each block of program.BlockSize points.
	// None means DefaultLaws.
	Laws []Law
	// Progress, if not nil, is called now and then from one goroutine, and once
	// at the end, with the number of points done and Samples.
	Progress func(done, total int64)
}

// Result is what Run found.
type Result struct {
	// Drawn counts the points; it is the sum of Valid and NonFinite, and equals
	// Options.Samples unless the run was cancelled.
	Drawn int64
	// Valid counts the points where the gap is finite.
	Valid int64
	// NonFinite counts the points where the gap is infinite or not defined.
	NonFinite int64
	// MinMargin is the least margin, +Inf if no point was valid.
	MinMargin float64
	// Best holds the distinct points of least margin, in the order of margin,
	// then block, then lane.
	Best []Point
}

// ErrProgram means that a program does not fit the layout or the task.
var ErrProgram = errors.New("sample: program does not fit")

// Run draws points and returns the keep distinct ones of least margin. Output 0
// of the program is the gap and output 1 the sum of the absolute values of its
// monomials; input i is column i of the layout. If ctx is cancelled, Run
// returns what was found so far with the error of ctx; only then does the
// result depend on time. Run uses floating-point arithmetic and decides
// nothing.
func Run(ctx context.Context, opts Options, layout *Layout, prog *program.Program, keep int) (Result, error) {
	res := Result{MinMargin: math.Inf(1)}
	if prog.NumOutputs() != 2 {
		return res, fmt.Errorf("%w: it has %d outputs, not the gap and the sum of its absolute monomials", ErrProgram, prog.NumOutputs())
	}
	if prog.NumInputs() > layout.Len() {
		return res, fmt.Errorf("%w: it has %d inputs, the layout %d columns", ErrProgram, prog.NumInputs(), layout.Len())
	}
	gap, err := prog.Select(0)
	if err != nil {
		return res, err
	}
	sum, err := prog.Select(1)
	if err != nil {
		return res, err
	}
	laws := opts.Laws
	if len(laws) == 0 {
		laws = DefaultLaws()
	}
	samples := max(opts.Samples, 0)
	blocks := (samples + program.BlockSize - 1) / program.BlockSize
	jobs := opts.Jobs
	if jobs <= 0 {
		jobs = runtime.GOMAXPROCS(0)
	}
	jobs = int(max(1, min(int64(jobs), blocks)))

	var next, done atomic.Int64
	workers := make([]worker, jobs)
	var wg sync.WaitGroup
	for i := range workers {
		w := &workers[i]
		w.init(layout, gap, sum, max(keep, 1))
		wg.Go(func() {
			for ctx.Err() == nil {
				k := next.Add(1) - 1
				if k >= blocks {
					return
				}
				n := int(min(program.BlockSize, samples-k*program.BlockSize))
				w.block(opts.Seed, k, n, laws[k%int64(len(laws))])
				done.Add(int64(n))
			}
		})
	}
	report(&wg, opts.Progress, &done, samples)

	lists := make([]leaders, jobs)
	for i := range workers {
		res.Valid += workers[i].valid
		res.NonFinite += workers[i].nonFinite
		lists[i] = workers[i].best
	}
	res.Drawn = res.Valid + res.NonFinite
	res.Best = merge(lists, max(keep, 1))
	if len(res.Best) > 0 {
		res.MinMargin = res.Best[0].Margin
	}
	if keep <= 0 {
		res.Best = nil
	}
	if res.Drawn < samples {
		return res, ctx.Err()
	}
	return res, nil
}

// report waits for the workers and calls progress meanwhile.
func report(wg *sync.WaitGroup, progress func(done, total int64), done *atomic.Int64, total int64) {
	if progress == nil {
		wg.Wait()
		return
	}
	finished := make(chan struct{})
	go func() {
		wg.Wait()
		close(finished)
	}()
	tick := time.NewTicker(100 * time.Millisecond)
	defer tick.Stop()
	for {
		select {
		case <-tick.C:
			progress(done.Load(), total)
		case <-finished:
			progress(done.Load(), total)
			return
		}
	}
}

// worker is the state of one goroutine.
type worker struct {
	layout       *Layout
	gap, sum     *program.Program
	gapWS, sumWS *program.Workspace
	stream       *Stream
	cols         [][]float64 // the points of a block
	few          [][]float64 // those lanes of it that need a margin
	out          [][]float64 // gap and sum
	lanes        []int
	valid        int64
	nonFinite    int64
	best         leaders
}

func (w *worker) init(l *Layout, gap, sum *program.Program, keep int) {
	*w = worker{
		layout: l,
		gap:    gap, sum: sum,
		gapWS: gap.NewWorkspace(), sumWS: sum.NewWorkspace(),
		stream: NewStream(0, 0),
		cols:   matrix(l.Len(), program.BlockSize),
		few:    matrix(sum.NumInputs(), program.BlockSize),
		out:    matrix(2, program.BlockSize),
		lanes:  make([]int, 0, program.BlockSize),
		best:   leaders{keep: keep},
	}
}

// block draws and evaluates block k. A worker meets its blocks in increasing
// order.
//
// The sum of absolute monomials costs more than the gap and is computed only
// for lanes that can enter the list. Once the list is full and its largest
// margin m is not positive, a lane with gap >= 0 has a margin >= 0 >= m, and it
// comes after all points of the list, so it cannot enter; skipping it changes
// nothing. The lanes left are evaluated together, with the results they would
// have in their block, since lanes are independent.
func (w *worker) block(seed uint64, k int64, n int, law Law) {
	w.stream.seed(seed, uint64(k))
	w.layout.fill(law, w.stream, w.cols, n)
	w.gap.EvalBlock(w.gapWS, w.cols, w.out[:1], n)
	gap := w.out[0][:n]

	m, full := w.best.bound()
	negativeOnly := full && m <= 0
	lanes := w.lanes[:0]
	nonFinite := 0
	for j, g := range gap {
		if g-g != 0 { // infinite or NaN
			nonFinite++
		} else if g < 0 || !negativeOnly {
			lanes = append(lanes, j)
		}
	}
	w.nonFinite += int64(nonFinite)
	w.valid += int64(n - nonFinite)
	if len(lanes) == 0 {
		return
	}

	in := w.cols
	if len(lanes) < n {
		for i, x := range w.few {
			col := w.cols[i]
			for q, j := range lanes {
				x[q] = col[j]
			}
		}
		in = w.few
	}
	w.sum.EvalBlock(w.sumWS, in, w.out[1:], len(lanes))
	sum := w.out[1][:len(lanes)]
	for q, j := range lanes {
		p := Point{Block: k, Lane: j, Gap: gap[j], AbsSum: sum[q]}
		if p.AbsSum != 0 && isFinite(p.AbsSum) {
			p.Margin = p.Gap / p.AbsSum
		}
		w.best.offer(p, w.cols, j)
	}
}
