package creases

import (
	"math/big"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/jet"
)

// levelSamples are a few points of a level set: on lines through points of the
// domain, between two rational points at which phi has different signs by
// enclosures, where phi is bounded by an enclosure in between.
func (c *combination) levelSamples() (list []samplePoint) {
	const most = 3
	d, err := c.domain()
	if err != nil {
		return nil
	}
	phi, err := c.in.Scalar(c.s.shape.level.node)
	if err != nil || c.exact.Ring.Err(phi) != nil {
		return nil
	}
	f, err := c.levelFunction(*c.s.shape.level, nil)
	if err != nil {
		return nil
	}
	for i, x := range d.points() {
		k := i % len(x)
		a, b, ok := change(f, x, k, d.box[k])
		if !ok {
			continue
		}
		if p, ok := c.onLevel(phi, x, k, a, b); ok && (d.round == nil || (&inBall{d.round, d.center, d.radius}).Value(p.point) > 1e-9*d.radius*d.radius) {
			if list = append(list, p); len(list) == most {
				break
			}
		}
	}
	return list
}

// change finds two places between which f changes its sign on the line through
// x along coordinate k.
func change(f *levelFunction, x []float64, k int, b [2]float64) (lo, hi float64, ok bool) {
	const steps = 24
	at := append([]float64(nil), x...)
	var before float64
	for i := range steps + 1 {
		at[k] = b[0] + (b[1]-b[0])*float64(i)/steps
		v := f.Value(at)
		if i > 0 && v*before < 0 {
			return b[0] + (b[1]-b[0])*float64(i-1)/steps, at[k], true
		}
		before = v
	}
	return 0, 0, false
}

// onLevel encloses a zero of phi on a line between a and b.
func (c *combination) onLevel(phi algebra.Fraction, x []float64, k int, a, b float64) (p samplePoint, ok bool) {
	const halvings = 120
	ring := c.exact.Ring
	place := func(t *big.Rat) jet.Point {
		at := c.rationalPoint(x)
		at[ring.CoordinateVar(k)] = algebra.FromBig(t)
		return at
	}
	sign := func(t *big.Rat) (s int, known bool) { return ring.Enclose(phi, place(t), precision).Sign() }
	lo, hi := new(big.Rat).SetFloat64(a), new(big.Rat).SetFloat64(b)
	below, known := sign(lo)
	if above, ok := sign(hi); !known || !ok || below == 0 || above != -below {
		return p, false
	}
	for range halvings {
		mid := new(big.Rat).Add(lo, hi)
		mid.Quo(mid, big.NewRat(2, 1))
		s, known := sign(mid)
		if !known {
			break
		}
		if s != -below {
			lo = mid
		}
		if s != below {
			hi = mid
		}
	}
	p.wide = map[algebra.Var]enclosure.Interval{}
	p.point = append([]float64(nil), x...)
	for i := range x {
		p.wide[ring.CoordinateVar(i)] = precise.FromRat(new(big.Rat).SetFloat64(x[i]))
	}
	p.wide[ring.CoordinateVar(k)] = precise.FromRats(lo, hi)
	p.point[k], _ = lo.Float64()
	return p, ring.EncloseAt(phi, nil, p.wide, precision).IsBounded()
}
