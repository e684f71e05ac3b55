package algebra

import (
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func point(r *rand.Rand) func(Var) Rat {
	at := map[Var]Rat{}
	return func(v Var) Rat {
		if _, ok := at[v]; !ok {
			at[v] = Frac64(r.Int64N(15)-7, 1+r.Int64N(4))
		}
		return at[v]
	}
}

func TestEvaluationIsHomomorphism(t *testing.T) {
	eachShape(t, 10, func(t *testing.T, r *rand.Rand, draw func() Poly) {
		p, q := draw(), draw()
		if p.TotalDegree() > 1000 || q.TotalDegree() > 1000 {
			return
		}
		at := point(r)
		x, ok1 := p.Eval(at)
		y, ok2 := q.Eval(at)
		s, ok3 := p.Add(q).Eval(at)
		m, ok4 := p.Mul(q).Eval(at)
		require.True(t, ok1 && ok2 && ok3 && ok4)
		require.True(t, s.Equal(x.Add(y)))
		require.True(t, m.Equal(x.Mul(y)))
		// Term by term.
		var sum Rat
		for mono, c := range p.Terms() {
			for _, w := range mono.Powers() {
				e, _ := at(w.Var).Pow(w.Exp)
				c = c.Mul(e)
			}
			sum = sum.Add(c)
		}
		require.True(t, sum.Equal(x))
		// In two steps.
		half := p.EvalPartial(map[Var]Rat{-3: at(-3), 11: at(11)})
		checkCanonical(t, half)
		require.False(t, half.Has(-3) || half.Has(11))
		z, ok := half.Eval(at)
		require.True(t, ok)
		require.True(t, z.Equal(x))
	})
}

func TestSubstitution(t *testing.T) {
	for i, s := range []shape{{1, 4, 3, 3}, {3, 4, 2, 4}, {9, 6, 2, 4}, {3, 4, 3, 40}} {
		r := rand.New(rand.NewPCG(uint64(i), 7))
		for range 30 {
			p, q, h := randomPoly(r, s), randomPoly(r, s), randomPoly(r, s)
			at := point(r)
			got := p.SubstMany(map[Var]Poly{-3: q, 4: h})
			checkCanonical(t, got)
			x, ok := got.Eval(at)
			require.True(t, ok)
			qv, _ := q.Eval(at)
			hv, _ := h.Eval(at)
			want, ok := p.Eval(func(v Var) Rat {
				switch v {
				case -3:
					return qv
				case 4:
					return hv
				}
				return at(v)
			})
			require.True(t, ok)
			require.True(t, x.Equal(want))
			require.True(t, p.Subst(-3, q).Equal(p.SubstMany(map[Var]Poly{-3: q})))
			require.True(t, p.Subst(-3, Variable(-3)).Equal(p))
			// It respects sums and products.
			require.True(t, p.Mul(h).Subst(-3, q).Equal(p.Subst(-3, q).Mul(h.Subst(-3, q))))
		}
	}
}

func TestSubstitutionIsSimultaneous(t *testing.T) {
	x, y := Variable(0), Variable(1)
	p := x.Pow(2).Sub(y)
	swapped := p.SubstMany(map[Var]Poly{0: y, 1: x})
	assert.True(t, swapped.Equal(y.Pow(2).Sub(x)))
	cancelled := x.Sub(y).Subst(0, y)
	assert.True(t, cancelled.IsZero())
	f := FromPoly(p).SubstMany(map[Var]Fraction{0: FromPoly(y), 1: FromPoly(x)})
	assert.True(t, f.Equal(FromPoly(swapped)))
}
