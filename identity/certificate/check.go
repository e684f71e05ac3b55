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
// proved; any other says what is wrong, or that the work is more than is allowed.
func Check(claim *Claim, cert *Certificate) error {
	if claim == nil || cert == nil {
		return errors.New("no claim, or no certificate")
	}
	p, target, err := open(claim)
	if err != nil {
		return err
	}
	return p.check(target, cert, maxDepth)
}

// open reads a claim.
func open(claim *Claim) (*problem, sum, error) {
	c, err := newChecker(claim.Variables)
	if err != nil {
		return nil, nil, err
	}
	p := &problem{checker: c, claim: claim, positive: make([]sum, len(claim.Positive)), zero: make([]sum, len(claim.Zero))}
	for i, g := range claim.Positive {
		if p.positive[i], err = c.read(g.Poly); err != nil {
			return nil, nil, fmt.Errorf("assumption %d: %w", i, err)
		}
	}
	for i, h := range claim.Zero {
		if p.zero[i], err = c.read(h); err != nil {
			return nil, nil, fmt.Errorf("equation %d: %w", i, err)
		}
	}
	target, err := c.read(claim.Target)
	if err != nil {
		return nil, nil, fmt.Errorf("target: %w", err)
	}
	return p, target, nil
}

// problem is a claim that was read.
type problem struct {
	*checker
	claim          *Claim
	positive, zero []sum
}

// check verifies that a certificate proves target >= 0 on the set of the claim.
func (p *problem) check(target sum, cert *Certificate, depth int) error {
	if cert.Squaring != nil {
		if len(cert.Multiplier)+len(cert.Squares)+len(cert.Cofactors) > 0 {
			return errors.New("a squaring and squares at once")
		}
		return p.squaring(target, cert.Squaring, depth)
	}
	left := target
	if len(cert.Multiplier) > 0 {
		m, err := p.squares(cert.Multiplier)
		if err != nil {
			return fmt.Errorf("multiplier: %w", err)
		}
		if err := p.dense(cert.Multiplier, m); err != nil {
			if depth < maxDepth { // inside a squaring
				return fmt.Errorf("multiplier: %w", err)
			}
			switch with, limit := p.vanishesWith(target, cert.Squares); {
			case limit != nil:
				return limit
			case !with:
				return fmt.Errorf("multiplier: %w", err)
			}
		}
		if left, err = p.mul(m, target); err != nil {
			return err
		}
	}
	right, err := p.squares(cert.Squares)
	if err != nil {
		return fmt.Errorf("squares: %w", err)
	}
	if err := p.addCofactors(right, cert.Cofactors); err != nil {
		return err
	}
	if err := p.add(right, -1, left); err != nil {
		return err
	}
	if len(right) != 0 {
		return fmt.Errorf("the identity does not hold: %d terms are left over", len(right))
	}
	return nil
}

// addCofactors adds Σ t_k h_k.
func (p *problem) addCofactors(to sum, cofactors []Polynomial) error {
	if len(cofactors) != len(p.zero) {
		return fmt.Errorf("%d cofactors for %d equations", len(cofactors), len(p.zero))
	}
	for k, t := range cofactors {
		q, err := p.read(t)
		if err != nil {
			return fmt.Errorf("cofactor %d: %w", k, err)
		}
		prod, err := p.mul(q, p.zero[k])
		if err != nil {
			return err
		}
		if err := p.add(to, 1, prod); err != nil {
			return err
		}
	}
	return nil
}

// squaring checks that the target is x - y, and the proof of x² - y² >= 0:
// with x >= 0 then x = |x| >= |y| >= y.
func (p *problem) squaring(target sum, s *Squaring, depth int) error {
	if depth == 0 || s.Proof == nil {
		return errors.New("a squaring without a proof, or too many inside each other")
	}
	x, err := p.squares(s.Left)
	if err != nil {
		return fmt.Errorf("left: %w", err)
	}
	y, err := p.read(s.Right)
	if err != nil {
		return fmt.Errorf("right: %w", err)
	}
	next, err := p.mul(x, x)
	if err != nil {
		return err
	}
	ysq, err := p.mul(y, y)
	if err != nil {
		return err
	}
	if err := p.add(next, -1, ysq); err != nil {
		return err
	}
	// From here x is what is left of x - y + Σ cofactors · zero - target.
	if err := p.add(x, -1, y); err != nil {
		return err
	}
	if err := p.addCofactors(x, s.Cofactors); err != nil {
		return err
	}
	if err := p.add(x, -1, target); err != nil {
		return err
	}
	if len(x) != 0 {
		return fmt.Errorf("the target is not the difference of the two sides: %d terms are left over", len(x))
	}
	if err := p.check(next, s.Proof, depth-1); err != nil {
		return fmt.Errorf("after squaring: %w", err)
	}
	return nil
}

// squares expands Σ w · Π g · q².
func (p *problem) squares(list []Square) (sum, error) {
	total := sum{}
	for i, s := range list {
		if err := p.spend(4 * len(s.Weight)); err != nil {
			return nil, err
		}
		w, err := number(s.Weight)
		if err != nil {
			return nil, fmt.Errorf("term %d: %w", i, err)
		}
		if w.Sign() <= 0 {
			return nil, fmt.Errorf("term %d: the weight is not positive", i)
		}
		q, err := p.read(s.Base)
		if err != nil {
			return nil, fmt.Errorf("term %d: %w", i, err)
		}
		if len(q) == 0 {
			return nil, fmt.Errorf("term %d: the square of zero", i)
		}
		term, err := p.mul(q, q)
		if err != nil {
			return nil, err
		}
		for _, f := range s.Factors {
			if f < 0 || f >= len(p.positive) {
				return nil, fmt.Errorf("term %d: there is no assumption %d", i, f)
			}
			if term, err = p.mul(term, p.positive[f]); err != nil {
				return nil, err
			}
		}
		if err := p.addScaled(total, w, term); err != nil {
			return nil, err
		}
	}
	return total, nil
}

// dense makes sure that the multiplier m is positive on a dense part of the set
// of the claim: everywhere, or by the rules that the package documents.
func (p *problem) dense(terms []Square, m sum) error {
	if strictlyPositive(p.claim, terms) {
		return nil
	}
	onCircle := map[int]bool{}
	for k, h := range p.zero {
		cos, sin, ok := p.circle(h)
		if !ok {
			return fmt.Errorf("it may vanish, and equation %d is no circle", k)
		}
		if onCircle[cos] || onCircle[sin] {
			return errors.New("it may vanish, and two circles share a variable")
		}
		onCircle[cos], onCircle[sin] = true, true
		var err error
		if m, err = p.onCircle(m, cos, sin); err != nil {
			return err
		}
	}
	if len(m) == 0 {
		return errors.New("it is zero")
	}
	lower, upper := map[int]*big.Rat{}, map[int]*big.Rat{}
	for i, g := range p.positive {
		if p.claim.Positive[i].Strict {
			continue
		}
		v, bound, isLower, ok := p.bound(g)
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
			return fmt.Errorf("it may vanish, and the bounds of %s leave no interval", p.names[v])
		}
	}
	return nil
}

// vanishesWith reports whether one of the squares is a positive number times a
// power target^2k, k up to maxTargetPower: where the multiplier vanishes, the
// identity then leaves 0 >= target^2k, so that the target vanishes as well.
func (p *problem) vanishesWith(target sum, squares []Square) (bool, error) {
	power := target
	for k := 1; k <= maxTargetPower; k++ {
		for _, s := range squares {
			if len(s.Factors) > 0 || len(s.Base) != len(power) {
				continue
			}
			q, err := p.read(s.Base)
			if err != nil {
				return false, err
			}
			if same, err := p.proportional(q, power); same || err != nil {
				return same, err
			}
		}
		if k == maxTargetPower {
			break
		}
		next, err := p.mul(power, target)
		if err != nil {
			return false, err
		}
		power = next
	}
	return false, nil
}

// maxTargetPower bounds k in the squares target^2k that are recognised.
const maxTargetPower = 4

// proportional reports whether a is a number times b, neither zero.
func (p *problem) proportional(a, b sum) (bool, error) {
	if len(a) != len(b) || len(a) == 0 {
		return false, nil
	}
	var ratio *big.Rat
	for m, x := range a {
		y := b[m]
		if y == nil {
			return false, nil
		}
		if err := p.spend(bits(x) + bits(y)); err != nil {
			return false, err
		}
		q := new(big.Rat).Quo(x, y)
		if ratio == nil {
			ratio = q
		}
		if q.Cmp(ratio) != 0 {
			return false, nil
		}
	}
	return true, nil
}

// constant reports a polynomial without variables.
func constant(p Polynomial) bool { return len(p) == 1 && len(p[0].M) == 0 }

// circle reports whether h is c² + s² - 1.
func (c *checker) circle(h sum) (cos, sin int, ok bool) {
	vs := h.variables()
	if len(vs) != 2 || len(h) != 3 {
		return 0, 0, false
	}
	is := func(v, e int, value int64) bool {
		x := h[c.monomial(v, e)]
		return x != nil && x.Cmp(big.NewRat(value, 1)) == 0
	}
	return vs[0], vs[1], is(vs[0], 2, 1) && is(vs[1], 2, 1) && is(0, 0, -1)
}

// bound reads g as a·v + b with a ≠ 0: v >= -b/a where a > 0, v <= -b/a else.
func (c *checker) bound(g sum) (v int, at *big.Rat, lower, ok bool) {
	vs := g.variables()
	if len(vs) != 1 {
		return 0, nil, false, false
	}
	a, b := g[c.monomial(vs[0], 1)], g[c.monomial(0, 0)]
	terms := 2
	if b == nil {
		b, terms = new(big.Rat), 1
	}
	if a == nil || len(g) != terms {
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

// Vanishing says what a proof rests on where its multiplier vanishes.
type Vanishing int

// What a proof may rest on.
const (
	Nowhere    Vanishing = iota // there is no multiplier, or it is positive everywhere
	Continuity                  // the target is not negative by continuity
	WithTarget                  // the target vanishes there too
)

// WhereMultiplierVanishes says what the proof, which Check accepts, rests on
// where its multiplier vanishes.
func WhereMultiplierVanishes(claim *Claim, cert *Certificate) Vanishing {
	inner := false
	for cert.Squaring != nil && cert.Squaring.Proof != nil {
		cert, inner = cert.Squaring.Proof, true
	}
	if len(cert.Multiplier) == 0 || strictlyPositive(claim, cert.Multiplier) {
		return Nowhere
	}
	p, target, err := open(claim)
	if err != nil || inner { // no certificate inside a squaring has another way out
		return Continuity
	}
	m, err := p.squares(cert.Multiplier)
	if err != nil || p.dense(cert.Multiplier, m) == nil {
		return Continuity
	}
	if with, err := p.vanishesWith(target, cert.Squares); err == nil && with {
		return WithTarget
	}
	return Continuity
}

// UsesContinuity reports whether the proof, which Check accepts, rests on
// continuity where its multiplier vanishes.
func UsesContinuity(claim *Claim, cert *Certificate) bool {
	return WhereMultiplierVanishes(claim, cert) == Continuity
}
