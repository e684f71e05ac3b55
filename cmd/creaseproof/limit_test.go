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

// The library's energies tend to the jump energy where they should, at the
// orders that are known.
func TestLimitsOfTheLibrary(t *testing.T) {
	args := []string{"limit", "--json"}
	if testing.Short() {
		args = append(args, "--only", "two affine", "--only", "wall", "--only", "ridge of two", "--only", "cone")
	}
	code, out, errs := call(t, "", args...)
	require.Equal(t, 0, code, errs)
	var doc struct {
		Cases []struct {
			Limits []struct {
				Approximation, Kind, Outcome string
				Energy                       []float64
				Target, Equipartition        float64
				Limit                        float64
				LimitError                   float64 `json:"limit_error"`
				Rate                         *float64
				Evaluations                  int
			}
		}
	}
	require.NoError(t, json.Unmarshal([]byte(out), &doc))
	n := 0
	for _, c := range doc.Cases {
		for _, l := range c.Limits {
			n++
			name := l.Approximation
			gap := l.Energy[len(l.Energy)-1]/l.Target - 1
			assert.Less(t, l.Evaluations, 15_000_000, name)
			if strings.Contains(name, "wrong") || l.Kind == "mollified" {
				assert.Greater(t, gap, 5e-3, name)
				assert.Equal(t, "above", l.Outcome)
				continue
			}
			assert.Equal(t, "sharp", l.Outcome)
			assert.InDelta(t, l.Target, l.Limit, math.Max(2*l.LimitError, 1e-6*l.Target), name)
			order := 0.
			switch {
			case strings.Contains(name, "paraboloid"):
				order = 2
			case strings.Contains(name, "three"), strings.Contains(name, "cone"), strings.HasSuffix(name, "ridge in a box"),
				strings.Contains(name, "focal"), strings.Contains(name, "four"):
				order = 1
			}
			assert.Less(t, math.Abs(gap), 1e-3, name)
			if !strings.Contains(name, "cone") && !strings.Contains(name, "focal") { // these bend outside of the layer
				assert.InDelta(t, 1, l.Equipartition, 1e-3, name)
			}
			if order > 0 {
				require.NotNil(t, l.Rate, name)
				assert.InDelta(t, order, *l.Rate, 0.05, name)
			} else {
				assert.Nil(t, l.Rate, name)
			}
		}
	}
	assert.GreaterOrEqual(t, n, 7)
	if !testing.Short() {
		assert.GreaterOrEqual(t, n, 20)
	}
}
