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
// Without a multiplier it is 1. With a Squaring it is that instead.
type Certificate struct {
	Multiplier []Square     `json:"multiplier,omitempty"`
	Squares    []Square     `json:"squares,omitempty"`
	Cofactors  []Polynomial `json:"cofactors,omitempty"`
	Squaring   *Squaring    `json:"squaring,omitempty"`
}

// Squaring proves that x - y >= 0, with x = Left a sum of squares as in a
// certificate and y = Right any polynomial, from x² - y² >= 0, which Proof is a
// certificate of. The target is x - y + Σ Cofactors · Zero.
type Squaring struct {
	Left      []Square     `json:"left"`
	Right     Polynomial   `json:"right"`
	Cofactors []Polynomial `json:"cofactors,omitempty"`
	Proof     *Certificate `json:"proof"`
}

// maxDepth bounds squarings inside squarings.
const maxDepth = 8

// Check verifies a certificate of a claim. A nil error means that the claim is
// proved; any other says what is wrong.
func Check(claim *Claim, cert *Certificate) error { return check(claim, cert, maxDepth) }

func check(claim *Claim, cert *Certificate, depth int) error {
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
	if cert.Squaring != nil {
		if len(cert.Multiplier)+len(cert.Squares)+len(cert.Cofactors) > 0 {
			return errors.New("a squaring and squares at once")
		}
		return c.squaring(claim, cert.Squaring, target, positive, zero, depth)
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
	if err := c.addCofactors(right, cert.Cofactors, zero); err != nil {
		return err
	}
	left.add(big.NewRat(-1, 1), right)
	if len(left) != 0 {
		return fmt.Errorf("the identity does not hold: %d terms are left over", len(left))
	}
	return nil
}

// addCofactors adds Σ t_k h_k.
func (c *checker) addCofactors(to sum, cofactors []Polynomial, zero []sum) error {
	if len(cofactors) != len(zero) {
		return fmt.Errorf("%d cofactors for %d equations", len(cofactors), len(zero))
	}
	for k, t := range cofactors {
		q, err := c.read(t)
		if err != nil {
			return fmt.Errorf("cofactor %d: %w", k, err)
		}
		prod, err := c.mul(q, zero[k])
		if err != nil {
			return err
		}
		to.add(big.NewRat(1, 1), prod)
	}
	return nil
}

// squaring checks that the target is x - y, and the proof of x² - y² >= 0:
// with x >= 0 then x = |x| >= |y| >= y.
func (c *checker) squaring(claim *Claim, s *Squaring, target sum, positive, zero []sum, depth int) error {
	if depth == 0 || s.Proof == nil {
		return errors.New("a squaring without a proof, or too many inside each other")
	}
	x, err := c.squares(s.Left, positive)
	if err != nil {
		return fmt.Errorf("left: %w", err)
	}
	y, err := c.read(s.Right)
	if err != nil {
		return fmt.Errorf("right: %w", err)
	}
	diff := sum{}
	diff.add(big.NewRat(1, 1), x)
	diff.add(big.NewRat(-1, 1), y)
	if err := c.addCofactors(diff, s.Cofactors, zero); err != nil {
		return err
	}
	diff.add(big.NewRat(-1, 1), target)
	if len(diff) != 0 {
		return fmt.Errorf("the target is not the difference of the two sides: %d terms are left over", len(diff))
	}
	next, err := c.mul(x, x)
	if err != nil {
		return err
	}
	ysq, err := c.mul(y, y)
	if err != nil {
		return err
	}
	next.add(big.NewRat(-1, 1), ysq)
	squared := *claim
	squared.Target = c.write(next)
	if err := check(&squared, s.Proof, depth-1); err != nil {
		return fmt.Errorf("after squaring: %w", err)
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
	if strictlyPositive(claim, terms) {
		return nil
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

// strictlyPositive reports a sum with a term that is a positive constant times
// strictly positive assumptions: it is positive everywhere.
func strictlyPositive(claim *Claim, terms []Square) bool {
	return slices.ContainsFunc(terms, func(t Square) bool {
		return constant(t.Base) && !slices.ContainsFunc(t.Factors, func(f int) bool {
			return f < 0 || f >= len(claim.Positive) || !claim.Positive[f].Strict
		})
	})
}

// UsesContinuity reports whether the proof rests on continuity where its
// multiplier vanishes.
func UsesContinuity(claim *Claim, cert *Certificate) bool {
	if cert.Squaring != nil {
		return cert.Squaring.Proof != nil && UsesContinuity(claim, cert.Squaring.Proof)
	}
	return len(cert.Multiplier) > 0 && !strictlyPositive(claim, cert.Multiplier)
}
