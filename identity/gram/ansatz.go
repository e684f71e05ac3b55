package gram

import (
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"
)

func bigDenom(x algebra.Rat) *big.Rat { return new(big.Rat).SetInt(x.Big().Denom()) }

// block is one Gram matrix: factor · b' Q b with Q = N Y N'.
type block struct {
	factors    []int
	factor     algebra.Poly
	basis      []algebra.Monomial
	face       [][]algebra.Rat // N, one row per monomial
	multiplier bool            // belongs to the multiplier: enters with - Target
}

func (b *block) order() int {
	if len(b.face) == 0 {
		return 0
	}
	return len(b.face[0])
}

// ansatz is a form of certificate: the blocks, and the fixed polynomial that
// they have to add up to.
type ansatz struct {
	p      *Problem
	vars   []algebra.Var
	target algebra.Poly // fixed multiplier times Target; zero with a free one
	fixed  []Square     // of a fixed multiplier
	blocks []*block
	free   bool // the multiplier is unknown; its trace is 1
}

// allVars lists the variables of the target, and those beside it.
func (p *Problem) allVars() []algebra.Var {
	out := slices.Clone(p.Beside)
	add := func(q algebra.Poly) {
		for _, v := range q.Vars() {
			if !slices.Contains(out, v) {
				out = append(out, v)
			}
		}
	}
	add(p.Target)
	slices.Sort(out)
	return out
}

// holds reports a variable of the target, or one beside it.
func (p *Problem) holds(v algebra.Var) bool { return p.Target.Has(v) || slices.Contains(p.Beside, v) }

// sign reports whether constraint i is a variable itself (v > 0 or v >= 0)
// that the target holds.
func (p *Problem) sign(i int) (algebra.Var, bool) {
	g := p.Positive[i].Poly
	vs := g.Vars()
	if len(vs) != 1 || g.Len() != 1 || g.Degree(vs[0]) != 1 || !p.holds(vs[0]) {
		return 0, false
	}
	_, c := g.Leading()
	return vs[0], c.IsOne()
}

// factorSets lists the products of constraints that are tried: all subsets of
// the signs (up to five of them, pairs beyond that), times nothing, one or two
// of the other constraints.
func (p *Problem) factorSets(others bool) [][]int {
	var signs, rest []int
	for i := range p.Positive {
		if _, ok := p.sign(i); ok {
			signs = append(signs, i)
		} else if others && p.relevant(i) {
			rest = append(rest, i)
		}
	}
	var subsets [][]int
	if len(signs) <= 5 {
		for k := range 1 << len(signs) {
			var s []int
			for i, x := range signs {
				if k>>i&1 == 1 {
					s = append(s, x)
				}
			}
			subsets = append(subsets, s)
		}
	} else {
		subsets = append(subsets, nil)
		for i, x := range signs {
			subsets = append(subsets, []int{x})
			for _, y := range signs[i+1:] {
				subsets = append(subsets, []int{x, y})
			}
		}
	}
	extra := [][]int{nil}
	for i, x := range rest {
		extra = append(extra, []int{x})
		for _, y := range rest[i+1:] {
			extra = append(extra, []int{x, y})
		}
	}
	var out [][]int
	for _, e := range extra {
		for _, s := range subsets {
			out = append(out, slices.Concat(s, e))
		}
	}
	return out
}

// relevant reports whether a constraint shares a variable with the target.
func (p *Problem) relevant(i int) bool {
	return slices.ContainsFunc(p.Positive[i].Poly.Vars(), p.holds)
}

func (p *Problem) product(factors []int) algebra.Poly {
	out := algebra.Const(algebra.Int(1))
	for _, i := range factors {
		out = out.Mul(p.Positive[i].Poly)
	}
	return out
}

// build makes the ansatz for a given multiplier (nil: 1), with products of the
// other constraints or not, and with degrees raised by extra. ok is false
// where it is larger than the effort allows.
func (p *Problem) build(e Effort, multiplier []Square, others bool, extra int) (*ansatz, bool) {
	a := &ansatz{p: p, vars: p.allVars(), target: p.Target, fixed: multiplier}
	if len(multiplier) > 0 {
		a.target = p.reduce(p.expand(multiplier).Mul(p.Target))
	}
	if a.target.Err() != nil || a.target.IsZero() {
		return nil, false
	}
	for _, v := range a.target.Vars() {
		if !slices.Contains(a.vars, v) {
			a.vars = append(a.vars, v)
		}
	}
	supp := support(a.target, a.vars)
	fs := bounds(supp, a.vars, p.Groups)
	plain := p.Reduce == nil
	if others || !plain {
		fs = loose(supp, a.vars, extra)
	}
	for _, set := range p.factorSets(others) {
		m := p.reduce(p.product(set))
		base := make([]int, len(a.vars))
		if m.Len() == 1 {
			mono, _ := m.Leading()
			skip := false
			for _, pw := range mono.Powers() {
				if i := slices.Index(a.vars, pw.Var); i >= 0 {
					base[i] = pw.Exp
				} else {
					skip = true
				}
			}
			if skip {
				continue
			}
		}
		cand, ok := candidates(len(a.vars), base, shifted(fs, m), 4*e.Order)
		if !ok {
			return nil, false
		}
		var basis []algebra.Monomial
		for _, b := range cand {
			mono := monomial(b, a.vars)
			if t := algebra.FromTerms([]algebra.Term{{Mono: mono, Coef: algebra.Int(1)}}); p.reduce(t).Equal(t) {
				basis = append(basis, mono)
			}
		}
		for _, cls := range a.classes(basis) {
			a.blocks = append(a.blocks, &block{factors: set, factor: m, basis: cls})
		}
	}
	if plain && !others {
		a.prune()
	}
	a.start()
	return a, a.fits(e)
}

// shifted lowers the bounds of the functionals for a factor that is no
// monomial, by its degrees.
func shifted(fs []functional, m algebra.Poly) []functional {
	if m.Len() <= 1 {
		return fs
	}
	out := make([]functional, len(fs))
	for i, f := range fs {
		out[i] = f
		if i == 0 {
			out[i].hi -= m.TotalDegree()
		}
	}
	return out
}

// loose are bounds for certificates in which leading terms may cancel: the
// total degree, rounded up to an even number and raised by extra.
func loose(supp [][]int, vars []algebra.Var, extra int) []functional {
	total := functional{weight: make([]int, len(vars))}
	for i := range vars {
		total.weight[i] = 1
	}
	for _, e := range supp {
		total.hi = max(total.hi, total.of(e))
	}
	total.hi += total.hi%2 + extra
	out := []functional{total}
	for i := range vars {
		w := make([]int, len(vars))
		w[i] = 1
		out = append(out, functional{w, 0, total.hi})
	}
	return out
}

func (a *ansatz) fits(e Effort) bool {
	largest := 0
	for _, b := range a.blocks {
		largest = max(largest, b.order())
	}
	return largest > 0 && largest <= e.Order && len(a.rows()) <= e.Rows
}

// expand is the polynomial Σ w Π g q².
func (p *Problem) expand(list []Square) algebra.Poly {
	var sum algebra.Poly
	for _, s := range list {
		sum = sum.Add(s.Base.Mul(s.Base).Mul(p.product(s.Factors)).Scale(s.Weight))
	}
	return sum
}

// classes splits a basis by the sign symmetries of the problem: flips of
// variables that leave target and constraints as they are.
func (a *ansatz) classes(basis []algebra.Monomial) [][]algebra.Monomial {
	span := a.parities()
	index := map[string]int{}
	var out [][]algebra.Monomial
	for _, m := range basis {
		k := span.residue(a.parity(m))
		i, ok := index[k]
		if !ok {
			i = len(out)
			index[k] = i
			out = append(out, nil)
		}
		out[i] = append(out[i], m)
	}
	return out
}

// parity is the vector of exponents modulo 2, without the variables that are
// signs themselves and cannot be flipped.
func (a *ansatz) parity(m algebra.Monomial) []byte {
	out := make([]byte, len(a.vars))
	for _, pw := range m.Powers() {
		if i := slices.Index(a.vars, pw.Var); i >= 0 {
			out[i] = byte(pw.Exp & 1)
		}
	}
	for i := range a.p.Positive {
		if v, ok := a.p.sign(i); ok {
			if k := slices.Index(a.vars, v); k >= 0 {
				out[k] = 0
			}
		}
	}
	return out
}

// space is a subspace of F_2^n in echelon form.
type space struct{ rows [][]byte }

func (s *space) add(v []byte) {
	v = s.reduceVector(slices.Clone(v))
	if slices.Contains(v, 1) {
		s.rows = append(s.rows, v)
	}
}

func (s *space) reduceVector(v []byte) []byte {
	for _, r := range s.rows {
		if p := slices.Index(r, 1); v[p] == 1 {
			for i := range v {
				v[i] ^= r[i]
			}
		}
	}
	return v
}

func (s *space) residue(v []byte) string { return string(s.reduceVector(slices.Clone(v))) }

func (a *ansatz) parities() *space {
	s := &space{}
	for m := range a.target.Terms() {
		s.add(a.parity(m))
	}
	for m := range a.p.Target.Terms() {
		s.add(a.parity(m))
	}
	for i, g := range a.p.Positive {
		if _, ok := a.p.sign(i); ok {
			continue
		}
		for m := range g.Poly.Terms() {
			s.add(a.parity(m))
		}
	}
	if a.p.Reduce != nil { // the equations: what squares of single variables become
		for _, v := range a.vars {
			sq := a.p.reduce(algebra.Variable(v).Pow(2))
			for m := range sq.Terms() {
				s.add(a.parity(m))
			}
		}
	}
	return s
}

// prune removes monomials whose square meets no term of the target and no
// product of two other monomials: their diagonal entry must vanish.
func (a *ansatz) prune() {
	for {
		inTarget := map[algebra.Monomial]bool{}
		for m := range a.target.Terms() {
			inTarget[m] = true
		}
		mixed := map[algebra.Monomial]bool{}
		for _, b := range a.blocks {
			f, _ := b.factor.Leading()
			for i, x := range b.basis {
				for _, y := range b.basis[:i] {
					mixed[f.Mul(x).Mul(y)] = true
				}
			}
		}
		removed := false
		for _, b := range a.blocks {
			f, _ := b.factor.Leading()
			b.basis = slices.DeleteFunc(b.basis, func(x algebra.Monomial) bool {
				sq := f.Mul(x).Mul(x)
				if inTarget[sq] || mixed[sq] {
					return false
				}
				removed = true
				return true
			})
		}
		a.blocks = slices.DeleteFunc(a.blocks, func(b *block) bool { return len(b.basis) == 0 })
		if !removed {
			return
		}
	}
}

// start makes every face the whole space.
func (a *ansatz) start() {
	for _, b := range a.blocks {
		n := len(b.basis)
		b.face = make([][]algebra.Rat, n)
		for i := range b.face {
			b.face[i] = make([]algebra.Rat, n)
			b.face[i][i] = algebra.Int(1)
		}
	}
}

// rows lists the monomials on which both sides must agree.
func (a *ansatz) rows() []algebra.Monomial {
	seen := map[algebra.Monomial]bool{}
	var out []algebra.Monomial
	add := func(p algebra.Poly) {
		for m := range p.Terms() {
			if !seen[m] {
				seen[m] = true
				out = append(out, m)
			}
		}
	}
	add(a.target)
	for _, b := range a.blocks {
		for i := range b.basis {
			for k := range i + 1 {
				add(a.entry(b, i, k))
			}
		}
	}
	slices.SortFunc(out, algebra.GradedLex)
	return out
}

// entry is the polynomial that Q_ik of a block multiplies.
func (a *ansatz) entry(b *block, i, k int) algebra.Poly {
	m := b.basis[i].Mul(b.basis[k])
	t := b.factor.Mul(algebra.FromTerms([]algebra.Term{{Mono: m, Coef: algebra.Int(1)}}))
	if b.multiplier {
		t = t.Mul(a.p.Target).Neg()
	}
	return a.p.reduce(t)
}
