package evidence_test

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"strings"
	"testing"
	"time"

	"creaseproof/cases/evidence"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestTruncated(t *testing.T) {
	for name, data := range written(t, "means") {
		end := len(bytes.TrimRight(data, "\n"))
		for cut := 0; cut < end; cut += 1 + cut/13 {
			_, err := evidence.Audit(context.Background(), data[:cut])
			assert.Error(t, err, "%s to byte %d", name, cut)
		}
		for _, more := range []string{"{}", "null", "]", "x", string(data)} {
			_, err := evidence.Audit(context.Background(), append(bytes.Clone(data), more...))
			assert.Error(t, err, "%s and %.10s", name, more)
		}
	}
}

// A name that stands twice is refused: readers differ in which one they take.
func TestNamesTwice(t *testing.T) {
	for name, data := range written(t, "means") {
		for _, key := range []string{"verdict", "Verdict", "claim", "CLAIM", "source", "digest"} {
			var f map[string]json.RawMessage
			require.NoError(t, json.Unmarshal(data, &f))
			value := f[strings.ToLower(key)]
			twice := append(fmt.Appendf(nil, "{%q: %s, ", key, value), bytes.TrimLeft(data, "{ \n")...)
			_, err := evidence.Decode(twice)
			assert.ErrorContains(t, err, "twice", "%s: %s", name, key)
		}
		if i := bytes.Index(data, []byte(`"m": {`)); i > 0 {
			twice := bytes.Replace(data, []byte(`"m": {`), []byte(`"m": {"a": 1, "a": 2, `), 1)
			_, err := evidence.Decode(twice)
			assert.ErrorContains(t, err, "twice", name)
			// x and X are two variables.
			_, err = evidence.Decode(bytes.Replace(data, []byte(`"m": {`), []byte(`"m": {"q": 1, "Q": 2, `), 1))
			assert.ErrorContains(t, err, "digest", name)
		}
	}
}

func TestHostile(t *testing.T) {
	repeat := func(s string, size int) string { return strings.Repeat(s, size/len(s)) }
	for name, text := range map[string]string{
		"nothing": "", "null": "null", "number": "1", "list": "[]", "another schema": `{"schema":2}`, "no digest": `{"schema":1}`,
		"unknown key": `{"schema":1,"x":1}`, "not UTF-8": "{\"schema\":1,\"case\":\"\xff\xfe\"}",
		"too long":     repeat(" ", 17<<20),
		"deep":         repeat("[", 4<<20),
		"deep objects": repeat(`{"certificate":`, 4<<20),
		"deep squarings": `{"schema":1,"certificate":` + repeat(`{"squaring":{"proof":`, 200_000) + "null" +
			repeat("}}", 20_000) + "}",
		"many ends":    `{"schema":1,"ends":[` + repeat("{},", 15<<20) + `{}]}`,
		"many squares": `{"schema":1,"certificate":{"squares":[` + repeat("{},", 15<<20) + `{}]}}`,
		"many terms":   `{"schema":1,"problem":{"target":[` + repeat(`{"m":{"x":1}},`, 15<<20) + `{}]}}`,
		"many names":   `{"schema":1,"null":[` + repeat(`"",`, 15<<20) + `""]}`,
		"long number":  `{"schema":1,"null":["` + repeat("9", 15<<20) + `"]}`,
		"a long seed":  `{"schema":1,"seed":` + repeat("9", 15<<20) + `}`,
	} {
		start := time.Now()
		_, err := evidence.Audit(context.Background(), []byte(text))
		assert.Error(t, err, name)
		assert.Less(t, time.Since(start), 2*time.Minute, name)
	}
}
