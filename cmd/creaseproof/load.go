package main

import (
	"context"
	"errors"
	"fmt"
	"io"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
)

// load reads the cases and says what is wrong with those that cannot be read.
// It gives up waiting for a slow file or standard input when ctx ends.
func load(ctx context.Context, args []string, s streams) (list []*cases.Case, bad bool, err error) {
	type loaded struct {
		list   []*cases.Case
		failed []error
	}
	done := make(chan loaded, 1)
	go func() {
		l, f := cases.Load(args, s.in)
		done <- loaded{l, f}
	}()
	select {
	case l := <-done:
		for _, e := range l.failed {
			complain(s.err, e)
		}
		return l.list, len(l.failed) > 0, nil
	case <-ctx.Done():
		return nil, false, status(exitInterrupted)
	}
}

// maxComplaint bounds in bytes what is said about one file.
const maxComplaint = 2400

// complain prints an error about a file.
func complain(w io.Writer, err error) {
	var list casefile.Errors
	if !errors.As(err, &list) {
		fmt.Fprintln(w, err)
		return
	}
	said := 0
	for i, e := range list {
		text := e.Error() + "\n"
		if said+len(text)+40 > maxComplaint {
			fmt.Fprintf(w, "and %d more of the same file\n", len(list)-i)
			return
		}
		io.WriteString(w, text)
		said += len(text)
	}
}
