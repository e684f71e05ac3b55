package formula

import (
	"fmt"
	"slices"
	"strings"
)

// Kind is what a declared name stands for.
type Kind int

// The kinds of names.
const (
	Undeclared Kind = iota
	Coordinate
	Axis
	Unknown
	Constant
	Angle
	Let
	FieldName
)

func (k Kind) String() string {
	switch k {
	case Coordinate:
		return "coordinate"
	case Axis:
		return "frame axis"
	case Unknown:
		return "unknown"
	case Constant:
		return "constant"
	case Angle:
		return "frame angle"
	case Let:
		return "named formula"
	case FieldName:
		return "field"
	}
	return "undeclared name"
}

// ScopeConfig lists the names that formulas may use. Any Greek spelling will
// do (see FoldName).
type ScopeConfig struct {
	Coordinates []string
	Axes        []string // of the frame; they stand in subscripts only
	Unknowns    []string
	Constants   []string
	Angles      []string
	Lets        []string // named formulas
	Fields      []string
	Jump        bool // [f] and {f} are the jump and the average
}

// Scope is the set of names that formulas are read in. It is immutable and
// safe for use by several goroutines.
type Scope struct {
	kinds map[string]Kind
	code  []string // coordinates and axes, in order of declaration
	names []string // every declared name, in order of declaration
	jump  bool
}

// NameError refuses a declaration.
type NameError struct {
	Name    string // as it was declared
	Kind    Kind
	Problem string
	Advice  string
}

func (e *NameError) Error() string {
	s := fmt.Sprintf("%s %q: %s", e.Kind, clip(e.Name), e.Problem)
	if e.Advice != "" {
		s += "; " + e.Advice
	}
	return s
}

// maxName bounds the length in bytes of a folded name.
const maxName = 64

// functions are the named functions, and the least and most arguments of each.
var functions = map[string]struct{ least, most int }{
	"sin": {1, 1}, "cos": {1, 1}, "tan": {1, 1},
	"sinh": {1, 1}, "cosh": {1, 1}, "tanh": {1, 1},
	"exp": {1, 1}, "log": {1, 1}, "sqrt": {1, 1},
	"erf": {1, 1}, "abs": {1, 1}, "norm": {1, 1 << 20},
	"div": {1, 1}, "grad": {1, 1}, "euler": {1, 2}, "sup": {2, 2},
}

// IsFunction reports whether name is a named function or operator: one that
// is called when a parenthesis follows.
func IsFunction(name string) bool {
	_, ok := functions[name]
	return ok
}

// IsReserved reports whether a folded name cannot be declared.
func IsReserved(name string) bool {
	switch name {
	case "in", "nu", "pi", "entropy", "span", "divergence":
		return true
	}
	return IsFunction(name)
}

// FoldName is the one spelling of a name: each Greek letter, as a character or
// as a TeX command, becomes its ASCII name (ξ, \xi: "xi"; ε, ϵ, epsilon,
// \epsilon, \varepsilon: "eps"). It refuses what is no name: a name is a
// letter followed by letters and digits, ASCII or Greek.
func FoldName(name string) (string, error) {
	bad := func(problem, advice string) (string, error) {
		return "", &NameError{Name: name, Problem: problem, Advice: advice}
	}
	var folded string
	switch {
	case name == "":
		return bad("a name is empty", "")
	case strings.Contains(name, "_"):
		return bad("a name cannot contain _, which begins a subscript", "leave it out")
	case strings.HasPrefix(name, `\`):
		s, ok := greekCommand(name[1:])
		if !ok {
			return bad("is no name of a Greek letter", "")
		}
		folded = s
	default:
		s, ok := foldRun(name)
		if !ok {
			return bad("a name is made of letters and digits, ASCII or Greek", "")
		}
		folded = s
	}
	switch {
	case isDigit(rune(folded[0])):
		return bad("a name begins with a letter", "")
	case len(folded) > maxName:
		return bad(fmt.Sprintf("a name has at most %d letters", maxName), "")
	}
	return folded, nil
}

// NewScope declares names. It refuses, with a *NameError, malformed, reserved
// and repeated names, and coordinates and axes whose subscripts could be read
// in two ways.
func NewScope(c ScopeConfig) (*Scope, error) {
	s := &Scope{kinds: map[string]Kind{}, jump: c.Jump}
	for _, group := range []struct {
		kind  Kind
		names []string
	}{
		{Coordinate, c.Coordinates}, {Axis, c.Axes}, {Unknown, c.Unknowns},
		{Constant, c.Constants}, {Angle, c.Angles}, {Let, c.Lets}, {FieldName, c.Fields},
	} {
		for _, name := range group.names {
			if err := s.declare(name, group.kind); err != nil {
				return nil, err
			}
		}
	}
	one, two, ok := ambiguity(s.code)
	if !ok {
		return s, nil
	}
	whole := strings.Join(one, "")
	longest := slices.MaxFunc(append(slices.Clone(one), two...), func(a, b string) int { return len(a) - len(b) })
	return nil, &NameError{
		Name: longest, Kind: s.kinds[longest],
		Problem: fmt.Sprintf("a subscript %q could be read as %q or as %q",
			clip(whole), clip(strings.Join(one, " ")), clip(strings.Join(two, " "))),
		Advice: "rename a coordinate or axis",
	}
}

func (s *Scope) declare(name string, kind Kind) error {
	folded, err := FoldName(name)
	if err != nil {
		if e, ok := err.(*NameError); ok {
			e.Kind = kind
		}
		return err
	}
	refuse := func(problem, advice string) error {
		return &NameError{Name: name, Kind: kind, Problem: problem, Advice: advice}
	}
	if IsReserved(folded) {
		return refuse("the name is reserved", "choose another name")
	}
	if k, ok := s.kinds[folded]; ok {
		if k == kind {
			return refuse("the name is declared twice", "Greek letters and their names are one name")
		}
		return refuse(fmt.Sprintf("the name is already that of %s", article(k)), "choose another name")
	}
	s.kinds[folded] = kind
	s.names = append(s.names, folded)
	if kind == Coordinate || kind == Axis {
		s.code = append(s.code, folded)
	}
	return nil
}

func (s *Scope) clone() *Scope {
	c := *s
	c.kinds = make(map[string]Kind, len(s.kinds))
	for k, v := range s.kinds {
		c.kinds[k] = v
	}
	c.names = slices.Clone(s.names)
	return &c
}

// With adds constants. A name that is a constant already stays one; any other
// repetition is refused.
func (s *Scope) With(extraConstants ...string) (*Scope, error) {
	c := s.clone()
	for _, name := range extraConstants {
		if folded, err := FoldName(name); err == nil && c.kinds[folded] == Constant {
			continue
		}
		if err := c.declare(name, Constant); err != nil {
			return nil, err
		}
	}
	return c, nil
}

// AtJump is the scope in which [f] and {f} are the jump and the average.
func (s *Scope) AtJump() *Scope {
	c := *s
	c.jump = true
	return &c
}

// Kind is what a folded name stands for; Undeclared where it is not declared.
func (s *Scope) Kind(name string) Kind { return s.kinds[name] }

// Names are the declared names, folded, in the order of declaration.
func (s *Scope) Names() []string { return slices.Clone(s.names) }

// Subscript reads a folded string as a sequence of coordinates and axes; nil
// where it is none. The sequence is the only one.
func (s *Scope) Subscript(sub string) []string {
	if out := split(sub, s.code); out != nil {
		return out
	}
	return split(strings.ReplaceAll(sub, "epsilon", "eps"), s.code)
}
