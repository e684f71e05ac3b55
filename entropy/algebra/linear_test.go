package algebra

import (
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func dot(row, x []Rat) Rat {
	var s Rat
	for i := range row {
		s = s.Add(row[i].Mul(x[i]))
	}
	return s
}

func TestSolveRat(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 9))
	solved, unsolved := 0, 0
	for range 300 {
		m, n := 1+r.IntN(5), 1+r.IntN(5)
		a := make([][]Rat, m)
		b := make([]Rat, m)
		for i := range a {
			a[i] = make([]Rat, n)
			for j := range a[i] {
				a[i][j] = Frac64(r.Int64N(5)-2, 1+r.Int64N(3))
			}
			b[i] = Int(r.Int64N(5) - 2)
			if i > 0 && r.IntN(3) == 0 { // a dependent row, with or without its right side
				for j := range a[i] {
					a[i][j] = a[0][j].Mul(Int(3))
				}
				b[i] = b[0].Mul(Int(3)).Add(Int(r.Int64N(2)))
			}
		}
		x, null, ok := SolveRat(a, b)
		for _, v := range null {
			for i := range a {
				require.True(t, dot(a[i], v).IsZero())
			}
		}
		if ok {
			solved++
			for i := range a {
				require.True(t, dot(a[i], x).Equal(b[i]))
			}
			continue
		}
		unsolved++
		// The alternative: y with y a = 0 and y b = 1.
		at := make([][]Rat, n+1)
		for j := range n {
			at[j] = make([]Rat, m)
			for i := range m {
				at[j][i] = a[i][j]
			}
		}
		at[n] = b
		c := make([]Rat, n+1)
		c[n] = Int(1)
		_, _, ok = SolveRat(at, c)
		require.True(t, ok, "no solution, but no proof of that either")
	}
	require.Greater(t, solved, 30)
	require.Greater(t, unsolved, 30)
	x, null, ok := SolveRat(nil, nil)
	assert.True(t, ok)
	assert.Empty(t, x)
	assert.Empty(t, null)
	assert.Panics(t, func() { SolveRat([][]Rat{{Int(1)}}, nil) })
}

func TestSolveRatFreeUnknownsAreZero(t *testing.T) {
	x, null, ok := SolveRat([][]Rat{{Int(1), Int(2), Int(3)}}, []Rat{Int(4)})
	require.True(t, ok)
	require.Equal(t, []Rat{Int(4), Int(0), Int(0)}, x)
	require.Equal(t, [][]Rat{{Int(-2), Int(1), Int(0)}, {Int(-3), Int(0), Int(1)}}, null)
}

// TestHilbertMatrix inverts an ill-conditioned matrix; the corner entry of the
// inverse of the n by n Hilbert matrix is n^2, and all entries are integers.
func TestHilbertMatrix(t *testing.T) {
	const n = 12
	a := make([][]Rat, n)
	b := make([]Rat, n)
	b[0] = Int(1)
	for i := range a {
		a[i] = make([]Rat, n)
		for j := range a[i] {
			a[i][j] = Frac64(1, int64(i+j+1))
		}
	}
	x, null, ok := SolveRat(a, b)
	require.True(t, ok)
	require.Empty(t, null)
	require.True(t, x[0].Equal(Int(n*n)))
	for _, v := range x {
		require.True(t, v.IsInt())
	}
}

func TestSolveFractions(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 9))
	for range 40 {
		n := 1 + r.IntN(3)
		a := make([][]Fraction, n)
		b := make([]Fraction, n)
		for i := range a {
			a[i] = make([]Fraction, n)
			for j := range a[i] {
				a[i][j] = randomFraction(r, shape{2, 2, 1, 2})
			}
			b[i] = randomFraction(r, shape{2, 2, 1, 2})
		}
		x, ok, err := SolveFractions(a, b)
		require.NoError(t, err)
		if !ok {
			continue
		}
		for i := range a {
			var s Fraction
			for j := range x {
				s = s.Add(a[i][j].Mul(x[j]))
			}
			require.True(t, s.Equal(b[i]))
		}
	}
	u, v := FromPoly(Variable(0)), FromPoly(Variable(1))
	one := FromPoly(Const(Int(1)))
	_, ok, err := SolveFractions([][]Fraction{{u, v}, {u.Mul(u), u.Mul(v)}}, []Fraction{one, one})
	require.NoError(t, err)
	require.False(t, ok, "the rows are dependent")
	x, ok, err := SolveFractions([][]Fraction{{u, v}, {u.Mul(u), u.Mul(v)}}, []Fraction{one, u})
	require.NoError(t, err)
	require.True(t, ok)
	require.True(t, x[1].IsZero())
	require.True(t, x[0].Mul(u).Equal(one))
	_, _, err = SolveFractions([][]Fraction{{u}}, nil)
	require.ErrorIs(t, err, ErrShape)
	_, ok, err = SolveFractions([][]Fraction{{u.Pow(MaxExponent).Pow(2)}}, []Fraction{one})
	require.ErrorIs(t, err, ErrLimit)
	require.False(t, ok)
}
