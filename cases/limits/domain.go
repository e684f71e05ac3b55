package limits

import (
	"math"
	"slices"

	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/program"
	"creaseproof/entropy/source"
	"creaseproof/quadrature/limit"
)

// domain makes the domain of integration.
func (r *reader) domain() (limit.Domain, error) {
	l := r.l
	switch {
	case l.Ball != nil:
		return r.ball(l.Ball)
	case l.Cylinder != nil:
		return r.cylinder(l.Cylinder)
	case l.Region != nil:
		return r.region(l.Region)
	}
	d := limit.Domain{Lo: make([]float64, r.n), Hi: make([]float64, r.n)}
	seen := make([]bool, r.n)
	for _, b := range l.Box {
		name, _ := formula.FoldName(b.Name.S)
		i := slices.Index(r.set.Coordinates, name)
		if i < 0 || seen[i] {
			return d, r.c.Fault(b.Name.Pos, "give each coordinate one interval", "%q is no coordinate, or given twice", b.Name.S)
		}
		seen[i] = true
		var err error
		if d.Lo[i], d.Hi[i], err = r.ends(b); err != nil {
			return d, err
		}
	}
	if i := slices.Index(seen, false); i >= 0 {
		return d, r.c.Fault(l.Pos, "give each coordinate one interval", "the box has no interval for %s", r.set.Coordinates[i])
	}
	return d, nil
}

func (r *reader) ends(b casefile.Interval) (lo, hi float64, err error) {
	if lo, err = r.number(b.Lo); err == nil {
		hi, err = r.number(b.Hi)
	}
	if err == nil && !(hi > lo) {
		err = r.fault(b.Hi, "write the lower end first", "the interval from %g to %g is empty", lo, hi)
	}
	return lo, hi, err
}

func (r *reader) radius(t source.Text) (float64, error) {
	x, err := r.number(t)
	if err == nil && !(x > 0) {
		err = r.fault(t, "", "the radius %g is not positive", x)
	}
	return x, err
}

// ball is a disc in polar or a ball in spherical coordinates.
func (r *reader) ball(b *casefile.Ball) (d limit.Domain, err error) {
	if len(b.Center) != r.n {
		return d, r.c.Fault(b.Pos, "", "a centre of %d coordinates in %d dimensions", len(b.Center), r.n)
	}
	c, err := r.numbers(b.Center)
	if err != nil {
		return d, err
	}
	radius, err := r.radius(b.Radius)
	if err != nil {
		return d, err
	}
	if r.n == 2 {
		return limit.Domain{Lo: []float64{0, 0}, Hi: []float64{radius, 2 * math.Pi}, Map: func(s, x []float64, jac [][]float64) {
			sin, cos := math.Sincos(s[1])
			x[0], x[1] = c[0]+s[0]*cos, c[1]+s[0]*sin
			jac[0][0], jac[0][1] = cos, sin
			jac[1][0], jac[1][1] = -s[0]*sin, s[0]*cos
		}}, nil
	}
	return limit.Domain{Lo: []float64{0, 0, 0}, Hi: []float64{radius, math.Pi, 2 * math.Pi}, Map: func(s, x []float64, jac [][]float64) {
		sp, cp := math.Sincos(s[1])
		sa, ca := math.Sincos(s[2])
		x[0], x[1], x[2] = c[0]+s[0]*sp*ca, c[1]+s[0]*sp*sa, c[2]+s[0]*cp
		copy(jac[0], []float64{sp * ca, sp * sa, cp})
		copy(jac[1], []float64{s[0] * cp * ca, s[0] * cp * sa, -s[0] * sp})
		copy(jac[2], []float64{-s[0] * sp * sa, s[0] * sp * ca, 0})
	}}, nil
}

// cylinder has cylindrical coordinates about its axis.
func (r *reader) cylinder(cyl *casefile.Cylinder) (d limit.Domain, err error) {
	if r.n != 3 {
		return d, r.c.Fault(cyl.Pos, "give a box or a ball", "a cylinder in %d dimensions", r.n)
	}
	axis := 2
	if cyl.Axis != nil {
		name, _ := formula.FoldName(cyl.Axis.S)
		if axis = slices.Index(r.set.Coordinates, name); axis < 0 {
			return d, r.c.Fault(cyl.Axis.Pos, "", "%q is no coordinate", cyl.Axis.S)
		}
	}
	c, err := r.numbers(cyl.Center)
	if err != nil {
		return d, err
	}
	radius, err := r.radius(cyl.Radius)
	if err != nil {
		return d, err
	}
	lo, hi, err := r.ends(casefile.Interval{Lo: cyl.Heights[0], Hi: cyl.Heights[1]})
	if err != nil {
		return d, err
	}
	var a, b int
	switch axis {
	case 0:
		a, b = 1, 2
	case 1:
		a, b = 0, 2
	default:
		a, b = 0, 1
	}
	return limit.Domain{Lo: []float64{0, 0, lo}, Hi: []float64{radius, 2 * math.Pi, hi}, Map: func(s, x []float64, jac [][]float64) {
		sin, cos := math.Sincos(s[1])
		x[a], x[b], x[axis] = c[0]+s[0]*cos, c[1]+s[0]*sin, s[2]
		for i := range jac {
			clear(jac[i])
		}
		jac[0][a], jac[0][b] = cos, sin
		jac[1][a], jac[1][b] = -s[0]*sin, s[0]*cos
		jac[2][axis] = 1
	}}, nil
}

// region is the image of a box of parameters, which the map has to cover once.
// What a few determinants show of that is checked.
func (r *reader) region(p *casefile.Patch) (d limit.Domain, err error) {
	n := r.n
	if len(p.Map) != n || len(p.Over) != n {
		return d, r.c.Fault(p.Pos, "give as many of each as there are coordinates", "a map of %d components of %d parameters in %d dimensions", len(p.Map), len(p.Over), n)
	}
	scope := r.scope
	var inputs []entropy.Input
	for _, o := range p.Over {
		name, err := formula.FoldName(o.Name.S)
		if err == nil && scope.Kind(name) == formula.Constant {
			return d, r.c.Fault(o.Name.Pos, "choose another name", "the parameter %s is a constant of the case already", name)
		}
		if err == nil {
			scope, err = scope.With(o.Name.S)
		}
		if err != nil {
			return d, r.c.Place(err, o.Name.Pos)
		}
		inputs = append(inputs, entropy.Input{Kind: entropy.ConstantInput, Name: name})
		lo, hi, err := r.ends(o)
		if err != nil {
			return d, err
		}
		d.Lo, d.Hi = append(d.Lo, lo), append(d.Hi, hi)
	}
	in, num := r.set.NewNumeric(nil, inputs...)
	num.Closed = true
	var outs []program.Ref
	for _, t := range p.Map {
		node, err := scope.ParseExpr(t)
		if err != nil {
			return d, err
		}
		x, err := in.Scalar(node)
		if err == nil {
			err = num.Err()
		}
		if err != nil {
			return d, r.c.Place(err, source.Pos{Line: t.Line, Col: t.Col})
		}
		outs = append(outs, x)
	}
	for k := range n {
		for _, x := range outs[:n] {
			outs = append(outs, num.Builder.Diff(x, func(i int) program.Ref {
				if i == k {
					return num.Builder.Const(1)
				}
				return 0
			}))
		}
	}
	prog, err := num.Compile(outs...)
	if err != nil {
		return d, r.c.Place(err, p.Pos)
	}
	ws, out := prog.NewWorkspace(), make([]float64, n*(n+1))
	d.Map = func(s, x []float64, jac [][]float64) {
		prog.Eval(ws, s, out)
		copy(x, out[:n])
		for j := range n {
			copy(jac[j], out[n*(j+1):n*(j+2)])
		}
	}
	return d, r.regular(p.Pos, &d)
}
