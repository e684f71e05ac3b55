package main

import (
	"context"
	"errors"
	"io"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
	"creaseproof/entropy/source"
)

// load reads the cases and says what is wrong with those that cannot be read,
// of which it returns the number.
// It gives up waiting for a slow file or standard input when ctx ends.
func load(ctx context.Context, args []string, in io.Reader, say *complaints) (list []*cases.Case, bad int, err error) {
	type loaded struct {
		list   []*cases.Case
		failed []error
	}
	done := make(chan loaded, 1)
	go func() {
		l, f := cases.Load(args, in)
		done <- loaded{l, f}
	}()
	select {
	case l := <-done:
		for _, e := range l.failed {
			say.add(e)
		}
		return l.list, len(l.failed), nil
	case <-ctx.Done():
		return nil, 0, status(exitInterrupted)
	}
}

// maxComplaints bounds in bytes what is said about one file.
const maxComplaints = 2400

// complaints says what is wrong with files, on standard error.
type complaints struct {
	w    io.Writer
	said map[string]int // bytes, by file; beyond maxComplaints where that was said
}

// add prints an error, unless enough was said about its file.
func (c *complaints) add(err error) {
	const more = "and more of this file\n"
	var list casefile.Errors
	if errors.As(err, &list) {
		for _, e := range list {
			c.add(e)
		}
		return
	}
	file := ""
	var placed *source.Error
	if errors.As(err, &placed) {
		file = placed.File
	}
	if c.said == nil {
		c.said = map[string]int{}
	}
	text := err.Error() + "\n"
	switch n := c.said[file]; {
	case n > maxComplaints:
	case n+len(text)+len(more) > maxComplaints:
		io.WriteString(c.w, more)
		c.said[file] = maxComplaints + 1
	default:
		io.WriteString(c.w, text)
		c.said[file] = n + len(text)
	}
}
