package certificate

import (
	"errors"
	"fmt"
	"math/big"
	"slices"
)

// Claim is a polynomial inequality on a set given by polynomials.
type Claim struct {
	Variables []string     `json:"variables"`
	Positive  []Constraint `json:"positive,omitempty"`
	Zero      []Polynomial `json:"zero,omitempty"`
	Target    Polynomial   `json:"target"` // claimed to be >= 0
}

// Constraint is Poly >= 0, or Poly > 0 where it is strict.
type Constraint struct {
	Poly   Polynomial `json:"poly"`
	Strict bool       `json:"strict"`
}

// Square is Weight · Π Positive[Factors] · Base².
type Square struct {
	Weight  string     `json:"weight"`
	Factors []int      `json:"factors,omitempty"`
	Base    Polynomial `json:"base"`
}

// Certificate is the proof: Multiplier · Target = Squares + Σ Cofactors · Zero.
// Without a multiplier it is 1.
type Certificate struct {
	Multiplier []Square     `json:"multiplier,omitempty"`
	Squares    []Square     `json:"squares"`
	Cofactors  []Polynomial `json:"cofactors,omitempty"`
}

// Check verifies a certificate of a claim. A nil error means that the claim is
// proved; any other says what is wrong.
func Check(claim *Claim, cert *Certificate) error {
	c, err := newChecker(claim.Variables)
	if err != nil {
		return err
	}
	positive := make([]sum, len(claim.Positive))
	for i, g := range claim.Positive {
		if positive[i], err = c.read(g.Poly); err != nil {
			return fmt.Errorf("assumption %d: %w", i, err)
		}
	}
	zero := make([]sum, len(claim.Zero))
	for i, h := range claim.Zero {
		if zero[i], err = c.read(h); err != nil {
			return fmt.Errorf("equation %d: %w", i, err)
		}
	}
	target, err := c.read(claim.Target)
	if err != nil {
		return fmt.Errorf("target: %w", err)
	}

	multiplier := sum{key(make([]int, c.n)): big.NewRat(1, 1)}
	if len(cert.Multiplier) > 0 {
		if multiplier, err = c.squares(cert.Multiplier, positive); err != nil {
			return fmt.Errorf("multiplier: %w", err)
		}
		if err := c.dense(claim, cert.Multiplier, multiplier, positive, zero); err != nil {
			return fmt.Errorf("multiplier: %w", err)
		}
	}
	left, err := c.mul(multiplier, target)
	if err != nil {
		return err
	}
	right, err := c.squares(cert.Squares, positive)
	if err != nil {
		return fmt.Errorf("squares: %w", err)
	}
	if len(cert.Cofactors) != len(zero) {
		return fmt.Errorf("%d cofactors for %d equations", len(cert.Cofactors), len(zero))
	}
	for k, t := range cert.Cofactors {
		q, err := c.read(t)
		if err != nil {
			return fmt.Errorf("cofactor %d: %w", k, err)
		}
		prod, err := c.mul(q, zero[k])
		if err != nil {
			return err
		}
		right.add(big.NewRat(1, 1), prod)
	}
	left.add(big.NewRat(-1, 1), right)
	if len(left) != 0 {
		return fmt.Errorf("the identity does not hold: %d terms are left over", len(left))
	}
	return nil
}

// squares expands Σ w · Π g · q².
func (c *checker) squares(list []Square, positive []sum) (sum, error) {
	total := sum{}
	for i, s := range list {
		w, err := number(s.Weight)
		if err != nil {
			return nil, fmt.Errorf("term %d: %w", i, err)
		}
		if w.Sign() <= 0 {
			return nil, fmt.Errorf("term %d: the weight %s is not positive", i, s.Weight)
		}
		q, err := c.read(s.Base)
		if err != nil {
			return nil, fmt.Errorf("term %d: %w", i, err)
		}
		if len(q) == 0 {
			return nil, fmt.Errorf("term %d: the square of zero", i)
		}
		term, err := c.mul(q, q)
		if err != nil {
			return nil, err
		}
		for _, f := range s.Factors {
			if f < 0 || f >= len(positive) {
				return nil, fmt.Errorf("term %d: there is no assumption %d", i, f)
			}
			if term, err = c.mul(term, positive[f]); err != nil {
				return nil, err
			}
		}
		total.add(w, term)
	}
	return total, nil
}

// dense makes sure that the multiplier is positive on a dense part of the set
// of the claim: everywhere, or by the rules that the package documents.
func (c *checker) dense(claim *Claim, terms []Square, m sum, positive, zero []sum) error {
	if len(terms) == 1 && constant(terms[0].Base) {
		strict := true
		for _, f := range terms[0].Factors {
			strict = strict && claim.Positive[f].Strict
		}
		if strict {
			return nil
		}
	}
	onCircle := map[int]bool{}
	for k, h := range zero {
		cos, sin, ok := c.circle(h)
		if !ok {
			return fmt.Errorf("it may vanish, and equation %d is no circle", k)
		}
		if onCircle[cos] || onCircle[sin] {
			return fmt.Errorf("two circles share a variable")
		}
		onCircle[cos], onCircle[sin] = true, true
		var err error
		if m, err = c.onCircle(m, cos, sin); err != nil {
			return err
		}
	}
	if len(m) == 0 {
		return errors.New("it is zero")
	}
	lower, upper := map[int]*big.Rat{}, map[int]*big.Rat{}
	for i, g := range positive {
		if claim.Positive[i].Strict {
			continue
		}
		v, bound, isLower, ok := c.bound(g)
		if !ok || onCircle[v] {
			return fmt.Errorf("it may vanish, and assumption %d is no bound of one variable", i)
		}
		if isLower && (lower[v] == nil || bound.Cmp(lower[v]) > 0) {
			lower[v] = bound
		}
		if !isLower && (upper[v] == nil || bound.Cmp(upper[v]) < 0) {
			upper[v] = bound
		}
	}
	for v, lo := range lower {
		if hi := upper[v]; hi != nil && lo.Cmp(hi) >= 0 {
			return fmt.Errorf("it may vanish, and the bounds of %s leave no interval", claim.Variables[v])
		}
	}
	return nil
}

// constant reports a polynomial without variables.
func constant(p Polynomial) bool { return len(p) == 1 && len(p[0].M) == 0 }

// circle reports whether h is c² + s² - 1.
func (c *checker) circle(h sum) (cos, sin int, ok bool) {
	vs := h.variables()
	if len(vs) != 2 || len(h) != 3 {
		return 0, 0, false
	}
	one := big.NewRat(1, 1)
	for _, v := range vs {
		e := make([]int, c.n)
		e[v] = 2
		if x := h[key(e)]; x == nil || x.Cmp(one) != 0 {
			return 0, 0, false
		}
	}
	x := h[key(make([]int, c.n))]
	return vs[0], vs[1], x != nil && x.Cmp(big.NewRat(-1, 1)) == 0
}

// bound reads g as a·v + b with a ≠ 0: v >= -b/a where a > 0, v <= -b/a else.
func (c *checker) bound(g sum) (v int, at *big.Rat, lower, ok bool) {
	vs := g.variables()
	if len(vs) != 1 {
		return 0, nil, false, false
	}
	e := make([]int, c.n)
	constKey := key(e)
	e[vs[0]] = 1
	a := g[key(e)]
	rest := len(g)
	if a != nil {
		rest--
	}
	b := g[constKey]
	if b == nil {
		b = new(big.Rat)
	} else {
		rest--
	}
	if a == nil || rest != 0 {
		return 0, nil, false, false
	}
	at = new(big.Rat).Quo(new(big.Rat).Neg(b), a)
	return vs[0], at, a.Sign() > 0, true
}

// UsesContinuity reports whether the proof rests on continuity where its
// multiplier vanishes.
func UsesContinuity(claim *Claim, cert *Certificate) bool {
	switch len(cert.Multiplier) {
	case 0:
		return false
	case 1:
		t := cert.Multiplier[0]
		return !constant(t.Base) || slices.ContainsFunc(t.Factors, func(f int) bool {
			return f < 0 || f >= len(claim.Positive) || !claim.Positive[f].Strict
		})
	}
	return true
}
