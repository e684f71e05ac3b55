package creases_test

import (
	"fmt"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/identity"
)

// The energy of the wall is exactly 1/3.
func TestAgreementWithAClaim(t *testing.T) {
	for _, test := range []struct {
		claim   string
		verdict identity.Verdict
		says    string
	}{
		{`energy = "1/3"`, identity.Supported, ""},
		{`energy = "1/3 + 1/10^11"`, identity.Open, "within = 1e-10"},
		{`energy = "1/3 + 2/10^10"`, identity.Open, "within = 1e-09"},
		{`energy = "0.3333333"`, identity.Open, "if the claim has been rounded"},
		{`energy = "0.3333333"` + "\nwithin = 1e-6", identity.Supported, ""},
		{`energy = "1/3 + 1/10^10"` + "\nwithin = 1e-10", identity.Open, "they differ by 1e-10"},
		{`energy = "1/3 + 1/10^11"` + "\nwithin = 1e-10", identity.Supported, ""},
		{`energy = "-1/3"`, identity.Open, "they differ by 0.667"},
		{`energy = "0"`, identity.Open, "they differ by 0.333"},
		{`expect = "supported"`, "", "claims no energy"},
	} {
		r := one(t, layeredHead+`plus = "x + z/2"
minus = "-x + z/2"
`+wall+test.claim+"\n")
		assert.Equal(t, test.verdict, r.Verdict, test.claim)
		assert.Contains(t, r.Reason, test.says, test.claim)
	}
}

func TestTooManyCombinations(t *testing.T) {
	var values []string
	for _, name := range []string{"a", "b", "h", "k", "l", "m"} {
		values = append(values, fmt.Sprintf(`%s = ["1", "2", "3", "4", "5", "6", "7", "8", "9", "10"]`, name))
	}
	c, err := cases.Parse("case.toml", []byte(layeredHead+`density = "a"
values = { `+strings.Join(values, ", ")+" }\n"+wall))
	require.NoError(t, err)
	_, err = creases.New(c.Setting, "case.toml").Evaluate(t.Context(), &c.File.Surfaces[0], creases.Options{})
	assert.ErrorContains(t, err, "more than 100000 combinations")
}
