package casefile

import (
	"fmt"
	"math/big"
	"strings"

	"creaseproof/entropy/source"
)

var (
	verdicts = []string{"proved", "refuted", "supported", "open"}
	one      = big.NewRat(1, 1)
)

func (d *decoder) claims(v *value) {
	seen := map[string]source.Pos{}
	for _, t := range d.tables(v, "claim") {
		if d.full() {
			return
		}
		c := d.claim(t)
		d.unique(seen, "claim", c.Name, c.Pos, t)
		d.file.Claims = append(d.file.Claims, c)
	}
}

// unique reports a name that a list holds already.
func (d *decoder) unique(seen map[string]source.Pos, what, name string, pos source.Pos, t *value) {
	if name == "" {
		return
	}
	if first, ok := seen[name]; ok {
		d.add(t.get("name").off, fmt.Sprintf("the %s %s is already on line %d", what, quote(name), first.Line), "give each "+what+" a name of its own")
		return
	}
	seen[name] = pos
}

// title reads the name of a claim or a surface: any words on one line.
func (d *decoder) title(v *value) (string, source.Pos) {
	pos := d.place.at(v.off)
	s := d.line(v, "name")
	if s == "" && v.kind == stringKind && control(v.text) < 0 {
		d.add(v.off, "the name is empty", `write a few words: name = "Young bound"`)
	}
	return s, pos
}

func (d *decoder) claim(v *value) Claim {
	c := Claim{Pos: d.place.at(v.off)}
	ok := d.keys(v, "a [[claim]]", []key{
		{"name", func(e *entry) { c.Name, c.Pos = d.title(e.value) }},
		{"states", func(e *entry) {
			if t, ok := d.formula(e.value, "states"); ok {
				c.States = t
			}
		}},
		{"expect", func(e *entry) { c.Expect = d.expect(e.value, true) }},
		{"modulo", func(e *entry) { d.modulo(e.value, &c) }},
		{"at", func(e *entry) { c.At = d.word(e.value, "at", "jump") }},
		{"solve", func(e *entry) { c.Solve = d.names(e.value, "solve") }},
		{"best", func(e *entry) {
			if n := d.name(e.value, "best"); n.S != "" {
				c.Best = &n
			}
		}},
		{"restrict", func(e *entry) { c.Restrict = d.assignments(e.value, "restrict", `restrict = { u_z = "1/2" }`) }},
		{"given", func(e *entry) { c.Given = d.assignments(e.value, "given", `given = { u = "x^2 + y^2" }`) }},
		{"box", func(e *entry) { c.Box = d.intervals(e.value, "box", isJet, `box = { u_x = ["-1", "1"] }`) }},
		{"assume", func(e *entry) { c.Assume = d.formulas(e.value, "assume") }},
		{"integrability", func(e *entry) { c.Integrability = d.exponents(e.value) }},
	})
	if ok {
		what := "a [[claim]]"
		if c.Name != "" {
			what = "the claim " + quote(c.Name)
		}
		d.need(v, what, "name", `name = "divergence"`)
		d.need(v, what, "states", `states = "div(Sigma) = R L"`)
	}
	if len(c.Solve) > 0 && c.Best != nil {
		d.add(v.get("best").off, "a claim has solve or best, not both", "solve is for an equation, best for an inequality")
	}
	if c.Expect != nil && isSolution(c.Expect.S) && v.get("solve") == nil && v.get("best") == nil {
		d.add(v.get("expect").off, fmt.Sprintf("%s expects a solution, and nothing is solved for", quote(c.Expect.S)), `add solve = ["c"] or best = "c", or expect a verdict`)
	}
	return c
}

// isSolution reports whether a text is meant to say what constants are, and not
// to be a verdict.
func isSolution(s string) bool {
	return strings.Contains(s, "=") || strings.HasSuffix(s, " free")
}

// expect reads a verdict or, in a claim, a solution.
func (d *decoder) expect(v *value, solution bool) *source.Text {
	s := d.line(v, "expect")
	if v.kind != stringKind || s == "" && control(v.text) >= 0 {
		return nil
	}
	ok := solution && isSolution(s)
	for _, w := range verdicts {
		ok = ok || s == w
	}
	if !ok {
		advice := "write one of " + strings.Join(verdicts, ", ")
		if solution {
			advice += `, or a solution such as "c = 4/3" or "c free"`
		}
		if n := nearest(s, verdicts); n != "" {
			advice = fmt.Sprintf("did you mean %q? %s", n, advice)
		}
		d.add(v.off, quote(s)+" is not a verdict", advice)
		return nil
	}
	t := d.text(s, v.off+strings.Index(v.text, s))
	return &t
}

// word reads one of a few words.
func (d *decoder) word(v *value, what string, words ...string) string {
	s := d.line(v, what)
	if v.kind != stringKind || control(v.text) >= 0 {
		return ""
	}
	for _, w := range words {
		if s == w {
			return s
		}
	}
	d.add(v.off, fmt.Sprintf("%s cannot be %s", quote(what), quote(s)), fmt.Sprintf(`write %s = "%s"`, what, strings.Join(words, `" or "`)))
	return ""
}

func (d *decoder) modulo(v *value, c *Claim) {
	if v.kind == stringKind && strings.TrimSpace(v.text) == "divergence" {
		c.Divergence = true
		return
	}
	if v.kind == stringKind && nearest(v.text, []string{"divergence"}) != "" {
		d.add(v.off, "unknown word "+quote(v.text), `did you mean "divergence"? Otherwise modulo is a formula, or a list of them, to be taken as zero`)
		return
	}
	c.Modulo = d.formulas(v, "modulo")
	if v.kind != arrayKind {
		return
	}
	for _, w := range v.items {
		if w.kind == stringKind && strings.TrimSpace(w.text) == "divergence" {
			d.add(w.off, `"divergence" cannot be one of a list`, `write modulo = "divergence", or a list of formulas to be taken as zero`)
		}
	}
}

func (d *decoder) exponents(v *value) []Exponent {
	const example = `integrability = { u_x = 3, u_z = "3/2" }`
	if !v.kind.isTable() {
		d.wrong(v, "integrability", "a table of exponents", example)
		return nil
	}
	if len(v.entries) == 0 {
		d.add(v.off, quote("integrability")+" is empty", "write "+example)
	}
	var list []Exponent
	for _, e := range v.entries {
		if d.full() {
			break
		}
		if !isJet(e.key) {
			d.notName(e, `anything in "integrability"`)
			continue
		}
		p, ok := d.rational(e.value, "integrability."+e.key)
		if !ok {
			continue
		}
		if p.Cmp(one) < 0 {
			d.add(e.value.off, fmt.Sprintf("the exponent of %s is %s, and L^p needs p at least 1", quote(e.key), quote(e.value.text)), "write "+example)
			continue
		}
		list = append(list, Exponent{d.nameAt(e.key, e.off), p})
	}
	return list
}
