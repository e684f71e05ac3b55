package adversary_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"sync/atomic"
	"testing"
	"time"

	"creaseproof/identity/adversary"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// starts draws from a heavy-tailed law.
func starts(i int, x []float64) {
	rng := rand.New(rand.NewPCG(17, uint64(i)))
	for k := range x {
		x[k] = rng.NormFloat64()
		if i%3 == 2 {
			x[k] *= math.Pow(10, 3*rng.NormFloat64())
		}
	}
}

// problemOf completes a polynomial with a list of monomials into a problem.
func problemOf(dim int, monomials []monomial) adversary.Problem {
	return adversary.Problem{
		Dim:      dim,
		Value:    func(x []float64) float64 { return margin(monomials, x) },
		Gradient: func(g, x []float64) { marginGradient(monomials, g, x) },
		Starts:   starts,
		Verify:   func(x []*big.Rat) bool { return exact(monomials, x).Sign() < 0 },
	}
}

func search(t *testing.T, p adversary.Problem, o adversary.Options) adversary.Result {
	t.Helper()
	begin := time.Now()
	r, err := adversary.Search(t.Context(), p, o)
	require.NoError(t, err)
	t.Logf("%v: witness %v, margin %.3g, %d starts, %d evaluations, %d checks",
		time.Since(begin).Round(time.Millisecond), r.Witness, r.BestMargin, r.Starts, r.Evaluations, r.Checks)
	return r
}

// refuted demands a witness, confirms it once more, and returns the largest
// numerator or denominator in bits.
func refuted(t *testing.T, p adversary.Problem) int {
	t.Helper()
	r := search(t, p, adversary.Options{})
	require.NotNil(t, r.Witness)
	require.True(t, p.Verify(r.Witness))
	bits := 0
	for _, c := range r.Witness {
		bits = max(bits, c.Num().BitLen(), c.Denom().BitLen())
	}
	return bits
}

func TestNarrowValley(t *testing.T) {
	// (a - 1000 b)² ≥ b²/10^6 and narrower; below rounding in the last two.
	for k, limit := range map[string]int{"1e-6": 10, "1e-9": 10, "1e-12": 10, "1e-20": 12} {
		t.Run(k, func(t *testing.T) {
			p := problemOf(2, []monomial{
				m("1", 2, 0), m("-2000", 1, 1), m("1000000", 0, 2), m("-"+k, 0, 2),
			})
			assert.LessOrEqual(t, refuted(t, p), limit)
		})
	}
}

func TestMotzkin(t *testing.T) {
	// Motzkin's polynomial lowered; its zeros are (±1, ±1).
	p := problemOf(2, []monomial{m("1", 4, 2), m("1", 2, 4), m("1", 0, 0), m("-3", 2, 2), m("-1e-6", 2, 2)})
	assert.LessOrEqual(t, refuted(t, p), 2)
	// Its homogeneous form, far below rounding.
	p = problemOf(3, []monomial{m("1", 4, 2, 0), m("1", 2, 4, 0), m("1", 0, 0, 6), m("-3", 2, 2, 2), m("-1e-30", 2, 2, 2)})
	assert.LessOrEqual(t, refuted(t, p), 3)
}

func TestIrrationalCentre(t *testing.T) {
	// (x² - 2)² ≥ 10^-12: the witness is a good approximation of √2.
	p := problemOf(1, []monomial{m("1", 4), m("-4", 2), m("4", 0), m("-1e-12", 0)})
	assert.LessOrEqual(t, refuted(t, p), 13)
	// (x² - 2)² + (y² - 3)² + (x y - z)² ≥ 10^-10 (1 + z²)
	q := problemOf(3, []monomial{
		m("1", 4, 0, 0), m("-4", 2, 0, 0), m("4", 0, 0, 0),
		m("1", 0, 4, 0), m("-6", 0, 2, 0), m("9", 0, 0, 0),
		m("1", 2, 2, 0), m("-2", 1, 1, 1), m("1", 0, 0, 2),
		m("-1e-10", 0, 0, 0), m("-1e-10", 0, 0, 2),
	})
	assert.LessOrEqual(t, refuted(t, q), 24)
}

func TestWellFarOut(t *testing.T) {
	// (x - 12345.678)² ≥ 1/1000 alone, and together with (y + 1/3000)² ≥ 0.
	c := rat("12345.678")
	twice, sq := new(big.Rat).Mul(c, rat("-2")), new(big.Rat).Mul(c, c)
	p := problemOf(1, []monomial{m("1", 2), {twice, []int{1}}, {sq, []int{0}}, m("-1/1000", 0)})
	assert.LessOrEqual(t, refuted(t, p), 18)
	q := problemOf(2, []monomial{
		m("1", 2, 0), {twice, []int{1, 0}}, {sq, []int{0, 0}},
		m("1", 0, 2), m("2/3000", 0, 1), m("1/9000000", 0, 0), m("-1/1000", 0, 0),
	})
	refuted(t, q)
}

func TestProductOfWells(t *testing.T) {
	// (x - 3)²(x + 700)² + (y - x)² ≥ 10^-5 with many monomials, expanded.
	poly := expand(expand(lin("1", "-3"), lin("1", "-3")), expand(lin("1", "700"), lin("1", "700")))
	var ms []monomial
	for d, c := range poly {
		ms = append(ms, monomial{c, []int{d, 0}})
	}
	ms = append(ms, m("1", 0, 2), m("-2", 1, 1), m("1", 2, 0), m("-1e-5", 0, 0))
	assert.LessOrEqual(t, refuted(t, problemOf(2, ms)), 10)
}

func TestTrueSharpBounds(t *testing.T) {
	for name, p := range map[string]adversary.Problem{
		"square": problemOf(2, []monomial{m("1", 2, 0), m("-2", 1, 1), m("1", 0, 2)}),
		"valley": problemOf(2, []monomial{m("1", 2, 0), m("-2000", 1, 1), m("1000000", 0, 2)}),
		"Motzkin": problemOf(2, []monomial{
			m("1", 4, 2), m("1", 2, 4), m("1", 0, 0), m("-3", 2, 2)}),
		"Young": layered(rat("2"), rat("0")),
	} {
		t.Run(name, func(t *testing.T) {
			r := search(t, p, adversary.Options{})
			assert.Nil(t, r.Witness)
			assert.InDelta(t, 0, r.BestMargin, 1e-13, "a sharp bound is approached")
			assert.Equal(t, 64, r.Starts)
		})
	}
}

func TestPositiveIsNotRefuted(t *testing.T) {
	p := problemOf(2, []monomial{m("1", 2, 0), m("-1", 1, 1), m("1", 0, 2)})
	r := search(t, p, adversary.Options{})
	assert.Nil(t, r.Witness)
	assert.InDelta(t, 1.0/3, r.BestMargin, 1e-9, "1/3 at a = b")
}

func TestYoungBoundWithoutCurvature(t *testing.T) {
	assert.LessOrEqual(t, refuted(t, layered(rat("0"), rat("0"))), 3, "a fat violation has a simple witness")
	assert.LessOrEqual(t, refuted(t, layered(rat("3/2"), rat("0"))), 4)
	assert.LessOrEqual(t, refuted(t, layered(rat("201/100"), rat("0"))), 10)
}

func TestYoungBoundLowered(t *testing.T) {
	for _, s := range []string{"1e-9", "1e-12", "1e-14"} {
		t.Run(s, func(t *testing.T) {
			assert.LessOrEqual(t, refuted(t, layered(rat("2"), rat(s))), 12)
		})
	}
	t.Run("differences", func(t *testing.T) {
		p := layered(rat("2"), rat("1e-9"))
		p.Gradient = nil
		refuted(t, p)
	})
}

func TestPolishReachesBelowRounding(t *testing.T) {
	// (3 a - 7 b + c)² + (a b - 2 c)² ≥ 10^-30 b², an exact equality set of
	// dimension 1. Polish: the minimiser in a coordinate of degree 2.
	ms := []monomial{
		m("9", 2, 0, 0), m("49", 0, 2, 0), m("1", 0, 0, 2), m("-42", 1, 1, 0), m("6", 1, 0, 1), m("-14", 0, 1, 1),
		m("1", 2, 2, 0), m("-4", 1, 1, 1), m("4", 0, 0, 2), m("-1e-30", 0, 2, 0),
	}
	p := problemOf(3, ms)
	p.Polish = polisher(ms)
	refuted(t, p)
}

func TestBounds(t *testing.T) {
	// x + y ≤ 2 - 1/1000 on the square [0, 1]²: false only near a corner; and
	// true with 2 + 1/1000.
	box := func(c string) adversary.Problem {
		ms := []monomial{m(c, 0, 0), m("-1", 1, 0), m("-1", 0, 1)}
		p := problemOf(2, ms)
		p.Lower, p.Upper = []float64{0, 0}, []float64{1, 1}
		one := rat("1")
		p.Verify = func(x []*big.Rat) bool {
			for _, c := range x {
				if c.Sign() < 0 || c.Cmp(one) > 0 {
					return false
				}
			}
			return exact(ms, x).Sign() < 0
		}
		p.Value = func(x []float64) float64 {
			for _, c := range x {
				if c < 0 || c > 1 {
					panic("outside the bounds")
				}
			}
			return margin(ms, x)
		}
		return p
	}
	assert.LessOrEqual(t, refuted(t, box("1999/1000")), 2)
	assert.LessOrEqual(t, refuted(t, box("1999999999999/1000000000000")), 2)
	assert.Nil(t, search(t, box("2001/1000"), adversary.Options{}).Witness)

	// x ≤ 10 is false for x > 0, and true for x ≤ 10 bounded above.
	half := problemOf(1, []monomial{m("10", 0), m("-1", 1)})
	half.Lower = []float64{0}
	refuted(t, half)
	half.Lower, half.Upper = nil, []float64{10}
	half.Verify = func(x []*big.Rat) bool { return x[0].Cmp(rat("10")) > 0 && x[0].Cmp(rat("10")) <= 0 }
	assert.Nil(t, search(t, half, adversary.Options{}).Witness)
}

func TestNonSmooth(t *testing.T) {
	// |x - 3y| + |y - 2| ≥ 1/1000 with no gradient given: for the derivative-free
	// method. NaN and infinite values are met on the way.
	p := adversary.Problem{
		Dim: 2,
		Value: func(x []float64) float64 {
			if x[0] < -5 {
				return math.NaN()
			}
			if x[1] < -5 {
				return math.Inf(-1)
			}
			v := math.Abs(x[0]-3*x[1]) + math.Abs(x[1]-2)
			return (v - 1e-3) / (math.Abs(x[0]) + 4*math.Abs(x[1]) + 2 + 1e-3)
		},
		Starts: starts,
		Verify: func(x []*big.Rat) bool {
			a := new(big.Rat).Mul(x[1], rat("-3"))
			a.Add(a, x[0])
			b := new(big.Rat).Sub(x[1], rat("2"))
			a.Add(a.Abs(a), b.Abs(b))
			return a.Cmp(rat("1/1000")) < 0
		},
	}
	assert.LessOrEqual(t, refuted(t, p), 13)
}

func TestManyBasins(t *testing.T) {
	// Rastrigin's function (a usual test of global methods) lowered by 1/2: only
	// the central one of its many basins is negative. Transcendental, so the
	// check is of a box on which it is negative by 10 (1 - cos v) ≤ 5 v².
	const dim = 3
	p := adversary.Problem{
		Dim: dim,
		Value: func(x []float64) float64 {
			s, a := -0.5, 0.5
			for _, v := range x {
				s += v*v + 10*(1-math.Cos(2*math.Pi*v))
				a += v*v + 20
			}
			return s / a
		},
		Starts: func(i int, x []float64) {
			starts(i, x)
			for k := range x {
				x[k] = 4*x[k] + 3
			}
		},
		Verify: func(x []*big.Rat) bool {
			s := new(big.Rat)
			for _, c := range x {
				s.Add(s, new(big.Rat).Mul(c, c))
			}
			return s.Cmp(rat("1/400")) < 0 // (1 + 20 π²)/400 < 1/2
		},
	}
	assert.Equal(t, 1, refuted(t, p), "the origin")
}

// Sums of squares of random polynomials, lowered by a little of another square:
// the violated set is a thin layer around a variety. Without the last square
// there is nothing to find.
func TestRandomThinViolations(t *testing.T) {
	found := 0
	for seed := range 24 {
		rng := rand.New(rand.NewPCG(23, uint64(seed)))
		dim := 2 + seed%5
		squares := make([]monomial, 0, 64)
		for range (dim + 1) / 2 {
			q := randomPolynomial(rng, dim)
			squares = append(squares, product(q, q)...)
		}
		q := randomPolynomial(rng, dim)
		delta := rat([]string{"-1e-6", "-1e-9", "-1e-12", "-1e-14"}[seed%4])
		lowered := append([]monomial(nil), squares...)
		for _, t := range product(q, q) {
			lowered = append(lowered, monomial{new(big.Rat).Mul(t.c, delta), t.powers})
		}
		one := []monomial{{rat("1"), make([]int, dim)}}
		require.Nil(t, search(t, problemOf(dim, product(squares, one)), adversary.Options{Starts: 16}).Witness)
		p := problemOf(dim, product(lowered, one))
		r := search(t, p, adversary.Options{})
		if r.Witness != nil {
			found++
			require.True(t, p.Verify(r.Witness))
		}
	}
	// Where the variety has no real point there may be no violation.
	assert.GreaterOrEqual(t, found, 22)
}

func TestJobsDoNotMatter(t *testing.T) {
	for name, p := range map[string]adversary.Problem{
		"found":     layered(rat("2"), rat("1e-9")),
		"not found": problemOf(2, []monomial{m("1", 2, 0), m("-2", 1, 1), m("1", 0, 2)}),
	} {
		var want adversary.Result
		for _, jobs := range []int{1, 2, 5, 16} {
			r := search(t, p, adversary.Options{Jobs: jobs, Seed: 4})
			if jobs == 1 {
				want = r
			}
			assert.Equal(t, fmt.Sprint(want), fmt.Sprint(r), name)
		}
	}
}

func TestBudgets(t *testing.T) {
	p := problemOf(2, []monomial{m("1", 2, 0), m("-2", 1, 1), m("1", 0, 2)})
	r := search(t, p, adversary.Options{Starts: 5})
	assert.Equal(t, 5, r.Starts)
	r = search(t, p, adversary.Options{Starts: 1000, Evaluations: 1})
	assert.Equal(t, 8, r.Starts, "one batch")
	r = search(t, p, adversary.Options{Starts: 8, Checks: 3})
	assert.LessOrEqual(t, r.Checks, 24)
}

func TestCancellation(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	p := layered(rat("2"), rat("0"))
	var calls atomic.Int64
	value := p.Value
	p.Value = func(x []float64) float64 {
		if calls.Add(1) == 2000 {
			cancel()
		}
		return value(x)
	}
	begin := time.Now()
	r, err := adversary.Search(ctx, p, adversary.Options{Starts: 1 << 30})
	assert.ErrorIs(t, err, context.Canceled)
	assert.Nil(t, r.Witness)
	assert.Less(t, time.Since(begin), time.Minute, "a hang, not a benchmark")
	assert.Less(t, calls.Load(), int64(20000))
}

func TestBadProblems(t *testing.T) {
	good := problemOf(1, []monomial{m("1", 2)})
	for name, change := range map[string]func(p *adversary.Problem){
		"dimension": func(p *adversary.Problem) { p.Dim = 0 },
		"value":     func(p *adversary.Problem) { p.Value = nil },
		"verify":    func(p *adversary.Problem) { p.Verify = nil },
		"scale":     func(p *adversary.Problem) { p.Scale = []float64{0} },
		"lengths":   func(p *adversary.Problem) { p.Lower = []float64{0, 0} },
		"bounds":    func(p *adversary.Problem) { p.Lower, p.Upper = []float64{1}, []float64{1} },
	} {
		p := good
		change(&p)
		_, err := adversary.Search(t.Context(), p, adversary.Options{})
		assert.Error(t, err, name)
	}
	everywhereBad := good
	everywhereBad.Value = func([]float64) float64 { return math.NaN() }
	everywhereBad.Gradient = func(g, _ []float64) { g[0] = math.Inf(1) }
	everywhereBad.Starts = func(_ int, x []float64) { x[0] = math.NaN() }
	r, err := adversary.Search(t.Context(), everywhereBad, adversary.Options{Starts: 8})
	require.NoError(t, err)
	assert.Nil(t, r.Witness)
	assert.False(t, errors.Is(err, context.Canceled))
}

func ExampleSearch() {
	// Is x² - 2 x y + (1 - 1/10^8) y² ≥ 0 ?
	p := adversary.Problem{
		Dim: 2,
		Value: func(x []float64) float64 {
			a, b, c := x[0]*x[0], 2*x[0]*x[1], (1-1e-8)*x[1]*x[1]
			return (a - b + c) / (a + math.Abs(b) + c)
		},
		Starts: func(i int, x []float64) { x[0], x[1] = float64(i+3), float64(2*i-7) },
		Verify: func(x []*big.Rat) bool {
			d := new(big.Rat).Sub(x[0], x[1])
			y := new(big.Rat).Mul(x[1], x[1])
			return d.Mul(d, d).Cmp(y.Mul(y, big.NewRat(1, 100_000_000))) < 0
		},
	}
	r, err := adversary.Search(context.Background(), p, adversary.Options{})
	fmt.Println(r.Witness, err)
	// Output: [1/1 1/1] <nil>
}

func BenchmarkThinViolation(b *testing.B) {
	p := layered(rat("2"), rat("1e-9"))
	for b.Loop() {
		if r, err := adversary.Search(b.Context(), p, adversary.Options{}); err != nil || r.Witness == nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkTrueBound(b *testing.B) {
	p := layered(rat("2"), rat("0"))
	for b.Loop() {
		if r, err := adversary.Search(b.Context(), p, adversary.Options{}); err != nil || r.Witness != nil {
			b.Fatal(err)
		}
	}
}
