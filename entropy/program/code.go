package program

// opcode is an instruction of a compiled program. Operands a, b, c, d are
// slots and k is a constant. Every product is rounded before it is added.
type opcode uint8

const (
	opCopy      opcode = iota // a
	opFill                    // k
	opNeg                     // -a
	opAdd                     // a + b
	opSub                     // a - b
	opMul                     // a b
	opQuo                     // a / b
	opAddK                    // a + k
	opSubK                    // k - a
	opMulK                    // k a
	opQuoK                    // k / a
	opMulAdd                  // a b + c
	opMulSub                  // a b - c
	opSubMul                  // c - a b
	opMulKAdd                 // k a + b
	opMulAddMul               // a b + c d
	opMulSubMul               // a b - c d
	opAddAbs                  // b + |a|
	opAddAbsMul               // c + |a b|
	opPow                     // a^k, real k
	opFunc                    // fn(a)
	opRange                   // k, enclosed by the range with the number arg[0]
	opPowInt                  // a^k, integer k
	opPowRat                  // a^(arg[1]/arg[2])
)

// arity is the number of slots an instruction reads.
func (op opcode) arity() int {
	switch op {
	case opFill, opRange:
		return 0
	case opCopy, opNeg, opAddK, opSubK, opMulK, opQuoK, opPow, opFunc, opPowInt, opPowRat:
		return 1
	case opAdd, opSub, opMul, opQuo, opMulKAdd, opAddAbs:
		return 2
	case opMulAdd, opMulSub, opSubMul, opAddAbsMul:
		return 3
	}
	return 4
}

// flops is the number of operations of the graph an instruction stands for.
func (op opcode) flops() int {
	switch op {
	case opCopy, opFill, opRange:
		return 0
	case opMulAdd, opMulSub, opSubMul, opMulKAdd, opAddAbs:
		return 2
	case opMulAddMul, opMulSubMul, opAddAbsMul:
		return 3
	}
	return 1
}

// An instr computes slot dst from the slots arg[:op.arity()]. Before slots are
// assigned, dst and arg are nodes of the lowered graph.
type instr struct {
	op  opcode
	fn  Func
	dst int32
	arg [4]int32
	k   float64
}

// lower copies what the outputs need into a new builder, with integer powers
// written as products unless the Builder is exact.
func (b *Builder) lower(outs []Ref) (*Builder, []Ref, error) {
	low := NewBuilder()
	low.MaxNodes = b.MaxNodes
	low.inputs = b.inputs
	low.Exact, low.ranges, low.named = b.Exact, b.ranges, b.named
	last := refZero
	for _, r := range outs {
		last = max(last, r)
	}
	need := make([]bool, last+1)
	for _, r := range outs {
		need[r] = true
	}
	for i := last; i >= 0; i-- {
		n := b.nodes[i]
		if need[i] && n.arity() > 0 {
			need[n.a] = true
			if n.arity() == 2 {
				need[n.b] = true
			}
		}
	}
	to := make([]Ref, last+1)
	for i := Ref(0); i <= last; i++ {
		if !need[i] {
			continue
		}
		n := b.nodes[i]
		x, y := to[n.a], to[n.b]
		switch n.kind {
		case kindConst, kindInput, kindRange:
			to[i] = low.add(n)
		case kindAdd:
			to[i] = low.Add(x, y)
		case kindSub:
			to[i] = low.Sub(x, y)
		case kindMul:
			to[i] = low.Mul(x, y)
		case kindQuo:
			to[i] = low.Quo(x, y)
		case kindNeg:
			to[i] = low.Neg(x)
		case kindPowInt:
			if e := int(int64(n.imm)); b.Exact {
				to[i] = low.PowInt(x, e)
			} else {
				to[i] = low.expandPower(x, e)
			}
		case kindPow:
			to[i] = low.Pow(x, n.value())
		case kindPowRat:
			num, den := n.exponent()
			to[i] = low.PowRat(x, num, den)
		case kindFunc:
			to[i] = low.Func(n.fn, x)
		}
		if low.err != nil {
			return nil, nil, low.err
		}
	}
	res := make([]Ref, len(outs))
	for j, r := range outs {
		res[j] = to[r]
	}
	return low, res, nil
}

// expandPower writes x^n as products, in the order of powInt.
func (b *Builder) expandPower(x Ref, n int) Ref {
	m := uint(max(n, -n))
	top := 0
	for m>>uint(top+1) != 0 {
		top++
	}
	p := x
	for i := top - 1; i >= 0; i-- {
		p = b.Mul(p, p)
		if m>>uint(i)&1 != 0 {
			p = b.Mul(p, x)
		}
	}
	if n < 0 {
		p = b.Quo(refOne, p)
	}
	return p
}

// choose selects one instruction for each node that outs need, fused with
// those of its operands that nothing else uses. used tells which nodes have an
// instruction of their own.
func (b *Builder) choose(outs []Ref) (code []instr, used []bool) {
	n := len(b.nodes)
	uses := make([]int32, n)
	for _, r := range outs {
		uses[r]++
	}
	for i := n - 1; i >= 0; i-- {
		if nd := b.nodes[i]; uses[i] > 0 && nd.arity() > 0 {
			uses[nd.a]++
			if nd.arity() == 2 {
				uses[nd.b]++
			}
		}
	}
	code = make([]instr, n)
	used = make([]bool, n)
	for _, r := range outs {
		used[r] = true
	}
	for i := n - 1; i >= 0; i-- {
		if !used[i] {
			continue
		}
		ins := b.match(b.nodes[i], uses)
		ins.dst = int32(i)
		code[i] = ins
		if b.nodes[i].kind != kindInput {
			for _, a := range ins.arg[:ins.op.arity()] {
				used[a] = true
			}
		}
	}
	return code, used
}

// match selects the instruction for one node.
func (b *Builder) match(n node, uses []int32) instr {
	x, y := int32(n.a), int32(n.b)
	cx, okx := b.constOf(n.a)
	cy, oky := b.constOf(n.b)
	// single returns the operands of r if it is of kind k and used once.
	single := func(r Ref, k kind, fn Func) (p, q Ref, ok bool) {
		m := b.nodes[r]
		return m.a, m.b, m.kind == k && m.fn == fn && uses[r] == 1
	}
	switch n.kind {
	case kindConst:
		return instr{op: opFill, k: n.value()}
	case kindInput:
		return instr{op: opCopy}
	case kindNeg:
		return instr{op: opNeg, arg: [4]int32{x}}
	case kindRange:
		return instr{op: opRange, arg: [4]int32{int32(n.imm)}, k: b.ranges[n.imm].mid}
	case kindPowInt:
		return instr{op: opPowInt, arg: [4]int32{x}, k: float64(int64(n.imm))}
	case kindPowRat:
		num, den := n.exponent()
		return instr{op: opPowRat, arg: [4]int32{x, int32(num), int32(den)}, k: float64(num) / float64(den)}
	case kindPow:
		return instr{op: opPow, arg: [4]int32{x}, k: n.value()}
	case kindFunc:
		return instr{op: opFunc, fn: n.fn, arg: [4]int32{x}}
	case kindMul:
		switch {
		case okx:
			return instr{op: opMulK, arg: [4]int32{y}, k: cx}
		case oky:
			return instr{op: opMulK, arg: [4]int32{x}, k: cy}
		}
		return instr{op: opMul, arg: [4]int32{x, y}}
	case kindQuo:
		if okx {
			return instr{op: opQuoK, arg: [4]int32{y}, k: cx}
		}
		return instr{op: opQuo, arg: [4]int32{x, y}}
	}

	// A sum or difference.
	add := n.kind == kindAdd
	switch {
	case add && okx:
		return instr{op: opAddK, arg: [4]int32{y}, k: cx}
	case add && oky:
		return instr{op: opAddK, arg: [4]int32{x}, k: cy}
	case okx:
		return instr{op: opSubK, arg: [4]int32{y}, k: cx}
	}
	xp, xq, mulx := single(n.a, kindMul, 0)
	yp, yq, muly := single(n.b, kindMul, 0)
	if mulx {
		if k, r, ok := b.scaled(xp, xq); ok && add {
			return instr{op: opMulKAdd, arg: [4]int32{r, y}, k: k}
		} else if ok {
			mulx = false
		}
	}
	if muly {
		if k, r, ok := b.scaled(yp, yq); ok {
			if !add {
				k = -k
			}
			return instr{op: opMulKAdd, arg: [4]int32{r, x}, k: k}
		}
	}
	switch {
	case mulx && muly && add:
		return instr{op: opMulAddMul, arg: [4]int32{int32(xp), int32(xq), int32(yp), int32(yq)}}
	case mulx && muly:
		return instr{op: opMulSubMul, arg: [4]int32{int32(xp), int32(xq), int32(yp), int32(yq)}}
	case mulx && add:
		return instr{op: opMulAdd, arg: [4]int32{int32(xp), int32(xq), y}}
	case mulx:
		return instr{op: opMulSub, arg: [4]int32{int32(xp), int32(xq), y}}
	case muly && add:
		return instr{op: opMulAdd, arg: [4]int32{int32(yp), int32(yq), x}}
	case muly:
		return instr{op: opSubMul, arg: [4]int32{int32(yp), int32(yq), x}}
	}
	if add {
		if p, _, ok := single(n.b, kindFunc, Abs); ok {
			return b.addAbs(p, n.a, uses)
		}
		if p, _, ok := single(n.a, kindFunc, Abs); ok {
			return b.addAbs(p, n.b, uses)
		}
		return instr{op: opAdd, arg: [4]int32{x, y}}
	}
	return instr{op: opSub, arg: [4]int32{x, y}}
}

// addAbs selects the instruction for acc + |x|.
func (b *Builder) addAbs(x, acc Ref, uses []int32) instr {
	m := b.nodes[x]
	if m.kind == kindMul && uses[x] == 1 {
		if _, _, ok := b.scaled(m.a, m.b); !ok {
			return instr{op: opAddAbsMul, arg: [4]int32{int32(m.a), int32(m.b), int32(acc)}}
		}
	}
	return instr{op: opAddAbs, arg: [4]int32{int32(x), int32(acc)}}
}

// scaled returns k and r if the product of p and q is k r with a constant k.
func (b *Builder) scaled(p, q Ref) (k float64, r int32, ok bool) {
	if k, ok := b.constOf(p); ok {
		return k, int32(q), true
	}
	k, ok = b.constOf(q)
	return k, int32(p), ok
}
