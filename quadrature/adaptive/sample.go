package adaptive

import (
	"context"
	"errors"
	"math"
)

// Width is the number of functions integrated at once over the same nodes.
const Width = 2

// A Sample is the integrand at a node, or an integral.
type Sample struct {
	// Value is the value of each component.
	Value [Width]float64
	// Noise bounds or estimates the absolute uncertainty of each value.
	Noise [Width]float64
	// Size is the absolute value, or for an integral the sum of the absolute
	// contributions.
	Size [Width]float64
}

// A Func evaluates an integrand at s into out, which is zero on entry. An
// error ends the integration, except very close to an end of the interval:
// there it only cuts off the tail of a double exponential rule, and of a node
// that has been rounded to the end it makes one a few units further in.
type Func func(s float64, out *Sample) error

// Work is a budget of evaluations, shared by nested integrals. The leaves
// count in Used; no refinement starts once Used reaches Max. The rules already
// begun are finished, so that Used may end a little above Max.
type Work struct {
	Max, Used int
}

// Spent reports whether the budget is used up.
func (w *Work) Spent() bool { return w.Max > 0 && w.Used >= w.Max }

// A Mesh remembers how an integral was subdivided, as the starting point for
// the next integral of a family that varies slowly. The zero value is ready.
type Mesh struct {
	panels []panel
	period int
	failed bool
}

// A Task is one integral over [Lo, Hi].
type Task struct {
	F      Func
	Lo, Hi float64
	// Rel and Abs are the tolerances on the estimated error of each
	// component: it stops when the error is at most max(Abs, Rel |value|), or
	// no more than the noise.
	Rel float64
	Abs [Width]float64
	// Periodic says that F continues periodically and smoothly.
	Periodic bool
	// Phase in [0, 1) shifts the nodes of the trapezoidal rule.
	Phase float64
	// Probe compares the trigonometric interpolant with F off the grid.
	Probe bool
	// MinPeriod is the smallest number of nodes of the trapezoidal rule, a
	// power of two; 8 if zero.
	MinPeriod int
	// Work is the budget; nil is without limit.
	Work *Work
	// MinPanels is the number of equal panels to begin with where there is no
	// Mesh to start from; 1 if zero.
	MinPanels int
	// Mesh is where to start from, and is updated; nil starts anew.
	Mesh *Mesh

	fineness float64
}

// Fineness is the length of the interval over that of the panel being worked
// on, for the use of F.
func (t *Task) Fineness() float64 { return t.fineness }

// A Result is an integral: Value, the Noise carried into it, and the sum Size
// of the absolute contributions.
type Result struct {
	Sample
	// Error estimates the error of Value, Noise included.
	Error [Width]float64
	// Converged is false if the tolerance was not met because the budget
	// ended or because bisection no longer helped.
	Converged bool
	// Rough says that there were kinks or jumps inside the interval.
	Rough bool
}

// A Sum is a compensated sum (Neumaier 1974).
type Sum struct{ s, c float64 }

// Add adds x.
func (a *Sum) Add(x float64) {
	t := a.s + x
	if math.Abs(a.s) >= math.Abs(x) {
		a.c += (a.s - t) + x
	} else {
		a.c += (x - t) + a.s
	}
	a.s = t
}

// Value is the sum so far.
func (a Sum) Value() float64 { return a.s + a.c }

// ErrNotFinite says that an integrand was infinite or no number.
var ErrNotFinite = errors.New("integrand is not finite")

// ErrTolerance says that the tolerance was not met; the values returned with
// it are the best there are and their error estimate stands.
var ErrTolerance = errors.New("tolerance not met")

// Integrate integrates f over [lo, hi] to relative tolerance rel with at most
// max evaluations (0 for a million), and returns the value, the estimate of
// its error and the number of evaluations. Values of f are taken to be
// accurate to a few units in the last place. If the tolerance is not met the
// values come with ErrTolerance.
func Integrate(ctx context.Context, f func(float64) float64, lo, hi, rel float64, max int) (value, estimate float64, evaluations int, err error) {
	if max <= 0 {
		max = 1000000
	}
	w := &Work{Max: max}
	t := Task{Lo: lo, Hi: hi, Rel: rel, Work: w, F: func(s float64, out *Sample) error {
		if w.Used%256 == 0 && ctx.Err() != nil {
			return context.Cause(ctx)
		}
		w.Used++
		v := f(s)
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return ErrNotFinite
		}
		out.Value[0], out.Size[0] = v, math.Abs(v)
		out.Noise[0] = 4 * epsilon * math.Abs(v)
		return nil
	}}
	r, err := t.Run()
	if err != nil {
		return 0, 0, w.Used, err
	}
	if r.Error[0] > rel*math.Abs(r.Value[0]) && r.Error[0] > 64*epsilon*r.Size[0] {
		err = ErrTolerance
	}
	return r.Value[0], r.Error[0], w.Used, err
}

const epsilon = 0x1p-52
