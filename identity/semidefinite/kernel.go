package semidefinite

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

// Kernel is the numerical kernel of a positive semidefinite matrix.
type Kernel struct {
	// Values has all eigenvalues in ascending order.
	Values []float64
	// Dimension is the count of eigenvalues in the kernel, the first in Values.
	Dimension int
	// Vectors has an orthonormal basis of the kernel as columns, in the order of
	// Values. It is nil if the kernel is trivial.
	Vectors *mat.Dense
	// Gap is the ratio of the least eigenvalue outside of the kernel to the
	// largest in it (at least the rounding error of the largest eigenvalue is
	// taken for the latter). A small gap means that the kernel is not well
	// separated. If the kernel is trivial, Gap is the ratio of the least
	// eigenvalue to the threshold, and if it is everything, the ratio of the
	// threshold to the largest eigenvalue.
	Gap float64
}

// NumericalKernel returns the span of the eigenvectors of x whose eigenvalues
// are at most relative times the largest absolute value of an eigenvalue. Use
// it at the analytic centre, where the rank is the largest. It is a
// floating-point proposal and decides nothing.
func NumericalKernel(x mat.Symmetric, relative float64) (*Kernel, error) {
	if !(relative > 0 && relative < 1) {
		return nil, fmt.Errorf("semidefinite: relative threshold %v of a kernel", relative)
	}
	if x == nil || x.SymmetricDim() == 0 {
		return nil, fmt.Errorf("%w: kernel of an empty matrix", ErrInvalid)
	}
	n := x.SymmetricDim()
	for i := range n {
		for j := i; j < n; j++ {
			if !finite(x.At(i, j)) {
				return nil, fmt.Errorf("%w: entry (%d, %d) is %v", ErrInvalid, i, j, x.At(i, j))
			}
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(x, true) {
		return nil, fmt.Errorf("%w: eigenvalues did not converge", ErrBreakdown)
	}
	k := &Kernel{Values: eigen.Values(nil)}
	top := max(math.Abs(k.Values[0]), math.Abs(k.Values[n-1]))
	if !finite(top) {
		return nil, fmt.Errorf("%w: eigenvalue %v", ErrBreakdown, top)
	}
	threshold := relative * top
	for k.Dimension < n && k.Values[k.Dimension] <= threshold {
		k.Dimension++
	}
	switch k.Dimension {
	case 0:
		k.Gap = k.Values[0] / threshold
		return k, nil
	case n:
		k.Gap = 1
		if top > 0 {
			k.Gap = threshold / top
		}
	default:
		const rounding = 0x1p-52
		inside := max(math.Abs(k.Values[0]), math.Abs(k.Values[k.Dimension-1]), rounding*top)
		k.Gap = k.Values[k.Dimension] / inside
	}
	var all mat.Dense
	eigen.VectorsTo(&all)
	k.Vectors = mat.DenseCopyOf(all.Slice(0, n, 0, k.Dimension))
	return k, nil
}
