package energies_test

import (
	"context"
	"encoding/json"
	"maps"
	"math"
	"slices"
	"testing"
	"time"

	"creaseproof/cases/evidence/energies"
	"creaseproof/cases/evidence/tamper"
)

// FuzzAudit changes bytes of files, and gives them a digest that fits. Nothing
// makes the audit fail, and where the case, the surface and the values are those
// of a file that is known, nothing else than what is known is accepted.
func FuzzAudit(f *testing.F) {
	known := map[string]*energies.File{}
	id := func(e *energies.File) string {
		values, _ := json.Marshal(e.Values)
		return e.Surface + "\n" + string(values) + "\n" + e.Source
	}
	c := layered(f, wall+"energy = \"2 k^3/3\"\n"+ridge)
	for _, data := range written(f, true, c) {
		f.Add(data)
		e := &energies.File{}
		if err := json.Unmarshal(data, e); err != nil {
			f.Fatal(err)
		}
		known[id(e)] = e
		changes, err := tamper.Changes(data)
		if err != nil {
			f.Fatal(err)
		}
		for i, c := range changes {
			if i%17 == 0 {
				f.Add(c.Text)
			}
		}
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		ctx, cancel := context.WithTimeout(context.Background(), 5*time.Second)
		defer cancel()
		_, _ = energies.Audit(ctx, text, nil)
		e := &energies.File{}
		if len(text) > 1<<20 || json.Unmarshal(text, e) != nil {
			return
		}
		data, err := e.Encode()
		if err != nil {
			return
		}
		if _, err = energies.Audit(ctx, data, nil); err != nil {
			return
		}
		k := known[id(e)]
		if k == nil {
			return
		}
		same := e.Verdict == k.Verdict && e.Kind == k.Kind && e.Exact == k.Exact && e.Expected == k.Expected &&
			slices.Equal(e.AreaRoots, k.AreaRoots) && maps.Equal(e.Values, k.Values) &&
			math.Abs(e.Energy-k.Energy) <= *e.Error+*k.Error && (e.Claimed == k.Claimed || *e.Claimed == *k.Claimed)
		if !same {
			t.Fatalf("this was accepted: %s", data)
		}
	})
}
