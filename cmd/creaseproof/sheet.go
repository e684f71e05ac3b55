package main

import (
	"fmt"
	"io"
	"strings"

	"creaseproof/cases"
	"creaseproof/identity"
)

// sheet is a page of results, one case after the other.
type sheet struct {
	w     io.Writer
	style style
	width int

	current *cases.Case
	cases   int // written so far
}

const (
	mostName = 44   // columns of a name
	mostText = 2000 // runes of a reason or a witness shown
	indent   = "                  "
)

// verdicts in the order in which they are counted.
var verdicts = []identity.Verdict{identity.Proved, identity.Refuted, identity.Supported, identity.Open}

// header writes the line that a case begins with.
func (s *sheet) header(c *cases.Case) {
	if s.cases > 0 {
		fmt.Fprintln(s.w)
	}
	s.cases++
	s.current = c
	title := ""
	if c.Title != "" {
		title = "  " + c.Title
	}
	fmt.Fprintln(s.w, s.style.head(c.Name)+title)
}

// mark says whether an expectation is met.
func (s *sheet) mark(met bool) string {
	if met {
		return "ok "
	}
	return s.style.alarm("NOT")
}

// nothing writes a line for what has no result.
func (s *sheet) nothing(name string, width int, why string) {
	fmt.Fprintf(s.w, "  %s  %s  %s  %s\n", s.mark(false), pad("-", 9), pad(name, width), s.style.faint(why))
}

// note writes a text below a result.
func (s *sheet) note(label, text string) {
	if label != "" {
		text = label + " " + text
	}
	s.lines(nil, text)
}

func (s *sheet) lines(paint func(string) string, text string) {
	for _, l := range wrap(text, s.width-len(indent), mostText) {
		if paint != nil {
			l = paint(l)
		}
		fmt.Fprintln(s.w, indent+l)
	}
}

// tally is how the results of a run came out.
type tally struct {
	met, unmet int
	unread     int  // cases
	missing    bool // there is something without a result
}

// last writes the last line: what there was, how it came out, and whether the
// expectations are met.
func (s *sheet) last(what string, parts []string, n tally) {
	if n.unread > 0 {
		parts = append(parts, s.style.alarm(fmt.Sprintf("%s not read", count(n.unread, "case", "cases"))))
	}
	switch {
	case n.unmet > 0:
		parts = append(parts, s.style.alarm(fmt.Sprintf("%d not as expected", n.unmet)))
	case (n.missing || n.unread > 0) && n.met > 0:
		parts = append(parts, "the others as expected")
	case n.met > 0:
		parts = append(parts, "all as expected")
	}
	fmt.Fprintf(s.w, "\n%s: %s\n", what, strings.Join(parts, ", "))
}
