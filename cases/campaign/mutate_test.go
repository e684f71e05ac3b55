package campaign

import (
	"maps"
	"math/big"
	"math/rand/v2"
	"slices"

	"creaseproof/entropy/formula"
)

// mutant is a subject with one change.
type mutant struct {
	*subject
	text   string
	change string
}

// mutants are n different changes of a subject, or fewer where there are no
// more to be found.
func mutants(s *subject, n int, rng *rand.Rand) []*mutant {
	seen := map[string]bool{s.text(): true}
	var out []*mutant
	for try := 0; try < 60*n && len(out) < n; try++ {
		m, change := s.mutate(rng)
		if m == nil {
			continue
		}
		if text := m.text(); !seen[text] {
			seen[text] = true
			out = append(out, &mutant{m, text, change})
		}
	}
	return out
}

// part is a formula that the claim depends on, and how to put another one in
// its place.
type part struct {
	root formula.Node
	put  func(*subject, formula.Node)
}

func (s *subject) parts() []part {
	var out []part
	if s.statement.Left != nil {
		out = append(out,
			part{s.statement.Left, func(t *subject, n formula.Node) { t.statement.Left = n }},
			part{s.statement.Right, func(t *subject, n formula.Node) { t.statement.Right = n }})
	}
	used := map[string]bool{}
	var see func(n formula.Node)
	let := func(id string) {
		f, ok := s.world.lets[id]
		if !ok || used[id] {
			return
		}
		used[id] = true
		out = append(out, part{f, func(t *subject, n formula.Node) { t.world.lets[id] = n }})
		see(f)
	}
	field := func(id string) {
		if s.world.fields[id] == nil || used[id] {
			return
		}
		used[id] = true
		for _, c := range slices.Sorted(maps.Keys(s.world.fields[id])) {
			f := s.world.fields[id][c]
			out = append(out, part{f, func(t *subject, n formula.Node) {
				t.world.fields[id] = maps.Clone(t.world.fields[id])
				t.world.fields[id][c] = n
			}})
			see(f)
		}
	}
	see = func(n formula.Node) {
		formula.Walk(n, func(x formula.Node) bool {
			switch x := x.(type) {
			case *formula.Name:
				let(x.ID)
			case *formula.Deriv:
				let(x.Of)
			case *formula.Field:
				field(x.ID)
			case *formula.Component:
				field(x.Of)
			}
			return true
		})
	}
	see(s.statement.Left)
	see(s.statement.Right)
	return out
}

// mutate makes one change: in four of eight cases a factor near 1, at any
// node; else a dropped term, a sign or an exponent.
func (s *subject) mutate(rng *rand.Rand) (*subject, string) {
	parts := s.parts()
	p := parts[rng.IntN(len(parts))]
	var nodes []formula.Node
	formula.Walk(p.root, func(n formula.Node) bool {
		nodes = append(nodes, n)
		c, call := n.(*formula.Call)
		turns := call && (c.Func == "cos" || c.Func == "sin" || c.Func == "div" || c.Func == "euler")
		switch n.(type) {
		case *formula.Field, *formula.Component, *formula.DotNu, *formula.Jump, *formula.Average:
			return false
		}
		return !turns
	})
	target := nodes[rng.IntN(len(nodes))]
	var changed formula.Node
	switch kind := rng.IntN(8); {
	case kind < 4:
		if _, vector := target.(*formula.Field); vector {
			return nil, ""
		}
		changed = scaled(target, factor(rng))
	default:
		switch n := target.(type) {
		case *formula.Sum:
			terms := slices.Clone(n.Terms)
			i := rng.IntN(len(terms))
			switch {
			case kind < 6 && len(terms) > 1:
				changed = formula.NewSum(slices.Delete(terms, i, i+1)...)
			default:
				terms[i].Neg = !terms[i].Neg
				changed = formula.NewSum(terms...)
			}
		case *formula.Power:
			e := new(big.Rat).Add(n.Exp, big.NewRat(int64(1-2*rng.IntN(2)), 1))
			if e.Sign() <= 0 {
				return nil, ""
			}
			changed = formula.NewPower(n.Base, e)
		default:
			return nil, ""
		}
	}
	root := replace(p.root, target, changed)
	out := *s
	w := *s.world
	w.lets, w.fields = maps.Clone(w.lets), maps.Clone(w.fields)
	st := *s.statement
	out.world, out.statement, out.solvable = &w, &st, nil
	p.put(&out, root)
	return &out, formula.Text(target) + " -> " + formula.Text(changed)
}

// factor is 1 plus or minus something between 1e-6 and 1, but not 0.
func factor(rng *rand.Rand) *big.Rat {
	scale := big.NewRat(1, 1)
	for range rng.IntN(7) {
		scale.Mul(scale, big.NewRat(1, 10))
	}
	digit := int64(1 + rng.IntN(9))
	if scale.IsInt() {
		digit = 1
	}
	scale.Mul(scale, big.NewRat(digit, 1))
	if rng.IntN(2) == 0 && scale.Cmp(big.NewRat(1, 1)) < 0 {
		scale.Neg(scale)
	}
	return scale.Add(scale, big.NewRat(1, 1))
}

func scaled(n formula.Node, k *big.Rat) formula.Node {
	if x, ok := n.(*formula.Num); ok {
		return formula.NewNum(new(big.Rat).Mul(x.Value, k))
	}
	return formula.NewProduct(formula.NewNum(k), n)
}

// replace puts another node in the place of one.
func replace(n, target, by formula.Node) formula.Node {
	if n == target {
		return by
	}
	all := func(list []formula.Node) []formula.Node {
		out := make([]formula.Node, len(list))
		for i, x := range list {
			out[i] = replace(x, target, by)
		}
		return out
	}
	switch n := n.(type) {
	case *formula.Sum:
		terms := slices.Clone(n.Terms)
		for i := range terms {
			terms[i].X = replace(terms[i].X, target, by)
		}
		return formula.NewSum(terms...)
	case *formula.Product:
		out := replace(n.Factors[0].X, target, by)
		for _, f := range n.Factors[1:] {
			x := replace(f.X, target, by)
			if f.Op == formula.Slash {
				out = formula.NewQuotient(out, x)
			} else {
				out = formula.NewProduct(out, x)
			}
		}
		return out
	case *formula.Juxt:
		return formula.NewJuxt(all(n.Factors)...)
	case *formula.Power:
		return formula.NewPower(replace(n.Base, target, by), n.Exp)
	case *formula.Call:
		return formula.NewCall(n.Func, all(n.Args)...)
	case *formula.TotalDeriv:
		return formula.NewTotalDeriv(replace(n.Arg, target, by), n.By...)
	}
	return n
}
