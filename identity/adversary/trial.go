package adversary

import (
	"context"
	"math/big"
)

// trial is the work done from one start.
type trial struct {
	objective
	o          Options
	index      int
	iterations int
	checks     int
	limit      int // of checks, raised for the simplification
}

func newTrial(ctx context.Context, p *Problem, o Options, index int) *trial {
	return &trial{objective: objective{ctx: ctx, p: p, best: large}, o: o, index: index, limit: o.Checks}
}

// evolutionEvery is the period, and half of it the phase, of the starts given to
// the derivative-free method.
const evolutionEvery = 4

func (t *trial) run() Result {
	start := make([]float64, t.p.Dim)
	t.p.Starts(t.index, start)
	for i, v := range start {
		if !finite(v) {
			v = 0
		}
		start[i] = t.p.inside(i, v)
	}
	all := make([]int, t.p.Dim)
	for i := range all {
		all[i] = i
	}
	atStart := t.value(start)

	// Scaling by the start itself suits wells far out; the fixed scale suits
	// coordinates that are small by accident.
	v := newView(&t.objective, start, all, t.index%2 == 0)
	y := v.variables()
	if t.index%evolutionEvery == evolutionEvery/2 {
		var n int
		y, n = descend(v, y, evolution(t.o.Seed, t.index), t.o.Iterations)
		t.iterations += n
	}
	y, n := descend(v, y, gradientMethod(t.p.Dim), t.o.Iterations)
	t.iterations += n
	x := append([]float64(nil), v.set(y)...)
	v = newView(&t.objective, x, all, true)
	y = v.variables()
	margin, n := newton(v, y, 30)
	t.iterations += n
	x = append(x[:0], v.set(y)...)

	w := t.rationalise(x, margin)
	if w == nil && t.best < margin-noise {
		w = t.round(t.bestPoint)
	}
	if w == nil && atStart < 0 {
		w = t.round(start)
	}
	if w != nil {
		w = t.simplify(w)
	}
	return Result{
		Witness:     w,
		BestMargin:  t.best,
		BestPoint:   append([]float64(nil), t.bestPoint...),
		Starts:      1,
		Iterations:  t.iterations,
		Evaluations: t.evaluations,
		Checks:      t.checks,
	}
}

// near is the margin up to which an end of a descent is worth exact checks.
const near = 1e-9

// rationalise looks for a rational witness around x.
func (t *trial) rationalise(x []float64, margin float64) []*big.Rat {
	switch {
	case margin > near:
		return nil
	case margin > -noise && t.index >= batch && t.index%batch != 0:
		// Within rounding of zero, the usual end on a true sharp bound: after the
		// first starts only the cheap attempts are made.
		return t.round(x)
	}
	if w := t.snap(x, margin); w != nil {
		return w
	}
	return t.round(x)
}

// verify is the only way to a witness.
func (t *trial) verify(x []*big.Rat) bool {
	if t.checks >= t.limit || t.ctx.Err() != nil {
		return false
	}
	t.checks++
	return t.p.Verify(x)
}
