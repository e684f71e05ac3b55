package export

import (
	"fmt"
	"math/big"

	"creaseproof/identity/certificate"
)

// squaring proves left - right >= 0, left a sum of products, from the claim
// next, which says left² - right² >= 0 before denominators are cleared.
type squaring struct {
	left  []product
	right poly
	next  *certificate.Claim
	proof *certificate.Certificate
	scale *big.Int // what left and right have been multiplied by
}

// maxSquarings bounds squarings inside squarings.
const maxSquarings = 8

// readSquaring reads a squaring without clearing.
func (r *ring) readSquaring(c *cleared, claim *certificate.Claim, s *certificate.Squaring) error {
	if s.Proof == nil {
		return fmt.Errorf("a squaring without a proof")
	}
	depth := 0
	for q := s; q != nil; q = q.Proof.Squaring {
		if depth++; depth > maxSquarings {
			return fmt.Errorf("%w: more than %d squarings inside each other", ErrUnsupported, maxSquarings)
		}
		if q.Proof == nil {
			break
		}
	}
	x := &squaring{proof: s.Proof, scale: big.NewInt(1)}
	var err error
	if x.left, err = r.products(s.Left, c.positive); err != nil {
		return fmt.Errorf("left: %w", err)
	}
	if x.right, err = r.read(s.Right); err != nil {
		return fmt.Errorf("right: %w", err)
	}
	if err := r.readCofactors(c, s.Cofactors); err != nil {
		return err
	}
	left, err := r.expand(x.left, c.positive)
	if err != nil {
		return err
	}
	if left, err = mul(left, left); err != nil {
		return err
	}
	right, err := mul(x.right, x.right)
	if err != nil {
		return err
	}
	next := *claim
	next.Target = r.write(sub(left, right))
	x.next = &next
	c.squaring = x
	return nil
}

// clearSquaring multiplies by the least number that makes all numbers integers.
func (c *cleared) clearSquaring() {
	x := c.squaring
	_, d := integral(x.right)
	d = lcm(d, c.target.d)
	for _, t := range x.left {
		d = lcm(d, t.weight.Denom())
	}
	for k, t := range c.cofactors {
		c.cofactors[k] = scale(new(big.Rat).SetFrac(big.NewInt(1), c.zero[k].d), t)
		_, e := integral(c.cofactors[k])
		d = lcm(d, e)
	}
	by := new(big.Rat).SetInt(d)
	for i, t := range x.left {
		x.left[i].weight = new(big.Rat).Mul(t.weight, by)
	}
	x.right = scale(by, x.right)
	for k, t := range c.cofactors {
		c.cofactors[k] = scale(by, t)
	}
	x.scale = d
	c.clear = new(big.Int).Quo(d, c.target.d)
}
