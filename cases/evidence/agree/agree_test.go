package agree_test

import (
	"math"
	"testing"

	"creaseproof/cases/evidence/agree"

	"github.com/stretchr/testify/assert"
)

func TestWithin(t *testing.T) {
	assert.True(t, agree.Within(1, 1.5, 0.5))
	assert.False(t, agree.Within(1, 1.5, 0.49))
	for _, x := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		assert.False(t, agree.Within(x, 1, 1e300))
		assert.False(t, agree.Within(1, x, 1e300))
	}
	assert.False(t, agree.Within(math.NaN(), math.NaN(), 1))
}

func TestErrors(t *testing.T) {
	assert.True(t, agree.Errors(0, 0, 1))
	assert.True(t, agree.Errors(1e-15, 4e-15, 1))
	assert.False(t, agree.Errors(1e-15, 4.1e-15, 1))
	assert.True(t, agree.Errors(1e-9, 1.05e-9, 1))
	assert.False(t, agree.Errors(1e-9, 1.06e-9, 1))
	assert.False(t, agree.Errors(1e-15, 4e-15, 0.1))
	for _, x := range []float64{0, -1e-15, math.NaN(), math.Inf(1)} {
		assert.False(t, agree.Errors(x, 1e-15, 1))
		assert.False(t, agree.Errors(1e-15, x, 1))
		assert.False(t, agree.Errors(x, 1e-15, math.NaN()))
	}
}

func TestTexts(t *testing.T) {
	for _, c := range []struct {
		a, b               string
		relative, absolute float64
		same               bool
	}{
		{"", "", 0, 0, true},
		{"the energy is 0.33333333333333331", "the energy is 0.33333333333333337", 0, 1e-16, true},
		{"the energy is 0.33333333333333331", "the energy is 0.33333333333343337", 0, 1e-15, false},
		{"they differ by 0.0333", "they differ by 0.0334", 0, 0, true},
		{"they differ by 0.0333", "they differ by 0.0335", 0, 0, false},
		{"they differ by -0.0333", "they differ by 0.0333", 1, 1, false},
		{"an error of 2e-16", "an error of 3e-16", 0, 1e-15, true},
		{"an error of 2e-16", "an error of 3e-16", 0, 0, false},
		{"an error of 2e-16", "an error of 2e-17", 0, 0, false},
		{"within = 1e-09", "within = 1e-08", 0, 1e-12, false},
		{"branches 1 and 2: 0.5", "branches 1 and 3: 0.5", 9, 9, false},
		{"2000000 nodes", "2000001 nodes", 9, 9, false},
		{"one 0.5", "two 0.5", 9, 9, false},
		{"0.5 more", "0.5", 9, 9, false},
		{"0.5 and 0.6", "0.5", 9, 9, false},
		{"1e999 x", "1e998 x", 9, 9, false},
	} {
		assert.Equal(t, c.same, agree.Texts(c.a, c.b, c.relative, c.absolute), "%s | %s", c.a, c.b)
		assert.Equal(t, c.same, agree.Texts(c.b, c.a, c.relative, c.absolute), "%s | %s", c.b, c.a)
	}
}
