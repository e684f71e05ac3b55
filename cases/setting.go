package cases

import (
	"errors"
	"slices"

	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// setting builds what all claims of the file share; false where mistakes in it
// make the claims unreadable.
func (b *builder) setting() bool {
	if !b.declare() {
		return false
	}
	f := b.file
	b.set.Lets = map[string]formula.Node{}
	for i := range f.Lets {
		if n := b.expr(b.scope, f.Lets[i].Formula); n != nil {
			b.set.Lets[fold(f.Lets[i].Name)] = n
		}
		if b.full() {
			return false
		}
	}
	b.set.Fields = map[string]*entropy.Field{}
	for i := range f.Fields {
		b.field(&f.Fields[i])
		if b.full() {
			return false
		}
	}
	b.definitions()
	if m := f.Model; m != nil {
		for _, k := range []struct {
			from *source.Text
			to   *formula.Node
		}{{m.Residual, &b.set.Model.Residual}, {m.Bending, &b.set.Model.Bending}, {m.Energy, &b.set.Model.Energy}} {
			if k.from != nil {
				*k.to = b.expr(b.scope, *k.from)
			}
		}
	}
	if f.Space != nil {
		b.set.Assume = b.assumptions(b.scope, f.Space.Assume)
	}
	return len(b.list) == 0
}

// declare makes the scope of the declared names.
func (b *builder) declare() bool {
	f := b.file
	var config formula.ScopeConfig
	declared := map[formula.Kind][]casefile.Name{}
	add := func(kind formula.Kind, to *[]string, names ...casefile.Name) {
		declared[kind] = append(declared[kind], names...)
		for _, n := range names {
			*to = append(*to, n.S)
		}
	}
	if s := f.Space; s != nil {
		add(formula.Coordinate, &config.Coordinates, s.Coordinates...)
		add(formula.Unknown, &config.Unknowns, s.Unknowns...)
		add(formula.Constant, &config.Constants, s.Constants...)
	}
	if f.Frame != nil {
		add(formula.Axis, &config.Axes, f.Frame.Axes[:]...)
		add(formula.Angle, &config.Angles, f.Frame.Angle)
	}
	for _, l := range f.Lets {
		add(formula.Let, &config.Lets, l.Name)
	}
	for _, l := range f.Fields {
		add(formula.FieldName, &config.Fields, l.Name)
	}
	scope, err := formula.NewScope(config)
	if err != nil {
		pos := source.Pos{Line: 1, Col: 1}
		var bad *formula.NameError
		if errors.As(err, &bad) {
			for _, n := range declared[bad.Kind] { // the last: of two, the second is one too many
				if n.S == bad.Name || fold(n) == bad.Name {
					pos = n.Pos
				}
			}
		}
		b.add(b.text.place(err, pos))
		return false
	}
	b.scope = scope
	b.set.Coordinates = folded(declared[formula.Coordinate])
	b.set.Unknowns = folded(declared[formula.Unknown])
	b.set.Constants = folded(declared[formula.Constant])
	if f.Frame != nil {
		return b.frame(f.Frame)
	}
	return true
}

func (b *builder) frame(f *casefile.Frame) bool {
	out := &entropy.Frame{Angle: fold(f.Angle)}
	for i, n := range f.Plane {
		out.Plane[i] = slices.Index(b.set.Coordinates, fold(n))
		if out.Plane[i] < 0 {
			b.fault(n.Pos, "the plane of a frame is a pair of coordinates", "%q is no coordinate", Clip(n.S, 60))
			return false
		}
		out.Axes[i] = fold(f.Axes[i])
	}
	if out.Plane[0] == out.Plane[1] {
		b.fault(f.Plane[1].Pos, "name two coordinates", "the plane of the frame holds one coordinate twice")
		return false
	}
	b.set.Frame = out
	return true
}

// field reads the components of a field. In the plane of the frame they are
// either along its axes or along the coordinates, not a mixture.
func (b *builder) field(f *casefile.Field) {
	out := &entropy.Field{Name: fold(f.Name), Components: map[string]formula.Node{}}
	var axis, plane *casefile.Name
	for i := range f.Components {
		c := &f.Components[i]
		name := fold(c.Index)
		at := slices.Index(b.set.Coordinates, name)
		frame := b.set.Frame
		isAxis := frame != nil && slices.Contains(frame.Axes[:], name)
		switch {
		case isAxis:
			axis = &c.Index
		case at < 0:
			b.fault(c.Index.Pos, "a component is named by a coordinate or by an axis of the frame", "%q is no direction", Clip(c.Index.S, 60))
			continue
		case frame != nil && slices.Contains(frame.Plane[:], at):
			plane = &c.Index
		}
		if _, twice := out.Components[name]; twice {
			b.fault(c.Index.Pos, "Greek letters and their names are one name", "the component %q of %s is given twice", Clip(c.Index.S, 60), out.Name)
			continue
		}
		if n := b.expr(b.scope, c.Formula); n != nil {
			out.Components[name] = n
		}
	}
	if axis != nil && plane != nil {
		b.fault(plane.Pos, "give both components in the plane along the axes, or both along the coordinates",
			"the field %s has a component along %s beside one along the axis %s", out.Name, Clip(plane.S, 60), Clip(axis.S, 60))
	}
	b.set.Fields[out.Name] = out
}

// fold is the one spelling of a name; what is no name is left as it is.
func fold(n casefile.Name) string {
	if s, err := formula.FoldName(n.S); err == nil {
		return s
	}
	return n.S
}

func folded(names []casefile.Name) []string {
	var out []string
	for _, n := range names {
		out = append(out, fold(n))
	}
	return out
}

// assumptions reads conditions, each "expr REL expr".
func (b *builder) assumptions(scope *formula.Scope, texts []source.Text) []entropy.Assumption {
	var list []entropy.Assumption
	for _, t := range texts {
		if b.full() {
			break
		}
		found := cuts(t.S)
		switch len(found) {
		case 0:
			b.fault(source.Pos{Line: t.Line, Col: t.Col}, `write a condition such as "eps > 0"`, "an assumption has a relation")
			continue
		case 1:
		default:
			b.fault(t.Pos(found[1].runes(t)), `write two assumptions, "a < b" and "b < c"`, "an assumption has one relation")
			continue
		}
		l, r := found[0].split(t)
		switch found[0].relation {
		case "!=":
			b.fault(t.Pos(found[0].runes(t)), `make a claim for each side, one with ">" and one with "<"`, "an assumption that two formulas differ cannot be made")
			continue
		case "==":
			b.fault(t.Pos(found[0].runes(t)), `write "=" for an equation`, "%q is no relation of an assumption", "==")
			continue
		}
		left, right := b.expr(scope, l), b.expr(scope, r)
		if left != nil && right != nil {
			list = append(list, entropy.Assumption{Left: left, Right: right, Relation: found[0].relation, Text: t.S})
		}
	}
	return list
}
