package semidefinite

import (
	"fmt"
	"math/rand/v2"
)

// monomials returns the exponents of total degree at most degree.
func monomials(variables, degree int) [][]int {
	var out [][]int
	var grow func(prefix []int, left int)
	grow = func(prefix []int, left int) {
		if len(prefix) == variables {
			out = append(out, append([]int(nil), prefix...))
			return
		}
		for d := 0; d <= left; d++ {
			grow(append(prefix, d), left-d)
		}
	}
	grow(nil, degree)
	return out
}

// gramProblem is the program <A_a, X> = p_a over the monomials that are
// products of two of basis: X is a Gram matrix of p. Coefficients of p outside
// of the products are not looked at.
func gramProblem(basis [][]int, p map[string]float64) Problem {
	q := Problem{Blocks: []int{len(basis)}}
	row := make(map[string]int)
	for i, a := range basis {
		for j := i; j < len(basis); j++ {
			key := product(a, basis[j])
			r, ok := row[key]
			if !ok {
				r = len(q.A)
				row[key] = r
				q.A = append(q.A, nil)
				q.B = append(q.B, p[key])
			}
			q.A[r] = append(q.A[r], Entry{0, i, j, 1})
		}
	}
	return q
}

func product(a, b []int) string {
	sum := make([]int, len(a))
	for k := range a {
		sum[k] = a[k] + b[k]
	}
	return fmt.Sprint(sum)
}

// randomSOS returns the Gram problem of a random sum of squares over basis with
// the Gram matrix G = Σ g gᵀ of the given count of squares. The optional zero
// is made a common zero of the squares.
func randomSOS(rng *rand.Rand, basis [][]int, squares int, zeros [][]float64) Problem {
	n := len(basis)
	p := make(map[string]float64)
	// An orthonormal basis of the evaluations at the zeros.
	var span [][]float64
	for _, z := range zeros {
		v := evaluate(basis, z)
		for _, u := range span {
			project(v, u)
			project(v, u)
		}
		normalise(v)
		span = append(span, v)
	}
	for range squares {
		g := make([]float64, n)
		for i := range g {
			g[i] = rng.NormFloat64()
		}
		for _, u := range span {
			project(g, u)
			project(g, u)
		}
		for i := range n {
			for j := i; j < n; j++ {
				w := 2.0
				if i == j {
					w = 1
				}
				p[product(basis[i], basis[j])] += w * g[i] * g[j]
			}
		}
	}
	return gramProblem(basis, p)
}

func evaluate(basis [][]int, z []float64) []float64 {
	v := make([]float64, len(basis))
	for i, a := range basis {
		v[i] = 1
		for k, e := range a {
			for range e {
				v[i] *= z[k]
			}
		}
	}
	return v
}

func project(v, u []float64) {
	d := inner(v, u)
	for i := range v {
		v[i] -= d * u[i]
	}
}

func normalise(v []float64) {
	s := 1 / norm(v)
	for i := range v {
		v[i] *= s
	}
}

// largeProgram has one block of order 47 and about 400 rows: a sum of squares
// over 47 of the monomials of degree at most 3 in five variables, as for a
// polynomial with a sparse Newton polytope.
func largeProgram() Problem {
	rng := rand.New(rand.NewPCG(47, 400))
	basis := monomials(5, 3)
	rng.Shuffle(len(basis), func(i, j int) { basis[i], basis[j] = basis[j], basis[i] })
	p := randomSOS(rng, basis[:47], 47, nil)
	// A random positive definite cost makes the optimum generic.
	for i := range 47 {
		p.C = append(p.C, Entry{0, i, i, 2 + rng.Float64()})
		for j := i + 1; j < 47; j++ {
			p.C = append(p.C, Entry{0, i, j, 0.2 * rng.NormFloat64()})
		}
	}
	return p
}
