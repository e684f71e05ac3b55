package levelset

import (
	"context"
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// hidden has values that are not numbers although its enclosures are fine.
type hidden struct{ Function }

func (h hidden) Value([]float64) float64 { return math.NaN() }

func (h hidden) Gradient(g, _ []float64) {
	for i := range g {
		g[i] = math.NaN()
	}
}

// nowhere is a function defined nowhere.
type nowhere struct{ hidden }

func (nowhere) Range([]Interval) Interval { return Interval{}.Recip() }

func run(phi Function, trims []Function, box [][2]float64, opt Options) (Result, error) {
	opt.Parts = 1
	return Integrate(context.Background(), phi, trims, box, one, opt)
}

func TestMissesBox(t *testing.T) {
	_, err := run(sphere(1, 3, 0, 0), nil, cube(-1, 1), Options{})
	assert.ErrorIs(t, err, ErrEmpty)
	_, err = run(sphere(0.1, 0, 0, 0), nil, cube(0.5, 1), Options{})
	assert.ErrorIs(t, err, ErrEmpty)
	_, err = run(sphere(1, 0, 0, 0), []Function{plane(-2, 1, 0, 0)}, cube(-1.5, 1.5), Options{})
	assert.ErrorIs(t, err, ErrEmpty, "trimmed away")
	_, err = run(nowhere{hidden{sphere(1, 0, 0, 0)}}, nil, cube(-1, 1), Options{})
	assert.ErrorIs(t, err, ErrEmpty, "defined nowhere")
}

func TestNotFinite(t *testing.T) {
	_, err := run(hidden{sphere(1, 0, 0, 0)}, nil, cube(-1.5, 1.5), Options{})
	require.Error(t, err)
	assert.NotErrorIs(t, err, ErrEmpty)
	_, err = run(hidden{plane(0, 1, 0.1, 0)}, nil, cube(-1.5, 1.5), Options{})
	require.Error(t, err)
	assert.NotErrorIs(t, err, ErrEmpty)
	_, err = Integrate(context.Background(), sphere(1, 0, 0, 0), nil, cube(-1.5, 1.5),
		func(_, _, out []float64) { out[0] = math.Inf(1) }, Options{Parts: 1})
	assert.ErrorIs(t, err, ErrNotFinite)
	_, err = Integrate(context.Background(), sphere(1, 0, 0, 0), nil, cube(-1.5, 1.5),
		func(x, _, out []float64) { out[0] = math.Log(x[2]) }, Options{Parts: 1})
	assert.ErrorIs(t, err, ErrNotFinite)
}

func TestIdentical(t *testing.T) {
	_, err := run(plane(0, 0, 0, 0), nil, cube(-1, 1), Options{})
	assert.ErrorIs(t, err, ErrIdentical)
}

func TestInput(t *testing.T) {
	ball := sphere(1, 0, 0, 0)
	for _, box := range [][][2]float64{nil, {{0, 1}}, {{0, 1}, {0, 1}, {0, 1}, {0, 1}}, {{0, 1}, {1, 1}, {0, 1}},
		{{0, 1}, {2, 1}, {0, 1}}, {{0, math.NaN()}, {0, 1}, {0, 1}}, {{math.Inf(-1), 0}, {0, 1}, {0, 1}}, {{1e10, 1e10 + 1}, {0, 1}, {0, 1}}} {
		_, err := run(ball, nil, box, Options{})
		assert.ErrorIs(t, err, ErrInput, "%v", box)
	}
	_, err := run(ball, nil, cube(-1, 1), Options{Rel: -1})
	assert.ErrorIs(t, err, ErrInput)
	_, err = run(ball, nil, cube(-1, 1), Options{Rel: math.NaN()})
	assert.ErrorIs(t, err, ErrInput)
	_, err = run(nil, nil, cube(-1, 1), Options{})
	assert.ErrorIs(t, err, ErrInput)
}

func TestCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	_, err := Integrate(ctx, sphere(1, 0, 0, 0), nil, cube(-1.5, 1.5), one, Options{Parts: 1})
	assert.ErrorIs(t, err, context.Canceled)

	ctx, cancel = context.WithCancel(context.Background())
	calls := 0
	r, err := Integrate(ctx, torus{1, .4, [3]float64{}}, nil, cube(-2, 2), func(_, _, out []float64) {
		if calls++; calls == 50000 {
			cancel()
		}
		out[0] = 1
	}, Options{Parts: 1, Rel: 1e-11})
	require.ErrorIs(t, err, context.Canceled)
	assert.LessOrEqual(t, math.Abs(r.Value[0]-4*math.Pi*math.Pi*.4), r.Error[0], "partial result")
}

func TestBudget(t *testing.T) {
	exact := 4 * math.Pi * math.Pi * .4
	r, err := run(torus{1, .4, [3]float64{}}, nil, cube(-2, 2), Options{Rel: 1e-11, MaxNodes: 30000})
	require.ErrorIs(t, err, ErrBudget)
	assert.LessOrEqual(t, math.Abs(r.Value[0]-exact), r.Error[0])
	assert.Less(t, r.Error[0], exact)

	r, err = run(torus{1, .4, [3]float64{}}, nil, cube(-2, 2), Options{Rel: 1e-9, MaxCells: 60})
	require.ErrorIs(t, err, ErrResolution)
	assert.Positive(t, r.Undecided)
	assert.Positive(t, r.Resolution)
	assert.LessOrEqual(t, math.Abs(r.Value[0]-exact), r.Error[0])
}

// The tip of a cone is a singular point: its cell is left undecided and small.
func TestConeTip(t *testing.T) {
	cone := quadric{a: []float64{1, 1, -1}, b: zero3, c: []float64{0.013, 0.027, 0.0411}}
	// The whole cone from z = -1 to 1 about its tip, cut by trims.
	h0, h1 := 1+0.0411, 1-0.0411
	exact := math.Sqrt2 * math.Pi * (h0*h0 + h1*h1)
	r, err := run(cone, nil, [][2]float64{{-1.5, 1.5}, {-1.5, 1.5}, {-1, 1}}, Options{Rel: 1e-9})
	require.NoError(t, err)
	assert.InEpsilon(t, exact, r.Value[0], 1e-9)
	assert.LessOrEqual(t, math.Abs(r.Value[0]-exact), r.Error[0])
	assert.Positive(t, r.Undecided)
	assert.Less(t, r.Resolution, 1e-3)
	t.Logf("nodes %d, cells %d, resolution %.1e", r.Nodes, r.Cells, r.Resolution)
}

// Sheets that cross along a line, and a level set counted twice, cannot be
// resolved; what was reached is reported.
func TestUnresolved(t *testing.T) {
	cross := product{plane(0.01, 1, 0.3, 0), plane(0.02, 0.2, 1, 0)}
	r, err := run(cross, nil, cube(-1, 1), Options{Rel: 1e-9, MaxCells: 20000})
	require.ErrorIs(t, err, ErrResolution)
	exact := 4*math.Hypot(1, 0.3) + 4*math.Hypot(0.2, 1)
	assert.LessOrEqual(t, math.Abs(r.Value[0]-exact), r.Error[0])
	assert.Less(t, math.Abs(r.Value[0]-exact), 1e-2*exact)

	double := product{plane(0, 1, 0, 0), plane(0, 1, 0, 0)}
	_, err = run(double, nil, cube(-1, 1), Options{Rel: 1e-6, MaxCells: 20000})
	require.ErrorIs(t, err, ErrResolution)
}

// A density with a kink across the surface is slow, but its error is honest.
func TestRoughDensity(t *testing.T) {
	f := func(x, _, out []float64) { out[0] = math.Abs(x[2] - 0.31) }
	exact := 2 * math.Pi * (1.31*1.31 + 0.69*0.69) / 2
	r, err := Integrate(context.Background(), sphere(1, 0, 0, 0), nil, cube(-1.5, 1.5), f, Options{Parts: 1, Rel: 1e-5})
	require.NoError(t, err)
	assert.LessOrEqual(t, math.Abs(r.Value[0]-exact), r.Error[0])
	f = func(x, _, out []float64) { out[0] = 1 / math.Abs(x[2]-0.31) }
	r, err = Integrate(context.Background(), sphere(1, 0, 0, 0), nil, cube(-1.5, 1.5), f, Options{Parts: 1, Rel: 1e-5, MaxNodes: 200000})
	require.ErrorIs(t, err, ErrBudget, "not integrable")
	assert.Greater(t, r.Error[0], 0.01*r.Value[0])
}

// A condition that vanishes on the surface, or on a part of it, says nothing.
func TestVanishing(t *testing.T) {
	ball := sphere(1, 0, 0, 0)
	both := product{ball, plane(0.1, 1, 0.3, 0)}
	for name, c := range map[string]struct {
		phi   Function
		trims []Function
		box   [][2]float64
	}{
		"the function itself":   {ball, []Function{plane(0.1, 1, 2, 3), ball}, cube(-1.5, 1.5)},
		"minus it":              {ball, []Function{plane(0.1, 1, 2, 3), minus{ball}}, cube(-1.5, 1.5)},
		"minus its square":      {ball, []Function{plane(0.1, 1, 2, 3), minus{product{ball, ball}}}, cube(-1.5, 1.5)},
		"a multiple":            {ball, []Function{plane(0.1, 1, 2, 3), product{ball, plane(0.1, 1, -2, 3)}}, cube(-1.5, 1.5)},
		"a part of the surface": {both, []Function{plane(0.1, 1, 2, 3), product{ball, plane(0.1, 1, -2, 3)}}, cube(-1.5, 1.5)},
		"a circle":              {sphere(1, 0, 0), []Function{plane(0.1, 1, 2), sphere(1, 0, 0)}, cube(-1.5, 1.5)[:2]},
	} {
		_, err := run(c.phi, c.trims, c.box, Options{Rel: 1e-9})
		var v *VanishingError
		if assert.ErrorAs(t, err, &v, name) {
			assert.Equal(t, 1, v.Condition, name)
			assert.InDelta(t, 0, ball.Value(append(v.Point, 0)[:3]), 1e-12, name)
		}
	}
	// One that is small is none of these.
	small := quadric{a: zero3, b: []float64{1e-12, 0, 0}, c: zero3}
	r, err := run(ball, []Function{small}, cube(-1.5, 1.5), Options{Rel: 1e-9})
	require.NoError(t, err)
	assert.InEpsilon(t, 2*math.Pi, r.Area, 1e-9)
}

// pole is a condition with a pole in the box: 1/(x - 0.1) - 3 and no enclosure
// next to the pole.
type pole struct{}

func (p pole) Value(x []float64) float64 { return 1/(x[0]-0.1) - 3 }

func (p pole) Gradient(g, x []float64) {
	clear(g)
	g[0] = -1 / ((x[0] - 0.1) * (x[0] - 0.1))
}

func (p pole) Range(box []Interval) Interval {
	d := box[0].Sub(span(0.1, 0.1))
	if !certain(d) {
		return span(1, 0)
	}
	return span(1, 1).Div(d).Sub(span(3, 3))
}

func (p pole) GradientRange(g, box []Interval) {
	d := box[0].Sub(span(0.1, 0.1))
	for i := range g {
		g[i] = span(0, 0)
	}
	if g[0] = span(1, 0); certain(d) {
		g[0] = span(-1, -1).Div(d.Sqr())
	}
}

// A condition with a pole does not vanish, wide as its enclosures are.
func TestPoleIsNotVanishing(t *testing.T) {
	for _, phi := range []Function{sphere(1, 0, 0, 0), plane(0, 0, 1, 0.2)} {
		r, err := run(phi, []Function{pole{}}, cube(-1.5, 1.5), Options{Rel: 1e-4, MaxCells: 20000})
		var v *VanishingError
		assert.NotErrorAs(t, err, &v)
		assert.Positive(t, r.Area)
	}
}
