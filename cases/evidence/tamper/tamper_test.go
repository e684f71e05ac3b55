package tamper_test

import (
	"encoding/json"
	"testing"

	"creaseproof/cases/evidence/tamper"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

const text = `{"a":[1,"2/3"],"b":{"c":true,"d":"-0.25"},"e":"word","f":0}`

func TestChanges(t *testing.T) {
	list, err := tamper.Changes([]byte(text))
	require.NoError(t, err)
	seen := map[string]bool{}
	for _, c := range list {
		assert.NotEqual(t, text, string(c.Text), "%s: %v", c.Path, c.New)
		assert.False(t, seen[string(c.Text)], "twice: %s", c.Text)
		seen[string(c.Text)] = true
	}
	for _, want := range []string{
		`{"a":[1.001,"2/3"],"b":{"c":true,"d":"-0.25"},"e":"word","f":0}`,
		`{"a":[1,"-2/3"],"b":{"c":true,"d":"-0.25"},"e":"word","f":0}`,
		`{"a":[1],"b":{"c":true,"d":"-0.25"},"e":"word","f":0}`,
		`{"a":[1,"2/3","2/3"],"b":{"c":true,"d":"-0.25"},"e":"word","f":0}`,
		`{"a":[1,"2/3"],"b":{"c":false,"d":"-0.25"},"e":"word","f":0}`,
		`{"a":[1,"2/3"],"b":{"c":true,"d":"0.25000000000000000000"},"e":"word","f":0}`,
		`{"a":[1,"2/3"],"b":{"c":true},"e":"word","f":0}`,
		`{"a":[1,"2/3"],"b":{"c":true,"d":"-0.25"},"e":"","f":0}`,
		`{"a":[1,"2/3"],"b":{"c":true,"d":"-0.25"},"f":0}`,
		`{"a":[1,"2/3"],"b":{"c":true,"d":"-0.25"},"e":"word","f":1}`,
	} {
		assert.True(t, seen[want], want)
	}
	_, err = tamper.Changes([]byte("{"))
	assert.Error(t, err)
}

func TestPut(t *testing.T) {
	seen := map[string]bool{}
	for place := range uint(20) {
		out, err := tamper.Put([]byte(text), place, "x")
		require.NoError(t, err)
		require.True(t, json.Valid(out))
		seen[string(out)] = true
	}
	assert.Len(t, seen, 8)
	out, err := tamper.Put([]byte("1"), 3, 2)
	require.NoError(t, err)
	assert.Equal(t, "1", string(out))
}
