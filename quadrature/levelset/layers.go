package levelset

import "math"

// layers are the areas on which the size of a density lies between two powers of
// two, by the nodes of all leaves, also of those that were refined.
type layers [2*layerRange + 1]float64

const (
	layerRange = 200
	// narrow is by how much more of a slab than of the surface may lie where the
	// density is large, lengths being compared to lengths.
	narrow = 32
)

// add counts a node of the density f that stands for an area.
func (l *layers) add(f, area float64) {
	_, e := math.Frexp(f)
	l[min(max(e, -layerRange), layerRange)+layerRange] += area
}

// mean estimates the mean of the density over slabs through the surface, about as
// long as it is. Where the density is at least t on a part A(t) of the surface,
// of the area A, a slab is taken to have min(1, 32 √(A(t)/A)) of its length
// there; the mean is the integral of this over t. So a density that grows like
// the inverse distance from a point costs the logarithm of the largest value
// met, and one that is large on a thousandth of the surface or more costs all
// of it.
func (l *layers) mean() float64 {
	total := 0.0
	for _, a := range l {
		total += a
	}
	sum, above := 0.0, 0.0
	for i := len(l) - 1; i >= 0; i-- {
		above += l[i]
		if above > 0 {
			sum += math.Ldexp(min(1, narrow*math.Sqrt(above/total)), i-layerRange-1)
		}
	}
	return sum
}
