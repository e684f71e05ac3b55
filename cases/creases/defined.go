package creases

import (
	"fmt"
	"math"
	"math/big"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
)

// undefined looks for a place inside the domain where a branch has no value, and
// where u could be that branch: a part of the domain where a root or a logarithm is
// not real, or a surface where a denominator changes its sign and the numerator
// does not vanish. The reason names it; it is empty where none is found, which
// proves nothing.
func (c *combination) undefined(d domain) (reason string, err error) {
	b, err := c.branchValues()
	if err != nil {
		return "", err
	}
	points := d.points()
	for k := range c.s.shape.branches {
		for _, x := range points {
			if math.IsNaN(b.at(x)[k]) && b.nowhereNear(&d, x, k) && b.matters(k, x, math.Inf(1), x, math.Inf(-1)) {
				return c.noValue(k, "is not defined", x), nil
			}
		}
		if x, found := c.pole(b, points, k); found {
			return c.noValue(k, "is infinite", x), nil
		}
		if c.ctx.Err() != nil {
			return "", c.ctx.Err()
		}
	}
	return "", nil
}

func (c *combination) noValue(k int, what string, x []float64) string {
	return fmt.Sprintf("branch %d, %s, %s%s, inside the domain, where u depends on it%s: choose a domain in which it has values",
		k+1, strings.TrimSpace(c.s.shape.branches[k].text.S), what, c.place(x, nil), c.where())
}

// nowhereNear reports whether branch k has no value next to x either.
func (b *branchValues) nowhereNear(d *domain, x []float64, k int) bool {
	y := make([]float64, len(x))
	for _, sign := range [2]float64{1, -1} {
		for i, r := range d.box {
			y[i] = x[i] + sign*0x1p-20*(r[1]-r[0])*(1+0.37*float64(i))
		}
		if !math.IsNaN(b.at(y)[k]) {
			return false
		}
	}
	return true
}

// matters reports whether u is branch k, or without a value, or not the same, for
// the two values of that branch, at x and at y.
func (b *branchValues) matters(k int, x []float64, atX float64, y []float64, atY float64) bool {
	u, one := b.with(x, k, atX)
	v, other := b.with(y, k, atY)
	return one == k || other == k || !(math.Abs(u-v) <= 1e-6*(1+math.Abs(u)+math.Abs(v)))
}

// with is u at x, and which branch it is, with another value of branch k.
func (b *branchValues) with(x []float64, k int, value float64) (u float64, active int) {
	list := b.at(x)
	list[k] = value
	return b.tree.Eval(list)
}

// pole finds a place where a factor of the denominator of branch k, in lowest
// terms, changes its sign and the numerator is not zero, by enclosures, and where
// that matters to u.
func (c *combination) pole(b *branchValues, points [][]float64, k int) (at []float64, found bool) {
	ring := c.exact.Ring
	x, err := c.in.Scalar(c.s.shape.branches[k].node)
	if err != nil || ring.Err(x) != nil {
		return nil, false
	}
	sign := func(f algebra.Fraction, x []float64) int {
		s, ok := ring.Enclose(f, c.rationalPoint(x), precision).Sign()
		if !ok {
			return 0
		}
		return s
	}
	num := algebra.FromPoly(x.Num())
	for _, factor := range x.DenFactors() {
		f := algebra.FromPoly(factor.Base)
		if len(ring.Support(f)) == 0 {
			continue
		}
		const most = 32 // pairs of points looked at
		tried := 0
		first := sign(f, points[0])
		for _, y := range points[1:] {
			if s := sign(f, y); first == 0 || s*first >= 0 {
				continue
			}
			if tried++; tried > most {
				break
			}
			p, q := points[0], y
			for range 40 {
				m := make([]float64, len(p))
				for i := range m {
					m[i] = p[i] + 0.4877*(q[i]-p[i])
				}
				switch s := sign(f, m); {
				case s == 0:
					continue
				case s == first:
					p = m
				default:
					q = m
				}
			}
			wide := map[algebra.Var]enclosure.Interval{}
			for i := range p {
				lo, hi := new(big.Rat).SetFloat64(min(p[i], q[i])), new(big.Rat).SetFloat64(max(p[i], q[i]))
				wide[ring.CoordinateVar(i)] = precise.FromRats(lo, hi)
			}
			if n, ok := ring.EncloseAt(num, nil, wide, precision).Sign(); !ok || n == 0 {
				continue
			}
			inf := func(x []float64) float64 { return math.Copysign(math.Inf(1), b.at(x)[k]) }
			if b.matters(k, p, inf(p), q, inf(q)) {
				return p, true
			}
		}
	}
	return nil, false
}
