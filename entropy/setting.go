package entropy

import (
	"fmt"
	"slices"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// Frame is a rotated orthonormal basis of a coordinate plane:
//
//	xi  = ( cos θ) x + (sin θ) y,
//	eta = (-sin θ) x + (cos θ) y.
type Frame struct {
	Plane [2]int    // indices of the coordinates x, y
	Axes  [2]string // names of xi, eta
	Angle string    // name of θ
}

// Field is a vector field given by formulas in the jet. Components are named
// by coordinates or, for both directions of the frame's plane, by its axes;
// a component that is not given is zero.
type Field struct {
	Name       string
	Components map[string]formula.Node
}

// Model is the functional: what is penalised, what bends, and the density.
// Each is nil where the case does not give it.
type Model struct {
	Residual, Bending, Energy formula.Node
}

// Setting is what formulas refer to: the declared names, the frame, named
// formulas, fields and the model. It is not changed after it is made.
type Setting struct {
	Coordinates []string
	Unknowns    []string
	Constants   []string // the frame angle is not among them
	Frame       *Frame
	Lets        map[string]formula.Node
	Fields      map[string]*Field
	Model       Model
	Assume      []Assumption
}

// Assumption is Left Relation Right for constants and coordinates (and, in a
// claim, jets), with Relation one of > >= < <= =.
type Assumption struct {
	Left, Right formula.Node
	Relation    string
	Text        string
}

// Error is a fault in a formula, at a place in the file it came from.
type Error struct {
	At     source.Pos
	Err    error
	Advice string
}

func (e *Error) Error() string {
	if e.Advice != "" {
		return e.Err.Error() + "; " + e.Advice
	}
	return e.Err.Error()
}

func (e *Error) Unwrap() error { return e.Err }

func at(n formula.Node, err error) error {
	if err == nil {
		return nil
	}
	if _, ok := err.(*Error); ok {
		return err
	}
	return &Error{At: n.At(), Err: err}
}

func fault(n formula.Node, advice, format string, args ...any) error {
	return &Error{At: n.At(), Err: fmt.Errorf(format, args...), Advice: advice}
}

// Scope is the parser's view of the setting.
func (s *Setting) Scope(jump bool) (*formula.Scope, error) {
	c := formula.ScopeConfig{Coordinates: s.Coordinates, Unknowns: s.Unknowns, Constants: s.Constants, Jump: jump}
	if s.Frame != nil {
		c.Axes = s.Frame.Axes[:]
		c.Angles = []string{s.Frame.Angle}
	}
	for l := range s.Lets {
		c.Lets = append(c.Lets, l)
	}
	for f := range s.Fields {
		c.Fields = append(c.Fields, f)
	}
	slices.Sort(c.Lets)
	slices.Sort(c.Fields)
	return formula.NewScope(c)
}

func (s *Setting) coordinate(name string) int { return slices.Index(s.Coordinates, name) }

func (s *Setting) axis(name string) int {
	if s.Frame == nil {
		return -1
	}
	return slices.Index(s.Frame.Axes[:], name)
}

// direction is a unit vector of coordinates or of the frame, as coefficients
// over the coordinates.
type direction[T any] struct {
	coef  []T
	index []int
}
