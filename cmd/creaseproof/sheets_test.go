package main

import (
	"encoding/json"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// Sheets are listed where there are several, with their places, and add up in
// the document.
func TestSheetsInTheOutput(t *testing.T) {
	code, out, _ := call(t, "", "energy", "crease-ridges")
	assert.Equal(t, 0, code)
	assert.Contains(t, out, "\n                  sheet through (-0.7")
	assert.Contains(t, out, ", length 1.572\n")

	code, out, _ = call(t, "", "energy", "--json", "crease-ridges")
	assert.Equal(t, 0, code)
	var doc struct {
		Cases []struct {
			Surfaces []struct {
				Surface string
				Pairs   []struct {
					Energy    float64
					Unsettled bool
					Sheets    []struct {
						Energy, Error, Area float64
						Point               []float64
						Box                 [][2]float64
					}
				}
			}
		}
	}
	require.NoError(t, json.Unmarshal([]byte(out), &doc))
	found := 0
	for _, s := range doc.Cases[0].Surfaces {
		for _, p := range s.Pairs {
			sum := 0.0
			for _, sh := range p.Sheets {
				sum += sh.Energy
			}
			assert.InDelta(t, p.Energy, sum, 1e-14, s.Surface)
			if s.Surface != "two points, two arcs of the hyperbola" {
				continue
			}
			found++
			require.Len(t, p.Sheets, 2)
			assert.False(t, p.Unsettled)
			assert.Negative(t, p.Sheets[0].Box[0][1])
			assert.InDelta(t, 2, p.Sheets[1].Box[1][1], 1e-9)
			assert.Len(t, p.Sheets[0].Point, 2)
			assert.Positive(t, p.Sheets[0].Error)
		}
	}
	assert.Equal(t, 1, found)
}
