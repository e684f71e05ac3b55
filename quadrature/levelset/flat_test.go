package levelset

import (
	"math"
	"math/rand/v2"
	"testing"

	"creaseproof/entropy/interval"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// powers is Σ c_j (l_j·x)^k_j - 1 with even powers: convex, and its surface is
// seen from the origin. It has flat points where k_j > 2.
type powers []struct {
	c float64
	l []float64
	k int
}

func (p powers) Value(x []float64) float64 {
	s := -1.0
	for _, t := range p {
		s += t.c * math.Pow(dot(t.l, x), float64(t.k))
	}
	return s
}

func (p powers) Gradient(g, x []float64) {
	clear(g)
	for _, t := range p {
		d := t.c * float64(t.k) * math.Pow(dot(t.l, x), float64(t.k-1))
		for i := range g {
			g[i] += d * t.l[i]
		}
	}
}

func along(l []float64, box []Interval) Interval {
	s := interval.Point(0)
	for i, b := range box {
		s = s.Add(interval.Point(l[i]).Mul(b))
	}
	return s
}

func (p powers) Range(box []Interval) Interval {
	s := interval.Point(-1)
	for _, t := range p {
		s = s.Add(interval.Point(t.c).Mul(along(t.l, box).Pown(t.k)))
	}
	return s
}

func (p powers) GradientRange(g, box []Interval) {
	for i := range g {
		g[i] = interval.Point(0)
	}
	for _, t := range p {
		d := interval.Point(t.c * float64(t.k)).Mul(along(t.l, box).Pown(t.k - 1))
		for i := range g {
			g[i] = g[i].Add(interval.Point(t.l[i]).Mul(d))
		}
	}
}

func dot(a, b []float64) (s float64) {
	for i, x := range a {
		s += x * b[i]
	}
	return s
}

// seen is the area of a surface seen from the origin, projected to the faces of
// a cube: with p = r d and d on a face, dA = r² |grad f|/(grad f·d). On each
// quarter of a face it is a product of Gauss-Legendre rules: none of the heights
// of the package.
func seen(f Function, dim int) float64 {
	g := newGauss(90)
	sum := 0.0
	d, x, n := make([]float64, dim), make([]float64, dim), make([]float64, dim)
	ray := func(w float64) {
		at := func(r float64) float64 {
			for i := range x {
				x[i] = r * d[i]
			}
			return f.Value(x)
		}
		r := crossing(at, 0, 8, at(0), at(8))
		at(r)
		f.Gradient(n, x)
		sum += w * math.Pow(r, float64(dim-1)) * norm(n) / dot(n, d)
	}
	for axis := range dim {
		for _, side := range [2]float64{-1, 1} {
			d[axis] = side
			for i, a := range g.x {
				for _, sa := range [2]float64{-1, 1} {
					d[(axis+1)%dim] = sa * a
					if dim == 2 {
						ray(g.w[i])
						continue
					}
					for j, b := range g.x {
						for _, sb := range [2]float64{-1, 1} {
							d[(axis+2)%dim] = sb * b
							ray(g.w[i] * g.w[j])
						}
					}
				}
			}
		}
	}
	return sum
}

func TestFlatPoints(t *testing.T) {
	axes := func(k int, c ...float64) (p powers) {
		for i, a := range c {
			l := make([]float64, len(c))
			l[i] = 1
			p = append(p, powers{{a, l, k}}...)
		}
		return p
	}
	rng := rand.New(rand.NewPCG(5, 8))
	turned := func(dim, terms int, k ...int) (p powers) {
		for j := range terms {
			l := make([]float64, dim)
			for i := range l {
				l[i] = rng.NormFloat64()
			}
			if terms == dim { // a frame
				for _, before := range p {
					part := dot(l, before.l)
					for i := range l {
						l[i] -= part * before.l[i]
					}
				}
			}
			size := norm(l)
			for i := range l {
				l[i] /= size
			}
			p = append(p, powers{{0.5 + rng.Float64(), l, k[j%len(k)]}}...)
		}
		return p
	}
	for _, c := range []struct {
		name string
		f    powers
	}{
		{"quartic curve", axes(4, 1, 1)},
		{"sextic curve", axes(6, 1, 1)},
		{"degree 16", axes(16, 1, 1)},
		{"long quartic curve", axes(4, 1, 10)},
		{"quartic", axes(4, 1, 1, 1)},
		{"sextic", axes(6, 1, 1, 1)},
		{"degree 8", axes(8, 1, 1, 1)},
		{"superellipsoid", axes(4, 0.5, 2, 8)},
		{"mixed", powers{{1, []float64{1, 0, 0}, 2}, {1, []float64{0, 1, 0}, 4}, {1, []float64{0, 0, 1}, 6}}},
		{"nearly flat", powers{{1, []float64{1, 0, 0}, 4}, {1e-4, []float64{1, 0, 0}, 2}, {1, []float64{0, 1, 0}, 4}, {1, []float64{0, 0, 1}, 4}}},
		{"turned quartic curve", turned(2, 2, 4)},
		{"turned quartic curve of three terms", turned(2, 3, 4)},
		{"turned quartic", turned(3, 3, 4)},
		{"turned quartic, 5 terms", turned(3, 5, 4)},
		{"turned, 6 terms of degrees 4 and 2", turned(3, 6, 4, 2)},
		{"turned, 4 terms of degrees 4 and 6", turned(3, 4, 4, 6)},
	} {
		t.Run(c.name, func(t *testing.T) {
			dim := len(c.f[0].l)
			want := seen(c.f, dim)
			r, err := run(c.f, nil, cube(-3, 3)[:dim], Options{Rel: 1e-9})
			require.NoError(t, err)
			assert.LessOrEqual(t, math.Abs(r.Value[0]-want), r.Error[0]+1e-12*want)
			assert.LessOrEqual(t, r.Error[0], 1.1e-9*want)
		})
	}
}
