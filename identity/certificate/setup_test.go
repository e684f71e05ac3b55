package certificate_test

import (
	"math/big"
	"math/rand/v2"
	"strconv"
	"strings"

	"creaseproof/identity/certificate"
)

type (
	poly = certificate.Polynomial
	list = []certificate.Square
)

// p reads "x^2 - 3/2 x y + 1"; what it does not understand ends up in the
// polynomial, for the checker to refuse.
func p(text string) poly {
	var out poly
	text = strings.ReplaceAll(text, " - ", " + -")
	for _, t := range strings.Split(text, " + ") {
		if t == "" {
			continue
		}
		term := certificate.Term{C: "1", M: map[string]int{}}
		if strings.HasPrefix(t, "-") {
			term.C, t = "-1", t[1:]
		}
		for i, f := range strings.Fields(t) {
			if i == 0 && f[0] >= '0' && f[0] <= '9' {
				term.C = strings.TrimSuffix(term.C, "1") + f
				continue
			}
			name, power, found := strings.Cut(f, "^")
			e := 1
			if found {
				e, _ = strconv.Atoi(power)
			}
			term.M[name] += e
		}
		out = append(out, term)
	}
	return out
}

func square(weight, base string, factors ...int) certificate.Square {
	return certificate.Square{Weight: weight, Factors: factors, Base: p(base)}
}

// problem is a claim with a certificate.
type problem struct {
	Claim       *certificate.Claim       `json:"claim"`
	Certificate *certificate.Certificate `json:"certificate"`
}

func claim(variables, target string) *certificate.Claim {
	return &certificate.Claim{Variables: strings.Fields(variables), Target: p(target)}
}

func with(c *certificate.Claim, positive ...string) *certificate.Claim {
	for _, g := range positive {
		g, strict := strings.CutPrefix(g, "> ")
		c.Positive = append(c.Positive, certificate.Constraint{Poly: p(g), Strict: strict})
	}
	return c
}

func where(c *certificate.Claim, zero ...string) *certificate.Claim {
	for _, h := range zero {
		c.Zero = append(c.Zero, p(h))
	}
	return c
}

func polys(texts ...string) []poly {
	var out []poly
	for _, t := range texts {
		out = append(out, p(t))
	}
	return out
}

// valid are certificates, written by hand, with every feature.
func valid() map[string]problem {
	return map[string]problem{
		"square": {claim("x y", "x^2 - 2 x y + y^2"), &certificate.Certificate{Squares: list{square("1", "x - y")}}},
		"weights": {claim("x y z", "5/2 x^2 + 1/3 y^2 + 7"), &certificate.Certificate{
			Squares: list{square("5/2", "x"), square("1/3", "y"), square("7", "1")}}},
		"factors": {with(claim("a b x", "3 a b x^2 + a"), "a", "> b"), &certificate.Certificate{
			Squares: list{square("3", "x", 0, 1), square("1", "1", 0)}}},
		"factor twice": {with(claim("x y", "x^2 y^2 + 2 x^3 y + x^4"), "x", "x + y"), &certificate.Certificate{
			Squares: list{square("1", "x", 1, 1)}}},
		"box": {with(claim("x", "x^2 - x^4"), "1 - x", "x + 1"), &certificate.Certificate{
			Squares: list{square("1", "x", 0, 1)}}},
		"equation": {where(claim("x y", "1 - 2 x y"), "x^2 + y^2 - 1"), &certificate.Certificate{
			Squares: list{square("1", "x - y")}, Cofactors: polys("-1")}},
		"two equations": {where(claim("x y z", "2 x^2 + y - x - z"), "x - y", "z - x^2"), &certificate.Certificate{
			Squares: list{square("1", "x")}, Cofactors: polys("-1", "-1")}},
		"Motzkin": {claim("x y z", "x^4 y^2 + x^2 y^4 - 3 x^2 y^2 z^2 + z^6"), &certificate.Certificate{
			Multiplier: list{square("1", "x"), square("1", "y"), square("1", "z")},
			Squares: list{square("1", "x^2 y z - y z^3"), square("1", "x y^2 z - x z^3"), square("1", "x^2 y^2 - z^4"),
				square("1/4", "x y^3 - x^3 y"), square("3/4", "x y^3 + x^3 y - 2 x y z^2")}}},
		"multiplier": {with(claim("a c x", "a x^2 + 2 x + c"), "> a", "a c - 1"), &certificate.Certificate{
			Multiplier: list{square("1", "1", 0)}, Squares: list{square("1", "a x + 1"), square("1", "1", 1)}}},
		"multiplier that may vanish": {with(claim("x", "x"), "x"), &certificate.Certificate{
			Multiplier: list{square("1", "x")}, Squares: list{square("1", "x", 0)}}},
		"multiplier on a circle": {where(with(claim("c s b", "b^2 s^2"), "1 - b", "b"), "c^2 + s^2 - 1"), &certificate.Certificate{
			Multiplier: list{square("1", "s b")}, Squares: list{square("1", "s^2 b^2")}, Cofactors: polys("")}},
		"multiplier, cofactor": {where(claim("c s", "1 - c^2"), "c^2 + s^2 - 1"), &certificate.Certificate{
			Multiplier: list{square("1", "c")}, Squares: list{square("1", "c s")}, Cofactors: polys("-c^2")}},
		"squaring": {where(with(claim("x r", "r - x"), "r"), "r^2 - x^2 - 1"), &certificate.Certificate{
			Squaring: &certificate.Squaring{Left: list{square("1", "1", 0)}, Right: p("x"), Cofactors: polys(""),
				Proof: &certificate.Certificate{Squares: list{square("1", "1")}, Cofactors: polys("1")}}}},
		"squaring up to an equation": {where(with(claim("x r", "r - x + r^2 - x^2 - 1"), "r"), "r^2 - x^2 - 1"), &certificate.Certificate{
			Squaring: &certificate.Squaring{Left: list{square("1", "1", 0)}, Right: p("x"), Cofactors: polys("1"),
				Proof: &certificate.Certificate{Squares: list{square("1", "1")}, Cofactors: polys("1")}}}},
		"nested squaring": nested(),
	}
}

// nested is sqrt(a) + sqrt(b) >= sqrt(a + b), with roots r, s, t. The first
// square is 2 r s + (r² + s² - t²); its square again is 4 r² s² once the
// relations are used.
func nested() problem {
	c := where(with(claim("a b r s t", "r + s - t"), "r", "s", "t", "a", "b"), "r^2 - a", "s^2 - b", "t^2 - a - b")
	return problem{c, &certificate.Certificate{Squaring: &certificate.Squaring{
		Left: list{square("1", "1", 0), square("1", "1", 1)}, Right: p("t"), Cofactors: polys("", "", ""),
		// r² + 2 r s + s² - t² is 2 r s - 0 up to the relations.
		Proof: &certificate.Certificate{Squaring: &certificate.Squaring{
			Left: list{square("2", "1", 0, 1)}, Right: p(""), Cofactors: polys("1", "1", "-1"),
			Proof: &certificate.Certificate{Squares: list{square("4", "r s")}, Cofactors: polys("", "", "")},
		}},
	}}}
}

type point map[string]*big.Rat

// at evaluates a polynomial term by term.
func at(q poly, x point) *big.Rat {
	total := new(big.Rat)
	for _, t := range q {
		c, _ := new(big.Rat).SetString(t.C)
		for v, e := range t.M {
			for range e {
				c.Mul(c, x[v])
			}
		}
		total.Add(total, c)
	}
	return total
}

func squaresAt(c *certificate.Claim, l list, x point) *big.Rat {
	total := new(big.Rat)
	for _, s := range l {
		v, _ := new(big.Rat).SetString(s.Weight)
		b := at(s.Base, x)
		v.Mul(v, b).Mul(v, b)
		for _, f := range s.Factors {
			v.Mul(v, at(c.Positive[f].Poly, x))
		}
		total.Add(total, v)
	}
	return total
}

func cofactorsAt(c *certificate.Claim, l []poly, x point) *big.Rat {
	total := new(big.Rat)
	for k, t := range l {
		total.Add(total, new(big.Rat).Mul(at(t, x), at(c.Zero[k], x)))
	}
	return total
}

// holdsAt evaluates the identities of a certificate at a point: that they hold at
// many random points shows that they are identities.
func holdsAt(c *certificate.Claim, cert *certificate.Certificate, target *big.Rat, x point) bool {
	if s := cert.Squaring; s != nil {
		l, r := squaresAt(c, s.Left, x), at(s.Right, x)
		diff := new(big.Rat).Sub(l, r)
		diff.Add(diff, cofactorsAt(c, s.Cofactors, x))
		l.Mul(l, l)
		return diff.Cmp(target) == 0 && holdsAt(c, s.Proof, l.Sub(l, r.Mul(r, r)), x)
	}
	m := big.NewRat(1, 1)
	if len(cert.Multiplier) > 0 {
		m = squaresAt(c, cert.Multiplier, x)
	}
	right := squaresAt(c, cert.Squares, x)
	right.Add(right, cofactorsAt(c, cert.Cofactors, x))
	return m.Mul(m, target).Cmp(right) == 0
}

func identityHolds(q problem, rng *rand.Rand) bool {
	for range 6 {
		x := point{}
		for _, v := range q.Claim.Variables {
			x[v] = big.NewRat(rng.Int64N(2_000_001)-1_000_000, 1+rng.Int64N(1000))
		}
		if !holdsAt(q.Claim, q.Certificate, at(q.Claim.Target, x), x) {
			return false
		}
	}
	return true
}
