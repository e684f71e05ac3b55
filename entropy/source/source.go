// Package source carries places in a user's files, and errors that point at
// them. Every formula is a piece of some file: a Text knows where in the file
// it begins, so that an error in the formula is reported in the file.
package source

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
