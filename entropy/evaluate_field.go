package entropy

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"
	"sync"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
)

// ErrShape says that a slice has the wrong length.
var ErrShape = errors.New("slice of the wrong length")

// FieldProgram is a field compiled to float64, as a function of the gradient
// and the frame angle. It is safe for concurrent use. Values are those of the
// components as they are written, along the frame at the angle, then turned to
// the coordinates; nothing is proved.
type FieldProgram struct {
	dim, grad int // coordinates; length of a gradient
	prog      *program.Program
	pool      sync.Pool
}

// CompileField compiles a field of the setting whose components depend on
// first derivatives only. Every constant in it needs a value. A field that
// depends on the unknown itself, on higher derivatives or on the coordinates
// is refused: see CompileFieldOf.
func (s *Setting) CompileField(field string, constants map[string]float64) (*FieldProgram, error) {
	var inputs []Input
	for u := range s.Unknowns {
		for i := range s.Coordinates {
			inputs = append(inputs, Input{Kind: JetInput, Place: u, Index: jet.Index{}.Plus(i)})
		}
	}
	p, err := s.compileField(field, constants, inputs, nil)
	if err != nil {
		return nil, fmt.Errorf("the field %s as a function of the gradient: %w", field, err)
	}
	return p, nil
}

func (s *Setting) compileField(field string, constants map[string]float64, inputs []Input, given map[int]formula.Node) (*FieldProgram, error) {
	p := &FieldProgram{dim: len(s.Coordinates), grad: len(inputs)}
	if s.Frame != nil {
		inputs = append(inputs,
			Input{Kind: ConstantInput, Name: s.Frame.Angle},
			Input{Kind: CosineInput, Name: s.Frame.Angle},
			Input{Kind: SineInput, Name: s.Frame.Angle})
	}
	in, n := s.NewNumeric(constants, inputs...)
	in.Given = given
	n.Closed = true
	v, err := in.Field(formula.NewField(field, nil))
	if err != nil {
		return nil, err
	}
	if p.prog, err = n.Compile(v...); err != nil {
		return nil, err
	}
	p.pool.New = func() any {
		return &fieldSpace{ws: p.prog.NewWorkspace(), in: make([]float64, max(p.grad+3, p.prog.NumInputs()))}
	}
	return p, nil
}

// fieldSpace is what one goroutine needs.
type fieldSpace struct {
	ws  *program.Workspace
	in  []float64
	ins [][]float64
	out [][]float64
}

// Dim is the number of components, one for each coordinate.
func (p *FieldProgram) Dim() int { return p.dim }

// GradientLen is the length of a gradient: the number of coordinates times
// that of unknowns.
func (p *FieldProgram) GradientLen() int { return p.grad }

// At sets dst to the field at a gradient and a frame angle in radians. dst has
// one element for each coordinate; grad the derivatives of the first unknown
// by each coordinate, then those of the next. It panics if a slice is too
// short, and does not allocate once it has been called.
func (p *FieldProgram) At(dst, grad []float64, theta float64) {
	sin, cos := math.Sincos(theta)
	p.at(dst, grad, theta, cos, sin)
}

// AtTurn is At with the frame given by a point (cos, sin) of the circle. An
// angle that stands in the field outside of cosines and sines is their atan2.
func (p *FieldProgram) AtTurn(dst, grad []float64, cos, sin float64) {
	p.at(dst, grad, math.Atan2(sin, cos), cos, sin)
}

func (p *FieldProgram) at(dst, grad []float64, theta, cos, sin float64) {
	w := p.pool.Get().(*fieldSpace)
	copy(w.in, grad[:p.grad])
	w.in[p.grad], w.in[p.grad+1], w.in[p.grad+2] = theta, cos, sin
	p.prog.Eval(w.ws, w.in, dst[:p.dim])
	p.pool.Put(w)
}

// fieldBlock is the number of points of a batch that one goroutine takes at a
// time.
const fieldBlock = 4 * program.BlockSize

// Batch sets dst[i] to the field at grads[i], with all cores. The values do
// not depend on their number, and are those of At. Each dst[i] has one element
// for each coordinate, each grads[i] GradientLen elements; otherwise the error
// wraps ErrShape and nothing is computed. When the context ends its error is
// returned and dst is set in part.
func (p *FieldProgram) Batch(ctx context.Context, dst, grads [][]float64, theta float64) error {
	if len(dst) != len(grads) {
		return fmt.Errorf("%w: %d gradients, %d results", ErrShape, len(grads), len(dst))
	}
	for i, g := range grads {
		if len(g) != p.grad || len(dst[i]) != p.dim {
			return fmt.Errorf("%w: item %d has a gradient of %d and a result of %d elements instead of %d and %d", ErrShape, i, len(g), len(dst[i]), p.grad, p.dim)
		}
	}
	blocks := make(chan int)
	var wg sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), 1+len(grads)/fieldBlock) {
		wg.Go(func() {
			w := p.pool.Get().(*fieldSpace)
			defer p.pool.Put(w)
			for lo := range blocks {
				hi := min(lo+fieldBlock, len(grads))
				p.block(w, dst[lo:hi], grads[lo:hi], theta)
			}
		})
	}
	err := ctx.Err()
	for lo := 0; lo < len(grads) && err == nil; lo += fieldBlock {
		select {
		case blocks <- lo:
		case <-ctx.Done():
			err = ctx.Err()
		}
	}
	close(blocks)
	wg.Wait()
	return err
}

func (p *FieldProgram) block(w *fieldSpace, dst, grads [][]float64, theta float64) {
	if w.ins == nil {
		all := make([]float64, (len(w.in)+p.dim)*fieldBlock)
		for k := range len(w.in) + p.dim {
			row := all[k*fieldBlock : (k+1)*fieldBlock]
			if k < len(w.in) {
				w.ins = append(w.ins, row)
			} else {
				w.out = append(w.out, row)
			}
		}
	}
	sin, cos := math.Sincos(theta)
	for j, g := range grads {
		for k, v := range g {
			w.ins[k][j] = v
		}
		w.ins[p.grad][j], w.ins[p.grad+1][j], w.ins[p.grad+2][j] = theta, cos, sin
	}
	p.prog.EvalBlock(w.ws, w.ins, w.out, len(grads))
	for j, d := range dst {
		for k := range d {
			d[k] = w.out[k][j]
		}
	}
}

// Along is the field of a gradient that is given as a Go function: it returns
// a function that sets dst to the field at the point x. gradient fills grad
// (GradientLen elements); it may be called from several goroutines if the
// result is.
func (p *FieldProgram) Along(gradient func(x, grad []float64), theta float64) func(x, dst []float64) {
	sin, cos := math.Sincos(theta)
	pool := sync.Pool{New: func() any { g := make([]float64, p.grad); return &g }}
	return func(x, dst []float64) {
		g := pool.Get().(*[]float64)
		gradient(x, *g)
		p.at(dst, *g, theta, cos, sin)
		pool.Put(g)
	}
}

// SpaceField is the field of unknowns in closed form, compiled to float64 as a
// function of the coordinates and the frame angle. It is safe for concurrent
// use.
type SpaceField struct{ p *FieldProgram }

// CompileFieldOf compiles a field for unknowns in closed form: formulas in the
// coordinates and constants, by name of the unknown. Derivatives of any order
// are taken exactly, from the formulas. Every constant needs a value.
func (s *Setting) CompileFieldOf(field string, unknowns map[string]formula.Node, constants map[string]float64) (*SpaceField, error) {
	given := map[int]formula.Node{}
	for i, name := range s.Unknowns {
		if u, ok := unknowns[name]; ok {
			given[i] = u
		}
	}
	if len(given) != len(unknowns) {
		return nil, fmt.Errorf("the field %s: a closed form is given for a name that is no unknown", field)
	}
	var inputs []Input
	for i := range s.Coordinates {
		inputs = append(inputs, Input{Kind: CoordinateInput, Place: i})
	}
	p, err := s.compileField(field, constants, inputs, given)
	if err != nil {
		return nil, fmt.Errorf("the field %s of given unknowns: %w", field, err)
	}
	return &SpaceField{p}, nil
}

// At sets dst to the field at the point x and a frame angle in radians; both
// slices have one element for each coordinate.
func (f *SpaceField) At(dst, x []float64, theta float64) { f.p.At(dst, x, theta) }

// Batch sets dst[i] to the field at the point xs[i]; see FieldProgram.Batch.
func (f *SpaceField) Batch(ctx context.Context, dst, xs [][]float64, theta float64) error {
	return f.p.Batch(ctx, dst, xs, theta)
}
