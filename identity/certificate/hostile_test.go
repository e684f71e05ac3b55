package certificate_test

import (
	"encoding/json"
	"fmt"
	"math/big"
	"runtime"
	"strings"
	"testing"
	"time"

	"creaseproof/identity/certificate"

	"github.com/stretchr/testify/assert"
)

// dense is a polynomial of n terms in four variables, with the coefficient given.
func dense(n int, c string) poly {
	var out poly
	for i := range n {
		out = append(out, certificate.Term{C: c, M: map[string]int{"x": 1 + i%31, "y": 1 + i/31%31, "z": 1 + i/961%31, "w": 1 + i/29791}})
	}
	return out
}

// hostile are inputs of a few megabytes that ask for too much.
func hostile() map[string]problem {
	huge := strings.Repeat("9", 19_000)
	out := map[string]problem{}
	put := func(name string, c *certificate.Claim, cert *certificate.Certificate) { out[name] = problem{c, cert} }
	xyzw := func(positive ...poly) *certificate.Claim {
		c := claim("x y z w", "1")
		for _, g := range positive {
			c.Positive = append(c.Positive, certificate.Constraint{Poly: g})
		}
		return c
	}
	squares := func(n int, s certificate.Square) *certificate.Certificate {
		cert := &certificate.Certificate{}
		for range n {
			cert.Squares = append(cert.Squares, s)
		}
		return cert
	}
	put("the square of a long polynomial", xyzw(), squares(1, certificate.Square{Weight: "1", Base: dense(50_000, "1")}))
	put("many factors", xyzw(dense(30, "1")), squares(1, certificate.Square{Weight: "1", Base: p("1"), Factors: make([]int, 500_000)}))
	put("one power as a factor", xyzw(p("x^1000")), squares(1, certificate.Square{Weight: "1", Base: p("1"), Factors: make([]int, 1_000_000)}))
	put("a constant as a factor", xyzw(p("2")), squares(1, certificate.Square{Weight: "1", Base: p("1"), Factors: make([]int, 1_000_000)}))
	put("many long factors", xyzw(dense(2000, "1"), dense(2000, "2")), squares(1, certificate.Square{Weight: "1", Base: p("1"), Factors: []int{0, 1, 0, 1, 0, 1}}))
	put("long numbers", xyzw(), squares(1, certificate.Square{Weight: "1", Base: dense(200, huge)}))
	put("a long weight", xyzw(), squares(200, certificate.Square{Weight: huge + "/7", Base: p("1")}))
	put("a number too long", xyzw(), squares(1, certificate.Square{Weight: strings.Repeat("9", 4_000_000), Base: p("1")}))

	// Sums of fractions whose denominators have nothing in common.
	var fractions []certificate.Square
	for i := range 400 {
		den := new(big.Int).Add(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(9000+i)), nil), big.NewInt(int64(2*i+1)))
		fractions = append(fractions, certificate.Square{Weight: "1/" + den.String(), Base: p("1")})
	}
	put("denominators", xyzw(), &certificate.Certificate{Squares: fractions})
	var short []certificate.Square
	for i := range 100_000 {
		short = append(short, certificate.Square{Weight: fmt.Sprintf("1/%d", 1_000_000_007+2*i), Base: p("1")})
	}
	put("short denominators, many", xyzw(), &certificate.Certificate{Squares: short})

	// Many variables, each term with few of them.
	var many []string
	var terms poly
	for i := range 200_000 {
		many = append(many, fmt.Sprintf("v%d", i))
		terms = append(terms, certificate.Term{C: "1", M: map[string]int{many[i]: 1}})
	}
	put("many variables", &certificate.Claim{Variables: many, Target: terms}, &certificate.Certificate{})
	few := many[:256]
	terms = nil
	for i := range 150_000 {
		terms = append(terms, certificate.Term{C: "1", M: map[string]int{few[i%256]: 1 + i/256}})
	}
	put("a long target in many variables", &certificate.Claim{Variables: few, Target: terms}, squares(1, certificate.Square{Weight: "1", Base: terms[:2000]}))
	put("too many terms", xyzw(), squares(1, certificate.Square{Weight: "1", Base: dense(250_000, "1")}))
	// A circle on which a power has to be reduced, many times over.
	circle := where(claim("c s x y z w", "1"), "c^2 + s^2 - 1")
	base := dense(1000, "1")
	for i := range base {
		base[i].M["s"] = 1000
	}
	put("powers on a circle", circle, &certificate.Certificate{Multiplier: list{{Weight: "1", Base: base[:300]}}})
	put("a power on a circle", circle, &certificate.Certificate{Multiplier: list{{Weight: "1", Base: p("s^1000")}, {Weight: "1/3", Base: p("s^999 c^1000")}}})

	// Squarings double the degree and the digits each time.
	cert := &certificate.Certificate{}
	for range 10_000 {
		cert = &certificate.Certificate{Squaring: &certificate.Squaring{Left: list{square("1", "1")}, Right: p(""), Proof: cert}}
	}
	put("deep squarings", claim("x", "1"), cert)
	g := dense(60, "12345678901234567/3")
	nest := &certificate.Certificate{}
	for range 8 {
		nest = &certificate.Certificate{Squaring: &certificate.Squaring{Left: list{{Weight: "1", Base: p("1"), Factors: []int{0}}}, Right: p(""), Proof: nest}}
	}
	c := xyzw(g)
	c.Target = g
	put("squarings of a long polynomial", c, nest)
	return out
}

// TestHostile: whatever asks for too much is refused soon, and takes little
// memory. The bounds are far from what is measured, for slow machines.
func TestHostile(t *testing.T) {
	for name, q := range hostile() {
		t.Run(name, func(t *testing.T) {
			runtime.GC()
			var before, after runtime.MemStats
			runtime.ReadMemStats(&before)
			start := time.Now()
			err := certificate.Check(q.Claim, q.Certificate)
			took := time.Since(start)
			runtime.ReadMemStats(&after)
			assert.Error(t, err)
			text, _ := json.Marshal(q)
			t.Logf("%v, %d MB allocated in all, %d MB from the system, %d kB of JSON: %.100v", took,
				(after.TotalAlloc-before.TotalAlloc)>>20, after.Sys>>20, len(text)>>10, err)
			assert.Less(t, len(err.Error()), 500)
			if !testing.Short() {
				assert.Less(t, took, 2*time.Minute, "a hang, not a benchmark")
			}
		})
	}
}

// The exponents of products do not wrap: x to the power of 2^16 is not 1.
func TestExponentsDoNotWrap(t *testing.T) {
	factors := make([]int, 1<<16)
	c := with(claim("x", "-1"), "x", "> 1")
	cert := &certificate.Certificate{Multiplier: list{{Weight: "1", Base: p("1"), Factors: factors}},
		Cofactors: nil, Squares: nil}
	assert.Error(t, certificate.Check(c, cert))
	c = with(claim("x", "1"), "x")
	assert.Error(t, certificate.Check(c, &certificate.Certificate{Squares: list{{Weight: "1", Base: p("1"), Factors: factors}}}))
	var big []int
	for range 66 {
		big = append(big, 0)
	}
	c = with(claim("x", "1"), "x^1000")
	assert.ErrorContains(t, certificate.Check(c, &certificate.Certificate{Squares: list{{Weight: "1", Base: p("1"), Factors: big}}}), "exponent")
}
