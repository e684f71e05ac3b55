package entropy

import (
	"context"
	"fmt"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
)

// Suprema lists the harmonics k of the suprema over the frame angle in a
// formula, in the order in which an Interpreter meets them: what stands under
// each is a + b cos kθ + c sin kθ (k = 0 where it does not depend on θ), which
// is shown in exact arithmetic. jump says that the formula is one at a jump.
// It is an error that wraps jet.ErrOutside if some argument has several
// harmonics, and an error if the formula depends on the angle outside of the
// suprema. The list is for Numeric.
func (s *Setting) Suprema(ctx context.Context, n formula.Node, jump bool) ([]int, error) {
	_, ex, err := s.NewExact(ctx)
	if err != nil {
		return nil, err
	}
	arith := &supremum{Exact: ex}
	in := &Interpreter[algebra.Fraction]{Setting: s, Arith: arith, Jump: jump}
	x, err := in.Scalar(n)
	if err != nil {
		return nil, err
	}
	if s.Frame != nil {
		theta := ex.Ring.ConstantVar(s.Frame.Angle)
		for _, v := range ex.Ring.Support(x) {
			if v == theta {
				return nil, fault(n, "", "the angle %s has no value here", s.Frame.Angle)
			}
		}
	}
	return arith.found, nil
}

// supremum is the exact arithmetic, noting the suprema.
type supremum struct {
	*Exact
	found []int
}

// Sup notes the harmonic.
func (a *supremum) Sup(angle string, x algebra.Fraction) (algebra.Fraction, error) {
	h, err := a.Ring.Harmonics(x, angle)
	if err != nil {
		return x, err
	}
	k := 0
	if len(h.Waves) > 0 && !h.Unit.IsOne() {
		return x, fmt.Errorf("%w: the supremum over %s of a formula in a fraction of it, in floating point", jet.ErrOutside, angle)
	}
	if len(h.Waves) > 0 {
		k = h.Waves[0].K
	}
	a.found = append(a.found, k)
	return a.Exact.Sup(angle, x)
}

// Sup is the supremum of a + b cos kθ + c sin kθ over θ, a + √(b² + c²), with
// the k that Suprema gives. b and c are taken from the derivatives by θ, at
// the angle that the inputs say, which does not matter.
func (n *Numeric) Sup(angle string, x program.Ref) (program.Ref, error) {
	fr := n.set.Frame
	if n.Suprema == nil || fr == nil || angle != fr.Angle {
		return 0, fmt.Errorf("%w: the supremum over %s in a compiled formula", jet.ErrOutside, angle)
	}
	if n.met == len(n.Suprema) {
		return 0, fmt.Errorf("a supremum that was not announced")
	}
	k := n.Suprema[n.met]
	n.met++
	if k == 0 {
		return n.done(x)
	}
	b := n.Builder
	along := func(f program.Ref) program.Ref {
		return b.Diff(f, func(i int) program.Ref {
			switch in := n.inputs[i]; in.Kind {
			case CosineInput:
				return b.Neg(n.want(Input{Kind: SineInput, Name: angle}))
			case SineInput:
				return n.want(Input{Kind: CosineInput, Name: angle})
			}
			return b.Const(0)
		})
	}
	first := along(x)
	wave := b.Neg(b.Quo(along(first), b.Const(float64(k*k)))) // b cos kθ + c sin kθ
	size, err := n.Norm([]program.Ref{wave, b.Quo(first, b.Const(float64(k)))})
	if err != nil {
		return 0, err
	}
	return n.done(b.Add(b.Sub(x, wave), size))
}
