package certificate_test

import (
	"encoding/json"
	"maps"
	"math/big"
	"math/rand/v2"
	"slices"
	"testing"
	"time"

	"creaseproof/identity/certificate"
)

// FuzzCheck: no input makes the checker fail or go on for long, and what it
// accepts holds at every point that is tried.
func FuzzCheck(f *testing.F) {
	all := valid()
	for _, name := range slices.Sorted(maps.Keys(all)) {
		text, err := json.Marshal(all[name])
		if err != nil {
			f.Fatal(err)
		}
		f.Add(text)
	}
	f.Add([]byte(`{"claim":{"variables":["x"],"target":[{"c":"-1"}]},"certificate":{"multiplier":[{"weight":"1","base":[{"c":"1","m":{"x":1}}]}],"cofactors":[]}}`))
	f.Add([]byte(`{"claim":null,"certificate":{"squaring":{"proof":{}}}}`))
	f.Fuzz(func(t *testing.T, data []byte) {
		var q problem
		if json.Unmarshal(data, &q) != nil {
			return
		}
		start := time.Now()
		err := certificate.Check(q.Claim, q.Certificate)
		if took := time.Since(start); took > 2*time.Minute {
			t.Fatalf("%v", took)
		}
		if err != nil {
			return
		}
		certificate.UsesContinuity(q.Claim, q.Certificate)
		holds(t, q.Claim)
	})
}

// holds evaluates a claim at random points that satisfy what it assumes.
func holds(t *testing.T, c *certificate.Claim) {
	degree := 0
	for _, q := range slices.Concat(polynomials(c.Positive), c.Zero, []poly{c.Target}) {
		for _, term := range q {
			for _, e := range term.M {
				degree += e
			}
		}
	}
	if degree > 2000 || len(c.Variables) > 20 {
		return // evaluation takes too long
	}
	rng := rand.New(rand.NewPCG(5, uint64(degree)))
	for range 600 {
		x := point{}
		for _, v := range c.Variables {
			x[v] = big.NewRat(rng.Int64N(9)-4, 1+rng.Int64N(4))
		}
		if rng.IntN(2) == 0 && len(c.Variables) > 1 { // a pair on the circle
			m := big.NewRat(rng.Int64N(9)-4, 1+rng.Int64N(4))
			one, sq := big.NewRat(1, 1), new(big.Rat).Mul(m, m)
			den := new(big.Rat).Add(one, sq)
			i := rng.IntN(len(c.Variables) - 1)
			x[c.Variables[i]] = new(big.Rat).Quo(new(big.Rat).Sub(one, sq), den)
			x[c.Variables[i+1]] = new(big.Rat).Quo(new(big.Rat).Add(m, m), den)
		}
		if assumed(c, x) && at(c.Target, x).Sign() < 0 {
			t.Fatalf("accepted, and false at %v: %+v", x, c)
		}
	}
}

func polynomials(l []certificate.Constraint) []poly {
	var out []poly
	for _, g := range l {
		out = append(out, g.Poly)
	}
	return out
}

func assumed(c *certificate.Claim, x point) bool {
	for _, g := range c.Positive {
		if s := at(g.Poly, x).Sign(); s < 0 || s == 0 && g.Strict {
			return false
		}
	}
	for _, h := range c.Zero {
		if at(h, x).Sign() != 0 {
			return false
		}
	}
	return true
}

// The certificates of the built-in cases prove what holds at random points.
func TestLibraryHolds(t *testing.T) {
	for _, q := range library(t) {
		holds(t, q.Claim)
	}
}
