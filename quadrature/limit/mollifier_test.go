package limit

import (
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
)

// brute convolves in the plane by polar coordinates about a place in the ball:
// rays at equally spaced angles, on which places where two branches are equal are
// halved in.
func brute(p *Problem, x, from []float64, delta float64, angles int) Jet {
	out := NewJet(2)
	c := 5 / math.Pi
	v := make([]float64, p.Branches)
	j := make([]Jet, p.Branches)
	for i := range j {
		j[i] = NewJet(2)
	}
	g := newGauss(12)
	for a := range angles {
		sin, cos := math.Sincos(2 * math.Pi * (float64(a) + 0.123) / float64(angles))
		ox, oy := (from[0]-x[0])/delta, (from[1]-x[1])/delta
		foot := ox*cos + oy*sin
		end := -foot + math.Sqrt(1+foot*foot-ox*ox-oy*oy)
		at := func(r float64) []float64 { return []float64{from[0] + delta*r*cos, from[1] + delta*r*sin} }
		who := func(r float64) int { p.Values(at(r), v); return p.active(v) }
		less := func(r float64, i, j int) bool { p.Values(at(r), v); return v[i] < v[j] }
		cuts := []float64{0}
		const looks = 40
		p.Values(at(0), v)
		before := slices.Clone(v)
		for k := range looks {
			lo, hi := end*float64(k)/looks, end*float64(k+1)/looks
			p.Values(at(hi), v)
			after := slices.Clone(v)
			for i := range p.Branches {
				for j := range i {
					first := before[i] < before[j]
					if after[i] < after[j] == first {
						continue
					}
					l, h := lo, hi
					for range 50 {
						if m := (l + h) / 2; less(m, i, j) == first {
							l = m
						} else {
							h = m
						}
					}
					cuts = append(cuts, h)
				}
			}
			before = after
			if k%10 == 9 {
				cuts = append(cuts, hi)
			}
		}
		slices.Sort(cuts)
		for k := 1; k < len(cuts); k++ {
			i := who((cuts[k-1] + cuts[k]) / 2)
			for q, s := range g.x {
				r := cuts[k-1] + (cuts[k]-cuts[k-1])*s
				w := g.w[q] * (cuts[k] - cuts[k-1]) * r * 2 * math.Pi / float64(angles)
				p.Jets(at(r), j)
				y := []float64{ox + r*cos, oy + r*sin}
				rest := 1 - y[0]*y[0] - y[1]*y[1]
				rho, slope := c*math.Pow(rest, 4), 8*c*math.Pow(rest, 3)
				out.U += w * rho * j[i].U
				for a, g := range j[i].P {
					out.P[a] += w * rho * g
					out.H[a] += w * slope * y[0] * g / delta
					out.H[2+a] += w * slope * y[1] * g / delta
				}
			}
		}
	}
	return out
}

func smoothed(p *Problem, eps float64, x ...float64) Jet {
	out := NewJet(len(x))
	p.Smoothing.Smooth(p, x, eps, &out)
	return out
}

func assertJet(t *testing.T, want, got Jet, tol, eps float64, name string) {
	t.Helper()
	assert.InDelta(t, want.U, got.U, tol, name)
	for i := range want.P {
		assert.InDelta(t, want.P[i], got.P[i], tol, name)
	}
	for i := range want.H {
		assert.InDelta(t, want.H[i], got.H[i], tol/eps, name)
	}
}

// parabola is (x² - y²)/2 + x y/3 + x/5.
func parabola(x []float64, j *Jet) {
	j.U = (x[0]*x[0]-x[1]*x[1])/2 + x[0]*x[1]/3 + x[0]/5
	j.P[0], j.P[1] = x[0]+x[1]/3+.2, -x[1]+x[0]/3
	copy(j.H, []float64{1, 1. / 3, 1. / 3, -1})
}

const rays = 20000

// The general path, caps and closed forms against rays.
func TestMollifiedAgainstRays(t *testing.T) {
	t.Parallel()
	plane := box(-1, 1, -1, 1)
	for name, c := range map[string]struct {
		branches []branch
		tree     string
		x        [][]float64
		tol      float64
	}{
		"two affine":     {[]branch{affine(.1, 1, .3), affine(0, -.4, .8)}, "max", [][]float64{{0, 0}, {-.1, .05}, {.06, .1}}, 1e-7},
		"three affine":   {[]branch{affine(0, 1, 0), affine(0, -.5, root), affine(.02, -.5, -root)}, "max", [][]float64{{.012, -.007}, {.03, -.05}, {-.1, .02}, {.13, .1}}, 1e-7},
		"nested":         {[]branch{affine(0, 1, 0), affine(0, 0, 1), affine(.02, -.5, -root)}, "max(min(1, 2), 3)", [][]float64{{.012, -.007}, {.03, -.05}, {-.1, .02}, {.04, .1}}, 1e-7},
		"a circle":       {[]branch{fromPoint(-1, 0), affine(1, 0, 0)}, "max", [][]float64{{.01, .005}, {.1, .1}, {-.15, .02}}, 1e-7},
		"a parabola":     {[]branch{fromPoint(-.8, .1), affine(.9, 0, .2)}, "min", [][]float64{{.05, .1}, {.12, .1}, {.05, -.02}}, 1e-7},
		"two curved":     {[]branch{parabola, affine(0, -.3, .1)}, "max", [][]float64{{.01, .005}, {-.1, .1}, {.08, -.08}}, 1e-7},
		"three curved":   {[]branch{parabola, affine(0, -.7, .1), fromPoint(.9, .9)}, "min(max(1, 2), 3)", [][]float64{{.01, .005}, {-.1, .1}, {.3, .3}}, 1e-7},
		"a cone's tip":   {[]branch{fromPoint(.05, .02), affine(-9, 0, 0)}, "max", [][]float64{{.1, .1}, {-.1, .05}, {.1, -.1}}, 1e-7},
		"a cone cut off": {[]branch{fromPoint(.05, .02), affine(.1, .2, 0)}, "max", [][]float64{{.1, .1}, {-.1, .05}, {.1, -.05}}, 1e-7},
	} {
		m := &Mollifier{Width: 2}
		p := problem(plane, m, c.branches...)
		p.Combine = tree(c.tree, len(c.branches))
		if testing.Short() {
			c.x = c.x[:1]
		}
		for _, x := range c.x {
			from := x
			if strings.Contains(name, "cone") {
				from = []float64{.05, .02} // its tip
			}
			if strings.HasPrefix(name, "a circle") || strings.HasPrefix(name, "a parabola") {
				from = []float64{x[0] - .12, x[1]} // inside, so that no ray touches it
			}
			want := brute(p, x, from, .2, rays)
			got := smoothed(p, .1, x...)
			assertJet(t, want, got, c.tol, .1, name)
			if again := NewJet(2); m.finer(p, x, .1, &again) {
				assertJet(t, again, got, 1e-8, .1, name+", finer")
			}
			// The order of branches does not matter.
			if c.tree == "max" {
				p := problem(plane, &Mollifier{Width: 2}, c.branches[1], c.branches[0])
				if len(c.branches) == 3 {
					p = problem(plane, &Mollifier{Width: 2}, c.branches[2], c.branches[0], c.branches[1])
				}
				assertJet(t, got, smoothed(p, .1, x...), 1e-8, .1, name+", in another order")
			}
		}
	}
}

// Values by mpmath, 30 digits: the regularised incomplete beta function, and
// integrals in polar coordinates about the tip.
func TestMollifiedClosedForms(t *testing.T) {
	wall := problem(box(-1, 1, -1, 1), &Mollifier{Width: 1}, affine(0, 1, 0), affine(0, -1, 0))
	j := smoothed(wall, .5, .15, .4)
	assert.InDelta(t, 2*.840342263760720323159859858017-1, j.P[0], 1e-14)
	assert.InDelta(t, 2*.846127496725142063957311064076/.5, j.H[0], 1e-13)
	space := problem(box(-1, 1, -1, 1, -1, 1), &Mollifier{Width: 1}, affine(0, 1, 0, 0), affine(0, -1, 0, 0))
	j = smoothed(space, .5, .15, .4, -.2)
	assert.InDelta(t, 2*.851316276078886714061321338592-1, j.P[0], 1e-14)
	assert.InDelta(t, 2*.8446372588951171875/.5, j.H[0], 1e-13)
	cone := problem(box(-1, 1, -1, 1), &Mollifier{Width: 1}, fromPoint(.1, .2), affine(-9, 0, 0))
	j = smoothed(cone, .5, .1, .2)
	assert.InDelta(t, .369408369408369408*.5, j.U, 1e-9)
	assert.InDelta(t, 4.06349206349206349/.5, j.H[0]+j.H[3], 1e-8)
	assert.InDelta(t, j.H[0], j.H[3], 1e-8)
	assert.InDelta(t, 0, j.P[0], 1e-9)
	j = smoothed(cone, .5, .1+.15*.6, .2+.15*.8)
	assert.InDelta(t, 3.33193785964542772/.5, j.H[0]+j.H[3], 1e-8)
	assert.InDelta(t, .552447056833344615, .6*j.P[0]+.8*j.P[1], 1e-9)
	assert.InDelta(t, 0, .8*j.P[0]-.6*j.P[1], 1e-9)
}

// turned is the rotation of the plane that takes (1, 0) to (4, 3)/5, about the
// origin, and a translation.
func turned(x, y float64) (float64, float64) { return .8*x - .6*y + .31, .6*x + .8*y - .27 }

// Energies by mpmath, from ∫(1 - S²)² and ∫ρ² of the kernel integrated over
// lines or planes, S the regularised incomplete beta function.
func TestEnergyOfMollifiedWalls(t *testing.T) {
	for name, c := range map[string]struct {
		p                    *Problem
		compression, bending float64
	}{
		"plane": {problem(box(-1, 1, 0, 1), &Mollifier{}, affine(0, 1, 0), affine(0, -1, 0)), .682656347017594347, .165132518214983794},
		"space": {problem(box(-1, 1, 0, 1, 0, 1), &Mollifier{}, layeredBranch(1, 0, 0), layeredBranch(-1, 0, 0)), .653943767623688774, .172214916595048511},
		// The jump √2 of a square's diagonals.
		"at an angle": {problem(box(-1, 1, 0, 1), &Mollifier{}, affine(0, 1, 0), affine(0, 0, 1)), .682656347017594347 / 4 * math.Sqrt2, .165132518214983794 / 2 * math.Sqrt2},
		"turned": {problem(Domain{Lo: []float64{-1, 0}, Hi: []float64{1, 1}, Map: func(s, x []float64, jac [][]float64) {
			x[0], x[1] = turned(s[0], s[1])
			copy(jac[0], []float64{.8, .6})
			copy(jac[1], []float64{-.6, .8})
		}}, &Mollifier{}, affine(-.31*.8+.27*.6, .8, .6), affine(.31*.8-.27*.6, -.8, -.6)), .682656347017594347, .165132518214983794},
	} {
		if name == "at an angle" {
			c.p.Domain = box(-1, 1, -.5, .5)
			c.p.Domain.Map = func(s, x []float64, jac [][]float64) { // the crease x = y along it
				x[0], x[1] = s[0]+s[1], s[1]-s[0]
				copy(jac[0], []float64{1, -1})
				copy(jac[1], []float64{1, 1})
			}
		}
		e, err := c.p.Integrate(t.Context(), .02)
		assert.NoError(t, err, name)
		assert.InDelta(t, c.compression, e.Compression, 2*e.Error+1e-9, name)
		assert.InDelta(t, c.bending, e.Bending, 2*e.Error+1e-9, name)
		assert.Less(t, e.Error, 1e-7, name)
		assert.True(t, e.Met, name)
	}
}

// A problem that is moved and turned has the same jets, moved and turned.
func TestMollifiedJetsMoveWithTheProblem(t *testing.T) {
	moved := func(b branch) branch {
		return func(x []float64, j *Jet) {
			a, c := x[0]-.31, x[1]+.27
			k := NewJet(2)
			b([]float64{.8*a + .6*c, -.6*a + .8*c}, &k)
			j.U = k.U
			j.P[0], j.P[1] = .8*k.P[0]-.6*k.P[1], .6*k.P[0]+.8*k.P[1]
			r := [2][2]float64{{.8, -.6}, {.6, .8}}
			for i := range 2 {
				for l := range 2 {
					j.H[2*i+l] = 0
					for m := range 2 {
						for n := range 2 {
							j.H[2*i+l] += r[i][m] * r[l][n] * k.H[2*m+n]
						}
					}
				}
			}
		}
	}
	for name, list := range map[string][]branch{
		"three":  {affine(0, 1, 0), affine(0, -.5, root), affine(.02, -.5, -root)},
		"circle": {fromPoint(-1, 0), affine(1, 0, 0)},
		"tip":    {fromPoint(.05, .02), affine(.1, .2, 0)},
	} {
		var other []branch
		for _, b := range list {
			other = append(other, moved(b))
		}
		p, q := problem(box(-1, 1, -1, 1), &Mollifier{Width: 2}, list...), problem(box(-1, 1, -1, 1), &Mollifier{Width: 2}, other...)
		for i := range q.Affine {
			q.Affine[i] = p.Affine[i]
		}
		for _, x := range [][2]float64{{.04, .03}, {-.07, .05}, {.02, -.11}} {
			a, b := turned(x[0], x[1])
			want, got := smoothed(p, .1, x[0], x[1]), smoothed(q, .1, a, b)
			assert.InDelta(t, want.U, got.U, 1e-8, name)
			assert.InDelta(t, .8*want.P[0]-.6*want.P[1], got.P[0], 1e-7, name)
			assert.InDelta(t, .6*want.P[0]+.8*want.P[1], got.P[1], 1e-7, name)
			assert.InDelta(t, want.H[0]+want.H[3], got.H[0]+got.H[3], 1e-6, name)
			assert.InDelta(t, want.H[0]*want.H[3]-want.H[1]*want.H[2], got.H[0]*got.H[3]-got.H[1]*got.H[2], 1e-4, name)
		}
	}
}
