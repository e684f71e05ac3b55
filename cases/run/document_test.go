package run

import (
	"encoding/json"
	"math"
	"strings"
	"testing"
	"time"

	"creaseproof/cases"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity"
)

func TestDocument(t *testing.T) {
	list, failed := cases.Load([]string{"-"}, strings.NewReader(`title = "t"
[space]
coordinates = ["x", "y"]
unknowns = ["u"]
[[claim]]
name = "true"
states = "u_xy = u_yx"
[[claim]]
name = "false"
states = "2 u_x = u_x"
expect = "refuted"
[[claim]]
name = "solved"
states = "c u_x = u_x/2"
solve = ["c"]
expect = "c = 0.5"
[[claim]]
name = "nothing"
states = "1/(u - u) = 1"
`))
	require.Empty(t, failed)
	out := Check(t.Context(), list, Options{Options: identity.DefaultOptions()})
	for _, r := range out.Results {
		r.Elapsed = 250 * time.Millisecond
	}
	require.True(t, out.Faulty())
	var doc struct {
		Schema int
		Cases  []struct {
			Case   string
			Claims []map[string]any
		}
	}
	data, err := json.Marshal(out.Document(list))
	require.NoError(t, err)
	require.NoError(t, json.Unmarshal(data, &doc))
	assert.Equal(t, 1, doc.Schema)
	require.Len(t, doc.Cases, 1)
	assert.Equal(t, "-", doc.Cases[0].Case)
	claims := doc.Cases[0].Claims
	require.Len(t, claims, 4)
	assert.Equal(t, map[string]any{
		"claim": "nothing", "verdict": "open", "expected": "proved", "met": false, "seconds": 0.25,
		"reason": "without meaning: line 19, column 14: division by zero: u - u vanishes identically",
	}, claims[3])

	assert.Equal(t, map[string]any{
		"claim": "true", "verdict": "proved", "expected": "proved", "met": true, "seconds": 0.25, "method": out.Results[0].Record.Method,
	}, claims[0])

	assert.Equal(t, "refuted", claims[1]["verdict"])
	assert.Equal(t, "refuted", claims[1]["expected"])
	assert.Equal(t, true, claims[1]["met"])
	assert.Equal(t, "u_x", claims[1]["remainder"])
	w := claims[1]["witness"].(map[string]any)
	require.Contains(t, w["jet"], "u_x")
	assert.NotEqual(t, w["left"], w["right"])

	assert.Equal(t, "proved", claims[2]["verdict"])
	assert.Equal(t, "proved", claims[2]["expected"])
	assert.Equal(t, true, claims[2]["met"])
	assert.Equal(t, "c = 1/2", claims[2]["solution"])
}

// All keys of a claim, spelled as the document promises.
func TestDocumentKeys(t *testing.T) {
	margin := -0.5
	list := many(t, "c")
	rec := &identity.Record{
		Claim: "c", Verdict: identity.Refuted, Method: "m", Margin: &margin, Samples: 3, Searches: 2, Seed: 0,
		Witness: &identity.Witness{
			Jet: map[string]string{"u_x": "1"}, Angle: map[string]identity.CosSin{"theta": {Cos: "3/5", Sin: "4/5"}},
			Plus: map[string]string{"u_x": "1"}, Minus: map[string]string{"u_x": "2"}, Normal: map[string]string{"x": "1"},
			Left: "1", Right: "1/2",
		},
		Remainder: "r", Solution: "s", Reason: "<&>", Assumptions: []string{"a"}, Details: []string{"d"},
	}
	out := &Outcome{Results: []*Result{{Case: list[0], Claim: list[0].Claims[0], Record: rec}}}
	data, err := json.Marshal(out.Document(list))
	require.NoError(t, err)
	assert.JSONEq(t, `{"schema":1,"cases":[{"case":"case","claims":[{
		"claim":"c","verdict":"refuted","expected":"proved","met":false,"method":"m","seconds":0,
		"margin":-0.5,"samples":3,"searches":2,"seed":0,
		"witness":{"jet":{"u_x":"1"},"angle":{"theta":{"cos":"3/5","sin":"4/5"}},"plus":{"u_x":"1"},"minus":{"u_x":"2"},"nu":{"x":"1"},"left":"1","right":"1/2"},
		"remainder":"r","solution":"s","reason":"<&>","assumptions":["a"],"details":["d"]}]}]}`, string(data))

	for _, bad := range []float64{math.NaN(), math.Inf(1)} {
		rec.Margin = &bad
		data, err = json.Marshal(out.Document(list))
		require.NoError(t, err, "what JSON cannot say is left out")
		assert.NotContains(t, string(data), "margin")
	}
}

func TestDocumentOfNothing(t *testing.T) {
	data, err := json.Marshal((&Outcome{}).Document(nil))
	require.NoError(t, err)
	assert.JSONEq(t, `{"schema":1,"cases":[]}`, string(data))
	list := []*cases.Case{parsed(t, space+"[let]\nA = '1'\n")}
	data, err = json.Marshal((&Outcome{}).Document(list))
	require.NoError(t, err)
	assert.JSONEq(t, `{"schema":1,"cases":[{"case":"case","claims":[]}]}`, string(data))
}
