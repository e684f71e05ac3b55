package casefile

import (
	"bytes"
	"fmt"
	"path"
	"strings"
	"unicode/utf8"
)

const tooLarge = "a case is a page or two of text; is this the right file?"

// Decode reads a case. The name is the path as the user gave it, "-" for
// standard input, or a built-in name; it appears in every place. The error is
// of type Errors.
func Decode(name string, data []byte) (*File, error) {
	file := &File{
		Name: strings.TrimSuffix(path.Base(strings.ReplaceAll(name, `\`, "/")), ".toml"),
		Path: name,
	}
	data = bytes.TrimPrefix(data, []byte("\ufeff"))
	data = data[:len(data):len(data)] // the parser finds places from capacities
	if len(data) > maxBytes {
		return nil, whole(name, fmt.Sprintf("this file is %d bytes long, more than the %d a case may have", len(data), maxBytes),
			tooLarge)
	}
	if bytes.IndexByte(data, 0) >= 0 {
		return nil, whole(name, "this is a binary file", "a case is a TOML text file; `creaseproof cases new FILE` writes one to start from")
	}
	r := &report{file: name, place: newPlacer(data)}
	if !utf8.Valid(data) {
		off := invalidAt(data)
		r.add(off, fmt.Sprintf("the byte 0x%02X is not UTF-8 here", data[off]), "save the file as UTF-8")
		return nil, r.err()
	}
	if n := bytes.Count(data, []byte(",")) + bytes.Count(data, []byte(".")); n > maxSeparators {
		// Each may be a node of the parser, which has no bound of its own.
		return nil, whole(name, fmt.Sprintf("this file holds more than %d commas and full stops", maxSeparators), tooLarge)
	}
	root, ok := parse(data, r)
	if !ok {
		return nil, r.err()
	}
	if len(root.entries) == 0 {
		if err := r.err(); err != nil {
			return nil, err
		}
		return nil, whole(name, "this file is empty: it holds no case", "`creaseproof cases new FILE` writes a case to start from")
	}
	d := &decoder{report: r, file: file}
	d.document(root)
	if err := r.err(); err != nil {
		return nil, err
	}
	return file, nil
}

func invalidAt(data []byte) int {
	for off := 0; off < len(data); {
		c, n := utf8.DecodeRune(data[off:])
		if c == utf8.RuneError && n == 1 {
			return off
		}
		off += n
	}
	return len(data)
}

// decoder turns the tree of a document into a File.
type decoder struct {
	*report
	file *File
}

func (d *decoder) document(root *value) {
	f := d.file
	var needs *entry // the first entry that makes no sense without a space
	d.keys(root, "a case", []key{
		{"title", func(e *entry) { f.Title = d.line(e.value, "title") }},
		{"about", func(e *entry) { f.About = d.prose(e.value, "about") }},
		{"sources", func(e *entry) { f.Sources = d.proseList(e.value, "sources") }},
		{"space", func(e *entry) { d.space(e.value) }},
		{"frame", func(e *entry) { d.frame(e.value) }},
		{"let", func(e *entry) { d.lets(e.value) }},
		{"model", func(e *entry) { d.model(e.value) }},
		{"field", func(e *entry) { d.fields(e.value) }},
		{"claim", func(e *entry) { d.claims(e.value) }},
		{"surface", func(e *entry) { d.surfaces(e.value) }},
		{"limit", func(e *entry) { d.limits(e.value) }},
	})
	for _, e := range root.entries {
		switch e.key {
		case "frame", "let", "model", "field", "claim", "surface", "limit":
			if needs == nil {
				needs = e
			}
		}
	}
	switch {
	case root.get("space") != nil:
	case needs != nil:
		d.add(needs.off, fmt.Sprintf("%s needs a space, and this file has no [space]", quote(needs.key)),
			"add [space] with coordinates = [\"x\", \"y\"] and unknowns = [\"u\"]")
	case len(d.problems) == 0:
		d.add(root.entries[0].off, "this file holds no case: it has no [space], no [[claim]], no [[surface]] and no [[limit]]",
			"`creaseproof cases new FILE` writes a case to start from")
	}
}

func (d *decoder) space(v *value) {
	s := &Space{Pos: d.place.at(v.off)}
	if !d.table(v, "space") {
		return
	}
	d.file.Space = s
	ok := d.keys(v, "[space]", []key{
		{"coordinates", func(e *entry) { s.Coordinates = d.names(e.value, "coordinates") }},
		{"unknowns", func(e *entry) { s.Unknowns = d.names(e.value, "unknowns") }},
		{"constants", func(e *entry) { s.Constants = d.names(e.value, "constants") }},
		{"assume", func(e *entry) { s.Assume = d.formulas(e.value, "assume") }},
	})
	c := v.get("coordinates")
	switch {
	case c == nil && ok:
		d.missing(v, "[space]", "coordinates", `coordinates = ["x", "y", "z"]`)
	case len(s.Coordinates) > 6:
		d.add(c.off, fmt.Sprintf("a space has at most 6 coordinates, and here are %d", len(s.Coordinates)), "leave out those that no formula uses")
	}
	if len(s.Unknowns) > 4 {
		d.add(v.get("unknowns").off, fmt.Sprintf("a space has at most 4 unknowns, and here are %d", len(s.Unknowns)), "leave out those that no formula uses")
	}
}

func (d *decoder) frame(v *value) {
	f := &Frame{Pos: d.place.at(v.off)}
	if !d.table(v, "frame") {
		return
	}
	d.file.Frame = f
	ok := d.keys(v, "[frame]", []key{
		{"plane", func(e *entry) { f.Plane = d.pair(e.value, "plane", `["x", "y"]`) }},
		{"axes", func(e *entry) { f.Axes = d.pair(e.value, "axes", `["xi", "eta"]`) }},
		{"angle", func(e *entry) { f.Angle = d.name(e.value, "angle") }},
	})
	if !ok {
		return
	}
	d.need(v, "[frame]", "plane", `plane = ["x", "y"]`)
	d.need(v, "[frame]", "axes", `axes = ["xi", "eta"]`)
	d.need(v, "[frame]", "angle", `angle = "theta"`)
}

func (d *decoder) lets(v *value) {
	if !d.table(v, "let") {
		return
	}
	for _, e := range v.entries {
		if d.full() {
			return
		}
		if !isName(e.key) {
			d.notName(e, "a named formula")
			continue
		}
		if t, ok := d.formula(e.value, e.key); ok {
			d.file.Lets = append(d.file.Lets, Let{d.nameAt(e.key, e.off), t})
		}
	}
}

func (d *decoder) model(v *value) {
	m := &Model{Pos: d.place.at(v.off)}
	if !d.table(v, "model") {
		return
	}
	d.file.Model = m
	d.keys(v, "[model]", []key{
		{"residual", func(e *entry) { m.Residual = d.optional(e.value, "residual") }},
		{"bending", func(e *entry) { m.Bending = d.optional(e.value, "bending") }},
		{"energy", func(e *entry) { m.Energy = d.optional(e.value, "energy") }},
	})
}

func (d *decoder) fields(v *value) {
	if !d.table(v, "field") {
		return
	}
	for _, e := range v.entries {
		if d.full() {
			return
		}
		if !isName(e.key) {
			d.notName(e, "a field")
			continue
		}
		if !e.value.kind.isTable() {
			d.add(e.off, fmt.Sprintf("the field %s must be a table of components, not %s", quote(e.key), e.value.kind),
				fmt.Sprintf("write [field.%s] and below it one component a line: x = \"u_x\"", e.key))
			continue
		}
		f := Field{Name: d.nameAt(e.key, e.off)}
		for _, c := range e.value.entries {
			if !isName(c.key) {
				d.notName(c, "a component")
				continue
			}
			if t, ok := d.formula(c.value, c.key); ok {
				f.Components = append(f.Components, Component{d.nameAt(c.key, c.off), t})
			}
		}
		if len(e.value.entries) == 0 {
			d.add(e.off, fmt.Sprintf("the field %s has no components", quote(e.key)), `give one formula for each coordinate or frame axis: x = "u_x"`)
		}
		d.file.Fields = append(d.file.Fields, f)
	}
}
