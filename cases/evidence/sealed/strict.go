package sealed

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
)

// maxTokens bounds names, values and brackets of a file. Each takes up to a
// few hundred bytes once it is decoded.
const maxTokens = 1_000_000

// tables are the objects whose names are those of variables, where capitals
// are told from small letters.
var tables = []string{"m", "jet", "angle", "plus", "minus", "normal", "values"}

// strict refuses what package encoding/json lets pass and another reader may
// read otherwise: a name that stands twice in an object, or once in capitals
// and once in small letters. It refuses too many values as well.
func strict(data []byte) error {
	type level struct {
		seen map[string]bool // nil in a list
		name string          // the last one, its value not yet read; empty before a name
		fold bool
	}
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.UseNumber()
	var stack []*level
	for range maxTokens {
		tok, err := dec.Token()
		if errors.Is(err, io.EOF) {
			return nil
		}
		if err != nil {
			return err
		}
		var top *level
		if len(stack) > 0 {
			top = stack[len(stack)-1]
		}
		if tok == json.Delim('}') || tok == json.Delim(']') {
			stack = stack[:len(stack)-1]
			continue
		}
		if s, ok := tok.(string); ok && top != nil && top.seen != nil && top.name == "" {
			id := s
			if top.fold {
				id = strings.ToLower(s)
			}
			if s == "" || top.seen[id] {
				return fmt.Errorf("the name %.40q is empty or stands twice", s)
			}
			top.seen[id], top.name = true, s
			continue
		}
		next := &level{fold: true}
		if top != nil {
			next.fold = top.seen == nil || !slices.Contains(tables, strings.ToLower(top.name))
			top.name = ""
		}
		switch tok {
		case json.Delim('{'):
			next.seen = map[string]bool{}
			stack = append(stack, next)
		case json.Delim('['):
			stack = append(stack, next)
		}
	}
	return fmt.Errorf("the file has more than %d names and values", maxTokens)
}
