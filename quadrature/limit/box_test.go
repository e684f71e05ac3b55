package limit

import (
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// later is -(x² + y²)/(2 (z + c)) - k.
func later(c, k float64) branch {
	return func(x []float64, j *Jet) {
		focal([]float64{x[0], x[1], x[2] + c}, j)
		j.U -= k
	}
}

// inwards is c - |(x, y)|, on the well of the planar eikonal model.
func inwards(c float64) branch {
	return func(x []float64, j *Jet) {
		fromPoint(0, 0)(x, j)
		j.U = c - j.U
		for i := range j.P {
			j.P[i] = -j.P[i]
		}
		for i := range j.H {
			j.H[i] = -j.H[i]
		}
	}
}

func front(d Domain, branches ...branch) *Problem { return problem(d, &Front{}, branches...) }

func lower(d Domain, branches ...branch) *Problem { return problem(d, &Front{Min: true}, branches...) }

const focus = 0.7

var (
	flat = layeredBranch(0, 0, -focus)

	// On ρ² = 2 k t the jump has the horizontal part ρ/t and the density times
	// the area is |[∇u]|³/12 dl dt over slices t = const (see cases/library):
	// ∫ (ρ/t)³/12 2πρ dt = ∫ (2 π k²/3) dt/t.
	paraboloid = 2 * math.Pi * focus * focus / 3 * math.Log(6)

	closed = map[string]struct {
		p      *Problem
		energy float64
		rate   float64 // of the front
	}{
		"paraboloid": {front(box(-2.5, 2.5, -2.5, 2.5, .5, 3), focal, flat), paraboloid, 2},
		"a quarter":  {front(box(0, 2.5, 0, 2.5, .5, 3), focal, flat), paraboloid / 4, 2},
		// ρ² = 2 k t (t + c)/c; over slices as above with ρ (1/t - 1/(t + c)).
		"two foci": {front(box(-2.4, 2.4, -2.3, 2.5, .5, 1.5), focal, later(2, .5)), 2 * math.Pi * .25 / 3 * math.Log(1.5*2.5/(.5*3.5)), 1},
		// Arcs of r = 1, q = 2 ν, density 8/12; the corner at the origin, where
		// the gradients turn, is outside.
		"arc": {lower(box(.2, 1.5, .2, 1.5), fromPoint(0, 0), inwards(2)), 2. / 3 * (math.Pi/2 - 2*math.Asin(.2)), 1},
		// y = x²/4 is as far from (0, 1) as from y = -1, with |q|² = 4/(1 + y):
		// ∫ |q|³/12 dl = (2/3) ∫ dx/(1 + x²/4), |x| < √2.
		"parabola": {lower(box(-2, 2, -1, .5), fromPoint(0, 1), affine(1, 0, 1)), 8. / 3 * math.Atan(math.Sqrt2/2), 1},
		// Four planes through two edges of the box each, q = √2 ν, area √2 each.
		"pyramid": {front(box(-1, 1, -1, 1, 0, 1), layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0), layeredBranch(0, 1, 0), layeredBranch(0, -1, 0)), 4. / 3, 1},
		// The same turned, so that no plane is at a special place.
		"six fronts": {front(box(-1, 1.2, -.9, 1, 0, .5), hexagon(0.2)...), sectors(-1, 1.2, -.9, 1, 0.2) * .5, 1},
	}
)

// hexagon are six affine branches of slope 1 in directions 60° apart.
func hexagon(turn float64) (list []branch) {
	for k := range 6 {
		s, c := math.Sincos(turn + float64(k)*math.Pi/3)
		list = append(list, layeredBranch(c, s, 0))
	}
	return list
}

// sectors is the energy per height of their creases, the rays half-way between
// them, with q of length 1 and density 1/12: the lengths of the rays in the
// rectangle over 12.
func sectors(x0, x1, y0, y1, turn float64) (e float64) {
	for k := range 6 {
		s, c := math.Sincos(turn + (float64(k)+.5)*math.Pi/3)
		l := math.Inf(1)
		for _, t := range []float64{x0 / c, x1 / c, y0 / s, y1 / s} {
			if t > 0 {
				l = math.Min(l, t)
			}
		}
		e += l / 12
	}
	return e
}

func TestClosedCreasesInBoxes(t *testing.T) {
	for name, c := range closed {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			p := *c.p
			p.Rel = 1e-9
			energy, estimate, _, err := p.Sharp(t.Context())
			require.NoError(t, err)
			assert.InEpsilon(t, c.energy, energy, 1e-8)
			assert.LessOrEqual(t, math.Abs(energy-c.energy), estimate+1e-13)

			p.Rel = 1e-6
			list := sweep(t, &p, .02, .005)
			for _, e := range list {
				assert.Less(t, e.Error, 3e-5*c.energy)
			}
			r := rate(list, c.energy)
			require.NotNil(t, r)
			assert.InDelta(t, c.rate, r.Value, .05)
			last := list[1]
			if c.rate == 2 {
				assert.InEpsilon(t, 1, last.Compression/last.Bending, 1e-4)
			}
		})
	}
}

// The whole is four quarters, which have nodes of their own.
func TestBoxAgainstItsQuarters(t *testing.T) {
	t.Parallel()
	if testing.Short() {
		t.Skip("TestClosedCreasesInBoxes has both")
	}
	for _, eps := range []float64{.05, .003125} {
		whole := sweep(t, front(box(-2.5, 2.5, -2.5, 2.5, .5, 3), focal, flat), eps)[0]
		part := sweep(t, front(box(0, 2.5, 0, 2.5, .5, 3), focal, flat), eps)[0]
		assert.InDelta(t, 4*part.Energy, whole.Energy, whole.Error+4*part.Error)
		assert.InEpsilon(t, 4*part.Energy, whole.Energy, 5e-6)
		assert.Less(t, whole.Evaluations, 5_000_000)
	}
}

// Cones meet in a cone about their axis, whose energy has the closed form
// π |m1 - m2|³ (m1 + m2) h²/24 for the height h below its tip: over slices
// ∫ |m1 - m2|³/12 2π (m1 + m2) t/2 dt.
func TestConesInABox(t *testing.T) {
	p := front(box(-1, 1.1, -.9, 1, -1, 0), cone(1), cone(.5))
	energy, estimate, _, err := p.Sharp(t.Context())
	require.NoError(t, err)
	want := math.Pi * .125 * 1.5 / 24
	assert.InEpsilon(t, want, energy, 1e-7)
	assert.LessOrEqual(t, math.Abs(energy-want), estimate+1e-13)
	_, err = p.Integrate(t.Context(), .1)
	var infinite *InfiniteError
	assert.ErrorAs(t, err, &infinite)
}

// Shares add up to 1 wherever they are asked for.
func TestSharesAddUp(t *testing.T) {
	for name, c := range closed {
		for _, sharp := range []bool{false, true} {
			w, err := newWalk(t.Context(), c.p, .02, sharp)
			require.NoError(t, err)
			for i := range 200 {
				for j := range w.n {
					_, f := math.Modf(float64(i+1) * math.Sqrt(float64(2+j*(j+1))))
					w.s[j] = w.p.Domain.Lo[j] + f*(w.p.Domain.Hi[j]-w.p.Domain.Lo[j])
				}
				w.move()
				w.p.Jets(w.x, w.jets)
				var sum float64
				for k := range w.n {
					f := w.share(k)
					assert.GreaterOrEqual(t, f, 0.)
					sum += f
				}
				assert.InDelta(t, 1, sum, 1e-12, name)
			}
		}
	}
}

func TestBudgetEnds(t *testing.T) {
	for name, c := range closed {
		p := *c.p
		p.MaxEvaluations = 20_000
		e, err := p.Integrate(t.Context(), 1./320)
		require.NoError(t, err, name)
		assert.Less(t, e.Evaluations, 500_000, name)
		if e.Met {
			assert.Less(t, e.Error, 3e-5*c.energy, name)
		}
	}
}
