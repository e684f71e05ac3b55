package algebra

import "math/big"

// numbers64 divides coefficients that are machine integers.
type numbers64 struct {
	a, b, q []int64
	rest    int64
}

// small64 returns the coefficients divided by their content; nil where they do
// not fit.
func small64(coefs []Rat, content Rat) []int64 {
	out := make([]int64, len(coefs))
	if content.IsOne() {
		for i := range coefs {
			if coefs[i].b != nil {
				return nil
			}
			out[i] = coefs[i].n
		}
		return out
	}
	inv, _ := content.Inv()
	for i := range coefs {
		c := coefs[i].Mul(inv)
		if c.b != nil {
			return nil
		}
		out[i] = c.n
	}
	return out
}

func (n *numbers64) lens() (int, int) { return len(n.a), len(n.b) }

func (n *numbers64) start(k int) {
	n.rest = 0
	if k >= 0 {
		n.rest = n.a[k]
	}
}

func (n *numbers64) subtract(i, j int) bool {
	p, ok := mul64(n.q[i], n.b[j])
	if !ok {
		return false
	}
	n.rest, ok = add64(n.rest, -p)
	return ok
}

func (n *numbers64) isZero() bool { return n.rest == 0 }

func (n *numbers64) divide() (int, outcome) {
	if n.rest%n.b[0] != 0 {
		return 0, inexact
	}
	n.q = append(n.q, n.rest/n.b[0])
	return 0, exact
}

// numbersBig divides coefficients of any size.
type numbersBig struct {
	a, b, q []*big.Int
	rest, t big.Int
}

func newNumbersBig(a []Rat, ca Rat, b []Rat, cb Rat) *numbersBig {
	return &numbersBig{a: divided(a, ca), b: divided(b, cb)}
}

// divided returns the coefficients divided by their content, which are integers.
func divided(coefs []Rat, content Rat) []*big.Int {
	out := make([]*big.Int, len(coefs))
	inv, _ := content.Inv()
	for i, c := range coefs {
		out[i] = new(big.Int).Set(c.Mul(inv).view().Num())
	}
	return out
}

func (n *numbersBig) lens() (int, int) { return len(n.a), len(n.b) }

func (n *numbersBig) start(k int) {
	if k < 0 {
		n.rest.SetInt64(0)
		return
	}
	n.rest.Set(n.a[k])
}

func (n *numbersBig) subtract(i, j int) bool {
	n.rest.Sub(&n.rest, n.t.Mul(n.q[i], n.b[j]))
	return true
}

func (n *numbersBig) isZero() bool { return n.rest.Sign() == 0 }

func (n *numbersBig) divide() (int, outcome) {
	q, r := new(big.Int).QuoRem(&n.rest, n.b[0], &n.t)
	if r.Sign() != 0 {
		return 0, inexact
	}
	n.q = append(n.q, q)
	return 1 + q.BitLen()/32, exact
}

func (n *numbersBig) quotient() []Rat {
	out := make([]Rat, len(n.q))
	for i, c := range n.q {
		out[i] = demote(new(big.Rat).SetInt(c))
	}
	return out
}
