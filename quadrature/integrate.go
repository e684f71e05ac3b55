package quadrature

import (
	"context"
	"fmt"
	"math"

	"creaseproof/quadrature/adaptive"
)

// Traces are the function u on the two sides of a surface.
type Traces struct {
	// Plus and Minus return u at x and fill grad with its gradient, on the
	// side the normal points to and on the other. They must not keep the
	// slices. Both nil: there are no traces, only a density.
	Plus, Minus func(x, grad []float64) (u float64)
	// HasValue is false when only the gradients are known; then continuity of
	// u is not checked.
	HasValue bool
	// Scale, if not nil, returns the sum of the absolute values of the terms
	// of u at x on both sides, against which a discontinuity is judged in
	// addition to |u| and |grad u| |x|.
	Scale func(x []float64) float64
}

// A Density is an energy per area at x. Plus and minus are the gradients on
// the two sides, nil where there are no traces, and nu the unit normal, which
// points to the plus side. It must not keep the slices.
type Density func(x, plus, minus, nu []float64) float64

// Options of Integrate and Slice. The zero value is ready for use.
type Options struct {
	// Rel and Abs are the tolerances on the estimated error: it is to be at
	// most max(Abs, Rel |value|), or down to rounding. Rel is 1e-11 if zero.
	Rel, Abs float64
	// MaxEvaluations is the budget of evaluations of the integrand, 2e6 if
	// zero. It may be overrun by the nodes of the rules under way.
	MaxEvaluations int
	// Well returns the residual whose zero set is the well, and the sum of the
	// absolute values of its terms. Nil: not checked.
	Well func(grad []float64) (residual, scale float64)
	// Tolerance is the relative tolerance of the checks of the well and of the
	// direction of the jump, 1e-9 if zero.
	Tolerance float64
	// Continuity is the relative tolerance of the check that u is continuous,
	// 1024 units in the last place if zero.
	Continuity float64
	// DensityError is the relative error of the values of the density beside
	// rounding, 0 for closed forms. It is counted in the error estimates.
	DensityError float64
}

func (o Options) withDefaults() Options {
	if o.Rel == 0 {
		o.Rel = 1e-11
	}
	if o.MaxEvaluations == 0 {
		o.MaxEvaluations = 2000000
	}
	if o.Tolerance == 0 {
		o.Tolerance = 1e-9
	}
	if o.Continuity == 0 {
		o.Continuity = 1024 * epsilon
	}
	return o
}

func (o Options) check() error {
	switch {
	case !(o.Rel >= 0) || !(o.Abs >= 0) || !(o.Tolerance >= 0) || !(o.Continuity >= 0) || !(o.DensityError >= 0):
		return fmt.Errorf("quadrature: tolerances must not be negative or NaN")
	case o.MaxEvaluations < 0:
		return fmt.Errorf("quadrature: a negative number of evaluations")
	}
	return nil
}

// A Result is the integral of a density over a surface.
type Result struct {
	// Energy is the integral and Error an estimate of its absolute error.
	Energy, Error float64
	// Area is the area (in the plane the length), AreaError its error.
	Area, AreaError float64
	// Evaluations counts the evaluations of the density at nodes. Beside them it
	// is looked at in some 256 places; see the checks of Integrate.
	Evaluations int
}

// Integrate integrates a density over a surface.
//
// At every node used, and at some 256 further places spread over the surface, it
// checks that positions, tangents, traces and density are
// finite, that both traces lie on the well, that u is continuous across the
// surface (if the values are known) and that the jump of the gradient is
// parallel to the normal, each relative to the sum of the absolute terms. If
// not, or if the area element vanishes on a whole region, the error is a
// *PlaceError, and so it is where the gradient of u jumps between the surface
// and its own side. Traces without functions are not checked and are passed on
// as nil.
//
// If the tolerance is not met the result is returned together with ErrBudget
// or ErrAccuracy. An integral that overflows has the error ErrRange. A cancelled
// context ends the work at once with its cause.
func Integrate(ctx context.Context, s Surface, tr Traces, d Density, o Options) (Result, error) {
	if s == nil || d == nil {
		return Result{}, fmt.Errorf("quadrature: a surface and a density are needed")
	}
	if (tr.Plus == nil) != (tr.Minus == nil) {
		return Result{}, fmt.Errorf("quadrature: one trace is given without the other")
	}
	if err := o.check(); err != nil {
		return Result{}, err
	}
	o = o.withDefaults()
	pieces, err := s.pieces()
	if err != nil {
		return Result{}, fmt.Errorf("quadrature: %w", err)
	}
	work := &adaptive.Work{Max: o.MaxEvaluations}
	shapes := make([]*shape, len(pieces))
	var far, low, high [3]float64
	for i, p := range pieces {
		if shapes[i], err = survey(p); err != nil {
			return Result{}, fmt.Errorf("quadrature: %w", err)
		}
		if shapes[i].degenerate != nil {
			return Result{}, fmt.Errorf("quadrature: %w", shapes[i].degenerate)
		}
		for k := range p.dim {
			if i == 0 {
				low[k], high[k] = shapes[i].low[k], shapes[i].high[k]
			}
			low[k] = math.Min(low[k], shapes[i].low[k])
			high[k] = math.Max(high[k], shapes[i].high[k])
			far[k] = math.Max(math.Abs(low[k]), math.Abs(high[k]))
		}
	}
	reach := norm(far[:])
	whole := norm([]float64{high[0] - low[0], high[1] - low[1], high[2] - low[2]})
	var total sums
	for i, p := range pieces {
		e := newEvaluator(ctx, p, tr, d, o, work, reach)
		e.shaky = shapes[i].shaky() + shapes[i].ends()
		e.whole = whole
		abs := total.tolerance(o, len(pieces))
		r, err := e.integrate(shapes[i], abs, max(fewest, patrols/len(pieces)))
		if err != nil {
			return Result{Evaluations: work.Used}, fmt.Errorf("quadrature: %w", err)
		}
		total.add(r)
	}
	return total.finish(o, work)
}

// integrate integrates over the piece and then looks at n further places. Where
// the density is beyond what the nodes met, the nodes have missed something, and
// the integral is begun again with many panels; what still is beyond counts as
// an error on its share of the area.
func (e *evaluator) integrate(sh *shape, abs [adaptive.Width]float64, n int) (adaptive.Result, error) {
	for {
		r, err := run(e.at, sh, e.o, abs, e.work, e.rowDone)
		if err != nil {
			return r, err
		}
		beyond, err := e.patrol(n)
		if err != nil || beyond == 0 {
			return r, err
		}
		if sh.panels >= manyPanels || e.work.Spent() {
			r.Error[0] += beyond * math.Abs(r.Value[1]) / float64(n)
			return r, nil
		}
		sh.panels = max(8*sh.panels, firstPanels)
	}
}

// The numbers of panels that an integral is begun with which missed something.
const (
	firstPanels = 8
	manyPanels  = 64
)

// sums adds up the pieces.
type sums struct {
	value, err, size [adaptive.Width]adaptive.Sum
}

func (s *sums) add(r adaptive.Result) {
	for c := range adaptive.Width {
		s.value[c].Add(r.Value[c])
		s.err[c].Add(r.Error[c])
		s.size[c].Add(r.Size[c])
	}
}

// tolerance is what a further piece may add to the error.
func (s *sums) tolerance(o Options, pieces int) (abs [adaptive.Width]float64) {
	for c := range abs {
		abs[c] = o.Rel / 4 * math.Abs(s.value[c].Value()) / float64(pieces)
	}
	abs[0] = math.Max(abs[0], o.Abs/(2*float64(pieces)))
	return abs
}

func (s *sums) finish(o Options, work *adaptive.Work) (Result, error) {
	r := Result{
		Energy: s.value[0].Value(), Error: s.err[0].Value(),
		Area: s.value[1].Value(), AreaError: s.err[1].Value(),
		Evaluations: work.Used,
	}
	for c, e := range []float64{r.Error, r.AreaError} {
		v := math.Abs(s.value[c].Value())
		if !finite(v) || !finite(e) {
			return Result{Evaluations: work.Used}, fmt.Errorf("quadrature: %w", ErrRange)
		}
		if e <= math.Max(o.Rel*v, 256*epsilon*s.size[c].Value()) || c == 0 && e <= o.Abs {
			continue
		}
		if work.Spent() {
			return r, fmt.Errorf("quadrature: %w: %d evaluations, estimated error %.3g of %.9g", ErrBudget, work.Used, e, s.value[c].Value())
		}
		return r, fmt.Errorf("quadrature: %w: estimated error %.3g of %.9g", ErrAccuracy, e, s.value[c].Value())
	}
	return r, nil
}

const epsilon = 0x1p-52

// golden spreads the phases of the trapezoidal rules of neighbouring rows.
const golden = 0.6180339887498949

// run integrates f over the parameters of a piece: the inner direction, the
// periodic one if there is one, at every node of the outer one.
func run(f func(s [2]float64, out *adaptive.Sample) error, sh *shape, o Options, abs [adaptive.Width]float64, work *adaptive.Work, rowDone func(s float64) error) (adaptive.Result, error) {
	p := sh.piece
	if p.n == 1 {
		t := adaptive.Task{
			F:  func(s float64, out *adaptive.Sample) error { return f([2]float64{s, 0}, out) },
			Lo: p.over[0].Lo, Hi: p.over[0].Hi, Rel: o.Rel / 2, Abs: abs,
			Periodic: sh.periodic[0] && sh.panels == 0, Phase: golden / 2, Probe: true, MinPeriod: 16, MinPanels: sh.panels, Work: work,
		}
		r, err := t.Run()
		if err == nil {
			err = rowDone(p.over[0].Lo)
		}
		return r, err
	}
	outer, inner := sh.outer, 1-sh.outer
	width := p.over[outer].Hi - p.over[outer].Lo
	var mesh adaptive.Mesh
	var most [adaptive.Width]float64
	rows, rough := 0, false
	var t adaptive.Task
	row := func(s float64, out *adaptive.Sample) error {
		rows++
		_, phase := math.Modf(golden * float64(rows))
		in := adaptive.Task{
			F: func(v float64, out *adaptive.Sample) error {
				var at [2]float64
				at[outer], at[inner] = s, v
				return f(at, out)
			},
			Lo: p.over[inner].Lo, Hi: p.over[inner].Hi, Rel: o.Rel / 8,
			Periodic: sh.periodic[inner], Phase: phase, Probe: rows == 1 || rows == 4,
			Work: work, Mesh: &mesh,
		}
		for c := range most {
			in.Abs[c] = math.Max(o.Rel/8*most[c], abs[c]/(4*width))
		}
		if rough {
			// A row almost tangent to a kink crosses it twice at a distance
			// like the root of the width of the panel of rows.
			in.Mesh = nil
			in.Periodic = false
			in.MinPanels = int(min(512, 2*math.Ceil(math.Sqrt(t.Fineness()))))
		}
		if sh.panels > 0 {
			in.Mesh = nil
			in.Periodic = false
			in.MinPanels = max(in.MinPanels, sh.panels)
		}
		r, err := in.Run()
		if err != nil {
			return err
		}
		for c := range most {
			most[c] = math.Max(most[c], math.Abs(r.Value[c]))
		}
		rough = rough || r.Rough
		*out = r.Sample
		out.Noise = r.Error
		return rowDone(s)
	}
	t = adaptive.Task{
		F: row, Lo: p.over[outer].Lo, Hi: p.over[outer].Hi, Rel: o.Rel / 2, Abs: abs,
		Periodic: sh.periodic[outer] && sh.panels == 0, Phase: golden / 2, Probe: true, MinPanels: sh.panels, Work: work,
	}
	return t.Run()
}
