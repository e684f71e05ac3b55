package evidence_test

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"maps"
	"math/big"
	"os/exec"
	"slices"
	"strings"
	"testing"

	"creaseproof/cases"
	"creaseproof/cases/evidence"
	"creaseproof/identity/certificate"
	"creaseproof/identity/claim"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

var some = []string{"young-bounds", "forms", "means", "roots", "layered-plane", "false-claims", "well-bounds", "box-bounds"}

// The audit stands on the reduction and the checker alone.
func TestIndependence(t *testing.T) {
	out, err := exec.Command("go", "list", "-deps", "creaseproof/cases/evidence").Output()
	require.NoError(t, err)
	deps := strings.Fields(string(out))
	require.Contains(t, deps, "creaseproof/identity/certificate")
	for _, d := range deps {
		assert.NotContains(t, []string{"creaseproof/identity", "creaseproof/identity/gram", "creaseproof/identity/squares", "creaseproof/identity/sample",
			"creaseproof/identity/adversary", "creaseproof/identity/semidefinite", "creaseproof/identity/statement"}, d)
		assert.NotContains(t, d, "gonum")
	}
}

func TestWritten(t *testing.T) {
	kinds := map[evidence.Kind]int{}
	for name, data := range written(t, some...) {
		f, err := evidence.Audit(context.Background(), data)
		if assert.NoError(t, err, name) {
			kinds[f.Kind]++
		}
		// The digest guards against accidents.
		at := bytes.Index(data, []byte(`"seed": 1`)) + len(`"seed": `)
		other := slices.Clone(data)
		other[at] = '2'
		_, err = evidence.Audit(context.Background(), other)
		assert.ErrorContains(t, err, "digest", name)
	}
	t.Log(kinds)
	for _, k := range []evidence.Kind{evidence.Exact, evidence.Certificate, evidence.Witness, evidence.Best} {
		assert.Greater(t, kinds[k], 3, k)
	}
}

// numbers changes each number and flag of some parts of a file.
func numbers(doc map[string]any, yield func(path string, old, changed any)) {
	var walk func(x any, path string, put func(any))
	walk = func(x any, path string, put func(any)) {
		try := func(y any) {
			put(y)
			yield(path, x, y)
			put(x)
		}
		switch x := x.(type) {
		case bool:
			try(!x)
		case float64:
			try(x + 1)
		case string:
			r, ok := new(big.Rat).SetString(x)
			if !ok {
				try(x + "1")
				return
			}
			one := big.NewRat(1, 1)
			try(new(big.Rat).Add(r, one).RatString())
			try(new(big.Rat).Add(r, big.NewRat(1, 1_000_003)).RatString())
			if r.Sign() != 0 {
				try(new(big.Rat).Neg(r).RatString())
			}
			try("")
		case []any:
			for i := range x {
				walk(x[i], fmt.Sprint(path, ".", i), func(y any) { x[i] = y })
			}
		case map[string]any:
			for _, k := range slices.Sorted(maps.Keys(x)) {
				walk(x[k], path+"."+k, func(y any) { x[k] = y })
			}
		}
	}
	for _, part := range []string{"problem", "certificate", "witness", "ends", "unbounded", "null"} {
		walk(doc[part], part, func(y any) { doc[part] = y })
	}
}

// TestNumbersCount changes numbers, with a digest that fits. What is accepted
// all the same: the sign of the one term of a base, and a value of a jet or an
// angle at another point of which all that is recorded is true as well: the
// audit evaluates both sides there, and finds the recorded ones. Claims with
// even powers, and jets that only the assumptions mention, have such points.
func TestNumbersCount(t *testing.T) {
	tried, points, pointsKept := 0, 0, 0
	for name, data := range written(t, "young-bounds", "means", "false-claims", "well-bounds") {
		var doc map[string]any
		require.NoError(t, json.Unmarshal(data, &doc))
		n := 0
		numbers(doc, func(path string, old, changed any) {
			if n++; n > 150 && n%17 != 0 { // a part of the largest
				return
			}
			text, err := json.Marshal(doc)
			require.NoError(t, err)
			var f evidence.File
			if json.Unmarshal(text, &f) != nil {
				return
			}
			tried++
			accepted := audit(t, &f) == nil
			if strings.Contains(path, ".Jet.") || strings.Contains(path, ".Angle.") {
				points++
				if accepted {
					assert.NotEmpty(t, changed, "%s: %s", name, path)
					pointsKept++
				}
				return
			}
			if accepted && !signOfBase(doc, path, old, changed) {
				t.Errorf("%s: %s may be %v in place of %v", name, path, changed, old)
			}
		})
	}
	t.Logf("%d changes, %d of them of points, of which %d give other true points", tried, points, pointsKept)
	assert.Greater(t, tried, 1000)
	assert.Less(t, pointsKept, points/3)
}

// signOfBase is the one change that changes nothing: (-q)² = q².
func signOfBase(doc map[string]any, path string, old, changed any) bool {
	keys := strings.Split(path, ".")
	n := len(keys)
	if n < 3 || keys[n-3] != "base" {
		return false
	}
	var x any = doc
	for _, k := range keys[:n-2] {
		if m, ok := x.(map[string]any); ok {
			x = m[k]
		} else {
			var i int
			_, _ = fmt.Sscan(k, &i)
			x = x.([]any)[i]
		}
	}
	return len(x.([]any)) == 1 && strings.TrimPrefix(old.(string), "-") == strings.TrimPrefix(changed.(string), "-")
}

func TestOtherVerdictKindClaim(t *testing.T) {
	files := written(t, "young-bounds", "means", "false-claims")
	truth := map[string]claim.Verdict{}
	for _, data := range files {
		f := decoded(t, data)
		truth[f.Case+f.Claim] = f.Verdict
	}
	for name, data := range files {
		f := decoded(t, data)
		for _, v := range []claim.Verdict{claim.Proved, claim.Refuted, claim.Supported, claim.Open, ""} {
			g := *f
			g.Verdict = v
			assert.Equal(t, v == f.Verdict, audit(t, &g) == nil, "%s: %s", name, v)
		}
		for _, k := range []evidence.Kind{evidence.Exact, evidence.Certificate, evidence.Witness, evidence.Best, "", "faith"} {
			g := *f
			g.Kind = k
			assert.Equal(t, k == f.Kind, audit(t, &g) == nil, "%s: %s", name, k)
		}
		c, err := cases.Parse(f.Case, []byte(f.Source))
		require.NoError(t, err)
		for _, other := range c.Claims {
			g := *f
			g.Claim = other.Name
			if audit(t, &g) == nil {
				assert.Equal(t, truth[f.Case+other.Name], g.Verdict, "%s as %s", name, other.Name)
			}
		}
		g := *f
		g.Claim = "no such claim"
		assert.Error(t, audit(t, &g), name)
		for part, drop := range map[string]func(*evidence.File){
			"problem": func(g *evidence.File) { g.Problem = nil }, "certificate": func(g *evidence.File) { g.Certificate = nil },
			"witness": func(g *evidence.File) { g.Witness = nil }, "ends": func(g *evidence.File) { g.Ends = nil },
			"unbounded": func(g *evidence.File) { g.Unbounded = nil }, "null": func(g *evidence.File) { g.Null = nil },
		} {
			g := *f
			drop(&g)
			a, _ := json.Marshal(f)
			b, _ := json.Marshal(&g)
			assert.Equal(t, bytes.Equal(a, b), audit(t, &g) == nil, "%s without %s", name, part)
		}
	}
}

const small = `title = "Small"
[space]
coordinates = ["x", "y"]
unknowns = ["u"]
constants = ["lambda", "a"]
assume = [%s]

[[claim]]
name = "it"
states = %q
%s
`

func source(assume, states, more string) string { return fmt.Sprintf(small, assume, states, more) }

// A change of the source changes the claim, and what was proved is no proof of
// the other.
func TestOtherSource(t *testing.T) {
	c, err := cases.Parse("small", []byte(source(`"a > 0"`, "u_x^2 + u_y^2 >= 2 u_x u_y", "")))
	require.NoError(t, err)
	for _, data := range writtenFor(t, c) {
		f := decoded(t, data)
		require.Equal(t, evidence.Certificate, f.Kind)
		for _, states := range []string{"u_x^2 + u_y^2 >= 3 u_x u_y", "u_x^2 + u_y^2 <= 2 u_x u_y", "u_x^2 + u_y^2 = 2 u_x u_y", "nonsense"} {
			f.Source = source(`"a > 0"`, states, "")
			assert.Error(t, audit(t, f), states)
		}
		f.Source = source(`"a > 0"`, "u_x^2 + u_y^2 >= 2 u_x u_y", "best = \"a\"")
		assert.Error(t, audit(t, f))
		// The same claim in other words stays proved.
		f.Source = source(`"a > 0"`, "2 u_x u_y <= u_y^2 + u_x^2", "")
		assert.NoError(t, audit(t, f))
	}
}

// A point where an inequality fails says nothing of it up to a divergence.
func TestPointwiseWitness(t *testing.T) {
	c, err := cases.Parse("small", []byte(source(`"a > 0"`, "u_xx u_yy - u_xy^2 <= u_xx^2", "")))
	require.NoError(t, err)
	for _, data := range writtenFor(t, c) {
		f := decoded(t, data)
		require.Equal(t, claim.Refuted, f.Verdict)
		require.NoError(t, audit(t, f))
		f.Source = source(`"a > 0"`, "u_xx u_yy - u_xy^2 <= u_xx^2", "modulo = \"divergence\"")
		assert.ErrorContains(t, audit(t, f), "divergence")
	}
}

// Where the slope vanishes on all that is assumed, no side has an end, and the
// inequality may hold for no value at all.
func TestNoValue(t *testing.T) {
	square := func(factor int) *certificate.Certificate {
		return &certificate.Certificate{Squares: []certificate.Square{{Weight: "1", Factors: []int{factor}, Base: certificate.Polynomial{{C: "1"}}}}}
	}
	about := func(c string) *certificate.Claim {
		one := func(c string) certificate.Polynomial {
			return certificate.Polynomial{{C: c, M: map[string]int{"a": 1}}}
		}
		return &certificate.Claim{Variables: []string{"a"}, Positive: []certificate.Constraint{{Poly: one("1")}, {Poly: one("-1")}}, Target: one(c)}
	}
	f := &evidence.File{
		Schema: evidence.Schema, Case: "small", Claim: "it", Verdict: claim.Proved, Kind: evidence.Best, Seed: 1, Solution: "lambda arbitrary",
		Unbounded: []claim.Unbounded{{Upper: true, Reduced: about("1"), Certificate: square(0)}, {Reduced: about("-1"), Certificate: square(1)}},
		Source:    source(`"a >= 0", "a <= 0"`, "lambda a >= 1", "best = \"lambda\""),
	}
	assert.ErrorContains(t, audit(t, f), "no value")
	f.Unbounded[0].Reduced = nil
	f.Ends = []claim.End{{}}
	assert.Error(t, audit(t, f))
	f.Ends[0].Upper = true
	f.Unbounded = []claim.Unbounded{{}}
	assert.Error(t, audit(t, f))
}
