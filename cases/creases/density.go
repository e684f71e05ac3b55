package creases

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
	"creaseproof/identity/claim"
	"creaseproof/quadrature"
	"creaseproof/quadrature/profile"
)

// density is the given density, or the profile cost of the model, and the
// relative error of its values beside rounding.
func (c *combination) density() (d quadrature.Density, inexact float64, err error) {
	s := c.s
	if s.density != nil {
		d, err = c.givenDensity()
		return d, 0, err
	}
	if err := s.ev.profileErr; err != nil {
		if !errors.Is(err, entropy.ErrNoProfile) {
			return nil, 0, placed(s.place, err)
		}
		return nil, 0, fault(s.place, `add density = "..."`, "the surface gives no density, and the model has no profile cost: %s", strings.TrimPrefix(err.Error(), entropy.ErrNoProfile.Error()+": "))
	}
	known := map[string]float64{}
	for _, v := range s.values {
		x, err := c.number(c.chosen[v.name])
		if err != nil {
			return nil, 0, err
		}
		known[v.name] = x
	}
	p, err := s.ev.profile.Compile(known)
	if err != nil {
		return nil, 0, placed(s.place, err)
	}
	return profile.Density(c.ctx, p), profile.Uncertainty(p), nil
}

// givenDensity compiles a density in the position, the parameters of a patch,
// the traces of the gradient and the normal.
func (c *combination) givenDensity() (quadrature.Density, error) {
	n := len(c.set.Coordinates)
	inputs := append(coordinates(n), constants(c.s.params)...)
	for i := range n {
		inputs = append(inputs, entropy.Input{Kind: entropy.NormalInput, Place: i})
	}
	jump := c.s.plus != nil
	if jump {
		for _, side := range []jet.Side{jet.PlusSide, jet.MinusSide} {
			for i := range n {
				inputs = append(inputs, entropy.Input{Kind: entropy.JetInput, Index: jet.Index{}.Plus(i), Side: side})
			}
		}
	}
	f := c.s.density
	compile := func(suprema []int) (program.Ref, *entropy.Numeric, error) {
		in, num := c.numeric().NewNumeric(nil, inputs...)
		num.Closed, num.Suprema, in.Jump = true, suprema, jump
		x, err := in.Scalar(c.fold(f.node))
		if err == nil {
			err = num.Err()
		}
		return x, num, placed(f.text, err)
	}
	x, num, err := compile(nil)
	if err != nil && c.set.Frame != nil && holdsSup(f.node, c.set.Lets) {
		suprema, exact := c.set.Suprema(c.ctx, f.node, jump)
		if exact != nil {
			return nil, placed(f.text, exact)
		}
		angle := c.set.Frame.Angle
		inputs = append(inputs, entropy.Input{Kind: entropy.ConstantInput, Name: angle},
			entropy.Input{Kind: entropy.CosineInput, Name: angle}, entropy.Input{Kind: entropy.SineInput, Name: angle})
		x, num, err = compile(suprema)
	}
	if err != nil {
		return nil, err
	}
	p, err := num.Compile(x)
	if err != nil {
		return nil, placed(f.text, err)
	}
	ws, values, out := p.NewWorkspace(), make([]float64, len(inputs)), make([]float64, 1)
	if last := inputs[len(inputs)-1]; last.Kind == entropy.SineInput {
		values[len(values)-2] = 1 // the angle is 0
	}
	return func(x, plus, minus, nu []float64) float64 {
		k := copy(values, x)
		k += copy(values[k:], c.params)
		k += copy(values[k:], nu)
		k += copy(values[k:], plus)
		copy(values[k:], minus) // the angle stands behind them
		p.Eval(ws, values, out)
		return out[0]
	}, nil
}

// holdsSup reports whether a formula, or a named formula, has a supremum.
func holdsSup(n formula.Node, lets map[string]formula.Node) (found bool) {
	look := func(n formula.Node) bool {
		if call, ok := n.(*formula.Call); ok && call.Func == "sup" {
			found = true
		}
		return !found
	}
	formula.Walk(n, look)
	for _, l := range lets {
		formula.Walk(l, look)
	}
	return found
}

// slice adds the second value where the density is the profile cost of the
// layered model, and leaves the claim open where the two disagree.
func (c *combination) slice(surface quadrature.Surface, tr quadrature.Traces, o quadrature.Options, r *Result) error {
	if c.o.NoSlices || c.s.density != nil || !c.s.ev.layered || tr.Plus == nil {
		return nil
	}
	n := len(c.set.Coordinates)
	line := func(_, plus, minus []float64) float64 {
		var q2 float64
		for i := range n - 1 {
			q := plus[i] - minus[i]
			q2 += q * q
		}
		return q2 * math.Sqrt(q2) / 12
	}
	v, err := quadrature.Slice(c.ctx, surface, tr, line, o)
	switch {
	case c.ctx.Err() != nil:
		return c.ctx.Err()
	case errors.Is(err, quadrature.ErrNoSlicing):
		return nil
	case err != nil && !errors.Is(err, quadrature.ErrBudget) && !errors.Is(err, quadrature.ErrAccuracy):
		r.add("horizontal slices: " + c.explain(err))
		r.Verdict = claim.Open
		return nil
	}
	r.Slices, r.SlicesError = &v.Value, &v.Error
	if d := math.Abs(v.Value - *r.Energy); !(d <= v.Error+*r.Error) {
		r.Verdict = claim.Open
		r.add(fmt.Sprintf("the energy by horizontal slices is %.17g with an estimated error of %.2g: it differs from %.17g by %.3g, more than both errors", v.Value, v.Error, *r.Energy, d))
	}
	return nil
}

// explain says in the names of the case why a surface was refused.
func (c *combination) explain(err error) string {
	var p *quadrature.PlaceError
	if !errors.As(err, &p) {
		return strings.TrimPrefix(err.Error(), "quadrature: ") + c.where()
	}
	at := c.place(p.Point, p.Params)
	if p.Piece != "" {
		at += ", " + p.Piece
	}
	at += c.where()
	switch p.Reason {
	case quadrature.OffWell:
		return fmt.Sprintf("the %s trace is off the well%s: the residual is %.6g, its terms are of size %.6g", p.What, at, p.Residual, p.Scale)
	case quadrature.Discontinuous:
		return fmt.Sprintf("u is discontinuous across the surface%s: it jumps by %.6g, its terms are of size %.6g", at, p.Residual, p.Scale)
	case quadrature.NotNormal:
		return fmt.Sprintf("the jump of the gradient is not normal to the surface%s: its tangential part is %.6g, the gradients are of size %.6g", at, p.Residual, p.Scale)
	case quadrature.NotSmooth:
		return fmt.Sprintf("the %s trace has a kink on the surface itself%s: give it as u is on that side, without abs", p.What, at)
	case quadrature.NotFinite:
		if math.IsNaN(p.Residual) {
			return fmt.Sprintf("the %s is not a real number%s", p.What, at)
		}
		return fmt.Sprintf("the %s is not finite%s", p.What, at)
	case quadrature.Degenerate:
		return fmt.Sprintf("the surface is degenerate: its area element is zero on a whole region%s", at)
	}
	return p.Reason.String() + at
}

// place is " at (x, y, z) = (...)" with the parameters of a patch.
func (c *combination) place(point, params []float64) string {
	s := fmt.Sprintf(" at (%s) = %s", strings.Join(c.set.Coordinates, ", "), tuple(point))
	if len(params) > 0 && len(params) == len(c.s.params) {
		s += fmt.Sprintf(", (%s) = %s", strings.Join(c.s.params, ", "), tuple(params))
	}
	return s
}

func tuple(x []float64) string {
	parts := make([]string, len(x))
	for i, v := range x {
		parts[i] = fmt.Sprintf("%.6g", v)
	}
	return "(" + strings.Join(parts, ", ") + ")"
}
