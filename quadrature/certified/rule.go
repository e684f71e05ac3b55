package certified

import (
	"fmt"
	"math"
	"math/big"
	"sync"

	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/interval"
)

// Pi is an interval around π.
func Pi() interval.Interval { return pi() }

var pi = sync.OnceValue(func() interval.Interval {
	return Outward(enclosure.Context{Prec: 128}.Pi())
})

// gauss is the Gauss–Legendre rule on [-1, 1], enclosed.
type gauss struct {
	n              int
	nodes, weights []interval.Interval
	gamma          interval.Interval // (n!)^4/((2n+1) ((2n)!)^2)
}

// rules for one and for two parameters.
var (
	single = sync.OnceValues(func() (*gauss, error) { return newGauss(10) })
	double = sync.OnceValues(func() (*gauss, error) { return newGauss(7) })
)

// legendre is P_n(x), and P_{n-1}(x), by the recurrence
// (k+1) P_{k+1} = (2k+1) x P_k - k P_{k-1}.
func legendre(n int, x *big.Rat) (p, before *big.Rat) {
	before, p = new(big.Rat), big.NewRat(1, 1)
	for k := range n {
		next := new(big.Rat).Mul(x, p)
		next.Mul(next, big.NewRat(int64(2*k+1), int64(k+1)))
		next.Sub(next, new(big.Rat).Mul(before, big.NewRat(int64(k), int64(k+1))))
		before, p = p, next
	}
	return p, before
}

// newGauss isolates the n zeros of P_n by n changes of sign on disjoint
// intervals, in exact arithmetic, and halves these until they are narrow.
func newGauss(n int) (*gauss, error) {
	const bits = 90
	g := &gauss{n: n}
	ec := enclosure.Context{Prec: 160}
	var last *big.Rat
	for i := n - 1; i >= 0; i-- {
		// Tricomi's approximation; whether it is good shows below.
		at := math.Cos(math.Pi * (float64(i) + 0.75) / (float64(n) + 0.5))
		scale := new(big.Int).Lsh(big.NewInt(1), bits)
		cut := func(x float64) *big.Rat { return new(big.Rat).SetFrac64(int64(math.Round(x*0x1p40)), 1<<40) }
		gap := 0.2 / float64(n*n)
		lo, hi := cut(at-gap), cut(at+gap)
		if last != nil && last.Cmp(lo) >= 0 {
			return nil, fmt.Errorf("certified: the zeros of P_%d are not apart", n)
		}
		last = hi
		a, _ := legendre(n, lo)
		b, _ := legendre(n, hi)
		if a.Sign()*b.Sign() >= 0 {
			return nil, fmt.Errorf("certified: no zero of P_%d where one should be", n)
		}
		for {
			width := new(big.Rat).Sub(hi, lo)
			if width.Mul(width, new(big.Rat).SetInt(scale)).Cmp(big.NewRat(1, 1)) < 0 {
				break
			}
			mid := new(big.Rat).Add(lo, hi)
			mid.Quo(mid, big.NewRat(2, 1))
			m, _ := legendre(n, mid)
			switch {
			case m.Sign() == 0:
				lo, hi = mid, mid
			case m.Sign() == a.Sign():
				lo = mid
			default:
				hi = mid
			}
		}
		x := ec.FromRats(lo, hi)
		// w = 2 (1 - x²)/(n P_{n-1}(x))², P_{n-1} by the same recurrence.
		before, p := ec.Int(0), ec.Int(1)
		for k := range n - 1 {
			next := ec.Mul(ec.Mul(x, p), ec.FromRat(big.NewRat(int64(2*k+1), int64(k+1))))
			before, p = p, ec.Sub(next, ec.Mul(before, ec.FromRat(big.NewRat(int64(k), int64(k+1)))))
		}
		w := ec.Quo(ec.Mul(ec.Int(2), ec.Sub(ec.Int(1), ec.Sqr(x))), ec.Sqr(ec.Mul(ec.Int(int64(n)), p)))
		g.nodes, g.weights = append(g.nodes, Outward(x)), append(g.weights, Outward(w))
	}
	f := func(n int64) *big.Int { return new(big.Int).MulRange(1, n) }
	up := new(big.Int).Exp(f(int64(n)), big.NewInt(4), nil)
	down := new(big.Int).Mul(f(int64(2*n)), f(int64(2*n)))
	down.Mul(down, big.NewInt(int64(2*n+1)))
	g.gamma = Outward(ec.FromRat(new(big.Rat).SetFrac(up, down)))
	return g, nil
}
