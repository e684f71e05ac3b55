package limit

import (
	"math"
	"slices"
)

// mostPlanes of creases of which each two or three are intersected.
const mostPlanes = 120

// crease is c + Σ g[j] s[j] = 0: two affine branches agree (i and j, not equal),
// or a parameter is at an end of its range.
type crease struct {
	c    float64
	g    [3]float64
	i, j int
}

// planar reports whether all creases are planes of the parameters.
func (w *walk) planar() bool {
	n := w.p.Branches
	return w.n <= 3 && w.p.Domain.Map == nil && len(w.p.Affine) == n && !slices.Contains(w.p.Affine, false) && n*(n-1)/2 <= mostPlanes
}

// arrange finds the planes of creases and of the faces of the domain.
func (w *walk) arrange() {
	w.creases = w.creases[:0]
	for k := range w.n {
		w.s[k] = w.p.Domain.Lo[k] + (w.p.Domain.Hi[k]-w.p.Domain.Lo[k])/2
	}
	w.move()
	w.p.Jets(w.x, w.jets)
	for i := range w.p.Branches {
		for j := range i {
			a := crease{c: w.jets[i].U - w.jets[j].U, i: i, j: j}
			for k := range w.n {
				a.g[k] = w.jets[i].P[k] - w.jets[j].P[k]
				a.c -= a.g[k] * w.s[k]
			}
			w.creases = append(w.creases, a)
		}
	}
	for k := range w.n {
		for _, s := range [2]float64{w.p.Domain.Lo[k], w.p.Domain.Hi[k]} {
			a := crease{c: -s}
			a.g[k] = 1
			w.creases = append(w.creases, a)
		}
	}
}

// vertices are the places of the parameter of a level where, on what lies along
// it and the further ones, creases meet one another or faces of the domain at a
// point: between them the pattern of creases along the further parameters is the
// same. They are exact up to rounding.
func (w *walk) vertices(depth int) (at []float64) {
	k := w.order[depth]
	lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
	free := w.order[depth:]
	m := len(free)
	w.reduced = w.reduced[:0]
	for _, a := range w.creases {
		r := crease{c: a.c, i: a.i, j: a.j}
		for _, j := range w.order[:depth] {
			r.c += a.g[j] * w.s[j]
		}
		var size float64
		for d, j := range free {
			r.g[d] = a.g[j]
			size = math.Max(size, math.Abs(r.g[d])*(w.p.Domain.Hi[j]-w.p.Domain.Lo[j]))
		}
		if size > 0 && (r.i != r.j || r.g[0] == 0) {
			w.reduced = append(w.reduced, r)
		}
	}
	var pick [3]int
	var choose func(n, from int)
	choose = func(n, from int) {
		if n == m {
			if s, ok := w.meet(free, pick[:m]); ok && s > lo && s < hi {
				at = append(at, s)
			}
			return
		}
		for i := from; i < len(w.reduced); i++ {
			pick[n] = i
			choose(n+1, i+1)
		}
	}
	choose(0, 0)
	slices.Sort(at)
	return at
}

// meet is the first of the free parameters where the planes picked meet, if that
// is in the domain and the sharp function has these creases there.
func (w *walk) meet(free, pick []int) (float64, bool) {
	const near = 1e-9
	m := len(pick)
	var a [9]float64
	for r, i := range pick {
		for d := range m {
			a[r*m+d] = w.reduced[i].g[d]
		}
	}
	size := 1.0
	for r := range m {
		size *= length(a[r*m : (r+1)*m])
	}
	det := signed(a[:], m)
	if !(math.Abs(det) > 1e-10*size) {
		return 0, false // parallel
	}
	var s [3]float64
	for d := range m {
		b := a
		for r, i := range pick {
			b[r*m+d] = -w.reduced[i].c
		}
		s[d] = signed(b[:], m) / det
		j := free[d]
		lo, hi := w.p.Domain.Lo[j], w.p.Domain.Hi[j]
		if !(s[d] >= lo-near*(hi-lo) && s[d] <= hi+near*(hi-lo)) {
			return 0, false
		}
	}
	for d, j := range free {
		w.s[j] = s[d]
	}
	w.move()
	w.p.Values(w.x, w.v)
	top := w.v[w.p.active(w.v)]
	for _, i := range pick {
		if r := &w.reduced[i]; r.i != r.j {
			slack := near * (1 + math.Abs(top))
			if math.Abs(w.v[r.i]-top) > slack || math.Abs(w.v[r.j]-top) > slack {
				return 0, false
			}
		}
	}
	return s[0], true
}

// signed is the determinant of 1, 2 or 3 rows.
func signed(a []float64, n int) float64 {
	switch n {
	case 1:
		return a[0]
	case 2:
		return a[0]*a[3] - a[1]*a[2]
	}
	return a[0]*(a[4]*a[8]-a[5]*a[7]) - a[1]*(a[3]*a[8]-a[5]*a[6]) + a[2]*(a[3]*a[7]-a[4]*a[6])
}
