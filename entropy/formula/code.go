package formula

import "strings"

// A code is the set of words that subscripts are written with, the coordinates
// and frame axes. Every subscript can be read in one way at most exactly when
// the code is uniquely decodable.

// ambiguity finds a string that is two different sequences of the words, by
// the algorithm of Sardinas and Patterson ("A necessary and sufficient
// condition for the unique decomposition of coded messages", IRE Convention
// Record 8, 1953), searched breadth first so that the example is short. The
// words are distinct and not empty. ok is false where there is no such string.
func ambiguity(words []string) (one, two []string, ok bool) {
	// A state is a dangling suffix: the reading `ahead` spells what `behind`
	// spells, followed by the suffix.
	type state struct {
		suffix        string
		behind, ahead []string
	}
	var queue []state
	seen := map[string]bool{}
	push := func(suffix string, behind, ahead []string) {
		if !seen[suffix] {
			seen[suffix] = true
			queue = append(queue, state{suffix, behind, ahead})
		}
	}
	for _, a := range words {
		for _, b := range words {
			if a != b && strings.HasPrefix(b, a) {
				push(b[len(a):], []string{a}, []string{b})
			}
		}
	}
	for len(queue) > 0 {
		s := queue[0]
		queue = queue[1:]
		for _, w := range words {
			next := append(append([]string(nil), s.behind...), w)
			switch {
			case w == s.suffix:
				return next, s.ahead, true
			case strings.HasPrefix(s.suffix, w):
				push(s.suffix[len(w):], next, s.ahead)
			case strings.HasPrefix(w, s.suffix):
				push(w[len(s.suffix):], s.ahead, next)
			}
		}
	}
	return nil, nil, false
}

// split writes s as a sequence of the words, as few as possible; nil where it
// is none. Over a uniquely decodable code the sequence is the only one.
func split(s string, words []string) []string {
	const unreached = -1
	type step struct{ count, word int }
	best := make([]step, len(s)+1)
	for i := range best {
		best[i] = step{unreached, 0}
	}
	best[0].count = 0
	for i := range s {
		if best[i].count == unreached {
			continue
		}
		for k, w := range words {
			if !strings.HasPrefix(s[i:], w) {
				continue
			}
			j := i + len(w)
			if c := best[i].count + 1; best[j].count == unreached || c < best[j].count {
				best[j] = step{c, k}
			}
		}
	}
	n := best[len(s)].count
	if n <= 0 {
		return nil
	}
	out := make([]string, n)
	for j := len(s); n > 0; {
		n--
		out[n] = words[best[j].word]
		j -= len(out[n])
	}
	return out
}
