package identity

import (
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/exact"
)

// Bounds on the search along the boundary of the assumptions.
const (
	boundaryVars   = 12
	boundaryTerms  = 200
	boundarySteps  = 40
	boundaryBits   = 240 // of the rationals that Newton's method rounds to
	boundaryActive = 3   // assumptions that hold with equality at once
	boundaryStarts = 6
)

// boundary looks for a counterexample where assumptions are met with equality,
// or nearly so: it solves the conditions of Karush, Kuhn and Tucker for the gap,
// with some assumptions active, by Newton's method in rationals of many digits
// (Nocedal and Wright, Numerical Optimization, chapter 18), and steps from there
// into the set that the assumptions leave. This meets violations that are
// far below the resolution of floating point; every point is settled exactly.
type boundary struct {
	t      *task
	vars   []algebra.Var // of the gap and of the assumptions that matter
	gap    differentiated
	assume []differentiated // each >= 0 or > 0
}

// differentiated is a polynomial with its derivatives by the variables.
type differentiated struct {
	value    algebra.Poly
	gradient []algebra.Poly
	hessian  [][]algebra.Poly
}

func differentiate(p algebra.Poly, vars []algebra.Var) differentiated {
	f := differentiated{value: p}
	for _, v := range vars {
		g := p.Deriv(v)
		f.gradient = append(f.gradient, g)
		var row []algebra.Poly
		for _, w := range vars {
			row = append(row, g.Deriv(w))
		}
		f.hessian = append(f.hessian, row)
	}
	return f
}

// newBoundary prepares the search. It reports false where the gap is not a short
// polynomial in jets and constants, where angles occur, and where
// nothing is gained.
func (t *task) newBoundary() (*boundary, bool) {
	d := t.d
	plain := func(p algebra.Poly) bool {
		return p.Len() <= boundaryTerms && !slices.ContainsFunc(p.Vars(), func(v algebra.Var) bool { return !slices.Contains(t.pts.Free, v) })
	}
	if !plain(t.g.Poly) || d.Claim.Jump {
		return nil, false
	}
	b := &boundary{t: t, vars: t.g.Poly.Vars()}
	var assumed []algebra.Poly
	for _, c := range d.Assumed {
		p, ok := c.Value.IsPoly()
		switch {
		case c.Relation == "=":
			return nil, false
		case !ok || !plain(p):
			continue
		case c.Relation == "<" || c.Relation == "<=":
			p = p.Neg()
		}
		assumed = append(assumed, p)
		for _, v := range p.Vars() {
			if !slices.Contains(b.vars, v) {
				b.vars = append(b.vars, v)
			}
		}
	}
	if len(b.vars) > boundaryVars {
		return nil, false
	}
	b.gap = differentiate(t.g.Poly, b.vars)
	for _, p := range assumed {
		b.assume = append(b.assume, differentiate(p, b.vars))
	}
	return b, true
}

// search tries the starts, with none, one and more of the assumptions that are
// nearly met with equality there.
func (b *boundary) search(starts [][]float64) (jet.Point, bool) {
	for _, start := range starts[:min(len(starts), boundaryStarts)] {
		at := map[algebra.Var]algebra.Rat{}
		for i, v := range b.t.pts.Free {
			x := new(big.Rat).SetFloat64(start[i])
			if x == nil {
				x = new(big.Rat)
			}
			at[v] = algebra.FromBig(x)
		}
		order := b.nearest(at)
		for n := range min(len(order), boundaryActive, len(b.vars)) + 1 {
			if b.t.d.Ctx.Err() != nil {
				return nil, false
			}
			active := order[:n]
			x, ok := b.newton(at, active)
			if !ok {
				continue
			}
			if p, ok := b.inside(x, active); ok {
				return p, true
			}
		}
	}
	return nil, false
}

// nearest orders the assumptions by how nearly they are met with equality.
func (b *boundary) nearest(at map[algebra.Var]algebra.Rat) []differentiated {
	out := slices.Clone(b.assume)
	size := func(f differentiated) float64 {
		var sum algebra.Rat
		for m, c := range f.value.Terms() {
			x, _ := algebra.FromTerms([]algebra.Term{{Mono: m, Coef: c}}).Eval(lookup(at))
			sum = sum.Add(x.Abs())
		}
		x, ok := value(f.value, at).Abs().Quo(sum)
		if !ok {
			return 0
		}
		return x.Float64()
	}
	slices.SortStableFunc(out, func(x, y differentiated) int {
		switch a, c := size(x), size(y); {
		case a < c:
			return -1
		case a > c:
			return 1
		}
		return 0
	})
	return out
}

func lookup(at map[algebra.Var]algebra.Rat) func(algebra.Var) algebra.Rat {
	return func(v algebra.Var) algebra.Rat { return at[v] }
}

func value(p algebra.Poly, at map[algebra.Var]algebra.Rat) algebra.Rat {
	x, _ := p.Eval(lookup(at))
	return x
}

// rounded is x to so many binary places.
func rounded(x algebra.Rat, places int) algebra.Rat {
	y := x.Big()
	num := new(big.Int).Lsh(y.Num(), uint(places))
	num.Div(num, y.Denom())
	return algebra.FromBig(new(big.Rat).SetFrac(num, new(big.Int).Lsh(big.NewInt(1), uint(places))))
}

// newton solves, from at, ∇gap = Σ λ_i ∇h_i and h_i = 0 for the active h_i. It
// reports false where that does not converge.
func (b *boundary) newton(at map[algebra.Var]algebra.Rat, active []differentiated) (map[algebra.Var]algebra.Rat, bool) {
	x := map[algebra.Var]algebra.Rat{}
	for v, y := range at {
		x[v] = y
	}
	n, m := len(b.vars), len(active)
	multipliers := b.multipliers(x, active)
	last := 0.0
	for step := range boundarySteps {
		if b.t.d.Ctx.Err() != nil {
			return nil, false
		}
		rows := make([][]algebra.Rat, n+m)
		right := make([]algebra.Rat, n+m)
		for i := range n {
			rows[i] = make([]algebra.Rat, n+m)
			for k := range n {
				h := value(b.gap.hessian[i][k], x)
				for a, c := range active {
					h = h.Sub(multipliers[a].Mul(value(c.hessian[i][k], x)))
				}
				rows[i][k] = rounded(h, boundaryBits)
			}
			right[i] = rounded(value(b.gap.gradient[i], x).Neg(), boundaryBits)
		}
		for a, c := range active {
			rows[n+a] = make([]algebra.Rat, n+m)
			for i := range n {
				g := rounded(value(c.gradient[i], x), boundaryBits)
				rows[n+a][i], rows[i][n+a] = g, g.Neg()
			}
			right[n+a] = rounded(value(c.value, x).Neg(), boundaryBits)
		}
		z, _, ok := algebra.SolveRat(rows, right)
		if !ok {
			return nil, false
		}
		moved := 0.0
		for i, v := range b.vars {
			moved = max(moved, z[i].Abs().Float64())
			x[v] = rounded(x[v].Add(z[i]), boundaryBits)
		}
		for a := range active {
			multipliers[a] = rounded(z[n+a], boundaryBits)
		}
		switch {
		case moved < 1e-60:
			return x, true
		case !(moved < 1e9), step > 12 && moved > last/2:
			return nil, false
		}
		last = moved
	}
	return x, true
}

// multipliers are those with which the gradients agree best.
func (b *boundary) multipliers(x map[algebra.Var]algebra.Rat, active []differentiated) []algebra.Rat {
	m := len(active)
	rows, right := make([][]algebra.Rat, m), make([]algebra.Rat, m)
	for a, c := range active {
		rows[a] = make([]algebra.Rat, m)
		for i := range b.vars {
			g := value(c.gradient[i], x)
			for e, f := range active {
				rows[a][e] = rows[a][e].Add(g.Mul(value(f.gradient[i], x)))
			}
			right[a] = right[a].Add(g.Mul(value(b.gap.gradient[i], x)))
		}
	}
	z, _, ok := algebra.SolveRat(rows, right)
	if !ok {
		return make([]algebra.Rat, m)
	}
	for a := range z {
		z[a] = rounded(z[a], boundaryBits)
	}
	return z
}

// inside steps from x into the set where the active assumptions hold strictly,
// by steps of falling length, until a point is a counterexample.
func (b *boundary) inside(x map[algebra.Var]algebra.Rat, active []differentiated) (jet.Point, bool) {
	m := len(active)
	rows, right := make([][]algebra.Rat, m), make([]algebra.Rat, m)
	for a, c := range active {
		rows[a], right[a] = make([]algebra.Rat, m), algebra.Int(1)
		for i := range b.vars {
			g := value(c.gradient[i], x)
			for e, f := range active {
				rows[a][e] = rows[a][e].Add(g.Mul(value(f.gradient[i], x)))
			}
		}
	}
	z, _, ok := algebra.SolveRat(rows, right)
	if !ok {
		return nil, false
	}
	for places := 12; places <= boundaryBits-12; places += 12 {
		step, _ := algebra.Frac64(1, 2).Pow(places)
		coordinates := make([]*big.Rat, len(b.t.pts.Free))
		for i, v := range b.t.pts.Free {
			y := x[v]
			if k := slices.Index(b.vars, v); k >= 0 {
				for a, c := range active {
					y = y.Add(step.Mul(z[a]).Mul(value(c.gradient[k], x)))
				}
				y = rounded(y, places+6)
			}
			coordinates[i] = y.Big()
		}
		if at, ok := b.t.point(coordinates); ok && b.t.d.FalseAt(b.t.g, b.t.pts, at) {
			return at, true
		}
		if m == 0 && places < boundaryBits/2 {
			places += 12
		}
	}
	return nil, false
}

// small looks at small rational points, which meet assumptions with equality
// where random ones do not, for a claim that rests on more than signs and bounds.
func (t *task) small() (jet.Point, bool) {
	d := t.d
	if !slices.ContainsFunc(d.Assumed, func(c exact.Constraint) bool { return !c.Bounds() }) || t.g.Poly.Len() > boundaryTerms {
		return nil, false
	}
	pts := d.GapPoints(t.g)
	for k := range 300 {
		at := pts.Draw()
		if at == nil || d.Ctx.Err() != nil {
			return nil, false
		}
		for i, v := range pts.Free {
			if k>>(i%8)&1 == 0 {
				continue
			}
			if r := d.Range(v); r.Lo != nil {
				at[v] = *r.Lo
			} else if r.Hi != nil {
				at[v] = *r.Hi
			}
		}
		if d.Consistent(pts, at) && d.FalseAt(t.g, pts, at) {
			return d.simplify(t.g, pts, at), true
		}
	}
	return nil, false
}
