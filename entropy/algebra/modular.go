package algebra

import (
	"math/big"
	"math/bits"
)

// prime is a prime modulus; arithmetic modulo it shows cheaply that a polynomial
// with integer coefficients does not have a divisor.
const prime = 1<<61 - 1

func mulMod(a, b uint64) uint64 {
	hi, lo := bits.Mul64(a, b)
	// hi*2^64 + lo = (hi*8 + lo>>61)*2^61 + lo&prime, and 2^61 = 1.
	r := (hi<<3 | lo>>61) + lo&prime
	if r >= prime {
		r -= prime
	}
	return r
}

func subMod(a, b uint64) uint64 {
	if a < b {
		return a + prime - b
	}
	return a - b
}

func powMod(a uint64, n uint64) uint64 {
	r := uint64(1)
	for ; n > 0; n >>= 1 {
		if n&1 == 1 {
			r = mulMod(r, a)
		}
		a = mulMod(a, a)
	}
	return r
}

func inverseMod(a uint64) uint64 { return powMod(a, prime-2) }

// intMod returns the residue of an integer.
func intMod(c Rat) uint64 {
	if c.b != nil {
		var m big.Int
		return m.Mod(c.b.Num(), big.NewInt(prime)).Uint64()
	}
	r := abs64(c.n) % prime
	if c.n < 0 && r > 0 {
		return prime - r
	}
	return r
}

// sample is a fixed point, one residue for each indeterminate.
func sample(v Var) uint64 {
	z := uint64(uint32(v)) + golden
	z = (z ^ z>>30) * 0xBF58476D1CE4E5B9
	z = (z ^ z>>27) * 0x94D049BB133111EB
	return (z ^ z>>31) % prime
}

// image returns p, of integer coefficients, as a polynomial in v modulo the
// prime, where the other indeterminates have their sample values; false where
// its degree drops or is above 200.
func (p Poly) image(v Var) ([]uint64, bool) {
	d := p.Degree(v)
	if d > 200 {
		return nil, false
	}
	r := p.r
	out := make([]uint64, d+1)
	at := make([]uint64, len(r.vars))
	for k, w := range r.vars {
		at[k] = sample(w)
	}
	for i, c := range r.coefs {
		t := r.term(i)
		x := intMod(c)
		n := 0
		for k, w := range r.vars {
			e := r.lay.field(t, k+1)
			switch {
			case w == v:
				n = e
			case e == 1:
				x = mulMod(x, at[k])
			case e > 1:
				x = mulMod(x, powMod(at[k], uint64(e)))
			}
		}
		if out[n] += x; out[n] >= prime {
			out[n] -= prime
		}
	}
	return out, out[d] != 0
}

// imageDegree returns a bound on the degree in v of the greatest common divisor
// of a and b, which have integer coefficients: that of their images. It is a
// bound since the leading coefficient of a divisor divides that of a, which does
// not vanish at the sample point.
func imageDegree(a, b Poly, v Var) (int, bool) {
	x, ok1 := a.image(v)
	y, ok2 := b.image(v)
	if !ok1 || !ok2 {
		return 0, false
	}
	for len(y) > 0 {
		inv := inverseMod(y[len(y)-1])
		for len(x) >= len(y) {
			f := mulMod(x[len(x)-1], inv)
			shift := len(x) - len(y)
			for i, c := range y {
				x[shift+i] = subMod(x[shift+i], mulMod(f, c))
			}
			x = trim(x)
		}
		x, y = y, x
	}
	return len(x) - 1, true
}

func trim(x []uint64) []uint64 {
	for len(x) > 0 && x[len(x)-1] == 0 {
		x = x[:len(x)-1]
	}
	return x
}
