package adversary

import (
	"math"
	"math/big"
)

// convergents returns the continued-fraction convergents of v, simplest first,
// with the last semiconvergent before each, up to v itself to nearly full
// precision; at most n of them. For the best-approximation property see Khinchin,
// Continued Fractions, chapter II.
func convergents(v float64, n int) []*big.Rat {
	if !finite(v) {
		return nil
	}
	if math.Abs(v) >= 1<<53 {
		return []*big.Rat{new(big.Rat).SetFloat64(v)}
	}
	var out []*big.Rat
	x := new(big.Rat).SetFloat64(v)
	p0, q0, p1, q1 := big.NewInt(0), big.NewInt(1), big.NewInt(1), big.NewInt(0)
	for len(out) < n {
		a := floorRat(x)
		if a.Cmp(big.NewInt(2)) >= 0 && q1.Sign() > 0 {
			half := new(big.Int).Add(a, big.NewInt(1))
			half.Rsh(half, 1)
			out = append(out, step(half, p1, p0, q1, q0))
		}
		c := step(a, p1, p0, q1, q0)
		if len(out) == 0 || out[len(out)-1].Cmp(c) != 0 {
			out = append(out, c)
		}
		if c, _ := c.Float64(); c == v {
			break
		}
		p0, p1 = p1, new(big.Int).Add(new(big.Int).Mul(a, p1), p0)
		q0, q1 = q1, new(big.Int).Add(new(big.Int).Mul(a, q1), q0)
		x.Sub(x, new(big.Rat).SetInt(a))
		if x.Sign() == 0 {
			break
		}
		x.Inv(x)
	}
	return out
}

func step(a, p1, p0, q1, q0 *big.Int) *big.Rat {
	p := new(big.Int).Add(new(big.Int).Mul(a, p1), p0)
	q := new(big.Int).Add(new(big.Int).Mul(a, q1), q0)
	return new(big.Rat).SetFrac(p, q)
}

func floorRat(x *big.Rat) *big.Int {
	return new(big.Int).Div(x.Num(), x.Denom()) // Euclidean: floor, as the denominator is positive
}

// within returns the last of the convergents cs, simplest first, whose
// denominator is at most limit.
func within(cs []*big.Rat, limit int64) *big.Rat {
	best := new(big.Rat)
	for i, c := range cs {
		if i > 0 && c.Denom().Cmp(big.NewInt(limit)) > 0 {
			break
		}
		best = c
	}
	return best
}

// complexity orders rationals by the length of writing them; integers come
// before fractions of the same length.
func complexity(r *big.Rat) int {
	n := 2 * r.Num().BitLen()
	if !r.IsInt() {
		n += 2*r.Denom().BitLen() + 1
	}
	if r.Sign() < 0 {
		n++
	}
	return n
}

func totalComplexity(x []*big.Rat) int {
	n := 0
	for _, r := range x {
		n += complexity(r)
	}
	return n
}

// simple returns the rationals tried in place of v before its convergents, in
// groups of growing complexity.
func simple(v float64) [][]*big.Rat {
	s := int64(1)
	if v < 0 {
		s = -1
	}
	groups := [][]*big.Rat{
		{new(big.Rat)},
		{big.NewRat(s, 1), big.NewRat(-s, 1)},
		{big.NewRat(2*s, 1), big.NewRat(s, 2)},
	}
	if a := math.Abs(v); a < 1e9 {
		near := []*big.Rat{big.NewRat(int64(math.Round(v)), 1), big.NewRat(int64(math.Round(2*v)), 2)}
		if a >= 1 {
			k := math.Pow(10, math.Floor(math.Log10(a)))
			near = append([]*big.Rat{big.NewRat(int64(math.Round(v/k)*k), 1)}, near...)
		}
		groups = append(groups, near)
	}
	return groups
}

func clone(x []*big.Rat) []*big.Rat {
	y := make([]*big.Rat, len(x))
	for i, r := range x {
		y[i] = new(big.Rat).Set(r)
	}
	return y
}
