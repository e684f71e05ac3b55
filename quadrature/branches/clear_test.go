package branches

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
)

// power is 2^e.
func power(e int) *big.Rat {
	x := new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), uint(max(e, -e))))
	if e < 0 {
		x.Inv(x)
	}
	return x
}

// checked compares clear with exact signs at the vertices, and reports whether
// it decided.
func checked(t *testing.T, list []Affine, at [][]*big.Rat) bool {
	t.Helper()
	dim := len(at[0])
	p := polygon{dim: dim, at: at}
	for _, x := range at {
		near := make([]float64, dim)
		for k, c := range x {
			near[k], _ = c.Float64()
		}
		p.near = append(p.near, near)
	}
	s := &sheet{list: list, float: rounded(list), i: 0, j: 1}
	sign := s.clear(p, 1)
	if sign == 0 {
		return false
	}
	for _, x := range at {
		if exact := list[1].minus(list[0]).At(x); !assert.Equal(t, sign, exact.Sign(), "%v at %v", list, x) {
			return true
		}
	}
	return true
}

// A comparison in rounded numbers never contradicts the exact one: values that
// are zero, or nearly, by cancellation, and numbers of every size.
func TestClearAgainstExact(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 5))
	odd := func() *big.Rat {
		return big.NewRat(rng.Int64()-rng.Int64(), 1+rng.Int64())
	}
	decided := [3]int{}
	const rounds = 20000
	for round := range rounds {
		dim := 2 + round%2
		kind := round % 3
		size := 0
		if kind == 2 {
			size = rng.IntN(2200) - 1100
		}
		var list []Affine
		for range 2 {
			f := Affine{Constant: new(big.Rat).Mul(odd(), power(size))}
			for range dim {
				e := size
				if kind == 2 {
					e = rng.IntN(2200) - 1100
				}
				f.Gradient = append(f.Gradient, new(big.Rat).Mul(odd(), power(e)))
			}
			list = append(list, f)
		}
		var at [][]*big.Rat
		for range 1 + rng.IntN(3) {
			x := make([]*big.Rat, dim)
			for k := range x {
				x[k] = odd()
				if kind == 2 {
					x[k].Mul(x[k], power(rng.IntN(2200)-1100))
				}
			}
			at = append(at, x)
		}
		if kind == 1 { // nearly equal at the first vertex
			v := list[0].minus(list[1]).At(at[0])
			list[1].Constant.Add(list[1].Constant, v)
			e := new(big.Rat).Mul(odd(), power(-40-rng.IntN(30)))
			list[1].Constant.Add(list[1].Constant, e)
			at = at[:1]
		}
		if checked(t, list, at) {
			decided[kind]++
		}
		if t.Failed() {
			return
		}
	}
	// It decides something of every kind, and not everything.
	for kind, n := range decided {
		assert.Greater(t, n, rounds/100, "kind %d", kind)
		assert.Less(t, n, rounds/3, "kind %d", kind)
	}
}

// A coordinate that is rounded to nothing, times a large coefficient, is more
// than the constant; numbers that round to infinity decide nothing.
func TestClearAtTheEndsOfTheRange(t *testing.T) {
	zero := func() Affine {
		return Affine{Gradient: []*big.Rat{new(big.Rat), new(big.Rat)}, Constant: new(big.Rat)}
	}
	f := zero()
	f.Gradient[0], f.Constant = new(big.Rat).Neg(power(1000)), power(-100)
	tiny := [][]*big.Rat{{power(-1080), new(big.Rat)}}
	assert.False(t, checked(t, []Affine{zero(), f}, tiny))
	f.Gradient[0] = power(2000)
	assert.False(t, checked(t, []Affine{zero(), f}, tiny))
	f.Gradient[0], f.Constant = new(big.Rat), power(1100)
	assert.False(t, checked(t, []Affine{zero(), f}, [][]*big.Rat{{power(1), power(1)}}))
	f.Gradient[0], f.Constant = power(-1074), new(big.Rat)
	assert.False(t, checked(t, []Affine{zero(), f}, [][]*big.Rat{{power(0), power(0)}}))
	f.Constant = new(big.Rat).SetFloat64(math.Ldexp(1, -140))
	assert.True(t, checked(t, []Affine{zero(), f}, [][]*big.Rat{{power(0), power(0)}}))
}
