package program

// reach marks the nodes that x depends on, x included.
func (b *Builder) reach(x Ref) []bool {
	need := make([]bool, x+1)
	need[x] = true
	for i := x; i >= 0; i-- {
		if need[i] {
			n := b.nodes[i]
			switch n.arity() {
			case 2:
				need[n.b] = true
				fallthrough
			case 1:
				need[n.a] = true
			}
		}
	}
	return need
}

// Diff applies to x the derivation D with D(input i) = d(i) and D(constant) = 0.
// d is called once for each input that x depends on, and may add nodes. Each
// node is differentiated once, so the result has at most a fixed multiple of
// the nodes of x. With d(i) = 1 for i = k and 0 otherwise it is the partial
// derivative by input k; with d(i) an input it is a total derivative.
func (b *Builder) Diff(x Ref, d func(input int) Ref) Ref {
	if !b.valid(x) {
		return refZero
	}
	need := b.reach(x)
	dv := make([]Ref, x+1)
	for i := Ref(0); i <= x; i++ {
		if !need[i] {
			continue
		}
		n := b.nodes[i]
		da, db := dv[n.a], dv[n.b]
		switch n.kind {
		case kindInput:
			dv[i] = d(int(n.imm))
		case kindAdd:
			dv[i] = b.Add(da, db)
		case kindSub:
			dv[i] = b.Sub(da, db)
		case kindMul:
			dv[i] = b.Add(b.Mul(da, n.b), b.Mul(n.a, db))
		case kindQuo:
			if t := b.Sub(da, b.Mul(i, db)); t != refZero {
				dv[i] = b.Quo(t, n.b)
			}
		case kindNeg:
			dv[i] = b.Neg(da)
		case kindPowInt, kindPow, kindPowRat, kindFunc:
			if da != refZero {
				dv[i] = b.Mul(b.slope(i), da)
			}
		}
		if b.err != nil {
			return refZero
		}
	}
	return dv[x]
}

// Gradient returns the partial derivatives of x by the given inputs, in their
// order, by reverse accumulation: all of them together cost a fixed multiple of
// x itself, whatever their number.
func (b *Builder) Gradient(x Ref, inputs []int) []Ref {
	grad := make([]Ref, len(inputs))
	if !b.valid(x) {
		return grad
	}
	wanted := make(map[int]Ref, len(inputs))
	for _, k := range inputs {
		wanted[k] = refZero
	}

	// active marks the nodes between x and the wanted inputs.
	active := b.reach(x)
	for i := range active {
		if !active[i] {
			continue
		}
		n := b.nodes[i]
		switch n.arity() {
		case 0:
			_, ok := wanted[int(n.imm)]
			active[i] = n.kind == kindInput && ok
		case 1:
			active[i] = active[n.a]
		case 2:
			active[i] = active[n.a] || active[n.b]
		}
	}

	adjoint := make([]Ref, x+1)
	adjoint[x] = refOne
	for i := x; i >= 0 && b.err == nil; i-- {
		g := adjoint[i]
		if !active[i] || g == refZero {
			continue
		}
		n := b.nodes[i]
		give := func(to, g Ref) {
			if active[to] {
				adjoint[to] = b.Add(adjoint[to], g)
			}
		}
		switch n.kind {
		case kindInput:
			wanted[int(n.imm)] = g
		case kindAdd:
			give(n.a, g)
			give(n.b, g)
		case kindSub:
			give(n.a, g)
			give(n.b, b.Neg(g))
		case kindMul:
			give(n.a, b.Mul(g, n.b))
			give(n.b, b.Mul(g, n.a))
		case kindQuo:
			t := b.Quo(g, n.b)
			give(n.a, t)
			if active[n.b] {
				give(n.b, b.Neg(b.Mul(t, i)))
			}
		case kindNeg:
			give(n.a, b.Neg(g))
		case kindPowInt, kindPow, kindPowRat, kindFunc:
			give(n.a, b.Mul(b.slope(i), g))
		}
	}
	for j, k := range inputs {
		grad[j] = wanted[k]
	}
	if b.err != nil {
		clear(grad)
	}
	return grad
}
