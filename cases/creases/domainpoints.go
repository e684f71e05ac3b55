package creases

import (
	"math"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
	"creaseproof/quadrature/branches"
	"creaseproof/quadrature/levelset"
)

// looks is the number of points of a domain at which branches are looked at.
const looks = 128

// points are spread evenly over the domain: multiples of powers of generalised
// golden sections (Roberts 2018), rounded to short binary fractions of the box.
func (d *domain) points() (out [][]float64) {
	steps := [][]float64{{0.6180339887498949}, {0.7548776662466927, 0.5698402909980532}, {0.8191725133961645, 0.6710436067037893, 0.5497004779019703}}
	step := steps[len(d.box)-1]
	for i := range 4 * looks {
		x := make([]float64, len(d.box))
		for k, b := range d.box {
			_, f := math.Modf(0.5 + float64(i+1)*step[k])
			x[k] = b[0] + math.Round(f*4096)/4096*(b[1]-b[0])
		}
		inside := d.round == nil || (&inBall{d.round, d.center, d.radius}).Value(x) > 0
		if inside {
			out = append(out, x)
		}
		if len(out) == looks {
			break
		}
	}
	return out
}

// branchValues are the branches as one program.
type branchValues struct {
	p    *program.Program
	ws   *program.Workspace
	out  []float64
	tree *branches.Tree
}

func (c *combination) branchValues() (*branchValues, error) {
	in, num := c.numeric().NewNumeric(nil, coordinates(len(c.set.Coordinates))...)
	num.Closed = true
	var outs []program.Ref
	for _, f := range c.s.shape.branches {
		x, err := in.Scalar(c.fold(f.node))
		if err == nil {
			err = num.Err()
		}
		if err != nil {
			return nil, placed(f.text, err)
		}
		outs = append(outs, x)
	}
	p, err := num.Compile(outs...)
	if err != nil {
		return nil, placed(c.s.shape.branches[0].text, err)
	}
	return &branchValues{p: p, ws: p.NewWorkspace(), out: make([]float64, len(outs)), tree: c.s.shape.tree}, nil
}

// at are the values at x, which last until the next call.
func (b *branchValues) at(x []float64) []float64 {
	b.p.Eval(b.ws, x, b.out)
	return b.out
}

// active lists points of the domain, those first at which u is branch k.
func (c *combination) active(d domain, k int) ([][]float64, error) {
	b, err := c.branchValues()
	if err != nil {
		return nil, err
	}
	points := d.points()
	here := func(x []float64) int {
		if _, i := b.tree.Eval(b.at(x)); i == k {
			return 0
		}
		return 1
	}
	slices.SortStableFunc(points, func(a, b []float64) int { return here(a) - here(b) })
	return points, nil
}

// rationalPoint gives the coordinates the values of x.
func (c *combination) rationalPoint(x []float64) jet.Point {
	at := jet.Point{}
	for i, v := range x {
		if q, ok := algebra.FromFloat(v); ok {
			at[c.exact.Ring.CoordinateVar(i)] = q
		}
	}
	return at
}

// intervals is the box of a domain.
func (d *domain) intervals() []levelset.Interval {
	list := make([]levelset.Interval, len(d.box))
	for i, b := range d.box {
		x, err := interval.New(b[0], b[1])
		if err != nil {
			x = interval.Entire()
		}
		list[i] = x
	}
	return list
}
