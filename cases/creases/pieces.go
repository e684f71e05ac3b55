package creases

import (
	"errors"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/jet"
	"creaseproof/quadrature/certified"
)

// piece is a parametrised part of a surface in exact form.
type piece struct {
	*onSurface
	vars []algebra.Var // the parameters
	over [][2]algebra.Fraction
	flip bool // the normal is turned round

	sines []algebra.Fraction // of parameters, positive inside the ranges

	tangents [][]algebra.Fraction
	area     algebra.Fraction // element

	tape  *certified.Tape
	from  *writer             // on the whole ranges
	scale []interval.Interval // lengths of the ranges
}

// newPiece makes the ring of a piece with the named parameters; ranges gives
// their ends, which may hold nothing but numbers.
func (c *combination) newPiece(names []string, angles *jet.Angles, ranges func(*onSurface) ([][2]algebra.Fraction, error)) (*piece, error) {
	ring, err := jet.NewRing(c.ctx, names, c.set.Unknowns)
	if err != nil {
		return nil, err
	}
	if angles != nil {
		ring.SetAngles(*angles)
	}
	p := &piece{onSurface: &onSurface{Exact: &entropy.Exact{Ring: ring}, params: map[string]algebra.Fraction{}}}
	if c.set.Frame != nil {
		ring.SplitAngle(ring.ConstantVar(c.set.Frame.Angle))
	}
	p.pos = make([]algebra.Fraction, len(c.set.Coordinates))
	if p.over, err = ranges(p.onSurface); err != nil {
		return nil, err
	}
	sign := func(f algebra.Fraction) int {
		if f.IsZero() {
			return 0
		}
		s, ok := ring.Enclose(f, nil, precision).Sign()
		if !ok || s == 0 {
			return 2
		}
		return s
	}
	for i, r := range p.over {
		v := ring.CoordinateVar(i)
		p.vars = append(p.vars, v)
		p.params[names[i]] = jet.Of(v)
		// Inside the range; its ends do not matter to an integral.
		switch lo, hi := sign(r[0]), sign(r[1]); {
		case sign(r[1].Sub(r[0])) != 1:
			return nil, noEnclosure("the range of a parameter is empty")
		case lo == 0 || lo == 1:
			ring.Assume(v, jet.Positive)
			if s := sign(p.Pi().Sub(r[1])); angles == nil && (s == 0 || s == 1) {
				if _, sine, err := ring.CosSin(jet.Of(v)); err == nil && len(sine.Vars()) == 1 {
					ring.Assume(sine.Vars()[0], jet.Positive)
					p.sines = append(p.sines, sine)
				}
			}
		case hi == 0 || hi == -1:
			ring.Assume(v, jet.Negative)
		}
	}
	return p, nil
}

// on evaluates a formula on the piece.
func (c *combination) on(p *onSurface, f formulaText) (algebra.Fraction, error) {
	in := &entropy.Interpreter[algebra.Fraction]{Setting: c.set, Arith: p}
	x, err := in.Scalar(f.node)
	if err == nil {
		err = p.Ring.Err(x)
	}
	return x, err
}

func (c *combination) allOn(p *onSurface, list []formulaText) ([]algebra.Fraction, error) {
	out := make([]algebra.Fraction, len(list))
	for i, f := range list {
		var err error
		if out[i], err = c.on(p, f); err != nil {
			return nil, err
		}
	}
	return out, nil
}

func (c *combination) rangesOn(p *onSurface) (out [][2]algebra.Fraction, err error) {
	for _, r := range c.s.shape.over {
		x, err := c.allOn(p, r[:])
		if err != nil {
			return nil, err
		}
		out = append(out, [2]algebra.Fraction{x[0], x[1]})
	}
	return out, nil
}

// unit is the unit interval or square.
func unit(n int) func(*onSurface) ([][2]algebra.Fraction, error) {
	return func(*onSurface) ([][2]algebra.Fraction, error) {
		return slices.Repeat([][2]algebra.Fraction{{jet.Whole(0), jet.Whole(1)}}, n), nil
	}
}

// pieces is the surface in exact form. The parameters of what is no patch get
// names that no formula has.
func (c *combination) pieces(angles *jet.Angles) ([]*piece, error) {
	h := &c.s.shape
	n := len(c.set.Coordinates)
	names := []string{"first parameter", "second parameter"}[:n-1]
	switch {
	case h.implicit() || c.s.src.Mesh != "":
		return nil, noEnclosure("the surface is no polygon, patch or graph")
	case h.vertices != nil:
		return c.polygonPieces(names, angles)
	case h.maps != nil:
		p, err := c.newPiece(c.s.params, angles, c.rangesOn)
		if err != nil {
			return nil, err
		}
		if p.pos, err = c.allOn(p.onSurface, h.maps); err != nil {
			return nil, err
		}
		return []*piece{p}, p.measure()
	}
	p, err := c.graphPiece(names, angles)
	if err != nil {
		return nil, err
	}
	return []*piece{p}, p.measure()
}

// along is a + t (b - a).
func (p *piece) along(a, b []algebra.Fraction, t algebra.Fraction) ([]algebra.Fraction, error) {
	out := make([]algebra.Fraction, len(a))
	for i := range a {
		d, err := p.Ring.Mul(t, b[i].Sub(a[i]))
		if err != nil {
			return nil, err
		}
		if out[i], err = p.Ring.Add(a[i], d); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// triangle collapses a square to the triangle a, b, d: a + s (b + t (d - b) - a).
func (p *piece) triangle(a, b, d []algebra.Fraction) ([]algebra.Fraction, error) {
	edge, err := p.along(b, d, jet.Of(p.vars[1]))
	if err != nil {
		return nil, err
	}
	return p.along(a, edge, jet.Of(p.vars[0]))
}

// polygonPieces are the segments of a chain in the plane, or the triangles
// from the first vertex of a polygon in space. All triangles have to turn the
// same way.
func (c *combination) polygonPieces(names []string, angles *jet.Angles) (list []*piece, err error) {
	corners := c.s.shape.vertices
	count := len(corners) - 1
	if len(names) == 2 {
		count = len(corners) - 2
	}
	for k := range count {
		p, err := c.newPiece(names, angles, unit(len(names)))
		if err != nil {
			return nil, err
		}
		var x [][]algebra.Fraction
		for _, v := range corners {
			y, err := c.allOn(p.onSurface, v)
			if err != nil {
				return nil, err
			}
			x = append(x, y)
		}
		if len(names) == 1 {
			p.pos, err = p.along(x[k], x[k+1], jet.Of(p.vars[0]))
		} else {
			if k == 0 {
				if err := p.flat(x); err != nil {
					return nil, err
				}
			}
			p.pos, err = p.triangle(x[0], x[k+1], x[k+2])
		}
		if err != nil {
			return nil, err
		}
		if err := p.measure(); err != nil {
			return nil, err
		}
		list = append(list, p)
	}
	return list, nil
}

// flat checks exactly that the triangles from the first vertex lie in one
// plane and turn the same way.
func (p *piece) flat(x [][]algebra.Fraction) error {
	var first []algebra.Fraction
	for k := 1; k+1 < len(x); k++ {
		a, b := make([]algebra.Fraction, 3), make([]algebra.Fraction, 3)
		for i := range 3 {
			a[i], b[i] = x[k][i].Sub(x[0][i]), x[k+1][i].Sub(x[0][i])
		}
		n, err := p.cross(a, b)
		if err != nil {
			return err
		}
		if first == nil {
			first = n
		}
		same, err := p.dot(first, n)
		if err != nil {
			return err
		}
		if s, ok := p.Ring.Enclose(same, nil, precision).Sign(); !ok || s <= 0 {
			return noEnclosure("the triangles from the first vertex of the polygon do not all turn the same way")
		}
		m, err := p.cross(first, n)
		if err != nil {
			return err
		}
		for _, y := range m {
			if !y.IsZero() {
				return noEnclosure("the polygon is not flat by exact arithmetic")
			}
		}
	}
	return nil
}

func (c *combination) graphPiece(names []string, angles *jet.Angles) (*piece, error) {
	h := &c.s.shape
	n := len(c.set.Coordinates)
	ranges := c.rangesOn
	switch {
	case h.corners != nil:
		ranges = unit(2)
	case h.disc != nil:
		ranges = func(p *onSurface) ([][2]algebra.Fraction, error) {
			r, err := c.on(p, h.disc[2])
			return [][2]algebra.Fraction{{jet.Whole(0), r}, {jet.Whole(0), p.Pi().Scale(algebra.Int(2))}}, err
		}
	}
	p, err := c.newPiece(names, angles, ranges)
	if err != nil {
		return nil, err
	}
	up := n*(n-1)/2 - sum(h.spanned)
	base := make([]algebra.Fraction, n-1)
	switch {
	case h.corners != nil:
		var x [3][]algebra.Fraction
		for i, v := range h.corners {
			if x[i], err = c.allOn(p.onSurface, v); err != nil {
				return nil, err
			}
		}
		if base, err = p.triangle(x[0], x[1], x[2]); err != nil {
			return nil, err
		}
		turn := x[1][0].Sub(x[0][0]).Mul(x[2][1].Sub(x[0][1])).Sub(x[1][1].Sub(x[0][1]).Mul(x[2][0].Sub(x[0][0])))
		s, ok := p.Ring.Enclose(turn, nil, precision).Sign()
		if !ok || s == 0 {
			return nil, noEnclosure("the triangle has no area")
		}
		p.flip = s < 0
	case h.disc != nil:
		center, err := c.allOn(p.onSurface, h.disc[:2])
		if err != nil {
			return nil, err
		}
		cos, sin, err := p.Ring.CosSin(jet.Of(p.vars[1]))
		if err != nil {
			return nil, err
		}
		for i, x := range []algebra.Fraction{cos, sin} {
			if base[i], err = p.Ring.Add(center[i], jet.Of(p.vars[0]).Mul(x)); err != nil {
				return nil, err
			}
		}
	default:
		for k := range base {
			base[k] = jet.Of(p.vars[k])
		}
		p.flip = n == 2 && up == 1 || n == 3 && up == 1
	}
	for k, i := range h.spanned {
		p.pos[i] = base[k]
	}
	p.pos[up], err = c.on(p.onSurface, *h.height)
	return p, err
}

// measure finds tangents, area element and normal, and begins the tape.
func (p *piece) measure() error {
	for _, v := range p.vars {
		var t []algebra.Fraction
		for _, x := range p.pos {
			d, err := p.Ring.Partial(x, v)
			if err != nil {
				return err
			}
			t = append(t, d)
		}
		p.tangents = append(p.tangents, t)
	}
	var n []algebra.Fraction
	var err error
	if len(p.pos) == 2 {
		n = []algebra.Fraction{p.tangents[0][1], p.tangents[0][0].Neg()}
	} else if n, err = p.cross(p.tangents[0], p.tangents[1]); err != nil {
		return err
	}
	// A sine that vanishes at a pole is taken out, so that no root vanishes there.
	factor := jet.Whole(1)
	for _, sine := range p.sines {
		m, ok := p.divided(n, sine)
		if ok {
			n, factor = m, factor.Mul(sine)
		}
	}
	length, err := p.Norm(n)
	if err != nil {
		return err
	}
	if p.area, err = p.Ring.Mul(length, factor); err != nil {
		return err
	}
	if p.area.IsZero() {
		return noEnclosure("the area element vanishes")
	}
	for _, x := range n {
		if p.flip {
			x = x.Neg()
		}
		y, err := p.Ring.Quo(x, length)
		if err != nil {
			return err
		}
		p.nu = append(p.nu, y)
	}
	p.tape = &certified.Tape{}
	p.from, p.scale, err = p.within(0, 1)
	return err
}

// divided are the components divided by a sine, where that leaves no new
// denominator: x/s = x s/(1 - c²).
func (p *piece) divided(n []algebra.Fraction, sine algebra.Fraction) ([]algebra.Fraction, bool) {
	cos := jet.Of(p.Ring.Symbol(sine.Vars()[0]).Partner)
	var out []algebra.Fraction
	for _, x := range n {
		y, err := p.Ring.Mul(x, sine)
		if err != nil {
			return nil, false
		}
		z, ok := y.Quo(jet.Whole(1).Sub(cos.Mul(cos)))
		if !ok || z.Err() != nil || len(z.DenFactors()) > len(x.DenFactors()) {
			return nil, false
		}
		out = append(out, z)
	}
	return out, true
}

// within is a writer on the part from a to b, 0 <= a < b <= 1, of the range of
// each parameter, and the lengths of these.
func (p *piece) within(a, b float64) (*writer, []interval.Interval, error) {
	var place []certified.Ref
	var lengths []interval.Interval
	for k, r := range p.over {
		lo, hi := p.Ring.Enclose(r[0], nil, precision), p.Ring.Enclose(r[1], nil, precision)
		d := p.Ring.Enclose(r[1].Sub(r[0]), nil, precision)
		if !lo.IsBounded() || !hi.IsBounded() || !d.IsBounded() {
			return nil, nil, noEnclosure("the range of a parameter has no value")
		}
		x, w := certified.Outward(lo), certified.Outward(d)
		t := p.tape
		s := t.Add(t.Const(interval.Point(a)), t.Mul(t.Const(interval.Point(b).Sub(interval.Point(a))), t.Param(k)))
		place = append(place, t.Add(t.Const(x), t.Mul(t.Const(w), s)))
		lengths = append(lengths, w)
	}
	return newWriter(p.Ring, p.vars, place, p.tape), lengths, nil
}

// size is |f|, its sign taken from the assumed signs or from enclosures where
// these show it.
func (p *piece) size(f algebra.Fraction) (algebra.Fraction, error) {
	const depth = 8
	switch x := p.from.fraction(f); {
	case p.Ring.VisiblyNonNegative(f):
		return f, nil
	case p.Ring.VisiblyNonNegative(f.Neg()):
		return f.Neg(), nil
	case p.from.fault != "":
		return f, noEnclosure("%s has no value", p.from.fault)
	case p.tape.NonNegative(x, depth):
		return f, nil
	case p.tape.NonNegative(p.tape.Mul(p.tape.Const(interval.Point(-1)), x), depth):
		return f.Neg(), nil
	}
	return p.Ring.Abs(f)
}

// finer is the basis of angles that an error asks for.
func finer(err error) *jet.Angles {
	var f *jet.FinerAngles
	if errors.As(err, &f) {
		return &f.Need
	}
	return nil
}
