package gram

import (
	"math"
	"math/big"
	"slices"

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

// projection moves entries onto the solutions of the equations: in reduced
// echelon form each equation gives one entry by entries that are free. Pivots
// are ±1 and ±2 where that is possible and stand in few equations, so that the
// rationals stay short and the move is of the size of the residual.
type projection struct {
	rows  []map[[3]int]algebra.Rat // coefficients of the entries, both triangles together
	right []algebra.Rat
	pivot [][3]int
	ok    bool // the equations are consistent
}

// eliminationWork bounds the operations on coefficients of one elimination.
const eliminationWork = 30_000_000

func newProjection(rows []sparse, right []algebra.Rat) *projection {
	p := &projection{right: append([]algebra.Rat(nil), right...), ok: true}
	users := map[[3]int]map[int]bool{}
	for i, row := range rows {
		m := make(map[[3]int]algebra.Rat, len(row))
		for k, x := range row {
			if k[1] != k[2] {
				x = x.Add(x)
			}
			m[k] = x
			if users[k] == nil {
				users[k] = map[int]bool{}
			}
			users[k][i] = true
		}
		p.rows = append(p.rows, m)
	}
	p.pivot = make([][3]int, len(rows))
	done := make([]bool, len(rows))
	work := 0
	for range rows {
		// The shortest row that is left.
		best := -1
		for i := range p.rows {
			if !done[i] && (best < 0 || len(p.rows[i]) < len(p.rows[best])) {
				best = i
			}
		}
		done[best] = true
		row := p.rows[best]
		if len(row) == 0 {
			if !p.right[best].IsZero() {
				p.ok = false
				return p
			}
			p.pivot[best] = [3]int{-1}
			continue
		}
		at := p.choose(row, users)
		p.pivot[best] = at
		inv, _ := row[at].Inv()
		for _, j := range sortedUsers(users[at]) {
			if j == best {
				continue
			}
			f := p.rows[j][at].Mul(inv)
			for k, x := range row {
				y := p.rows[j][k].Sub(f.Mul(x))
				if y.IsZero() {
					delete(p.rows[j], k)
					delete(users[k], j)
				} else {
					p.rows[j][k] = y
					users[k][j] = true
				}
			}
			p.right[j] = p.right[j].Sub(f.Mul(p.right[best]))
			if work += len(row); work > eliminationWork {
				p.ok = false
				return p
			}
		}
	}
	return p
}

func sortedUsers(m map[int]bool) []int {
	out := make([]int, 0, len(m))
	for i := range m {
		out = append(out, i)
	}
	slices.Sort(out)
	return out
}

// choose takes the pivot of a row: small in size first, then in few rows, then
// off the diagonal, which matters less for the definiteness.
func (p *projection) choose(row map[[3]int]algebra.Rat, users map[[3]int]map[int]bool) [3]int {
	cost := func(k [3]int) [3]int {
		c := [3]int{row[k].BitLen(), len(users[k]), 1}
		if k[1] != k[2] {
			c[2] = 0
		}
		return c
	}
	var best [3]int
	first := true
	for k := range row {
		x, y := cost(k), cost(best)
		if c := slices.Compare(x[:], y[:]); first || c < 0 || c == 0 && slices.Compare(k[:], best[:]) < 0 {
			best, first = k, false
		}
	}
	return best
}

// apply moves the entries onto the solutions. It reports false where the
// equations have none.
func (p *projection) apply(cells []map[[2]int]algebra.Rat) bool {
	if !p.ok {
		return false
	}
	for i, row := range p.rows {
		at := p.pivot[i]
		if at[0] < 0 {
			continue
		}
		s := p.right[i]
		for k, x := range row {
			if k == at {
				continue
			}
			if y, ok := cells[k[0]][[2]int{k[1], k[2]}]; ok {
				s = s.Sub(x.Mul(y))
			}
		}
		y, _ := s.Quo(row[at])
		to := [2]int{at[1], at[2]}
		if y.IsZero() {
			delete(cells[at[0]], to)
		} else {
			cells[at[0]][to] = y
		}
	}
	return true
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
