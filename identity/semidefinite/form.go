package semidefinite

import (
	"context"
	"runtime"
	"sync"
	"sync/atomic"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/floats"
)

// former is the scratch of one worker that forms rows of M.
type former struct{ xr, zr, u, packed []float64 }

// newFormers returns one former for each processor, as far as there is work.
func newFormers(g *program) []*former {
	var cells, band, rows int
	for k, n := range g.shape {
		if n < 0 {
			continue
		}
		cells, rows = max(cells, n*n), max(rows, len(g.parts[k]))
		for _, r := range g.parts[k] {
			band = max(band, n*len(r.support))
		}
	}
	const rowsOfWorker, most = 32, 8
	out := make([]*former, min(1+rows/rowsOfWorker, runtime.GOMAXPROCS(0), most))
	for i := range out {
		out[i] = &former{make([]float64, band), make([]float64, band), make([]float64, cells), make([]float64, cells)}
	}
	return out
}

// form computes M from X and Z = S⁻¹. Workers share the rows; each element of M
// is computed in one way, whoever does it.
func (c *schur) form(ctx context.Context, x, z element) error {
	clear(c.m)
	for k, n := range c.shape {
		if n < 0 {
			c.formDiagonal(c.parts[k], -n, x[k], z[k])
			continue
		}
		left := make([]int, len(c.parts[k])+1) // Entries of this row and those behind it.
		for a := len(c.parts[k]) - 1; a >= 0; a-- {
			left[a] = left[a+1] + len(c.parts[k][a].v)
		}
		var next atomic.Int64
		var wait sync.WaitGroup
		for _, w := range c.workers {
			wait.Go(func() {
				for ctx.Err() == nil {
					a := int(next.Add(1)) - 1
					if a >= len(c.parts[k]) {
						return
					}
					c.formRow(w, c.parts[k][a:], left[a], n, x[k], z[k])
				}
			})
		}
		wait.Wait()
		if err := ctx.Err(); err != nil {
			return err
		}
	}
	return nil
}

func (c *schur) formDiagonal(parts []part, n int, x, z []float64) {
	type term struct {
		row int
		v   float64
	}
	columns := make([][]term, n)
	for _, r := range parts {
		for t, p := range r.p {
			columns[p] = append(columns[p], term{r.row, r.v[t]})
		}
	}
	m := len(c.b)
	for p, column := range columns {
		ratio := x[p] * z[p]
		for a, s := range column {
			for _, t := range column[:a+1] {
				c.m[max(s.row, t.row)*m+min(s.row, t.row)] += ratio * s.v * t.v
			}
		}
	}
}

// formRow adds the part of one block to M in the row of parts[0] and the rows of
// all parts.
func (c *schur) formRow(w *former, parts []part, entries, n int, x, z []float64) {
	m := len(c.b)
	r := parts[0]
	// X A_j Z = Σ_k X[:, k] (A_j Z)[k, :] over the support of A_j.
	w.gather(r, n, x, z)
	// Per term, a dense product is faster than the entries.
	dense := 4*entries >= n*n
	if dense {
		w.product(n, len(r.support))
	}
	for _, s := range parts {
		var v float64
		if dense {
			v = w.weighted(s, n)
		} else {
			v = w.entrywise(s, n, len(r.support))
		}
		c.m[max(r.row, s.row)*m+min(r.row, s.row)] += v
	}
}

// gather puts the rows of X in the support of r into xr, and those of A Z into zr.
func (w *former) gather(r part, n int, x, z []float64) {
	support := len(r.support)
	index := 0
	clear(w.zr[:support*n])
	find := func(p int) int {
		lo, hi := 0, support
		for lo < hi {
			if mid := (lo + hi) / 2; r.support[mid] < p {
				lo = mid + 1
			} else {
				hi = mid
			}
		}
		return lo
	}
	for k, p := range r.support {
		copy(w.xr[k*n:(k+1)*n], x[p*n:(p+1)*n])
	}
	for t, p := range r.p {
		q := r.q[t]
		if r.support[index] != p {
			index = find(p)
		}
		floats.AddScaled(w.zr[index*n:(index+1)*n], r.v[t], z[q*n:(q+1)*n])
		if p != q {
			k := find(q)
			floats.AddScaled(w.zr[k*n:(k+1)*n], r.v[t], z[p*n:(p+1)*n])
		}
	}
}

// product sets the upper triangle of u, and packed, to that of the symmetric
// part of xrᵀ zr.
func (w *former) product(n, support int) {
	u := w.u[:n*n]
	blasImpl.Dgemm(blas.Trans, blas.NoTrans, n, n, support, 1, w.xr, n, w.zr, n, 0, u, n)
	for i := 0; i < n; i++ {
		for j := i + 1; j < n; j++ {
			u[i*n+j] = 0.5 * (u[i*n+j] + u[j*n+i])
		}
		copy(w.packed[i*n-i*(i-1)/2:], u[i*n+i:(i+1)*n])
	}
}

// weighted returns <A, u> for the matrix A of s.
func (w *former) weighted(s part, n int) float64 {
	if s.packed != nil {
		return floats.Dot(s.packed, w.packed[:len(s.packed)])
	}
	var sum float64
	weights, q := s.w[:len(s.p)], s.q[:len(s.p)]
	for t, p := range s.p {
		sum += weights[t] * w.u[p*n+q[t]]
	}
	return sum
}

// entrywise returns <A, xrᵀ zr> for the matrix A of s.
func (w *former) entrywise(s part, n, support int) float64 {
	var sum float64
	for t, p := range s.p {
		q := s.q[t]
		var pq, qp float64
		for k := 0; k < support*n; k += n {
			pq += w.xr[k+p] * w.zr[k+q]
			qp += w.xr[k+q] * w.zr[k+p]
		}
		sum += s.w[t] * 0.5 * (pq + qp)
	}
	return sum
}
