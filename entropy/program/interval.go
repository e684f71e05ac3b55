package program

import (
	"errors"

	"creaseproof/entropy/interval"
)

// ErrNotExact means that a program was compiled from a Builder that is not
// Exact, so that it need not enclose the formulas it was built from.
var ErrNotExact = errors.New("program: the builder was not exact")

// IntervalWorkspace holds the intermediate values of one evaluation over
// intervals. It belongs to the program that made it and serves one goroutine at
// a time.
type IntervalWorkspace struct {
	slot []interval.Interval
	dec  []interval.Decoration
}

// NewIntervalWorkspace returns a workspace for p, or [ErrNotExact].
func (p *Program) NewIntervalWorkspace() (*IntervalWorkspace, error) {
	if !p.exact {
		return nil, ErrNotExact
	}
	n := p.inputs + p.outputs + p.temps
	return &IntervalWorkspace{slot: make([]interval.Interval, n), dec: make([]interval.Decoration, n)}, nil
}

// EvalInterval computes enclosures of the outputs over a box: in holds at least
// NumInputs intervals, and the first NumOutputs elements of out are set. Each
// contains the value of its formula at every point of the box at which the
// formula is defined; constants are enclosed as the Builder was told. It is rigorous:
// every operation is rounded outward. Where the box is not inside the domain,
// only the points inside count, and the result may be empty; [Program.EvalDecorated]
// tells. Subexpressions that the Builder removed by an identity, such as the f of
// f-f or 0 f, are not looked at. It panics if a slice is too short, and does not
// allocate (but for arguments of sine, cosine and tangent beyond 2^20).
func (p *Program) EvalInterval(ws *IntervalWorkspace, in, out []interval.Interval) {
	s := ws.slot
	copy(s, in[:p.inputs])
	for i := range p.code {
		ins := &p.code[i]
		s[ins.dst] = p.enclose(ins, s)
	}
	copy(out[:p.outputs], s[p.inputs:])
}

// EvalDecorated is EvalInterval together with what is known of each formula on
// the box: dec has at least NumOutputs elements. With [interval.Dac] or more, the
// formula is defined and continuous on all of the box.
func (p *Program) EvalDecorated(ws *IntervalWorkspace, in, out []interval.Interval, dec []interval.Decoration) {
	s, d := ws.slot, ws.dec
	copy(s, in[:p.inputs])
	for i := range p.inputs {
		d[i] = interval.Initial(in[i])
	}
	for i := range p.code {
		ins := &p.code[i]
		r, w := p.enclose(ins, s), interval.Com
		for _, a := range ins.arg[:ins.op.arity()] {
			w = min(w, d[a])
		}
		defined, continuous := ins.regular(s)
		s[ins.dst], d[ins.dst] = r, w.After(defined, continuous, r)
	}
	copy(out[:p.outputs], s[p.inputs:])
	copy(dec[:p.outputs], d[p.inputs:])
}

// enclose computes one instruction over intervals.
func (p *Program) enclose(ins *instr, s []interval.Interval) interval.Interval {
	a := func(i int) interval.Interval { return s[ins.arg[i]] }
	// A product of a value with itself is a square.
	product := func(i, j int) interval.Interval {
		if ins.arg[i] == ins.arg[j] {
			return a(i).Sqr()
		}
		return a(i).Mul(a(j))
	}
	switch ins.op {
	case opCopy:
		return a(0)
	case opFill:
		return pt(ins.k)
	case opRange:
		return p.ranges[ins.arg[0]].x
	case opNeg:
		return a(0).Neg()
	case opAdd:
		return a(0).Add(a(1))
	case opSub:
		return a(0).Sub(a(1))
	case opMul:
		return product(0, 1)
	case opQuo:
		return a(0).Div(a(1))
	case opAddK:
		return a(0).Add(pt(ins.k))
	case opSubK:
		return pt(ins.k).Sub(a(0))
	case opMulK:
		return pt(ins.k).Mul(a(0))
	case opQuoK:
		return pt(ins.k).Div(a(0))
	case opMulAdd:
		return product(0, 1).Add(a(2))
	case opMulSub:
		return product(0, 1).Sub(a(2))
	case opSubMul:
		return a(2).Sub(product(0, 1))
	case opMulKAdd:
		return pt(ins.k).Mul(a(0)).Add(a(1))
	case opMulAddMul:
		return product(0, 1).Add(product(2, 3))
	case opMulSubMul:
		return product(0, 1).Sub(product(2, 3))
	case opAddAbs:
		return a(1).Add(a(0).Abs())
	case opAddAbsMul:
		return a(2).Add(product(0, 1).Abs())
	case opPow:
		return a(0).Pow(pt(ins.k))
	case opPowInt:
		return a(0).Pown(int(ins.k))
	case opPowRat:
		return a(0).PowRat(int(ins.arg[1]), int(ins.arg[2]))
	case opFunc:
		return ins.fn.enclose(a(0))
	}
	return interval.Entire()
}

// regular reports whether an instruction is defined, and whether its
// restriction to its operands is continuous, on all of them.
func (ins *instr) regular(s []interval.Interval) (defined, continuous bool) {
	if ins.op.arity() == 0 {
		return true, true
	}
	x := s[ins.arg[0]]
	switch ins.op {
	case opQuo:
		y := s[ins.arg[1]]
		ok := !y.Contains(0)
		return ok, ok
	case opQuoK:
		ok := !x.Contains(0)
		return ok, ok
	case opPowInt:
		ok := ins.k >= 0 || !x.Contains(0)
		return ok, ok
	case opPow, opPowRat:
		ok := x.Inf() > 0 || x.Inf() == 0 && ins.k > 0
		return ok, ok
	case opFunc:
		switch ins.fn {
		case Log:
			return x.Inf() > 0, x.Inf() > 0
		case Sqrt:
			return x.Inf() >= 0, x.Inf() >= 0
		case Tan:
			// The tangent of an interval without a pole is bounded.
			ok := x.Tan().IsBounded()
			return ok, ok
		case Sign:
			return true, !x.Contains(0) || x.IsSingleton()
		}
	}
	return true, true
}

// enclose returns an enclosure of f on x.
func (f Func) enclose(x interval.Interval) interval.Interval {
	switch f {
	case Sin:
		return x.Sin()
	case Cos:
		return x.Cos()
	case Tan:
		return x.Tan()
	case Sinh:
		return x.Sinh()
	case Cosh:
		return x.Cosh()
	case Tanh:
		return x.Tanh()
	case Exp:
		return x.Exp()
	case Log:
		return x.Log()
	case Sqrt:
		return x.Sqrt()
	case Cbrt:
		return x.Cbrt()
	case Erf:
		return x.Erf()
	case Abs:
		return x.Abs()
	case Sign:
		return x.Sign()
	}
	return interval.Entire()
}
