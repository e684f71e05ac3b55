package casefile

import (
	"sort"
	"strings"
	"unicode/utf8"

	"creaseproof/entropy/source"
)

const (
	maxProblems = 10
	maxText     = 2500 // bytes of an Errors' text
)

// Errors is what is wrong with a file, in the order of the file: at most ten
// problems, each a *source.Error with its place.
type Errors []error

// Error gives the problems one after the other, at most 2500 bytes of them.
func (e Errors) Error() string {
	const more = "\n(and more)"
	var b strings.Builder
	for i, err := range e {
		s := err.Error()
		if i > 0 {
			if b.Len()+1+len(s)+len(more) > maxText {
				b.WriteString(more)
				break
			}
			b.WriteByte('\n')
		}
		b.WriteString(clip(s, maxText-len(more)))
	}
	return b.String()
}

// Unwrap returns the problems, for errors.As.
func (e Errors) Unwrap() []error { return e }

// problem is one thing that is wrong, at a byte offset.
type problem struct {
	off             int
	problem, advice string
}

// report collects the problems of a file.
type report struct {
	file     string
	place    *placer
	problems []problem
}

// add notes a problem; a second one at the same place is a consequence of the
// first and is dropped.
func (r *report) add(off int, what, advice string) {
	if r.full() {
		return
	}
	for _, p := range r.problems {
		if p.off == off && !strings.Contains(what, " has no ") {
			return
		}
	}
	r.problems = append(r.problems, problem{off, what, advice})
}

func (r *report) full() bool { return len(r.problems) >= maxProblems }

// at is the problem at its place, with the line it stands on.
func (r *report) at(p problem) error {
	pos := r.place.at(p.off)
	return source.NewLineError(r.file, pos.Line, pos.Col, r.place.text(pos.Line), p.problem, p.advice)
}

// whole is an error about a file as a whole, which has no place in it.
func whole(file, what, advice string) error {
	return Errors{&source.Error{File: file, Problem: what, Advice: advice}}
}

// err is nil where nothing is wrong.
func (r *report) err() error {
	if len(r.problems) == 0 {
		return nil
	}
	sort.SliceStable(r.problems, func(i, j int) bool { return r.problems[i].off < r.problems[j].off })
	var list Errors
	for _, p := range r.problems {
		list = append(list, r.at(p))
	}
	return list
}

// nearest is the candidate closest to s in edit distance, "" if none is close.
func nearest(s string, candidates []string) string {
	if len(s) > 40 {
		return ""
	}
	best, name := 1+max(1, utf8.RuneCountInString(s)/3), ""
	for _, c := range candidates {
		if n := distance(strings.ToLower(s), c); n < best {
			best, name = n, c
		}
	}
	return name
}

// distance is the edit distance in which a swap of neighbours counts one
// (optimal string alignment).
func distance(a, b string) int {
	s, t := []rune(a), []rune(b)
	var two []int
	row := make([]int, len(t)+1)
	for j := range row {
		row[j] = j
	}
	for i := 1; i <= len(s); i++ {
		next := make([]int, len(t)+1)
		next[0] = i
		for j := 1; j <= len(t); j++ {
			cost := 1
			if s[i-1] == t[j-1] {
				cost = 0
			}
			next[j] = min(row[j]+1, next[j-1]+1, row[j-1]+cost)
			if i > 1 && j > 1 && s[i-1] == t[j-2] && s[i-2] == t[j-1] {
				next[j] = min(next[j], two[j-2]+1)
			}
		}
		two, row = row, next
	}
	return row[len(t)]
}

// clip shortens a text to n bytes.
func clip(s string, n int) string {
	if len(s) <= n {
		return s
	}
	n -= len("…")
	for n > 0 && !utf8.RuneStart(s[n]) {
		n--
	}
	return s[:n] + "…"
}

// short clips what a user wrote, and leaves no control character in it.
func short(s string) string {
	return strings.Map(func(c rune) rune {
		if c < ' ' || c == 0x7f {
			return '�'
		}
		return c
	}, clip(s, 60))
}

// quote is short between double quotes.
func quote(s string) string { return `"` + short(s) + `"` }
