package cases

import (
	"testing"

	"github.com/stretchr/testify/assert"

	"creaseproof/entropy/source"
)

func TestCuts(t *testing.T) {
	for s, want := range map[string][]string{
		"eps > 0":                    {">"},
		"a>=b":                       {">="},
		"a ≥ b ≤ c ⩽ d ⩾ e":          {">=", "<=", "<=", ">="},
		`\eps \ge 0`:                 {">="},
		`a \geq b \leq c`:            {">=", "<="},
		`a \leqslant b \geqslant c`:  {"<=", ">="},
		`a \lt b \gt c`:              {"<", ">"},
		`\lambda \left(x\right) = 1`: {"="},
		"a == b":                     {"=="},
		"a != b ≠ c":                 {"!=", "!="},
		`a \ne b \neq c`:             {"!=", "!="},
		"a! = b":                     {"="},
		"a < b = c":                  {"<", "="},
		"ξ + λ":                      nil,
		`\`:                          nil,
		"":                           nil,
	} {
		var got []string
		for _, c := range cuts(s) {
			got = append(got, c.relation)
		}
		assert.Equal(t, want, got, s)
	}
}

func TestSplitKeepsPlaces(t *testing.T) {
	text := source.Text{File: "f", Line: 3, Col: 10, S: "λ ≥ ε/2"}
	l, r := cuts(text.S)[0].split(text)
	assert.Equal(t, source.Text{File: "f", Line: 3, Col: 10, S: "λ "}, l)
	assert.Equal(t, source.Text{File: "f", Line: 3, Col: 13, S: " ε/2"}, r)
	assert.Equal(t, 2, cuts(text.S)[0].runes(text))
}
