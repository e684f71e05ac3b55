package gram

import (
	"creaseproof/entropy/algebra"
	"creaseproof/identity/semidefinite"
)

// cell is one entry of a Gram matrix in one equation: Value·Q_IK, i >= k, with
// the factor 2 of the other triangle left out.
type cell struct {
	block, i, k int
	value       algebra.Rat
}

// equations is Σ cells = right, one row per monomial, before faces.
type equations struct {
	cells [][]cell
	right []algebra.Rat
}

func (a *ansatz) equations() *equations {
	rows := a.rows()
	index := make(map[algebra.Monomial]int, len(rows))
	for i, m := range rows {
		index[m] = i
	}
	eq := &equations{cells: make([][]cell, len(rows)), right: make([]algebra.Rat, len(rows))}
	if !a.free {
		for m, c := range a.target.Terms() {
			eq.right[index[m]] = c
		}
	}
	for n, b := range a.blocks {
		for i := range b.basis {
			for k := range i + 1 {
				for m, c := range a.entry(b, i, k).Terms() {
					r := index[m]
					eq.cells[r] = append(eq.cells[r], cell{n, i, k, c})
				}
			}
		}
	}
	if a.free { // the trace of the multiplier is 1
		var trace []cell
		for n, b := range a.blocks {
			if b.multiplier {
				for i := range b.basis {
					trace = append(trace, cell{n, i, i, algebra.Int(1)})
				}
			}
		}
		eq.cells, eq.right = append(eq.cells, trace), append(eq.right, algebra.Int(1))
	}
	return eq
}

// sparse is one equation in the entries of the Y of each block: value at
// (r, s), r >= s, standing for both triangles.
type sparse map[[3]int]algebra.Rat

// onFaces writes the equations in the Y with Q = N Y N'. Empty rows with a
// zero right side are dropped; ok is false where an empty row has none.
func (a *ansatz) onFaces(eq *equations) (rows []sparse, right []algebra.Rat, ok bool) {
	for n, cells := range eq.cells {
		row := sparse{}
		add := func(block, r, s int, x algebra.Rat) {
			if r < s {
				r, s = s, r
			}
			k := [3]int{block, r, s}
			if y := row[k].Add(x); y.IsZero() {
				delete(row, k)
			} else {
				row[k] = y
			}
		}
		half := algebra.Frac64(1, 2)
		for _, c := range cells {
			face := a.blocks[c.block].face
			// The symmetric matrix with value at (i,k) and (k,i), turned: its
			// (r,s) entry is value (N_ir N_ks + N_kr N_is), half of that for i = k.
			for r, x := range face[c.i] {
				if x.IsZero() {
					continue
				}
				for s, y := range face[c.k] {
					if y.IsZero() {
						continue
					}
					v := c.value.Mul(x).Mul(y)
					switch {
					case c.i == c.k && r == s:
						add(c.block, r, s, v)
					case c.i == c.k:
						add(c.block, r, s, v.Mul(half)) // met again as (s, r)
					case r == s:
						add(c.block, r, s, v.Add(v))
					default:
						add(c.block, r, s, v)
					}
				}
			}
		}
		if len(row) == 0 {
			if !eq.right[n].IsZero() {
				return nil, nil, false
			}
			continue
		}
		rows, right = append(rows, row), append(right, eq.right[n])
	}
	return rows, right, true
}

// program is the semidefinite program of the equations on the faces. Rows are
// scaled to unit size.
func (a *ansatz) program(rows []sparse, right []algebra.Rat) semidefinite.Problem {
	p := semidefinite.Problem{}
	for _, b := range a.blocks {
		p.Blocks = append(p.Blocks, b.order())
	}
	for n, row := range rows {
		scale := 0.0
		for _, x := range row {
			scale = max(scale, abs(x.Float64()))
		}
		var m semidefinite.SparseSym
		for _, k := range sortedCells(row) {
			m = append(m, semidefinite.Entry{Block: k[0], Row: k[1], Col: k[2], Value: row[k].Float64() / scale})
		}
		p.A = append(p.A, m)
		p.B = append(p.B, right[n].Float64()/scale)
	}
	return p
}

func abs(x float64) float64 {
	if x < 0 {
		return -x
	}
	return x
}
