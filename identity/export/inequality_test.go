package export_test

import (
	"encoding/json"
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"

	"creaseproof/identity/certificate"
	"creaseproof/identity/export"
)

func TestCoqAcceptsInequalities(t *testing.T) {
	for _, s := range inequalities() {
		t.Run(s.Name, func(t *testing.T) {
			text, err := export.Coq("", s)
			require.NoError(t, err)
			out, err := coqc(t, text)
			require.NoError(t, err, "%s\n%s", out, text)
		})
	}
}

// clone copies what a mutation may change.
func clone(t *testing.T, s *export.Inequality) *export.Inequality {
	t.Helper()
	out := *s
	out.Claim, out.Certificate = &certificate.Claim{}, &certificate.Certificate{}
	for _, x := range []struct{ from, to any }{{s.Claim, out.Claim}, {s.Certificate, out.Certificate}} {
		b, err := json.Marshal(x.from)
		require.NoError(t, err)
		require.NoError(t, json.Unmarshal(b, x.to))
	}
	return &out
}

// mutants changes one part of a claim or a certificate after the other, so that
// the identity no longer holds.
func mutants(t *testing.T, s *export.Inequality) []*export.Inequality {
	t.Helper()
	var out []*export.Inequality
	change := func(f func(claim *certificate.Claim, cert *certificate.Certificate)) {
		m := clone(t, s)
		f(m.Claim, m.Certificate)
		out = append(out, m)
	}
	shift := func(c string, by *big.Rat) string {
		x, ok := new(big.Rat).SetString(c)
		require.True(t, ok)
		return x.Add(x, by).RatString()
	}
	slight, one := big.NewRat(1, 1_000_000_000), big.NewRat(1, 1)
	weights := func(list func(c *certificate.Certificate) []certificate.Square) {
		for i := range list(s.Certificate) {
			change(func(_ *certificate.Claim, c *certificate.Certificate) {
				list(c)[i].Weight = shift(list(c)[i].Weight, slight)
			})
		}
	}
	weights(func(c *certificate.Certificate) []certificate.Square { return c.Multiplier })
	inside := func(c *certificate.Certificate) *certificate.Certificate { return c }
	for in := s.Certificate; in.Squaring != nil; in = in.Squaring.Proof {
		here := inside
		weights(func(c *certificate.Certificate) []certificate.Square { return here(c).Squaring.Left })
		change(func(_ *certificate.Claim, c *certificate.Certificate) {
			q := here(c).Squaring
			q.Right[0].C = shift(q.Right[0].C, slight)
		})
		change(func(_ *certificate.Claim, c *certificate.Certificate) {
			q := here(c).Squaring
			q.Left[0].Weight = "-" + q.Left[0].Weight
		})
		change(func(_ *certificate.Claim, c *certificate.Certificate) {
			q := here(c).Squaring
			q.Cofactors[0] = append(q.Cofactors[0], poly("a^3")...)
		})
		inside = func(c *certificate.Certificate) *certificate.Certificate { return here(c).Squaring.Proof }
	}
	weights(func(c *certificate.Certificate) []certificate.Square { return inside(c).Squares })
	for i, t := range inside(s.Certificate).Squares {
		change(func(_ *certificate.Claim, c *certificate.Certificate) {
			c = inside(c)
			c.Squares = append(c.Squares[:i], c.Squares[i+1:]...)
		})
		change(func(_ *certificate.Claim, c *certificate.Certificate) {
			base := inside(c).Squares[i].Base
			base[0].C = shift(base[0].C, one)
		})
		if len(t.Factors) > 0 {
			change(func(_ *certificate.Claim, c *certificate.Certificate) {
				inside(c).Squares[i].Factors = t.Factors[1:]
			})
		}
	}
	for i := range s.Claim.Target {
		change(func(c *certificate.Claim, _ *certificate.Certificate) {
			c.Target[i].C = shift(c.Target[i].C, new(big.Rat).Neg(slight))
		})
	}
	for k := range s.Claim.Zero {
		change(func(c *certificate.Claim, _ *certificate.Certificate) { c.Zero[k][0].C = shift(c.Zero[k][0].C, one) })
	}
	return out
}

func TestCoqRejectsWrongCertificates(t *testing.T) {
	tried := 0
	for n, s := range inequalities() {
		for i, m := range mutants(t, s) {
			if (i+n)%5 != 0 { // each run of Coq takes about half a second
				continue
			}
			if m.Left != nil && i%2 == 0 {
				m.Left, m.Right, m.Scale = nil, nil, nil
			}
			if certificate.Check(m.Claim, m.Certificate) == nil {
				continue // the equation is not used
			}
			tried++
			text, err := export.Coq("", m)
			if m.Left != nil && err != nil {
				continue // the sides no longer agree with the target
			}
			require.NoError(t, err)
			out, err := coqc(t, text)
			require.Error(t, err, "%s, mutant %d was accepted:\n%s", s.Name, i, text)
			require.Contains(t, out, "Error", "%s, mutant %d", s.Name, i)
		}
	}
	require.Greater(t, tried, 25)
}

// A false claim whose squares compare: -2 r is not nonnegative, so that nothing
// follows from (2 r)² >= r² for it.
func TestSquaringNeedsASign(t *testing.T) {
	s := withSquaring()
	s.Left, s.Right = nil, nil
	s.Claim = &certificate.Claim{Variables: []string{"r"}, Positive: []certificate.Constraint{{Poly: poly("r")}}, Target: poly("- 3 r")}
	s.Certificate = &certificate.Certificate{Squaring: &certificate.Squaring{
		Left: []certificate.Square{square("-2", "1", 0)}, Right: poly("r"),
		Proof: &certificate.Certificate{Squares: []certificate.Square{square("3", "r")}},
	}}
	require.Error(t, certificate.Check(s.Claim, s.Certificate))
	text, err := export.Coq("", s)
	require.NoError(t, err)
	_, err = coqc(t, text)
	require.Error(t, err)
}

func TestSquaringsAreBounded(t *testing.T) {
	s := withSquaring()
	for range 20 {
		s.Certificate = &certificate.Certificate{Squaring: &certificate.Squaring{Proof: s.Certificate, Cofactors: []certificate.Polynomial{nil}}}
	}
	_, err := export.Coq("", s)
	require.ErrorIs(t, err, export.ErrUnsupported)
	s.Certificate = &certificate.Certificate{Squaring: &certificate.Squaring{Cofactors: []certificate.Polynomial{nil}}}
	for _, f := range []func() (string, error){
		func() (string, error) { return export.Coq("", s) },
		func() (string, error) { return export.TeX(s, export.TeXOptions{}) },
	} {
		_, err = f()
		require.Error(t, err)
	}
}

// False claims whose certificates satisfy the identity: what is wrong is a
// sign, an assumption that is not strict, or a multiplier that vanishes.
func TestFalseClaimsDoNotPass(t *testing.T) {
	x := certificate.Claim{Variables: []string{"x"}, Target: poly("- 1")}
	with := func(zero string, positive ...string) *certificate.Claim {
		c := x
		for _, g := range positive {
			c.Positive = append(c.Positive, certificate.Constraint{Poly: poly(g)})
		}
		if zero != "" {
			c.Zero = relation(zero)
		}
		return &c
	}
	unsupported := map[string]*export.Inequality{
		"zero on a thin set": {Claim: with("", "- x^2"), Certificate: &certificate.Certificate{
			Multiplier: []certificate.Square{square("1", "x")}, Squares: []certificate.Square{square("1", "1", 0)}}},
		"zero between equal bounds": {Claim: with("", "x", "- x"), Certificate: &certificate.Certificate{
			Multiplier: []certificate.Square{square("1", "x")}, Squares: []certificate.Square{square("1", "1", 0, 1)}}},
		"zero by an equation": {Claim: with("x"), Certificate: &certificate.Certificate{
			Multiplier: []certificate.Square{square("1", "x")}, Cofactors: relation("- x")}},
	}
	for name, s := range unsupported {
		s.Name = name
		_, err := export.Coq("", s)
		require.ErrorIs(t, err, export.ErrUnsupported, name)
	}
	refused := map[string]*export.Inequality{
		"negative weight": {Claim: with(""), Certificate: &certificate.Certificate{
			Squares: []certificate.Square{square("-1", "1")}}},
		"negative multiplier": {Claim: with(""), Certificate: &certificate.Certificate{
			Multiplier: []certificate.Square{square("-1", "1")}, Squares: []certificate.Square{square("1", "1")}}},
		"negative multiplier, by continuity": {Claim: with(""), Certificate: &certificate.Certificate{
			Multiplier: []certificate.Square{square("-1", "x")}, Squares: []certificate.Square{square("1", "x")}}},
		"zero multiplier": {Claim: with(""), Certificate: &certificate.Certificate{
			Multiplier: []certificate.Square{square("0", "1")}}},
		"empty": {Claim: with(""), Certificate: &certificate.Certificate{}},
	}
	for name, s := range refused {
		s.Name = name
		text, err := export.Coq("", s)
		if err != nil {
			require.ErrorIs(t, err, export.ErrUnsupported, name)
			continue
		}
		out, err := coqc(t, text)
		require.Error(t, err, "%s was accepted\n%s", name, text)
		require.Contains(t, out, "Error", name)
	}
}

// A claim's sides must differ by target/scale.
func TestWrongSidesDoNotPass(t *testing.T) {
	s := layered()
	s.Right = sum(s.Right, neg(v("eps")))
	_, err := export.Coq("", s)
	require.ErrorContains(t, err, "do not agree")

	s = layered()
	s.Scale = [][]certificate.Square{{square("2", "eps")}} // not visibly positive
	_, err = export.Coq("", s)
	require.ErrorIs(t, err, export.ErrUnsupported)

	s = layered()
	s.Claim.Positive[0].Strict = false // eps = 0 is let in
	_, err = export.Coq("", s)
	require.ErrorIs(t, err, export.ErrUnsupported)
}
