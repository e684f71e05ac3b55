package mesh

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"

	"creaseproof/quadrature"
)

const epsilon = 0x1p-52

// An Integrand is what is integrated. Its functions are called by one goroutine.
type Integrand struct {
	Traces  quadrature.Traces
	Density quadrature.Density
	// Well is as in quadrature.Options.
	Well func(grad []float64) (residual, scale float64)
}

// Options of Integrate. The zero value is ready for use.
type Options struct {
	// Degree is the degree of the polynomials that the rule on each triangle
	// integrates exactly, one of Degrees; 6 if zero.
	Degree int
	// Rel and Abs are the tolerances on the estimated error: triangles are
	// divided until it is at most max(Abs, Rel |energy|), or down to rounding.
	// Rel is 1e-10 if zero.
	Rel, Abs float64
	// MaxEvaluations is the budget of evaluations of the density. If zero it
	// is 2e6, or four times what the undivided triangles need if that is more.
	MaxEvaluations int
	// Tolerance is the largest Defect accepted. If zero, it is what the mesh
	// itself explains. With δ the largest angle between the normals of two
	// triangles at an edge around the three vertices of a triangle (angles
	// above 45 degrees are edges of the surface and do not count), h its longest
	// edge and q the jump of the gradient: the sine of the angle between q
	// and the normal may be 1e-6 + 2δ, but at most 1/2, and u may jump by |q|
	// (δ h/2 + 1e-6 extent). On a flat part of the mesh this leaves the 1e-6,
	// for coordinates in single precision. Traces have to be on the well to a
	// relative 1e-9 then.
	Tolerance float64
	// Unoriented accepts a mesh without consistent orientation. The density
	// is evaluated for both normals then and must not differ.
	Unoriented bool
	// DensityError is as in quadrature.Options.
	DensityError float64
	// Workers is the number of goroutines, as many as there are cores if zero. No
	// result depends on it.
	Workers int
}

func (o Options) withDefaults() (Options, error) {
	if !(o.Rel >= 0) || !(o.Abs >= 0) || !(o.Tolerance >= 0) || !(o.DensityError >= 0) {
		return o, errors.New("mesh: tolerances must not be negative or NaN")
	}
	if o.MaxEvaluations < 0 || o.Workers < 0 {
		return o, errors.New("mesh: a negative number of evaluations or workers")
	}
	if o.Degree == 0 {
		o.Degree = 6
	}
	if o.Rel == 0 {
		o.Rel = 1e-10
	}
	if o.Workers == 0 {
		o.Workers = runtime.GOMAXPROCS(0)
	}
	return o, nil
}

// A Defect says by how much a mesh and traces fail to fit, at the worst node.
type Defect struct {
	// Normal is the sine of the angle between the jump of the gradient and
	// the normal.
	Normal float64
	// Continuity is the jump of u over the jump of the gradient, about the
	// distance from the surface where u is continuous, relative to the extent
	// of the mesh.
	Continuity float64
	// Well is the residual relative to the sum of its absolute terms.
	Well float64
}

// Worst is the largest of the three.
func (d Defect) Worst() float64 { return math.Max(d.Normal, math.Max(d.Continuity, d.Well)) }

func (d *Defect) join(e Defect) {
	d.Normal = math.Max(d.Normal, e.Normal)
	d.Continuity = math.Max(d.Continuity, e.Continuity)
	d.Well = math.Max(d.Well, e.Well)
}

// A DefectError says that the traces do not fit the mesh.
type DefectError struct {
	First     *quadrature.PlaceError // in the order of the triangles
	Triangles int                    // how many are concerned
	Of        int
	Worst     Defect // of the whole mesh
}

func (e *DefectError) Error() string {
	return fmt.Sprintf("%v; %d of %d triangles are concerned, and the largest defect is %.3g", e.First, e.Triangles, e.Of, e.Worst.Worst())
}

// Unwrap returns e.First.
func (e *DefectError) Unwrap() error { return e.First }

// ErrSided says that a density depends on the side a normal points to where
// the mesh has no consistent orientation.
var ErrSided = errors.New("the density depends on which side the normal points to, and the mesh has no consistent orientation")

// Result is an integral over a mesh.
type Result struct {
	// Energy is the integral over the polyhedron and Error an estimate of its
	// absolute error, which does not know how far the polyhedron is from a
	// surface that it approximates. So for Area.
	Energy, Error   float64
	Area, AreaError float64
	Evaluations     int // of the density at nodes
	Defect          Defect
	Topology        Topology
}

// Integrate integrates over the mesh. The function integrand is called once for
// each worker, one after another, before the work begins.
//
// Errors: a *TopologyError, unless Options.Unoriented; a *quadrature.PlaceError,
// whose piece is the triangle, where a trace or the density is not finite, a
// trace is off the well or has a kink on the surface itself; a *DefectError;
// ErrSided; the cause of a cancelled context. With quadrature.ErrBudget and
// quadrature.ErrAccuracy there is a result and its estimate stands, unless the
// budget does not reach for one round of all triangles.
func Integrate(ctx context.Context, m *Mesh, integrand func() (Integrand, error), o Options) (Result, error) {
	o, err := o.withDefaults()
	if err != nil {
		return Result{}, err
	}
	main, lower, err := pair(o.Degree)
	if err != nil {
		return Result{}, err
	}
	topology, err := m.Check(ctx)
	var loose *TopologyError
	if err != nil && !(o.Unoriented && errors.As(err, &loose)) {
		return Result{Topology: topology}, err
	}
	j := &job{ctx: ctx, m: m, o: o, main: main, lower: lower, bend: topology.bend, sided: loose != nil}
	j.extend()
	for range max(1, min(o.Workers, len(m.Triangles)/chunk+1)) {
		g, err := integrand()
		if err != nil {
			return Result{}, err
		}
		if g.Density == nil || (g.Traces.Plus == nil) != (g.Traces.Minus == nil) {
			return Result{}, errors.New("mesh: a density, and both traces or none, are needed")
		}
		j.workers = append(j.workers, newWorker(j, g))
	}
	r, err := j.run()
	r.Topology = topology
	return r, err
}
