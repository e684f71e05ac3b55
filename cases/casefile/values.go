package casefile

import (
	"fmt"
	"math/big"
	"regexp"
	"strconv"
	"strings"
	"unicode"

	"creaseproof/entropy/source"
)

// key is a key that a table may have, and what reads it.
type key struct {
	name string
	read func(*entry)
}

// keys reads the entries of a table in the order of the file; false where one
// of them is unknown (a required key may be there, misspelt).
func (d *decoder) keys(v *value, what string, known []key) bool {
	ok := true
next:
	for _, e := range v.entries {
		if d.full() {
			return false
		}
		for _, k := range known {
			if k.name == e.key {
				k.read(e)
				continue next
			}
		}
		ok = false
		names := make([]string, len(known))
		for i, k := range known {
			names[i] = k.name
		}
		advice := fmt.Sprintf("%s has the keys %s", what, strings.Join(names, ", "))
		if n := nearest(e.key, names); n != "" {
			advice = fmt.Sprintf("did you mean %q? %s", n, advice)
		}
		d.add(e.off, "unknown key "+quote(e.key), advice)
	}
	return ok
}

func (d *decoder) missing(v *value, what, name, example string) {
	d.add(v.off, fmt.Sprintf("%s has no %q", what, name), "add "+example)
}

// need reports a missing key.
func (d *decoder) need(v *value, what, name, example string) {
	if v.get(name) == nil {
		d.missing(v, what, name, example)
	}
}

func (d *decoder) wrong(v *value, what, want, example string) {
	d.add(v.off, fmt.Sprintf("%s must be %s, not %s", quote(what), want, v.kind), "write "+example)
}

// table reports whether v is a single table, as [what] makes it.
func (d *decoder) table(v *value, what string) bool {
	if !v.kind.isTable() {
		d.wrong(v, what, "a table", fmt.Sprintf("[%s] on a line of its own and its keys below", what))
		return false
	}
	return true
}

// tables returns the tables of a list, as [[what]] makes it.
func (d *decoder) tables(v *value, what string) []*value {
	if v.kind != listKind && v.kind != arrayKind {
		d.wrong(v, what, "a list of tables", fmt.Sprintf("[[%s]] with two brackets before the keys of each", what))
		return nil
	}
	var list []*value
	for _, w := range v.items {
		if !w.kind.isTable() {
			d.wrong(w, what, "a list of tables", fmt.Sprintf("[[%s]] with two brackets before the keys of each", what))
			return nil
		}
		list = append(list, w)
	}
	return list
}

// line reads a string on one line that people read.
func (d *decoder) line(v *value, what string) string {
	if v.kind != stringKind {
		d.wrong(v, what, "a string", what+` = "..."`)
		return ""
	}
	if i := control(v.text); i >= 0 {
		d.add(v.off, fmt.Sprintf("control character %U in %s", []rune(v.text[i:])[0], quote(what)), "write it on one line, in single quotes if it holds a backslash")
		return ""
	}
	return strings.TrimSpace(v.text)
}

// prose reads a string that may have several lines.
func (d *decoder) prose(v *value, what string) string {
	if v.kind != stringKind {
		d.wrong(v, what, "a string", what+` = "..."`)
		return ""
	}
	flat := strings.NewReplacer("\n", " ", "\r", " ", "\t", " ").Replace(v.text)
	if i := control(flat); i >= 0 {
		d.add(v.off, fmt.Sprintf("control character %U in %s", []rune(flat[i:])[0], quote(what)), "use single quotes if it holds a backslash")
		return ""
	}
	return strings.TrimSpace(v.text)
}

func (d *decoder) proseList(v *value, what string) []string {
	if v.kind == stringKind {
		return []string{d.prose(v, what)}
	}
	if v.kind != arrayKind {
		d.wrong(v, what, "a list of strings", what+` = ["...", "..."]`)
		return nil
	}
	var list []string
	for _, w := range v.items {
		list = append(list, d.prose(w, what))
	}
	return list
}

// control is the index of the first control character, or -1.
func control(s string) int {
	return strings.IndexFunc(s, unicode.IsControl)
}

var nameShape = regexp.MustCompile(`^\\?\pL[\pL\pN]*$`)

// isName tells whether a key can be used as a name in formulas. A name has no
// underscore: there, what follows is a subscript.
func isName(s string) bool { return nameShape.MatchString(s) }

func (d *decoder) notName(e *entry, what string) {
	d.add(e.off, fmt.Sprintf("%s cannot be the name of %s", quote(e.key), what), "a name is a letter and then letters and digits, without underscores: R, s1, Sigma")
}

func (d *decoder) nameAt(s string, off int) Name { return Name{s, d.place.at(off)} }

func (d *decoder) name(v *value, what string) Name {
	if v.kind != stringKind {
		d.wrong(v, what, "a name in quotes", what+` = "c"`)
		return Name{}
	}
	if !isName(v.text) {
		d.notName(&entry{key: v.text, off: v.off}, "anything in "+quote(what))
		return Name{}
	}
	return d.nameAt(v.text, v.off)
}

// names reads a list of names; a single name is a list of one.
func (d *decoder) names(v *value, what string) []Name {
	items := []*value{v}
	if v.kind == arrayKind {
		items = v.items
	} else if v.kind != stringKind {
		d.wrong(v, what, "a list of names", what+` = ["x", "y"]`)
		return nil
	}
	var list []Name
	seen := map[string]bool{}
	for _, w := range items {
		n := d.name(w, what)
		if n.S != "" && seen[n.S] {
			d.add(w.off, fmt.Sprintf("%s is named twice in %s", quote(n.S), quote(what)), "remove one of the two")
			continue
		}
		seen[n.S] = true
		list = append(list, n)
	}
	return list
}

func (d *decoder) pair(v *value, what, example string) (pair [2]Name) {
	if v.kind != arrayKind || len(v.items) != 2 {
		d.add(v.off, fmt.Sprintf("%s must be a list of two names", quote(what)), fmt.Sprintf("write %s = %s", what, example))
		return pair
	}
	copy(pair[:], append(d.names(v, what), Name{}, Name{}))
	return pair
}

// formula reads a formula, or a number where a formula is expected.
func (d *decoder) formula(v *value, what string) (source.Text, bool) {
	switch v.kind {
	case stringKind:
		if i := control(v.text); i >= 0 {
			c := []rune(v.text[i:])[0]
			advice := `a backslash in double quotes starts an escape; write the formula in single quotes: '\theta'`
			if v.literal || v.multi {
				advice = "write the formula on one line, with spaces; [let] names parts of a long one"
			}
			off := v.off
			if v.literal {
				off += i
			}
			d.add(off, fmt.Sprintf("control character %U in the formula %s", c, quote(what)), advice)
			return source.Text{}, false
		}
		if strings.TrimSpace(v.text) == "" {
			d.add(v.off, fmt.Sprintf("the formula %s is empty", quote(what)), whatInstead(what))
			return source.Text{}, false
		}
		return d.text(v.text, v.off), true
	case integerKind, floatKind:
		r, ok := d.rational(v, what)
		if !ok {
			return source.Text{}, false
		}
		if plain.MatchString(v.text) {
			return d.text(v.text, v.off), true
		}
		return d.text(decimal(r), v.off), true
	}
	d.wrong(v, what, "a formula in quotes or a number", fmt.Sprintf("%s = '...'", short(what)))
	return source.Text{}, false
}

// whatInstead is what to write for a formula that is empty.
func whatInstead(what string) string {
	switch what {
	case "states":
		return `write a claim such as "div(Sigma) = R L"`
	case "assume":
		return `write a condition such as "eps > 0", or leave it out`
	}
	return "write 0 if it is zero"
}

func (d *decoder) text(s string, off int) source.Text {
	p := d.place.at(off)
	return source.Text{File: d.report.file, Line: p.Line, Col: p.Col, S: s}
}

func (d *decoder) optional(v *value, what string) *source.Text {
	t, ok := d.formula(v, what)
	if !ok {
		return nil
	}
	return &t
}

// formulas reads a list of formulas; a single one is a list of one.
func (d *decoder) formulas(v *value, what string) []source.Text {
	items := []*value{v}
	if v.kind == arrayKind {
		items = v.items
		if len(items) == 0 {
			d.add(v.off, quote(what)+" is an empty list", "leave it out, or name at least one formula")
		}
	}
	var list []source.Text
	for _, w := range items {
		if d.full() {
			break
		}
		if t, ok := d.formula(w, what); ok {
			list = append(list, t)
		}
	}
	return list
}

// vector reads a list of formulas that has lo to hi items.
func (d *decoder) vector(v *value, what string, lo, hi int, example string) []source.Text {
	if v.kind != arrayKind {
		d.wrong(v, what, "a list", example)
		return nil
	}
	if n := len(v.items); n < lo || n > hi {
		want := strconv.Itoa(lo)
		if hi > lo {
			want += " to " + strconv.Itoa(hi)
		}
		d.add(v.off, fmt.Sprintf("%s must have %s entries, not %d", quote(what), want, n), "write "+example)
		return nil
	}
	return d.formulas(v, what)
}

// intervals reads { name = [lo, hi], ... }.
func (d *decoder) intervals(v *value, what string, valid func(string) bool, example string) []Interval {
	if !v.kind.isTable() {
		d.wrong(v, what, "a table of intervals", example)
		return nil
	}
	if len(v.entries) == 0 {
		d.add(v.off, quote(what)+" is empty", "write "+example)
	}
	var list []Interval
	for _, e := range v.entries {
		if d.full() {
			break
		}
		if !valid(e.key) {
			d.notName(e, "anything in "+quote(what))
			continue
		}
		ends := d.vector(e.value, what+"."+e.key, 2, 2, fmt.Sprintf("%s = [lower, upper]", short(e.key)))
		if len(ends) == 2 {
			list = append(list, Interval{d.nameAt(e.key, e.off), ends[0], ends[1]})
		}
	}
	return list
}

// assignments reads { name = formula, ... }.
func (d *decoder) assignments(v *value, what, example string) []Assignment {
	if !v.kind.isTable() {
		d.wrong(v, what, "a table of formulas", example)
		return nil
	}
	if len(v.entries) == 0 {
		d.add(v.off, quote(what)+" is empty", "write "+example)
	}
	var list []Assignment
	for _, e := range v.entries {
		if d.full() {
			break
		}
		if !isJet(e.key) {
			d.notName(e, "anything in "+quote(what))
			continue
		}
		if t, ok := d.formula(e.value, what+"."+e.key); ok {
			list = append(list, Assignment{d.nameAt(e.key, e.off), t})
		}
	}
	return list
}

var jetShape = regexp.MustCompile(`^\\?\pL[\pL\pN]*(_[\pL\pN\\{} ]+)?$`)

// isJet tells whether a key can be a name or a name with a subscript.
func isJet(s string) bool { return jetShape.MatchString(s) }

var (
	plain    = regexp.MustCompile(`^-?(0|[1-9][0-9]*)(\.[0-9]+)?$`)
	fraction = regexp.MustCompile(`^ *[+-]?[0-9]+ *(/ *[0-9]+ *)?$`)
)

// maxExponent bounds the decimal exponent of a number, and maxLiteral its
// length: beyond them nobody means it, and exact arithmetic would be slow.
const (
	maxExponent = 400
	maxLiteral  = 400
)

// rational reads a number exactly from its literal: a TOML number, or a string
// such as "3/2".
func (d *decoder) rational(v *value, what string) (*big.Rat, bool) {
	bad := func(problem string) (*big.Rat, bool) {
		d.add(v.off, fmt.Sprintf("%s in %s: %s", problem, quote(what), quote(v.text)), `write a number such as 3, 0.1, 1e-10 or "3/2"`)
		return nil, false
	}
	s := strings.ReplaceAll(v.text, "_", "")
	switch v.kind {
	case stringKind:
		if s = v.text; !fraction.MatchString(s) && !decimalShape.MatchString(s) {
			return bad("not a number")
		}
		s = strings.Join(strings.Fields(s), "")
	case integerKind, floatKind:
	default:
		d.wrong(v, what, "a number", short(what)+` = 3, or "3/2"`)
		return nil, false
	}
	if len(s) > maxLiteral {
		return bad("too long a number")
	}
	if i := strings.IndexAny(s, "eE"); i >= 0 && !strings.HasPrefix(s, "0x") {
		if n, err := strconv.Atoi(s[i+1:]); err != nil || n > maxExponent || n < -maxExponent {
			return bad("too large an exponent")
		}
	}
	r, ok := new(big.Rat).SetString(s)
	if !ok { // inf, nan, a zero denominator
		return bad("not a finite number")
	}
	return r, true
}

var decimalShape = regexp.MustCompile(`^[+-]?[0-9]+(\.[0-9]+)?([eE][+-]?[0-9]+)?$`)

// decimal writes a number that has a finite decimal expansion without an
// exponent.
func decimal(r *big.Rat) string {
	if r.IsInt() {
		return r.Num().String()
	}
	n, _ := r.FloatPrec()
	return r.FloatString(n)
}
