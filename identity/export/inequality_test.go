package export_test

import (
	"encoding/json"
	"testing"

	"github.com/stretchr/testify/require"

	"creaseproof/identity/certificate"
	"creaseproof/identity/export"
)

func TestCoqAcceptsInequalities(t *testing.T) {
	for _, s := range inequalities() {
		t.Run(s.Name, func(t *testing.T) {
			text, err := export.Coq("", s)
			require.NoError(t, err)
			out, err := coqc(t, text)
			require.NoError(t, err, "%s\n%s", out, text)
		})
	}
}

// clone copies what a mutation may change.
func clone(t *testing.T, s *export.Inequality) *export.Inequality {
	t.Helper()
	out := *s
	out.Claim, out.Certificate = &certificate.Claim{}, &certificate.Certificate{}
	for _, x := range []struct{ from, to any }{{s.Claim, out.Claim}, {s.Certificate, out.Certificate}} {
		b, err := json.Marshal(x.from)
		require.NoError(t, err)
		require.NoError(t, json.Unmarshal(b, x.to))
	}
	return &out
}
