package cases

import (
	"bytes"
	"errors"
	"fmt"
	"unicode/utf8"

	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// maxFaults bounds how many mistakes of one file are reported.
const maxFaults = 10

// text is the file a case was read from, for the excerpts of errors.
type text struct {
	file string
	data []byte
}

func newText(file string, data []byte) *text {
	return &text{file, bytes.TrimPrefix(data, []byte("\ufeff"))}
}

// line is the line of the given number, 1-based, without its end.
func (t *text) line(n int) string {
	data := t.data
	for ; n > 1; n-- {
		_, rest, ok := bytes.Cut(data, []byte("\n"))
		if !ok {
			return ""
		}
		data = rest
	}
	data, _, _ = bytes.Cut(data, []byte("\n"))
	return string(bytes.TrimSuffix(data, []byte("\r")))
}

// at is an error at a place of the file.
func (t *text) at(pos source.Pos, advice, format string, args ...any) *source.Error {
	return source.NewLineError(t.file, pos.Line, pos.Col, t.line(pos.Line), fmt.Sprintf(format, args...), advice)
}

// place gives an error of any package its place in the file. What has none is
// put at the fallback.
func (t *text) place(err error, fallback source.Pos) error {
	var placed *source.Error
	if errors.As(err, &placed) {
		return placed
	}
	var fault *entropy.Error
	if errors.As(err, &fault) {
		if fault.At != (source.Pos{}) {
			fallback = fault.At
		}
		return t.at(fallback, fault.Advice, "%v", fault.Err)
	}
	var name *formula.NameError
	if errors.As(err, &name) {
		return t.at(fallback, name.Advice, "%s %q: %s", name.Kind, Clip(name.Name, 60), name.Problem)
	}
	return t.at(fallback, "", "%v", err)
}

// faults are the mistakes of a file found so far.
type faults struct {
	text *text
	list casefile.Errors
}

func (f *faults) full() bool { return len(f.list) >= maxFaults }

func (f *faults) add(err error) {
	if err != nil && !f.full() {
		f.list = append(f.list, err)
	}
}

func (f *faults) fault(pos source.Pos, advice, format string, args ...any) {
	f.add(f.text.at(pos, advice, format, args...))
}

// Clip shortens a text to at most n bytes, at a rune.
func Clip(s string, n int) string {
	if len(s) <= n {
		return s
	}
	for n > 0 && !utf8.RuneStart(s[n]) {
		n--
	}
	return s[:n] + "…"
}
