package exact

import (
	"slices"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// Turned says that a gap does not depend on the frame angle once its jets are
// written along the axes: it then holds at all angles if it holds at θ = 0,
// where the components along the axes are those along the coordinates. Names
// are the derivatives along the axes.
type Turned struct {
	Cos, Sin algebra.Var
	Names    map[algebra.Var]string
}

// RemoveAngle puts θ = 0 into the gap where that loses nothing: with
//
//	∂_x = cos θ ∂_ξ - sin θ ∂_η,   ∂_y = sin θ ∂_ξ + cos θ ∂_η
//
// the map from jets along the axes to jets along the coordinates is a
// bijection for every θ, so it is enough that the gap at any θ, written in the
// jets along the axes, is the gap at θ = 0.
func (d *Problem) RemoveAngle(g *Gap) error {
	f := d.Claim.Setting.Frame
	if f == nil {
		return nil
	}
	cos, sin, ok := d.FrameAngle(f.Angle)
	if !ok || !g.Poly.Has(cos) && !g.Poly.Has(sin) {
		return nil
	}
	theta := d.Ring.ConstantVar(f.Angle)
	varies := func(f algebra.Fraction) bool {
		return slices.ContainsFunc(d.Ring.Support(f), func(v algebra.Var) bool {
			return v == theta || d.Ring.Symbol(v).Kind == jet.Derivative || d.Ring.Symbol(v).Kind == jet.Coordinate
		})
	}
	turning := []algebra.Poly{g.Poly} // to be the same at all angles, along the axes
	for _, c := range d.Ring.Conditions() {
		if !varies(c.Value) {
			continue
		}
		turning = append(turning, c.Value.Num())
		for _, f := range c.Value.DenFactors() {
			turning = append(turning, f.Base)
		}
	}
	// Radicands must not depend on the angle. That of any root of the claim is
	// known to be non-negative, in the gap or not.
	invariant := slices.Clone(d.Wells)
	for k := range algebra.Var(d.Ring.Len()) {
		s := d.Ring.Symbol(k)
		switch {
		case s.Kind < jet.Cosine || k == cos || k == sin || !varies(s.Arg):
		case s.Kind == jet.Root:
			invariant = append(invariant, s.Arg.Num())
		case slices.ContainsFunc(turning, func(p algebra.Poly) bool { return slices.Contains(d.Ring.Kernels(algebra.FromPoly(p)), k) }):
			return nil
		}
	}
	if g.Poly.Has(theta) || !d.assumptionsTurn(f.Plane) {
		return nil
	}
	along := map[algebra.Var]algebra.Poly{}
	names := map[algebra.Var]string{}
	var vars []algebra.Var
	for _, p := range slices.Concat(invariant, turning) {
		if d.holdsPlane(p, f.Plane) {
			return nil
		}
		for _, v := range p.Vars() {
			if !slices.Contains(vars, v) {
				vars = append(vars, v)
			}
		}
	}
	for _, v := range vars {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Index[f.Plane[0]] == 0 && s.Index[f.Plane[1]] == 0 {
			continue
		}
		if s.Sign != jet.AnySign {
			return nil // a sign that is known along the coordinates
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
		if !d.Ring.ReducePoly(p.SubstMany(along)).Equal(p) {
			return nil
		}
	}
	at0 := func(p algebra.Poly) algebra.Poly {
		return p.EvalPartial(map[algebra.Var]algebra.Rat{cos: algebra.Int(1), sin: {}})
	}
	for _, p := range turning {
		rotated := d.Ring.ReducePoly(p.SubstMany(along))
		if err := rotated.Err(); err != nil || !rotated.Equal(at0(p)) {
			return nil
		}
	}
	for _, v := range vars {
		if s := d.Ring.Symbol(v); s.Kind == jet.Derivative {
			names[v] = d.axisName(v, f.Plane, f.Axes)
		}
	}
	g.Poly, g.Turned = at0(g.Poly), &Turned{cos, sin, names}
	return nil
}

// FrameAngle finds the cosine and sine of the frame angle.
func (d *Problem) FrameAngle(angle string) (cos, sin algebra.Var, ok bool) {
	theta := d.Ring.ConstantVar(angle)
	for v := range algebra.Var(d.Ring.Len()) {
		if s := d.Ring.Symbol(v); s.Kind == jet.Cosine {
			if w, lone := LoneVar(s.Arg); lone && w == theta {
				return v, s.Partner, true
			}
		}
	}
	return 0, 0, false
}

// holdsPlane reports whether a coordinate of the plane occurs itself.
func (d *Problem) holdsPlane(p algebra.Poly, plane [2]int) bool {
	return p.Has(d.Ring.CoordinateVar(plane[0])) || p.Has(d.Ring.CoordinateVar(plane[1]))
}

// assumptionsTurn reports whether no assumption singles out a direction of the
// plane: none holds a derivative along it or a coordinate of it.
func (d *Problem) assumptionsTurn(plane [2]int) bool {
	if len(d.Ideal) > 0 {
		return false
	}
	for _, c := range d.Assumed {
		for _, v := range d.Ring.Support(c.Value) {
			s := d.Ring.Symbol(v)
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
func (d *Problem) alongAxes(v algebra.Var, plane [2]int, cos, sin algebra.Var) (algebra.Poly, error) {
	s := d.Ring.Symbol(v)
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
		w, err := d.Ring.JetVar(s.Place, j, s.Side)
		if err != nil {
			return out, err
		}
		out = out.Add(p.Mul(algebra.Variable(w)))
	}
	return out, nil
}

// axisName is the name of a derivative along the axes, such as u_xieta.
func (d *Problem) axisName(v algebra.Var, plane [2]int, axes [2]string) string {
	s := d.Ring.Symbol(v)
	var b strings.Builder
	b.WriteString(d.Ring.Unknowns[s.Place])
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
			name = d.Ring.Coordinates[i]
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
