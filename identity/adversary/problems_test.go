package adversary_test

import (
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"

	"creaseproof/identity/adversary"
)

func rat(s string) *big.Rat {
	r, ok := new(big.Rat).SetString(s)
	if !ok {
		panic("bad rational " + s)
	}
	return r
}

type monomial struct {
	c      *big.Rat
	powers []int
}

func m(c string, powers ...int) monomial { return monomial{rat(c), powers} }

func margin(ms []monomial, x []float64) float64 {
	sum, abs := 0.0, 0.0
	for _, t := range ms {
		v, _ := t.c.Float64()
		for i, p := range t.powers {
			for range p {
				v *= x[i]
			}
		}
		sum += v
		abs += math.Abs(v)
	}
	if abs == 0 {
		return 0
	}
	return sum / abs
}

func marginGradient(ms []monomial, g, x []float64) {
	sum, abs := 0.0, 0.0
	ds, da := make([]float64, len(x)), make([]float64, len(x))
	for _, t := range ms {
		c, _ := t.c.Float64()
		v := c
		for i, p := range t.powers {
			v *= math.Pow(x[i], float64(p))
		}
		s := 1.0
		if v < 0 {
			s = -1
		}
		sum += v
		abs += math.Abs(v)
		for i, p := range t.powers {
			if p == 0 {
				continue
			}
			d := c * float64(p)
			for j, q := range t.powers {
				if j == i {
					q--
				}
				d *= math.Pow(x[j], float64(q))
			}
			ds[i] += d
			da[i] += s * d
		}
	}
	for i := range g {
		g[i] = 0
		if abs != 0 {
			g[i] = (ds[i] - sum/abs*da[i]) / abs
		}
	}
}

func exact(ms []monomial, x []*big.Rat) *big.Rat {
	sum := new(big.Rat)
	for _, t := range ms {
		v := new(big.Rat).Set(t.c)
		for i, p := range t.powers {
			for range p {
				v.Mul(v, x[i])
			}
		}
		sum.Add(sum, v)
	}
	return sum
}

// polisher returns the exact minimiser in a coordinate in which the polynomial
// is quadratic with a positive leading coefficient.
func polisher(ms []monomial) func(x []*big.Rat, i int) (*big.Rat, bool) {
	return func(x []*big.Rat, i int) (*big.Rat, bool) {
		var c [3]*big.Rat
		for k := range c {
			c[k] = new(big.Rat)
		}
		for _, t := range ms {
			v := new(big.Rat).Set(t.c)
			for j, p := range t.powers {
				for range p {
					if j != i {
						v.Mul(v, x[j])
					}
				}
			}
			if t.powers[i] > 2 {
				return nil, false
			}
			c[t.powers[i]].Add(c[t.powers[i]], v)
		}
		if c[2].Sign() <= 0 {
			return nil, false
		}
		r := new(big.Rat).Quo(c[1], c[2])
		return r.Mul(r, big.NewRat(-1, 2)), true
	}
}

// lin and expand multiply polynomials in one variable, lowest degree first.
func lin(a, b string) []*big.Rat { return []*big.Rat{rat(b), rat(a)} }

func expand(a, b []*big.Rat) []*big.Rat {
	c := make([]*big.Rat, len(a)+len(b)-1)
	for i := range c {
		c[i] = new(big.Rat)
	}
	for i, x := range a {
		for j, y := range b {
			c[i+j].Add(c[i+j], new(big.Rat).Mul(x, y))
		}
	}
	return c
}

// product multiplies and collects, in a fixed order.
func product(a, b []monomial) []monomial {
	at := map[string]int{}
	var out []monomial
	for _, x := range a {
		for _, y := range b {
			e := make([]int, len(x.powers))
			for i := range e {
				e[i] = x.powers[i] + y.powers[i]
			}
			k := fmt.Sprint(e)
			if _, ok := at[k]; !ok {
				at[k] = len(out)
				out = append(out, monomial{new(big.Rat), e})
			}
			c := out[at[k]].c
			c.Add(c, new(big.Rat).Mul(x.c, y.c))
		}
	}
	return out
}

// randomPolynomial has a few monomials of degree 1 or 2 with odd coefficients,
// and sometimes a constant.
func randomPolynomial(rng *rand.Rand, dim int) []monomial {
	var ms []monomial
	for range 3 + rng.IntN(3) {
		e := make([]int, dim)
		for range 1 + rng.IntN(2) {
			e[rng.IntN(dim)]++
		}
		ms = append(ms, monomial{big.NewRat(int64(rng.IntN(19)-9)*2+1, int64(1+rng.IntN(3))), e})
	}
	if rng.IntN(2) == 0 {
		ms = append(ms, monomial{big.NewRat(int64(rng.IntN(9)-4)*2+1, 1), make([]int, dim)})
	}
	return ms
}

// layered is the problem of the bound
//
//	div Sigma(theta) ≤ e - lambda eps K - s eps u_xx²,
//
// with R = u_z - (u_x² + u_y²)/2, e = R²/(2 eps) + eps (u_xx + u_yy)²/2 and
// div Sigma = R (cos 2θ (u_xx - u_yy) + 2 sin 2θ u_xy), after multiplication by 2
// eps > 0. Coordinates: u_x, u_y, u_z, u_xx, u_xy, u_yy, eps, t with
// t = tan(θ/2). It is true for lambda = 2, s = 0, and sharp.
func layered(lambda, s *big.Rat) adversary.Problem {
	l, _ := lambda.Float64()
	sf, _ := s.Float64()
	return adversary.Problem{
		Dim:    8,
		Value:  func(x []float64) float64 { return layeredMargin(l, sf, x, nil) },
		Starts: starts,
		Gradient: func(g, x []float64) {
			layeredMargin(l, sf, x, g)
		},
		Lower:  []float64{math.Inf(-1), math.Inf(-1), math.Inf(-1), math.Inf(-1), math.Inf(-1), math.Inf(-1), 0, math.Inf(-1)},
		Verify: func(x []*big.Rat) bool { return x[6].Sign() > 0 && layeredGap(lambda, s, x).Sign() < 0 },
	}
}

// layeredMargin sums over the monomials in R expanded, the powers of the sine
// and cosine being left as they are.
func layeredMargin(l, s float64, x, g []float64) float64 {
	t := x[7]
	q := 1 + t*t
	c, si := (1-t*t)/q, 2*t/q
	c2, s2 := c*c-si*si, 2*si*c
	dTheta := 2 / q
	sum, abs := 0.0, 0.0
	var ds, da [8]float64
	term := func(k float64, p [8]int, f, df float64) {
		v := k * f
		for i, n := range p {
			for range n {
				v *= x[i]
			}
		}
		sign := 1.0
		if v < 0 {
			sign = -1
		}
		sum += v
		abs += math.Abs(v)
		if g == nil {
			return
		}
		for i, n := range p {
			if n == 0 {
				continue
			}
			d := k * f * float64(n)
			for j, e := range p {
				if j == i {
					e--
				}
				for range e {
					d *= x[j]
				}
			}
			ds[i] += d
			da[i] += sign * d
		}
		d := k * df * dTheta
		for i, n := range p {
			for range n {
				d *= x[i]
			}
		}
		ds[7] += d
		da[7] += sign * d
	}
	// R², expanded.
	term(1, [8]int{0, 0, 2}, 1, 0)
	term(0.25, [8]int{4}, 1, 0)
	term(0.25, [8]int{0, 4}, 1, 0)
	term(0.5, [8]int{2, 2}, 1, 0)
	term(-1, [8]int{2, 0, 1}, 1, 0)
	term(-1, [8]int{0, 2, 1}, 1, 0)
	// eps² L² - 2 lambda eps² K - 2 s eps² u_xx²
	term(1-2*s, [8]int{0, 0, 0, 2, 0, 0, 2}, 1, 0)
	term(1, [8]int{0, 0, 0, 0, 0, 2, 2}, 1, 0)
	term(2-2*l, [8]int{0, 0, 0, 1, 0, 1, 2}, 1, 0)
	term(2*l, [8]int{0, 0, 0, 0, 2, 0, 2}, 1, 0)
	// -2 eps R (c2 (u_xx - u_yy) + 2 s2 u_xy)
	for _, r := range []struct {
		k float64
		p [8]int
	}{{1, [8]int{0, 0, 1, 0, 0, 0, 1}}, {-0.5, [8]int{2, 0, 0, 0, 0, 0, 1}}, {-0.5, [8]int{0, 2, 0, 0, 0, 0, 1}}} {
		p := r.p
		p[3] = 1
		term(-2*r.k, p, c2, -2*s2)
		p[3], p[5] = 0, 1
		term(2*r.k, p, c2, -2*s2)
		p[5], p[4] = 0, 1
		term(-4*r.k, p, s2, 2*c2)
	}
	if abs == 0 {
		return 0
	}
	for i := range g {
		g[i] = (ds[i] - sum/abs*da[i]) / abs
	}
	return sum / abs
}

// layeredGap is 2 eps times the gap, computed from the definitions.
func layeredGap(lambda, s *big.Rat, x []*big.Rat) *big.Rat {
	mul := func(a ...*big.Rat) *big.Rat {
		v := big.NewRat(1, 1)
		for _, f := range a {
			v.Mul(v, f)
		}
		return v
	}
	add := func(a ...*big.Rat) *big.Rat {
		v := new(big.Rat)
		for _, f := range a {
			v.Add(v, f)
		}
		return v
	}
	neg := func(a *big.Rat) *big.Rat { return new(big.Rat).Neg(a) }
	two, half, one := rat("2"), rat("1/2"), rat("1")
	ux, uy, uz, uxx, uxy, uyy, eps, t := x[0], x[1], x[2], x[3], x[4], x[5], x[6], x[7]
	q := new(big.Rat).Inv(add(one, mul(t, t)))
	c, si := mul(add(one, neg(mul(t, t))), q), mul(two, t, q)
	c2, s2 := add(mul(c, c), neg(mul(si, si))), mul(two, si, c)
	r := add(uz, neg(mul(half, add(mul(ux, ux), mul(uy, uy)))))
	lap := add(uxx, uyy)
	k := add(mul(uxx, uyy), neg(mul(uxy, uxy)))
	div := mul(r, add(mul(c2, add(uxx, neg(uyy))), mul(two, s2, uxy)))
	return add(mul(r, r), mul(eps, eps, lap, lap), neg(mul(two, lambda, eps, eps, k)),
		neg(mul(two, s, eps, eps, uxx, uxx)), neg(mul(two, eps, div)))
}
