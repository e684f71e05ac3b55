package levelset

import (
	"context"
	"fmt"
	"math"
)

// Options are the tolerances and budgets of Integrate.
type Options struct {
	// Parts is the number of components of the density.
	Parts int
	// Rel and Abs are the tolerances: the estimated error of each component is
	// to be at most max(Abs, Rel |value|). Rel is 1e-10 if zero.
	Rel, Abs float64
	// AreaRel, if not zero, asks the same of the area. Otherwise the area comes
	// with whatever accuracy its error says.
	AreaRel float64
	// Probe is the density at points near the surface, the density itself if
	// nil. It is asked at the centres of the cells left out, for the size of
	// their share.
	Probe func(x, n []float64, out []float64)
	// MaxNodes is the budget of evaluations of the density, 1e6 if zero. It may
	// be overrun by one leaf.
	MaxNodes int
	// MaxCells is the budget of boxes looked at, 100,000 if zero.
	MaxCells int
	// Cuts are places, for each direction, at which the box is cut in the
	// beginning; others may follow.
	Cuts [][]float64
}

// Result is an integral over a level set.
type Result struct {
	// Value are the integrals of the components of the density, Error the
	// estimates of their errors.
	Value, Error []float64
	// Area is the area of the surface (the length of the curve).
	Area, AreaError float64
	// Nodes counts the evaluations of the density, Cells the boxes looked at,
	// Sheets the graphs into which the surface was cut.
	Nodes, Cells, Sheets int
	// Undecided counts the cells left in which the level set could not be
	// resolved; Resolution is the diameter of the largest, 0 if there is none,
	// and UndecidedArea what area they can hold if each holds at most two
	// sheets. What the cells hold is not in Value, but its bound is in Error.
	Undecided     int
	Resolution    float64
	UndecidedArea float64
	// Components are the connected parts of the surface, the largest first. Parts
	// with no area to rounding, such as where a condition only touches, are none.
	Components []Component
	// Loose counts the places on seams of cells at which no graph was found on
	// the other side, where there are several components. Settled says that the
	// number of components is, as far as floating-point numbers can tell:
	// nothing is loose, and no cell is undecided but where thin slabs cross.
	Loose   int
	Settled bool
}

// Integrate integrates the components of a density over the part of the level
// set {phi = 0} in a box, of two or three dimensions, where every function of
// trims is non-negative. The density gets the point and the unit normal
// grad phi/|grad phi| and fills out; it must not keep the slices.
//
// A function of trims that vanishes on the level set is a *VanishingError.
//
// With ErrBudget, ErrResolution, ErrAccuracy and the errors of ctx the result
// is the best there is, with an error estimate that stands; with any other
// error it is to be ignored.
func Integrate(ctx context.Context, phi Function, trims []Function, box [][2]float64,
	density func(x, n []float64, out []float64), opt Options) (Result, error) {
	return IntegrateUnion(ctx, phi, [][]Function{trims}, box, density, opt)
}

// IntegrateUnion is Integrate over the part of the level set where all
// functions of one of the systems are non-negative. No two systems may hold at
// once, but on their boundaries: there a function of one is minus a function of
// the other, and the two parts belong together.
func IntegrateUnion(ctx context.Context, phi Function, systems [][]Function, box [][2]float64,
	density func(x, n []float64, out []float64), opt Options) (Result, error) {
	if err := check(phi, box, density, &opt); err != nil {
		return Result{}, err
	}
	e := newEvaluator(phi, len(box), opt.Parts, density)
	p := newPlan(phi, systems, box, opt.Cuts, e)
	d := newDriver(p, e, opt)
	stop := d.run(ctx)
	return d.result(stop)
}

func check(phi Function, box [][2]float64, density func(x, n []float64, out []float64), opt *Options) error {
	if phi == nil || density == nil {
		return fmt.Errorf("%w: a function is missing", ErrInput)
	}
	if len(box) != 2 && len(box) != 3 {
		return fmt.Errorf("%w: the box has %d dimensions, not 2 or 3", ErrInput, len(box))
	}
	for i, b := range box {
		w := b[1] - b[0]
		if !(w > 0) || math.IsInf(w, 0) {
			return fmt.Errorf("%w: side %d of the box is [%g, %g]", ErrInput, i+1, b[0], b[1])
		}
		if w < 0x1p-24*max(math.Abs(b[0]), math.Abs(b[1])) {
			return fmt.Errorf("%w: side %d of the box is too narrow for its distance from the origin", ErrInput, i+1)
		}
	}
	if !(opt.Rel >= 0) || !(opt.Abs >= 0) || !(opt.AreaRel >= 0) || opt.Parts < 0 || opt.MaxNodes < 0 || opt.MaxCells < 0 {
		return fmt.Errorf("%w: negative option", ErrInput)
	}
	if opt.Rel == 0 && opt.Abs == 0 {
		opt.Rel = 1e-10
	}
	if opt.Probe == nil {
		opt.Probe = density
	}
	if opt.MaxNodes == 0 {
		opt.MaxNodes = 1e6
	}
	if opt.MaxCells == 0 {
		opt.MaxCells = 100_000
	}
	return nil
}

func newEvaluator(phi Function, dim, parts int, density func(x, n []float64, out []float64)) *evaluator {
	e := &evaluator{
		dim: dim, parts: parts + 1, rules: rules(), phi: phi, density: density,
		x: make([]float64, dim), g: make([]float64, dim), n: make([]float64, dim),
		base: make([]float64, dim-1), bg: make([]float64, dim-1),
		peak: make([]float64, parts+1), layers: make([]layers, parts+1), out: make([]float64, parts+1),
		values: make([][]float64, parts+1), widths: make([]float64, maxOrder), places: make([]float64, maxOrder),
	}
	for c := range e.values {
		e.values[c] = make([]float64, maxOrder*maxOrder)
	}
	return e
}
