package identity

import (
	"math/big"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/exact"
)

// simplify replaces coordinates of a counterexample by simpler rationals as
// long as it stays one. Every step is settled exactly; the number of steps is
// bounded.
func (d *decider) simplify(g *exact.Gap, p *exact.Points, at jet.Point) jet.Point {
	if len(d.Wells) > 0 || len(d.Ideal) > 0 {
		return at // a single coordinate cannot move along the well
	}
	budget := 600
	try := func(change func(jet.Point)) bool {
		if budget--; budget < 0 || d.Ctx.Err() != nil {
			return false
		}
		next := at.Clone()
		change(next)
		if !d.Consistent(p, next) || !d.FalseAt(g, p, next) {
			return false
		}
		at = next
		return true
	}
	for _, c := range p.Angles {
		s := d.Ring.Symbol(c).Partner
		for _, t := range exact.SimpleAngles() {
			x, y := algebra.Frac64(t[0], t[2]), algebra.Frac64(t[1], t[2])
			if at[c].Equal(x) && at[s].Equal(y) || try(func(q jet.Point) { q[c], q[s] = x, y }) {
				break
			}
		}
	}
	for range 2 {
		for _, v := range p.Free {
			for _, x := range simplerThan(at[v]) {
				if try(func(q jet.Point) { q[v] = x }) {
					break
				}
			}
		}
	}
	return at
}

// simplerThan lists rationals simpler than x, simplest first: small whole
// numbers and halves, then the best approximations of x of small denominator.
func simplerThan(x algebra.Rat) []algebra.Rat {
	weight := func(y algebra.Rat) int {
		b := y.Big()
		return 2*b.Denom().BitLen() + b.Num().BitLen()
	}
	var out []algebra.Rat
	add := func(y algebra.Rat) {
		if weight(y) >= weight(x) {
			return
		}
		for _, z := range out {
			if z.Equal(y) {
				return
			}
		}
		out = append(out, y)
	}
	for _, n := range []int64{0, 1, -1, 2, -2, 3, -3} {
		add(algebra.Int(n))
	}
	add(algebra.Frac64(1, 2))
	add(algebra.Frac64(-1, 2))
	for _, y := range convergents(x.Big(), 12) {
		add(y)
	}
	return out
}

// convergents are the first continued-fraction convergents of x.
func convergents(x *big.Rat, n int) []algebra.Rat {
	var out []algebra.Rat
	p0, q0, p1, q1 := big.NewInt(0), big.NewInt(1), big.NewInt(1), big.NewInt(0)
	num, den := new(big.Int).Set(x.Num()), new(big.Int).Set(x.Denom())
	for range n {
		if den.Sign() == 0 {
			break
		}
		a, rem := new(big.Int).DivMod(num, den, new(big.Int))
		p0, p1 = p1, new(big.Int).Add(new(big.Int).Mul(a, p1), p0)
		q0, q1 = q1, new(big.Int).Add(new(big.Int).Mul(a, q1), q0)
		out = append(out, algebra.FromBig(new(big.Rat).SetFrac(p1, q1)))
		num, den = den, rem
	}
	return out
}
