package program

import (
	"math"
	"math/rand/v2"
)

// A pair is a node and the same formula as plain Go. The closure also reports
// whether every intermediate value was finite.
type pair struct {
	ref  Ref
	eval func(x []float64) (float64, bool)
}

func lift1(p pair, r Ref, f func(float64) float64) pair {
	return pair{r, func(x []float64) (float64, bool) {
		v, ok := p.eval(x)
		v = f(v)
		return v, ok && finite(v)
	}}
}

func lift2(p, q pair, r Ref, f func(a, b float64) float64) pair {
	return pair{r, func(x []float64) (float64, bool) {
		v, ok := p.eval(x)
		w, okw := q.eval(x)
		v = f(v, w)
		return v, ok && okw && finite(v)
	}}
}

func finite(v float64) bool { return !math.IsInf(v, 0) && !math.IsNaN(v) }

// randomPool returns formulas in the given number of inputs, each built from
// earlier ones, so that later ones share subexpressions.
func randomPool(b *Builder, r *rand.Rand, inputs, steps int, smooth bool) []pair {
	var pool []pair
	for i := range inputs {
		pool = append(pool, pair{b.Input(i), func(x []float64) (float64, bool) { return x[i], true }})
	}
	for _, c := range []float64{0, 1, -1, 2, 0.5, -3, 0.1} {
		pool = append(pool, pair{b.Const(c), func([]float64) (float64, bool) { return c, true }})
	}
	for range steps {
		p, q := pool[r.IntN(len(pool))], pool[r.IntN(len(pool))]
		if r.IntN(2) == 0 {
			p = pool[len(pool)-1]
		}
		var s pair
		switch r.IntN(9) {
		case 0, 1:
			s = lift2(p, q, b.Add(p.ref, q.ref), func(a, b float64) float64 { return a + b })
		case 2, 3:
			s = lift2(p, q, b.Sub(p.ref, q.ref), func(a, b float64) float64 { return a - b })
		case 4, 5:
			s = lift2(p, q, b.Mul(p.ref, q.ref), func(a, b float64) float64 { return a * b })
		case 6:
			s = lift2(p, q, b.Quo(p.ref, q.ref), func(a, b float64) float64 { return a / b })
		case 7:
			n := r.IntN(9) - 4
			s = lift1(p, b.PowInt(p.ref, n), func(a float64) float64 {
				if n == 0 {
					return 1
				}
				return powInt(a, n)
			})
		case 8:
			f := Func(1 + r.IntN(int(funcEnd)-1))
			for smooth && (f == Abs || f == Sign || f == Cbrt) {
				f = Func(1 + r.IntN(int(funcEnd)-1))
			}
			s = lift1(p, b.Func(f, p.ref), f.eval)
			if r.IntN(4) == 0 {
				s = lift1(p, b.Neg(p.ref), func(a float64) float64 { return -a })
			}
		}
		pool = append(pool, s)
	}
	return pool
}

func randomPoint(r *rand.Rand, n int) []float64 {
	x := make([]float64, n)
	for i := range x {
		switch r.IntN(4) {
		case 0:
			x[i] = float64(r.IntN(7) - 3)
		default:
			x[i] = r.NormFloat64()
		}
	}
	return x
}

func same(a, b float64) bool { return a == b || math.IsNaN(a) && math.IsNaN(b) }
