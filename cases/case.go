package cases

import (
	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
	"creaseproof/identity/claim"
)

// Case is a case file with its formulas read.
type Case struct {
	Name    string // base name of the file without ".toml", or the built-in name
	Title   string
	File    *casefile.File
	Setting *entropy.Setting
	Claims  []*Claim

	text *text
}

// Claim is a claim and what the file expects of it.
type Claim struct {
	*claim.Claim
	Expected Expectation

	Pos source.Pos // of the statement
}

// Parse reads a case. The name is the path as the user gave it, "-" for
// standard input, or a built-in name, and appears in every place. The error is
// of type casefile.Errors: at most ten source.Errors in the order in which
// they were found.
func Parse(name string, data []byte) (*Case, error) {
	file, err := casefile.Decode(name, data)
	if err != nil {
		return nil, err
	}
	c := &Case{Name: file.Name, Title: file.Title, File: file, text: newText(name, data)}
	b := &builder{file: file, faults: faults{text: c.text}, set: &entropy.Setting{}}
	c.Setting = b.set
	if b.setting() {
		for i := range file.Claims {
			if b.full() {
				break
			}
			c.Claims = append(c.Claims, b.claim(&file.Claims[i]))
		}
	}
	if len(b.list) > 0 {
		return nil, b.list
	}
	return c, nil
}

// Source is the text of the case file.
func (c *Case) Source() []byte { return c.text.data }

// Fault is an error at a place of the case.
func (c *Case) Fault(pos source.Pos, advice, format string, args ...any) error {
	return c.text.at(pos, advice, format, args...)
}

// Place gives an error of evaluating formulas of the case its place in the
// file. Errors that carry none are put at the fallback; the zero Pos is the
// first line.
func (c *Case) Place(err error, fallback source.Pos) error {
	if fallback.Line == 0 {
		fallback = source.Pos{Line: 1, Col: 1}
	}
	return c.text.place(err, fallback)
}

// builder gives the formulas of a file their meaning.
type builder struct {
	faults
	file  *casefile.File
	set   *entropy.Setting
	scope *formula.Scope // of the setting, outside jumps

	varies map[string]bool // whether a named formula depends on an unknown
}

// expr reads a formula; nil after a mistake.
func (b *builder) expr(s *formula.Scope, t source.Text) formula.Node {
	n, err := s.ParseExpr(t)
	if err != nil {
		b.add(b.text.place(err, source.Pos{Line: t.Line, Col: t.Col}))
		return nil
	}
	return n
}
