package limit

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// plane is the function c + g·x.
type plane struct {
	c float64
	g [3]float64
}

func (f plane) at(x [3]float64) float64 { return f.c + f.g[0]*x[0] + f.g[1]*x[1] + f.g[2]*x[2] }
func (f plane) minus(g plane) plane {
	return plane{f.c - g.c, [3]float64{f.g[0] - g.g[0], f.g[1] - g.g[1], f.g[2] - g.g[2]}}
}

// clip is the part of a convex polygon where f >= 0.
func clip(poly [][3]float64, f plane) (out [][3]float64) {
	for i, a := range poly {
		b := poly[(i+1)%len(poly)]
		fa, fb := f.at(a), f.at(b)
		if fa >= 0 {
			out = append(out, a)
		}
		if fa >= 0 != (fb >= 0) {
			t := fa / (fa - fb)
			out = append(out, [3]float64{a[0] + t*(b[0]-a[0]), a[1] + t*(b[1]-a[1]), a[2] + t*(b[2]-a[2])})
		}
	}
	return out
}

func product(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

// polygons is the energy of the creases of the maximum of affine fronts in a box.
func polygons(list []plane, lo, hi []float64) (energy float64) {
	for i, f := range list {
		for j, g := range list[:i] {
			d := f.minus(g)
			n := math.Sqrt(d.g[0]*d.g[0] + d.g[1]*d.g[1] + d.g[2]*d.g[2])
			if n == 0 {
				continue
			}
			nu := [3]float64{d.g[0] / n, d.g[1] / n, d.g[2] / n}
			var e [3]float64
			k := 0
			for a := range nu {
				if math.Abs(nu[a]) < math.Abs(nu[k]) {
					k = a
				}
			}
			e[k] = 1
			p := product(nu, e)
			l := math.Sqrt(p[0]*p[0] + p[1]*p[1] + p[2]*p[2])
			p = [3]float64{p[0] / l, p[1] / l, p[2] / l}
			q := product(nu, p)
			var poly [][3]float64
			for _, s := range [4][2]float64{{-9, -9}, {9, -9}, {9, 9}, {-9, 9}} {
				var x [3]float64
				for a := range x {
					x[a] = -d.c/n*nu[a] + s[0]*p[a] + s[1]*q[a]
				}
				poly = append(poly, x)
			}
			for a := range lo {
				var h plane
				h.g[a] = 1
				h.c = -lo[a]
				poly = clip(poly, h)
				h.g[a] = -1
				h.c = hi[a]
				poly = clip(poly, h)
			}
			for k, h := range list {
				if k != i && k != j {
					poly = clip(poly, f.minus(h))
				}
			}
			var sum [3]float64
			for k := 1; k+1 < len(poly); k++ {
				var a, b [3]float64
				for c := range a {
					a[c], b[c] = poly[k][c]-poly[0][c], poly[k+1][c]-poly[0][c]
				}
				for c, v := range product(a, b) {
					sum[c] += v / 2
				}
			}
			area := math.Sqrt(sum[0]*sum[0] + sum[1]*sum[1] + sum[2]*sum[2])
			perp := d.g[0]*d.g[0] + d.g[1]*d.g[1]
			energy += area * perp * perp / (12 * n)
		}
	}
	return energy
}

// randomFronts are affine functions on the well of the layered model.
func randomFronts(rng *rand.Rand, n int) (list []plane, bs []branch) {
	of := func(n int) int { return rng.IntN(2*n+1) - n }
	for range n {
		p, q, c := float64(of(15))/10, float64(of(15))/10, float64(of(3))/10
		list = append(list, plane{c, [3]float64{p, q, (p*p + q*q) / 2}})
		bs = append(bs, layeredBranch(p, q, c))
	}
	return list, bs
}

// chords is the energy per height of the creases of fronts of slope 1 on the
// unit disc: segments, each a chord cut by half-planes.
func chords(list []plane) (energy float64) {
	for i, f := range list {
		for j, g := range list[:i] {
			d := f.minus(g)
			n := math.Hypot(d.g[0], d.g[1])
			if !(math.Abs(d.c) < n) {
				continue
			}
			foot := [3]float64{-d.c * d.g[0] / (n * n), -d.c * d.g[1] / (n * n)}
			hi := math.Sqrt(1 - d.c*d.c/(n*n))
			lo := -hi
			along := [3]float64{-d.g[1] / n, d.g[0] / n}
			for k, h := range list {
				if k == i || k == j {
					continue
				}
				e := f.minus(h)
				rate := e.g[0]*along[0] + e.g[1]*along[1]
				t := -e.at(foot) / rate
				if rate > 0 {
					lo = math.Max(lo, t)
				} else {
					hi = math.Min(hi, t)
				}
			}
			energy += math.Max(0, hi-lo) * n * n * n / 12
		}
	}
	return energy
}

// The estimates of the energies of jumps are compared with the exact energies,
// and so are those on the same domains by cuts that are searched for.
func TestErrorsOfSharp(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(1, 11))
	check := func(p *Problem, list []plane, want float64, k int) {
		p.Rel = 1e-5
		p.Values = func(x, v []float64) {
			for i, f := range list {
				v[i] = f.at([3]float64(x))
			}
		}
		e, estimate, _, err := p.Sharp(t.Context())
		require.NoError(t, err)
		assert.LessOrEqual(t, math.Abs(e-want), estimate+1e-13, k)
		assert.Less(t, estimate, 1e-4*want, k)
	}
	sets := 20
	if testing.Short() {
		sets = 9
	}
	for k := range sets {
		list, bs := randomFronts(rng, 3+k%3)
		d := box(-1, 1, -.9, 1.1, 0, 1)
		want := polygons(list, d.Lo, d.Hi)
		check(front(d, bs...), list, want, k)
		if k == 8 { // of which search finds the least
			d.Map = func(s, x []float64, jac [][]float64) {
				copy(x, s)
				for j, row := range jac {
					clear(row)
					row[j] = 1
				}
			}
			check(front(d, bs...), list, want, k)
		}
	}
	var list []plane
	var bs []branch
	for range 5 {
		s, c := math.Sincos(2 * math.Pi * rng.Float64())
		h := rng.Float64()*.6 - .3
		list = append(list, plane{h, [3]float64{c, s, .5}})
		bs = append(bs, layeredBranch(c, s, h))
	}
	check(front(cylinder(0, 1, 0, 1), bs...), list, chords(list), sets)
}

// The gap of four fronts whose creases leave a box through its edges is a
// multiple of eps up to what is exponentially small, whatever eps is; and that of
// fronts in general is a eps + b eps².
func TestErrorsOfFronts(t *testing.T) {
	t.Parallel()
	p := front(box(-1, 1, -1, 1, 0, 1), layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0), layeredBranch(0, 1, 0), layeredBranch(0, -1, 0))
	p.Rel = 1e-5
	list := sweep(t, p, 1./40, 1./2560)
	for _, e := range list[1:] {
		want := (list[0].Energy - 4./3) / list[0].Eps
		assert.InDelta(t, want, (e.Energy-4./3)/e.Eps, e.Error/e.Eps+list[0].Error/list[0].Eps)
		assert.Less(t, e.Error, 3e-5)
	}
	if testing.Short() {
		return
	}
	rng := rand.New(rand.NewPCG(2, 11))
	randomFronts(rng, 3)
	planes, bs := randomFronts(rng, 4)
	d := box(-1, 1, -.9, 1.1, 0, 1)
	exact := polygons(planes, d.Lo, d.Hi)
	p = front(d, bs...)
	p.Rel = 1e-5
	var slope, err [3]float64
	for i, e := range sweep(t, p, 1./80, 1./160, 1./320) {
		slope[i], err[i] = (e.Energy-exact)/e.Eps, e.Error/e.Eps
	}
	assert.InDelta(t, 0, slope[0]-3*slope[1]+2*slope[2], err[0]+3*err[1]+2*err[2])
}
