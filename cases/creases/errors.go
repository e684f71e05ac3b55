package creases

import (
	"errors"
	"fmt"
	"unicode/utf8"

	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// fault is a mistake in the file at the beginning of a text.
func fault(t source.Text, advice, format string, args ...any) error {
	return source.NewError(t, 0, fmt.Sprintf(format, args...), advice)
}

// placed gives an error of evaluating the formula t its place in the file. One
// that arises in a formula which t refers to is put at t and names the other.
func placed(t source.Text, err error) error {
	if err == nil {
		return nil
	}
	var done *source.Error
	if errors.As(err, &done) {
		return err
	}
	problem, advice, pos := err.Error(), "", source.Pos{}
	var f *entropy.Error
	var name *formula.NameError
	switch {
	case errors.As(err, &f):
		problem, advice, pos = f.Err.Error(), f.Advice, f.At
	case errors.As(err, &name):
		problem, advice = fmt.Sprintf("%s %q: %s", name.Kind, name.Name, name.Problem), name.Advice
	}
	start := t.Pos(0)
	if off := pos.Col - start.Col; pos.Line == start.Line && off >= 0 && off <= utf8.RuneCountInString(t.S) {
		return source.NewError(t, off, problem, advice)
	}
	if pos == (source.Pos{}) {
		return source.NewError(t, 0, problem, advice)
	}
	return source.NewError(t, 0, fmt.Sprintf("%s (in the formula at line %d, column %d)", problem, pos.Line, pos.Col), advice)
}

// header is the name of a surface as a place for errors that concern all of it.
func header(file string, s *casefile.Surface) source.Text {
	return source.Text{File: file, Line: s.Pos.Line, Col: s.Pos.Col, S: s.Name}
}

func nameText(file string, n casefile.Name) source.Text {
	return source.Text{File: file, Line: n.Pos.Line, Col: n.Pos.Col, S: n.S}
}
