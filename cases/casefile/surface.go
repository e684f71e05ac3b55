package casefile

import (
	"fmt"
	"math/big"
	"strings"

	"creaseproof/entropy/source"
)

// mostWithin is the largest relative error that a surface may allow.
var mostWithin = big.NewRat(1, 1000)

func (d *decoder) surfaces(v *value) {
	seen := map[string]source.Pos{}
	for _, t := range d.tables(v, "surface") {
		if d.full() {
			return
		}
		s := d.surface(t)
		d.unique(seen, "surface", s.Name, s.Pos, t)
		d.file.Surfaces = append(d.file.Surfaces, s)
	}
}

func (d *decoder) surface(v *value) Surface {
	const gradient = `plus_gradient = ["u_x", "u_y", "u_z"] as formulas`
	s := Surface{Pos: d.place.at(v.off)}
	ok := d.keys(v, "a [[surface]]", append([]key{
		{"name", func(e *entry) { s.Name, s.Pos = d.title(e.value) }},
		{"values", func(e *entry) { s.Values = d.parameters(e.value) }},
		{"plus", func(e *entry) { s.Plus = d.optional(e.value, "plus") }},
		{"minus", func(e *entry) { s.Minus = d.optional(e.value, "minus") }},
		{"plus_gradient", func(e *entry) { s.PlusGradient = d.vector(e.value, "plus_gradient", 1, 6, gradient) }},
		{"minus_gradient", func(e *entry) { s.MinusGradient = d.vector(e.value, "minus_gradient", 1, 6, gradient) }},
		{"density", func(e *entry) { s.Density = d.optional(e.value, "density") }},
		{"polygon", func(e *entry) { s.Polygon = d.points(e.value, "polygon", 2, 1000, 1, 6) }},
		{"patch", func(e *entry) { s.Patch = d.patch(e.value) }},
		{"graph", func(e *entry) { s.Graph = d.graph(e.value) }},
		{"level", func(e *entry) { s.Level = d.optional(e.value, "level") }},
		{"branches", func(e *entry) {
			s.Branches = d.vector(e.value, "branches", 2, mostBranches, `branches = ["1 - x", "1 + x"]`)
		}},
		{"combine", func(e *entry) { s.Combine = d.combine(e.value) }},
		{"mesh", func(e *entry) { s.Mesh = d.line(e.value, "mesh") }},
		{"box", func(e *entry) { s.Box = d.intervals(e.value, "box", isName, `box = { x = ["-1", "1"] }`) }},
		{"ball", func(e *entry) { s.Ball = d.ball(e.value) }},
		{"cylinder", func(e *entry) { s.Cylinder = d.cylinder(e.value) }},
		{"energy", func(e *entry) { s.Energy = d.optional(e.value, "energy") }},
		{"within", func(e *entry) {
			r, ok := d.rational(e.value, "within")
			if ok && r.Sign() <= 0 {
				d.add(e.value.off, `"within" must be positive`, "write the relative error allowed: within = 1e-10")
				ok = false
			}
			if ok && r.Cmp(mostWithin) > 0 {
				d.add(e.value.off, `"within" is at most 1e-3`, "write the relative error allowed: within = 1e-10; a rougher number supports no claim")
				ok = false
			}
			if ok {
				s.Within = r
			}
		}},
		{"expect", func(e *entry) { s.Expect = d.expect(e.value, false) }},
	}, d.meshKeys(&s)...))
	if ok {
		d.complete(v, &s)
	}
	return s
}

// complete checks that the keys of a surface make one together.
func (d *decoder) complete(v *value, s *Surface) {
	what := "a [[surface]]"
	if s.Name != "" {
		what = "the surface " + quote(s.Name)
	}
	d.need(v, what, "name", `name = "front"`)
	var shapes []string
	for _, e := range v.entries {
		switch e.key {
		case "polygon", "patch", "graph", "level", "branches", "mesh":
			shapes = append(shapes, e.key)
		}
	}
	switch len(shapes) {
	case 0:
		d.add(v.off, what+" has no shape", "add one of polygon, patch, graph, level, branches, mesh")
	case 1:
		if shapes[0] != "mesh" {
			d.onlyMesh(v, what, shapes[0])
		}
		switch shapes[0] {
		case "level":
			d.domain(v, what)
		case "branches":
			d.domain(v, what)
			d.need(v, what, "combine", `combine = "max" or combine = "min"`)
			for _, k := range []string{"plus", "plus_gradient", "minus", "minus_gradient"} {
				if e := v.get(k); e != nil {
					d.add(e.off, fmt.Sprintf("%s has branches and %q", what, k), "remove the traces: they are the branches")
					break
				}
			}
		case "polygon", "patch", "graph", "mesh":
			d.bounded(v, what, shapes[0])
		}
	default:
		d.add(v.get(shapes[1]).off, fmt.Sprintf("%s has more than one shape: %s", what, strings.Join(shapes, ", ")), "make a [[surface]] for each")
	}
	for _, pair := range [][2]string{{"plus", "minus"}, {"minus", "plus"}, {"plus_gradient", "minus_gradient"}, {"minus_gradient", "plus_gradient"}} {
		if v.get(pair[0]) != nil && v.get(pair[1]) == nil {
			d.add(v.off, fmt.Sprintf("%s has %q and no %q", what, pair[0], pair[1]), "give both traces; plus is the side the normal points to")
		}
	}
	traces := v.get("plus") != nil || v.get("minus") != nil
	gradients := v.get("plus_gradient") != nil || v.get("minus_gradient") != nil
	if traces && gradients {
		d.add(v.off, what+" gives the traces both as u and as gradients", "keep plus and minus where u is a formula, plus_gradient and minus_gradient where it is not")
	}
	if !traces && !gradients && v.get("density") == nil && v.get("branches") == nil && len(shapes) > 0 {
		d.add(v.off, what+" has no traces and no density", `add plus = "..." and minus = "...", or plus_gradient and minus_gradient, or density`)
	}
}

func (d *decoder) parameters(v *value) []Values {
	const example = `values = { k = ["1/2", "3"] }`
	if !v.kind.isTable() {
		d.wrong(v, "values", "a table of values", example)
		return nil
	}
	var list []Values
	for _, e := range v.entries {
		if d.full() {
			break
		}
		if !isName(e.key) {
			d.notName(e, "a parameter")
			continue
		}
		list = append(list, Values{d.nameAt(e.key, e.off), d.formulas(e.value, "values."+e.key)})
	}
	return list
}

// points reads a list of points.
func (d *decoder) points(v *value, what string, lo, hi, dimLo, dimHi int) [][]source.Text {
	example := `[["0", "0", "0"], ["1", "0", "0"], ["0", "1", "0"]]`
	if dimHi == 2 {
		example = `[["0", "0"], ["1", "0"], ["0", "1"]]`
	}
	if v.kind != arrayKind {
		d.wrong(v, what, "a list of points", what+" = "+example)
		return nil
	}
	if n := len(v.items); n < lo || n > hi {
		d.add(v.off, fmt.Sprintf("%s has %d points", quote(what), n), "write "+what+" = "+example)
		return nil
	}
	var list [][]source.Text
	for i, w := range v.items {
		if d.full() {
			break
		}
		if w.kind == arrayKind && i > 0 && len(w.items) != len(v.items[0].items) {
			d.add(w.off, fmt.Sprintf("this point of %s has %d coordinates, the first has %d", quote(what), len(w.items), len(v.items[0].items)), "give every point one number for each coordinate")
			continue
		}
		if p := d.vector(w, "a point of "+what, dimLo, dimHi, example); p != nil {
			list = append(list, p)
		}
	}
	return list
}

func (d *decoder) patch(v *value) *Patch {
	const example = `patch = { map = ["cos(a)", "sin(a)", "t"], over = { t = ["0", "1"], a = ["0", "2 pi"] } }`
	if !v.kind.isTable() {
		d.wrong(v, "patch", "a table", example)
		return nil
	}
	p := &Patch{Pos: d.place.at(v.off)}
	ok := d.keys(v, `"patch"`, []key{
		{"map", func(e *entry) { p.Map = d.vector(e.value, "map", 1, 6, `map = ["cos(a)", "sin(a)", "t"]`) }},
		{"over", func(e *entry) { p.Over = d.intervals(e.value, "over", isName, `over = { a = ["0", "2 pi"] }`) }},
	})
	if ok {
		d.need(v, `"patch"`, "map", example)
		d.need(v, `"patch"`, "over", example)
	}
	return p
}

func (d *decoder) graph(v *value) *Graph {
	const example = `graph = { of = "x^2 + y^2", over = { x = ["0", "1"], y = ["0", "1"] } }`
	if !v.kind.isTable() {
		d.wrong(v, "graph", "a table", example)
		return nil
	}
	g := &Graph{Pos: d.place.at(v.off)}
	ok := d.keys(v, `"graph"`, []key{
		{"of", func(e *entry) {
			if t, ok := d.formula(e.value, "of"); ok {
				g.Of = t
			}
		}},
		{"over", func(e *entry) {
			g.Over = d.intervals(e.value, "over", isName, `over = { x = ["0", "1"], y = ["0", "1"] }`)
		}},
		{"triangle", func(e *entry) { g.Triangle = d.points(e.value, "triangle", 3, 3, 2, 2) }},
		{"disc", func(e *entry) { g.Disc = d.disc(e.value) }},
	})
	if !ok {
		return g
	}
	d.need(v, `"graph"`, "of", example)
	n := 0
	for _, k := range []string{"over", "triangle", "disc"} {
		if v.get(k) != nil {
			n++
		}
	}
	if n != 1 {
		d.add(v.off, `"graph" needs one of over, triangle and disc`, example+`, or triangle = [["0", "0"], ["1", "0"], ["0", "1"]], or disc = { center = ["0", "0"], radius = "1" }`)
	}
	return g
}

func (d *decoder) disc(v *value) *Disc {
	const example = `disc = { center = ["0", "0"], radius = "1" }`
	if !v.kind.isTable() {
		d.wrong(v, "disc", "a table", example)
		return nil
	}
	c := &Disc{}
	ok := d.keys(v, `"disc"`, []key{
		{"center", func(e *entry) { copy(c.Center[:], d.vector(e.value, "center", 2, 2, `center = ["0", "0"]`)) }},
		{"radius", func(e *entry) {
			if t, ok := d.formula(e.value, "radius"); ok {
				c.Radius = t
			}
		}},
	})
	if ok {
		d.need(v, `"disc"`, "center", example)
		d.need(v, `"disc"`, "radius", example)
	}
	return c
}
