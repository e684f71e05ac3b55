package main

import (
	"io"
	"os"

	"golang.org/x/term"
)

// streams are what a command reads from and writes to.
type streams struct {
	in       io.Reader
	out, err io.Writer
	colour   bool // on out
	progress bool // on err
	together bool // out and err are read together, on a terminal
	width    int  // of out in columns, for wrapping
}

const (
	defaultWidth = 100
	leastWidth   = 60
	mostWidth    = 140
)

// terminalStreams are the standard ones. Colour is for a terminal that was
// not asked to do without it (NO_COLOR, see no-color.org).
func terminalStreams() streams {
	s := streams{in: os.Stdin, out: os.Stdout, err: os.Stderr, width: defaultWidth}
	if fd := int(os.Stdout.Fd()); term.IsTerminal(fd) {
		s.colour = os.Getenv("NO_COLOR") == "" && os.Getenv("TERM") != "dumb"
		if w, _, err := term.GetSize(fd); err == nil && w > 0 {
			s.width = min(max(w, leastWidth), mostWidth)
		}
	}
	s.progress = term.IsTerminal(int(os.Stderr.Fd()))
	s.together = s.progress && term.IsTerminal(int(os.Stdout.Fd()))
	return s
}
