package run

import (
	"context"
	"encoding/json"
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"creaseproof/cases"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/casefile"
	"creaseproof/cases/creases"
	"creaseproof/entropy/source"
	"creaseproof/identity"
)

// manySurfaces makes surfaces that only their names tell apart.
func manySurfaces(t *testing.T, names ...string) []*cases.Case {
	b := strings.Builder{}
	b.WriteString(space)
	for _, n := range names {
		b.WriteString("[[surface]]\nname = '" + n + "'\ndensity = '1'\npolygon = [['0','0','0'],['1','0','0'],['0','1','0']]\nenergy = '1/2'\n")
	}
	return []*cases.Case{parsed(t, b.String())}
}

func value(s *casefile.Surface, x float64) creases.Result {
	return creases.Result{Surface: s.Name, Energy: &x, Verdict: identity.Supported, Expected: identity.Supported, Met: true}
}

func surfacesOf(o *EnergyOutcome) (out []string) {
	for _, r := range o.Results {
		for _, v := range r.Values {
			out = append(out, v.Surface+" "+string(v.Verdict))
		}
	}
	return out
}

func TestEnergyIsInOrder(t *testing.T) {
	var reported []string
	opt := EnergyOptions{Jobs: 3, Only: []string{"a"}, Report: func(r *EnergyResult) { reported = append(reported, r.Surface.Name) }}
	out := energy(t.Context(), manySurfaces(t, "a1", "a2", "b", "a3", "a4"), opt, func(_ context.Context, _ *cases.Case, s *casefile.Surface) ([]creases.Result, error) {
		if s.Name == "a1" {
			time.Sleep(20 * time.Millisecond)
		}
		return []creases.Result{value(s, 1), value(s, 2)}, nil
	})
	assert.Equal(t, []string{"a1", "a2", "a3", "a4"}, reported)
	assert.Len(t, surfacesOf(out), 8)
	assert.True(t, out.Met())
	assert.False(t, out.Faulty())
}

func TestEnergyInterrupted(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	out := energy(ctx, manySurfaces(t, "a", "half", "never"), EnergyOptions{Jobs: 1}, func(ctx context.Context, _ *cases.Case, s *casefile.Surface) ([]creases.Result, error) {
		if s.Name == "half" {
			cancel()
			return []creases.Result{value(s, 1)}, ctx.Err()
		}
		return []creases.Result{value(s, 1)}, nil
	})
	assert.True(t, out.Interrupted)
	assert.Equal(t, []string{"a supported", "half supported"}, surfacesOf(out))
}

func TestEnergyTimeout(t *testing.T) {
	out := energy(t.Context(), manySurfaces(t, "a", "half", "never"), EnergyOptions{Jobs: 1, Timeout: 20 * time.Millisecond}, func(ctx context.Context, _ *cases.Case, s *casefile.Surface) ([]creases.Result, error) {
		if s.Name == "half" {
			<-ctx.Done()
			return []creases.Result{value(s, 1)}, ctx.Err()
		}
		return []creases.Result{value(s, 1)}, nil
	})
	assert.False(t, out.Interrupted)
	assert.Equal(t, []string{"a supported", "half supported", "half open", "never open"}, surfacesOf(out))
	assert.Equal(t, "not computed within the 20ms allowed", out.Results[2].Values[0].Reason)
	assert.False(t, out.Met())
	assert.False(t, out.Faulty())
}

func TestEnergyFailures(t *testing.T) {
	list := manySurfaces(t, "panics", "refused", "expected", "mistake", "fine")
	list[0].File.Surfaces[2].Expect = &source.Text{S: "open"}
	out := energy(t.Context(), list, EnergyOptions{}, func(_ context.Context, _ *cases.Case, s *casefile.Surface) ([]creases.Result, error) {
		open := creases.Result{Surface: s.Name, Verdict: identity.Open, Expected: identity.Supported, Reason: "off the well"}
		switch s.Name {
		case "panics":
			panic("nil map")
		case "refused":
			return []creases.Result{value(s, 1), open, open}, nil
		case "expected":
			open.Expected, open.Met = identity.Open, true
			return []creases.Result{open}, nil
		case "mistake":
			return nil, errors.New("odd")
		}
		return []creases.Result{value(s, 1)}, nil
	})
	assert.Equal(t, "internal error: nil map", out.Results[0].Values[0].Reason)
	assert.NoError(t, out.Results[0].Err)
	assert.False(t, out.Results[0].Met())
	assert.EqualError(t, out.Results[1].Err, "case.toml:12:9: \"refused\" has no energy: off the well\n    name = 'refused'\n            ^")
	assert.True(t, out.Results[2].Met())
	assert.EqualError(t, out.Results[3].Err, "case.toml:22:9: odd\n    name = 'mistake'\n            ^")
	assert.True(t, out.Results[4].Met())
	assert.True(t, out.Faulty())
}

func TestEnergyDocument(t *testing.T) {
	list := manySurfaces(t, "a")
	out := Energy(t.Context(), list, EnergyOptions{})
	require.True(t, out.Met())
	var doc struct {
		Schema int
		Cases  []struct {
			Case     string
			Surfaces []map[string]any
		}
	}
	data, err := json.Marshal(out.Document(list))
	require.NoError(t, err)
	require.NoError(t, json.Unmarshal(data, &doc))
	assert.Equal(t, 1, doc.Schema)
	s := doc.Cases[0].Surfaces[0]
	assert.InDelta(t, 0.5, s["energy"], 1e-15)
	assert.InDelta(t, 0.5, s["area"], 1e-15)
	assert.InDelta(t, 0.5, s["claimed"], 0)
	assert.Less(t, s["error"], 1e-12)
	assert.Equal(t, "supported", s["verdict"])
	assert.Equal(t, "supported", s["expected"])
	assert.Equal(t, true, s["met"])
	assert.NotContains(t, s, "reason")

	nan := math.NaN()
	out.Results[0].Values[0].Error = &nan
	data, err = json.Marshal(out.Document(list))
	require.NoError(t, err, "what JSON cannot say is left out")
	assert.NotContains(t, string(data), `"error"`)
}

func TestTooManyCombinations(t *testing.T) {
	list := manySurfaces(t, "a")
	s := &list[0].File.Surfaces[0]
	for range 64 {
		s.Values = append(s.Values, casefile.Values{Name: casefile.Name{S: "k", Pos: source.Pos{Line: 7, Col: 1}}, List: make([]source.Text, 10)})
	}
	out := Energy(t.Context(), list, EnergyOptions{})
	assert.ErrorContains(t, out.Results[0].Err, "more than 10000 combinations")
	s.Values = s.Values[:4]
	assert.Equal(t, 10000, combinations(s))
}
