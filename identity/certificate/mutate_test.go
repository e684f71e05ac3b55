package certificate_test

import (
	"encoding/json"
	"fmt"
	"maps"
	"math/big"
	"math/rand/v2"
	"slices"
	"strconv"
	"strings"
	"testing"

	"creaseproof/identity/certificate"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// mutant is a change of one field: at a path such as "certificate.squares.0.weight".
type mutant struct {
	path string
	kind string
	data any // the whole document after the change
}

// mutants changes every number, name, flag and list of a document, each in
// several ways.
func mutants(t *testing.T, q problem) []mutant {
	var out []mutant
	text, err := json.Marshal(q)
	require.NoError(t, err)
	var doc any
	require.NoError(t, json.Unmarshal(text, &doc))
	var walk func(x any, path string, put func(any) any)
	walk = func(x any, path string, put func(any) any) {
		add := func(kind string, y any) { out = append(out, mutant{path, kind, put(y)}) }
		switch x := x.(type) {
		case bool:
			add("flip", !x)
		case float64:
			for _, d := range []float64{1, -1, 2} {
				add("step", x+d)
			}
		case string:
			r, ok := new(big.Rat).SetString(x)
			if !ok {
				add("rename", "other")
				return
			}
			add("negate", new(big.Rat).Neg(r).RatString())
			for _, y := range []*big.Rat{big.NewRat(1, 1), big.NewRat(-1, 1), big.NewRat(1, 1_000_000_007)} {
				add("shift", y.Add(y, r).RatString())
			}
			add("scale", new(big.Rat).Mul(r, big.NewRat(1_000_001, 1_000_000)).RatString())
			for _, bad := range []string{"", "x", x + "/0", "0" + x, "+" + x, x + " ", x + "e0", "0x" + x} {
				add("malformed", bad)
			}
		case []any:
			for i := range x {
				add("drop", slices.Delete(slices.Clone(x), i, i+1))
				add("twice", slices.Insert(slices.Clone(x), i, x[i]))
				if i > 0 && !same(x[i], x[i-1]) {
					y := slices.Clone(x)
					y[i-1], y[i] = y[i], y[i-1]
					add("swap", y)
				}
				walk(x[i], fmt.Sprint(path, ".", i), func(v any) any {
					y := slices.Clone(x)
					y[i] = v
					return put(y)
				})
			}
		case map[string]any:
			for _, k := range slices.Sorted(maps.Keys(x)) {
				y := maps.Clone(x)
				delete(y, k)
				add("without "+k, y)
				if strings.HasSuffix(path, ".m") {
					for _, v := range append(slices.Clone(q.Claim.Variables), "other") {
						if _, there := x[v]; there {
							continue
						}
						z := maps.Clone(y)
						z[v] = x[k]
						add("variable", z)
					}
				}
				walk(x[k], path+"."+k, func(v any) any {
					y := maps.Clone(x)
					y[k] = v
					return put(y)
				})
			}
		}
	}
	walk(doc, "", func(x any) any { return x })
	return out
}

func same(a, b any) bool { return fmt.Sprint(a) == fmt.Sprint(b) }

// used are the assumptions that some term has as a factor, and the equations
// that have a cofactor somewhere.
func used(cert *certificate.Certificate) (positive, zero map[int]bool) {
	positive, zero = map[int]bool{}, map[int]bool{}
	for c := cert; c != nil; {
		lists, cofactors := [][]certificate.Square{c.Multiplier, c.Squares}, c.Cofactors
		if c.Squaring != nil {
			lists, cofactors = append(lists, c.Squaring.Left), c.Squaring.Cofactors
		}
		for _, s := range slices.Concat(lists...) {
			for _, f := range s.Factors {
				positive[f] = true
			}
		}
		for k, t := range cofactors {
			zero[k] = zero[k] || len(t) > 0
		}
		if c.Squaring == nil {
			break
		}
		c = c.Squaring.Proof
	}
	return positive, zero
}

// harmless are the changes after which the certificate may be one still: the
// order of a sum or of factors; the sign of the one term of a base; what is
// said of assumptions and equations that the proof does not use, and that an
// assumption is strict; variables that occur nowhere, and the order of those
// that do; a part that was empty.
func harmless(q problem, m mutant) bool {
	path := strings.Split(strings.TrimPrefix(m.path, "."), ".")
	inPositive := len(path) > 1 && path[1] == "positive" && path[0] == "claim"
	inZero := len(path) > 1 && path[1] == "zero" && path[0] == "claim"
	switch {
	case m.kind == "swap" || len(path) == 2 && (inPositive || inZero):
		return true // the identity, which is tested, depends on the order where it matters
	case len(path) > 1 && path[0] == "claim" && path[1] == "variables":
		return true
	case strings.HasPrefix(m.kind, "without ") && len(path) < 3, m.kind == "without right":
		return true // empty parts
	case inPositive && (len(path) == 4 && path[3] == "strict" || m.kind == "without strict"):
		return true
	case inPositive || inZero:
		positive, zero := used(q.Certificate)
		i, _ := strconv.Atoi(path[2])
		return inPositive && !positive[i] || inZero && !zero[i]
	case m.kind == "without m":
		return true // of a constant
	case m.kind == "negate" && len(path) > 3 && path[len(path)-3] == "base":
		return true // where it is the only term
	}
	return false
}

// TestMutants changes each field of certificates and of their claims, one at a
// time. Whatever is accepted all the same has to be one of the harmless changes, and
// the identity has to hold for what was changed, by other means.
func TestMutants(t *testing.T) {
	all := valid()
	for name, q := range library(t) {
		all[name] = q
	}
	rng := rand.New(rand.NewPCG(1, 2))
	tried, accepted, features := 0, 0, map[string]int{}
	for _, name := range slices.Sorted(maps.Keys(all)) {
		q := all[name]
		require.NoError(t, certificate.Check(q.Claim, q.Certificate), name)
		for feature, has := range map[string]bool{
			"multiplier": len(q.Certificate.Multiplier) > 0, "cofactors": len(q.Certificate.Cofactors) > 0, "squaring": q.Certificate.Squaring != nil,
			"assumptions": len(q.Claim.Positive) > 0, "continuity": certificate.UsesContinuity(q.Claim, q.Certificate),
		} {
			if has {
				features[feature]++
			}
		}
		list := mutants(t, q)
		if n := 600; len(list) > n { // of the largest, a part of it
			rng.Shuffle(len(list), func(i, k int) { list[i], list[k] = list[k], list[i] })
			list = list[:n]
		}
		for _, m := range list {
			tried++
			text, err := json.Marshal(m.data)
			require.NoError(t, err)
			var c problem
			if json.Unmarshal(text, &c) != nil || certificate.Check(c.Claim, c.Certificate) != nil {
				continue
			}
			accepted++
			assert.True(t, harmless(q, m), "%s: %s of %s was accepted", name, m.kind, m.path)
			assert.True(t, identityHolds(c, rng), "%s: %s of %s was accepted and is no identity", name, m.kind, m.path)
			if len(c.Claim.Variables) < 4 {
				holds(t, c.Claim)
			}
		}
	}
	t.Logf("%d certificates %v, %d mutants, %d of them harmless", len(all), features, tried, accepted)
	for _, f := range []string{"multiplier", "cofactors", "squaring", "assumptions", "continuity"} {
		assert.Greater(t, features[f], 5, f)
	}
	assert.Less(t, accepted, tried/10)
}

// TestStrictness: the flag matters where the multiplier rests on it.
func TestStrictness(t *testing.T) {
	q := problem{with(claim("x a", "a^2"), "> 1 - x^2"), &certificate.Certificate{
		Multiplier: list{square("1", "1", 0)}, Squares: list{square("1", "a", 0)}}}
	require.NoError(t, certificate.Check(q.Claim, q.Certificate))
	q.Claim.Positive[0].Strict = false
	require.Error(t, certificate.Check(q.Claim, q.Certificate))
}

// TestSwappedClaims: a certificate proves its own claim only.
func TestSwappedClaims(t *testing.T) {
	all := library(t)
	names := slices.Sorted(maps.Keys(all))
	for i, a := range names {
		for _, b := range []string{names[(i+1)%len(names)], names[(i+7)%len(names)]} {
			if same(all[a].Claim.Target, all[b].Claim.Target) {
				continue
			}
			c := problem{all[a].Claim, all[b].Certificate}
			if certificate.Check(c.Claim, c.Certificate) == nil {
				// Two claims may be the same up to the names of the claims.
				assert.True(t, identityHolds(c, rand.New(rand.NewPCG(3, 4))), "%s by %s", a, b)
				t.Logf("the certificate of %s proves %s as well", b, a)
			}
		}
	}
}
