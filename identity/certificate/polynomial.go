package certificate

import (
	"errors"
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// Limits on what is read and done: hostile input takes neither much memory nor
// much time, and no exponent overflows its two bytes in a key.
const (
	maxVariables = 256
	maxDigits    = 20_000 // of one number
	maxExponent  = 1000   // of what is read
	maxPower     = 1<<16 - 1
	maxTerms     = 200_000   // of one polynomial, read or expanded
	maxWork      = 5_000_000 // units, of less than a microsecond each
)

// Term is a coefficient, an exact rational such as "-3/2", times powers of
// variables.
type Term struct {
	C string         `json:"c"`
	M map[string]int `json:"m,omitempty"`
}

// Polynomial is a sum of terms. The empty list is zero.
type Polynomial []Term

// sum is a polynomial while it is computed with: coefficients, none zero, by
// monomial. A monomial is the exponents of the claim's variables in their
// order, of two bytes each.
type sum map[string]*big.Rat

// checker expands polynomials over a fixed list of variables.
type checker struct {
	names []string
	index map[string]int
	work  int64 // units spent
}

func newChecker(variables []string) (*checker, error) {
	if len(variables) > maxVariables {
		return nil, fmt.Errorf("%d variables; %d is the limit", len(variables), maxVariables)
	}
	c := &checker{names: variables, index: map[string]int{}}
	for i, v := range variables {
		if _, twice := c.index[v]; twice || v == "" {
			return nil, fmt.Errorf("variable %q is declared twice or empty", v)
		}
		c.index[v] = i
	}
	return c, nil
}

// spend counts an operation on one term whose numbers have so many bits: the
// common factor that is cancelled takes time quadratic in them.
func (c *checker) spend(bits int) error {
	blocks := int64(bits) / 1024
	if c.work += 1 + int64(len(c.names))/16 + blocks*blocks; c.work > maxWork {
		return errors.New("the certificate takes more work than is allowed")
	}
	return nil
}

func bits(x *big.Rat) int { return x.Num().BitLen() + x.Denom().BitLen() }

// number reads an exact rational: decimal digits without leading zeros, with an
// optional minus and an optional denominator.
func number(s string) (*big.Rat, error) {
	if len(s) > maxDigits {
		return nil, fmt.Errorf("a number of %d characters", len(s))
	}
	num, den, fraction := strings.Cut(strings.TrimPrefix(s, "-"), "/")
	if !fraction {
		den = "1"
	}
	n, okNum := whole(num)
	d, okDen := whole(den)
	if !okNum || !okDen || d.Sign() == 0 {
		return nil, fmt.Errorf("%.40q is not an exact rational", s)
	}
	if strings.HasPrefix(s, "-") {
		n.Neg(n)
	}
	return new(big.Rat).SetFrac(n, d), nil
}

func whole(s string) (*big.Int, bool) {
	if s == "" || strings.Trim(s, "0123456789") != "" || s[0] == '0' && s != "0" {
		return nil, false
	}
	return new(big.Int).SetString(s, 10)
}

// read turns a polynomial into a sum. Terms are not merged silently: each
// monomial stands once, and no coefficient is zero.
func (c *checker) read(p Polynomial) (sum, error) {
	if len(p) > maxTerms {
		return nil, fmt.Errorf("a polynomial of %d terms", len(p))
	}
	out := sum{}
	for _, t := range p {
		if err := c.spend(4 * len(t.C)); err != nil {
			return nil, err
		}
		x, err := number(t.C)
		if err != nil {
			return nil, err
		}
		exps := make([]int, len(c.names))
		for v, e := range t.M {
			i, ok := c.index[v]
			if !ok {
				return nil, fmt.Errorf("unknown variable %q", v)
			}
			if e < 1 || e > maxExponent {
				return nil, fmt.Errorf("exponent %d of %s", e, v)
			}
			exps[i] = e
		}
		k, err := key(exps)
		if err != nil {
			return nil, err
		}
		if _, twice := out[k]; twice || x.Sign() == 0 {
			return nil, errors.New("a monomial stands twice or with coefficient zero")
		}
		out[k] = x
	}
	return out, nil
}

func key(exps []int) (string, error) {
	b := make([]byte, 0, 2*len(exps))
	for _, e := range exps {
		if e > maxPower {
			return "", fmt.Errorf("an exponent above %d", maxPower)
		}
		b = append(b, byte(e>>8), byte(e))
	}
	return string(b), nil
}

func exponents(k string) []int {
	out := make([]int, len(k)/2)
	for i := range out {
		out[i] = int(k[2*i])<<8 | int(k[2*i+1])
	}
	return out
}

// monomial is the key of v^e, of 1 where e is 0.
func (c *checker) monomial(v, e int) string {
	b := make([]byte, 2*len(c.names))
	if e > 0 {
		b[2*v], b[2*v+1] = byte(e>>8), byte(e)
	}
	return string(b)
}

// addTerm adds x·y times a monomial to p.
func (c *checker) addTerm(p sum, k string, x, y *big.Rat) error {
	old := p[k]
	size := bits(x) + bits(y)
	if old != nil {
		size += bits(old)
	}
	if err := c.spend(size); err != nil {
		return err
	}
	z := new(big.Rat).Mul(x, y)
	if old != nil {
		z.Add(z, old)
	} else if len(p) >= maxTerms {
		return fmt.Errorf("a polynomial of more than %d terms", maxTerms)
	}
	if z.Sign() == 0 {
		delete(p, k)
	} else {
		p[k] = z
	}
	return nil
}

// add adds w·q to p.
func (c *checker) add(p sum, w int64, q sum) error { return c.addScaled(p, big.NewRat(w, 1), q) }

func (c *checker) addScaled(p sum, w *big.Rat, q sum) error {
	for k, x := range q {
		if err := c.addTerm(p, k, w, x); err != nil {
			return err
		}
	}
	return nil
}

// mul is the product of p and q.
func (c *checker) mul(p, q sum) (sum, error) {
	out := sum{}
	exps := make([]int, len(c.names))
	for k, x := range p {
		a := exponents(k)
		for l, y := range q {
			for i := range exps {
				exps[i] = a[i] + int(l[2*i])<<8 + int(l[2*i+1])
			}
			m, err := key(exps)
			if err != nil {
				return nil, err
			}
			if err := c.addTerm(out, m, x, y); err != nil {
				return nil, err
			}
		}
	}
	return out, nil
}

// onCircle writes s² as 1 - c² until s occurs at most linearly.
func (c *checker) onCircle(p sum, cos, sin int) (sum, error) {
	one, minus := big.NewRat(1, 1), big.NewRat(-1, 1)
	for {
		next, done := sum{}, true
		for k, x := range p {
			e := exponents(k)
			if e[sin] < 2 {
				if err := c.addTerm(next, k, x, one); err != nil {
					return nil, err
				}
				continue
			}
			done = false
			for _, w := range []*big.Rat{one, minus} {
				if w == one {
					e[sin] -= 2
				} else {
					e[cos] += 2
				}
				m, err := key(e)
				if err != nil {
					return nil, err
				}
				if err := c.addTerm(next, m, x, w); err != nil {
					return nil, err
				}
			}
		}
		if done {
			return next, nil
		}
		p = next
	}
}

// variables lists the indices of the variables that occur.
func (p sum) variables() []int {
	seen := map[int]bool{}
	for k := range p {
		for i, e := range exponents(k) {
			if e > 0 {
				seen[i] = true
			}
		}
	}
	var out []int
	for i := range seen {
		out = append(out, i)
	}
	slices.Sort(out)
	return out
}
