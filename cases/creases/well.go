package creases

import (
	"math"

	"creaseproof/entropy"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
)

// well is the residual as a function of the gradient at a place.
type well struct {
	here []float64 // position and mean value of u, set by the traces
	next int       // whose residual is asked for next: 0 plus, 1 minus

	sides   [2]*side
	p       *program.Program
	ws      *program.Workspace
	known   int
	in, out []float64
}

// noise is the rounding error of a gradient, relative to the size of its
// terms, over the relative tolerance of the check.
const noise = 32 * 0x1p-53 / 1e-9

func (w *well) compile(c *combination, plus, minus *side) error {
	n := len(c.set.Coordinates)
	inputs := coordinates(n)
	if c.s.isU {
		inputs = append(inputs, entropy.Input{Kind: entropy.JetInput})
	}
	w.known = len(inputs)
	var grad []int
	for i := range n {
		grad = append(grad, len(inputs))
		inputs = append(inputs, entropy.Input{Kind: entropy.JetInput, Index: jet.Index{}.Plus(i)})
	}
	_, num := c.numeric().NewNumeric(nil, inputs...)
	num.Closed = true
	x, err := num.Sized().Scalar(c.fold(c.set.Model.Residual))
	if err != nil {
		return placed(c.s.place, err)
	}
	outs := append([]program.Ref{x.Value, x.Size}, num.Builder.Gradient(x.Value, grad)...)
	if w.p, err = num.Compile(outs...); err != nil {
		return placed(c.s.place, err)
	}
	w.sides = [2]*side{plus, minus}
	w.ws, w.in, w.out = w.p.NewWorkspace(), make([]float64, len(inputs)), make([]float64, len(outs))
	return nil
}

// residual is the residual at a gradient and the size of its terms, enlarged
// by what the rounding of the gradient does to it.
func (w *well) residual(grad []float64) (value, size float64) {
	copy(w.in, w.here[:w.known])
	copy(w.in[w.known:], grad)
	w.p.Eval(w.ws, w.in, w.out)
	value, size = w.out[0], w.out[1]
	s := w.sides[w.next]
	w.next = 1 - w.next
	for i, d := range w.out[2:] {
		terms := math.Abs(grad[i])
		if !s.value {
			terms = s.out[len(grad)+i]
		}
		size += noise * math.Abs(d) * terms
	}
	return value, size
}
