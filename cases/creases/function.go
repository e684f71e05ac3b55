package creases

import (
	"math"

	"creaseproof/cases/creases/ranges"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/program"
	"creaseproof/entropy/source"
	"creaseproof/quadrature/branches"
	"creaseproof/quadrature/levelset"
)

// levelFunction is a formula in the coordinates as a levelset.Function.
type levelFunction struct {
	p      *program.Program
	ws     *program.Workspace
	out    []float64 // value, gradient, at last
	last   [3]float64
	ranges *ranges.Evaluator
	of     []ranges.Ref // forms of the same function
	other  []levelset.Interval
}

// levelFunction is a - b, or a where b is nil.
func (c *combination) levelFunction(a formulaText, b *formulaText) (*levelFunction, error) {
	node := a.node
	if b != nil {
		node = formula.NewSum(formula.Term{X: a.node}, formula.Term{Neg: true, X: b.node})
	}
	node = c.fold(node)
	n := len(c.set.Coordinates)
	in, num := c.numeric().NewNumeric(nil, coordinates(n)...)
	num.Closed = true
	x, err := in.Scalar(node)
	if err == nil {
		err = num.Err()
	}
	if err != nil {
		return nil, placed(a.text, err)
	}
	outs := []program.Ref{x}
	for i := range n {
		d, err := num.Total(x, i)
		if err != nil {
			return nil, placed(a.text, err)
		}
		outs = append(outs, d)
	}
	f := &levelFunction{out: make([]float64, n+1), last: [3]float64{math.NaN(), math.NaN(), math.NaN()}}
	if f.p, err = num.Compile(outs...); err != nil {
		return nil, placed(a.text, err)
	}
	f.ws = f.p.NewWorkspace()
	wide, tape := ranges.New(c.numeric())
	r, err := wide.Scalar(node)
	if err != nil {
		return nil, placed(a.text, err)
	}
	f.of = []ranges.Ref{r}
	if normal := c.normalForm(node); normal != nil {
		if r, err = wide.Scalar(c.fold(normal)); err == nil {
			f.of = append(f.of, r)
		}
	}
	f.other = make([]levelset.Interval, n)
	f.ranges = tape.Evaluator()
	return f, nil
}

// Value is the value at x.
func (f *levelFunction) Value(x []float64) float64 {
	f.eval(x)
	return f.out[0]
}

// eval computes value and gradient: they are asked for at the same places.
func (f *levelFunction) eval(x []float64) {
	same := true
	for i, v := range x {
		same = same && f.last[i] == v
		f.last[i] = v
	}
	if !same {
		f.p.Eval(f.ws, x, f.out)
	}
}

// Gradient is the gradient at x.
func (f *levelFunction) Gradient(g, x []float64) {
	f.eval(x)
	copy(g, f.out[1:])
}

// Range encloses the values on a box.
func (f *levelFunction) Range(box []levelset.Interval) levelset.Interval {
	f.ranges.At(box)
	v := f.ranges.Value(f.of[0])
	for _, r := range f.of[1:] {
		v = both(v, f.ranges.Value(r))
	}
	return v
}

// GradientRange encloses the partial derivatives on a box; they are the whole
// line where no form is certainly continuous.
func (f *levelFunction) GradientRange(g, box []levelset.Interval) {
	f.ranges.At(box)
	f.ranges.Gradient(f.of[0], g)
	for _, r := range f.of[1:] {
		f.ranges.Gradient(r, f.other[:len(g)])
		for k := range g {
			g[k] = both(g[k], f.other[k])
		}
	}
}

// both is the intersection of two enclosures of the same thing. Where a form
// is defined nowhere on a box the other counts.
func both(a, b levelset.Interval) levelset.Interval {
	switch {
	case a.IsEmpty():
		return b
	case b.IsEmpty():
		return a
	}
	if c := a.Intersection(b); !c.IsEmpty() {
		return c
	}
	return a
}

// normalForm is the normal form of a formula as a formula, nil where it has
// none: what cancels in a difference of branches widens no enclosure then.
func (c *combination) normalForm(n formula.Node) formula.Node {
	x, err := c.in.Scalar(n)
	if err != nil || c.exact.Ring.Err(x) != nil {
		return nil
	}
	text := c.exact.Ring.Format(x)
	if len(text) > 10000 {
		return nil
	}
	node, err := c.s.scope.ParseExpr(source.Text{S: text, Line: 1, Col: 1})
	if err != nil {
		return nil
	}
	y, err := c.in.Scalar(node)
	if err != nil || c.exact.Ring.Err(y) != nil || !x.Sub(y).IsZero() {
		return nil
	}
	return node
}

// inBall is the condition r² - |x - c|² >= 0 in some of the coordinates.
type inBall struct {
	round  []int
	center []float64
	radius float64
}

// Value is the value at x.
func (b *inBall) Value(x []float64) float64 {
	v := b.radius * b.radius
	for i, k := range b.round {
		v -= (x[k] - b.center[i]) * (x[k] - b.center[i])
	}
	return v
}

// Gradient is the gradient at x.
func (b *inBall) Gradient(g, x []float64) {
	clear(g)
	for i, k := range b.round {
		g[k] = -2 * (x[k] - b.center[i])
	}
}

// Range encloses the values on a box.
func (b *inBall) Range(box []levelset.Interval) levelset.Interval {
	v := interval.Point(b.radius).Sqr()
	for i, k := range b.round {
		v = v.Sub(box[k].Sub(interval.Point(b.center[i])).Sqr())
	}
	return v
}

// GradientRange encloses the partial derivatives on a box.
func (b *inBall) GradientRange(g, box []levelset.Interval) {
	for k := range g {
		g[k] = interval.Point(0)
	}
	for i, k := range b.round {
		g[k] = interval.Point(-2).Mul(box[k].Sub(interval.Point(b.center[i])))
	}
}

// trims are the conditions of a round domain.
func (d *domain) trims() []levelset.Function {
	if d.round == nil {
		return nil
	}
	return []levelset.Function{&inBall{d.round, d.center, d.radius}}
}

// ranged encloses the branches on boxes.
func (c *combination) ranged() (func(box [][2]float64, out []branches.Range), error) {
	in, tape := ranges.New(c.numeric())
	var refs []ranges.Ref
	for _, f := range c.s.shape.branches {
		r, err := in.Scalar(c.fold(f.node))
		if err != nil {
			return nil, placed(f.text, err)
		}
		refs = append(refs, r)
	}
	e := tape.Evaluator()
	sides := make([]interval.Interval, len(c.set.Coordinates))
	return func(box [][2]float64, out []branches.Range) {
		for i, b := range box {
			sides[i] = interval.Point(b[0]).ConvexHull(interval.Point(b[1]))
		}
		e.At(sides)
		for k, r := range refs {
			v := e.Value(r)
			if v.IsEmpty() { // defined nowhere on the box, as far as is known
				out[k] = branches.Range{Lo: math.Inf(-1), Hi: math.Inf(1)}
				continue
			}
			out[k] = branches.Range{Lo: v.Inf(), Hi: v.Sup()}
		}
	}, nil
}
