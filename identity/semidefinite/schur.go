package semidefinite

import (
	"context"
	"errors"
	"math"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/floats"
)

// schur is the system
//
//	M dy + F dz = r,  F'dy = s,  M_ij = <A_i, X A_j S⁻¹>.
type schur struct {
	*program
	m      []float64 // M, lower triangle
	factor []float64 // the factor of M + delta F F'
	delta  float64
	half   []float64 // L⁻¹ F, in rows
	inner  []float64 // the factor of F' (M + delta F F')⁻¹ F
	// Scratch.
	workers []*former
	r1, r2  []float64
	dy, dz  []float64
	outer   []float64 // F F'
}

func newSchur(g *program) *schur {
	m, nf := len(g.b), len(g.freeCost)
	c := &schur{program: g}
	c.m, c.factor = make([]float64, m*m), make([]float64, m*m)
	c.half, c.inner = make([]float64, m*nf), make([]float64, nf*nf)
	c.r1, c.r2 = make([]float64, m), make([]float64, nf)
	c.dy, c.dz = make([]float64, m), make([]float64, nf)
	if nf > 0 && m > 0 {
		c.outer = make([]float64, m*m)
		blasImpl.Dsyrk(blas.Lower, blas.NoTrans, m, nf, 1, g.free, nf, 0, c.outer, m)
	}
	c.workers = newFormers(g)
	return c
}

var errFactor = errors.New("semidefinite: the Schur complement has no factor")

// factorise factors the system, with a multiple of the diagonal added if it
// breaks down.
func (c *schur) factorise(ctx context.Context) error {
	m, nf := len(c.b), len(c.freeCost)
	if m == 0 {
		return nil
	}
	if !allFinite(c.m) {
		return errFactor
	}
	c.delta = 0
	if nf > 0 {
		var top, free float64
		for i := range m {
			top, free = max(top, c.m[i*m+i]), max(free, c.outer[i*m+i])
		}
		if free > 0 {
			c.delta = top / free
			if top == 0 {
				c.delta = 1
			}
		}
	}
	for shift := 0.0; shift < 1e-3; shift = max(1e-15, 30*shift) {
		copy(c.factor, c.m)
		if nf > 0 {
			floats.AddScaled(c.factor, c.delta, c.outer)
		}
		for i := range m {
			c.factor[i*m+i] *= 1 + shift
		}
		ok, err := potrf(ctx, c.factor, m)
		if err != nil {
			return err
		}
		if ok && c.factoriseFree() {
			return nil
		}
	}
	return errFactor
}

// potrf replaces the lower triangle of a by its Cholesky factor, panel by panel,
// and reports whether a is positive definite.
func potrf(ctx context.Context, a []float64, n int) (bool, error) {
	const panel = 64
	for k := 0; k < n; k += panel {
		if err := ctx.Err(); err != nil {
			return false, err
		}
		w := min(panel, n-k)
		row := a[k*n:]
		diagonal := row[k:]
		if k > 0 {
			blasImpl.Dsyrk(blas.Lower, blas.NoTrans, w, k, -1, row, n, 1, diagonal, n)
		}
		if !lapackImpl.Dpotrf(blas.Lower, w, diagonal, n) {
			return false, nil
		}
		rest := n - k - w
		if rest == 0 {
			break
		}
		below := a[(k+w)*n:]
		if k > 0 {
			blasImpl.Dgemm(blas.NoTrans, blas.Trans, rest, w, k, -1, below, n, row, n, 1, below[k:], n)
		}
		blasImpl.Dtrsm(blas.Right, blas.Lower, blas.Trans, blas.NonUnit, rest, w, 1, diagonal, n, below[k:], n)
	}
	return true, nil
}

func (c *schur) factoriseFree() bool {
	m, nf := len(c.b), len(c.freeCost)
	if nf == 0 {
		return true
	}
	copy(c.half, c.free)
	blasImpl.Dtrsm(blas.Left, blas.Lower, blas.NoTrans, blas.NonUnit, m, nf, 1, c.factor, m, c.half, nf)
	for shift := 0.0; shift < 1e-3; shift = max(1e-15, 30*shift) {
		blasImpl.Dsyrk(blas.Lower, blas.Trans, nf, m, 1, c.half, nf, 0, c.inner, nf)
		var top float64
		for i := range nf {
			top = max(top, c.inner[i*nf+i])
		}
		if top == 0 {
			top = 1
		}
		for i := range nf {
			c.inner[i*nf+i] += shift * top
		}
		if lapackImpl.Dpotrf(blas.Lower, nf, c.inner, nf) {
			return true
		}
	}
	return false
}

// solve sets dy and dz, with iterative refinement.
func (c *schur) solve(dy, dz, r, s []float64) {
	const refinements = 4
	clear(dy)
	clear(dz)
	copy(c.r1, r)
	copy(c.r2, s)
	best := math.Inf(1)
	for range refinements {
		c.backsolve()
		floats.Add(dy, c.dy)
		floats.Add(dz, c.dz)
		norm := c.residual(dy, dz, r, s)
		if !(norm < best) {
			floats.Sub(dy, c.dy)
			floats.Sub(dz, c.dz)
			return
		}
		if norm <= 1e-14*floats.Norm(r, 2) || norm > 0.5*best {
			return
		}
		best = norm
	}
}

// residual sets r1 and r2 to what dy and dz leave, and returns its norm.
func (c *schur) residual(dy, dz, r, s []float64) float64 {
	m := len(c.b)
	copy(c.r1, r)
	copy(c.r2, s)
	if m > 0 {
		blasImpl.Dsymv(blas.Lower, m, -1, c.m, m, dy, 1, 1, c.r1, 1)
	}
	c.applyFree(c.r1, -1, dz)
	c.adjointFree(c.r2, -1, dy)
	return math.Hypot(floats.Norm(c.r1, 2), floats.Norm(c.r2, 2))
}

// backsolve solves for the right side r1, r2, which it destroys.
func (c *schur) backsolve() {
	m, nf := len(c.b), len(c.freeCost)
	if m == 0 {
		clear(c.dz)
		return
	}
	c.applyFree(c.r1, c.delta, c.r2)
	copy(c.dy, c.r1)
	blasImpl.Dtrsv(blas.Lower, blas.NoTrans, blas.NonUnit, m, c.factor, m, c.dy, 1)
	if nf > 0 {
		copy(c.dz, c.r2)
		blasImpl.Dgemv(blas.Trans, m, nf, 1, c.half, nf, c.dy, 1, -1, c.dz, 1)
		blasImpl.Dtrsv(blas.Lower, blas.NoTrans, blas.NonUnit, nf, c.inner, nf, c.dz, 1)
		blasImpl.Dtrsv(blas.Lower, blas.Trans, blas.NonUnit, nf, c.inner, nf, c.dz, 1)
		blasImpl.Dgemv(blas.NoTrans, m, nf, -1, c.half, nf, c.dz, 1, 1, c.dy, 1)
	}
	blasImpl.Dtrsv(blas.Lower, blas.Trans, blas.NonUnit, m, c.factor, m, c.dy, 1)
}
