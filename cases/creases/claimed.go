package creases

import (
	"math"
	"math/big"

	"creaseproof/identity/claim"
)

// narrow is the relative difference within which a claimed energy is proved
// where the case allows none of its own.
var narrow = big.NewRat(1, 1_000_000_000)

// claimedEnergy is a claimed energy between rational ends, which are the same where
// it is rational.
type claimedEnergy struct{ lo, hi *big.Rat }

// claimed is the claimed energy.
func (c *combination) claimed() (claimedEnergy, error) {
	if x := c.rational(*c.s.energy); x != nil {
		return claimedEnergy{x, x}, nil
	}
	i, err := c.enclose(*c.s.energy)
	if err != nil {
		return claimedEnergy{}, err
	}
	lo, _ := i.Lo().Rat(nil)
	hi, _ := i.Hi().Rat(nil)
	return claimedEnergy{lo, hi}, nil
}

// zero reports whether the claim is known to be zero: what is allowed is then
// absolute.
func (x claimedEnergy) zero() bool { return x.lo.Sign() == 0 && x.hi.Sign() == 0 }

// size are bounds of the absolute value, 1 where the claim is zero.
func (x claimedEnergy) size() (least, most *big.Rat) {
	if x.zero() {
		one := big.NewRat(1, 1)
		return one, one
	}
	a, b := new(big.Rat).Abs(x.lo), new(big.Rat).Abs(x.hi)
	if a.Cmp(b) > 0 {
		a, b = b, a
	}
	if x.lo.Sign() != x.hi.Sign() {
		a = new(big.Rat)
	}
	return a, b
}

// decision is what an enclosure of the energy says of a claim. The energy
// differs from the claimed value by near at least and by far at most, relative
// is far over the size of the claim. The verdict is empty where it decides
// nothing.
type decision struct {
	verdict                      claim.Verdict
	near, far, relative, allowed *big.Rat
	most                         float64 // allowed, relative
}

// against decides in rational arithmetic. Without within, the claim is the
// value itself: it is refuted where the enclosure misses it, and proved where
// the enclosure contains it and nothing that differs by more than narrow. With
// within, the claim is that the energy differs by no more than that, relative to
// the claimed value.
func (x claimedEnergy) against(lo, hi, within *big.Rat) decision {
	sub := func(a, b *big.Rat) *big.Rat { return new(big.Rat).Sub(a, b) }
	most := func(a, b *big.Rat) *big.Rat {
		if a.Cmp(b) < 0 {
			return b
		}
		return a
	}
	d := decision{
		near: most(new(big.Rat), most(sub(lo, x.hi), sub(x.lo, hi))),
		far:  most(sub(hi, x.lo), sub(x.hi, lo)),
	}
	least, largest := x.size()
	d.relative = new(big.Rat)
	if least.Sign() > 0 {
		d.relative.Quo(d.far, least)
	}
	allowed := narrow
	if within != nil {
		allowed = within
	}
	d.most = above(allowed)
	d.allowed = new(big.Rat).Mul(allowed, least)
	outside := d.near.Sign() > 0
	if within != nil {
		outside = d.near.Cmp(new(big.Rat).Mul(within, largest)) > 0
	}
	switch {
	case outside:
		d.verdict = claim.Refuted
	case d.far.Cmp(d.allowed) <= 0:
		d.verdict = claim.Proved
	}
	return d
}

// above is a float64 not below x.
func above(x *big.Rat) float64 {
	f, exact := x.Float64()
	if !exact && !math.IsInf(f, 0) && new(big.Rat).SetFloat64(f).Cmp(x) < 0 {
		f = math.Nextafter(f, math.Inf(1))
	}
	return f
}
