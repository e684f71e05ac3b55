package limit

import (
	"context"
	"errors"
	"fmt"
	"math"

	"creaseproof/quadrature/branches"
)

// A Domain is the image of a box of parameters, as many as there are
// coordinates, under a map that is injective inside.
type Domain struct {
	Lo, Hi []float64
	// Map sets x to the position at s and jac[j] to its derivative by s[j].
	// It must not keep the slices. Nil is the identity.
	Map func(s, x []float64, jac [][]float64)
}

// Density is what is integrated at a point, all for one eps.
type Density struct {
	Energy      float64
	Compression float64 // R²/(2 eps)
	Bending     float64 // eps L²/2
	Curvature   float64 // eps K
}

// Problem is a family of approximations on a domain. It is not safe for
// concurrent use if its functions are not.
type Problem struct {
	Domain   Domain
	Branches int
	// Values sets the values of the branches at x.
	Values func(x, v []float64)
	// Jets sets their jets.
	Jets func(x []float64, jets []Jet)
	// Gradients sets, for branch i, u and g to its values and gradients at
	// len(u) points: x[k] are their coordinates k. Nil is by Jets.
	Gradients func(i int, x [][]float64, u []float64, g [][]float64)
	// Affine says which branches are affine; nil is none.
	Affine []bool
	// Combine makes the sharp function of the branches; nil is the maximum.
	Combine *branches.Tree
	// Smoothing makes the approximation.
	Smoothing Smoothing
	// Density is the density of the approximation with the given jet at x.
	Density func(x []float64, eps float64, j *Jet) Density
	// Cost is the energy per area of a jump; nil where it is not known.
	Cost func(x, plus, minus, nu []float64) float64

	// Rel is the tolerance of the integrals, relative to the energy; 1e-10
	// if zero.
	Rel float64
	// MaxEvaluations is the budget of evaluations of the density for each
	// eps; 2e7 if zero.
	MaxEvaluations int
	// MaxWork is the budget of work for each eps, counted in evaluations of a
	// branch, of which one takes 20 to 40 ns; none if zero.
	MaxWork int
	work    *int // so far, if it is counted
}

// Energy is the energy of the approximation at one eps.
type Energy struct {
	Eps float64
	Density
	// Error estimates the error of each part of Density and of the energy.
	Error       float64
	Evaluations int
	// Work is what was used of MaxWork, where that is given.
	Work int
	// Met says that the tolerance was met within the budget.
	Met bool
}

// InfiniteError says that an approximation has infinite energy.
type InfiniteError struct {
	// Point is where it diverges, roughly.
	Point []float64
	// Branch is the branch with the greatest second derivatives there.
	Branch int
}

func (e *InfiniteError) Error() string {
	return fmt.Sprintf("limit: the energy is infinite: it diverges at %.3g, where branch %d is not smooth", e.Point, e.Branch+1)
}

// ErrNotFinite says that a density is not finite on a whole part of the
// domain.
var ErrNotFinite = errors.New("limit: the density is not finite")

// ErrDomain says that a domain has no volume or is not finite.
var ErrDomain = errors.New("limit: the domain is empty")

// ErrWork says that the work allowed was used up before there was an energy.
var ErrWork = errors.New("limit: the work allowed was used up before the energy was known to one per mille")

const (
	defaultRel = 1e-10
	defaultMax = 20_000_000
	mostFibres = 400_000 // for the sharp energy
)

// active is the branch that the sharp function is for the given values.
func (p *Problem) active(v []float64) int {
	if p.Combine != nil {
		_, i := p.Combine.Eval(v)
		return i
	}
	best := 0
	for i, x := range v {
		if x > v[best] {
			best = i
		}
	}
	return best
}

func (d *Domain) check() error {
	for i, lo := range d.Lo {
		if hi := d.Hi[i]; !(hi > lo) || math.IsInf(hi-lo, 0) {
			return fmt.Errorf("%w: a range from %g to %g", ErrDomain, lo, hi)
		}
	}
	if d.Map != nil && d.flat() {
		return fmt.Errorf("%w: the map of its parameters is to a set without volume", ErrDomain)
	}
	return nil
}

// flat reports whether the map has no volume at any of a few places.
func (d *Domain) flat() bool {
	n := len(d.Lo)
	w := walk{p: &Problem{Domain: *d}, n: n, s: make([]float64, n), x: make([]float64, n), det: make([]float64, n*n)}
	for range n {
		w.jac = append(w.jac, make([]float64, n))
	}
	const places = 7
	for i := range places {
		for j := range n {
			_, t := math.Modf((float64(i) + 0.5) * math.Sqrt([...]float64{2, 3, 5}[j%3]))
			w.s[j] = d.Lo[j] + t*(d.Hi[j]-d.Lo[j])
		}
		w.move()
		size := 1.0
		for _, row := range w.jac {
			size *= length(row)
		}
		if v := w.volume(); v > 1e-13*size || math.IsNaN(v) {
			return false
		}
	}
	return true
}

// Integrate is the energy of the approximation at eps. Where it is infinite the
// error is an *InfiniteError; where no tolerance is met in the budget it is
// nil and Met is false; with less than that it wraps ErrWork. The error of an ended context is returned as it is.
func (p *Problem) Integrate(ctx context.Context, eps float64) (Energy, error) {
	w, err := newWalk(ctx, p, eps, false)
	if err != nil {
		return Energy{}, err
	}
	if w.layer == nil {
		if e := w.singular(); e != nil {
			return Energy{Eps: eps}, e
		}
	}
	v, e, err := w.run()
	out := Energy{Eps: eps, Density: Density{v[0], v[1], v[2], v[3]}, Evaluations: w.used}
	if w.p.work != nil {
		out.Work = *w.p.work
	}
	for _, x := range e {
		out.Error = math.Max(out.Error, x)
	}
	out.Error += w.rough() * math.Abs(out.Energy)
	if ctx.Err() != nil {
		return out, ctx.Err()
	}
	switch {
	case errors.Is(err, errInfinite):
		return out, w.infinite()
	case errors.Is(err, errPoint):
		return out, fmt.Errorf("%w near %.4g", ErrNotFinite, w.bad)
	case errors.Is(err, errSpent):
		return out, ErrWork
	case err != nil:
		return out, err
	}
	out.Met = w.met
	return out, nil
}

// Sharp is the energy of the jumps of the sharp function inside the domain, an
// estimate of its error, and their area. It needs Cost.
func (p *Problem) Sharp(ctx context.Context) (energy, estimate, area float64, err error) {
	w, err := newWalk(ctx, p, 0, true)
	if err != nil {
		return 0, 0, 0, err
	}
	for i := range w.n {
		w.scale[i] = smallestScale
	}
	v, e, err := w.run()
	if ctx.Err() != nil {
		return 0, 0, 0, ctx.Err()
	}
	if err != nil {
		return 0, 0, 0, fmt.Errorf("%w: the energy per area of the jumps, near %.4g", ErrNotFinite, w.bad)
	}
	energy, estimate, area = v[0], e[0], v[1]
	return energy, estimate + 1e-14*math.Abs(energy), area, nil
}
