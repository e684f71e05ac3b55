package certificate_test

import (
	"context"
	"sync"
	"testing"

	"creaseproof/cases"
	"creaseproof/cases/run"
	"creaseproof/identity"

	"github.com/stretchr/testify/require"
)

// decided are the certificates that the search finds for the built-in cases.
var decided = sync.OnceValues(func() (map[string]problem, error) {
	out := map[string]problem{}
	list, failed := cases.Load(nil, nil)
	if len(failed) > 0 {
		return nil, failed[0]
	}
	outcome := run.Check(context.Background(), list, run.Options{Options: identity.DefaultOptions()})
	for _, r := range outcome.Results {
		if r.Record != nil && r.Record.Certificate != nil {
			out[r.Case.Name+": "+r.Record.Claim] = problem{r.Record.Reduced, r.Record.Certificate}
		}
		if r.Record != nil {
			for _, e := range r.Record.Ends {
				if e.Certificate != nil {
					out[r.Case.Name+": "+r.Record.Claim+" at "+e.Value] = problem{e.Reduced, e.Certificate}
				}
			}
		}
	}
	return out, nil
})

func library(t *testing.T) map[string]problem {
	t.Helper()
	all, err := decided()
	require.NoError(t, err)
	require.Greater(t, len(all), 50)
	return all
}
