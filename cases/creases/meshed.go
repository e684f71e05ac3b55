package creases

import (
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math"
	"math/big"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/identity/claim"
	"creaseproof/quadrature"
	"creaseproof/quadrature/mesh"
)

// Mesh says what a mesh is and how well the traces fit it.
type Mesh struct {
	Triangles     int `json:"triangles"`
	Vertices      int `json:"vertices"`
	BoundaryEdges int `json:"boundary_edges"`
	// Degenerate counts the triangles without area.
	Degenerate int `json:"degenerate,omitempty"`
}

// loaded is the mesh of a surface, read once for all choices of values.
type loaded struct {
	m    *mesh.Mesh
	err  error // about its content
	done bool
}

// readMesh checks the keys of a mesh.
func (s *Surface) readMesh() error {
	if n := len(s.ev.set.Coordinates); n != 3 {
		return fault(s.place, "a mesh needs three coordinates", "a mesh in %d dimensions", n)
	}
	if o := s.src.Order; o != 0 && !slices.Contains(mesh.Degrees(), o) {
		return fault(s.place, "write order = 6, or another of these", "there is no rule of order %d: the orders are %v", o, mesh.Degrees())
	}
	return nil
}

// stdin is the one path at which a file need not be a regular one.
const stdin = "/dev/stdin"

// OpenMesh opens a mesh as a case names it: a path is taken from the folder of
// the case file. Only a regular file is opened, or standard input.
func OpenMesh(file, path string) (io.ReadCloser, error) {
	if !filepath.IsAbs(path) {
		path = filepath.Join(filepath.Dir(file), path)
	}
	info, err := os.Stat(path)
	if err != nil {
		return nil, err
	}
	if !info.Mode().IsRegular() && path != stdin {
		return nil, errors.New("this is no regular file")
	}
	return os.Open(path)
}

// load reads the mesh. A path is taken from the folder of the case file. An error
// is one of the path or of the context; what is wrong inside the file is kept.
func (s *Surface) load(ctx context.Context) error {
	if s.mesh.done {
		return nil
	}
	bad := func(err error) error {
		var p *fs.PathError
		if errors.As(err, &p) {
			err = p.Err
		}
		return fault(s.place, "the path is taken from the folder of the case file", "the mesh %q: %v", s.src.Mesh, err)
	}
	open := s.ev.Open
	if open == nil {
		open = func(mesh string) (io.ReadCloser, error) { return OpenMesh(s.ev.file, mesh) }
	}
	f, err := open(s.src.Mesh)
	if err != nil {
		return bad(err)
	}
	defer f.Close()
	m, err := mesh.Read(ctx, f, mesh.Limits{})
	if ctx.Err() != nil {
		return ctx.Err()
	}
	var read *fs.PathError
	if errors.As(err, &read) {
		return bad(err)
	}
	s.mesh = loaded{m, err, true}
	return nil
}

// meshed integrates over a mesh and compares.
func (c *combination) meshed(r Result, rel, allowed float64) (Result, error) {
	s := c.s
	if err := s.load(c.ctx); err != nil {
		return r, err
	}
	if err := s.mesh.err; err != nil {
		return r.refuse(fmt.Sprintf("the mesh %q: %v", s.src.Mesh, err)), nil
	}
	if reason := c.broken(); reason != "" {
		return r.refuse(reason), nil
	}
	reason, onWell, err := c.offWell()
	if err != nil {
		return r, err
	}
	if reason != "" {
		return r.refuse(reason), nil
	}
	m := s.mesh.m
	o := mesh.Options{
		Degree: s.src.Order, MaxEvaluations: c.o.MaxEvaluations, Unoriented: s.src.Unoriented,
		Rel: math.Max(1e-13, math.Min(1e-10, rel/10)),
	}
	if r.Claimed != nil && *r.Claimed == 0 {
		o.Abs = rel / 10
	}
	if t := s.src.Tolerance; t != nil {
		o.Tolerance, _ = t.Float64()
	}
	if _, o.DensityError, err = c.density(); err != nil {
		return r, err
	}
	q, err := mesh.Integrate(c.ctx, m, func() (mesh.Integrand, error) { return c.integrand(onWell) }, o)
	if c.ctx.Err() != nil {
		return r, c.ctx.Err()
	}
	r.Evaluations = q.Evaluations
	r.Mesh = &Mesh{
		Triangles: len(m.Triangles) + m.Dropped, Vertices: len(m.Vertices),
		BoundaryEdges: q.Topology.Boundary, Degenerate: m.Dropped + m.Flat,
	}
	defect := q.Defect.Worst()
	if s.plus != nil && q.Evaluations > 0 && finite(defect) {
		r.Defect = &defect
	}
	limited := q.Area > 0 && (errors.Is(err, quadrature.ErrBudget) || errors.Is(err, quadrature.ErrAccuracy))
	if err != nil && !limited {
		return c.refuseMesh(r, err)
	}
	r.Energy, r.Error, r.Area = &q.Energy, &q.Error, &q.Area
	c.compare(&r, rel, allowed)
	if limited && r.Verdict != claim.Supported && !(q.Error <= rel*math.Abs(q.Energy)) {
		r.Verdict = claim.Open
		r.add("the accuracy asked for was not reached: " + strings.TrimPrefix(err.Error(), "mesh: "))
	}
	r.Met = r.Verdict == r.Expected || r.Verdict == "" && r.Expected == ""
	return r, nil
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// integrand compiles traces and density for one goroutine.
func (c *combination) integrand(onWell bool) (mesh.Integrand, error) {
	tr, o, err := c.traces()
	if err != nil {
		return mesh.Integrand{}, err
	}
	if onWell {
		o.Well = nil
	}
	d, _, err := c.density()
	return mesh.Integrand{Traces: tr, Density: d, Well: o.Well}, err
}

// refuseMesh says why a mesh was refused; a mistake in a formula passes.
func (c *combination) refuseMesh(r Result, err error) (Result, error) {
	var place *quadrature.PlaceError
	var defect *mesh.DefectError
	var topology *mesh.TopologyError
	switch {
	case errors.As(err, &defect):
		return r.refuse(fmt.Sprintf("%s; %d of %d triangles are concerned, and the largest defect is %.3g: refine the mesh, or allow for it with tolerance", c.explain(err), defect.Triangles, defect.Of, defect.Worst.Worst())), nil
	case errors.As(err, &place):
		return r.refuse(c.explain(err)), nil
	case errors.As(err, &topology):
		return r.refuse(err.Error() + `; orientation = "ignored" integrates all the same, where the density does not depend on the side`), nil
	case errors.Is(err, mesh.ErrSided), errors.Is(err, quadrature.ErrBudget), errors.Is(err, quadrature.ErrRange):
		return r.refuse(strings.TrimPrefix(err.Error(), "mesh: ") + c.where()), nil
	}
	return r, err
}

// meshSamples are a few vertices of the mesh.
func (c *combination) meshSamples() (list []samplePoint) {
	m := c.s.mesh.m
	if m == nil {
		return nil
	}
	ec := enclosure.Context{Prec: precision}
	for _, t := range fractions {
		f, _ := t[0].Float64()
		x := m.Vertices[int(f*float64(len(m.Vertices)-1))]
		p := samplePoint{wide: map[algebra.Var]enclosure.Interval{}, point: x[:]}
		for i, v := range x {
			p.wide[c.exact.Ring.CoordinateVar(i)] = ec.FromRat(new(big.Rat).SetFloat64(v))
		}
		list = append(list, p)
	}
	return list
}
