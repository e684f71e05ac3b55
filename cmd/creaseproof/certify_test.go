package main

import (
	"encoding/json"
	"math/big"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestCertify(t *testing.T) {
	code, out, errs := call(t, space+plane, "energy", "--certify", "-", "--json")
	require.Equal(t, 0, code, out+errs)
	var doc struct {
		Cases []struct {
			Surfaces []struct {
				Enclosure         []string
				Verdict, Expected string
				Met               bool
			}
		}
	}
	require.NoError(t, json.Unmarshal([]byte(out), &doc))
	s := doc.Cases[0].Surfaces[0]
	require.Len(t, s.Enclosure, 2)
	third := big.NewRat(2, 3)
	lo, ok := new(big.Rat).SetString(s.Enclosure[0])
	require.True(t, ok)
	hi, ok := new(big.Rat).SetString(s.Enclosure[1])
	require.True(t, ok)
	assert.LessOrEqual(t, lo.Cmp(third), 0)
	assert.GreaterOrEqual(t, hi.Cmp(third), 0)
	assert.Equal(t, []string{"proved", "proved"}, []string{s.Verdict, s.Expected})
	assert.True(t, s.Met)

	wrong := strings.Replace(plane, `"2/3"`, `"0.66666660"`, 1)
	code, out, _ = call(t, space+wrong, "energy", "--certify", "-")
	assert.Equal(t, 1, code)
	assert.Contains(t, out, "NOT  refuted    plane")
	assert.Contains(t, strings.Join(strings.Fields(out), " "), "misses the claimed value by 6.7e-08")
	code, out, _ = call(t, space+wrong+"expect = \"refuted\"\n", "energy", "--certify", "-")
	assert.Equal(t, 0, code, out)

	code, out, _ = call(t, space+strings.Replace(plane, "energy = \"2/3\"\n", "", 1), "energy", "--certify", "-")
	assert.Equal(t, 0, code, out)
	assert.Contains(t, out, "the energy lies in [0.6666666666666")
}

// Everything built in is as it expects with enclosures too.
func TestCertifyLibrary(t *testing.T) {
	code, out, errs := call(t, "", "energy", "--certify")
	require.Equal(t, 0, code, out+errs)
	require.NotContains(t, out, "NOT")
}
