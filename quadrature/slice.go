package quadrature

import (
	"context"
	"fmt"
	"math"

	"creaseproof/quadrature/adaptive"
)

// A LineDensity is an energy per length of a horizontal slice and per height
// at x, where plus and minus are the gradients on the two sides (nil without
// traces). It must not keep the slices.
type LineDensity func(x, plus, minus []float64) float64

// A SliceResult is an integral over horizontal slices: its value, an estimate
// of its absolute error and the number of evaluations of the line density.
type SliceResult struct {
	Value, Error float64
	Evaluations  int
}

// Slice integrates a line density g over the horizontal slices of a surface,
//
//	∫ dz ∫_{S ∩ {x_d = z}} g dl,
//
// where the last coordinate x_d is the height; the slices of a curve in the
// plane are points and dl counts them. For the layered model and
// g = |[grad_perp u]|³/12 this is the jump energy. It uses neither the normal
// nor the area element, so it is a second value independent of Integrate.
//
// The slices must be known: those of a polygon are computed from its vertices,
// and a patch or graph must have a height that depends on one parameter only,
// its slices being the curves along the other one; otherwise the error is
// ErrNoSlicing. A horizontal surface has no slices of positive measure and
// gives 0. The traces are not checked except for being finite; Integrate does
// that. Of the options Well and Tolerance are not used. If the tolerance is not
// met the result comes with ErrBudget or ErrAccuracy.
func Slice(ctx context.Context, s Surface, tr Traces, g LineDensity, o Options) (SliceResult, error) {
	if s == nil || g == nil {
		return SliceResult{}, fmt.Errorf("quadrature: a surface and a line density are needed")
	}
	if (tr.Plus == nil) != (tr.Minus == nil) {
		return SliceResult{}, fmt.Errorf("quadrature: one trace is given without the other")
	}
	if err := o.check(); err != nil {
		return SliceResult{}, err
	}
	o = o.withDefaults()
	pieces, err := sliced(s)
	if err != nil {
		return SliceResult{}, fmt.Errorf("quadrature: %w", err)
	}
	work := &adaptive.Work{Max: o.MaxEvaluations}
	var total sums
	for _, p := range pieces {
		sh, err := survey(p)
		if err != nil {
			return SliceResult{}, fmt.Errorf("quadrature: %w", err)
		}
		if sh.degenerate != nil && !p.wedge {
			return SliceResult{}, fmt.Errorf("quadrature: %w", sh.degenerate)
		}
		e := &slicer{evaluator: newEvaluator(ctx, p, tr, nil, o, work, 0), g: g}
		e.shaky = sh.shaky() + sh.ends()
		flat, err := e.direction(sh)
		if err != nil {
			return SliceResult{}, fmt.Errorf("quadrature: %w", err)
		}
		if flat {
			continue
		}
		e.outer = sh.outer
		r, err := run(e.at, sh, o, total.tolerance(o, len(pieces)), work, func(float64) error { return nil })
		if err != nil {
			return SliceResult{Evaluations: work.Used}, fmt.Errorf("quadrature: %w", err)
		}
		total.add(r)
	}
	r, err := total.finish(o, work)
	return SliceResult{Value: r.Energy, Error: r.Error, Evaluations: r.Evaluations}, err
}

// sliced gives pieces whose height depends on one parameter: the pieces of a
// surface, or, for a polygon in space, those between the heights of its
// vertices.
func sliced(s Surface) ([]*piece, error) {
	p, ok := s.(Polygon)
	if !ok || p.Dimension() != 3 {
		return s.pieces()
	}
	if _, err := p.pieces(); err != nil {
		return nil, err
	}
	ts, _, err := p.triangles()
	if err != nil {
		return nil, err
	}
	var ps []*piece
	for _, t := range ts {
		a, b, c := p.Vertices[t[0]], p.Vertices[t[1]], p.Vertices[t[2]]
		if a[2] > b[2] {
			a, b = b, a
		}
		if b[2] > c[2] {
			b, c = c, b
		}
		if a[2] > b[2] {
			a, b = b, a
		}
		ps = append(ps, wedge(a, c, a, b)...)
		ps = append(ps, wedge(a, c, b, c)...)
	}
	return ps, nil
}

// wedge is the part of a triangle at the heights of the shorter edge pq,
// between it and the edge ac. It is empty if pq is horizontal.
func wedge(a, c, p, q []float64) []*piece {
	if p[2] == q[2] {
		return nil
	}
	eval := func(s, x []float64, jac [][]float64) {
		z := s[0]
		for k := range 2 {
			long, short := (c[k]-a[k])/(c[2]-a[2]), (q[k]-p[k])/(q[2]-p[2])
			l, r := a[k]+long*(z-a[2]), p[k]+short*(z-p[2])
			x[k] = l + s[1]*(r-l)
			jac[0][k] = long + s[1]*(short-long)
			jac[1][k] = r - l
		}
		x[2], jac[0][2], jac[1][2] = z, 1, 0
	}
	return []*piece{{dim: 3, n: 2, over: [2]Range{{p[2], q[2]}, {0, 1}}, eval: eval, wedge: true}}
}

// level is the ratio of a rise to a length below which a direction is level.
const level = 1e-12

// A slicer evaluates line densities.
type slicer struct {
	*evaluator
	g     LineDensity
	outer int
}

// direction finds the parameter on which the height depends. It is flat if
// there is none.
func (e *slicer) direction(sh *shape) (flat bool, err error) {
	var rises [2]bool
	n := e.p.n
	for i := range len(sample) * len(sample) {
		var s [2]float64
		s[0] = e.p.over[0].at(sample[i%len(sample)])
		s[1] = e.p.over[1].at(sample[i/len(sample)])
		if err := e.place(s); err != nil {
			return false, err
		}
		for j := range n {
			rises[j] = rises[j] || !e.level(j)
		}
	}
	switch {
	case !rises[0] && !rises[1]:
		return true, nil
	case rises[0] && rises[1]:
		return false, ErrNoSlicing
	case rises[1]:
		sh.outer = 1
	default:
		sh.outer = 0
	}
	return false, nil
}

func (e *slicer) level(j int) bool {
	return math.Abs(e.jac[j][e.p.dim-1]) <= level*norm(e.jac[j])
}

// at is the line density times the length element of the slice and the rise.
func (e *slicer) at(s [2]float64, out *adaptive.Sample) error {
	if e.work.Used%256 == 0 && e.ctx.Err() != nil {
		return context.Cause(e.ctx)
	}
	e.work.Used++
	if !e.tryMap(s) {
		return e.fail(NotFinite, "position or tangent of the surface", 0, 0)
	}
	element := math.Abs(e.jac[e.outer][e.p.dim-1])
	if e.p.n == 2 {
		if !e.level(1 - e.outer) {
			return ErrNoSlicing
		}
		element *= norm(e.jac[1-e.outer])
	}
	if element == 0 {
		return nil
	}
	condition := e.shaky
	if e.tr.Plus != nil {
		e.tr.Plus(e.x, e.plus)
		e.tr.Minus(e.x, e.minus)
		var q [3]float64
		for k := range e.plus {
			q[k] = e.plus[k] - e.minus[k]
		}
		if jump := norm(q[:]); jump > 0 {
			condition += (norm(e.plus) + norm(e.minus)) / jump
		}
	}
	g := e.g(e.x, e.plus, e.minus)
	if !finite(g) {
		err := e.fail(NotFinite, "line density", g, 0)
		if e.unresolved(err) {
			return nil
		}
		return err
	}
	out.Value[0] = g * element
	out.Size[0] = math.Abs(out.Value[0])
	out.Noise[0] = 2 * epsilon * (1 + condition) * out.Size[0]
	return nil
}
