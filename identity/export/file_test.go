package export_test

import (
	"math/big"
	"math/rand/v2"
	"regexp"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity/certificate"
	"creaseproof/identity/export"
)

func everything() []export.Statement {
	var all []export.Statement
	for _, s := range inequalities() {
		all = append(all, s)
	}
	for _, s := range identities() {
		all = append(all, s)
	}
	return all
}

// One file may hold many theorems; nothing in it is left unproved or assumed.
func TestFilesAreWhole(t *testing.T) {
	text, err := export.Coq("all samples", everything()...)
	require.NoError(t, err)
	assert.NotRegexp(t, regexp.MustCompile(`(?i)admit|axiom|parameter|hypothes|abort|conjecture`), text)
	assert.Equal(t, strings.Count(text, "Proof."), strings.Count(text, "Qed."))
	statements := regexp.MustCompile(`(?m)^(Lemma|Theorem) `).FindAllString(text, -1)
	assert.Len(t, statements, strings.Count(text, "Qed."))
	for line := range strings.SplitSeq(text, "\n") {
		assert.Equal(t, strings.TrimRight(line, " "), line)
	}

	again, err := export.Coq("all samples", everything()...)
	require.NoError(t, err)
	assert.Equal(t, text, again, "the same input gave another file")

	text += "\nPrint Assumptions Motzkin__multiplier_with_a_zero.\n"
	text = strings.ReplaceAll(text, "Motzkin__", "Motzkin_")
	out, err := coqc(t, text)
	require.NoError(t, err, out)
	// What the real numbers of Coq's standard library rest on, and no more.
	for line := range strings.SplitSeq(out, "\n") {
		if name, _, ok := strings.Cut(line, " :"); ok && !strings.HasPrefix(line, " ") {
			assert.Contains(t, []string{"ClassicalDedekindReals.sig_not_dec", "ClassicalDedekindReals.sig_forall_dec",
				"FunctionalExtensionality.functional_extensionality_dep"}, name)
		}
	}
}

// Names of every kind become identifiers, different ones for different names,
// and text cannot leave its comment.
func TestNamesAreSafe(t *testing.T) {
	names := []string{
		"R", "R'", "forall", "fun", "lra", "ring", "field", "split", "exact", "S", "O", "I", "H", "P0", "Z0", "D", "E", "t", "x", "s",
		"pow", "IZR", "PI", "cos", "sqrt", "value", "line", "near", "square_nonneg", "Axiom", "Admitted", "Parameters",
		"u_x", "u x", "u-x", "[u_x]", "{u_x}", "u_x(+)", "u_x(-)", "é", "ξ", "xi", "日", "本", "1", "_", "'", "\"", "(*", "*)",
		"cos(theta)", "sqrt(u_x^2 + u_y^2)", "nat", "Prop", "Type", "le", "nil", "intros", "Theorem", "Qed", "as", "using",
		strings.Repeat("a", 300),
	}
	target := certificate.Polynomial{}
	var squares []certificate.Square
	for _, n := range names {
		target = append(target, certificate.Term{C: "1/2", M: map[string]int{n: 2}})
		squares = append(squares, certificate.Square{Weight: "1/2", Base: certificate.Polynomial{{C: "1", M: map[string]int{n: 1}}}})
	}
	evil := "*) (* \" Admitted. Axiom \x00\n bad : False. (*"
	s := &export.Inequality{
		Name: evil, Comment: evil,
		Claim:       &certificate.Claim{Variables: names, Target: target},
		Certificate: &certificate.Certificate{Squares: squares},
	}
	zero := &export.Inequality{ // by continuity, with the same names
		Name: "square_nonneg", Comment: evil,
		Claim: &certificate.Claim{Variables: names, Target: target, Positive: []certificate.Constraint{
			{Poly: certificate.Polynomial{{C: "1/2", M: map[string]int{"t": 1}}}, Strict: true}}},
		Certificate: &certificate.Certificate{Multiplier: []certificate.Square{square("1", "t")}},
	}
	for _, q := range squares {
		base := certificate.Polynomial{{C: "1", M: map[string]int{"t": 1}}}
		for n := range q.Base[0].M {
			base[0].M[n]++
		}
		zero.Certificate.Squares = append(zero.Certificate.Squares, certificate.Square{Weight: "1/2", Base: base})
	}
	text, err := export.Coq(evil, s, s, zero)
	require.NoError(t, err)
	assert.NotRegexp(t, regexp.MustCompile(`(?i)admit|axiom|parameter|hypothes|abort`), text)
	out, err := coqc(t, text)
	require.NoError(t, err, "%s\n%s", out, text)
}

// randomSquares is a sum of squares of degree 8 in four variables with about
// 200 terms, and its certificate; the multiplier vanishes where x = y = 0.
func randomSquares(t *testing.T, multiplier bool) *export.Inequality {
	rng := rand.New(rand.NewPCG(1, 2))
	names := []string{"x", "y", "z", "t"}
	type monomial [4]int
	var bases []map[monomial]*big.Rat
	total := map[monomial]*big.Rat{}
	s := &export.Inequality{Name: "large", Claim: &certificate.Claim{Variables: names}, Certificate: &certificate.Certificate{}}
	write := func(p map[monomial]*big.Rat) certificate.Polynomial {
		var keys []monomial
		for m := range p {
			keys = append(keys, m)
		}
		slices.SortFunc(keys, func(a, b monomial) int { return slices.Compare(a[:], b[:]) })
		var out certificate.Polynomial
		for _, m := range keys {
			if p[m].Sign() == 0 {
				continue
			}
			e := map[string]int{}
			for i, k := range m {
				if k > 0 {
					e[names[i]] = k
				}
			}
			out = append(out, certificate.Term{C: p[m].RatString(), M: e})
		}
		return out
	}
	count := 30
	if multiplier {
		count = 4 // Coq takes longer where it argues by continuity
	}
	for range count {
		base := map[monomial]*big.Rat{}
		for range 12 {
			var m monomial
			for range rng.IntN(5) {
				m[rng.IntN(4)]++
			}
			base[m] = big.NewRat(rng.Int64N(2001)-1000, rng.Int64N(6)+1)
		}
		bases = append(bases, base)
		for a, x := range base {
			for b, y := range base {
				var m monomial
				for i := range m {
					m[i] = a[i] + b[i]
				}
				if total[m] == nil {
					total[m] = new(big.Rat)
				}
				total[m].Add(total[m], new(big.Rat).Mul(x, y))
			}
		}
	}
	s.Claim.Target = write(total)
	factors := []string{"1"}
	if multiplier {
		factors = []string{"x", "y"}
		s.Certificate.Multiplier = []certificate.Square{square("1", "x"), square("1", "y")}
	}
	for _, f := range factors {
		for _, b := range bases {
			q := map[monomial]*big.Rat{}
			for m, x := range b {
				if f == "x" {
					m[0]++
				}
				if f == "y" {
					m[1]++
				}
				q[m] = x
			}
			s.Certificate.Squares = append(s.Certificate.Squares, certificate.Square{Weight: "1", Base: write(q)})
		}
	}
	require.NoError(t, certificate.Check(s.Claim, s.Certificate))
	return s
}

// triangular is a sum of squares of linear forms, as elimination gives them,
// whose denominators have fifteen digits each and nothing in common.
func triangular(t *testing.T) *export.Inequality {
	rng := rand.New(rand.NewPCG(3, 4))
	names := []string{"a", "b", "c", "d", "e"}
	s := &export.Inequality{Name: "large numbers", Claim: &certificate.Claim{Variables: names}, Certificate: &certificate.Certificate{}}
	draw := func() *big.Rat { return big.NewRat(rng.Int64N(1e15)+1, rng.Int64N(1e15)+1) }
	total := map[[2]int]*big.Rat{}
	for k := range names {
		w, row := draw(), map[int]*big.Rat{}
		var base certificate.Polynomial
		for i := k; i < len(names); i++ {
			row[i] = draw()
			base = append(base, certificate.Term{C: row[i].RatString(), M: map[string]int{names[i]: 1}})
		}
		s.Certificate.Squares = append(s.Certificate.Squares, certificate.Square{Weight: w.RatString(), Base: base})
		for i, x := range row {
			for j, y := range row {
				key := [2]int{min(i, j), max(i, j)}
				if total[key] == nil {
					total[key] = new(big.Rat)
				}
				total[key].Add(total[key], new(big.Rat).Mul(w, new(big.Rat).Mul(x, y)))
			}
		}
	}
	for i := range names {
		for j := i; j < len(names); j++ {
			m := map[string]int{names[i]: 1}
			m[names[j]]++
			s.Claim.Target = append(s.Claim.Target, certificate.Term{C: total[[2]int{i, j}].RatString(), M: m})
		}
	}
	require.NoError(t, certificate.Check(s.Claim, s.Certificate))
	return s
}

func TestCoqAcceptsLargeCertificates(t *testing.T) {
	if testing.Short() {
		t.Skip("skipped in short runs: large files")
	}
	for _, s := range []*export.Inequality{randomSquares(t, false), randomSquares(t, true), triangular(t)} {
		text, err := export.Coq("", s)
		require.NoError(t, err)
		start := time.Now()
		out, err := coqc(t, text)
		require.NoError(t, err, out)
		t.Logf("%d terms, %d squares, %d in the multiplier: %d bytes, coqc %v", len(s.Claim.Target),
			len(s.Certificate.Squares), len(s.Certificate.Multiplier), len(text), time.Since(start).Round(time.Millisecond))
	}
}

func TestMalformedInputIsAnError(t *testing.T) {
	claim := func() *certificate.Claim {
		return &certificate.Claim{Variables: []string{"x"}, Target: poly("x^2")}
	}
	cert := func() *certificate.Certificate {
		return &certificate.Certificate{Squares: []certificate.Square{square("1", "x")}}
	}
	bad := map[string]export.Statement{
		"no claim":         &export.Inequality{Certificate: cert()},
		"no certificate":   &export.Inequality{Claim: claim()},
		"twice declared":   &export.Inequality{Claim: &certificate.Claim{Variables: []string{"x", "x"}}, Certificate: cert()},
		"undeclared":       &export.Inequality{Claim: &certificate.Claim{Variables: []string{"y"}, Target: poly("x^2")}, Certificate: cert()},
		"no number":        &export.Inequality{Claim: claim(), Certificate: &certificate.Certificate{Squares: []certificate.Square{square("1e9", "x")}}},
		"division by zero": &export.Inequality{Claim: claim(), Certificate: &certificate.Certificate{Squares: []certificate.Square{square("1/0", "x")}}},
		"no such factor":   &export.Inequality{Claim: claim(), Certificate: &certificate.Certificate{Squares: []certificate.Square{square("1", "x", 3)}}},
		"cofactors":        &export.Inequality{Claim: claim(), Certificate: &certificate.Certificate{Cofactors: relation("1")}},
		"huge exponent":    &export.Inequality{Claim: &certificate.Claim{Variables: []string{"x"}, Target: poly("x^99999999")}, Certificate: cert()},
		"one side":         &export.Inequality{Claim: claim(), Certificate: cert(), Left: num("0")},
		"missing part":     &export.Identity{Variables: []string{"x"}, Equalities: []export.Equality{{Left: v("x")}}},
		"nothing":          &export.Identity{Variables: []string{"x"}},
		"tree undeclared":  &export.Identity{Equalities: []export.Equality{{Left: v("x"), Right: v("x")}}},
		"tree exponent":    &export.Identity{Variables: []string{"x"}, Equalities: []export.Equality{{Left: pow(v("x"), 1<<30), Right: v("x")}}},
		"tree over zero":   &export.Identity{Variables: []string{"x"}, Equalities: []export.Equality{{Left: over(v("x"), minus(v("x"), v("x"))), Right: v("x")}}},
		"nested number":    &export.Identity{Variables: []string{"x"}, Equalities: []export.Equality{{Left: neg(num("0x1")), Right: v("x")}}},
	}
	deep := v("x")
	for range 100_000 {
		deep = neg(deep)
	}
	bad["deep"] = &export.Identity{Variables: []string{"x"}, Equalities: []export.Equality{{Left: deep, Right: v("x")}}}
	for name, s := range bad {
		_, err := export.Coq("", s)
		assert.Error(t, err, name)
	}
	for _, name := range []string{"no claim", "no certificate", "twice declared", "undeclared", "no such factor", "deep", "missing part"} {
		_, err := export.TeX(bad[name], export.TeXOptions{})
		assert.Error(t, err, name)
	}
}
