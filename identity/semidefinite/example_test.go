package semidefinite_test

import (
	"context"
	"fmt"

	"creaseproof/identity/semidefinite"
)

// The number of Lovász of the pentagon: the largest sum of the entries of a
// positive semidefinite X of trace one with X_ij = 0 on the edges.
func ExampleSolve() {
	p := semidefinite.Problem{Blocks: []int{5}, A: make([]semidefinite.SparseSym, 1), B: []float64{1}}
	for i := range 5 {
		p.A[0] = append(p.A[0], semidefinite.Entry{Row: i, Col: i, Value: 1})
		p.A = append(p.A, semidefinite.SparseSym{{Row: i, Col: (i + 1) % 5, Value: 1}})
		p.B = append(p.B, 0)
		for j := i; j < 5; j++ {
			p.C = append(p.C, semidefinite.Entry{Row: i, Col: j, Value: -1})
		}
	}
	s, err := semidefinite.Solve(context.Background(), p, semidefinite.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%v: %.5f\n", s.Status, -s.PrimalObjective)
	// Output: optimal: 2.23607
}

// The Gram matrices of (x - 1)² in (1, x): the kernel at the analytic centre
// is spanned by (1, 1), the value of (1, x) at the zero.
func ExampleNumericalKernel() {
	p := semidefinite.Problem{
		Blocks: []int{2},
		A: []semidefinite.SparseSym{
			{{Row: 0, Col: 0, Value: 1}}, {{Row: 0, Col: 1, Value: 1}}, {{Row: 1, Col: 1, Value: 1}},
		},
		B: []float64{1, -2, 1},
	}
	s, err := semidefinite.Solve(context.Background(), p, semidefinite.Options{Mode: semidefinite.AnalyticCentre})
	if err != nil {
		fmt.Println(err)
		return
	}
	k, err := semidefinite.NumericalKernel(s.X[0], 1e-4)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("dimension %d, ratio %.4f, separated: %v\n", k.Dimension, k.Vectors.At(0, 0)/k.Vectors.At(1, 0), k.Gap > 1e3)
	// Output: dimension 1, ratio 1.0000, separated: true
}
