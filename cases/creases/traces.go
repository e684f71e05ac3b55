package creases

import (
	"creaseproof/entropy"
	"creaseproof/entropy/program"
	"creaseproof/quadrature"
)

// side is one trace of u, or of its gradient, as a program of the coordinates
// and, for gradients, of the parameters of the patch.
type side struct {
	p     *program.Program
	ws    *program.Workspace
	in    []float64
	out   []float64 // u, gradient, size of the terms of u; or gradient, sizes of its terms
	value bool
}

func (c *combination) side(list []formulaText, value bool) (*side, error) {
	n := len(c.set.Coordinates)
	inputs := coordinates(n)
	if !value {
		inputs = append(inputs, constants(c.s.params)...)
	}
	_, num := c.numeric().NewNumeric(nil, inputs...)
	num.Closed = true
	in := num.Sized()
	var outs, sizes []program.Ref
	for _, f := range list {
		x, err := in.Scalar(c.fold(f.node))
		if err == nil {
			err = num.Err()
		}
		if err != nil {
			return nil, placed(f.text, err)
		}
		outs = append(outs, x.Value)
		if value {
			for i := range n {
				d, err := num.Total(x.Value, i)
				if err != nil {
					return nil, placed(f.text, err)
				}
				outs = append(outs, d)
			}
		}
		sizes = append(sizes, x.Size)
	}
	outs = append(outs, sizes...)
	p, err := num.Compile(outs...)
	if err != nil {
		return nil, placed(list[0].text, err)
	}
	return &side{p: p, ws: p.NewWorkspace(), in: make([]float64, len(inputs)), out: make([]float64, len(outs)), value: value}, nil
}

func coordinates(n int) []entropy.Input {
	var out []entropy.Input
	for i := range n {
		out = append(out, entropy.Input{Kind: entropy.CoordinateInput, Place: i})
	}
	return out
}

func (s *side) at(x, params, grad []float64) float64 {
	n := copy(s.in, x)
	copy(s.in[n:], params)
	s.p.Eval(s.ws, s.in, s.out)
	if !s.value {
		copy(grad, s.out)
		return 0
	}
	copy(grad, s.out[1:1+n])
	return s.out[0]
}

// traces compiles the traces and the check that they are on the well.
func (c *combination) traces() (quadrature.Traces, quadrature.Options, error) {
	var tr quadrature.Traces
	var o quadrature.Options
	if c.s.plus == nil {
		return tr, o, nil
	}
	plus, err := c.side(c.s.plus, c.s.isU)
	if err != nil {
		return tr, o, err
	}
	minus, err := c.side(c.s.minus, c.s.isU)
	if err != nil {
		return tr, o, err
	}
	dim := len(c.set.Coordinates)
	w := &well{here: make([]float64, dim+1)}
	// Integrate asks for a position, then for the traces there, plus first,
	// then for their residuals in the same order.
	tr.Plus = func(x, grad []float64) float64 {
		copy(w.here, x)
		u := plus.at(x, c.params, grad)
		w.here[dim], w.next = u, 0
		return u
	}
	tr.Minus = func(x, grad []float64) float64 {
		u := minus.at(x, c.params, grad)
		w.here[dim] = (w.here[dim] + u) / 2
		return u
	}
	tr.HasValue = c.s.isU
	if c.s.isU {
		tr.Scale = func([]float64) float64 { return plus.out[dim+1] + minus.out[dim+1] }
	}
	if c.set.Model.Residual != nil {
		if err := w.compile(c, plus, minus); err != nil {
			return tr, o, err
		}
		o.Well = w.residual
	}
	return tr, o, nil
}
