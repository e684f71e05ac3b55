package program

import "math"

// BlockSize is the number of points that [Program.EvalBlock] carries through
// the program at a time.
const BlockSize = 256

// Workspace holds the intermediate values of one evaluation. It belongs to the
// program that made it and serves one goroutine at a time.
type Workspace struct {
	scalar []float64   // all slots of a single point
	temp   []float64   // temporaries of a block, BlockSize lanes each
	slot   [][]float64 // all slots of a block
}

// NewWorkspace returns a workspace for p. The part used by EvalBlock is
// allocated by the first call of it.
func (p *Program) NewWorkspace() *Workspace {
	return &Workspace{scalar: make([]float64, p.inputs+p.outputs+p.temps)}
}

// Eval computes the outputs at one point: in holds at least NumInputs values,
// and the first NumOutputs elements of out are set. It panics if a slice is
// too short, and does not allocate.
func (p *Program) Eval(ws *Workspace, in, out []float64) {
	s := ws.scalar
	copy(s, in[:p.inputs])
	for i := range p.code {
		ins := &p.code[i]
		s[ins.dst] = ins.eval(s)
	}
	copy(out[:p.outputs], s[p.inputs:])
}

// eval computes one instruction. The conversions keep the compiler from fusing
// a product and a sum into one rounding, as it may on some architectures.
func (ins *instr) eval(s []float64) float64 {
	a := func(i int) float64 { return s[ins.arg[i]] }
	switch ins.op {
	case opCopy:
		return a(0)
	case opFill, opRange:
		return ins.k
	case opNeg:
		return -a(0)
	case opAdd:
		return a(0) + a(1)
	case opSub:
		return a(0) - a(1)
	case opMul:
		return a(0) * a(1)
	case opQuo:
		return a(0) / a(1)
	case opAddK:
		return a(0) + ins.k
	case opSubK:
		return ins.k - a(0)
	case opMulK:
		return ins.k * a(0)
	case opQuoK:
		return ins.k / a(0)
	case opMulAdd:
		return float64(a(0)*a(1)) + a(2)
	case opMulSub:
		return float64(a(0)*a(1)) - a(2)
	case opSubMul:
		return a(2) - float64(a(0)*a(1))
	case opMulKAdd:
		return float64(ins.k*a(0)) + a(1)
	case opMulAddMul:
		return float64(a(0)*a(1)) + float64(a(2)*a(3))
	case opMulSubMul:
		return float64(a(0)*a(1)) - float64(a(2)*a(3))
	case opAddAbs:
		return a(1) + math.Abs(a(0))
	case opAddAbsMul:
		return a(2) + math.Abs(float64(a(0)*a(1)))
	case opPow, opPowRat:
		return math.Pow(a(0), ins.k)
	case opPowInt:
		return powInt(a(0), int(ins.k))
	case opFunc:
		return ins.fn.eval(a(0))
	}
	return math.NaN()
}

// EvalBlock computes the outputs at n points: in[i][j] is input i of point j,
// and out[k][j] is set to output k of point j, for j < n. There may be more
// slices than inputs and outputs, and n may be any number. No slice of out may
// overlap another of out or of in. It panics if slices are missing or shorter
// than n, and allocates only on the first call with ws.
func (p *Program) EvalBlock(ws *Workspace, in, out [][]float64, n int) {
	in, out = in[:p.inputs], out[:p.outputs]
	if ws.slot == nil {
		ws.slot = make([][]float64, p.inputs+p.outputs+p.temps)
		ws.temp = make([]float64, p.temps*BlockSize)
	}
	temps := ws.slot[p.inputs+p.outputs:]
	for lo := 0; lo < n; lo += BlockSize {
		m := min(BlockSize, n-lo)
		for i, x := range in {
			ws.slot[i] = x[lo : lo+m : lo+m]
		}
		for k, x := range out {
			ws.slot[p.inputs+k] = x[lo : lo+m : lo+m]
		}
		for t := range temps {
			temps[t] = ws.temp[t*BlockSize : t*BlockSize+m : t*BlockSize+m]
		}
		p.run(ws.slot)
	}
	clear(ws.slot[:p.inputs+p.outputs]) // hold on to no slice of the caller
}

// run executes the program on slots of equal length.
func (p *Program) run(v [][]float64) {
	for i := range p.code {
		ins := &p.code[i]
		d := v[ins.dst]
		switch ins.op {
		case opCopy:
			copy(d, v[ins.arg[0]])
		case opFill, opRange:
			fill(d, ins.k)
		case opNeg:
			neg(d, v[ins.arg[0]])
		case opAdd:
			add(d, v[ins.arg[0]], v[ins.arg[1]])
		case opSub:
			sub(d, v[ins.arg[0]], v[ins.arg[1]])
		case opMul:
			mul(d, v[ins.arg[0]], v[ins.arg[1]])
		case opQuo:
			quo(d, v[ins.arg[0]], v[ins.arg[1]])
		case opAddK:
			addK(d, v[ins.arg[0]], ins.k)
		case opSubK:
			subK(d, v[ins.arg[0]], ins.k)
		case opMulK:
			mulK(d, v[ins.arg[0]], ins.k)
		case opQuoK:
			quoK(d, v[ins.arg[0]], ins.k)
		case opMulAdd:
			mulAdd(d, v[ins.arg[0]], v[ins.arg[1]], v[ins.arg[2]])
		case opMulSub:
			mulSub(d, v[ins.arg[0]], v[ins.arg[1]], v[ins.arg[2]])
		case opSubMul:
			subMul(d, v[ins.arg[0]], v[ins.arg[1]], v[ins.arg[2]])
		case opMulKAdd:
			mulKAdd(d, v[ins.arg[0]], v[ins.arg[1]], ins.k)
		case opMulAddMul:
			mulAddMul(d, v[ins.arg[0]], v[ins.arg[1]], v[ins.arg[2]], v[ins.arg[3]])
		case opMulSubMul:
			mulSubMul(d, v[ins.arg[0]], v[ins.arg[1]], v[ins.arg[2]], v[ins.arg[3]])
		case opAddAbs:
			addAbs(d, v[ins.arg[0]], v[ins.arg[1]])
		case opAddAbsMul:
			addAbsMul(d, v[ins.arg[0]], v[ins.arg[1]], v[ins.arg[2]])
		case opPowInt:
			for j, x := range v[ins.arg[0]] {
				d[j] = powInt(x, int(ins.k))
			}
		case opPow, opPowRat:
			for j, x := range v[ins.arg[0]] {
				d[j] = math.Pow(x, ins.k)
			}
		case opFunc:
			function(d, v[ins.arg[0]], ins.fn)
		}
	}
}
