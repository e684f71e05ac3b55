package casefile

import (
	"fmt"
	"strings"

	"creaseproof/entropy/source"
)

// mostBranches bounds the number of branches of a surface.
const mostBranches = 256

// combine reads how branches are combined.
func (d *decoder) combine(v *value) *source.Text {
	if d.line(v, "combine") == "" {
		if v.kind == stringKind && control(v.text) < 0 {
			d.add(v.off, `"combine" is empty`, `write combine = "max" or combine = "min"`)
		}
		return nil
	}
	t := d.text(v.text, v.off)
	return &t
}

// domain checks that a surface has one domain.
func (d *decoder) domain(v *value, what string) {
	var given []string
	for _, k := range []string{"box", "ball", "cylinder"} {
		if v.get(k) != nil {
			given = append(given, k)
		}
	}
	switch len(given) {
	case 0:
		d.missing(v, what, "box", `box = { x = ["-1", "1"], y = ["-1", "1"], z = ["0", "1"] }, or a ball, or a cylinder`)
	case 1:
	default:
		d.add(v.get(given[1]).off, fmt.Sprintf("%s has more than one domain: %s", what, strings.Join(given, ", ")), "keep one of them")
	}
}

// bounded refuses a domain on a shape that has its own bounds.
func (d *decoder) bounded(v *value, what, shape string) {
	for _, k := range []string{"box", "ball", "cylinder"} {
		if e := v.get(k); e != nil {
			d.add(e.off, fmt.Sprintf("%s is a %s and has a %s", what, shape, k), "remove it; level and branches are bounded by one")
		}
	}
}

func (d *decoder) ball(v *value) *Ball {
	const example = `ball = { center = ["0", "0", "0"], radius = "1" }`
	if !v.kind.isTable() {
		d.wrong(v, "ball", "a table", example)
		return nil
	}
	b := &Ball{Pos: d.place.at(v.off)}
	ok := d.keys(v, `"ball"`, []key{
		{"center", func(e *entry) { b.Center = d.vector(e.value, "center", 2, 3, `center = ["0", "0", "0"]`) }},
		{"radius", func(e *entry) { b.Radius = d.length(e.value) }},
	})
	if ok {
		d.need(v, `"ball"`, "center", example)
		d.need(v, `"ball"`, "radius", example)
	}
	return b
}

func (d *decoder) cylinder(v *value) *Cylinder {
	const example = `cylinder = { center = ["0", "0"], radius = "1", axis = "z", heights = ["0", "1"] }`
	if !v.kind.isTable() {
		d.wrong(v, "cylinder", "a table", example)
		return nil
	}
	c := &Cylinder{Pos: d.place.at(v.off)}
	ok := d.keys(v, `"cylinder"`, []key{
		{"center", func(e *entry) { c.Center = d.vector(e.value, "center", 2, 2, `center = ["0", "0"]`) }},
		{"radius", func(e *entry) { c.Radius = d.length(e.value) }},
		{"axis", func(e *entry) {
			if n := d.name(e.value, "axis"); n.S != "" {
				c.Axis = &n
			}
		}},
		{"heights", func(e *entry) { c.Heights = d.vector(e.value, "heights", 2, 2, `heights = ["0", "1"]`) }},
	})
	if ok {
		for _, k := range []string{"center", "radius", "heights"} {
			d.need(v, `"cylinder"`, k, example)
		}
	}
	return c
}

func (d *decoder) length(v *value) source.Text {
	t, _ := d.formula(v, "radius")
	return t
}
