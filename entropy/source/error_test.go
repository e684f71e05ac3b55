package source

import (
	"fmt"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/stretchr/testify/require"
)

func TestErrorOfAText(t *testing.T) {
	e := NewError(Text{File: "a.toml", Line: 4, Col: 9, S: "ε + 1/2 x"}, 5, "two readings", `write "(1/2) x"`)
	require.Equal(t, Pos{4, 14}, e.Pos())
	require.Equal(t, "a.toml:4:14: two readings\n    ε + 1/2 x\n         ^\n    write \"(1/2) x\"", e.Error())
}

func TestErrorOfALine(t *testing.T) {
	e := NewLineError("a.toml", 2, 1, "spaec = 3\r\n", "unknown key", "did you mean space?")
	require.Equal(t, "a.toml:2:1: unknown key\n    spaec = 3\n    ^\n    did you mean space?", e.Error())
}

func TestErrorWithoutAPlace(t *testing.T) {
	require.Equal(t, "a.toml: the file is empty", (&Error{File: "a.toml", Problem: "the file is empty"}).Error())
	require.Equal(t, "-:3: odd", (&Error{File: "-", Line: 3, Problem: "odd"}).Error())
	require.Equal(t, "odd", (&Error{Problem: "odd"}).Error())
}

func TestErrorInALaterLineOfAText(t *testing.T) {
	e := NewError(Text{Line: 4, Col: 9, S: "ab\ncdef\ng"}, 5, "p", "")
	require.Equal(t, "5:3: p\n    cdef\n      ^", e.Error())
}

func TestWindow(t *testing.T) {
	e := NewError(Text{S: strings.Repeat("a", 1000) + "b" + strings.Repeat("c", 1000000)}, 1000, "p", "")
	require.Equal(t, "1:1001: p\n    …"+strings.Repeat("a", before)+"b"+strings.Repeat("c", after-1)+"…\n    "+
		strings.Repeat(" ", before+1)+"^", e.Error())
}

func TestControlCharactersAreShown(t *testing.T) {
	e := NewError(Text{S: "a\tb\x00\x1b[31m\xff\u202e\u0301c"}, 2, "p\n\tq", "r\x07")
	require.Equal(t, "1:3: p␊␉q\n    a␉b␀␛[31m���c\n      ^\n    r␇", e.Error())
}

func TestCaretUnderWideRunes(t *testing.T) {
	e := NewError(Text{S: "漢字x"}, 2, "p", "")
	require.Equal(t, "1:3: p\n    漢字x\n        ^", e.Error())
}

func TestPosPastTheEnd(t *testing.T) {
	require.Equal(t, Pos{1, 3}, Text{S: "ab"}.Pos(100))
	require.Equal(t, Pos{2, 7}, Text{Line: 2, Col: 5, S: "εξ"}.Pos(2))
}

func FuzzError(f *testing.F) {
	f.Add("a.toml", 1, 1, "text", 3, "problem", "advice")
	f.Add(strings.Repeat("é", 500), 1<<60, 1<<60, strings.Repeat("漢", 5000), 2500, strings.Repeat("\xff", 900), strings.Repeat("\n", 900))
	f.Add("", -1, -5, "", -7, "", "")
	f.Fuzz(func(t *testing.T, file string, line, col int, s string, at int, problem, advice string) {
		for _, e := range []*Error{
			NewError(Text{File: file, Line: line, Col: col, S: s}, at, problem, advice),
			NewLineError(file, line, at, s, problem, advice),
			{File: file, Line: line, Col: col, From: at, Source: s, Problem: problem, Advice: advice},
		} {
			msg := e.Error()
			require.Less(t, len(msg), MaxMessage)
			require.True(t, utf8.ValidString(msg))
			require.LessOrEqual(t, strings.Count(msg, "\n"), 3)
		}
	})
}

func ExampleNewError() {
	formula := Text{File: "mine.toml", Line: 7, Col: 6, S: "u_z + .5"}
	fmt.Println(NewError(formula, 6, "a number begins with a digit", `write "0.5"`))
	// Output:
	// mine.toml:7:12: a number begins with a digit
	//     u_z + .5
	//           ^
	//     write "0.5"
}
