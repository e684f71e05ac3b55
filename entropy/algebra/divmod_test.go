package algebra

import (
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func leading(p Poly, order func(a, b Monomial) int) Monomial {
	return ordered(p, order)[0].Mono
}

func TestDivisionIdentity(t *testing.T) {
	orders := map[string]func(a, b Monomial) int{"graded": GradedLex, "lex": Lex(4, -3), "default": nil}
	for name, order := range orders {
		t.Run(name, func(t *testing.T) {
			r := rand.New(rand.NewPCG(1, 8))
			for range 60 {
				s := shape{3, 5, 3, 3}
				p := randomPoly(r, shape{3, 8, 4, 5})
				ds := []Poly{randomPoly(r, s), randomPoly(r, s), {}}
				quo, rem := p.DivMod(ds, order)
				require.NoError(t, rem.Err())
				checkCanonical(t, rem)
				require.Len(t, quo, 3)
				require.True(t, quo[2].IsZero())
				cmp := order
				if cmp == nil {
					cmp = GradedLex
				}
				sum := rem
				for i, q := range quo {
					sum = sum.Add(q.Mul(ds[i]))
					if !q.IsZero() {
						require.LessOrEqual(t, cmp(leading(q.Mul(ds[i]), cmp), leading(p, cmp)), 0)
					}
				}
				require.True(t, sum.Equal(p))
				for m := range rem.Terms() {
					for _, d := range ds {
						if !d.IsZero() {
							require.False(t, leading(d, cmp).Divides(m))
						}
					}
				}
			}
		})
	}
}

func TestDivModKnown(t *testing.T) {
	// D. Cox, J. Little, D. O'Shea, Ideals, Varieties, and Algorithms, chapter 2,
	// section 3, example 4, in lexicographic order.
	x, y := Variable(0), Variable(1)
	one := Const(Int(1))
	p := sumOf(x.Pow(2).Mul(y), x.Mul(y.Pow(2)), y.Pow(2))
	quo, rem := p.DivMod([]Poly{x.Mul(y).Sub(one), y.Pow(2).Sub(one)}, Lex(0, 1))
	assert.True(t, quo[0].Equal(x.Add(y)))
	assert.True(t, quo[1].Equal(one))
	assert.True(t, rem.Equal(sumOf(x, y, one)))
	// Elimination of x by x - y^2.
	_, rem = x.Pow(3).Add(y).DivMod([]Poly{x.Sub(y.Pow(2))}, Lex(0))
	assert.True(t, rem.Equal(y.Pow(6).Add(y)))
}

func TestMonomials(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 8))
	draw := func() Monomial {
		var ps []Power
		for range r.IntN(4) {
			ps = append(ps, Power{Var(r.IntN(4) - 1), r.IntN(3)})
		}
		return NewMonomial(ps...)
	}
	for range 500 {
		a, b, c := draw(), draw(), draw()
		require.Equal(t, a.Mul(b), b.Mul(a))
		require.Equal(t, a.Mul(b).Mul(c), a.Mul(b.Mul(c)))
		require.Equal(t, a.Degree()+b.Degree(), a.Mul(b).Degree())
		q, ok := a.Mul(b).Div(b)
		require.True(t, ok)
		require.Equal(t, a, q)
		require.True(t, a.Divides(a.Mul(c)))
		if q, ok := a.Div(b); ok {
			require.Equal(t, a, q.Mul(b))
		} else {
			require.NotEqual(t, One, b)
		}
		require.Equal(t, a, NewMonomial(a.Powers()...))
		for _, order := range []func(a, b Monomial) int{GradedLex, Lex(2, 0)} {
			require.Equal(t, order(a, b), -order(b, a))
			require.Equal(t, a == b, order(a, b) == 0)
			require.Equal(t, order(a, b), order(a.Mul(c), b.Mul(c)))
			require.GreaterOrEqual(t, order(a, One), 0)
		}
	}
	bad := NewMonomial(Power{0, MaxExponent}).Mul(NewMonomial(Power{1, 1}))
	for _, m := range []Monomial{bad, bad.Mul(One), One.Mul(bad), NewMonomial(Power{0, -1})} {
		assert.False(t, m.Valid())
		assert.Equal(t, -1, m.Degree())
		assert.False(t, m.Divides(m))
	}
}

func TestContent(t *testing.T) {
	eachShape(t, 10, func(t *testing.T, _ *rand.Rand, draw func() Poly) {
		p := draw()
		c, q := p.Primitive()
		require.True(t, q.Scale(c).Equal(p))
		if p.IsZero() {
			return
		}
		require.True(t, q.Content().IsOne())
		_, lead := q.Leading()
		require.Positive(t, lead.Sign())
		for _, x := range q.Terms() {
			require.True(t, x.IsInt())
		}
		m := p.MonomialContent()
		rest, ok := p.DivExact(monomialPoly(m))
		require.True(t, ok)
		require.Equal(t, One, rest.MonomialContent())
	})
	x := Variable(0)
	p := x.Scale(Frac64(-4, 3)).Add(Const(Frac64(2, 9)))
	require.True(t, p.Content().Equal(Frac64(-2, 9)))
}
