package ranges

import (
	"math"

	"creaseproof/entropy/interval"
)

// dims is the number of coordinates that a tape can have.
const dims = 3

// Evaluator encloses values of a tape. It is not safe for concurrent use.
type Evaluator struct {
	ops   []op
	deps  []uint8
	value []interval.Interval
	slope [][dims]interval.Interval
	sure  []bool // defined and continuous on the whole box
}

// Evaluator encloses what is recorded up to now.
func (t *Tape) Evaluator() *Evaluator {
	n := len(t.ops)
	return &Evaluator{t.ops[:n:n], t.deps, make([]interval.Interval, n), make([][dims]interval.Interval, n), make([]bool, n)}
}

// At encloses all values of the tape on a box.
func (e *Evaluator) At(box []interval.Interval) {
	for i := range e.ops {
		e.value[i] = e.compute(&e.ops[i], box)
		e.sure[i] = e.continuous(&e.ops[i])
	}
}

// Value is the enclosure of a value on the last box.
func (e *Evaluator) Value(r Ref) interval.Interval { return e.value[r] }

// Continuous reports whether a value is certainly defined and continuous at
// every point of the last box.
func (e *Evaluator) Continuous(r Ref) bool { return e.sure[r] }

// Gradient encloses the partial derivatives of a value on the last box, where
// it is Lipschitz continuous also those in the sense of Clarke. Each is the
// whole line unless the value is certainly defined and continuous on the box:
// across a pole or a gap the sign of a derivative says nothing.
func (e *Evaluator) Gradient(r Ref, g []interval.Interval) {
	if !e.sure[r] {
		for k := range g {
			g[k] = interval.Entire()
		}
		return
	}
	for i := Ref(0); i <= r; i++ {
		for k := range g {
			if e.deps[i]>>k&1 == 0 {
				e.slope[i][k] = zero
				continue
			}
			e.slope[i][k] = e.derive(i, k)
		}
	}
	for k := range g {
		if g[k] = e.slope[r][k]; g[k].IsEmpty() {
			g[k] = interval.Entire()
		}
	}
}

// continuous reports whether an operation whose operands have their values is
// defined and continuous on the whole box.
func (e *Evaluator) continuous(o *op) bool {
	switch o.kind {
	case number, coordinate:
		return true
	case sum, product:
		return e.sure[o.a] && e.sure[o.b]
	case quotient:
		return e.sure[o.a] && e.sure[o.b] && apart(e.value[o.b])
	case square:
		return e.sure[o.a] && (o.b < 0 || e.sure[o.b])
	}
	x := e.value[o.a]
	if !e.sure[o.a] {
		return false
	}
	switch o.kind {
	case power:
		return o.n >= 0 || apart(x)
	case rational:
		return x.Inf() > 0 || x.Inf() == 0 && (o.n > 0) == (o.m > 0)
	case function:
		switch o.name {
		case "sqrt":
			return x.Inf() >= 0
		case "log":
			return x.Inf() > 0
		case "tan":
			y := x.Tan()
			return !y.IsEmpty() && y.Inf() > math.Inf(-1) && y.Sup() < math.Inf(1)
		}
	}
	return true
}

// apart reports whether x contains no zero.
func apart(x interval.Interval) bool { return x.Inf() > 0 || x.Sup() < 0 }

var (
	zero = interval.Point(0)
	one  = interval.Point(1)
	two  = interval.Point(2)
	// unit is [-1, 1].
	unit = interval.Point(-1).ConvexHull(one)
)

func (e *Evaluator) compute(o *op, box []interval.Interval) interval.Interval {
	v := e.value
	switch o.kind {
	case number:
		return o.c
	case coordinate:
		return box[o.n]
	case sum:
		return v[o.a].Add(v[o.b])
	case product:
		return v[o.a].Mul(v[o.b])
	case quotient:
		return v[o.a].Div(v[o.b])
	case negative:
		return v[o.a].Neg()
	case power:
		if o.n == 2 {
			return v[o.a].Sqr()
		}
		return v[o.a].Pown(o.n)
	case rational:
		if o.n == 1 && o.m == 2 {
			return v[o.a].Sqrt()
		}
		return v[o.a].PowRat(o.n, o.m)
	case square:
		s := v[o.a].Sqr()
		if o.b >= 0 {
			s = s.Add(v[o.b])
		}
		return s
	case norm:
		return v[o.a].Sqrt()
	}
	return apply(o.name, v[o.a])
}

func apply(name string, x interval.Interval) interval.Interval {
	switch name {
	case "sin":
		return x.Sin()
	case "cos":
		return x.Cos()
	case "tan":
		return x.Tan()
	case "sinh":
		return x.Sinh()
	case "cosh":
		return x.Cosh()
	case "tanh":
		return x.Tanh()
	case "exp":
		return x.Exp()
	case "log":
		return x.Log()
	case "sqrt":
		return x.Sqrt()
	case "erf":
		return x.Erf()
	case "abs":
		return x.Abs()
	}
	return interval.Entire()
}

// derive encloses the k-th partial derivative of value i, those of the
// operands being known.
func (e *Evaluator) derive(i Ref, k int) interval.Interval {
	o := &e.ops[i]
	v := e.value
	switch o.kind {
	case coordinate:
		return one
	case sum:
		return e.slope[o.a][k].Add(e.slope[o.b][k])
	case product:
		switch {
		case e.deps[o.a]>>k&1 == 0:
			return v[o.a].Mul(e.slope[o.b][k])
		case e.deps[o.b]>>k&1 == 0:
			return e.slope[o.a][k].Mul(v[o.b])
		}
		return e.slope[o.a][k].Mul(v[o.b]).Add(v[o.a].Mul(e.slope[o.b][k]))
	case quotient:
		if e.deps[o.b]>>k&1 == 0 {
			return e.slope[o.a][k].Div(v[o.b])
		}
		return e.slope[o.a][k].Sub(v[i].Mul(e.slope[o.b][k])).Div(v[o.b])
	case square: // half the derivative
		s := v[o.a].Mul(e.slope[o.a][k])
		if o.b >= 0 {
			s = s.Add(e.slope[o.b][k])
		}
		return s
	case norm:
		return e.ofNorm(i, k)
	}
	return e.factor(i).Mul(e.slope[o.a][k])
}

// ofNorm is the derivative of the root of x² + y² + …: the sum of x' x/norm,
// where x/norm lies in [-1, 1] whatever the enclosure of the quotient is.
func (e *Evaluator) ofNorm(i Ref, k int) interval.Interval {
	total := zero
	for s := e.ops[i].a; s >= 0; s = e.ops[s].b {
		x := e.ops[s].a
		if e.deps[x]>>k&1 == 0 {
			continue
		}
		q := e.value[x].Div(e.value[i]).Intersection(unit)
		if q.IsEmpty() {
			q = unit
		}
		total = total.Add(q.Mul(e.slope[x][k]))
	}
	return total
}

// factor is the derivative of an operation of one operand by it.
func (e *Evaluator) factor(i Ref) interval.Interval {
	o := &e.ops[i]
	x, y := e.value[o.a], e.value[i]
	switch o.kind {
	case negative:
		return interval.Point(-1)
	case power:
		n := interval.Point(float64(o.n))
		switch o.n {
		case 0:
			return zero
		case 1:
			return one
		case 2:
			return two.Mul(x)
		}
		return n.Mul(x.Pown(o.n - 1))
	case rational:
		if o.n == 1 && o.m == 2 {
			return one.Div(two.Mul(y))
		}
		return interval.Point(float64(o.n)).Div(interval.Point(float64(o.m))).Mul(x.PowRat(o.n-o.m, o.m))
	}
	switch o.name {
	case "sin":
		return x.Cos()
	case "cos":
		return x.Sin().Neg()
	case "tan":
		return one.Add(y.Sqr())
	case "sinh":
		return x.Cosh()
	case "cosh":
		return x.Sinh()
	case "tanh":
		return x.Cosh().Pown(-2)
	case "exp":
		return y
	case "log":
		return one.Div(x)
	case "sqrt":
		return one.Div(two.Mul(y))
	case "erf":
		return two.Div(pi.Sqrt()).Mul(x.Sqr().Neg().Exp())
	case "abs":
		switch {
		case x.Inf() > 0:
			return one
		case x.Sup() < 0:
			return interval.Point(-1)
		}
		return unit
	}
	return interval.Entire()
}

// pi contains π.
var pi = interval.Point(3.141592653589793).ConvexHull(interval.Point(3.1415926535897936))
