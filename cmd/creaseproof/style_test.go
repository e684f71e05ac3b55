package main

import (
	"strings"
	"testing"
	"time"

	"github.com/stretchr/testify/assert"
)

func TestWrap(t *testing.T) {
	assert.Equal(t, []string{"ab cd", "ef"}, wrap("ab cd ef", 5, 100))
	assert.Equal(t, []string{"ab", "cdefg", "hi"}, wrap("ab cdefghi", 5, 100))
	assert.Equal(t, []string{"ab", "abcde", "fg"}, wrap("ab abcdefg", 5, 100))
	assert.Equal(t, []string{"εξε", "ξ"}, wrap("εξε ξ", 3, 100))
	assert.Equal(t, []string{""}, wrap("", 5, 100))
	assert.Equal(t, []string{"abc…"}, wrap("abcdef", 5, 3))
	for _, l := range wrap(strings.Repeat("abc defghijkl ", 100), 20, 10000) {
		assert.LessOrEqual(t, len(l), 20)
	}
}

func TestSeconds(t *testing.T) {
	for text, want := range map[string]time.Duration{"2": 2 * time.Second, "0.5": time.Second / 2, "90s": 90 * time.Second, "5m": 5 * time.Minute, "1e2": 100 * time.Second} {
		var s seconds
		assert.NoError(t, s.Set(text))
		assert.Equal(t, want, time.Duration(s))
	}
	for _, text := range []string{"", "0", "-1", "-5s", "nan", "inf", "1e300", "x"} {
		var s seconds
		assert.Error(t, s.Set(text), text)
	}
}
