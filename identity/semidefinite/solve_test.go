package semidefinite

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/mat"
)

func solve(t *testing.T, p Problem, opt Options) *Solution {
	t.Helper()
	s, err := Solve(context.Background(), p, opt)
	require.NoError(t, err)
	requireFinite(t, s)
	return s
}

// theta is the program for the number of Lovász of the cycle of n vertices.
func theta(n int) Problem {
	p := Problem{Blocks: []int{n}, A: make([]SparseSym, 1), B: []float64{1}}
	for i := range n {
		p.A[0] = append(p.A[0], Entry{0, i, i, 1})
		p.A = append(p.A, SparseSym{{0, i, (i + 1) % n, 1}})
		p.B = append(p.B, 0)
		for j := i; j < n; j++ {
			p.C = append(p.C, Entry{0, i, j, -1})
		}
	}
	return p
}

func TestTheta(t *testing.T) {
	// Lovász, On the Shannon capacity of a graph, 1979: the pentagon has the
	// square root of 5, an odd cycle n cos(pi/n) / (1 + cos(pi/n)).
	for _, n := range []int{5, 7, 9} {
		p := theta(n)
		s := solve(t, p, Options{})
		checkOptimal(t, p, s, 1e-8)
		c := math.Cos(math.Pi / float64(n))
		assert.InDelta(t, -float64(n)*c/(1+c), s.PrimalObjective, 1e-7)
	}
	assert.InDelta(t, -math.Sqrt(5), solve(t, theta(5), Options{}).DualObjective, 1e-7)
}

func TestMaxCutPentagon(t *testing.T) {
	// The relaxation of the cut of the pentagon is (25 + 5 √5)/8 (Delorme and
	// Poljak, Math. Programming 62, 1993; the value from memory, and it is
	// n/2 (1 + cos(pi/n)) by the symmetry of the cycle).
	p := Problem{Blocks: []int{5}}
	for i := range 5 {
		p.A = append(p.A, SparseSym{{0, i, i, 1}})
		p.B = append(p.B, 1)
		p.C = append(p.C, Entry{0, i, i, -0.5}, Entry{0, i, (i + 1) % 5, 0.25})
	}
	s := solve(t, p, Options{})
	checkOptimal(t, p, s, 1e-8)
	assert.InDelta(t, -(25+5*math.Sqrt(5))/8, s.PrimalObjective, 1e-7)
}

func TestLeastEigenvalue(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 1))
	for _, n := range []int{1, 2, 10, 30} {
		p := Problem{Blocks: []int{n}, A: make([]SparseSym, 1), B: []float64{1}}
		for i := range n {
			p.A[0] = append(p.A[0], Entry{0, i, i, 1})
			for j := i; j < n; j++ {
				p.C = append(p.C, Entry{0, j, i, rng.NormFloat64()})
			}
		}
		s := solve(t, p, Options{})
		checkOptimal(t, p, s, 1e-8)
		want := leastEigenvalue(t, blockMatrix(p, []float64{1}, []SparseSym{p.C}))
		assert.InDelta(t, want, s.PrimalObjective, 1e-7*(1+math.Abs(want)))
	}
}

func TestLinearProgram(t *testing.T) {
	// minimise -x - 2y subject to x + y + s = 4, y + t = 3: 7 at (1, 3).
	p := Problem{
		Blocks: []int{-4},
		C:      SparseSym{{0, 0, 0, -1}, {0, 1, 1, -2}},
		A:      []SparseSym{{{0, 0, 0, 1}, {0, 1, 1, 1}, {0, 2, 2, 1}}, {{0, 1, 1, 1}, {0, 3, 3, 1}}},
		B:      []float64{4, 3},
	}
	s := solve(t, p, Options{})
	checkOptimal(t, p, s, 1e-8)
	assert.InDelta(t, -7, s.PrimalObjective, 1e-6)
	assert.InDelta(t, 1, s.X[0].At(0, 0), 1e-5)
	assert.InDelta(t, 3, s.X[0].At(1, 1), 1e-5)
}

// lowest is the program for the largest lambda with p - lambda a sum of
// squares, in one variable, with lambda free.
func lowest(coefficients []float64) Problem {
	p := make(map[string]float64)
	for d, c := range coefficients {
		p[product([]int{d}, []int{0})] = c
	}
	q := gramProblem(monomials(1, (len(coefficients)-1)/2), p)
	q.Free = []FreeVariable{{Cost: -1, Terms: []FreeTerm{{Row: 0, Value: 1}}}}
	return q
}

func TestFreeVariable(t *testing.T) {
	// Nonnegative polynomials in one variable are sums of squares (Hilbert 1888).
	coefficients := []float64{2, -3, -5, 1, 1, 0.5, 1}
	p := lowest(coefficients)
	s := solve(t, p, Options{})
	checkOptimal(t, p, s, 1e-8)
	least := math.Inf(1)
	for x := -3.0; x < 3; x += 1e-4 {
		var v float64
		for d := len(coefficients) - 1; d >= 0; d-- {
			v = v*x + coefficients[d]
		}
		least = min(least, v)
	}
	assert.InDelta(t, least, s.Z[0], 1e-6)
	assert.InDelta(t, least, -s.DualObjective, 1e-6)
}

// randomFeasible has positive definite solutions of both programs.
func randomFeasible(rng *rand.Rand, blocks []int, m, free int, density float64) Problem {
	p := Problem{Blocks: blocks}
	random := func(density float64) SparseSym {
		var a SparseSym
		for k, n := range blocks {
			for i := range max(n, -n) {
				for j := i; j < max(n, -n) && (n > 0 || j == i); j++ {
					if rng.Float64() < density {
						a = append(a, Entry{k, i, j, rng.NormFloat64()})
					}
				}
			}
		}
		return a
	}
	definite := func() []*mat.SymDense {
		out := make([]*mat.SymDense, len(blocks))
		for k, n := range blocks {
			order := max(n, -n)
			out[k] = mat.NewSymDense(order, nil)
			if n < 0 {
				for i := range order {
					out[k].SetSym(i, i, 0.1+rng.Float64())
				}
				continue
			}
			g := mat.NewDense(order, order, nil)
			for i := range order {
				for j := range order {
					g.Set(i, j, rng.NormFloat64())
				}
			}
			out[k].SymOuterK(1, g)
		}
		return out
	}
	for range m {
		a := random(density)
		a = append(a, Entry{0, 0, 0, 1 + rng.Float64()})
		p.A = append(p.A, a)
	}
	y := make([]float64, m)
	for i := range y {
		y[i] = rng.NormFloat64()
	}
	z := make([]float64, free)
	for k := range free {
		z[k] = rng.NormFloat64()
		var f FreeVariable
		for i := range m {
			if rng.Float64() < 0.5 {
				f.Terms = append(f.Terms, FreeTerm{i, rng.NormFloat64()})
			}
		}
		p.Free = append(p.Free, f)
	}
	p.B = image(p, definite(), z)
	for k, v := range freeImage(p, y) {
		p.Free[k].Cost = v
	}
	c := blockMatrix(p, y, p.A)
	for k, s := range definite() {
		for i := range s.SymmetricDim() {
			for j := i; j < s.SymmetricDim(); j++ {
				if v := c[k].At(i, j) + s.At(i, j); v != 0 {
					p.C = append(p.C, Entry{k, i, j, v})
				}
			}
		}
	}
	return p
}

func TestRandomFeasible(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 7))
	for trial := range 40 {
		blocks := [][]int{{8}, {5, -4}, {-6, 3, 4}, {1, 1, 6}, {12, -1}}[trial%5]
		m := 1 + rng.IntN(10)
		free := rng.IntN(min(3, m))
		density := []float64{0.1, 0.4, 1}[trial%3]
		p := randomFeasible(rng, blocks, m, free, density)
		s := solve(t, p, Options{})
		checkOptimal(t, p, s, 1e-8)
	}
}

func TestMotzkin(t *testing.T) {
	// x⁴y² + x²y⁴ + 1 - 3x²y² is not a sum of squares (Motzkin 1967).
	motzkin := map[string]float64{"[4 2]": 1, "[2 4]": 1, "[0 0]": 1, "[2 2]": -3}
	for _, basis := range [][][]int{{{0, 0}, {1, 1}, {2, 1}, {1, 2}}, monomials(2, 3)} {
		p := gramProblem(basis, motzkin)
		checkDualRay(t, p, solve(t, p, Options{}), 1e-8)
		checkDualRay(t, p, solve(t, p, Options{Mode: AnalyticCentre}), 1e-8)
	}
	// Times 1 + x² + y² it is one (Reznick, Some concrete aspects of Hilbert's
	// 17th problem, 2000), with the zeros (±1, ±1).
	multiple := map[string]float64{
		"[4 2]": -2, "[2 4]": -2, "[0 0]": 1, "[2 2]": -3, "[2 0]": 1, "[0 2]": 1,
		"[6 2]": 1, "[4 4]": 2, "[2 6]": 1,
	}
	p := gramProblem(monomials(2, 4), motzkinProduct(motzkin))
	for key, v := range multiple {
		assert.Equal(t, v, motzkinProduct(motzkin)[key], key)
	}
	for _, mode := range []Mode{Optimum, AnalyticCentre} {
		s := solve(t, p, Options{Mode: mode})
		assert.Contains(t, []Status{Optimal, NearOptimal}, s.Status)
		assert.Less(t, s.PrimalInfeasibility, 1e-6)
		for _, z := range [][]float64{{1, 1}, {1, -1}, {-1, 1}, {-1, -1}} {
			v := mat.NewVecDense(15, evaluate(monomials(2, 4), z))
			assert.InDelta(t, 0, mat.Inner(v, s.X[0], v), 1e-5)
		}
	}
}

// motzkinProduct multiplies by 1 + x² + y².
func motzkinProduct(p map[string]float64) map[string]float64 {
	out := make(map[string]float64)
	for i := range 9 {
		for j := range 9 {
			v, ok := p[product([]int{i, j}, []int{0, 0})]
			if !ok {
				continue
			}
			for _, d := range [][]int{{0, 0}, {2, 0}, {0, 2}} {
				out[product([]int{i, j}, d)] += v
			}
		}
	}
	return out
}

func TestInfeasible(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 9))
	for range 20 {
		// The first row asks for trace X = -1 in terms of the others.
		p := randomFeasible(rng, []int{6, -3}, 5, 1, 0.5)
		row := SparseSym{}
		for k, n := range []int{6, 3} {
			for i := range n {
				row = append(row, Entry{k, i, i, 1})
			}
		}
		for i := range 5 {
			for _, e := range p.A[i] {
				e.Value *= 0.5
				row = append(row, e)
			}
			for k := range p.Free {
				for _, f := range p.Free[k].Terms {
					if f.Row == i {
						p.Free[k].Terms = append(p.Free[k].Terms, FreeTerm{5, 0.5 * f.Value})
					}
				}
			}
		}
		b := -1.0
		for _, v := range p.B {
			b += 0.5 * v
		}
		p.A, p.B = append(p.A, row), append(p.B, b)
		checkDualRay(t, p, solve(t, p, Options{}), 1e-8)
	}
}

func TestUnbounded(t *testing.T) {
	// minimise -x22 subject to x11 = 1.
	p := Problem{Blocks: []int{2}, C: SparseSym{{0, 1, 1, -1}}, A: []SparseSym{{{0, 0, 0, 1}}}, B: []float64{1}}
	checkPrimalRay(t, p, solve(t, p, Options{}), 1e-8)
	// A free variable with a cost and no row, and one that compensates.
	p = Problem{Blocks: []int{2}, A: []SparseSym{{{0, 0, 0, 1}, {0, 1, 1, 1}}}, B: []float64{1}, Free: []FreeVariable{{Cost: 1}}}
	checkPrimalRay(t, p, solve(t, p, Options{}), 1e-8)
	p.Free[0].Terms = []FreeTerm{{0, 1}}
	checkPrimalRay(t, p, solve(t, p, Options{}), 1e-8)
}

func TestWithoutInterior(t *testing.T) {
	// Weakly infeasible: x22 = 0, x12 = 1.
	p := Problem{Blocks: []int{2}, A: []SparseSym{{{0, 1, 1, 1}}, {{0, 0, 1, 1}}}, B: []float64{0, 2}}
	s := solve(t, p, Options{})
	assert.NotEqual(t, DualInfeasible, s.Status)
	if s.Status == Optimal || s.Status == NearOptimal {
		// Only with an X that is large: x11 x22 >= 1.
		assert.Greater(t, mat.Trace(s.X[0]), 1e3)
	}
	// The infimum 0 of x11 with x12 = 1 is not attained.
	p = Problem{Blocks: []int{2}, C: SparseSym{{0, 0, 0, 1}}, A: []SparseSym{{{0, 0, 1, 1}}}, B: []float64{2}}
	s = solve(t, p, Options{})
	assert.NotEqual(t, PrimalInfeasible, s.Status)
	assert.NotEqual(t, DualInfeasible, s.Status)
	assert.InDelta(t, 0, s.PrimalObjective, 1e-2)
	// A positive duality gap: minimise x33 with x22 = 0 and x33 + 2 x12 = 1
	// (Vandenberghe and Boyd, SIAM Review 38, 1996, has one of this kind): 1
	// against 0.
	p = Problem{Blocks: []int{3}, C: SparseSym{{0, 2, 2, 1}}, A: []SparseSym{{{0, 1, 1, 1}}, {{0, 2, 2, 1}, {0, 0, 1, 1}}}, B: []float64{0, 1}}
	s = solve(t, p, Options{})
	assert.NotEqual(t, PrimalInfeasible, s.Status)
	assert.NotEqual(t, DualInfeasible, s.Status)
	// Only X = 0.
	p = Problem{Blocks: []int{3}, C: SparseSym{{0, 0, 1, 1}}, A: []SparseSym{{{0, 0, 0, 1}, {0, 1, 1, 1}, {0, 2, 2, 1}}}, B: []float64{0}}
	s = solve(t, p, Options{})
	assert.Contains(t, []Status{Optimal, NearOptimal}, s.Status)
	assert.InDelta(t, 0, s.PrimalObjective, 1e-6)
}

func TestDependentRows(t *testing.T) {
	p := theta(5)
	sum := SparseSym{}
	for _, i := range []int{0, 2, 3} {
		for _, e := range p.A[i] {
			e.Value *= float64(i + 1)
			sum = append(sum, e)
		}
	}
	p.A = append(p.A, sum, p.A[1], SparseSym{}, SparseSym{{0, 1, 1, 1}, {0, 1, 1, -1}})
	p.B = append(p.B, 1, 0, 0, 0)
	s := solve(t, p, Options{})
	checkOptimal(t, p, s, 1e-8)
	assert.InDelta(t, -math.Sqrt(5), s.PrimalObjective, 1e-7)

	p.B[6] = 1.5
	s = solve(t, p, Options{})
	checkDualRay(t, p, s, 1e-8)
	assert.Zero(t, s.Iterations)
	p.B[6], p.B[8] = 1, -1e-3
	checkDualRay(t, p, solve(t, p, Options{}), 0)
}

func TestNoRows(t *testing.T) {
	p := Problem{Blocks: []int{2, -1}, C: SparseSym{{0, 0, 0, 1}, {0, 1, 1, 1}, {1, 0, 0, 3}}}
	s := solve(t, p, Options{})
	checkOptimal(t, p, s, 1e-8)
	p.C[0].Value = -1
	checkPrimalRay(t, p, solve(t, p, Options{}), 1e-8)
}

func TestScales(t *testing.T) {
	// Large and small rows, right sides and costs.
	rng := rand.New(rand.NewPCG(9, 3))
	for range 10 {
		p := randomFeasible(rng, []int{6, -3}, 5, 1, 0.5)
		for i := range p.A {
			scale := math.Pow(10, float64(rng.IntN(9)-4))
			for k := range p.A[i] {
				p.A[i][k].Value *= scale
			}
			for k, f := range p.Free[0].Terms {
				if f.Row == i {
					p.Free[0].Terms[k].Value *= scale
				}
			}
			p.B[i] *= 1e5 * scale
		}
		for k := range p.C {
			p.C[k].Value *= 1e4
		}
		p.Free[0].Cost *= 1e4
		checkOptimal(t, p, solve(t, p, Options{}), 1e-8)
	}
}

func TestFeasibilityStopsEarly(t *testing.T) {
	p := largeProgram()
	withCost := solve(t, p, Options{})
	p.C = nil
	s := solve(t, p, Options{})
	checkOptimal(t, p, s, 1e-8)
	assert.Less(t, 2*s.Iterations, withCost.Iterations)
}

func TestRepeatable(t *testing.T) {
	p := randomFeasible(rand.New(rand.NewPCG(1, 1)), []int{70, -5}, 60, 2, 0.2)
	assert.Equal(t, solve(t, p, Options{}), solve(t, p, Options{}))
}
