package semidefinite

import (
	"math"

	"gonum.org/v1/gonum/blas"
	blasgonum "gonum.org/v1/gonum/blas/gonum"
	"gonum.org/v1/gonum/floats"
	lapackgonum "gonum.org/v1/gonum/lapack/gonum"
)

var (
	blasImpl   blasgonum.Implementation
	lapackImpl lapackgonum.Implementation
)

// shape has the orders of the blocks, negative for diagonal ones.
type shape []int

// element is a block diagonal matrix: n² numbers in rows for a dense block, n
// for a diagonal one.
type element [][]float64

func (s shape) zero() element {
	e := make(element, len(s))
	for k, n := range s {
		if n < 0 {
			e[k] = make([]float64, -n)
		} else {
			e[k] = make([]float64, n*n)
		}
	}
	return e
}

// order is the order of the whole matrix.
func (s shape) order() int {
	total := 0
	for _, n := range s {
		total += max(n, -n)
	}
	return total
}

func (s shape) setIdentity(e element, v float64) {
	for k, n := range s {
		clear(e[k])
		step := n + 1
		if n < 0 {
			step = 1
		}
		for i := 0; i < len(e[k]); i += step {
			e[k][i] = v
		}
	}
}

func (e element) copyFrom(x element) {
	for k := range e {
		copy(e[k], x[k])
	}
}

func (e element) scale(a float64) {
	for k := range e {
		floats.Scale(a, e[k])
	}
}

// add adds a x.
func (e element) add(a float64, x element) {
	for k := range e {
		floats.AddScaled(e[k], a, x[k])
	}
}

func (e element) dot(x element) float64 {
	var sum float64
	for k := range e {
		sum += floats.Dot(e[k], x[k])
	}
	return sum
}

func (e element) norm() float64 {
	var sum float64
	for k := range e {
		sum = math.Hypot(sum, floats.Norm(e[k], 2))
	}
	return sum
}

func (e element) finite() bool {
	for k := range e {
		if !allFinite(e[k]) {
			return false
		}
	}
	return true
}

func allFinite(x []float64) bool {
	for _, v := range x {
		if !finite(v) {
			return false
		}
	}
	return true
}

// symmetrise replaces e by (e + eᵀ)/2.
func (s shape) symmetrise(e element) {
	for k, n := range s {
		a := e[k]
		for i := 0; i < n; i++ {
			for j := i + 1; j < n; j++ {
				v := 0.5 * (a[i*n+j] + a[j*n+i])
				a[i*n+j], a[j*n+i] = v, v
			}
		}
	}
}

// mul sets dst = a b + beta dst.
func (s shape) mul(dst, a, b element, beta float64) {
	for k, n := range s {
		if n < 0 {
			for i := range dst[k] {
				dst[k][i] = a[k][i]*b[k][i] + beta*dst[k][i]
			}
			continue
		}
		if beta == 0 {
			clear(dst[k])
		}
		blasImpl.Dgemm(blas.NoTrans, blas.NoTrans, n, n, n, 1, a[k], n, b[k], n, beta, dst[k], n)
	}
}

// cholesky sets l to the lower factor of a, with the square roots of diagonal
// blocks, and reports whether a is positive definite. The upper triangles of l
// are not used.
func (s shape) cholesky(l, a element) bool {
	for k, n := range s {
		copy(l[k], a[k])
		if n < 0 {
			for i, v := range a[k] {
				if !(v > 0) || math.IsInf(v, 1) {
					return false
				}
				l[k][i] = math.Sqrt(v)
			}
			continue
		}
		if !lapackImpl.Dpotrf(blas.Lower, n, l[k], n) {
			return false
		}
		for i := 0; i < n; i++ {
			if d := l[k][i*n+i]; !(d > 0) || math.IsInf(d, 1) {
				return false
			}
		}
	}
	return true
}

// inverse sets dst to the inverse of l lᵀ.
func (s shape) inverse(dst, l element) {
	for k, n := range s {
		if n < 0 {
			for i, v := range l[k] {
				dst[k][i] = 1 / (v * v)
			}
			continue
		}
		copy(dst[k], l[k])
		lapackImpl.Dpotri(blas.Lower, n, dst[k], n)
		for i := 0; i < n; i++ {
			for j := i + 1; j < n; j++ {
				dst[k][i*n+j] = dst[k][j*n+i]
			}
		}
	}
}

// congruence replaces d by l⁻¹ d l⁻ᵀ.
func (s shape) congruence(d, l element) {
	for k, n := range s {
		if n < 0 {
			for i, v := range l[k] {
				d[k][i] /= v * v
			}
			continue
		}
		blasImpl.Dtrsm(blas.Left, blas.Lower, blas.NoTrans, blas.NonUnit, n, n, 1, l[k], n, d[k], n)
		blasImpl.Dtrsm(blas.Right, blas.Lower, blas.Trans, blas.NonUnit, n, n, 1, l[k], n, d[k], n)
	}
}

// least returns the least eigenvalue of d, which it destroys, or NaN.
func (s shape) least(d element, work *eigenWork) float64 {
	least := math.Inf(1)
	for k, n := range s {
		w := d[k]
		if n > 0 {
			if w = work.values(d[k], n); w == nil {
				return math.NaN()
			}
		}
		for _, v := range w {
			if math.IsNaN(v) {
				return v
			}
			least = min(least, v)
		}
	}
	return least
}

// eigenWork is scratch for eigenvalues.
type eigenWork struct{ d, e, tau, work []float64 }

// values returns the eigenvalues of the symmetric matrix a of order n, which it
// destroys, or nil. They stay valid until the next call.
func (w *eigenWork) values(a []float64, n int) []float64 {
	top := 0.0
	for _, v := range a {
		if !finite(v) {
			return nil
		}
		top = max(top, math.Abs(v))
	}
	if len(w.d) < n {
		w.d, w.e, w.tau = make([]float64, n), make([]float64, n), make([]float64, n)
		w.work = make([]float64, 40*n)
	}
	d, e := w.d[:n], w.e[:n-1]
	if top == 0 {
		clear(d)
		return d
	}
	// Dsterf must not have to scale, which it does for tiny and huge parts of a
	// matrix: it addresses them wrongly and panics.
	_, exponent := math.Frexp(top)
	half := exponent / 2
	floats.Scale(math.Ldexp(1, -half), a)
	floats.Scale(math.Ldexp(1, half-exponent), a)
	lapackImpl.Dsytrd(blas.Lower, n, a, n, d, e, w.tau[:n-1], w.work, len(w.work))
	for _, list := range [][]float64{d, e} {
		for i, v := range list {
			if math.Abs(v) < 1e-100 {
				list[i] = 0
			}
		}
	}
	if !lapackImpl.Dsterf(n, d, e) {
		return nil
	}
	for i, v := range d {
		d[i] = math.Ldexp(v, exponent)
	}
	return d
}
