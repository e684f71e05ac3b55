package sample

import (
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func TestLayoutErrors(t *testing.T) {
	for name, cs := range map[string][]Column{
		"empty box":        {{Kind: Box, Lo: 1, Hi: 0}},
		"undefined box":    {{Kind: Box, Lo: math.NaN(), Hi: 0}},
		"box at infinity":  {{Kind: Box, Lo: math.Inf(1), Hi: math.Inf(1)}},
		"kind":             {{Kind: 77}},
		"lone sine":        {{Kind: Sine}},
		"two angles":       {{Kind: Sine, Angle: 1}, {Kind: Cosine, Angle: 2}},
		"two cosines":      {{Kind: Cosine}, {Kind: Cosine}, {Kind: Sine}},
		"order":            {{Unknown: "u", Order: 2, Index: []int{1, 0}}},
		"negative entry":   {{Unknown: "u", Order: 0, Index: []int{1, -1}}},
		"different length": {{Unknown: "u", Order: 2, Index: []int{1, 1}}, {Unknown: "u", Order: 2, Index: []int{2}}},
	} {
		_, err := NewLayout(cs)
		assert.ErrorIs(t, err, ErrLayout, name)
	}
	l, err := NewLayout(nil)
	require.NoError(t, err)
	assert.Zero(t, l.Len())
	l = layeredLayout(t)
	assert.Equal(t, []int{0, 1, 2, 3, 4, 5, 6}, l.Plain())
	assert.Equal(t, "u_xx", l.Column(3).Name)
}

func TestRanges(t *testing.T) {
	inf := math.Inf(1)
	columns := []Column{
		{Kind: Positive},
		{Kind: Negative},
		{Kind: Box, Lo: -1, Hi: 1},
		{Kind: Box, Lo: 2, Hi: 5},
		{Kind: Box, Lo: 3, Hi: inf},
		{Kind: Box, Lo: -inf, Hi: -3},
		{Kind: Box, Lo: 2, Hi: 2},
		{Kind: Box, Lo: -inf, Hi: inf},
		{Kind: Box, Lo: -math.MaxFloat64, Hi: math.MaxFloat64},
	}
	for _, law := range append(DefaultLaws(), Near{Lattice{}, func([][]float64, int) {}}) {
		c := draw(t, law, columns, 30)
		low, high := make([]float64, len(c)), make([]float64, len(c))
		for i := range c {
			low[i], high[i] = inf, -inf
			for _, v := range c[i] {
				low[i], high[i] = min(low[i], v), max(high[i], v)
				require.True(t, isFinite(v))
			}
		}
		assert.Greater(t, low[0], 0.0)
		assert.Less(t, high[1], 0.0)
		assert.True(t, low[2] >= -1 && high[2] <= 1 && low[2] < -0.5 && high[2] > 0.5, "%T %v %v", law, low[2], high[2])
		assert.True(t, low[3] >= 2 && high[3] <= 5 && low[3] < 2.5 && high[3] > 4, "%T %v %v", law, low[3], high[3])
		assert.True(t, low[4] >= 3 && high[4] > 5, "%T", law)
		assert.True(t, high[5] <= -3 && low[5] < -5, "%T", law)
		assert.True(t, low[6] == 2 && high[6] == 2, "%T", law)
	}
	// the lattice meets the ends of a box
	hits := 0
	for _, v := range draw(t, Lattice{}, columns[3:4], 10)[0] {
		if v == 2 || v == 5 || v == 3.5 {
			hits++
		}
	}
	assert.Greater(t, hits, 700)
}

func FuzzBox(f *testing.F) {
	f.Add(0.0, 1.0, 7.0)
	f.Add(-math.MaxFloat64, math.MaxFloat64, math.NaN())
	f.Add(math.Inf(-1), 5e-324, math.Inf(1))
	f.Fuzz(func(t *testing.T, lo, hi, v float64) {
		l, err := NewLayout([]Column{{Kind: Box, Lo: lo, Hi: hi}})
		if err != nil {
			return
		}
		x := []float64{v}
		l.restrict([][]float64{x}, 1)
		if !(x[0] >= lo && x[0] <= hi) {
			t.Fatalf("%v is not in [%v, %v]", x[0], lo, hi)
		}
		y := []float64{x[0]}
		l.restrict([][]float64{y}, 1)
		if y[0] != x[0] {
			t.Fatalf("%v moved to %v within [%v, %v]", x[0], y[0], lo, hi)
		}
	})
}
