package certificate

import (
	"fmt"
	"math/big"
	"slices"
	"strconv"
	"strings"
)

// Limits on what is read: they keep hostile input from taking memory or time.
const (
	maxTerms    = 200_000 // of one polynomial, and of one expanded product
	maxProducts = 20_000_000
	maxExponent = 1000
	maxDigits   = 20_000 // of one number
)

// Term is a coefficient, an exact rational such as "-3/2", times powers of
// variables.
type Term struct {
	C string         `json:"c"`
	M map[string]int `json:"m,omitempty"`
}

// Polynomial is a sum of terms. The empty list is zero.
type Polynomial []Term

// sum is a polynomial while it is computed with: coefficients by monomial, a
// monomial being its variables' exponents in the order of the claim.
type sum map[string]*big.Rat

// checker expands polynomials over a fixed list of variables.
type checker struct {
	index map[string]int
	n     int
	work  int // products of terms made so far
}

func newChecker(variables []string) (*checker, error) {
	c := &checker{index: map[string]int{}, n: len(variables)}
	for i, v := range variables {
		if _, twice := c.index[v]; twice || v == "" {
			return nil, fmt.Errorf("variable %q is declared twice or empty", v)
		}
		c.index[v] = i
	}
	return c, nil
}

// number reads an exact rational: digits, with an optional sign and an
// optional denominator.
func number(s string) (*big.Rat, error) {
	if len(s) > maxDigits {
		return nil, fmt.Errorf("a number of %d characters", len(s))
	}
	digits := strings.TrimPrefix(s, "-")
	num, den, fraction := strings.Cut(digits, "/")
	if !allDigits(num) || fraction && (!allDigits(den) || strings.Trim(den, "0") == "") {
		return nil, fmt.Errorf("%q is not an exact rational", s)
	}
	r, ok := new(big.Rat).SetString(s)
	if !ok {
		return nil, fmt.Errorf("%q is not an exact rational", s)
	}
	return r, nil
}

func allDigits(s string) bool {
	return s != "" && strings.Trim(s, "0123456789") == ""
}

// read turns a polynomial into a sum. Terms are not merged silently: each
// monomial stands once, and no coefficient is zero.
func (c *checker) read(p Polynomial) (sum, error) {
	if len(p) > maxTerms {
		return nil, fmt.Errorf("a polynomial of %d terms", len(p))
	}
	out := sum{}
	for _, t := range p {
		x, err := number(t.C)
		if err != nil {
			return nil, err
		}
		exps := make([]int, c.n)
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
		k := key(exps)
		if _, twice := out[k]; twice || x.Sign() == 0 {
			return nil, fmt.Errorf("a monomial stands twice or with coefficient zero")
		}
		out[k] = x
	}
	return out, nil
}

func key(exps []int) string {
	var b strings.Builder
	for _, e := range exps {
		b.WriteString(strconv.Itoa(e))
		b.WriteByte(' ')
	}
	return b.String()
}

func exponents(k string) []int {
	f := strings.Fields(k)
	out := make([]int, len(f))
	for i, s := range f {
		out[i], _ = strconv.Atoi(s)
	}
	return out
}

// write is the inverse of read.
func (c *checker) write(p sum) Polynomial {
	names := make([]string, c.n)
	for v, i := range c.index {
		names[i] = v
	}
	var out Polynomial
	for k, x := range p {
		t := Term{C: x.RatString(), M: map[string]int{}}
		for i, e := range exponents(k) {
			if e > 0 {
				t.M[names[i]] = e
			}
		}
		out = append(out, t)
	}
	return out
}

// add adds w·q to p.
func (p sum) add(w *big.Rat, q sum) {
	for k, x := range q {
		y := new(big.Rat).Mul(w, x)
		if old, ok := p[k]; ok {
			y.Add(y, old)
		}
		if y.Sign() == 0 {
			delete(p, k)
		} else {
			p[k] = y
		}
	}
}

// bits is the size of the largest coefficient.
func (p sum) bits() int {
	n := 0
	for _, x := range p {
		n = max(n, x.Num().BitLen()+x.Denom().BitLen())
	}
	return n
}

// mul is the product of p and q.
func (c *checker) mul(p, q sum) (sum, error) {
	if c.work += len(p) * len(q) * (1 + (p.bits()+q.bits())/512); c.work > maxProducts {
		return nil, fmt.Errorf("the identity takes more than %d products of terms", maxProducts)
	}
	out := sum{}
	exps := make([]int, c.n)
	for k, x := range p {
		a := exponents(k)
		for l, y := range q {
			for i, e := range exponents(l) {
				exps[i] = a[i] + e
			}
			out.add(x, sum{key(exps): y})
		}
	}
	if len(out) > maxTerms {
		return nil, fmt.Errorf("a product of %d terms", len(out))
	}
	return out, nil
}

// onCircle writes s² as 1 - c² until s occurs at most linearly.
func (c *checker) onCircle(p sum, cos, sin int) (sum, error) {
	for {
		high, low := sum{}, sum{}
		for k, x := range p {
			e := exponents(k)
			if e[sin] < 2 {
				low.add(x, sum{k: big.NewRat(1, 1)})
				continue
			}
			e[sin] -= 2
			high.add(x, sum{key(e): big.NewRat(1, 1)})
			e[cos] += 2
			high.add(new(big.Rat).Neg(x), sum{key(e): big.NewRat(1, 1)})
		}
		if len(high) == 0 {
			return low, nil
		}
		if c.work += len(p); c.work > maxProducts {
			return nil, fmt.Errorf("the identity takes more than %d products of terms", maxProducts)
		}
		low.add(big.NewRat(1, 1), high)
		p = low
	}
}

// variables lists the indices of the variables that occur.
func (p sum) variables() []int {
	var out []int
	for k := range p {
		for i, e := range exponents(k) {
			if e > 0 && !slices.Contains(out, i) {
				out = append(out, i)
			}
		}
	}
	slices.Sort(out)
	return out
}
