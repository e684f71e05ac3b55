package cases

import (
	"strings"
	"unicode/utf8"

	"creaseproof/entropy/source"
)

// cut is a relation found in a text.
type cut struct {
	relation   string // > >= < <= = != ==
	start, end int    // byte offsets
	spelled    string
}

// texRelations are TeX's names of relations.
var texRelations = map[string]string{
	"ge": ">=", "geq": ">=", "geqslant": ">=", "gt": ">",
	"le": "<=", "leq": "<=", "leqslant": "<=", "lt": "<",
	"ne": "!=", "neq": "!=",
}

// cuts lists the relations in a text from left to right.
func cuts(s string) []cut {
	var list []cut
	for i := 0; i < len(s); {
		relation, n := "", 1
		switch s[i] {
		case '<', '>', '=', '!':
			if s[i] != '!' {
				relation = s[i : i+1]
			}
			if i+1 < len(s) && s[i+1] == '=' {
				relation, n = s[i:i+2], 2
			}
		case '\\':
			end := i + 1
			for end < len(s) && ('a' <= s[end] && s[end] <= 'z' || 'A' <= s[end] && s[end] <= 'Z') {
				end++
			}
			relation, n = texRelations[s[i+1:end]], end-i
		default:
			var r rune
			if r, n = utf8.DecodeRuneInString(s[i:]); r == '≥' || r == '⩾' {
				relation = ">="
			} else if r == '≤' || r == '⩽' {
				relation = "<="
			} else if r == '≠' {
				relation = "!="
			}
		}
		if relation != "" {
			list = append(list, cut{relation, i, i + n, s[i : i+n]})
		}
		i += n
	}
	return list
}

// split is a text at a relation: what stands before it and after it, each with
// its place.
func (c cut) split(t source.Text) (left, right source.Text) {
	left, right = t, t
	left.S = t.S[:c.start]
	pos := t.Pos(utf8.RuneCountInString(t.S[:c.end]))
	right.Line, right.Col, right.S = pos.Line, pos.Col, t.S[c.end:]
	return left, right
}

// runes is the offset of the relation counted in runes.
func (c cut) runes(t source.Text) int { return utf8.RuneCountInString(t.S[:c.start]) }

// spaceless is a text with all white space taken out.
func spaceless(s string) string { return strings.Join(strings.Fields(s), "") }
