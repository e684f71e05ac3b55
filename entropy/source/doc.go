// Package source carries places in a user's files, and errors that point at
// them. Every formula is a piece of some file: a Text knows where in the file
// it begins, so that an error in the formula is reported in the file.
//
// An Error prints, for example,
//
//	mine.toml:7:11: a division by factors written side by side has two readings
//	    u_x^2/2 eps
//	         ^
//	    write "(u_x^2/2) eps" or "u_x^2/(2 eps)"
//
// However long the line and however hostile its bytes, the message stays under
// MaxMessage bytes, is valid UTF-8 and holds no control character but the
// newlines between its parts.
package source
