package algebra

import (
	"fmt"
	"math/big"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

// naive is a polynomial by the textbook: a map from monomials, written as text,
// to coefficients.
type naive map[string]*big.Rat

func naiveKey(exps map[Var]int) string {
	var parts []string
	for _, v := range sortedKeys(exps) {
		if exps[v] != 0 {
			parts = append(parts, fmt.Sprintf("%d:%d", v, exps[v]))
		}
	}
	return strings.Join(parts, " ")
}

func naiveExps(key string) map[Var]int {
	m := map[Var]int{}
	for part := range strings.FieldsSeq(key) {
		var v Var
		var e int
		if _, err := fmt.Sscanf(part, "%d:%d", &v, &e); err != nil {
			panic(err)
		}
		m[v] = e
	}
	return m
}

func toNaive(p Poly) naive {
	n := naive{}
	for m, c := range p.Terms() {
		exps := map[Var]int{}
		for _, w := range m.Powers() {
			exps[w.Var] = w.Exp
		}
		n[naiveKey(exps)] = c.Big()
	}
	return n
}

func (n naive) add(key string, c *big.Rat) {
	if n[key] == nil {
		n[key] = new(big.Rat)
	}
	n[key].Add(n[key], c)
	if n[key].Sign() == 0 {
		delete(n, key)
	}
}

func (n naive) plus(m naive, sign int64) naive {
	out := naive{}
	for k, c := range n {
		out.add(k, c)
	}
	for k, c := range m {
		out.add(k, new(big.Rat).Mul(c, big.NewRat(sign, 1)))
	}
	return out
}

func (n naive) times(m naive) naive {
	out := naive{}
	for k, c := range n {
		for l, d := range m {
			e := naiveExps(k)
			for v, x := range naiveExps(l) {
				e[v] += x
			}
			out.add(naiveKey(e), new(big.Rat).Mul(c, d))
		}
	}
	return out
}

func (n naive) deriv(v Var) naive {
	out := naive{}
	for k, c := range n {
		e := naiveExps(k)
		x := e[v]
		e[v]--
		out.add(naiveKey(e), new(big.Rat).Mul(c, big.NewRat(int64(x), 1)))
	}
	return out
}

func requireSame(t *testing.T, want naive, p Poly) {
	t.Helper()
	require.NoError(t, p.Err())
	checkCanonical(t, p)
	got := toNaive(p)
	require.Len(t, got, len(want))
	for k, c := range want {
		require.Contains(t, got, k)
		require.Zero(t, c.Cmp(got[k]), "coefficient of %s: %v, not %v", k, got[k], c)
	}
}

// checkCanonical checks the invariants of the representation.
func checkCanonical(t *testing.T, p Poly) {
	t.Helper()
	if p.r == nil {
		return
	}
	r := p.r
	require.NotEmpty(t, r.coefs)
	require.True(t, slices.IsSorted(r.vars))
	require.Equal(t, layoutFor(len(r.vars), r.degree()), r.lay)
	require.Len(t, r.exps, len(r.coefs)*r.lay.words)
	seen := map[Var]bool{}
	prev := One
	for i, c := range r.coefs {
		require.False(t, c.IsZero())
		m := r.monomial(i)
		require.Equal(t, m.Degree(), r.lay.field(r.term(i), 0))
		if i > 0 {
			require.Positive(t, GradedLex(prev, m))
		}
		prev = m
		for _, w := range m.Powers() {
			seen[w.Var] = true
		}
	}
	require.Len(t, seen, len(r.vars))
}

// shape says what random polynomials are like.
type shape struct{ vars, terms, exp, bits int }

var shapes = []shape{
	{1, 4, 3, 3}, {2, 6, 2, 4}, {3, 5, 4, 6}, {5, 12, 3, 8}, {12, 8, 2, 5},
	{3, 8, 40, 20}, {4, 6, 3000, 5}, {2, 10, 3, 60}, {2, 5, 2, 90}, {20, 15, 1, 31}, {45, 12, 1, 5}, {45, 6, 90, 5},
	{3, 4, 1 << 20, 3}, {2, 70, 9, 5},
}

func randomRat(r *rand.Rand, bits int) Rat {
	n := new(big.Int)
	for range bits/32 + 1 {
		n.Lsh(n, 32).Or(n, big.NewInt(int64(r.Uint32())))
	}
	n.Rsh(n, uint(32*(bits/32+1)-1-r.IntN(bits)))
	if r.IntN(2) == 0 {
		n.Neg(n)
	}
	d := int64(1)
	if r.IntN(3) == 0 {
		d = 1 + r.Int64N(12)
	}
	return FromBig(new(big.Rat).SetFrac(n, big.NewInt(d)))
}

func randomPoly(r *rand.Rand, s shape) Poly {
	ts := make([]Term, r.IntN(s.terms+1))
	for i := range ts {
		var ps []Power
		for v := range s.vars {
			if r.IntN(3) > 0 {
				continue
			}
			ps = append(ps, Power{Var(7*v - 3), r.IntN(s.exp + 1)})
		}
		ts[i] = Term{NewMonomial(ps...), randomRat(r, s.bits)}
	}
	return FromTerms(ts)
}

// eachShape runs f on random polynomials of every shape.
func eachShape(t *testing.T, rounds int, f func(t *testing.T, r *rand.Rand, draw func() Poly)) {
	for i, s := range shapes {
		t.Run(fmt.Sprintf("%+v", s), func(t *testing.T) {
			r := rand.New(rand.NewPCG(uint64(i), 1))
			for range rounds {
				f(t, r, func() Poly { return randomPoly(r, s) })
			}
		})
	}
}
