package limit

import (
	"testing"
)

// The jets of mollified branches, by the way they are found.
func BenchmarkMollified(b *testing.B) {
	plane, space := box(-1, 1, -1, 1), box(-1, 1, -1, 1, .5, 3)
	for _, c := range []struct {
		name string
		p    *Problem
		x    []float64
	}{
		{"plane/wall", problem(plane, &Mollifier{Width: 1}, affine(0, 1, 0), affine(0, -1, 0)), []float64{.02, .1}},
		{"plane/three", problem(plane, &Mollifier{Width: 1}, affine(0, 1, 0), affine(0, -.5, root), affine(0, -.5, -root)), []float64{.02, .03}},
		{"plane/cap", problem(plane, &Mollifier{Width: 1}, fromPoint(-1, 0), affine(1, 0, 0)), []float64{.02, .03}},
		{"plane/lines", problem(plane, &Mollifier{Width: 1}, fromPoint(-1, 0), affine(1, 0, 0), affine(1, .2, .7)), []float64{.02, .03}},
		{"plane/tip", problem(plane, &Mollifier{Width: 1}, fromPoint(0, 0), affine(-1, 0, 0)), []float64{.02, .03}},
		{"space/wall", problem(space, &Mollifier{Width: 1}, layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0)), []float64{.02, .1, 1}},
		{"space/three", problem(space, &Mollifier{Width: 1}, layeredBranch(1, 0, 0), layeredBranch(-.5, root, 0), layeredBranch(-.5, -root, 0)), []float64{.02, .03, 1}},
		{"space/smooth", problem(space, &Mollifier{Width: 1}, focal, layeredBranch(0, 0, -.7)), []float64{.2, .1, 1}},
		{"space/cap", problem(space, &Mollifier{Width: 1}, focal, layeredBranch(0, 0, -.7)), []float64{1.2, .1, 1}},
		{"space/lines", problem(space, &Mollifier{Width: 1}, focal, layeredBranch(0, 0, -.7), layeredBranch(.3, 1, -1.72)), []float64{1.2, .1, 1}},
		{"space/axis", problem(space, &Mollifier{Width: 1}, cone(1), layeredBranch(0, 0, -9)), []float64{.02, .03, 1}},
	} {
		b.Run(c.name, func(b *testing.B) {
			out := NewJet(len(c.x))
			for b.Loop() {
				c.p.Smoothing.Smooth(c.p, c.x, .05, &out)
			}
			b.ReportMetric(float64(len(c.p.Smoothing.(*Mollifier).work.set)), "branches")
		})
	}
}

func BenchmarkParaboloidInABox(b *testing.B) {
	p := front(box(-2.5, 2.5, -2.5, 2.5, .5, 3), focal, flat)
	for b.Loop() {
		e, err := p.Integrate(b.Context(), 1./320)
		if err != nil || !e.Met {
			b.Fatal(e, err)
		}
		b.ReportMetric(float64(e.Evaluations), "evaluations")
	}
}
