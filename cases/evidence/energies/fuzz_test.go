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

// known are files by what they are about.
type known map[string]*energies.File

func id(e *energies.File) string {
	values, _ := json.Marshal(e.Values)
	return e.Surface + "\n" + string(values) + "\n" + e.Source
}

// try audits a text, and once more with a digest that fits. Nothing makes the
// audit fail, and where the case, the surface and the values are those of a file
// that is known, nothing else than what is known is accepted.
func (k known) try(t *testing.T, text []byte) {
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
	want := k[id(e)]
	if want == nil {
		return
	}
	same := e.Verdict == want.Verdict && e.Kind == want.Kind && e.Exact == want.Exact && e.Expected == want.Expected &&
		slices.Equal(e.AreaRoots, want.AreaRoots) && maps.Equal(e.Values, want.Values) &&
		math.Abs(e.Energy-want.Energy) <= *e.Error+*want.Error && (e.Claimed == want.Claimed || *e.Claimed == *want.Claimed)
	if !same {
		t.Fatalf("this was accepted: %s", data)
	}
}

// seeds are the evidence of two surfaces, one with an enclosure and one exact.
func seeds(f *testing.F) (k known, list [][]byte) {
	k = known{}
	files := written(f, true, layered(f, wall+"energy = \"2 k^3/3\"\n"+ridge))
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
			if i%17 == 0 {
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
	f.Add(uint(0), uint(8), `"0.6"`)
	f.Add(uint(1), uint(4), `0.6666666666666666`)
	f.Add(uint(2), uint(11), `["1"]`)
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
