package energies_test

import (
	"bytes"
	"context"
	"maps"
	"math/big"
	"os/exec"
	"slices"
	"strings"
	"testing"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/cases/evidence/energies"
	"creaseproof/cases/evidence/tamper"
	"creaseproof/identity/claim"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// The audit links none of the search for proofs and counterexamples.
func TestIndependence(t *testing.T) {
	out, err := exec.Command("go", "list", "-deps", "creaseproof/cases/evidence/energies").Output()
	require.NoError(t, err)
	deps := strings.Fields(string(out))
	require.Contains(t, deps, "creaseproof/quadrature/certified")
	for _, d := range deps {
		assert.NotContains(t, []string{"creaseproof/identity", "creaseproof/identity/gram", "creaseproof/identity/squares", "creaseproof/identity/sample",
			"creaseproof/identity/adversary", "creaseproof/identity/semidefinite", "creaseproof/identity/statement"}, d)
		assert.NotContains(t, d, "gonum")
	}
}

func TestWritten(t *testing.T) {
	list := builtIn(t, "crease-planes", "crease-branches", "crease-sphere")
	list = append(list, layered(t, all))
	for certify, want := range map[bool][]energies.Kind{
		false: {energies.Exact, energies.Numerical},
		true:  {energies.Exact, energies.Numerical, energies.Enclosure},
	} {
		kinds := map[energies.Kind]int{}
		for name, data := range written(t, certify, list...) {
			f, err := energies.Audit(context.Background(), data, nil)
			if assert.NoError(t, err, name) {
				kinds[f.Kind]++
			}
			// The digest guards against accidents.
			_, err = energies.Audit(context.Background(), bytes.Replace(data, []byte(`"energy": `), []byte(`"energy": 1`), 1), nil)
			assert.ErrorContains(t, err, "digest", name)
		}
		assert.Len(t, kinds, len(want), kinds)
		for _, k := range want {
			assert.Greater(t, kinds[k], 2, k)
		}
	}
}

// TestEveryValueCounts changes every value of files, one at a time, with a digest
// that fits. Accepted all the same are the name of the case, a sign of space where
// the case has one, and another choice of the values where the numbers are those
// of that choice as well.
func TestEveryValueCounts(t *testing.T) {
	tried := 0
	for _, certify := range []bool{false, true} {
		files := written(t, certify, layered(t, all))
		for _, name := range slices.Sorted(maps.Keys(files)) {
			f := decoded(t, files[name])
			changes, err := tamper.Changes(files[name])
			require.NoError(t, err)
			for _, c := range changes {
				if c.Path == "digest" || c.Path == "case" {
					continue
				}
				g, err := forged(t, c.Text)
				tried++
				switch {
				case err != nil:
				case c.Path == "source" && g.Source == f.Source+" ":
				case c.Path == "values.k" && c.Old == c.New:
				case c.Path == "schema", bytes.Equal(encoded(t, g), files[name]): // the same after decoding
					assert.Equal(t, f, g, "%s: %s", name, c.Path)
				case c.Path == "energy" || c.Path == "area":
					// A change below the error that is stated.
					assert.InDelta(t, f.Energy, g.Energy, 2**f.Error, "%s: %v", name, c.New)
					assert.InEpsilon(t, *f.Area, *g.Area, 1e-6+2**f.Error/f.Energy, "%s: %v", name, c.New)
				case c.Path == "error":
					assert.InEpsilon(t, *f.Error, *g.Error, 3, "%s: %v", name, c.New)
				default:
					t.Errorf("%s: %s may be %v in place of %v", name, c.Path, c.New, c.Old)
				}
			}
		}
	}
	t.Logf("%d changes", tried)
	assert.Greater(t, tried, 400)
}

func encoded(t *testing.T, f *energies.File) []byte {
	data, err := f.Encode()
	require.NoError(t, err)
	return data
}

// shifted adds numbers of units in the last of its digits to a decimal.
func shifted(t *testing.T, text string, units int64) string {
	x, ok := new(big.Rat).SetString(text)
	require.True(t, ok)
	_, after, _ := strings.Cut(text, ".")
	step := new(big.Rat).SetFrac(big.NewInt(units), new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(len(after))), nil))
	return x.Add(x, step).FloatString(len(after))
}

// follow is the file with another enclosure, and with what follows from that.
func follow(t *testing.T, f *energies.File, lo, hi string) *energies.File {
	t.Helper()
	c, err := cases.Parse(f.Case, []byte(f.Source))
	require.NoError(t, err)
	for i := range c.File.Surfaces {
		if c.File.Surfaces[i].Name != f.Surface {
			continue
		}
		s, err := creases.New(c.Setting, "").Read(&c.File.Surfaces[i])
		require.NoError(t, err)
		r, err := s.EvaluateAt(t.Context(), f.Values, creases.Options{})
		require.NoError(t, err)
		r, err = s.Follow(t.Context(), r, []string{lo, hi})
		require.NoError(t, err)
		g := *f
		g.Enclosure, g.Verdict, g.Expected, g.Reason = r.Enclosure, r.Verdict, r.Expected, r.Reason
		return &g
	}
	t.Fatal("no such surface")
	return nil
}

// An enclosure is accepted where it contains the one that is computed, and its
// verdict, expectation and reason are those that follow from it.
func TestEnclosures(t *testing.T) {
	files := written(t, true, layered(t, wall+"energy = \"2 k^3/3\"\n"+front+"energy = \"(2 pi k^2/3) log(2)\"\n"+strings.Replace(wall, "wall", "no claim", 1)))
	require.Equal(t, 5, len(files))
	for name, data := range files {
		f := decoded(t, data)
		require.Equal(t, energies.Enclosure, f.Kind, name)
		lo, hi := f.Enclosure[0], f.Enclosure[1]
		digits := len(lo)
		a, _ := new(big.Rat).SetString(lo)
		b, _ := new(big.Rat).SetString(hi)
		mid := a.Add(a, b).Quo(a, big.NewRat(2, 1)).FloatString(digits + 10)
		for _, c := range []struct {
			why    string
			lo, hi string
			says   string
		}{
			{"the same", lo, hi, ""},
			{"wider by a digit", shifted(t, lo, -1), shifted(t, hi, 1), ""},
			{"narrower below", shifted(t, lo, 1), hi, "does not contain"},
			{"narrower above", lo, shifted(t, hi, -1), "does not contain"},
			{"a point", mid, mid, "does not contain"},
			{"shifted down", shifted(t, lo, -9), shifted(t, hi, -9), "does not contain"},
			{"shifted up", shifted(t, lo, 9), shifted(t, hi, 9), "does not contain"},
			{"far", "17", "18", ""},
			{"very wide", shifted(t, lo, -1_000_000), shifted(t, hi, 1_000_000), "as wide"},
		} {
			err := audit(t, follow(t, f, c.lo, c.hi))
			switch {
			case c.why == "far":
				assert.Error(t, err, name)
			case c.says == "":
				assert.NoError(t, err, "%s: %s", name, c.why)
			default:
				assert.ErrorContains(t, err, c.says, "%s: %s", name, c.why)
			}
		}
		for _, ends := range [][]string{
			nil, {}, {lo}, {hi, lo}, {lo, hi, hi}, {"", hi}, {lo, "1e999999999"}, {"0e-999999999", hi}, {"-Inf", "Inf"}, {"NaN", hi}, {"0x1", hi},
			{lo, "17/2"}, {lo, hi + "x"}, {"1_0", "1_1"}, {strings.Repeat("9", 1<<20), hi},
		} {
			g := *f
			g.Enclosure = ends
			assert.Error(t, audit(t, &g), "%s: %.50q", name, ends)
		}
		// A wider one with the reason of the narrow one.
		g := *f
		g.Enclosure = []string{shifted(t, lo, -1), shifted(t, hi, 1)}
		assert.Equal(t, f.Claimed == nil, audit(t, &g) == nil, name)
	}
}

// What follows from the enclosure that is computed need not follow from a wider
// one.
func TestVerdictFollowsFromTheEnclosureInTheFile(t *testing.T) {
	surface := strings.Replace(front, "front", "it", 1) + "energy = \"(2 pi k^2/3) log(2)\"\nwithin = "
	of := func(within string) *energies.File {
		for _, data := range written(t, true, layered(t, surface+within+"\n")) {
			return decoded(t, data)
		}
		return nil
	}
	f := of("1e-9")
	require.Equal(t, claim.Proved, f.Verdict)
	require.NoError(t, audit(t, f))
	// As narrow as the enclosure allows.
	within, wider := "", ""
	for _, w := range []string{"1e-13", "3e-14", "1e-14", "3e-15", "1e-15", "7e-16", "5e-16", "3e-16"} {
		if of(w).Verdict == claim.Proved {
			within = w
		}
	}
	require.NotEmpty(t, within)
	f = of(within)
	x, _ := new(big.Rat).SetString(f.Enclosure[0])
	y, _ := new(big.Rat).SetString(f.Enclosure[1])
	width := new(big.Rat).Sub(y, x)
	width.Mul(width, big.NewRat(19, 10))
	wider = x.Sub(x, width).FloatString(40)
	g := *f
	g.Enclosure = []string{wider, f.Enclosure[1]}
	assert.ErrorContains(t, audit(t, &g), "does not follow")
}

func TestOtherVerdictKindSurface(t *testing.T) {
	c := layered(t, all+strings.Replace(wall, "wall", "false", 1)+"energy = \"3 k^3/4\"\nexpect = \"refuted\"\n")
	for _, certify := range []bool{false, true} {
		files := written(t, certify, c)
		for name, data := range files {
			f := decoded(t, data)
			require.NoError(t, audit(t, f), name)
			for _, v := range []claim.Verdict{claim.Proved, claim.Refuted, claim.Supported, claim.Open, ""} {
				g := *f
				g.Verdict = v
				assert.Equal(t, v == f.Verdict, audit(t, &g) == nil, "%s: %s", name, v)
				g = *f
				g.Expected = v
				assert.Equal(t, v == f.Expected, audit(t, &g) == nil, "%s: expected %s", name, v)
			}
			for _, k := range []energies.Kind{energies.Enclosure, energies.Exact, energies.Numerical, "", "faith"} {
				g := *f
				g.Kind = k
				assert.Equal(t, k == f.Kind, audit(t, &g) == nil, "%s: %s", name, k)
			}
			for _, s := range c.File.Surfaces {
				g := *f
				g.Surface = s.Name
				assert.Equal(t, s.Name == f.Surface, audit(t, &g) == nil, "%s as %s", name, s.Name)
			}
			for _, values := range []map[string]string{nil, {"k": "1"}, {"k": "1/2"}, {"k": "1/3"}, {"k": "2/6"}, {"K": "1/3"}, {"k": "1", "eps": "1"}} {
				g := *f
				g.Values = values
				assert.Equal(t, maps.Equal(values, f.Values), audit(t, &g) == nil, "%s for %s", name, values)
			}
		}
	}
}

// A change of the case changes the surface, the claimed energy or what is
// expected, and what was true of the one is not of the other.
func TestOtherSource(t *testing.T) {
	for _, certify := range []bool{false, true} {
		for name, data := range written(t, certify, layered(t, wall+"energy = \"2 k^3/3\"\n")) {
			f := decoded(t, data)
			for old, put := range map[string]string{
				`"2 k^3/3"`: `"2 k^3/3 + 1/10^7"`, `["0", "1", "1"]`: `["0", "1", "1.0000001"]`, `plus = "k x`: `plus = "1.0000001*k x`,
				`minus = "-k x`: `minus = "k x`, `R = "`: `R = "2*`, `k = ["1", "1/2"]`: `k = ["2", "2"]`, `name = "wall"`: `name = "other"`,
				`energy = "2 k^3/3"`: `expect = "open"`, `energy = "R^2`: `energy = "R^4`, `assume = ["eps > 0"]`: `assume = ["k < 0"]`,
				`[space]`: `[space`, `residual = "R"`: `residual = "Q"`,
			} {
				g := *f
				g.Source = strings.Replace(f.Source, old, put, 1)
				require.NotEqual(t, f.Source, g.Source, old)
				assert.Error(t, audit(t, &g), "%s: %s", name, put)
			}
			// The same surface in other words.
			g := *f
			g.Source = "# a comment\n" + strings.Replace(f.Source, `"2 k^3/3"`, `"k^3 (2/3)"`, 1)
			assert.NoError(t, audit(t, &g), name)
			g.Case = "another"
			assert.NoError(t, audit(t, &g), name)
		}
	}
}
