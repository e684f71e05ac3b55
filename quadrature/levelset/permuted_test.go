package levelset

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Planes a + b y + c z - x in a box, with a cylinder about the axis of x and two
// half-spaces as conditions. Where the zeros of two conditions cross is found
// along the one that comes first, so that every order has to give the same. Lines
// of constant y meet every condition in an interval of z.
func TestConditionsInAnyOrder(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 14))
	orders := [][3]int{{0, 1, 2}, {0, 2, 1}, {1, 0, 2}, {1, 2, 0}, {2, 0, 1}, {2, 1, 0}}
	for i := range 60 {
		u := func(w float64) float64 { return w * (2*rng.Float64() - 1) }
		a, b, c, r, z0 := u(0.8), u(3), u(3), 0.4+0.6*rng.Float64(), u(0.5)
		if i == 0 {
			a, b, c, r, z0 = 5.0/7, -3, 1, 0.8, 1.0/3
		}
		phi := plane(a, -1, b, c)
		trims := []Function{quadric{a: []float64{0, -1, -1}, b: zero3, c: []float64{0, 0, z0}, d: r * r}}
		var half [2][4]float64
		for k := range half {
			half[k] = [4]float64{u(0.4), u(1), u(1), u(1)}
			if i == 0 {
				half[k] = [4]float64{float64(k), 1, 0.6, 0.8}
			}
			trims = append(trims, plane(half[k][0], half[k][1:]...))
		}
		box := [][2]float64{{-1, 0.5}, {-r, r}, {z0 - r, z0 + r}}

		const n = 40_000
		sum := 0.0
		for j := range n {
			y := r * (2*(float64(j)+0.5)/n - 1)
			w := math.Sqrt(r*r - y*y)
			lo, hi := z0-w, z0+w
			cut := func(p, q float64) { // p + q z >= 0
				if q > 0 {
					lo = max(lo, -p/q)
				} else {
					hi = min(hi, -p/q)
				}
			}
			cut(a+b*y+1, c)
			cut(0.5-a-b*y, -c)
			for _, h := range half {
				cut(h[0]+h[1]*(a+b*y)+h[2]*y, h[1]*c+h[3])
			}
			sum += max(0, hi-lo)
		}
		want := sum * 2 * r / n * math.Sqrt(1+b*b+c*c)

		for _, o := range orders {
			res, err := run(phi, []Function{trims[o[0]], trims[o[1]], trims[o[2]]}, box, Options{Rel: 1e-9, Abs: 1e-9})
			if want < 1e-4 && err != nil {
				require.ErrorIs(t, err, ErrEmpty)
				continue
			}
			require.NoError(t, err, "%d", i)
			assert.InDelta(t, want, res.Value[0], 2e-6+res.Error[0], "%d %v", i, o)
		}
	}
}
