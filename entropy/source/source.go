package source

import "unicode/utf8"

// Text is a piece of a file. The zero Line and Col mean line 1, column 1.
type Text struct {
	File string // as the user named it; "-" is standard input; "" where there is no file
	Line int    // 1-based line of the first rune of S in the file
	Col  int    // 1-based column, in runes, of the first rune of S
	S    string
}

// Pos is a place in a file, both parts 1-based, columns counted in runes.
// The zero Pos is "nowhere": a formula made by a program.
type Pos struct{ Line, Col int }

// Pos is the place of the rune of S at the offset, counted in runes from 0. An
// offset past the end is the place after the last rune.
func (t Text) Pos(offset int) Pos {
	pos, _, _ := t.locate(offset)
	return pos
}

// locate is the place of the rune at the offset, the line of S it stands in,
// and the column of the first rune of that line.
func (t Text) locate(offset int) (pos Pos, line string, from int) {
	pos = Pos{Line: max(t.Line, 1), Col: max(t.Col, 1)}
	from = pos.Col
	start, i := 0, 0
	for n := 0; n < offset && i < len(t.S); n++ {
		r, size := utf8.DecodeRuneInString(t.S[i:])
		i += size
		pos.Col++
		if r == '\n' {
			pos.Line++
			pos.Col, from, start = 1, 1, i
		}
	}
	end := i
	for end < len(t.S) && t.S[end] != '\n' {
		end++
	}
	return pos, t.S[start:end], from
}
