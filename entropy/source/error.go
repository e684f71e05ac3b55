package source

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// MaxMessage bounds the length in bytes of what Error.Error returns.
const MaxMessage = 1500

const (
	maxFile    = 200 // bytes of a file name shown
	maxProblem = 400 // bytes of the problem shown
	maxAdvice  = 400 // bytes of the advice shown
	before     = 40  // runes of the excerpt before the place
	after      = 20  // runes of the excerpt from the place on
)

// Error is a mistake at a place in a file, with what to write instead. It can
// be built as a literal, or by NewError and NewLineError.
type Error struct {
	File    string // "" prints no file name
	Line    int    // 1-based; 0 prints no place
	Col     int    // 1-based, in runes; 0 prints no column and no caret
	Source  string // the line, or the part of it that is known; "" prints no excerpt
	From    int    // column of the first rune of Source; 0 means 1
	Problem string // what is wrong, in one line
	Advice  string // what to write instead; may be empty
}

// NewError points at the rune of t at the offset, counted in runes from 0.
func NewError(t Text, offset int, problem, advice string) *Error {
	pos, line, from := t.locate(offset)
	return &Error{
		File: t.File, Line: pos.Line, Col: pos.Col,
		Source: line, From: from,
		Problem: problem, Advice: advice,
	}
}

// NewLineError points at column col of the line, whose full text is given.
func NewLineError(file string, line, col int, text, problem, advice string) *Error {
	return &Error{
		File: file, Line: line, Col: col,
		Source: text, From: 1,
		Problem: problem, Advice: advice,
	}
}

// Pos is the place of the error.
func (e *Error) Pos() Pos { return Pos{Line: e.Line, Col: e.Col} }

// Error is "file:line:col: problem", a part of the line with a caret under the
// place, and the advice, on lines of their own; fewer than MaxMessage bytes.
func (e *Error) Error() string {
	var b strings.Builder
	if e.File != "" {
		b.WriteString(tail(safe(e.File, 4*maxFile), maxFile))
		b.WriteByte(':')
	}
	if e.Line > 0 {
		fmt.Fprintf(&b, "%d:", e.Line)
		if e.Col > 0 {
			fmt.Fprintf(&b, "%d:", e.Col)
		}
	}
	if b.Len() > 0 {
		b.WriteByte(' ')
	}
	b.WriteString(head(safe(e.Problem, 2*maxProblem), maxProblem))
	if e.Source != "" && e.Col > 0 {
		line, pad := e.excerpt()
		b.WriteString("\n    " + line + "\n    " + strings.Repeat(" ", pad) + "^")
	}
	if e.Advice != "" {
		b.WriteString("\n    " + head(safe(e.Advice, 2*maxAdvice), maxAdvice))
	}
	return b.String()
}

// excerpt is a window of the line around the column, and how many columns of a
// terminal stand before the place in it.
func (e *Error) excerpt() (line string, pad int) {
	at := max(e.Col-max(e.From, 1), 0)
	// Only the bytes that can be in the window are decoded one by one.
	start := 0
	s := e.Source
	for n := 0; n < at-before && s != ""; n++ {
		_, size := utf8.DecodeRuneInString(s)
		s = s[size:]
		start++
	}
	var b strings.Builder
	if start > 0 {
		b.WriteString("…")
		pad++
	}
	n := start
	for ; s != "" && n < at+after; n++ {
		r, size := utf8.DecodeRuneInString(s)
		if r == '\n' || r == '\r' && (s[size:] == "" || s[size:] == "\n") {
			s = ""
			break
		}
		s = s[size:]
		r = shown(r)
		b.WriteRune(r)
		if n < at {
			pad += width(r)
		}
	}
	if s != "" {
		b.WriteString("…")
	}
	return b.String(), pad
}

// shown is a rune that prints in one place for r: control characters become
// their pictures, and what has no fixed width the replacement character.
func shown(r rune) rune {
	switch {
	case r == ' ':
		return r
	case r < ' ':
		return 0x2400 + r
	case r == 0x7f:
		return 0x2421
	case unicode.Is(unicode.Zs, r):
		return ' '
	case r == utf8.RuneError, unicode.Is(unicode.M, r), !unicode.IsPrint(r):
		return utf8.RuneError
	}
	return r
}

// width is how many columns of a terminal a shown rune takes.
func width(r rune) int {
	switch {
	case r < 0x1100:
		return 1
	case unicode.In(r, unicode.Han, unicode.Hangul, unicode.Hiragana, unicode.Katakana),
		0xff01 <= r && r <= 0xff60, 0x1f300 <= r && r <= 0x1faff:
		return 2
	}
	return 1
}

// safe is the start of s, at most about limit bytes, with every rune shown.
func safe(s string, limit int) string {
	if len(s) > limit {
		// Keep the end of a path, the start of everything else: tail and head
		// cut again, so keep both.
		s = s[:limit/2] + "…" + s[len(s)-limit/2:]
	}
	return strings.Map(shown, s)
}

// head cuts s to at most limit bytes at a rune, marking the cut.
func head(s string, limit int) string {
	if len(s) <= limit {
		return s
	}
	cut := limit - len("…")
	for cut > 0 && !utf8.RuneStart(s[cut]) {
		cut--
	}
	return s[:cut] + "…"
}

// tail cuts the start of s away, leaving at most limit bytes.
func tail(s string, limit int) string {
	if len(s) <= limit {
		return s
	}
	cut := len(s) - limit + len("…")
	for cut < len(s) && !utf8.RuneStart(s[cut]) {
		cut++
	}
	return "…" + s[cut:]
}
