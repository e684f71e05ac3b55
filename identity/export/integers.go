package export

import (
	"errors"
	"fmt"
	"math/big"

	"creaseproof/identity/certificate"
)

// product is weight · Π positive[factors] · base² where base has integer
// coefficients, and is nil where it is a constant (which weight then holds).
type product struct {
	weight  *big.Rat
	factors []int
	base    poly
}

// premise is a polynomial n/d of the claim; n has integer coefficients.
type premise struct {
	n      poly
	d      *big.Int
	strict bool
}

// cleared is a claim and its certificate with denominators cleared:
//
//	clear · multiplier · target.n = Σ squares + Σ zero[k].factor · zero[k].n,
//
// where all weights are integers. In products, factors stand for the integer
// polynomials of the premises. With a squaring the right side is
// left - right + Σ zero[k].factor · zero[k].n instead.
type cleared struct {
	positive   []premise
	zero       []premise
	cofactors  []poly
	target     premise
	multiplier []product // nil where it is 1
	squares    []product
	clear      *big.Int
	squaring   *squaring // in place of multiplier and squares
}

func (r *ring) premise(p certificate.Polynomial, strict bool) (premise, error) {
	q, err := r.read(p)
	if err != nil {
		return premise{}, err
	}
	n, d := integral(q)
	return premise{n, d, strict}, nil
}

func (r *ring) products(list []certificate.Square, positive []premise) ([]product, error) {
	var out []product
	for i, s := range list {
		w, err := rational(s.Weight)
		if err != nil {
			return nil, fmt.Errorf("term %d: %w", i, err)
		}
		q, err := r.read(s.Base)
		if err != nil {
			return nil, fmt.Errorf("term %d: %w", i, err)
		}
		n, d := integral(q)
		w.Quo(w, new(big.Rat).SetInt(new(big.Int).Mul(d, d)))
		if c, ok := isConstant(n); ok {
			w.Mul(w, new(big.Rat).Mul(c, c))
			n = nil
		}
		for _, f := range s.Factors {
			if f < 0 || f >= len(positive) {
				return nil, fmt.Errorf("term %d: there is no assumption %d", i, f)
			}
			w.Quo(w, new(big.Rat).SetInt(positive[f].d))
		}
		out = append(out, product{w, s.Factors, n})
	}
	return out, nil
}

// whole multiplies by the least number that makes all weights integers.
func whole(list []product) *big.Int {
	d := big.NewInt(1)
	for _, t := range list {
		d = lcm(d, t.weight.Denom())
	}
	for i := range list {
		list[i].weight = new(big.Rat).Mul(list[i].weight, new(big.Rat).SetInt(d))
	}
	return d
}

// rational reads a claim and its certificate without clearing: the identity is
// multiplier · target.n/target.d = Σ squares + Σ cofactors · zero.n/zero.d.
func (r *ring) rational(claim *certificate.Claim, cert *certificate.Certificate) (*cleared, error) {
	if claim == nil || cert == nil {
		return nil, errors.New("a claim and a certificate are needed")
	}
	c := &cleared{}
	for i, g := range claim.Positive {
		p, err := r.premise(g.Poly, g.Strict)
		if err != nil {
			return nil, fmt.Errorf("assumption %d: %w", i, err)
		}
		c.positive = append(c.positive, p)
	}
	for i, h := range claim.Zero {
		p, err := r.premise(h, false)
		if err != nil {
			return nil, fmt.Errorf("equation %d: %w", i, err)
		}
		c.zero = append(c.zero, p)
	}
	var err error
	if c.target, err = r.premise(claim.Target, false); err != nil {
		return nil, fmt.Errorf("target: %w", err)
	}
	if cert.Squaring != nil {
		if len(cert.Multiplier)+len(cert.Squares)+len(cert.Cofactors) > 0 {
			return nil, errors.New("a squaring and squares at once")
		}
		return c, r.readSquaring(c, claim, cert.Squaring)
	}
	if c.squares, err = r.products(cert.Squares, c.positive); err != nil {
		return nil, fmt.Errorf("squares: %w", err)
	}
	if c.multiplier, err = r.products(cert.Multiplier, c.positive); err != nil {
		return nil, fmt.Errorf("multiplier: %w", err)
	}
	return c, r.readCofactors(c, cert.Cofactors)
}

func (r *ring) readCofactors(c *cleared, cofactors []certificate.Polynomial) error {
	if len(cofactors) != len(c.zero) {
		return fmt.Errorf("%d cofactors for %d equations", len(cofactors), len(c.zero))
	}
	var err error
	c.cofactors, err = r.readAll(cofactors, "cofactor")
	return err
}

func (r *ring) clear(claim *certificate.Claim, cert *certificate.Certificate) (*cleared, error) {
	c, err := r.rational(claim, cert)
	if err != nil {
		return nil, err
	}
	if c.squaring != nil {
		c.clearSquaring()
		return c, nil
	}
	factor := new(big.Rat).SetInt(new(big.Int).Mul(whole(c.multiplier), c.target.d))
	for i := range c.squares {
		c.squares[i].weight = new(big.Rat).Mul(c.squares[i].weight, factor)
	}
	d := big.NewInt(1)
	for k, t := range c.cofactors {
		over := new(big.Rat).SetInt(c.zero[k].d)
		c.cofactors[k] = scale(new(big.Rat).Quo(factor, over), t)
		_, e := integral(c.cofactors[k])
		d = lcm(d, e)
	}
	for _, s := range c.squares {
		d = lcm(d, s.weight.Denom())
	}
	by := new(big.Rat).SetInt(d)
	for i := range c.squares {
		c.squares[i].weight = new(big.Rat).Mul(c.squares[i].weight, by)
	}
	for k := range c.cofactors {
		c.cofactors[k] = scale(by, c.cofactors[k])
	}
	c.clear = d
	return c, nil
}

// expand multiplies out a sum of products.
func (r *ring) expand(list []product, positive []premise) (poly, error) {
	var total poly
	for _, t := range list {
		p := r.constant(t.weight)
		var err error
		if t.base != nil {
			if p, err = mul(t.base, t.base); err != nil {
				return nil, err
			}
			p = scale(t.weight, p)
		}
		for _, f := range t.factors {
			if p, err = mul(p, positive[f].n); err != nil {
				return nil, err
			}
		}
		total = add(total, p)
	}
	return total, nil
}

// surelyPositive is the index of a term that is strictly positive, or -1.
func surelyPositive(list []product, positive []premise) int {
	for i, t := range list {
		ok := t.base == nil && t.weight.Sign() > 0
		for _, f := range t.factors {
			ok = ok && positive[f].strict
		}
		if ok {
			return i
		}
	}
	return -1
}
