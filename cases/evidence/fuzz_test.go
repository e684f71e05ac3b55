package evidence_test

import (
	"context"
	"encoding/json"
	"maps"
	"slices"
	"testing"
	"time"

	"creaseproof/cases/evidence"

	"github.com/stretchr/testify/require"
)

// truth is what is known of the claims of some files, by claim and source.
func truth(t testing.TB, files map[string][]byte) func(*evidence.File) (string, bool) {
	known := map[string]string{}
	id := func(e *evidence.File) string { return e.Claim + "\n" + e.Source }
	for _, data := range files {
		e := decoded(t, data)
		known[id(e)] = string(e.Verdict)
	}
	return func(e *evidence.File) (string, bool) {
		v, ok := known[id(e)]
		return v, ok
	}
}

// try gives a changed file a digest that fits, and audits it: a verdict is
// accepted only where it is the true one.
func try(t *testing.T, text []byte, known func(*evidence.File) (string, bool)) {
	ctx, cancel := context.WithTimeout(context.Background(), 5*time.Second)
	defer cancel()
	_, _ = evidence.Audit(ctx, text)
	var e evidence.File
	if len(text) > 1<<20 || json.Unmarshal(text, &e) != nil {
		return
	}
	data, err := e.Encode()
	if err != nil {
		return
	}
	if _, err = evidence.Audit(ctx, data); err != nil {
		return
	}
	if want, ok := known(&e); ok && want != string(e.Verdict) {
		t.Fatalf("%s is %s, and %s was accepted", e.Claim, want, e.Verdict)
	}
}

// FuzzAudit changes bytes of files. Nothing makes the audit fail.
func FuzzAudit(f *testing.F) {
	files := written(f, "means", "roots", "false-claims")
	for _, name := range slices.Sorted(maps.Keys(files)) {
		f.Add(files[name])
	}
	known := truth(f, files)
	f.Fuzz(func(t *testing.T, data []byte) { try(t, data, known) })
}

// FuzzField puts any JSON value in the place of one value of a file.
func FuzzField(f *testing.F) {
	files := written(f, "means", "roots", "false-claims")
	names := slices.Sorted(maps.Keys(files))
	known := truth(f, files)
	f.Add(uint(0), uint(3), "null")
	f.Add(uint(5), uint(20), `"1/2"`)
	f.Add(uint(9), uint(8), `[]`)
	f.Add(uint(9), uint(11), `{"x":1}`)
	f.Add(uint(9), uint(11), `"refuted"`)
	f.Fuzz(func(t *testing.T, file, place uint, value string) {
		var put, doc any
		require.NoError(t, json.Unmarshal(files[names[file%uint(len(names))]], &doc))
		if json.Unmarshal([]byte(value), &put) != nil {
			return
		}
		n := uint(0)
		replace(&doc, func() bool { n++; return false }, nil)
		at := place % n
		n = 0
		replace(&doc, func() bool { n++; return n == at+1 }, put)
		text, err := json.Marshal(doc)
		require.NoError(t, err)
		try(t, text, known)
	})
}

// replace visits each value below x, and puts another in its place where here
// says so.
func replace(x *any, here func() bool, put any) {
	visit := func(y any, set func(any)) {
		if here() {
			set(put)
			return
		}
		replace(&y, here, put)
	}
	switch v := (*x).(type) {
	case []any:
		for i := range v {
			visit(v[i], func(y any) { v[i] = y })
		}
	case map[string]any:
		for _, k := range slices.Sorted(maps.Keys(v)) {
			visit(v[k], func(y any) { v[k] = y })
		}
	}
}
