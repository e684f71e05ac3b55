package program

import (
	"fmt"
	"slices"
)

// Program is a compiled list of formulas. It is immutable.
//
// Slots are numbered inputs first, then outputs, then temporaries.
type Program struct {
	code    []instr
	ranges  []enclosed
	exact   bool
	inputs  int
	outputs int
	temps   int
	flops   int
}

// NumInputs returns the number of inputs of the program.
func (p *Program) NumInputs() int { return p.inputs }

// NumOutputs returns the number of outputs of the program.
func (p *Program) NumOutputs() int { return p.outputs }

// NumOps returns the number of arithmetic operations and function values
// computed for each point.
func (p *Program) NumOps() int { return p.flops }

// Compile returns a program that computes outs, in their order. It returns the
// error of the Builder if there is one. The Builder may be used further.
func (b *Builder) Compile(outs ...Ref) (*Program, error) {
	if !b.valid(outs...) {
		return nil, fmt.Errorf("compile: %w", b.err)
	}
	low, outs, err := b.lower(outs)
	if err != nil {
		return nil, fmt.Errorf("compile: expanding powers: %w", err)
	}
	code, used := low.choose(outs)
	p := &Program{inputs: b.inputs, outputs: len(outs), exact: b.Exact, ranges: slices.Clip(b.ranges)}
	p.assign(low, code, schedule(low, code, used, outs), outs)
	for i := range p.code {
		p.flops += p.code[i].op.flops()
	}
	return p, nil
}

// schedule returns the nodes to compute in an order in which operands come
// first. Of the operands of an instruction, the one that needs the most slots
// is computed first, as Sethi and Ullman do for trees.
func schedule(low *Builder, code []instr, used []bool, outs []Ref) []int32 {
	need := make([]int32, len(code))
	count := 0
	for i := range code {
		if !used[i] || low.nodes[i].kind == kindInput {
			continue
		}
		count++
		ins := &code[i]
		var sub [4]int32
		args := sub[:0]
		for _, a := range ins.arg[:ins.op.arity()] {
			args = append(args, need[a])
		}
		slices.Sort(args)
		need[i] = 1
		for j, v := range args {
			// the largest is computed first, with nothing held
			need[i] = max(need[i], v+int32(len(args)-1-j))
		}
	}

	order := make([]int32, 0, count)
	done := make([]bool, len(code))
	type frame struct {
		node int32
		args [4]int32
		next int
		n    int
	}
	open := func(i int32) frame {
		f := frame{node: i, args: code[i].arg, n: code[i].op.arity()}
		slices.SortStableFunc(f.args[:f.n], func(x, y int32) int { return int(need[y] - need[x]) })
		return f
	}
	var stack []frame
	for _, r := range outs {
		if done[r] || low.nodes[r].kind == kindInput {
			continue
		}
		stack = append(stack, open(int32(r)))
		for len(stack) > 0 {
			f := &stack[len(stack)-1]
			if f.next < f.n {
				a := f.args[f.next]
				f.next++
				if !done[a] && low.nodes[a].kind != kindInput {
					stack = append(stack, open(a))
				}
				continue
			}
			if !done[f.node] {
				done[f.node] = true
				order = append(order, f.node)
			}
			stack = stack[:len(stack)-1]
		}
	}
	return order
}

// assign gives every scheduled node a slot by a linear scan and appends the
// instructions to p. A slot is free again after the last instruction that reads
// it, which may already write it: kernels work lane by lane.
func (p *Program) assign(low *Builder, code []instr, order []int32, outs []Ref) {
	slot := make([]int32, len(code))
	last := make([]int32, len(code))
	for i := range slot {
		slot[i] = -1
		last[i] = -1
	}
	for i, n := range low.nodes {
		if n.kind == kindInput {
			slot[i] = int32(n.imm)
		}
	}
	for j, r := range outs {
		if slot[r] < 0 {
			slot[r] = int32(p.inputs + j)
		}
	}
	for t, i := range order {
		for _, a := range code[i].arg[:code[i].op.arity()] {
			last[a] = int32(t)
		}
	}
	first := int32(p.inputs + p.outputs)
	var free []int32
	p.code = make([]instr, 0, len(order))
	for t, i := range order {
		ins := code[i]
		args := ins.arg[:ins.op.arity()]
		for j, a := range args {
			if s := slot[a]; last[a] == int32(t) && s >= first {
				free = append(free, s)
				last[a] = -1 // once, if it is read twice
			}
			ins.arg[j] = slot[a]
		}
		if slot[i] < 0 {
			if n := len(free); n > 0 {
				slot[i] = free[n-1]
				free = free[:n-1]
			} else {
				slot[i] = first + int32(p.temps)
				p.temps++
			}
		}
		ins.dst = slot[i]
		p.code = append(p.code, ins)
	}
	for j, r := range outs {
		if s := int32(p.inputs + j); slot[r] != s {
			p.code = append(p.code, instr{op: opCopy, dst: s, arg: [4]int32{slot[r]}})
		}
	}
}

// Select returns the program that computes only the given outputs of p, in the
// given order, with the same results bit for bit. It has the inputs of p. It
// returns an error if an index is out of range or given twice.
func (p *Program) Select(outputs ...int) (*Program, error) {
	total := p.inputs + p.outputs + p.temps
	to := make([]int32, total)
	for i := range to {
		to[i] = -1
	}
	for i := range p.inputs {
		to[i] = int32(i)
	}
	q := &Program{inputs: p.inputs, outputs: len(outputs), exact: p.exact, ranges: p.ranges}
	live := make([]bool, total)
	for j, k := range outputs {
		if k < 0 || k >= p.outputs {
			return nil, fmt.Errorf("program: no output %d among %d", k, p.outputs)
		}
		if live[p.inputs+k] {
			return nil, fmt.Errorf("program: output %d selected twice", k)
		}
		live[p.inputs+k] = true
		to[p.inputs+k] = int32(p.inputs + j)
	}
	keep := make([]bool, len(p.code))
	for t := len(p.code) - 1; t >= 0; t-- {
		ins := &p.code[t]
		if !live[ins.dst] {
			continue
		}
		keep[t] = true
		live[ins.dst] = false
		for _, a := range ins.arg[:ins.op.arity()] {
			live[a] = true
		}
	}
	rename := func(s int32) int32 {
		if to[s] < 0 {
			to[s] = int32(q.inputs + q.outputs + q.temps)
			q.temps++
		}
		return to[s]
	}
	for t, ins := range p.code {
		if !keep[t] {
			continue
		}
		for j := range ins.arg[:ins.op.arity()] {
			ins.arg[j] = rename(ins.arg[j])
		}
		ins.dst = rename(ins.dst)
		q.code = append(q.code, ins)
		q.flops += ins.op.flops()
	}
	return q, nil
}
