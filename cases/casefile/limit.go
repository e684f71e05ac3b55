package casefile

import (
	"fmt"
	"math/big"

	"creaseproof/entropy/source"
)

// Limit is one [[limit]]: a family of smooth approximations of a function with
// creases, and the energy it should tend to as eps falls.
type Limit struct {
	Name   string
	Pos    source.Pos // of the name
	Values []Values

	// Approximation is "profile", "front" or "mollified".
	Approximation string
	// Plus and Minus are the affine branches of a profile; Profile is the
	// position of the gradient between theirs, a formula in s, the distance
	// over eps. Nil is the optimal one.
	Plus, Minus, Profile *source.Text
	// Branches and Combine are those of a front or of a mollified function:
	// "max", "min" or, for the latter, a nested expression in the numbers of the
	// branches. Width is the radius of the kernel over eps.
	Branches []source.Text
	Combine  *source.Text
	Width    *source.Text

	// One of Box, Ball and Cylinder is set, or Region: the image of a box of
	// as many parameters as there are coordinates.
	Box      []Interval
	Ball     *Ball
	Cylinder *Cylinder
	Region   *Patch

	Eps    []source.Text
	Energy *source.Text
	Within *big.Rat // relative; positive, at most 1/10
	Expect string   // "", "sharp", "above" or "infinite"
}

const (
	mostEps           = 40
	mostLimitBranches = 100
)

var tenth = big.NewRat(1, 10)

func (d *decoder) limits(v *value) {
	seen := map[string]source.Pos{}
	for _, t := range d.tables(v, "limit") {
		if d.full() {
			return
		}
		l := d.limit(t)
		d.unique(seen, "limit", l.Name, l.Pos, t)
		d.file.Limits = append(d.file.Limits, l)
	}
}

func (d *decoder) limit(v *value) Limit {
	l := Limit{Pos: d.place.at(v.off)}
	ok := d.keys(v, "a [[limit]]", []key{
		{"name", func(e *entry) { l.Name, l.Pos = d.title(e.value) }},
		{"values", func(e *entry) { l.Values = d.parameters(e.value) }},
		{"approximation", func(e *entry) {
			l.Approximation = d.word(e.value, "approximation", "profile", "front", "mollified")
		}},
		{"plus", func(e *entry) { l.Plus = d.optional(e.value, "plus") }},
		{"minus", func(e *entry) { l.Minus = d.optional(e.value, "minus") }},
		{"profile", func(e *entry) { l.Profile = d.optional(e.value, "profile") }},
		{"branches", func(e *entry) {
			l.Branches = d.vector(e.value, "branches", 2, mostLimitBranches, `branches = ["1 - x", "1 + x"]`)
		}},
		{"combine", func(e *entry) { l.Combine = d.combine(e.value) }},
		{"width", func(e *entry) { l.Width = d.optional(e.value, "width") }},
		{"box", func(e *entry) { l.Box = d.intervals(e.value, "box", isName, `box = { x = ["-1", "1"] }`) }},
		{"ball", func(e *entry) { l.Ball = d.ball(e.value) }},
		{"cylinder", func(e *entry) { l.Cylinder = d.cylinder(e.value) }},
		{"region", func(e *entry) { l.Region = d.region(e.value) }},
		{"eps", func(e *entry) { l.Eps = d.vector(e.value, "eps", 1, mostEps, `eps = ["1/5", "1/10", "1/20"]`) }},
		{"energy", func(e *entry) { l.Energy = d.optional(e.value, "energy") }},
		{"within", func(e *entry) {
			r, ok := d.rational(e.value, "within")
			if ok && (r.Sign() <= 0 || r.Cmp(tenth) > 0) {
				d.add(e.value.off, `"within" must be positive and at most 1/10`, "write the relative gap allowed at the smallest eps: within = 1e-3")
				return
			}
			l.Within = r
		}},
		{"expect", func(e *entry) { l.Expect = d.word(e.value, "expect", "sharp", "above", "infinite") }},
	})
	if ok {
		d.completeLimit(v, &l)
	}
	return l
}

// completeLimit checks that the keys of a limit make one together.
func (d *decoder) completeLimit(v *value, l *Limit) {
	what := "a [[limit]]"
	if l.Name != "" {
		what = "the limit " + quote(l.Name)
	}
	d.need(v, what, "name", `name = "planar wall"`)
	d.need(v, what, "approximation", `approximation = "profile", "front" or "mollified"`)
	d.need(v, what, "eps", `eps = ["1/5", "1/10", "1/20", "1/40"]`)
	needs, foreign := []string{"branches", "combine"}, []string{"plus", "minus", "profile"}
	examples := map[string]string{
		"branches": `branches = ["1 - x", "1 + x"]`, "combine": `combine = "max" or combine = "min"`,
		"plus": `plus = "x + z/2", the side the normal points to`, "minus": `minus = "-x + z/2"`,
	}
	switch l.Approximation {
	case "":
		return
	case "profile":
		needs, foreign = []string{"plus", "minus"}, []string{"branches", "combine", "width"}
	case "front":
		foreign = append(foreign, "width")
	}
	for _, k := range needs {
		d.need(v, what, k, examples[k])
	}
	for _, k := range foreign {
		if e := v.get(k); e != nil {
			d.add(e.off, fmt.Sprintf("%s is of the kind %s, which has no %q", what, quote(l.Approximation), k), "remove it, or change the approximation")
		}
	}
	n := 0
	for _, k := range []string{"box", "ball", "cylinder", "region"} {
		if e := v.get(k); e != nil {
			if n++; n == 2 {
				d.add(e.off, what+" has more than one domain", "keep one of box, ball, cylinder and region")
			}
		}
	}
	if n == 0 {
		d.missing(v, what, "box", `box = { x = ["-1", "1"], y = ["0", "1"], z = ["0", "1"] }, or a ball, a cylinder or a region`)
	}
}

// region reads a map of a box.
func (d *decoder) region(v *value) *Patch {
	const example = `region = { map = ["r cos(a)", "r sin(a)"], over = { r = ["1", "2"], a = ["0", "2 pi"] } }`
	if !v.kind.isTable() {
		d.wrong(v, "region", "a table", example)
		return nil
	}
	p := &Patch{Pos: d.place.at(v.off)}
	ok := d.keys(v, `"region"`, []key{
		{"map", func(e *entry) { p.Map = d.vector(e.value, "map", 1, 3, `map = ["r cos(a)", "r sin(a)"]`) }},
		{"over", func(e *entry) { p.Over = d.intervals(e.value, "over", isName, `over = { a = ["0", "2 pi"] }`) }},
	})
	if ok {
		d.need(v, `"region"`, "map", example)
		d.need(v, `"region"`, "over", example)
	}
	return p
}
