package branches

import (
	"errors"

	"creaseproof/entropy/source"
)

// Read is Parse for the text of a case file; an error carries its place
// (*source.Error).
func Read(t source.Text, n int) (*Tree, error) {
	tree, err := Parse(t.S, n)
	var e *SyntaxError
	if errors.As(err, &e) {
		return nil, source.NewError(t, len([]rune(t.S[:min(e.Offset, len(t.S))])), e.Problem, e.Advice)
	}
	return tree, err
}

// Flat reports whether the tree is the maximum or the minimum of the branches.
func (t *Tree) Flat() bool {
	for _, a := range t.Args {
		if a.Op != Leaf {
			return false
		}
	}
	return true
}
