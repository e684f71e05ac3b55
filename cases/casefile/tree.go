package casefile

import (
	"bytes"
	"errors"
	"fmt"
	"strings"

	"github.com/pelletier/go-toml/v2/unstable"
)

const (
	maxBytes      = 8 << 20
	maxValues     = 100_000 // keys and values in a file
	maxSeparators = 500_000 // commas and full stops in a file
	maxParts      = 4       // of a dotted key; no key of a case needs more
	maxDepth      = 16      // of arrays and inline tables
)

type kind uint8

const (
	stringKind kind = iota
	integerKind
	floatKind
	boolKind
	dateKind
	arrayKind  // [ ... ]
	tableKind  // [name], or the parent of one
	dottedKind // the parent in a dotted key
	inlineKind // { ... }
	listKind   // [[name]], its tables in items
)

func (k kind) String() string {
	return [...]string{"a string", "a number", "a number", "true or false", "a date", "a list", "a table", "a table", "a table", "a list of tables"}[k]
}

func (k kind) isTable() bool { return k == tableKind || k == dottedKind || k == inlineKind }

// value is a TOML value with its place: the offset of its first byte, for a
// string of the first byte of its content.
type value struct {
	kind     kind
	off      int
	text     string // a string decoded, another scalar as written
	literal  bool   // a string in single quotes
	multi    bool   // a string in triple quotes
	items    []*value
	entries  []*entry
	index    map[string]*entry
	explicit bool // a table that had its own header
}

type entry struct {
	key   string
	off   int
	value *value
}

func (v *value) get(key string) *value {
	if e := v.index[key]; e != nil {
		return e.value
	}
	return nil
}

func (v *value) add(key string, off int, w *value) {
	if v.index == nil {
		v.index = make(map[string]*entry)
	}
	e := &entry{key, off, w}
	v.entries = append(v.entries, e)
	v.index[key] = e
}

// tree builds the tree of a document. It keeps to the rules of TOML on
// defining a key or a table twice, which the order-preserving parser leaves to
// its caller.
type tree struct {
	p       unstable.Parser
	data    []byte
	root    *value
	current *value
	count   int
	report  *report
}

// parse returns the root table, and whether the document is well-formed as
// far as its tree goes. Problems are added to the report.
func parse(data []byte, r *report) (*value, bool) {
	t := &tree{data: data, root: &value{kind: tableKind}, report: r}
	t.current = t.root
	t.p.Reset(data)
	for t.p.NextExpression() {
		n := t.p.Expression()
		switch n.Kind {
		case unstable.KeyValue:
			t.assign(t.current, n)
		case unstable.Table:
			t.header(n, false)
		case unstable.ArrayTable:
			t.header(n, true)
		}
		if t.count > maxValues {
			r.add(0, fmt.Sprintf("this file holds more than %d values", maxValues), "a case is a few dozen formulas; split it into several files")
			return nil, false
		}
		if r.full() {
			return nil, false
		}
	}
	if err := t.p.Error(); err != nil {
		t.syntax(err)
		return nil, false
	}
	return t.root, true
}

type part struct {
	key string
	off int
}

// key reads a dotted key; nil if it is too long.
func (t *tree) key(n *unstable.Node) []part {
	var parts []part
	for it := n.Key(); it.Next(); {
		k := it.Node()
		off := int(k.Raw.Offset)
		if c := t.data[off]; c == '"' || c == '\'' {
			off++
		}
		if len(parts) == maxParts {
			t.report.add(off, fmt.Sprintf("a key of more than %d parts", maxParts), "no key of a case is that long: compare [field.Sigma]")
			return nil
		}
		parts = append(parts, part{string(k.Data), off})
	}
	t.count += len(parts)
	return parts
}

// header opens a table. After a mistake the lines below it go to a table that
// nothing reads, so that one mistake is one problem.
func (t *tree) header(n *unstable.Node, list bool) {
	t.current = &value{kind: tableKind}
	parts := t.key(n)
	if parts == nil {
		return
	}
	at := t.root
	for _, p := range parts[:len(parts)-1] {
		next := at.get(p.key)
		switch {
		case next == nil:
			next = &value{kind: tableKind, off: p.off}
			at.add(p.key, p.off, next)
		case next.kind == listKind:
			next = next.items[len(next.items)-1]
		case next.kind != tableKind && next.kind != dottedKind:
			t.twice(at, p, "")
			return
		}
		at = next
	}
	last := parts[len(parts)-1]
	old := at.get(last.key)
	table := &value{kind: tableKind, off: last.off, explicit: true}
	switch {
	case old == nil && list:
		at.add(last.key, last.off, &value{kind: listKind, off: last.off, items: []*value{table}})
	case old == nil:
		at.add(last.key, last.off, table)
	case old.kind == listKind && list:
		old.items = append(old.items, table)
	case old.kind == tableKind && !old.explicit && !list:
		old.explicit, table = true, old
	case old.kind == listKind:
		t.report.add(last.off, fmt.Sprintf("[%s] is a single table here and a list of tables above", last.key), fmt.Sprintf("write [[%s]] each time", last.key))
		return
	case old.kind == tableKind && list:
		t.report.add(last.off, fmt.Sprintf("[[%s]] is a list of tables here and a single table above", last.key), fmt.Sprintf("write [[%s]] each time, or [%s] once", last.key, last.key))
		return
	default:
		t.twice(at, last, "put its keys under one header")
		return
	}
	t.current = table
}

func (t *tree) twice(at *value, p part, advice string) {
	first := t.report.place.at(at.index[p.key].off)
	if advice == "" {
		advice = "remove one of the two"
	}
	t.report.add(p.off, fmt.Sprintf("%s is already defined on line %d", quote(p.key), first.Line), advice)
}

// assign adds a key and its value to a table.
func (t *tree) assign(at *value, n *unstable.Node) {
	parts := t.key(n)
	if parts == nil {
		return
	}
	for _, p := range parts[:len(parts)-1] {
		next := at.get(p.key)
		if next == nil {
			next = &value{kind: dottedKind, off: p.off}
			at.add(p.key, p.off, next)
		} else if next.kind != dottedKind {
			t.twice(at, p, "")
			return
		}
		at = next
	}
	last := parts[len(parts)-1]
	if at.get(last.key) != nil {
		t.twice(at, last, "")
		return
	}
	// The value begins after the '=' that follows the last part of the key.
	off := last.off
	for it := n.Key(); it.Next(); {
		k := it.Node()
		off = int(k.Raw.Offset + k.Raw.Length)
	}
	if i := bytes.IndexByte(t.data[off:], '='); i >= 0 {
		off += i + 1
		off += len(t.data[off:]) - len(bytes.TrimLeft(t.data[off:], " \t"))
	}
	if v := t.value(n.Value(), off, 0); v != nil {
		at.add(last.key, last.off, v)
	}
}

// value copies a value out of the parser. An array carries no place of its
// own: it gets that of its first element, or fallback where it is empty or
// the value of a key.
func (t *tree) value(n *unstable.Node, fallback, depth int) *value {
	if t.count++; t.count > maxValues {
		return nil
	}
	if depth > maxDepth {
		t.report.add(fallback, fmt.Sprintf("lists nested more than %d deep", maxDepth), "the deepest list of a case is a polygon: [[\"0\", \"0\", \"0\"], ...]")
		return nil
	}
	v := &value{off: int(n.Raw.Offset), text: string(n.Data)}
	switch n.Kind {
	case unstable.String:
		raw := t.p.Raw(n.Raw)
		v.literal = raw[0] == '\''
		v.multi = len(raw) >= 6 && raw[1] == raw[0] && raw[2] == raw[0]
		if v.multi {
			v.off += 3
			if rest := raw[3:]; bytes.HasPrefix(rest, []byte("\r\n")) {
				v.off += 2
			} else if rest[0] == '\n' {
				v.off++
			}
		} else {
			v.off++
		}
	case unstable.Integer:
		v.kind = integerKind
	case unstable.Float:
		v.kind = floatKind
	case unstable.Bool:
		v.kind = boolKind
	case unstable.LocalDate, unstable.LocalTime, unstable.LocalDateTime, unstable.DateTime:
		v.kind = dateKind
	case unstable.Array:
		v.kind, v.off = arrayKind, fallback
		for it := n.Children(); it.Next(); {
			c := it.Node()
			w := t.value(c, firstLeaf(c, fallback), depth+1)
			if w == nil {
				return nil
			}
			v.items = append(v.items, w)
		}
	case unstable.InlineTable:
		v.kind = inlineKind
		for it := n.Children(); it.Next(); {
			t.assign(v, it.Node())
		}
	}
	return v
}

// firstLeaf is the offset of the first element in nested arrays that has one.
func firstLeaf(n *unstable.Node, fallback int) int {
	for n.Valid() && n.Kind == unstable.Array {
		n = n.Child()
	}
	if !n.Valid() {
		return fallback
	}
	return int(n.Raw.Offset)
}

// syntax reports where the parser gave up.
func (t *tree) syntax(err error) {
	off, problem, advice := len(t.data), err.Error(), "this is not TOML; see https://toml.io"
	var perr *unstable.ParserError
	if errors.As(err, &perr) {
		problem = perr.Message
		if i := cap(t.data) - cap(perr.Highlight); i >= 0 && i < len(t.data) {
			off = i
		}
	}
	switch {
	case strings.Contains(problem, "escape"):
		advice = `in double quotes a backslash starts an escape; write the formula in single quotes: '\theta'`
	case strings.Contains(problem, "unterminated"), strings.Contains(problem, "not terminated"),
		strings.Contains(problem, "strings cannot have new lines"):
		advice = "close the string on the line it begins, with the quote it begins with"
	case strings.Contains(problem, "quoted"), strings.Contains(problem, "start of value"),
		strings.Contains(problem, "expected digit"), strings.Contains(problem, "expected newline"):
		advice = "a formula is a string: write it between quotes, alone on its line after the ="
	case strings.Contains(problem, "control characters"):
		advice = "write the formula in single quotes and without control characters"
	case strings.Contains(problem, "start of key"), strings.Contains(problem, "after key"):
		advice = "each line is a [table], a [[list]] or key = value; names outside A-Z a-z 0-9 - _ need quotes"
	}
	t.report.add(off, problem, advice)
}
