package mesh_test

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/quadrature"
	"creaseproof/quadrature/mesh"
)

func one(_, _, _, _ []float64) float64 { return 1 }

// orders are the observed orders of convergence of values towards exact as the
// meshes are refined by factors of two.
func orders(exact float64, values []float64) (out []float64) {
	for i := 1; i < len(values); i++ {
		out = append(out, math.Log2(math.Abs(values[i-1]-exact)/math.Abs(values[i]-exact)))
	}
	return out
}

func TestSecondOrderOfClosedForms(t *testing.T) {
	fronts := func() (mesh.Integrand, error) {
		return mesh.Integrand{Traces: focal(1), Density: layered, Well: well}, nil
	}
	// The density |nu_perp|⁴/12 of a jump along the normal: 8 π r²/45 on a
	// sphere.
	normal := func(_, _, _, nu []float64) float64 {
		s := nu[0]*nu[0] + nu[1]*nu[1]
		return s * s / 12
	}
	for _, c := range []struct {
		name      string
		make      func(n int) soup
		integrand func() (mesh.Integrand, error)
		exact     float64
		first     int
	}{
		{"sphere, area", func(n int) soup { return sphere(1.5, n) }, alone(one), 4 * math.Pi * 2.25, 8},
		{"sphere, density", func(n int) soup { return sphere(1.5, n) }, alone(normal), 8 * math.Pi * 2.25 / 45, 8},
		{"torus, area", func(n int) soup { return torus(2, 0.5, 2*n, n) }, alone(one), 4 * math.Pi * math.Pi, 8},
		{"paraboloid front", func(n int) soup { return paraboloid(1, n) }, fronts, 2 * math.Pi / 3 * math.Log(6), 16},
	} {
		t.Run(c.name, func(t *testing.T) {
			var values []float64
			defect := math.Inf(1)
			for k := range 4 {
				r, err := mesh.Integrate(t.Context(), read(t, c.make(c.first<<k).text()), c.integrand, mesh.Options{})
				require.NoError(t, err)
				assert.LessOrEqual(t, r.Error, 1e-9*r.Energy)
				if r.Defect.Worst() > 0 {
					assert.Less(t, r.Defect.Worst(), 0.6*defect, "the defect falls with the mesh")
					defect = r.Defect.Worst()
				}
				values = append(values, r.Energy)
			}
			for _, p := range orders(c.exact, values) {
				assert.InDelta(t, 2, p, 0.12, "%v towards %v", values, c.exact)
			}
		})
	}
}

func TestWallIsExact(t *testing.T) {
	// max(x + y, -x + y): q = (2, 0, 0), density 16/24 = 2/3, area 1.
	walls := func() (mesh.Integrand, error) {
		return mesh.Integrand{
			Traces:  quadrature.Traces{HasValue: true, Plus: affine(1, 1), Minus: affine(-1, 1)},
			Density: layered, Well: well,
		}, nil
	}
	for _, n := range []int{1, 3, 40} {
		for name, data := range map[string][]byte{"text": wall(n).text(), "obj": wall(n).obj(), "binary": wall(n).binary()} {
			m := read(t, data)
			r, err := mesh.Integrate(t.Context(), m, walls, mesh.Options{})
			require.NoError(t, err)
			tolerance := 4e-16 // of the whole
			if name == "binary" {
				tolerance = 1e-6 // thirds are not single precision
			}
			assert.InDelta(t, 2.0/3, r.Energy, tolerance)
			assert.InDelta(t, 1, r.Area, tolerance)
			assert.Less(t, r.Error, 1e-13)
			assert.Zero(t, r.Defect.Continuity)
			assert.Equal(t, 4*n, r.Topology.Boundary)
			assert.Equal(t, 3*n*n+2*n, r.Topology.Edges)
		}
	}
}

func TestErrorCoversADensityThatIsNotPolynomial(t *testing.T) {
	// ∫∫ over the unit square of 1/(1 + 100 (y - z)²), from two triangles.
	const s = 10.0
	exact := 2*math.Atan(s)/s - math.Log(1+s*s)/(s*s)
	d := func(x, _, _, _ []float64) float64 { return 1 / (1 + s*s*(x[1]-x[2])*(x[1]-x[2])) }
	for _, degree := range mesh.Degrees() {
		r, err := mesh.Integrate(t.Context(), read(t, wall(1).text()), alone(d), mesh.Options{Degree: degree, Rel: 1e-9})
		if degree > 4 {
			require.NoError(t, err)
			assert.Less(t, r.Error, 1e-9*exact)
		}
		assert.LessOrEqual(t, math.Abs(r.Energy-exact), r.Error, "degree %d", degree)
	}
	r, err := mesh.Integrate(t.Context(), read(t, wall(1).text()), alone(d), mesh.Options{Degree: 4, MaxEvaluations: 3000})
	require.ErrorIs(t, err, quadrature.ErrBudget)
	assert.LessOrEqual(t, r.Evaluations, 3000)
	assert.LessOrEqual(t, math.Abs(r.Energy-exact), r.Error)
	_, err = mesh.Integrate(t.Context(), read(t, wall(1).text()), alone(d), mesh.Options{MaxEvaluations: 100})
	assert.ErrorIs(t, err, quadrature.ErrBudget)
}

func TestAKinkInTheDensity(t *testing.T) {
	for _, a := range []float64{1 / math.Sqrt2, 1 / math.Sqrt(3), 0.3, 1 / math.Pi, 0.5} {
		d := func(x, _, _, _ []float64) float64 { return math.Abs(x[1] - a) }
		exact := (a*a + (1-a)*(1-a)) / 2
		r, err := mesh.Integrate(t.Context(), read(t, wall(5).text()), alone(d), mesh.Options{Rel: 1e-6})
		require.NoError(t, err)
		assert.LessOrEqual(t, math.Abs(r.Energy-exact), r.Error, "%v", a)
		assert.LessOrEqual(t, r.Error, 1e-6*exact)
	}
}

func TestTracesThatDoNotFit(t *testing.T) {
	m := read(t, wall(9).text())
	run := func(m *mesh.Mesh, plus, minus func(x, g []float64) float64, o mesh.Options) (mesh.Result, error) {
		return mesh.Integrate(t.Context(), m, func() (mesh.Integrand, error) {
			return mesh.Integrand{Traces: quadrature.Traces{HasValue: true, Plus: plus, Minus: minus}, Density: layered, Well: well}, nil
		}, o)
	}
	var place *quadrature.PlaceError
	var defect *mesh.DefectError

	off := func(x, g []float64) float64 { g[0], g[1], g[2] = 1, 0, 0.5001; return x[0] + 0.5001*x[2] }
	_, err := run(m, off, affine(-1, 0), mesh.Options{})
	require.ErrorAs(t, err, &place)
	assert.Equal(t, quadrature.OffWell, place.Reason)
	assert.Equal(t, "triangle 1", place.Piece)

	raised := func(x, g []float64) float64 { return affine(1, 0)(x, g) + 1e-4 }
	_, err = run(m, raised, affine(-1, 0), mesh.Options{})
	require.ErrorAs(t, err, &defect)
	assert.Equal(t, quadrature.Discontinuous, defect.First.Reason)
	assert.Equal(t, 162, defect.Triangles)
	r, err := run(m, raised, affine(-1, 0), mesh.Options{Tolerance: 1e-3})
	require.NoError(t, err)
	assert.InDelta(t, 1e-4/2/math.Sqrt2, r.Defect.Continuity, 1e-8)

	// q = (2, 0.001, 0.001) is not along x.
	_, err = mesh.Integrate(t.Context(), m, func() (mesh.Integrand, error) {
		return mesh.Integrand{Traces: quadrature.Traces{Plus: affine(1, 0.001), Minus: affine(-1, 0)}, Density: layered}, nil
	}, mesh.Options{})
	require.ErrorAs(t, err, &defect)
	assert.Equal(t, quadrature.NotNormal, defect.First.Reason)

	bent := func(x, g []float64) float64 {
		g[0], g[1], g[2] = 1, 0, 0.5
		if x[0] < 0 {
			g[0] = -1
		} else if x[0] == 0 {
			g[0] = 0 // what a derivative of |x| may be called at 0
		}
		return math.Abs(x[0]) + 0.5*x[2]
	}
	_, err = mesh.Integrate(t.Context(), m, func() (mesh.Integrand, error) {
		return mesh.Integrand{Traces: quadrature.Traces{HasValue: true, Plus: bent, Minus: affine(-1, 0)}, Density: layered}, nil
	}, mesh.Options{})
	require.ErrorAs(t, err, &place)
	assert.Equal(t, quadrature.NotSmooth, place.Reason)

	nan := func(x, g []float64) float64 { clear(g); return math.Log(x[1] - 0.5) }
	_, err = run(m, nan, affine(-1, 0), mesh.Options{})
	require.ErrorAs(t, err, &place)
	assert.Equal(t, quadrature.NotFinite, place.Reason)

	// The wrong front: the paraboloid of k = 1.1 for that of k = 1 is off by far
	// more than the mesh explains.
	_, err = mesh.Integrate(t.Context(), read(t, paraboloid(1.1, 64).text()), func() (mesh.Integrand, error) {
		return mesh.Integrand{Traces: focal(1), Density: layered, Well: well}, nil
	}, mesh.Options{})
	require.ErrorAs(t, err, &defect)
	assert.Equal(t, quadrature.Discontinuous, defect.First.Reason)
	assert.Contains(t, err.Error(), "8192 of 8192 triangles")
	// So is a strict tolerance on the right one.
	_, err = mesh.Integrate(t.Context(), read(t, paraboloid(1, 64).text()), func() (mesh.Integrand, error) {
		return mesh.Integrand{Traces: focal(1), Density: layered, Well: well}, nil
	}, mesh.Options{Tolerance: 1e-6})
	require.ErrorAs(t, err, &defect)
	assert.Greater(t, defect.Worst.Normal, 1e-3)
}

func TestSharpEdgesExplainNothing(t *testing.T) {
	// Two walls at a right angle: the traces fit the first only.
	bent := append(wall(4), grid(4, 4, 0, 1, 0, 1, func(x, z float64) point { return point{-x, 0, z} })...)
	for i := len(bent) / 2; i < len(bent); i++ {
		bent[i][1], bent[i][2] = bent[i][2], bent[i][1]
	}
	m := read(t, bent.text())
	top, err := m.Check(t.Context())
	if err != nil { // the second half with its other side
		for i := len(bent) / 2; i < len(bent); i++ {
			bent[i][1], bent[i][2] = bent[i][2], bent[i][1]
		}
		m = read(t, bent.text())
		top, err = m.Check(t.Context())
	}
	require.NoError(t, err)
	require.Equal(t, 24, top.Boundary)
	_, err = mesh.Integrate(t.Context(), m, func() (mesh.Integrand, error) {
		return mesh.Integrand{Traces: quadrature.Traces{HasValue: true, Plus: affine(1, 0), Minus: affine(-1, 0)}, Density: layered}, nil
	}, mesh.Options{})
	var defect *mesh.DefectError
	require.ErrorAs(t, err, &defect)
	assert.Equal(t, 32, defect.Triangles)
}

func TestResultsDoNotDependOnTheNumberOfWorkers(t *testing.T) {
	m := read(t, sphere(1, 40).text())
	d := func(x, _, _, nu []float64) float64 { return math.Exp(3*x[0]) * nu[2] * nu[2] }
	var first mesh.Result
	for workers := 1; workers <= 7; workers++ {
		r, err := mesh.Integrate(t.Context(), m, alone(d), mesh.Options{Workers: workers, Rel: 1e-13, Degree: 5, MaxEvaluations: 1_500_000})
		require.True(t, err == nil || errors.Is(err, quadrature.ErrBudget), "%v", err)
		if workers == 1 {
			first = r
		}
		assert.Equal(t, first, r)
	}
	// So with errors: the first triangle that fails.
	nan := func(x, _, _, _ []float64) float64 { return math.Sqrt(x[0] - 0.1) }
	var place, before *quadrature.PlaceError
	for workers := 1; workers <= 7; workers++ {
		_, err := mesh.Integrate(t.Context(), m, alone(nan), mesh.Options{Workers: workers})
		require.ErrorAs(t, err, &place)
		if before != nil {
			assert.Equal(t, before.Piece, place.Piece)
		}
		before = place
	}
}

func TestUnoriented(t *testing.T) {
	s := wall(3)
	s[7][1], s[7][2] = s[7][2], s[7][1]
	m := read(t, s.text())
	_, err := mesh.Integrate(t.Context(), m, alone(one), mesh.Options{})
	var top *mesh.TopologyError
	require.ErrorAs(t, err, &top)
	assert.Equal(t, 3, top.Inconsistent)
	even := func(_, _, _, nu []float64) float64 { return nu[0] * nu[0] }
	r, err := mesh.Integrate(t.Context(), m, alone(even), mesh.Options{Unoriented: true})
	require.NoError(t, err)
	assert.InDelta(t, 1, r.Energy, 1e-14)
	odd := func(_, _, _, nu []float64) float64 { return nu[0] }
	_, err = mesh.Integrate(t.Context(), m, alone(odd), mesh.Options{Unoriented: true})
	require.ErrorIs(t, err, mesh.ErrSided)
	// On an oriented mesh the density may be odd.
	_, err = mesh.Integrate(t.Context(), read(t, wall(3).text()), alone(odd), mesh.Options{Unoriented: true})
	require.NoError(t, err)
}

func TestCancelled(t *testing.T) {
	m := read(t, wall(20).text())
	ctx, cancel := context.WithCancel(t.Context())
	n := 0
	_, err := mesh.Integrate(ctx, m, alone(func(x, _, _, _ []float64) float64 {
		if n++; n == 2000 {
			cancel()
		}
		return x[1]
	}), mesh.Options{Workers: 1})
	require.ErrorIs(t, err, context.Canceled)
	assert.Less(t, n, 18*2*chunkOfTest)
	_, err = m.Check(ctx)
	require.ErrorIs(t, err, context.Canceled)
}

const chunkOfTest = 512

func TestRefusedOptions(t *testing.T) {
	m := read(t, wall(2).text())
	for _, o := range []mesh.Options{{Degree: 3}, {Degree: -1}, {Rel: math.NaN()}, {Tolerance: -1}, {MaxEvaluations: -1}} {
		_, err := mesh.Integrate(t.Context(), m, alone(one), o)
		require.Error(t, err, "%+v", o)
	}
	_, err := mesh.Integrate(t.Context(), m, alone(nil), mesh.Options{})
	require.Error(t, err)
	_, err = mesh.Integrate(t.Context(), m, func() (mesh.Integrand, error) { return mesh.Integrand{}, errors.New("no") }, mesh.Options{})
	require.EqualError(t, err, "no")
	_, err = mesh.Integrate(t.Context(), m, alone(func(_, _, _, _ []float64) float64 { return 1e308 }), mesh.Options{Rel: 1e-3})
	require.NoError(t, err)
}

func BenchmarkIntegrate(b *testing.B) {
	m := read(b, sphere(1, 100).binary())
	b.ResetTimer()
	for b.Loop() {
		r, err := mesh.Integrate(b.Context(), m, alone(func(_, _, _, nu []float64) float64 { s := 1 - nu[2]*nu[2]; return s * s / 12 }), mesh.Options{})
		require.NoError(b, err)
		require.NotZero(b, r.Energy)
	}
	b.ReportMetric(float64(len(m.Triangles))*float64(b.N)/b.Elapsed().Seconds(), "triangles/s")
}

func BenchmarkRead(b *testing.B) {
	s := sphere(1, 100)
	for _, f := range []struct {
		name string
		data []byte
	}{{"text", s.text()}, {"binary", s.binary()}, {"obj", s.obj()}} {
		b.Run(f.name, func(b *testing.B) {
			b.SetBytes(int64(len(f.data)))
			for b.Loop() {
				read(b, f.data)
			}
			b.ReportMetric(float64(len(s))*float64(b.N)/b.Elapsed().Seconds(), "triangles/s")
		})
	}
}

func ExampleIntegrate() {
	m, err := mesh.Read(context.Background(), bytes.NewReader(sphere(1, 32).text()), mesh.Limits{})
	if err != nil {
		panic(err)
	}
	r, err := mesh.Integrate(context.Background(), m, alone(one), mesh.Options{})
	fmt.Println(err, len(m.Triangles), r.Topology.Boundary)
	fmt.Printf("%.3f of %.3f\n", r.Area, 4*math.Pi)
	// Output:
	// <nil> 8192 0
	// 12.556 of 12.566
}
