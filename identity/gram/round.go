package gram

import (
	"math"
	"math/big"

	"creaseproof/entropy/algebra"

	"gonum.org/v1/gonum/mat"
)

// round turns a numerical solution well inside the cone into an exact one:
// entries to multiples of 1/den, orthogonal projection on the equations over
// the rationals, exact LDLᵀ. Coarse grids come first, for simple certificates.
func (a *ansatz) round(ys []*mat.SymDense, rows []sparse, right []algebra.Rat) ([]Square, []Square, bool) {
	proj := newProjection(rows, right)
	for _, den := range []int64{1, 2, 12, 120, 5040, 1 << 20, 1 << 30, 1 << 42} {
		cells := make([]map[[2]int]algebra.Rat, len(a.blocks))
		for n := range a.blocks {
			cells[n] = map[[2]int]algebra.Rat{}
			for r := range a.blocks[n].order() {
				for s := range r + 1 {
					x := roundTo(ys[n].At(r, s), den)
					if !x.IsZero() {
						cells[n][[2]int{r, s}] = x
					}
				}
			}
		}
		if !proj.apply(cells) {
			return nil, nil, false
		}
		mult, squares, ok := a.squares(cells)
		if ok {
			return mult, squares, true
		}
	}
	return nil, nil, false
}

func roundTo(x float64, den int64) algebra.Rat {
	n := math.Round(x * float64(den))
	if math.Abs(n) < 1<<53 {
		return algebra.Frac64(int64(n), den)
	}
	b, _ := new(big.Float).SetFloat64(n).Int(nil)
	return algebra.FromBig(new(big.Rat).SetFrac(b, big.NewInt(den)))
}

// projection is the orthogonal projection onto the solutions of the equations,
// in the inner product of the entries.
type projection struct {
	rows  []sparse
	right []algebra.Rat
	gram  [][]algebra.Rat // E E'
}

func newProjection(rows []sparse, right []algebra.Rat) *projection {
	p := &projection{rows: rows, right: right, gram: make([][]algebra.Rat, len(rows))}
	for i := range rows {
		p.gram[i] = make([]algebra.Rat, len(rows))
	}
	touching := map[[3]int][]int{}
	for i, row := range rows {
		for _, k := range sortedCells(row) {
			touching[k] = append(touching[k], i)
		}
	}
	for i, row := range rows {
		for _, k := range sortedCells(row) {
			for _, j := range touching[k] {
				// coefficient of the entry in each row: twice off the diagonal
				x := row[k].Mul(rows[j][k])
				if k[1] != k[2] {
					x = x.Mul(algebra.Int(4))
				}
				p.gram[i][j] = p.gram[i][j].Add(x)
			}
		}
	}
	return p
}

// apply moves the entries onto the solutions. It reports false where the
// equations have none.
func (p *projection) apply(cells []map[[2]int]algebra.Rat) bool {
	res := make([]algebra.Rat, len(p.rows))
	exact := true
	for i, row := range p.rows {
		s := p.right[i]
		for k, x := range row {
			y := cells[k[0]][[2]int{k[1], k[2]}]
			if y.IsZero() {
				continue
			}
			t := x.Mul(y)
			if k[1] != k[2] {
				t = t.Add(t)
			}
			s = s.Sub(t)
		}
		res[i] = s
		exact = exact && s.IsZero()
	}
	if exact {
		return true
	}
	lambda, ok := solveSymmetric(p.gram, res)
	if !ok {
		return false
	}
	for i, row := range p.rows {
		if lambda[i].IsZero() {
			continue
		}
		for k, x := range row {
			c := x.Mul(lambda[i])
			if k[1] != k[2] {
				c = c.Add(c)
			}
			at := [2]int{k[1], k[2]}
			if y := cells[k[0]][at].Add(c); y.IsZero() {
				delete(cells[k[0]], at)
			} else {
				cells[k[0]][at] = y
			}
		}
	}
	return true
}

// solveSymmetric solves a consistent symmetric system, after splitting it into
// the connected parts that sparse equations fall into.
func solveSymmetric(m [][]algebra.Rat, b []algebra.Rat) ([]algebra.Rat, bool) {
	n := len(m)
	part := make([]int, n)
	for i := range part {
		part[i] = -1
	}
	x := make([]algebra.Rat, n)
	for start := range n {
		if part[start] >= 0 {
			continue
		}
		members := []int{start}
		part[start] = start
		for at := 0; at < len(members); at++ {
			for j := range n {
				if part[j] < 0 && !m[members[at]][j].IsZero() {
					part[j] = start
					members = append(members, j)
				}
			}
		}
		sub := make([][]algebra.Rat, len(members))
		rhs := make([]algebra.Rat, len(members))
		zero := true
		for i, r := range members {
			sub[i] = make([]algebra.Rat, len(members))
			for k, c := range members {
				sub[i][k] = m[r][c]
			}
			rhs[i] = b[r]
			zero = zero && b[r].IsZero()
		}
		if zero {
			continue
		}
		y, _, ok := algebra.SolveRat(sub, rhs)
		if !ok {
			return nil, false
		}
		for i, r := range members {
			x[r] = y[i]
		}
	}
	return x, true
}

// squares splits every block by an exact LDLᵀ. It reports false where a block
// is not positive semidefinite.
func (a *ansatz) squares(cells []map[[2]int]algebra.Rat) (mult, out []Square, ok bool) {
	for n, b := range a.blocks {
		r := b.order()
		m := make([][]algebra.Rat, r)
		for i := range m {
			m[i] = make([]algebra.Rat, r)
		}
		for k, x := range cells[n] {
			m[k[0]][k[1]], m[k[1]][k[0]] = x, x
		}
		d, l, ok := ldl(m)
		if !ok {
			return nil, nil, false
		}
		for c := range d {
			if d[c].IsZero() {
				continue
			}
			var terms []algebra.Term
			for i, mono := range b.basis {
				var x algebra.Rat
				for k := range r {
					if !b.face[i][k].IsZero() && !l[k][c].IsZero() {
						x = x.Add(b.face[i][k].Mul(l[k][c]))
					}
				}
				if !x.IsZero() {
					terms = append(terms, algebra.Term{Mono: mono, Coef: x})
				}
			}
			content, base := algebra.FromTerms(terms).Primitive()
			if base.IsZero() {
				continue
			}
			sq := Square{Weight: d[c].Mul(content).Mul(content), Factors: b.factors, Base: base}
			if b.multiplier {
				mult = append(mult, sq)
			} else {
				out = append(out, sq)
			}
		}
	}
	return mult, out, true
}

// ldl is the exact factorisation m = L D L' of a positive semidefinite matrix
// (Golub and Van Loan, Matrix Computations, section 4.2): with a zero pivot the
// rest of its column must be zero. It reports false where m is not positive
// semidefinite.
func ldl(m [][]algebra.Rat) (d []algebra.Rat, l [][]algebra.Rat, ok bool) {
	n := len(m)
	d = make([]algebra.Rat, n)
	l = make([][]algebra.Rat, n)
	for i := range l {
		l[i] = make([]algebra.Rat, n)
		l[i][i] = algebra.Int(1)
	}
	a := make([][]algebra.Rat, n)
	for i := range a {
		a[i] = append([]algebra.Rat(nil), m[i]...)
	}
	for k := range n {
		switch a[k][k].Sign() {
		case -1:
			return nil, nil, false
		case 0:
			for i := k + 1; i < n; i++ {
				if !a[i][k].IsZero() {
					return nil, nil, false
				}
			}
			continue
		}
		d[k] = a[k][k]
		for i := k + 1; i < n; i++ {
			if a[i][k].IsZero() {
				continue
			}
			l[i][k], _ = a[i][k].Quo(d[k])
		}
		for i := k + 1; i < n; i++ {
			if l[i][k].IsZero() {
				continue
			}
			for j := k + 1; j <= i; j++ {
				if !a[j][k].IsZero() {
					a[i][j] = a[i][j].Sub(l[i][k].Mul(a[j][k]))
					a[j][i] = a[i][j]
				}
			}
		}
	}
	return d, l, true
}
