package identity

import (
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// turned says that a gap does not depend on the frame angle once its jets are
// written along the axes: it then holds at all angles if it holds at θ = 0,
// where the components along the axes are those along the coordinates. Names
// are the derivatives along the axes.
type turned struct {
	cos, sin algebra.Var
	names    map[algebra.Var]string
}

// removeAngle puts θ = 0 into the gap where that loses nothing: with
//
//	∂_x = cos θ ∂_ξ - sin θ ∂_η,   ∂_y = sin θ ∂_ξ + cos θ ∂_η
//
// the map from jets along the axes to jets along the coordinates is a
// bijection for every θ, so it is enough that the gap at any θ, written in the
// jets along the axes, is the gap at θ = 0.
func (d *decider) removeAngle(g *gap) error {
	f := d.claim.Setting.Frame
	if f == nil {
		return nil
	}
	cos, sin, ok := d.frameAngle(f.Angle)
	if !ok || !g.poly.Has(cos) && !g.poly.Has(sin) {
		return nil
	}
	theta := d.ring.ConstantVar(f.Angle)
	var invariant []algebra.Poly // radicands that must not depend on the angle
	for _, k := range d.ring.Kernels(algebra.FromPoly(g.poly)) {
		if k == cos || k == sin {
			continue
		}
		s := d.ring.Symbol(k)
		varies := slices.ContainsFunc(d.ring.Support(s.Arg), func(v algebra.Var) bool {
			return v == theta || d.ring.Symbol(v).Kind == jet.Derivative || d.ring.Symbol(v).Kind == jet.Coordinate
		})
		switch {
		case !varies:
		case s.Kind == jet.Root:
			invariant = append(invariant, s.Arg.Num())
		default:
			return nil
		}
	}
	invariant = append(invariant, d.wells...)
	if g.poly.Has(theta) || d.holdsPlane(g.poly, f.Plane) || !d.assumptionsTurn(f.Plane) {
		return nil
	}
	along := map[algebra.Var]algebra.Poly{}
	names := map[algebra.Var]string{}
	var vars []algebra.Var
	for _, p := range append(invariant[:len(invariant):len(invariant)], g.poly) {
		for _, v := range p.Vars() {
			if !slices.Contains(vars, v) {
				vars = append(vars, v)
			}
		}
	}
	for _, v := range vars {
		s := d.ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Index[f.Plane[0]] == 0 && s.Index[f.Plane[1]] == 0 {
			continue
		}
		p, err := d.alongAxes(v, f.Plane, cos, sin)
		if err != nil {
			return err
		}
		along[v] = p
	}
	if len(along) == 0 {
		return nil
	}
	for _, p := range invariant {
		if !d.ring.ReducePoly(p.SubstMany(along)).Equal(p) {
			return nil
		}
	}
	rotated := d.ring.ReducePoly(g.poly.SubstMany(along))
	at0 := g.poly.EvalPartial(map[algebra.Var]algebra.Rat{cos: algebra.Int(1), sin: {}})
	if err := rotated.Err(); err != nil || !rotated.Equal(at0) {
		return nil
	}
	for _, v := range vars {
		if s := d.ring.Symbol(v); s.Kind == jet.Derivative {
			names[v] = d.axisName(v, f.Plane, f.Axes)
		}
	}
	g.poly, g.turned = at0, &turned{cos, sin, names}
	return nil
}

// frameAngle finds the cosine and sine of the frame angle.
func (d *decider) frameAngle(angle string) (cos, sin algebra.Var, ok bool) {
	theta := d.ring.ConstantVar(angle)
	for v := range algebra.Var(d.ring.Len()) {
		if s := d.ring.Symbol(v); s.Kind == jet.Cosine {
			if w, lone := loneVar(s.Arg); lone && w == theta {
				return v, s.Partner, true
			}
		}
	}
	return 0, 0, false
}

// holdsPlane reports whether a coordinate of the plane occurs itself.
func (d *decider) holdsPlane(p algebra.Poly, plane [2]int) bool {
	return p.Has(d.ring.CoordinateVar(plane[0])) || p.Has(d.ring.CoordinateVar(plane[1]))
}

// assumptionsTurn reports whether no assumption singles out a direction of the
// plane: none holds a derivative along it or a coordinate of it.
func (d *decider) assumptionsTurn(plane [2]int) bool {
	if len(d.ideal) > 0 {
		return false
	}
	for _, c := range d.assumed {
		for _, v := range d.ring.Support(c.value) {
			s := d.ring.Symbol(v)
			if s.Kind == jet.Coordinate && slices.Contains(plane[:], s.Place) ||
				s.Kind == jet.Derivative && (s.Index[plane[0]] > 0 || s.Index[plane[1]] > 0) {
				return false
			}
		}
	}
	return true
}

// alongAxes writes a derivative by the derivatives along the axes. The jets
// along the axes are named by the indeterminates of the same multi-index along
// the coordinates.
func (d *decider) alongAxes(v algebra.Var, plane [2]int, cos, sin algebra.Var) (algebra.Poly, error) {
	s := d.ring.Symbol(v)
	c, sn := algebra.Variable(cos), algebra.Variable(sin)
	rest := s.Index
	nx, ny := int(rest[plane[0]]), int(rest[plane[1]])
	rest[plane[0]], rest[plane[1]] = 0, 0
	// (c ξ - s η)^nx (s ξ + c η)^ny as coefficients by the power of η.
	coef := []algebra.Poly{algebra.Const(algebra.Int(1))}
	times := func(xi, eta algebra.Poly) {
		next := make([]algebra.Poly, len(coef)+1)
		for k, p := range coef {
			next[k] = next[k].Add(p.Mul(xi))
			next[k+1] = next[k+1].Add(p.Mul(eta))
		}
		coef = next
	}
	for range nx {
		times(c, sn.Neg())
	}
	for range ny {
		times(sn, c)
	}
	var out algebra.Poly
	for k, p := range coef {
		j := rest
		j[plane[0]], j[plane[1]] = uint8(nx+ny-k), uint8(k)
		w, err := d.ring.JetVar(s.Place, j, s.Side)
		if err != nil {
			return out, err
		}
		out = out.Add(p.Mul(algebra.Variable(w)))
	}
	return out, nil
}

// axisName is the name of a derivative along the axes, such as u_xieta.
func (d *decider) axisName(v algebra.Var, plane [2]int, axes [2]string) string {
	s := d.ring.Symbol(v)
	var b strings.Builder
	b.WriteString(d.ring.Unknowns[s.Place])
	if s.Index.Order() > 0 {
		b.WriteByte('_')
	}
	for i, k := range s.Index {
		name := ""
		switch {
		case k == 0:
			continue
		case i == plane[0]:
			name = axes[0]
		case i == plane[1]:
			name = axes[1]
		default:
			name = d.ring.Coordinates[i]
		}
		b.WriteString(strings.Repeat(name, int(k)))
	}
	switch s.Side {
	case jet.Mean:
		return "{" + b.String() + "}"
	case jet.Difference:
		return "[" + b.String() + "]"
	case jet.PlusSide:
		return b.String() + "(+)"
	case jet.MinusSide:
		return b.String() + "(-)"
	}
	return b.String()
}
