package levelset

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestTrims(t *testing.T) {
	ball, b := sphere(1, 0, 0, 0), cube(-1.5, 1.5)
	n := math.Sqrt(1.05)
	for _, c := range []struct {
		name  string
		exact float64
		phi   Function
		trims []Function
	}{
		{"the same twice", 2 * math.Pi, ball, []Function{plane(0, 1, 0.2, 0.1), plane(0, 1, 0.2, 0.1)}},
		{"octant", math.Pi / 2, ball, []Function{plane(0, 1, 0, 0), plane(0, 0, 1, 0), plane(0, 0, 0, 1)}},
		{"sliver", 2 * math.Pi * 1e-5 / n, ball, []Function{plane(0, 1, .1, .2), plane(1e-5, -1, -.1, -.2)}},
		{"plane without a disc", 9*n - math.Pi, plane(0, 1, .1, .2), []Function{ball}},
		{"coordinate plane without a disc", 9 - math.Pi, plane(0, 1, 0, 0), []Function{ball}},
		{"lune", 2 * 0.3, ball, []Function{plane(0, 0, 1, 0), plane(0, math.Sin(0.3), -math.Cos(0.3), 0)}},
	} {
		t.Run(c.name, func(t *testing.T) {
			r, err := run(c.phi, c.trims, b, Options{Rel: 1e-9})
			require.NoError(t, err)
			assert.InEpsilon(t, c.exact, r.Value[0], 1e-9)
			assert.LessOrEqual(t, math.Abs(r.Value[0]-c.exact), r.Error[0])
		})
	}
	// A trim that touches leaves nothing.
	r, err := run(ball, []Function{plane(-1, 1, 0, 0)}, b, Options{Rel: 1e-6})
	if err == nil {
		assert.LessOrEqual(t, r.Value[0], r.Error[0])
	}
}

// Caps cut by planes in random places, and thin ones.
func TestRandomCaps(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for i := range 40 {
		x, y, z := rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()
		r := math.Sqrt(x*x + y*y + z*z)
		h := 2*rng.Float64() - 1
		if i%4 == 0 {
			h = 1 - math.Pow(10, -4*rng.Float64())
		}
		ball := sphere(1, 0.1*rng.Float64(), 0.1*rng.Float64(), 0.1*rng.Float64())
		d := (x*ball.c[0]+y*ball.c[1]+z*ball.c[2])/r + h
		exact := 2 * math.Pi * (1 - h)
		res, err := run(ball, []Function{plane(-d, x/r, y/r, z/r)}, cube(-1.5, 1.5), Options{Rel: 1e-8})
		require.NoError(t, err)
		assert.LessOrEqual(t, math.Abs(res.Value[0]-exact), res.Error[0], "%d: h = %g", i, h)
		assert.InEpsilon(t, exact, res.Value[0], 1e-8, "%d: h = %g", i, h)
	}
}

// The flux of x through a closed surface is three times its volume.
func TestNormal(t *testing.T) {
	f := func(x, n, out []float64) {
		out[0] = x[0]*n[0] + x[1]*n[1] + x[2]*n[2]
		out[1] = n[0]
	}
	r, err := Integrate(context.Background(), squares(1, 1./2, 1./3, 0.1, 0, 0), nil, cube(-1.5, 1.5), f,
		Options{Parts: 2, Rel: 1e-10, Abs: 1e-10, AreaRel: 1e-10})
	require.NoError(t, err)
	assert.InEpsilon(t, 4*math.Pi/6, r.Value[0], 1e-10)
	assert.InDelta(t, 0, r.Value[1], 1e-10)
	assert.InEpsilon(t, ellipsoid(1, 1./2, 1./3), r.Area, 1e-10)
	assert.LessOrEqual(t, math.Abs(r.Area-ellipsoid(1, 1./2, 1./3)), r.AreaError)
}

// A small sheet, radius 1/200 of the box, beside a large one in many places.
func TestSmallSheet(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	const r = 3. / 200
	for range 10 {
		c := []float64{rng.Float64() - 0.5, rng.Float64() - 0.5, rng.Float64() - 0.5}
		res, err := run(product{sphere(1.1, 0, 0, 0), sphere(r, c...)}, nil, cube(-1.5, 1.5), Options{Rel: 1e-6})
		require.NoError(t, err)
		exact := 4 * math.Pi * (1.21 + r*r)
		assert.LessOrEqual(t, math.Abs(res.Value[0]-exact), res.Error[0])
		assert.InEpsilon(t, exact, res.Value[0], 1e-6)
	}
}
