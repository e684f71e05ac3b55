package branches

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
	"unicode"
)

// Op is what a node of a Tree does.
type Op int

// The operations.
const (
	Leaf Op = iota // a branch
	Max
	Min
)

// Tree is an expression in branches. A leaf has a Branch, counted from 0; other
// nodes have two or more Args.
type Tree struct {
	Op     Op
	Branch int
	Args   []*Tree
}

// SyntaxError says what is wrong with the text of a tree and at which byte.
type SyntaxError struct {
	Offset          int
	Problem, Advice string
}

func (e *SyntaxError) Error() string { return e.Problem }

// deepest is the nesting that Parse accepts.
const deepest = 100

// Parse reads a tree over n branches: "max", "min", or a nested expression in
// the numbers of the branches, from 1, in which every branch stands once:
// "max(min(1, 2), 3)". A range 3..7 stands for all branches from 3 to 7. An
// error is a *SyntaxError.
func Parse(text string, n int) (*Tree, error) {
	if op := opOf(strings.TrimSpace(text)); op != Leaf {
		t := &Tree{Op: op}
		for i := range n {
			t.Args = append(t.Args, &Tree{Branch: i})
		}
		return t, nil
	}
	p := &parser{s: text, n: n, seen: make([]bool, n)}
	args, err := p.node(0)
	if err != nil {
		return nil, err
	}
	p.space()
	if p.at < len(p.s) {
		return nil, p.fail(p.at, "something follows the expression", "")
	}
	if len(args) != 1 || args[0].Op == Leaf {
		return nil, p.fail(0, "this combines nothing", `write "max", "min" or an expression such as "max(min(1, 2), 3)"`)
	}
	if i := slices.Index(p.seen, false); i >= 0 {
		return nil, p.fail(0, fmt.Sprintf("branch %d is not used", i+1), "use every branch once, or leave it out")
	}
	return args[0], nil
}

func opOf(word string) Op {
	switch word {
	case "max":
		return Max
	case "min":
		return Min
	}
	return Leaf
}

type parser struct {
	s    string
	at   int
	n    int
	seen []bool
}

func (p *parser) fail(at int, problem, advice string) error {
	return &SyntaxError{at, problem, advice}
}

func (p *parser) space() {
	for p.at < len(p.s) && unicode.IsSpace(rune(p.s[p.at])) {
		p.at++
	}
}

func (p *parser) take(c byte) bool {
	p.space()
	if p.at < len(p.s) && p.s[p.at] == c {
		p.at++
		return true
	}
	return false
}

func (p *parser) word(ok func(byte) bool) string {
	p.space()
	from := p.at
	for p.at < len(p.s) && ok(p.s[p.at]) {
		p.at++
	}
	return p.s[from:p.at]
}

func digit(c byte) bool  { return '0' <= c && c <= '9' }
func letter(c byte) bool { return 'a' <= c && c <= 'z' || 'A' <= c && c <= 'Z' }

// number is the index of a branch.
func (p *parser) number() (int, error) {
	p.space()
	at := p.at
	w := p.word(digit)
	if w == "" {
		return 0, p.fail(at, "a branch is expected", `branches are named by their number, from 1: "max(min(1, 2), 3)"`)
	}
	k, err := strconv.Atoi(w)
	if err != nil || k < 1 || k > p.n {
		return 0, p.fail(at, fmt.Sprintf("there is no branch %s", w), fmt.Sprintf("the branches are numbered from 1 to %d", p.n))
	}
	return k - 1, nil
}

// node reads an argument; a range is several.
func (p *parser) node(depth int) ([]*Tree, error) {
	p.space()
	at := p.at
	if depth > deepest {
		return nil, p.fail(at, fmt.Sprintf("nested more than %d deep", deepest), "")
	}
	if w := p.word(letter); w != "" {
		op := opOf(w)
		if op == Leaf {
			return nil, p.fail(at, fmt.Sprintf("%q is neither max nor min", w), `write "max", "min" or an expression such as "max(min(1, 2), 3)"`)
		}
		if !p.take('(') {
			return nil, p.fail(p.at, "an opening bracket is expected", `write "max(min(1, 2), 3)"`)
		}
		t := &Tree{Op: op}
		for {
			args, err := p.node(depth + 1)
			if err != nil {
				return nil, err
			}
			t.Args = append(t.Args, args...)
			if p.take(')') {
				break
			}
			if !p.take(',') {
				return nil, p.fail(p.at, "a comma or a closing bracket is expected", "")
			}
		}
		if len(t.Args) < 2 {
			return nil, p.fail(at, fmt.Sprintf("%s of a single branch", w), "")
		}
		return []*Tree{t}, nil
	}
	first, err := p.number()
	if err != nil {
		return nil, err
	}
	last := first
	if strings.HasPrefix(p.s[p.at:], "..") {
		p.at += 2
		if last, err = p.number(); err != nil {
			return nil, err
		}
		if last < first {
			return nil, p.fail(at, "the range is empty", "")
		}
	}
	var out []*Tree
	for k := first; k <= last; k++ {
		if p.seen[k] {
			return nil, p.fail(at, fmt.Sprintf("branch %d stands twice", k+1), "use every branch once; max(min(1, 2), min(1, 3)) is min(1, max(2, 3))")
		}
		p.seen[k] = true
		out = append(out, &Tree{Branch: k})
	}
	return out, nil
}

// String is the tree as Parse reads it.
func (t *Tree) String() string {
	if t.Op == Leaf {
		return strconv.Itoa(t.Branch + 1)
	}
	parts := make([]string, len(t.Args))
	for i, a := range t.Args {
		parts[i] = a.String()
	}
	return [...]string{Max: "max", Min: "min"}[t.Op] + "(" + strings.Join(parts, ", ") + ")"
}

// Eval is the value of the tree and the number of a branch that has it.
func (t *Tree) Eval(values []float64) (v float64, active int) {
	if t.Op == Leaf {
		return values[t.Branch], t.Branch
	}
	for i, a := range t.Args {
		w, k := a.Eval(values)
		if i == 0 || t.Op == Max && w > v || t.Op == Min && w < v {
			v, active = w, k
		}
	}
	return v, active
}
