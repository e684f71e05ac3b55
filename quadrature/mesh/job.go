package mesh

import (
	"context"
	"fmt"
	"math"
	"sync"
	"sync/atomic"

	"creaseproof/quadrature"
	"creaseproof/quadrature/adaptive"
)

// chunk is the number of triangles that a worker takes at once.
const chunk = 512

// least is the number of triangles from which a mesh is not divided at first.
const least = 128

// A job is one integration.
type job struct {
	ctx         context.Context
	m           *Mesh
	o           Options
	main, lower []node
	bend        []float32
	sided       bool    // the density must not depend on the side of the normal
	reach       float64 // largest distance from the origin
	extent      float64
	depth       int // every triangle is divided so often at first
	workers     []*worker

	parts []part // by triangle
	// The triangles of the second round; for it the error allowed per area,
	// and the evaluations for each triangle.
	rough   []int32
	allowed float64
	share   int
}

// A part is what a triangle, or one of those it is divided into, contributes.
type part struct{ energy, differ, noise float64 }

func (p *part) add(q part) {
	p.energy += q.energy
	p.differ += q.differ
	p.noise += q.noise
}

// extend finds the size of the mesh.
func (j *job) extend() {
	lo, hi := j.m.Vertices[0], j.m.Vertices[0]
	for _, p := range j.m.Vertices {
		for k, x := range p {
			lo[k], hi[k] = math.Min(lo[k], x), math.Max(hi[k], x)
		}
		j.reach = math.Max(j.reach, norm(p))
	}
	j.extent = norm(sub(hi, lo))
	for n := len(j.m.Triangles); n < least; n *= 4 {
		j.depth++
	}
}

// cost is the number of evaluations of the first round.
func (j *job) cost() int {
	return (len(j.m.Triangles) - j.m.Flat) << (2 * j.depth) * (len(j.main) + len(j.lower))
}

// run integrates, and divides the triangles where that is not enough.
func (j *job) run() (Result, error) {
	cost := j.cost()
	budget := j.o.MaxEvaluations
	if budget == 0 {
		budget = max(2_000_000, 4*cost)
	}
	if cost > budget {
		return Result{}, fmt.Errorf("mesh: %w: %d triangles need %d evaluations, %d are allowed", quadrature.ErrBudget, len(j.m.Triangles), cost, budget)
	}
	j.parts = make([]part, len(j.m.Triangles))
	t, err := j.round()
	if err != nil {
		return Result{Evaluations: t.evaluations, Defect: t.defect}, err
	}
	energy, differ, noise := j.sum()
	area := t.area.Value()
	target := math.Max(j.o.Abs, j.o.Rel*math.Abs(energy))
	if differ > math.Max(target, 16*noise) && finite(differ) {
		j.allowed = target / 2 / area
		j.find()
		if j.share = (budget - t.evaluations) / max(1, len(j.rough)); j.share > 0 && len(j.rough) > 0 {
			u, err := j.round()
			t.evaluations += u.evaluations
			t.defect.join(u.defect)
			if err != nil {
				return Result{Evaluations: t.evaluations, Defect: t.defect}, err
			}
			energy, differ, noise = j.sum()
		}
	}
	r := Result{
		Energy: energy, Error: differ + noise, Area: area, AreaError: t.areaNoise.Value(),
		Evaluations: t.evaluations, Defect: t.defect,
	}
	if !finite(r.Energy) || !finite(r.Error) || !finite(r.Area) {
		return Result{Evaluations: t.evaluations}, fmt.Errorf("mesh: %w", quadrature.ErrRange)
	}
	switch {
	case differ <= math.Max(target, 16*noise):
		return r, nil
	case j.o.MaxEvaluations > 0:
		return r, fmt.Errorf("mesh: %w: %d evaluations, estimated error %.3g of %.9g", quadrature.ErrBudget, r.Evaluations, r.Error, r.Energy)
	}
	return r, fmt.Errorf("mesh: %w: estimated error %.3g of %.9g", quadrature.ErrAccuracy, r.Error, r.Energy)
}

// sum adds the parts up in the order of the triangles.
func (j *job) sum() (energy, differ, noise float64) {
	var e, d, n adaptive.Sum
	for _, p := range j.parts {
		e.Add(p.energy)
		d.Add(p.differ)
		n.Add(p.noise)
	}
	return e.Value(), d.Value(), n.Value()
}

// find lists the triangles that are to be divided.
func (j *job) find() {
	for i, p := range j.parts {
		if p.differ == 0 {
			continue
		}
		if s, ok := measure(j.m.corners(i)); ok && p.differ > math.Max(j.allowed*s.area, 16*p.noise) {
			j.rough = append(j.rough, int32(i))
		}
	}
}

// A tally is what a chunk of triangles gives beside their parts.
type tally struct {
	area, areaNoise adaptive.Sum
	evaluations     int
	defect          Defect
	unfit           int // triangles
	first           *quadrature.PlaceError
}

func (t *tally) join(u *tally) {
	t.area.Add(u.area.Value())
	t.areaNoise.Add(u.areaNoise.Value())
	t.evaluations += u.evaluations
	t.defect.join(u.defect)
	t.unfit += u.unfit
	if t.first == nil {
		t.first = u.first
	}
}

// round goes through all triangles, or through the rough ones once they are
// known. Tallies are joined in the order of the chunks; of several errors the one
// of the first chunk counts.
func (j *job) round() (*tally, error) {
	n := len(j.m.Triangles)
	if j.rough != nil {
		n = len(j.rough)
	}
	chunks := (n + chunk - 1) / chunk
	tallies := make([]*tally, chunks)
	failed := make([]error, chunks)
	var next, stop atomic.Int64
	stop.Store(int64(chunks))
	var wg sync.WaitGroup
	for _, w := range j.workers {
		wg.Go(func() {
			for {
				i := next.Add(1) - 1
				if i >= stop.Load() {
					return
				}
				tallies[i] = &tally{}
				failed[i] = w.chunk(tallies[i], int(i)*chunk, min(int(i+1)*chunk, n))
				for failed[i] != nil {
					s := stop.Load()
					if i >= s || stop.CompareAndSwap(s, i) {
						break
					}
				}
			}
		})
	}
	wg.Wait()
	total := &tally{}
	for i, t := range tallies {
		if failed[i] != nil {
			return total, failed[i]
		}
		total.join(t)
	}
	if total.unfit > 0 {
		return total, &DefectError{First: total.first, Triangles: total.unfit, Of: len(j.m.Triangles), Worst: total.defect}
	}
	return total, nil
}
