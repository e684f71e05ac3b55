package formula

import (
	"fmt"
	"maps"
	"slices"
	"strings"
	"unicode/utf8"
)

// clip shortens a piece of a formula for a message.
func clip(s string) string {
	const most = 60
	if utf8.RuneCountInString(s) <= most {
		return s
	}
	n := 0
	for i := range s {
		if n == most {
			return s[:i] + "…"
		}
		n++
	}
	return s
}

// nearest is the candidate that differs from name least, "" where all differ
// by more than a third of its length (one letter, for a short name).
func nearest(name string, candidates []string) string {
	if len(name) > maxName {
		return ""
	}
	best, out := max(len(name)/3, 1)+1, ""
	for _, c := range candidates {
		if d := distance(name, c); d < best && d < max(len(name), len(c)) {
			best, out = d, c
		}
	}
	return out
}

// distance is the least number of letters inserted, deleted, replaced or
// swapped with a neighbour that turns a into b (optimal string alignment);
// a change of case counts as well.
func distance(a, b string) int {
	prev2 := make([]int, len(b)+1)
	prev := make([]int, len(b)+1)
	row := make([]int, len(b)+1)
	for j := range prev {
		prev[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			row[j] = min(prev[j]+1, row[j-1]+1, prev[j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], prev2[j-2]+1)
			}
		}
		prev2, prev, row = prev, row, prev2
	}
	return prev[len(b)]
}

// laplacian is the advice to write the Laplacian of a name in derivatives.
func (s *Scope) laplacian(of string) string {
	var terms []string
	for _, x := range s.code {
		if s.kinds[x] == Coordinate {
			terms = append(terms, fmt.Sprintf("%s_%s%s", of, x, x))
		}
	}
	if len(terms) == 0 {
		return "write a Laplacian as a sum of second derivatives"
	}
	return fmt.Sprintf("write %q for the Laplacian", strings.Join(terms, " + "))
}

// unknownName is the message about a name that is not declared.
func (s *Scope) unknownName(name string) (problem, advice string) {
	problem = fmt.Sprintf("unknown name %q", clip(name))
	if len(name) > maxName {
		return problem, ""
	}
	if name == "ln" {
		return problem, `write "log(x)"`
	}
	if of, ok := strings.CutPrefix(name, "Delta"); ok && s.kinds["Delta"] == Undeclared {
		switch s.kinds[of] {
		case Unknown, Let:
			return problem, s.laplacian(of)
		}
		if of == "" {
			return problem, s.laplacian("u")
		}
	}
	words := append([]string{"pi"}, s.names...)
	if parts := split(name, words); parts != nil {
		product := strings.Join(parts, " ")
		advice = fmt.Sprintf("write %q for the product", product)
		if of := parts[0]; s.kinds[of] == Unknown || s.kinds[of] == Let {
			if by := s.Subscript(strings.Join(parts[1:], "")); by != nil {
				advice += fmt.Sprintf(" or %q for the derivative", of+"_"+strings.Join(by, ""))
			}
		}
		return problem, advice
	}
	// A declared name with digits run on to it.
	base := strings.TrimRight(name, "0123456789")
	if digits := name[len(base):]; digits != "" && s.kinds[base] != Undeclared {
		return problem, fmt.Sprintf("write %q for the power or %q for the product", base+"^"+digits, digits+" "+base)
	}
	words = append(words, slices.Sorted(maps.Keys(functions))...)
	if near := nearest(name, words); near != "" {
		return problem, fmt.Sprintf("did you mean %q?", near)
	}
	return problem, "declare it, or correct the spelling"
}
