package creases

import (
	"fmt"
	"math/big"
	"slices"
	"strings"

	"creaseproof/cases/casefile"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
	"creaseproof/quadrature/branches"
)

// implicitFormulas are those of a level set or of branches.
type implicitFormulas struct {
	level    *formulaText
	branches []formulaText
	tree     *branches.Tree
	box      [][2]formulaText // for each coordinate; empty for the others
	center   []formulaText    // ball, cylinder
	radius   *formulaText
	axis     int            // of the cylinder, -1 for a ball
	heights  [2]formulaText // of the cylinder
}

// implicit reports whether the surface is a level set or given by branches.
func (h *shapeFormulas) implicit() bool { return h.level != nil || h.branches != nil }

// all lists the formulas of the domain and the shape.
func (h *implicitFormulas) all() []formulaText {
	list := slices.Concat(h.branches, h.center)
	for _, r := range h.box {
		list = append(list, r[0], r[1])
	}
	if h.center != nil && h.axis >= 0 {
		list = append(list, h.heights[0], h.heights[1])
	}
	for _, f := range []*formulaText{h.level, h.radius} {
		if f != nil {
			list = append(list, *f)
		}
	}
	return list
}

// readImplicit reads a level set or branches.
func (s *Surface) readImplicit() error {
	src, h := s.src, &s.shape
	if src.Level != nil {
		f, err := read(s.scope, *src.Level)
		if err != nil {
			return err
		}
		h.level = &f
		return s.readDomain()
	}
	var err error
	if h.branches, err = readAll(s.scope, src.Branches); err != nil {
		return err
	}
	for _, f := range h.branches {
		if at := s.kink(f.node, map[string]bool{}); at != nil {
			return fault(f.text, "write abs(f) as two branches, f and -f, with max", "a branch with abs, which has a kink of its own")
		}
	}
	if src.Combine == nil {
		return fault(s.place, `add combine = "max" or combine = "min"`, "the branches are not combined")
	}
	if h.tree, err = branches.Read(*src.Combine, len(h.branches)); err != nil {
		return err
	}
	return s.readDomain()
}

// kink finds an absolute value of something with variables in a formula.
func (s *Surface) kink(n formula.Node, seen map[string]bool) (found formula.Node) {
	formula.Walk(n, func(n formula.Node) bool {
		switch n := n.(type) {
		case *formula.Call:
			if n.Func == "abs" {
				for _, a := range n.Args {
					if s.moves(a, map[string]bool{}) {
						found = n
					}
				}
			}
		case *formula.Name:
			if body := s.ev.set.Lets[n.ID]; body != nil && !seen[n.ID] {
				seen[n.ID] = true
				if f := s.kink(body, seen); f != nil {
					found = f
				}
			}
		}
		return found == nil
	})
	return found
}

// moves reports whether a formula has a coordinate in it.
func (s *Surface) moves(n formula.Node, seen map[string]bool) (found bool) {
	formula.Walk(n, func(n formula.Node) bool {
		if n, ok := n.(*formula.Name); ok {
			if slices.Contains(s.ev.set.Coordinates, n.ID) {
				found = true
			} else if body := s.ev.set.Lets[n.ID]; body != nil && !seen[n.ID] {
				seen[n.ID] = true
				found = found || s.moves(body, seen)
			}
		}
		return !found
	})
	return found
}

func (s *Surface) readDomain() (err error) {
	src, h := s.src, &s.shape
	coords := s.ev.set.Coordinates
	n := len(coords)
	at := func(p source.Pos) source.Text { return source.Text{File: s.ev.file, Line: p.Line, Col: p.Col, S: "{"} }
	h.axis = -1
	switch {
	case src.Ball != nil:
		b := src.Ball
		if len(b.Center) != n {
			return fault(at(b.Pos), fmt.Sprintf("give one number for each of %s", strings.Join(coords, ", ")), "a centre of %d coordinates in %d dimensions", len(b.Center), n)
		}
		return s.readRound(b.Center, b.Radius)
	case src.Cylinder != nil:
		c := src.Cylinder
		if n != 3 {
			return fault(at(c.Pos), "give a ball or a box", "a cylinder in %d dimensions", n)
		}
		h.axis = 2
		if c.Axis != nil {
			name, _ := formula.FoldName(c.Axis.S)
			if h.axis = slices.Index(coords, name); h.axis < 0 {
				return fault(nameText(s.ev.file, *c.Axis), "choose one of "+strings.Join(coords, ", "), "%q is no coordinate", c.Axis.S)
			}
		}
		for i := range h.heights {
			if h.heights[i], err = read(s.scope, c.Heights[i]); err != nil {
				return err
			}
		}
		return s.readRound(c.Center, c.Radius)
	case src.Box == nil:
		return fault(s.place, `add box = { x = ["-1", "1"], y = ["-1", "1"] }`, "the surface has no domain")
	}
	h.box = make([][2]formulaText, n)
	given := make([]bool, n)
	for _, r := range src.Box {
		name, _ := formula.FoldName(r.Name.S)
		i := slices.Index(coords, name)
		if i < 0 || given[i] {
			return fault(nameText(s.ev.file, r.Name), "give a range for each of "+strings.Join(coords, ", "), "%q is no coordinate, or has a range already", r.Name.S)
		}
		given[i] = true
		for k, t := range []source.Text{r.Lo, r.Hi} {
			if h.box[i][k], err = read(s.scope, t); err != nil {
				return err
			}
		}
	}
	if i := slices.Index(given, false); i >= 0 {
		place := s.place
		if len(src.Box) > 0 {
			place = nameText(s.ev.file, casefile.Name{S: src.Box[0].Name.S, Pos: src.Box[0].Name.Pos})
		}
		return fault(place, fmt.Sprintf(`add %s = ["-1", "1"]`, coords[i]), "the box has no range of %s", coords[i])
	}
	return nil
}

func (s *Surface) readRound(center []source.Text, radius source.Text) (err error) {
	if s.shape.center, err = readAll(s.scope, center); err != nil {
		return err
	}
	r, err := read(s.scope, radius)
	s.shape.radius = &r
	return err
}

// domain is where a level set or branches are looked at: a box, and for a ball
// or a cylinder the condition |x - center| <= radius in the coordinates of
// round. Exact are the ends of a box where they are rational.
type domain struct {
	box    [][2]float64
	exact  *branches.Box
	round  []int
	center []float64
	radius float64
}

func (c *combination) domain() (d domain, err error) {
	h := &c.s.shape
	n := len(c.set.Coordinates)
	d.box = make([][2]float64, n)
	if h.box != nil {
		exact := &branches.Box{}
		for i, r := range h.box {
			x, err := c.numbers(r[:])
			if err != nil {
				return d, err
			}
			if !(x[0] < x[1]) {
				return d, fault(r[0].text, "give the lower end first", "the range of %s is empty%s: it runs from %.6g to %.6g", c.set.Coordinates[i], c.where(), x[0], x[1])
			}
			d.box[i] = [2]float64{x[0], x[1]}
			lo, hi := c.rational(r[0]), c.rational(r[1])
			if lo == nil || hi == nil {
				exact = nil
			}
			if exact != nil {
				exact.Lo, exact.Hi = append(exact.Lo, lo), append(exact.Hi, hi)
			}
		}
		d.exact = exact
		return d, nil
	}
	if d.center, err = c.numbers(h.center); err != nil {
		return d, err
	}
	if d.radius, err = c.number(*h.radius); err != nil {
		return d, err
	}
	if !(d.radius > 0) {
		return d, fault(h.radius.text, "", "the radius is %.6g%s, and must be positive", d.radius, c.where())
	}
	for i := range n {
		if i == h.axis {
			x, err := c.numbers(h.heights[:])
			if err != nil {
				return d, err
			}
			if !(x[0] < x[1]) {
				return d, fault(h.heights[0].text, "give the lower end first", "the range of heights is empty%s: it runs from %.6g to %.6g", c.where(), x[0], x[1])
			}
			d.box[i] = [2]float64{x[0], x[1]}
			continue
		}
		at := d.center[len(d.round)]
		d.round = append(d.round, i)
		// More than the ball, so that its boundary is not next to that of the box.
		wide := 1.0173 * d.radius
		d.box[i] = [2]float64{at - wide, at + wide}
	}
	return d, nil
}

// rational is the value of a formula without variables, nil where it is not
// rational or not known to be.
func (c *combination) rational(f formulaText) *big.Rat {
	x, err := c.in.Scalar(f.node)
	if err != nil || c.exact.Ring.Err(x) != nil {
		return nil
	}
	if r, ok := x.IsConst(); ok {
		return r.Big()
	}
	return nil
}
