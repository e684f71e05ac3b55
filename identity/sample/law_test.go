package sample

import (
	"math"
	"math/bits"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/program"
)

// draw returns the values of blocks of one law, lane by lane.
func draw(t *testing.T, law Law, columns []Column, blocks int) [][]float64 {
	t.Helper()
	l, err := NewLayout(columns)
	require.NoError(t, err)
	all := make([][]float64, l.Len())
	cols := matrix(l.Len(), program.BlockSize)
	for k := range blocks {
		l.fill(law, NewStream(7, uint64(k)), cols, program.BlockSize)
		for i := range cols {
			all[i] = append(all[i], cols[i]...)
		}
	}
	return all
}

func free(n int) []Column { return make([]Column, n) }

// chiSquare returns Pearson's statistic as a number of standard deviations above
// its mean. With a fixed seed it is a fixed number; below 5 is far from
// suspicious, and the tests also show that wrong laws exceed it by far.
func chiSquare(count []int, weight []float64) float64 {
	total, sum := 0, 0.0
	for i := range count {
		total += count[i]
		sum += weight[i]
	}
	x := 0.0
	for i := range count {
		e := float64(total) * weight[i] / sum
		x += (float64(count[i]) - e) * (float64(count[i]) - e) / e
	}
	df := float64(len(count) - 1)
	return (x - df) / math.Sqrt(2*df)
}

func TestHeavyTailed(t *testing.T) {
	const lo, hi = -30, 30
	weight := make([]float64, hi-lo+1)
	for w := range 2048 {
		weight[w*len(weight)>>11]++
	}
	histogram := func(law Law) (expo, mant []int, negative, n int) {
		expo, mant = make([]int, hi-lo+1), make([]int, 64)
		for _, col := range draw(t, law, free(3), 200) {
			for _, v := range col {
				f, e := math.Frexp(math.Abs(v))
				expo[e-1-lo]++
				mant[int((2*f-1)*64)]++
				if v < 0 {
					negative++
				}
				n++
			}
		}
		return expo, mant, negative, n
	}
	expo, mant, negative, n := histogram(HeavyTailed{})
	flat := make([]float64, 64)
	for i := range flat {
		flat[i] = 1
	}
	assert.Less(t, chiSquare(expo, weight), 5.0)
	assert.Less(t, chiSquare(mant, flat), 5.0)
	assert.InDelta(t, 0.5, float64(negative)/float64(n), 5*0.5/math.Sqrt(float64(n)))

	// the same test refuses a range short by one exponent
	expo, _, _, _ = histogram(HeavyTailed{lo, hi - 1})
	assert.Greater(t, chiSquare(expo, weight), 50.0)

	// ranges are clipped to normal numbers
	for _, v := range draw(t, HeavyTailed{-5000, 5000}, free(1), 20)[0] {
		require.True(t, isFinite(v) && v != 0)
	}
}

// Kolmogorov-Smirnov distance to the normal distribution.
func TestGaussian(t *testing.T) {
	distance := func(scale, claimed float64) float64 {
		const cells = 4000
		count := make([]int, cells+1)
		col := draw(t, Gaussian{scale}, free(1), 400)[0]
		for _, v := range col {
			count[int(cells*0.5*(1+math.Erf(v/claimed/math.Sqrt2)))]++
		}
		sum, d := 0, 0.0
		for i, c := range count {
			sum += c
			d = max(d, math.Abs(float64(sum)/float64(len(col))-float64(i+1)/cells))
		}
		return d * math.Sqrt(float64(len(col)))
	}
	assert.Less(t, distance(0, 1), 1.95) // probability 0.001 for a true law
	assert.Less(t, distance(3, 3), 1.95)
	assert.Greater(t, distance(1.05, 1), 3.0)
}

func TestLattice(t *testing.T) {
	zero, integer, n := 0, 0, 0
	seen := map[float64]bool{}
	for _, col := range draw(t, Lattice{}, free(2), 100) {
		for _, v := range col {
			n++
			seen[v] = true
			if v == 0 {
				zero++
			} else if v == math.Trunc(v) {
				integer++
			}
			require.LessOrEqual(t, math.Abs(v), 4.0)
			ok := false
			for q := 1.0; q <= 5; q++ {
				ok = ok || math.Abs(v*q-math.Round(v*q)) < 1e-12
			}
			require.True(t, ok, v)
		}
	}
	assert.InDelta(t, 0.25, float64(zero)/float64(n), 0.01)
	assert.Greater(t, float64(integer)/float64(n), 0.5)
	for _, v := range []float64{-4, -3, -2, -1, 0, 1, 2, 3, 4, 0.5, -0.5, 1.0 / 3, -0.75, 0.4} {
		assert.True(t, seen[v], v)
	}
	for _, v := range draw(t, Lattice{Max: 1}, free(1), 10)[0] {
		require.LessOrEqual(t, math.Abs(v), 1.0)
	}
}

func TestStreams(t *testing.T) {
	a, b := NewStream(1, 5), NewStream(1, 5)
	for range 100 {
		require.Equal(t, a.Uint64(), b.Uint64())
	}
	// first words of neighbouring blocks and seeds differ in half of their bits
	differ, n := 0, 0
	seen := map[uint64]bool{}
	for seed := range uint64(50) {
		for block := range uint64(50) {
			w := NewStream(seed, block).Uint64()
			require.False(t, seen[w])
			seen[w] = true
			differ += bits.OnesCount64(w ^ NewStream(seed, block+1).Uint64())
			differ += bits.OnesCount64(w ^ NewStream(seed+1, block).Uint64())
			n += 128
		}
	}
	assert.InDelta(t, 0.5, float64(differ)/float64(n), 0.005)
}

// Columns of one block and lanes of neighbouring blocks are not correlated.
func TestIndependence(t *testing.T) {
	corr := func(x, y []float64) float64 {
		s := 0.0
		for i := range y {
			s += math.Copysign(1, x[i]) * math.Copysign(1, y[i])
		}
		return s / math.Sqrt(float64(len(y)))
	}
	for _, law := range []Law{Gaussian{}, HeavyTailed{}} {
		c := draw(t, law, free(3), 400)
		assert.Less(t, math.Abs(corr(c[0], c[1])), 4.5)
		assert.Less(t, math.Abs(corr(c[1], c[2])), 4.5)
		assert.Less(t, math.Abs(corr(c[0][program.BlockSize:], c[0][:len(c[0])-program.BlockSize])), 4.5)
		assert.Less(t, math.Abs(corr(c[0][1:], c[0][:len(c[0])-1])), 4.5)
		assert.Greater(t, corr(c[0], c[0]), 100.0)
	}
}

func TestAngles(t *testing.T) {
	columns := []Column{{Kind: Sine, Angle: 3}, {}, {Kind: Cosine, Angle: 3}, {Kind: Cosine, Angle: 1}, {Kind: Sine, Angle: 1}}
	c := draw(t, HeavyTailed{}, columns, 400)
	var quadrant [4]int
	compassHits, n := 0, 0
	special := map[[2]float64]bool{}
	for j := range c[0] {
		cos, sin := c[2][j], c[0][j]
		require.InDelta(t, 1, cos*cos+sin*sin, 1e-15)
		require.InDelta(t, 1, c[3][j]*c[3][j]+c[4][j]*c[4][j], 1e-15)
		n++
		if cos == 0 || sin == 0 || math.Abs(cos) == math.Abs(sin) {
			compassHits++
			special[[2]float64{cos, sin}] = true
			continue
		}
		q := 0
		if cos < 0 {
			q++
		}
		if sin < 0 {
			q += 2
		}
		quadrant[q]++
		// the dyadic parameter is recovered from the rounded coordinates
		p := sin / (1 + math.Abs(cos)) * (1 << 24)
		require.InDelta(t, math.Round(p), p, 1e-7)
	}
	assert.Greater(t, float64(compassHits)/float64(n), 0.125)
	for k := range compass {
		assert.True(t, special[[2]float64{compass[k], compass[(k+6)&7]}], k)
	}
	assert.Less(t, chiSquare(quadrant[:], []float64{1, 1, 1, 1}), 5.0)
}

func TestNear(t *testing.T) {
	// the well u_z = (u_x^2 + u_y^2)/2, corrected in u_z
	b := program.NewBuilder()
	r := b.Sub(b.Input(2), b.Mul(b.Const(0.5), b.Add(b.PowInt(b.Input(0), 2), b.PowInt(b.Input(1), 2))))
	p, err := b.Compile(r, b.Gradient(r, []int{2})[0])
	require.NoError(t, err)
	step, err := Newton(p, 2, 1)
	require.NoError(t, err)

	count := make(map[int]int) // by decimal exponent of the relative residual
	c := draw(t, Near{Gaussian{}, step}, free(3), 200)
	for j := range c[0] {
		well := (c[0][j]*c[0][j] + c[1][j]*c[1][j]) / 2
		rel := math.Abs(c[2][j]-well) / well
		if rel < 4e-16 {
			count[-16]++
		} else {
			count[int(math.Floor(math.Log10(rel)))]++
		}
	}
	n := len(c[0])
	// a quarter is not perturbed, nor is one in eight of the others in any column;
	// one in fifteen is by 1e-15 at most
	assert.InDelta(t, 0.25+0.75/8+0.75*7/8/30, float64(count[-16])/float64(n), 0.02)
	for k := -14; k <= -2; k++ {
		assert.Greater(t, count[k], n/60, k)
	}
	for j, v := range draw(t, Gaussian{}, free(3), 200)[2] {
		require.NotEqual(t, v, c[2][j])
	}

	_, err = Newton(p, 3, 1)
	assert.Error(t, err)
	one, err := p.Select(0)
	require.NoError(t, err)
	_, err = Newton(one, 0, 1)
	assert.Error(t, err)
}

// A Newton step with vanishing slope leaves the point finite.
func TestNewtonWithoutSlope(t *testing.T) {
	b := program.NewBuilder()
	r := b.Add(b.PowInt(b.Input(0), 2), b.Const(1))
	p, err := b.Compile(r, b.Gradient(r, []int{0})[0])
	require.NoError(t, err)
	step, err := Newton(p, 0, 5)
	require.NoError(t, err)
	for _, v := range draw(t, Near{Lattice{}, step}, free(1), 20)[0] {
		require.True(t, isFinite(v))
	}
}
