package approximations_test

import (
	"context"
	"encoding/json"
	"math"
	"testing"
	"time"

	"creaseproof/cases/evidence/approximations"
	"creaseproof/cases/evidence/tamper"
)

// FuzzAudit changes bytes of files, and gives them a digest that fits. Nothing
// makes the audit fail, and where the case, the limit and the values are those of
// a file that is known, no other energies and no other outcome are accepted.
func FuzzAudit(f *testing.F) {
	known := map[string]*approximations.File{}
	id := func(e *approximations.File) string {
		values, _ := json.Marshal(e.Values)
		return e.Approximation + "\n" + string(values) + "\n" + e.Source
	}
	for _, data := range written(f, small(f)) {
		f.Add(data)
		e := &approximations.File{}
		if err := json.Unmarshal(data, e); err != nil {
			f.Fatal(err)
		}
		known[id(e)] = e
		changes, err := tamper.Changes(data)
		if err != nil {
			f.Fatal(err)
		}
		for i, c := range changes {
			if i%29 == 0 {
				f.Add(c.Text)
			}
		}
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		ctx, cancel := context.WithTimeout(context.Background(), 5*time.Second)
		defer cancel()
		_, _ = approximations.Audit(ctx, text)
		e := &approximations.File{}
		if len(text) > 1<<20 || json.Unmarshal(text, e) != nil {
			return
		}
		data, err := e.Encode()
		if err != nil {
			return
		}
		if _, err = approximations.Audit(ctx, data); err != nil {
			return
		}
		k := known[id(e)]
		if k == nil || e.Unfinished {
			return
		}
		if e.Outcome != k.Outcome || e.Expected != k.Expected || len(e.Eps) != len(k.Eps) {
			t.Fatalf("this was accepted: %s", data)
		}
		for i := range k.Eps {
			if !(math.Abs(e.Energy[i]-k.Energy[i]) <= e.Error[i]+k.Error[i]) {
				t.Fatalf("this was accepted: %s", data)
			}
		}
	})
}
