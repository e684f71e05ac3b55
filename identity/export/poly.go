package export

import (
	"cmp"
	"fmt"
	"math/big"
	"slices"

	"creaseproof/identity/certificate"
)

// ring is an ordered list of variables.
type ring struct {
	names []string
	index map[string]int
}

func newRing(names []string) (*ring, error) {
	r := &ring{names: names, index: map[string]int{}}
	for i, n := range names {
		if _, twice := r.index[n]; twice || n == "" {
			return nil, fmt.Errorf("variable %q is declared twice or empty", n)
		}
		r.index[n] = i
	}
	return r, nil
}

func (r *ring) declared(name string) bool { _, ok := r.index[name]; return ok }

// term is a coefficient times powers; exps has one entry for each variable.
type term struct {
	coef *big.Rat
	exps []int
}

// poly is a sum of terms with distinct monomials and nonzero coefficients.
type poly []term

// read takes over a polynomial, terms in their order.
func (r *ring) read(p certificate.Polynomial) (poly, error) {
	if len(p) > maxTerms {
		return nil, fmt.Errorf("%w: a polynomial of %d terms", ErrUnsupported, len(p))
	}
	out := make(poly, 0, len(p))
	seen := map[string]bool{}
	for _, t := range p {
		c, err := rational(t.C)
		if err != nil {
			return nil, err
		}
		e := make([]int, len(r.names))
		for v, k := range t.M {
			i, ok := r.index[v]
			if !ok {
				return nil, fmt.Errorf("variable %q is not declared", v)
			}
			if k < 1 || k > maxExponent {
				return nil, fmt.Errorf("%w: the exponent %d of %s", ErrUnsupported, k, v)
			}
			e[i] = k
		}
		k := monomialKey(e)
		if seen[k] || c.Sign() == 0 {
			return nil, fmt.Errorf("a monomial stands twice or with coefficient zero")
		}
		seen[k] = true
		out = append(out, term{c, e})
	}
	return out, nil
}

func (r *ring) readAll(list []certificate.Polynomial, what string) ([]poly, error) {
	out := make([]poly, len(list))
	for i, p := range list {
		var err error
		if out[i], err = r.read(p); err != nil {
			return nil, fmt.Errorf("%s %d: %w", what, i, err)
		}
	}
	return out, nil
}

// write is the inverse of read.
func (r *ring) write(p poly) certificate.Polynomial {
	var out certificate.Polynomial
	for _, t := range p {
		m := map[string]int{}
		for i, e := range t.exps {
			if e > 0 {
				m[r.names[i]] = e
			}
		}
		out = append(out, certificate.Term{C: t.coef.RatString(), M: m})
	}
	return out
}

func monomialKey(e []int) string {
	b := make([]byte, 0, 2*len(e))
	for _, k := range e {
		b = append(b, byte(k), byte(k>>8), byte(k>>16))
	}
	return string(b)
}

func (r *ring) constant(c *big.Rat) poly {
	if c.Sign() == 0 {
		return nil
	}
	return poly{{c, make([]int, len(r.names))}}
}

func (r *ring) variable(i int) poly {
	e := make([]int, len(r.names))
	e[i] = 1
	return poly{{big.NewRat(1, 1), e}}
}

// collect adds up terms, greatest first in the graded order.
func collect(terms []term) poly {
	sums := map[string]*term{}
	for _, t := range terms {
		k := monomialKey(t.exps)
		if s, ok := sums[k]; ok {
			s.coef = new(big.Rat).Add(s.coef, t.coef)
		} else {
			sums[k] = &term{t.coef, t.exps}
		}
	}
	var out poly
	for _, t := range sums {
		if t.coef.Sign() != 0 {
			out = append(out, *t)
		}
	}
	slices.SortFunc(out, func(a, b term) int {
		return cmp.Or(cmp.Compare(degree(b.exps), degree(a.exps)), slices.Compare(b.exps, a.exps))
	})
	return out
}

func degree(e []int) int {
	d := 0
	for _, k := range e {
		d += k
	}
	return d
}

func add(p, q poly) poly { return collect(slices.Concat(p, q)) }

func scale(c *big.Rat, p poly) poly {
	out := make(poly, len(p))
	for i, t := range p {
		out[i] = term{new(big.Rat).Mul(c, t.coef), t.exps}
	}
	return out
}

func sub(p, q poly) poly { return add(p, scale(big.NewRat(-1, 1), q)) }

func mul(p, q poly) (poly, error) {
	if len(p)*len(q) > 100*maxTerms {
		return nil, fmt.Errorf("%w: a product of %d terms", ErrUnsupported, len(p)*len(q))
	}
	out := make([]term, 0, len(p)*len(q))
	for _, s := range p {
		for _, t := range q {
			e := slices.Clone(s.exps)
			for i, k := range t.exps {
				e[i] += k
			}
			out = append(out, term{new(big.Rat).Mul(s.coef, t.coef), e})
		}
	}
	return collect(out), nil
}

// integral is n and d > 0 with p = n/d, d least such that n has integer
// coefficients.
func integral(p poly) (n poly, d *big.Int) {
	d = big.NewInt(1)
	for _, t := range p {
		d = lcm(d, t.coef.Denom())
	}
	return scale(new(big.Rat).SetInt(d), p), d
}

func lcm(a, b *big.Int) *big.Int {
	g := new(big.Int).GCD(nil, nil, a, b)
	return new(big.Int).Mul(a, new(big.Int).Quo(b, g))
}

// isConstant reports whether no variable occurs, and the value.
func isConstant(p poly) (*big.Rat, bool) {
	switch {
	case len(p) == 0:
		return new(big.Rat), true
	case len(p) == 1 && degree(p[0].exps) == 0:
		return p[0].coef, true
	}
	return nil, false
}

// occurs lists which variables occur.
func (r *ring) occurs(p poly) []bool {
	out := make([]bool, len(r.names))
	for _, t := range p {
		for i, e := range t.exps {
			out[i] = out[i] || e > 0
		}
	}
	return out
}

// at puts numbers for the variables that have one.
func at(p poly, values []*big.Rat) poly {
	out := make([]term, 0, len(p))
	for _, t := range p {
		c, e := new(big.Rat).Set(t.coef), slices.Clone(t.exps)
		for i, x := range values {
			if x == nil {
				continue
			}
			for range e[i] {
				c.Mul(c, x)
			}
			e[i] = 0
		}
		out = append(out, term{c, e})
	}
	return collect(out)
}
