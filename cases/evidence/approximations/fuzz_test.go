package approximations_test

import (
	"context"
	"encoding/json"
	"maps"
	"math"
	"slices"
	"testing"
	"time"

	"creaseproof/cases/evidence/approximations"
	"creaseproof/cases/evidence/tamper"
)

// known are files by what they are about.
type known map[string]*approximations.File

func id(e *approximations.File) string {
	values, _ := json.Marshal(e.Values)
	return e.Approximation + "\n" + string(values) + "\n" + e.Source
}

// try audits a text, and once more with a digest that fits. Nothing makes the
// audit fail, and where the case, the limit and the values are those of a file that
// is known, no other energies and no other outcome are accepted.
func (k known) try(t *testing.T, text []byte) {
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
	want := k[id(e)]
	if want == nil || e.Unfinished {
		return
	}
	if e.Outcome != want.Outcome || e.Expected != want.Expected || len(e.Eps) != len(want.Eps) {
		t.Fatalf("this was accepted: %s", data)
	}
	for i := range want.Eps {
		if !(math.Abs(e.Energy[i]-want.Energy[i]) <= e.Error[i]+want.Error[i]) {
			t.Fatalf("this was accepted: %s", data)
		}
	}
}

func seeds(f *testing.F) (k known, list [][]byte) {
	k = known{}
	files := written(f, small(f))
	for _, name := range slices.Sorted(maps.Keys(files)) {
		e := decoded(f, files[name])
		k[id(e)] = e
		list = append(list, files[name])
	}
	return k, list
}

// FuzzAudit changes bytes of files.
func FuzzAudit(f *testing.F) {
	k, list := seeds(f)
	for _, data := range list {
		f.Add(data)
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
	f.Fuzz(k.try)
}

// FuzzField puts any JSON value in the place of one value of a file.
func FuzzField(f *testing.F) {
	k, list := seeds(f)
	f.Add(uint(0), uint(3), "null")
	f.Add(uint(0), uint(8), `[0.5, 0.25]`)
	f.Add(uint(1), uint(4), `0.6666666666666666`)
	f.Add(uint(4), uint(11), `"sharp"`)
	f.Fuzz(func(t *testing.T, file, place uint, value string) {
		var x any
		if json.Unmarshal([]byte(value), &x) != nil {
			return
		}
		text, err := tamper.Put(list[file%uint(len(list))], place, x)
		if err != nil {
			t.Fatal(err)
		}
		k.try(t, text)
	})
}
