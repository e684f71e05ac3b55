package algebra

import (
	"errors"
	"slices"
)

// ErrShape says that the dimensions of a linear system do not fit.
var ErrShape = errors.New("the rows of the system differ in length")

// SolveRat solves a x = b exactly by Gaussian elimination; a has a row for each
// equation, all of the length of x. It returns one solution, with the free
// unknowns zero, and a basis of the null space of a, one vector for each free
// unknown, in which that unknown is 1 and the other free ones 0. It returns
// false where there is no solution; the null space is then still given. It
// panics where the rows differ in length or b does not have one entry for each.
func SolveRat(a [][]Rat, b []Rat) (x []Rat, nullspace [][]Rat, ok bool) {
	if len(a) != len(b) {
		panic(ErrShape)
	}
	n := 0
	if len(a) > 0 {
		n = len(a[0])
	}
	m := make([][]Rat, len(a))
	for i, row := range a {
		if len(row) != n {
			panic(ErrShape)
		}
		m[i] = append(slices.Clone(row), b[i])
	}
	pivot := make([]int, 0, n) // column of the pivot of each row
	for c := 0; c < n && len(pivot) < len(m); c++ {
		r := len(pivot)
		best := -1
		for i := r; i < len(m); i++ {
			if !m[i][c].IsZero() && (best < 0 || m[i][c].BitLen() < m[best][c].BitLen()) {
				best = i
			}
		}
		if best < 0 {
			continue
		}
		m[r], m[best] = m[best], m[r]
		inv, _ := m[r][c].Inv()
		for j := c; j <= n; j++ {
			m[r][j] = m[r][j].Mul(inv)
		}
		for i := range m {
			if f := m[i][c]; i != r && !f.IsZero() {
				for j := c; j <= n; j++ {
					if !m[r][j].IsZero() {
						m[i][j] = m[i][j].Sub(f.Mul(m[r][j]))
					}
				}
			}
		}
		pivot = append(pivot, c)
	}
	for c := range n {
		if slices.Contains(pivot, c) {
			continue
		}
		v := make([]Rat, n)
		v[c] = Int(1)
		for r, p := range pivot {
			v[p] = m[r][c].Neg()
		}
		nullspace = append(nullspace, v)
	}
	for _, row := range m[len(pivot):] {
		if !row[n].IsZero() {
			return nil, nullspace, false
		}
	}
	x = make([]Rat, n)
	for r, p := range pivot {
		x[p] = m[r][n]
	}
	return x, nullspace, true
}

// SolveFractions solves a x = b over the rational functions by Gaussian
// elimination, with the free unknowns zero. It returns false where there is no
// solution; a system that has none for special values of the indeterminates only
// has one here. An error, which wraps ErrLimit where a limit was reached, means
// that nothing is known; ErrShape that the dimensions do not fit.
func SolveFractions(a [][]Fraction, b []Fraction) (x []Fraction, ok bool, err error) {
	if len(a) != len(b) {
		return nil, false, ErrShape
	}
	n := 0
	if len(a) > 0 {
		n = len(a[0])
	}
	m := make([][]Fraction, len(a))
	for i, row := range a {
		if len(row) != n {
			return nil, false, ErrShape
		}
		m[i] = append(slices.Clone(row), b[i])
		for _, f := range m[i] {
			if f.Err() != nil {
				return nil, false, f.Err()
			}
		}
	}
	pivot := make([]int, 0, n)
	for c := 0; c < n && len(pivot) < len(m); c++ {
		r := len(pivot)
		best := -1
		for i := r; i < len(m); i++ {
			if !m[i][c].IsZero() && (best < 0 || m[i][c].size() < m[best][c].size()) {
				best = i
			}
		}
		if best < 0 {
			continue
		}
		m[r], m[best] = m[best], m[r]
		inv, _ := m[r][c].Inv()
		m[r][c] = FromPoly(Const(Int(1)))
		for j := c + 1; j <= n; j++ {
			m[r][j] = m[r][j].Mul(inv)
			if err := m[r][j].Err(); err != nil {
				return nil, false, err
			}
		}
		for i := range m {
			f := m[i][c]
			if i == r || f.IsZero() {
				continue
			}
			m[i][c] = Fraction{}
			for j := c + 1; j <= n; j++ {
				m[i][j] = m[i][j].Sub(f.Mul(m[r][j]))
				if err := m[i][j].Err(); err != nil {
					return nil, false, err
				}
			}
		}
		pivot = append(pivot, c)
	}
	for _, row := range m[len(pivot):] {
		if !row[n].IsZero() {
			return nil, false, nil
		}
	}
	x = make([]Fraction, n)
	for r, p := range pivot {
		x[p] = m[r][n]
	}
	return x, true, nil
}

// size is a rough measure of the work that f causes as a pivot.
func (f Fraction) size() int {
	s := f.num.Len()
	for _, d := range f.den {
		s += d.Base.Len()
	}
	return s
}
