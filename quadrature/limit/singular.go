package limit

import (
	"math"
	"slices"
)

// Steps of the search for singular places.
const (
	gridPlaces = 9    // in each direction of the parameters
	starts     = 4    // of the search, for each branch
	mostMoves  = 12   // before a step is halved
	directions = 24   // about a place
	suspicious = 1e3  // second derivatives over their median
	still      = 0.5  // of a contribution, over ten halvings of the radius
	negligible = 1e-9 // contributions over the size of an integral
)

// singular looks for a place at which second derivatives of a branch are
// unbounded and the energy of the approximation diverges: E is the density and
// ρ the distance from the place, and E ρ² does not fall on circles about it (in
// one dimension E ρ). In three dimensions the circles lie in one plane, and the
// place must not be alone. What it misses the integration may still find.
func (w *walk) singular() *InfiniteError {
	for i := range w.jets {
		if at := w.steepest(i); at != nil && w.diverges(i, at) {
			return &InfiniteError{Point: at, Branch: i}
		}
	}
	return nil
}

// hessian is the size of the second derivatives of branch i at the parameters
// s, infinite where they are not finite.
func (w *walk) hessian(i int, s []float64) float64 {
	copy(w.s, s)
	w.move()
	return w.hessianAt(i)
}

func (w *walk) hessianAt(i int) float64 {
	w.p.Jets(w.x, w.jets)
	var h float64
	for _, v := range w.jets[i].H {
		h += v * v // NaN stays
	}
	h = math.Sqrt(h)
	if math.IsNaN(h) {
		return math.Inf(1)
	}
	return h
}

// steepest is a place at which the second derivatives of branch i are far
// greater than elsewhere, nil where there is none.
func (w *walk) steepest(i int) []float64 {
	type place struct {
		s []float64
		h float64
	}
	d := &w.p.Domain
	var list []place
	total := 1
	for range w.n {
		total *= gridPlaces
	}
	s := make([]float64, w.n)
	for m := range total {
		for j := range s {
			s[j] = d.Lo[j] + (d.Hi[j]-d.Lo[j])*(float64(m%gridPlaces)+0.43)/gridPlaces
			m /= gridPlaces
		}
		list = append(list, place{slices.Clone(s), w.hessian(i, s)})
	}
	slices.SortStableFunc(list, func(a, b place) int {
		switch {
		case a.h > b.h:
			return -1
		case a.h < b.h:
			return 1
		}
		return 0
	})
	middle := list[total/2].h
	best := place{}
	for _, p := range list[:min(starts, total)] {
		moves := 0
		for step := 0.5 / gridPlaces; step > 1e-15 && !math.IsInf(p.h, 0); moves++ {
			better := false
			for j := range w.n {
				for _, sign := range []float64{-1, 1} {
					q := slices.Clone(p.s)
					q[j] = math.Min(math.Max(q[j]+sign*step*(d.Hi[j]-d.Lo[j]), d.Lo[j]), d.Hi[j])
					if h := w.hessian(i, q); h > p.h {
						p, better = place{q, h}, true
					}
				}
			}
			if !better || moves%mostMoves == mostMoves-1 {
				step /= 2
			}
		}
		if p.h > best.h {
			best = p
		}
	}
	if best.s == nil || !(best.h > suspicious*middle) {
		return nil
	}
	w.hessian(i, best.s)
	return slices.Clone(w.x)
}

// diverges reports whether the energy diverges at x, a place where branch i is
// not smooth.
func (w *walk) diverges(i int, at []float64) bool {
	size := math.Inf(1)
	for j, lo := range w.p.Domain.Lo {
		size = math.Min(size, w.p.Domain.Hi[j]-lo)
	}
	if w.n == 3 && w.alone(i, at, size/64) {
		return false
	}
	ring := func(radius float64) float64 {
		var sum float64
		n := 0
		for k := range directions {
			sin, cos := math.Sincos(2 * math.Pi * (float64(k) + 0.31) / directions)
			w.towards(at, radius*cos, radius*sin)
			w.p.Smoothing.Smooth(w.p, w.x, w.eps, &w.u)
			e := w.p.Density(w.x, w.eps, &w.u).Energy
			if !math.IsNaN(e) && !math.IsInf(e, 0) {
				sum += e
				n++
			}
		}
		return sum / float64(n) * math.Pow(radius, math.Min(2, float64(w.n)))
	}
	a, b, c := ring(size*0x1p-14), ring(size*0x1p-22), ring(size*0x1p-30)
	return b > still*a && c > still*b && c > negligible*w.scale[w.n-1]
}

// towards sets the position to a place in the plane through at.
func (w *walk) towards(at []float64, a, b float64) {
	copy(w.x, at)
	switch w.n {
	case 1:
		w.x[0] += math.Copysign(math.Hypot(a, b), a)
	case 2:
		w.x[0] += a
		w.x[1] += b
	default: // an orthonormal pair in no particular direction
		for j, e := range [3][2]float64{{0.6, 0.48}, {-0.64, 0.768}, {-0.48, -0.424}} {
			w.x[j] += a*e[0] + b*e[1]
		}
	}
}

// alone reports whether no other singular place is found on a sphere about one
// in three dimensions.
func (w *walk) alone(i int, at []float64, radius float64) bool {
	value := func(theta, phi float64) float64 {
		st, ct := math.Sincos(theta)
		sp, cp := math.Sincos(phi)
		w.x[0], w.x[1], w.x[2] = at[0]+radius*st*cp, at[1]+radius*st*sp, at[2]+radius*ct
		return w.hessianAt(i)
	}
	var sum, best float64
	var theta, phi float64
	const places = 16
	for j := range places {
		for k := range 2 * places {
			t, f := math.Pi*(float64(j)+0.5)/places, math.Pi*(float64(k)+0.29)/places
			h := value(t, f)
			sum += math.Min(h, 1e300)
			if h > best {
				best, theta, phi = h, t, f
			}
		}
	}
	mean := sum / (2 * places * places)
	moves := 0
	for step := 0.2; step > 1e-15 && !math.IsInf(best, 0); moves++ {
		better := false
		for _, d := range [4][2]float64{{step, 0}, {-step, 0}, {0, step}, {0, -step}} {
			if h := value(theta+d[0], phi+d[1]); h > best {
				best, theta, phi, better = h, theta+d[0], phi+d[1], true
			}
		}
		if !better || moves%mostMoves == mostMoves-1 {
			step /= 2
		}
	}
	return !(best > suspicious*mean)
}
