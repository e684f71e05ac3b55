package creases

import (
	"context"
	"fmt"
	"io"
	"slices"
	"strings"

	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
	"creaseproof/identity/claim"
)

// Evaluator evaluates the surfaces of one case. It is not safe for concurrent
// use; several evaluators may share a setting.
type Evaluator struct {
	// Open opens the mesh that a surface names; nil is OpenMesh.
	Open func(mesh string) (io.ReadCloser, error)

	set  *entropy.Setting
	file string

	profile    *entropy.Profile
	profileErr error
	layered    bool
	looked     bool
}

// New makes an evaluator for a case with the given setting; file is the name
// of the case file, for the places of errors.
func New(set *entropy.Setting, file string) *Evaluator {
	return &Evaluator{set: set, file: file}
}

// Surface is a surface with its formulas read.
type Surface struct {
	Name     string
	Expected claim.Verdict // "" where no energy is claimed and nothing is expected

	ev    *Evaluator
	src   *casefile.Surface
	place source.Text // for errors that concern the whole of it

	scope   *formula.Scope // with the names of values
	inner   *formula.Scope // with the parameters of the patch too
	values  []choice
	params  []string
	plus    []formulaText // u, or the gradient
	minus   []formulaText
	isU     bool
	density *formulaText
	energy  *formulaText
	shape   shapeFormulas
	mesh    loaded
}

// formulaText is a formula and where it stands.
type formulaText struct {
	text source.Text
	node formula.Node
}

// choice is a parameter of the surface and the values it takes.
type choice struct {
	name, written string
	list          []formulaText
}

// mostCombinations bounds the number of results of a surface.
const mostCombinations = 100000

// Read reads the formulas of a surface. An error is a mistake in the file and
// carries its place (*source.Error).
func (e *Evaluator) Read(src *casefile.Surface) (*Surface, error) {
	s := &Surface{Name: src.Name, ev: e, src: src, place: header(e.file, src)}
	for _, step := range []func() error{s.declare, s.readTraces, s.readShape, s.readRest, s.valued} {
		if err := step(); err != nil {
			return nil, err
		}
	}
	return s, nil
}

// Evaluate reads a surface and integrates it for every combination of its
// values, the first listed varying slowest. An error is a mistake in the file
// with its place, or the context's; the results so far come with it.
func (e *Evaluator) Evaluate(ctx context.Context, src *casefile.Surface, o Options) ([]Result, error) {
	s, err := e.Read(src)
	if err != nil {
		return nil, err
	}
	return s.Evaluate(ctx, o)
}

func (s *Surface) declare() error {
	base, err := s.ev.set.Scope(false)
	if err != nil {
		return placed(s.place, err)
	}
	var names []string
	for _, v := range s.src.Values {
		name, err := formula.FoldName(v.Name.S)
		if err != nil {
			return placed(nameText(s.ev.file, v.Name), err)
		}
		if base, err = base.With(v.Name.S); err != nil {
			return placed(nameText(s.ev.file, v.Name), err)
		}
		if slices.Contains(names, name) {
			return fault(nameText(s.ev.file, v.Name), "", "the value %s is given twice", name)
		}
		names = append(names, name)
	}
	s.scope = base
	plain, err := formula.NewScope(formula.ScopeConfig{Constants: names})
	if err != nil {
		return placed(s.place, err)
	}
	total := 1
	for i, v := range s.src.Values {
		c := choice{name: names[i], written: v.Name.S}
		for _, t := range v.List {
			n, err := plain.ParseExpr(t)
			if err != nil {
				return err
			}
			c.list = append(c.list, formulaText{t, n})
		}
		s.values = append(s.values, c)
		if total *= len(c.list); total > mostCombinations {
			return fault(nameText(s.ev.file, v.Name), "give fewer values, or several surfaces", "the values have more than %d combinations", mostCombinations)
		}
	}
	s.inner = base
	if s.src.Patch != nil {
		for _, p := range s.src.Patch.Over {
			at := nameText(s.ev.file, p.Name)
			name, err := formula.FoldName(p.Name.S)
			if err != nil {
				return placed(at, err)
			}
			if base.Kind(name) == formula.Constant {
				return fault(at, "choose another name", "the parameter %s is a constant of the case already", name)
			}
			if s.inner, err = s.inner.With(p.Name.S); err != nil {
				return placed(at, err)
			}
			s.params = append(s.params, name)
		}
	}
	return nil
}

func read(scope *formula.Scope, t source.Text) (formulaText, error) {
	n, err := scope.ParseExpr(t)
	return formulaText{t, n}, err
}

func readAll(scope *formula.Scope, list []source.Text) ([]formulaText, error) {
	var out []formulaText
	for _, t := range list {
		f, err := read(scope, t)
		if err != nil {
			return nil, err
		}
		out = append(out, f)
	}
	return out, nil
}

func (s *Surface) readTraces() (err error) {
	n := len(s.ev.set.Coordinates)
	src := s.src
	if n != 2 && n != 3 {
		return fault(s.place, "declare two or three coordinates", "a surface in %d dimensions", n)
	}
	given := src.Plus != nil || src.PlusGradient != nil || src.Branches != nil
	if given && len(s.ev.set.Unknowns) != 1 {
		return fault(s.place, "give the density alone", "traces of a case with %d unknowns", len(s.ev.set.Unknowns))
	}
	if src.Plus != nil && src.Minus != nil {
		s.isU = true
		if s.plus, err = readAll(s.scope, []source.Text{*src.Plus}); err != nil {
			return err
		}
		s.minus, err = readAll(s.scope, []source.Text{*src.Minus})
		return err
	}
	for _, g := range []struct {
		list []source.Text
		to   *[]formulaText
	}{{src.PlusGradient, &s.plus}, {src.MinusGradient, &s.minus}} {
		if g.list == nil {
			continue
		}
		if len(g.list) != n {
			return fault(g.list[0], fmt.Sprintf("give one formula for each of %s", strings.Join(s.ev.set.Coordinates, ", ")), "a gradient of %d components in %d dimensions", len(g.list), n)
		}
		if *g.to, err = readAll(s.inner, g.list); err != nil {
			return err
		}
	}
	return nil
}

func (s *Surface) readRest() error {
	if t := s.src.Density; t != nil {
		scope := s.inner
		if s.plus != nil || s.shape.branches != nil {
			scope = scope.AtJump()
		}
		f, err := read(scope, *t)
		if err != nil {
			return err
		}
		s.density = &f
	}
	if t := s.src.Energy; t != nil {
		f, err := read(s.scope, *t)
		if err != nil {
			return err
		}
		s.energy = &f
		s.Expected = claim.Supported
	}
	if t := s.src.Expect; t != nil {
		switch v := claim.Verdict(strings.TrimSpace(t.S)); v {
		case claim.Proved, claim.Refuted, claim.Supported, claim.Open:
			s.Expected = v
		default:
			return fault(*t, "write supported, open, proved or refuted", "%q is no verdict", t.S)
		}
	}
	return nil
}
