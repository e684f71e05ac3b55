package main

import (
	"fmt"
	"strings"
	"unicode/utf8"

	"creaseproof/identity"
)

// style writes text with colours, or without.
type style bool

func (s style) paint(code, text string) string {
	if !s || text == "" {
		return text
	}
	return "\x1b[" + code + "m" + text + "\x1b[0m"
}

func (s style) head(text string) string  { return s.paint("1", text) }
func (s style) faint(text string) string { return s.paint("2", text) }
func (s style) alarm(text string) string { return s.paint("1;31", text) }

func (s style) verdict(v identity.Verdict, text string) string {
	switch v {
	case identity.Proved:
		return s.paint("32", text)
	case identity.Refuted:
		return s.paint("35", text)
	}
	return s.paint("33", text)
}

// pad fills a text with spaces to n columns.
func pad(text string, n int) string {
	if k := utf8.RuneCountInString(text); k < n {
		return text + strings.Repeat(" ", n-k)
	}
	return text
}

// wrap breaks a text between words into lines of at most n columns. A word
// longer than a line is broken; a text longer than most columns is cut.
func wrap(text string, n, most int) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(clip(text, most)) {
		for {
			k := utf8.RuneCountInString(word)
			room := n - utf8.RuneCountInString(line) - 1
			if line == "" {
				room = n
			}
			if k <= room {
				break
			}
			if line == "" { // the word is longer than a line
				r := []rune(word)
				lines = append(lines, string(r[:n]))
				word = string(r[n:])
				continue
			}
			lines, line = append(lines, line), ""
		}
		if line != "" {
			line += " "
		}
		line += word
	}
	return append(lines, line)
}

// count is a number and what is counted.
func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}
