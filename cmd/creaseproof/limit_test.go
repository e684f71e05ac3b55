package main

import (
	"encoding/json"
	"math"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

const wall = `[[limit]]
name = "wall"
approximation = "front"
branches = ["x + z/2", "-x + z/2"]
combine = "max"
box = { x = ["-1", "1"], y = ["0", "1"], z = ["0", "1"] }
eps = ["1/10", "1/40"]
`

func TestLimitCommand(t *testing.T) {
	code, out, errs := call(t, space+wall, "limit", "-")
	assert.Equal(t, 0, code, errs)
	assert.Contains(t, out, "ok   sharp      wall")
	assert.Contains(t, out, "gap below rounding")
	assert.Contains(t, out, "1 approximation: 1 sharp, all as expected")
	code, out, _ = call(t, space+wall+"energy = \"1/2\"\n", "limit", "-")
	assert.Equal(t, 1, code)
	assert.Contains(t, out, "NOT  above      wall")
	assert.Contains(t, out, "is above the jump energy by 0.1667")
	code, _, errs = call(t, space+strings.Replace(wall, "-x + z/2", "-x", 1), "limit", "-")
	assert.Equal(t, 2, code)
	assert.Contains(t, errs, "the branch is off the well")
	code, _, errs = call(t, space+wall, "limit", "-", "--only", "front")
	assert.Equal(t, 2, code)
	assert.Contains(t, errs, "no limit has a name")
	code, out, _ = call(t, space, "limit", "-")
	assert.Equal(t, 0, code)
	assert.Contains(t, out, "no limits")
}

// The library's energies tend to the jump energy where they should.
func TestLimitsOfTheLibrary(t *testing.T) {
	code, out, errs := call(t, "", "limit", "--json")
	require.Equal(t, 0, code, errs)
	var doc struct {
		Cases []struct {
			Limits []struct {
				Approximation, Outcome string
				Energy                 []float64
				Target, Equipartition  float64
				Rate                   *float64
			}
		}
	}
	require.NoError(t, json.Unmarshal([]byte(out), &doc))
	n := 0
	for _, c := range doc.Cases {
		for _, l := range c.Limits {
			n++
			gap := l.Energy[len(l.Energy)-1]/l.Target - 1
			if strings.Contains(l.Approximation, "wrong") {
				assert.Greater(t, gap, 5e-3, l.Approximation)
				assert.Equal(t, "above", l.Outcome)
				continue
			}
			assert.Less(t, math.Abs(gap), 1e-3, l.Approximation)
			if !strings.Contains(l.Approximation, "cone") {
				assert.InDelta(t, 1, l.Equipartition, 1e-3, l.Approximation)
			}
			switch {
			case strings.Contains(l.Approximation, "paraboloid"):
				assert.InDelta(t, 2, *l.Rate, 0.05)
			case strings.Contains(l.Approximation, "three"), strings.Contains(l.Approximation, "cone"):
				assert.InDelta(t, 1, *l.Rate, 0.05)
			default:
				assert.Nil(t, l.Rate, l.Approximation)
			}
		}
	}
	assert.GreaterOrEqual(t, n, 12)
}
