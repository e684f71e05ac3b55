package disc_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/quadrature/adaptive"
	"creaseproof/quadrature/disc"
)

// sliced is the area by integrating the lengths of the lines s = constant.
func sliced(t *testing.T, p [][2]float64, c disc.Conic) float64 {
	t.Helper()
	length := func(s float64) float64 {
		lo, hi := math.Inf(1), math.Inf(-1)
		for i, a := range p {
			b := p[(i+1)%len(p)]
			if (a[0]-s)*(b[0]-s) > 0 || a[0] == b[0] {
				continue
			}
			v := a[1] + (b[1]-a[1])*(s-a[0])/(b[0]-a[0])
			lo, hi = min(lo, v), max(hi, v)
		}
		h := c.Radius*c.Radius - s*s
		if h <= 0 {
			return 0
		}
		if c.Slope > 0 {
			lo, hi = max(lo, (-c.Shift-math.Sqrt(h))/c.Slope), min(hi, (-c.Shift+math.Sqrt(h))/c.Slope)
		} else if math.Abs(c.Shift) > math.Sqrt(h) {
			return 0
		}
		return max(0, hi-lo)
	}
	// Cuts at corners, at the ends of the conic, and so many that what a kink costs
	// stays in few of the parts.
	cuts := []float64{-c.Radius, c.Radius}
	for _, x := range p {
		cuts = append(cuts, x[0])
	}
	slices.Sort(cuts)
	sum := 0.0
	for i := 1; i < len(cuts); i++ {
		if cuts[i] == cuts[i-1] {
			continue
		}
		v, _, _, _ := adaptive.Integrate(t.Context(), length, cuts[i-1], cuts[i], 1e-13, 100000)
		sum += v
	}
	return sum
}

func polygon(rng *rand.Rand, n int, size float64) [][2]float64 {
	angles := make([]float64, n)
	for i := range angles {
		angles[i] = 2 * math.Pi * rng.Float64()
	}
	slices.Sort(angles)
	x, y := rng.NormFloat64()/2, rng.NormFloat64()/2
	var p [][2]float64
	for _, a := range angles {
		p = append(p, [2]float64{x + size*math.Cos(a), y + size*1.3*math.Sin(a)})
	}
	if rng.IntN(2) == 0 {
		slices.Reverse(p)
	}
	return p
}

func TestCutAgainstSlices(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	met := 0
	for range 400 {
		p := polygon(rng, 3+rng.IntN(5), 0.2+2*rng.Float64())
		c := disc.Conic{Slope: rng.Float64(), Shift: rng.NormFloat64() / 3, Radius: 0.3 + rng.Float64()}
		switch rng.IntN(5) {
		case 0:
			c.Slope = 1
		case 1:
			c.Slope = math.Pow(10, -9*rng.Float64())
		case 2:
			c.Slope = 0
		}
		want := sliced(t, p, c)
		r, ok := disc.Cut(p, c)
		if !ok {
			assert.Less(t, want, 1e-13, "%v %v", p, c)
			continue
		}
		met++
		require.InDelta(t, want, r.Area, 1e-11*want+1e-13, "%v %+v", p, c)
		assert.Less(t, r.Error, 1e-12)
		for _, x := range append(r.Boundary, r.Point) {
			assert.LessOrEqual(t, math.Hypot(x[0], c.Slope*x[1]+c.Shift), c.Radius*(1+1e-12))
		}
		x := r.Point
		assert.Less(t, math.Hypot(x[0], c.Slope*x[1]+c.Shift), c.Radius)
	}
	assert.Greater(t, met, 200)
}

func TestCutSpecial(t *testing.T) {
	square := [][2]float64{{-1, -1}, {1, -1}, {1, 1}, {-1, 1}}
	area := func(p [][2]float64, c disc.Conic) float64 {
		r, ok := disc.Cut(p, c)
		if !ok {
			return 0
		}
		return r.Area
	}
	one := disc.Conic{Slope: 1, Radius: 1}
	for _, v := range []struct {
		c    disc.Conic
		want float64
	}{
		{one, math.Pi}, // touches all edges
		{disc.Conic{Slope: 1, Radius: 0.5}, math.Pi / 4},
		{disc.Conic{Slope: 1, Radius: math.Sqrt2}, 4},            // through all corners
		{disc.Conic{Slope: 1, Radius: 1.5}, 4},                   // around them
		{disc.Conic{Slope: 1, Shift: 1, Radius: 1}, math.Pi / 2}, // about the middle of an edge
		{disc.Conic{Slope: 1, Shift: 2, Radius: 1}, 0},
		{disc.Conic{Slope: 0.5, Radius: 0.25}, math.Pi / 8},
		{disc.Conic{Slope: 0, Radius: 0.25}, 1}, // a strip of width 1/2
		{disc.Conic{Slope: 0, Shift: 0.25, Radius: 0.25}, 0},
		{disc.Conic{Slope: 0, Shift: 0.15, Radius: 0.25}, 0.8},
		{disc.Conic{Slope: 1e-12, Radius: 0.25}, 1},
	} {
		assert.InDelta(t, v.want, area(square, v.c), 1e-14, "%+v", v.c)
	}
	assert.Zero(t, area(nil, one))
	assert.Zero(t, area(square[:2], one))
	// A disc of which an edge cuts off next to nothing, or leaves next to nothing:
	// r² (a - sin a)/2 with cos(a/2) = 1 - h.
	for _, h := range []float64{1e-3, 1e-6, 1e-9, 1e-12} {
		h = 1 - (1 - h) // as it is rounded
		half := 2 * math.Asin(math.Sqrt(h/2))
		a := 2 * half
		cap := a * a * a / 12 * (1 - a*a/20*(1-a*a/42))
		p := [][2]float64{{-3, -3}, {1 - h, -3}, {1 - h, 3}, {-3, 3}}
		assert.InDelta(t, math.Pi-cap, area(p, one), 1e-14)
		q := [][2]float64{{1 - h, -3}, {3, -3}, {3, 3}, {1 - h, 3}}
		assert.InEpsilon(t, cap, area(q, one), 1e-11+4e-15/math.Sqrt(h))
	}
}

func TestChord(t *testing.T) {
	for _, v := range []struct {
		p, d   [2]float64
		lo, hi float64
	}{
		{[2]float64{-2, 0}, [2]float64{4, 0}, 0.25, 0.75},
		{[2]float64{0, 0}, [2]float64{2, 0}, 0, 0.5},
		{[2]float64{0, 0}, [2]float64{0.5, 0}, 0, 1},
		{[2]float64{0, 0}, [2]float64{0, 0}, 0, 1},
		{[2]float64{-2, 1}, [2]float64{4, 0}, 0, 0}, // touches
		{[2]float64{2, 0}, [2]float64{1, 0}, 0, 0},
		{[2]float64{2, 0}, [2]float64{0, 0}, 0, 0},
	} {
		lo, hi := disc.Chord(v.p, v.d, 1)
		if v.hi == 0 {
			assert.GreaterOrEqual(t, lo, hi, "%+v", v)
			continue
		}
		assert.InDelta(t, v.lo, lo, 1e-15)
		assert.InDelta(t, v.hi, hi, 1e-15)
	}
}

// The half of a disc.
func ExampleCut() {
	half := [][2]float64{{-2, 0}, {2, 0}, {2, 2}, {-2, 2}}
	r, ok := disc.Cut(half, disc.Conic{Slope: 1, Radius: 1})
	fmt.Printf("%.12f %t\n", r.Area, ok)
	// Output: 1.570796326795 true
}
