package formula

import (
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

func TestScopeRefuses(t *testing.T) {
	for _, c := range []struct {
		config ScopeConfig
		name   string
		part   string
	}{
		{ScopeConfig{Coordinates: []string{"x", "ξ", `\xi`}}, `\xi`, "twice"},
		{ScopeConfig{Constants: []string{"eps"}, Lets: []string{"ϵ"}}, "ϵ", "already that of a constant"},
		{ScopeConfig{Unknowns: []string{"u"}, Lets: []string{"u"}}, "u", "already that of an unknown"},
		{ScopeConfig{Unknowns: []string{"u_x"}}, "u_x", "_"},
		{ScopeConfig{Unknowns: []string{"2u"}}, "2u", "letter"},
		{ScopeConfig{Unknowns: []string{"ü"}}, "ü", "ASCII or Greek"},
		{ScopeConfig{Unknowns: []string{""}}, "", "empty"},
		{ScopeConfig{Unknowns: []string{`\foo`}}, `\foo`, "Greek"},
		{ScopeConfig{Unknowns: []string{strings.Repeat("u", 65)}}, strings.Repeat("u", 65), "64"},
		{ScopeConfig{Constants: []string{"π"}}, "π", "reserved"},
		{ScopeConfig{Coordinates: []string{"x", "xx"}}, "xx", `"xx" could be read as`},
		{ScopeConfig{Coordinates: []string{"x", "i"}, Axes: []string{"ξ"}}, "xi", `"x i"`},
		{ScopeConfig{Coordinates: []string{"a", "ab", "ba"}}, "ab", `"aba"`},
	} {
		_, err := NewScope(c.config)
		var e *NameError
		require.ErrorAs(t, err, &e)
		require.Equal(t, c.name, e.Name)
		require.ErrorContains(t, err, c.part)
	}
	for _, name := range []string{
		"in", "nu", "pi", "div", "grad", "euler", "sup", "entropy", "span", "divergence",
		"sin", "cos", "tan", "sinh", "cosh", "tanh", "exp", "log", "sqrt", "erf", "abs", "norm",
	} {
		_, err := NewScope(ScopeConfig{Constants: []string{name}})
		require.ErrorContains(t, err, "reserved", name)
	}
}

func TestWith(t *testing.T) {
	s := layered(t)
	e, err := s.With("ε", "q", "q")
	require.NoError(t, err, "a constant declared already stays one")
	require.Equal(t, Constant, e.Kind("q"))
	require.Equal(t, Undeclared, s.Kind("q"), "With leaves its receiver alone")
	_, err = s.With("u")
	require.ErrorContains(t, err, "unknown")
	_, err = s.With("sup")
	require.ErrorContains(t, err, "reserved")
}

// A uniquely decodable code over which the longest match goes wrong.
func TestSplitLooksBeyondTheLongestMatch(t *testing.T) {
	code := []string{"a", "ab", "bb"}
	_, _, ok := ambiguity(code)
	require.False(t, ok)
	require.Equal(t, []string{"a", "bb"}, split("abb", code))
	require.Equal(t, []string{"ab", "bb"}, split("abbb", code))
	require.Nil(t, split("b", code))
	require.Nil(t, split("", code))
}

// readings counts the sequences of words that spell s.
func readings(s string, words []string) int {
	if s == "" {
		return 1
	}
	n := 0
	for _, w := range words {
		if strings.HasPrefix(s, w) {
			n += readings(s[len(w):], words)
		}
	}
	return n
}

// The algorithm against a search through all short strings.
func TestAmbiguityAgainstExhaustion(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	found := 0
	for range 400 {
		set := map[string]bool{}
		var words []string
		for range 2 + r.IntN(3) {
			w := make([]byte, 1+r.IntN(3))
			for i := range w {
				w[i] = "ab"[r.IntN(2)]
			}
			if !set[string(w)] {
				set[string(w)] = true
				words = append(words, string(w))
			}
		}
		one, two, ok := ambiguity(words)
		if ok {
			found++
			require.Equal(t, strings.Join(one, ""), strings.Join(two, ""))
			require.NotEqual(t, one, two)
			require.GreaterOrEqual(t, readings(strings.Join(one, ""), words), 2)
			continue
		}
		for length := 1; length <= 10; length++ {
			for bits := range 1 << length {
				s := make([]byte, length)
				for i := range s {
					s[i] = "ab"[bits>>i&1]
				}
				require.LessOrEqual(t, readings(string(s), words), 1, "%v %s", words, s)
			}
		}
	}
	require.Greater(t, found, 50)
	require.Less(t, found, 350)
}

func TestFoldName(t *testing.T) {
	for name, want := range map[string]string{
		"ε": "eps", "ϵ": "eps", "epsilon": "eps", `\epsilon`: "eps", `\varepsilon`: "eps", "eps": "eps",
		"θ": "theta", "ϑ": "theta", `\vartheta`: "theta", "Θ": "Theta", "Σ": "Sigma", `\Sigma`: "Sigma",
		"ς": "sigma", "µ": "mu", "x1": "x1", "ξ2": "xi2", "Ω": "Omega", "φ": "phi", "ϕ": "phi", `\varphi`: "phi",
	} {
		got, err := FoldName(name)
		require.NoError(t, err)
		require.Equal(t, want, got)
	}
	seen := map[string]rune{}
	for r := rune(0x391); r <= 0x3c9; r++ {
		name, ok := greekLetter(r)
		if !ok || r == 'ς' {
			continue
		}
		require.Zero(t, seen[name], name)
		seen[name] = r
		back, ok := greekRune(name)
		require.True(t, ok)
		require.Equal(t, string(r), string(back))
	}
	require.Len(t, seen, 48)
}
