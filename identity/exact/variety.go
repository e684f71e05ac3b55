package exact

import (
	"maps"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// OnVariety moves a point onto the common zeros of polynomials, exactly: one
// indeterminate of each is solved for, linearly, or by a rational root of a
// quadratic. Values already used by an earlier polynomial stay. It reports
// false where no rational solution shows.
func (p *Points) OnVariety(at jet.Point, gens []algebra.Poly) bool {
	gens = p.byOrder(gens)
	used := map[algebra.Var]bool{}
	for _, g := range gens {
		if p.quadric(at, g, used) {
			continue
		}
		if !p.solveOne(at, g, used) {
			return false
		}
	}
	for _, g := range gens {
		if x, ok := p.d.Ring.Exact(algebra.FromPoly(g), at); !ok || !x.IsZero() {
			return false
		}
	}
	return true
}

// byOrder sorts polynomials by the order of the derivatives in them, those in
// the gradient by the number of its components: what one of few determines is
// put into those of more.
func (p *Points) byOrder(gens []algebra.Poly) []algebra.Poly {
	const many = 1000 // more derivatives than there are in a polynomial here
	order := func(g algebra.Poly) int {
		n, count := 0, 0
		for _, v := range g.Vars() {
			if s := p.d.Ring.Symbol(v); s.Kind == jet.Derivative {
				n, count = max(n, s.Index.Order()), min(count+1, many-1)
			}
		}
		if n > 1 {
			count = 0
		}
		return n*many + count
	}
	gens = slices.Clone(gens)
	slices.SortStableFunc(gens, func(a, b algebra.Poly) int { return order(a) - order(b) })
	return gens
}

// solveOne changes one unused indeterminate so that g vanishes.
func (p *Points) solveOne(at jet.Point, g algebra.Poly, used map[algebra.Var]bool) bool {
	var jets []algebra.Var
	for _, v := range g.Vars() {
		if p.d.Ring.Symbol(v).Kind == jet.Derivative && !used[v] {
			jets = append(jets, v)
		}
	}
	defer func() {
		for _, v := range g.Vars() {
			used[v] = true
		}
	}()
	if x, ok := p.d.Ring.Exact(algebra.FromPoly(g), at); ok && x.IsZero() {
		return true
	}
	p.rng.Shuffle(len(jets), func(i, k int) { jets[i], jets[k] = jets[k], jets[i] })
	for _, v := range jets {
		values := map[algebra.Var]algebra.Rat{}
		for _, w := range g.Vars() {
			if x, ok := at[w]; ok && w != v {
				values[w] = x
			}
		}
		h := g.EvalPartial(values)
		if vs := h.Vars(); len(vs) != 1 || vs[0] != v {
			continue
		}
		if x, ok := rationalRoot(h, v, p.rng.IntN(2) == 0); ok {
			at[v] = x
			return true
		}
	}
	return p.atLattice(at, g, jets)
}

// atLattice moves the given jets of a point to a zero of g with small entries.
func (p *Points) atLattice(at jet.Point, g algebra.Poly, jets []algebra.Var) bool {
	if len(jets) == 0 || len(jets) > 3 {
		return false
	}
	values := map[algebra.Var]algebra.Rat{}
	for _, v := range g.Vars() {
		if slices.Contains(jets, v) {
			continue
		}
		x, ok := at[v]
		if !ok {
			return false
		}
		values[v] = x
	}
	jets = slices.Sorted(slices.Values(jets))
	whole := len(values) == 0
	var zeros []map[algebra.Var]algebra.Rat
	k := slices.IndexFunc(p.lattice, func(l latticeZeros) bool { return whole && l.of.Equal(g) })
	if k >= 0 {
		zeros = p.lattice[k].zeros
	} else {
		if p.latticeWork += latticeSize(len(jets)) * g.Len(); p.latticeWork > maxLatticeWork {
			return false
		}
		zeros = allLatticeZeros(g.EvalPartial(values), jets)
		if whole {
			p.lattice = append(p.lattice, latticeZeros{g, zeros})
		}
	}
	if len(zeros) == 0 {
		return false
	}
	maps.Copy(at, zeros[p.rng.IntN(len(zeros))])
	return true
}

// maxLatticeWork bounds the terms that are evaluated in search of zeros with
// small entries.
const maxLatticeWork = 200_000

var lattice = []algebra.Rat{{}, algebra.Int(1), algebra.Int(-1), algebra.Int(2), algebra.Int(-2), algebra.Int(3), algebra.Int(-3), algebra.Frac64(1, 2), algebra.Frac64(-1, 2)}

// latticeSize is the number of points with n entries.
func latticeSize(n int) int {
	out := 1
	for range n {
		out *= len(lattice)
	}
	return out
}

// latticeZeros are the zeros of a polynomial with small entries.
type latticeZeros struct {
	of    algebra.Poly
	zeros []map[algebra.Var]algebra.Rat
}

// allLatticeZeros lists the zeros of h with entries among a few small numbers.
func allLatticeZeros(h algebra.Poly, jets []algebra.Var) []map[algebra.Var]algebra.Rat {
	var out []map[algebra.Var]algebra.Rat
	for k := range latticeSize(len(jets)) {
		at := map[algebra.Var]algebra.Rat{}
		for _, v := range jets {
			at[v] = lattice[k%len(lattice)]
			k /= len(lattice)
		}
		if x, ok := h.Eval(func(v algebra.Var) algebra.Rat { return at[v] }); ok && x.IsZero() {
			out = append(out, at)
		}
	}
	return out
}

// rationalRoot is a rational zero of a polynomial of degree 1 or 2 in v alone.
func rationalRoot(h algebra.Poly, v algebra.Var, other bool) (algebra.Rat, bool) {
	var c []algebra.Rat
	for _, q := range h.Coeffs(v) {
		x, ok := q.IsConst()
		if !ok {
			return x, false
		}
		c = append(c, x)
	}
	switch len(c) {
	case 2:
		x, ok := c[0].Neg().Quo(c[1])
		return x, ok
	case 3:
		disc := c[1].Mul(c[1]).Sub(algebra.Int(4).Mul(c[0]).Mul(c[2]))
		s, ok := jet.SqrtRat(disc)
		if !ok {
			return s, false
		}
		if other {
			s = s.Neg()
		}
		return s.Sub(c[1]).Quo(algebra.Int(2).Mul(c[2]))
	}
	return algebra.Rat{}, false
}

// quadric moves a point onto a quadric g = 0 along the line through a rational
// point of it: the second intersection of that line is rational too.
func (p *Points) quadric(at jet.Point, g algebra.Poly, used map[algebra.Var]bool) bool {
	var jets []algebra.Var
	values := map[algebra.Var]algebra.Rat{}
	for _, v := range g.Vars() {
		if p.d.Ring.Symbol(v).Kind == jet.Derivative && !used[v] {
			jets = append(jets, v)
		} else if x, ok := at[v]; ok {
			values[v] = x
		}
	}
	h := g.EvalPartial(values)
	if h.TotalDegree() != 2 || len(jets) < 2 || slices.ContainsFunc(h.Vars(), func(v algebra.Var) bool { return !slices.Contains(jets, v) }) {
		return false
	}
	base, ok := p.latticeZero(h, jets)
	if !ok {
		return false
	}
	// h(base + t (at - base)) = t (b + a t).
	var a, b algebra.Rat
	dir := map[algebra.Var]algebra.Rat{}
	for _, v := range jets {
		x, ok := at[v]
		if !ok {
			return false
		}
		dir[v] = x.Sub(base[v])
	}
	for _, v := range jets {
		dv := h.Deriv(v)
		x, ok := dv.Eval(func(w algebra.Var) algebra.Rat { return base[w] })
		if !ok {
			return false
		}
		b = b.Add(x.Mul(dir[v]))
		for _, w := range jets {
			c, ok := dv.Deriv(w).IsConst()
			if !ok {
				return false
			}
			a = a.Add(c.Mul(dir[v]).Mul(dir[w]).Mul(algebra.Frac64(1, 2)))
		}
	}
	if b.IsZero() {
		return false // a singular point, or a line that touches
	}
	t, ok := b.Neg().Quo(a)
	if !ok {
		return false
	}
	for _, v := range jets {
		at[v] = base[v].Add(t.Mul(dir[v]))
		used[v] = true
	}
	return true
}

// latticeZero looks for a zero of h with entries 0, ±1, ±2 and halves.
func (p *Points) latticeZero(h algebra.Poly, jets []algebra.Var) (map[algebra.Var]algebra.Rat, bool) {
	grid := []algebra.Rat{{}, algebra.Int(1), algebra.Int(-1), algebra.Int(2), algebra.Frac64(1, 2)}
	n := 1
	for range jets {
		if n *= len(grid); n > 4000 {
			n = 4000
			break
		}
	}
	for k := range n {
		at := map[algebra.Var]algebra.Rat{}
		for _, v := range jets {
			at[v] = grid[k%len(grid)]
			k /= len(grid)
		}
		if x, ok := h.Eval(func(v algebra.Var) algebra.Rat { return at[v] }); ok && x.IsZero() {
			return at, true
		}
	}
	return nil, false
}

// onWells moves both traces onto the well, and the means and differences with
// them.
func (p *Points) onWells(at jet.Point) bool {
	if !p.OnVariety(at, p.d.Wells) {
		return false
	}
	for v := range at.Clone() {
		s := p.d.Ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Side != jet.Difference {
			continue
		}
		trace := func(side jet.Side) algebra.Rat {
			w, err := p.d.Ring.JetVar(s.Place, s.Index, side)
			if err != nil {
				return algebra.Rat{}
			}
			return at[w]
		}
		plus, minus := trace(jet.PlusSide), trace(jet.MinusSide)
		at[v] = plus.Sub(minus)
		if m, err := p.d.Ring.JetVar(s.Place, s.Index, jet.Mean); err == nil {
			at[m] = plus.Add(minus).Mul(algebra.Frac64(1, 2))
		}
	}
	return true
}
