package mesh

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"strconv"
)

// A lexer cuts text into words and ends of line.
type lexer struct {
	r         *bufio.Reader
	format    string
	obj       bool // # begins a comment, a backslash joins lines
	line, col int  // of the next character
	at        [2]int
	word      []byte // the last one; at most longest bytes of it
	long      bool   // it was longer
}

// longest is the number of bytes of a word that are kept.
const longest = 64

func newLexer(r *bufio.Reader, format string) *lexer {
	if head, _ := r.Peek(len(bom)); string(head) == bom {
		_, _ = r.Discard(len(bom))
	}
	return &lexer{r: r, format: format, obj: format == "OBJ", line: 1, col: 1, word: make([]byte, 0, longest)}
}

// token is what next found.
type token int

const (
	wordToken token = iota
	lineToken       // the end of a line
	endToken        // the end of the file
)

// get reads a byte and keeps count of lines and columns. A carriage return
// without a line feed ends a line too.
func (l *lexer) get() (byte, error) {
	c, err := l.r.ReadByte()
	if err != nil {
		return 0, err
	}
	if c == '\r' {
		if after, err := l.r.Peek(1); err == nil && after[0] == '\n' {
			return ' ', nil
		}
		c = '\n'
	}
	switch {
	case c == '\n':
		l.line, l.col = l.line+1, 1
	case c&0xc0 != 0x80: // not inside a character
		l.col++
	}
	return c, nil
}

func blank(c byte) bool { return c == ' ' || c == '\t' || c == '\v' || c == '\f' }

// next reads a word, the end of a line or of the file.
func (l *lexer) next() (token, error) {
	l.word, l.long = l.word[:0], false
	for {
		l.at = [2]int{l.line, l.col}
		c, err := l.get()
		switch {
		case err == io.EOF:
			return endToken, nil
		case err != nil:
			return endToken, err
		case c == '\n':
			return lineToken, nil
		case blank(c):
			continue
		case l.obj && c == '#':
			return l.skip()
		case l.obj && c == '\\' && l.joined():
			continue
		}
		l.word = append(l.word, c)
		break
	}
	for {
		p, err := l.r.Peek(1)
		if err == io.EOF {
			return wordToken, nil
		}
		if err != nil {
			return wordToken, err
		}
		c := p[0]
		if blank(c) || c == '\n' || c == '\r' || l.obj && c == '#' {
			return wordToken, nil
		}
		if l.obj && c == '\\' {
			if p, _ := l.r.Peek(2); len(p) == 2 && (p[1] == '\n' || p[1] == '\r') {
				return wordToken, nil
			}
		}
		if _, err = l.get(); err != nil {
			return wordToken, err
		}
		if len(l.word) == longest {
			l.long = true
			continue
		}
		l.word = append(l.word, c)
	}
}

// joined reads the end of line behind a backslash, if there is one.
func (l *lexer) joined() bool {
	p, _ := l.r.Peek(2)
	switch {
	case len(p) == 2 && p[0] == '\r' && p[1] == '\n':
		_, _ = l.get()
		_, _ = l.get()
	case len(p) > 0 && (p[0] == '\n' || p[0] == '\r'):
		_, _ = l.get()
	default:
		return false
	}
	return true
}

// skip passes over the rest of the line and its end.
func (l *lexer) skip() (token, error) {
	for {
		c, err := l.get()
		switch {
		case err == io.EOF:
			return endToken, nil
		case err != nil:
			return endToken, err
		case l.obj && c == '\\' && l.joined():
		case c == '\n':
			return lineToken, nil
		}
	}
}

// is compares the word with a keyword in lower case.
func (l *lexer) is(keyword string) bool {
	return !l.long && len(l.word) == len(keyword) && bytes.EqualFold(l.word, []byte(keyword))
}

// shown is the word as it may stand in a message.
func (l *lexer) shown() string {
	w := l.word
	if len(w) > 24 {
		return fmt.Sprintf("%q...", w[:24])
	}
	return fmt.Sprintf("%q", w)
}

// fault is an error at the last word.
func (l *lexer) fault(format string, a ...any) error {
	return &FormatError{Format: l.format, Line: l.at[0], Col: l.at[1], Problem: fmt.Sprintf(format, a...), Err: ErrFormat}
}

// limit is an error at the last word about a size.
func (l *lexer) limit(problem string) error {
	return &FormatError{Format: l.format, Line: l.at[0], Col: l.at[1], Problem: problem, Err: ErrLimit}
}

// number is the word as a number in decimal notation, which may be infinite
// or NaN.
func (l *lexer) number() (float64, error) {
	if l.long || bytes.ContainsAny(l.word, "xX_pP") {
		return 0, l.fault("%s is no number in decimal notation", l.shown())
	}
	x, err := strconv.ParseFloat(string(l.word), 64)
	if err != nil && !errors.Is(err, strconv.ErrRange) {
		if bytes.IndexByte(l.word, ',') >= 0 {
			return 0, l.fault("%s is no number: the decimal sign is a point", l.shown())
		}
		return 0, l.fault("%s is no number", l.shown())
	}
	return x, nil
}

// coordinate is the word as a finite coordinate.
func (l *lexer) coordinate() (float64, error) {
	x, err := l.number()
	if err != nil {
		return 0, err
	}
	if bad := usable(x); bad != "" {
		return 0, l.fault("%s: %s", bad, l.shown())
	}
	return x, nil
}
