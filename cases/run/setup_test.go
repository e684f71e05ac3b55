package run

import (
	"testing"

	"creaseproof/cases"

	"github.com/stretchr/testify/require"
)

const space = `[space]
coordinates = ["x", "y", "z"]
unknowns = ["u"]
constants = ["eps"]
assume = ["eps > 0"]
`

func parsed(t *testing.T, text string) *cases.Case {
	t.Helper()
	c, err := cases.Parse("case.toml", []byte(text))
	require.NoError(t, err)
	return c
}
