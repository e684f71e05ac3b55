package creases

import (
	"fmt"
	"slices"
	"strings"

	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/program"
	"creaseproof/entropy/source"
	"creaseproof/quadrature"
)

// shapeFormulas are the formulas of the shape; what is not used is empty.
type shapeFormulas struct {
	vertices [][]formulaText  // polygon
	maps     []formulaText    // patch
	over     [][2]formulaText // patch; graph over an interval or a rectangle
	spanned  []int            // graph: the coordinates it is a graph over
	height   *formulaText     // graph
	corners  [][]formulaText  // graph over a triangle
	disc     []formulaText    // graph over a disc: centre, radius
	implicitFormulas
}

func (s *Surface) readShape() (err error) {
	n := len(s.ev.set.Coordinates)
	src, h := s.src, &s.shape
	switch {
	case src.Polygon != nil:
		for _, v := range src.Polygon {
			if len(v) != n {
				return fault(v[0], "", "a vertex of %d coordinates in %d dimensions", len(v), n)
			}
			p, err := readAll(s.scope, v)
			if err != nil {
				return err
			}
			h.vertices = append(h.vertices, p)
		}
		return nil
	case src.Patch != nil:
		p := src.Patch
		at := source.Text{File: s.ev.file, Line: p.Pos.Line, Col: p.Pos.Col, S: "{"}
		if len(p.Map) != n {
			return fault(at, "", "a map of %d components in %d dimensions", len(p.Map), n)
		}
		if len(p.Over) != n-1 {
			return fault(at, fmt.Sprintf("give ranges for %d", n-1), "a patch of %d parameters in %d dimensions", len(p.Over), n)
		}
		if h.maps, err = readAll(s.inner, p.Map); err != nil {
			return err
		}
		return s.readOver(p.Over)
	case src.Graph != nil:
		return s.readGraph(src.Graph)
	case src.Level != nil, src.Branches != nil:
		return s.readImplicit()
	case src.Mesh != "":
		return s.readMesh()
	}
	return fault(s.place, "add a polygon, a patch or a graph", "the surface has no shape")
}

func (s *Surface) readOver(over []casefile.Interval) error {
	for _, r := range over {
		lo, err := read(s.scope, r.Lo)
		if err != nil {
			return err
		}
		hi, err := read(s.scope, r.Hi)
		if err != nil {
			return err
		}
		s.shape.over = append(s.shape.over, [2]formulaText{lo, hi})
	}
	return nil
}

func (s *Surface) readGraph(g *casefile.Graph) error {
	h := &s.shape
	coords := s.ev.set.Coordinates
	n := len(coords)
	at := source.Text{File: s.ev.file, Line: g.Pos.Line, Col: g.Pos.Col, S: "{"}
	f, err := read(s.scope, g.Of)
	if err != nil {
		return err
	}
	h.height = &f
	if g.Over == nil {
		if n != 3 {
			return fault(at, "give over", "a graph over a triangle or a disc in %d dimensions", n)
		}
		h.spanned = []int{0, 1}
		for _, c := range g.Triangle {
			p, err := readAll(s.scope, c)
			if err != nil {
				return err
			}
			h.corners = append(h.corners, p)
		}
		if d := g.Disc; d != nil {
			h.disc, err = readAll(s.scope, []source.Text{d.Center[0], d.Center[1], d.Radius})
		}
		return err
	}
	if len(g.Over) != n-1 {
		return fault(at, fmt.Sprintf("give %d of %s", n-1, strings.Join(coords, ", ")), "a graph over %d coordinates in %d dimensions", len(g.Over), n)
	}
	over := slices.Clone(g.Over)
	place := func(r casefile.Interval) int {
		name, _ := formula.FoldName(r.Name.S)
		return slices.Index(coords, name)
	}
	slices.SortStableFunc(over, func(a, b casefile.Interval) int { return place(a) - place(b) })
	for _, r := range over {
		i := place(r)
		if i < 0 || slices.Contains(h.spanned, i) {
			return fault(nameText(s.ev.file, r.Name), fmt.Sprintf("give %d of %s", n-1, strings.Join(coords, ", ")), "a graph lies over different coordinates, and %q is none", r.Name.S)
		}
		h.spanned = append(h.spanned, i)
	}
	return s.readOver(over)
}

// surfaceOf makes the surface at one choice of values. moved is told the
// parameters of a patch whenever a position is computed.
func (c *combination) surfaceOf() (quadrature.Surface, error) {
	h := &c.s.shape
	switch {
	case h.vertices != nil:
		var p quadrature.Polygon
		for _, v := range h.vertices {
			x, err := c.numbers(v)
			if err != nil {
				return nil, err
			}
			p.Vertices = append(p.Vertices, x)
		}
		return p, nil
	case h.maps != nil:
		over, err := c.ranges()
		if err != nil {
			return nil, err
		}
		return c.patch(c.s.params, h.maps, over)
	}
	return c.graph()
}

func (c *combination) ranges() ([]quadrature.Range, error) {
	var out []quadrature.Range
	for _, r := range c.s.shape.over {
		x, err := c.numbers(r[:])
		if err != nil {
			return nil, err
		}
		out = append(out, quadrature.Range{Lo: x[0], Hi: x[1]})
	}
	return out, nil
}

// mapProgram compiles formulas in the given inputs, with their derivatives by
// them: the values first, then all derivatives by the first input, and so on.
func (c *combination) mapProgram(inputs []entropy.Input, formulas []formulaText) (*program.Program, error) {
	in, num := c.numeric().NewNumeric(nil, inputs...)
	num.Closed = true
	var outs []program.Ref
	for _, f := range formulas {
		x, err := in.Scalar(c.fold(f.node))
		if err == nil {
			err = num.Err()
		}
		if err != nil {
			return nil, placed(f.text, err)
		}
		outs = append(outs, x)
	}
	for k := range inputs {
		for _, x := range outs[:len(formulas)] {
			outs = append(outs, num.Builder.Diff(x, func(i int) program.Ref {
				if i == k {
					return num.Builder.Const(1)
				}
				return 0
			}))
		}
	}
	p, err := num.Compile(outs...)
	return p, placed(formulas[0].text, err)
}

func (c *combination) patch(params []string, maps []formulaText, over []quadrature.Range) (quadrature.Surface, error) {
	inputs := constants(params)
	p, err := c.mapProgram(inputs, maps)
	if err != nil {
		return nil, err
	}
	n := len(maps)
	ws, out := p.NewWorkspace(), make([]float64, n*(1+len(params)))
	return quadrature.Patch{Dim: n, Params: over, Map: func(s, x []float64, jac [][]float64) {
		copy(c.params, s)
		p.Eval(ws, s, out)
		copy(x, out[:n])
		for j := range params {
			copy(jac[j], out[n*(j+1):n*(j+2)])
		}
	}}, nil
}

func constants(names []string) []entropy.Input {
	var out []entropy.Input
	for _, n := range names {
		out = append(out, entropy.Input{Kind: entropy.ConstantInput, Name: n})
	}
	return out
}

// graph makes a graph over the plane of all coordinates but one. Plus is the
// side on which that one is greater.
func (c *combination) graph() (quadrature.Surface, error) {
	h := &c.s.shape
	n := len(c.set.Coordinates)
	var inputs []entropy.Input
	for _, i := range h.spanned {
		inputs = append(inputs, entropy.Input{Kind: entropy.CoordinateInput, Place: i})
	}
	p, err := c.mapProgram(inputs, []formulaText{*h.height})
	if err != nil {
		return nil, err
	}
	ws, out := p.NewWorkspace(), make([]float64, n)
	height := func(x, grad []float64) float64 {
		p.Eval(ws, x, out)
		copy(grad, out[1:])
		return out[0]
	}
	switch {
	case h.corners != nil:
		var t quadrature.Triangle
		for i, v := range h.corners {
			x, err := c.numbers(v)
			if err != nil {
				return nil, err
			}
			t[i] = [2]float64{x[0], x[1]}
		}
		return quadrature.Graph{Over: t, F: height}, nil
	case h.disc != nil:
		x, err := c.numbers(h.disc)
		if err != nil {
			return nil, err
		}
		return quadrature.Graph{Over: quadrature.Disc{Center: [2]float64{x[0], x[1]}, Radius: x[2]}, F: height}, nil
	}
	over, err := c.ranges()
	if err != nil {
		return nil, err
	}
	up := n*(n-1)/2 - sum(h.spanned) // the coordinate that is a function of the others
	switch {
	case up == n-1 && n == 2:
		return quadrature.Graph{Over: quadrature.Interval(over[0]), F: height}, nil
	case up == n-1:
		return quadrature.Graph{Over: quadrature.Rectangle{X: over[0], Y: over[1]}, F: height}, nil
	}
	// The parameters in the order in which the normal has a positive component
	// along the remaining coordinate.
	order := []int{0, 1}[:n-1]
	if n == 3 && up == 1 {
		order = []int{1, 0}
	}
	base, grad := make([]float64, n-1), make([]float64, n-1)
	patch := quadrature.Patch{Dim: n}
	for _, k := range order {
		patch.Params = append(patch.Params, over[k])
	}
	patch.Map = func(s, x []float64, jac [][]float64) {
		for j, k := range order {
			base[k] = s[j]
		}
		x[up] = height(base, grad)
		for j, k := range order {
			clear(jac[j])
			x[h.spanned[k]] = s[j]
			jac[j][h.spanned[k]], jac[j][up] = 1, grad[k]
		}
	}
	return patch, nil
}

func sum(list []int) (n int) {
	for _, k := range list {
		n += k
	}
	return n
}
