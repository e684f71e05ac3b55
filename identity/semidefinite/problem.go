package semidefinite

import (
	"errors"
	"fmt"
	"math"
)

// ErrInvalid is wrapped by the errors for programs that are not well formed.
var ErrInvalid = errors.New("semidefinite: invalid program")

// ErrTooLarge is wrapped by the errors for programs that need more memory than
// Options.MemoryLimit.
var ErrTooLarge = errors.New("semidefinite: program too large")

// Entry is the value at (Row, Col) and at (Col, Row) of one block, counted from
// zero. In a diagonal block Row and Col are equal.
type Entry struct {
	Block, Row, Col int
	Value           float64
}

// SparseSym is a symmetric block diagonal matrix. An entry off the diagonal
// stands for both triangles; entries at the same place are added.
type SparseSym []Entry

// FreeTerm is a coefficient of a free variable in one row.
type FreeTerm struct {
	Row   int
	Value float64
}

// FreeVariable is one column of F and the cost of its variable.
type FreeVariable struct {
	Cost  float64
	Terms []FreeTerm
}

// Problem is a semidefinite program, see the documentation of the package.
type Problem struct {
	// Blocks has the order n of each dense block as n and of each diagonal
	// block as -n.
	Blocks []int
	// C is the cost, A the matrices of the rows and B their right sides.
	C SparseSym
	A []SparseSym
	B []float64
	// Free has the free variables, if any.
	Free []FreeVariable
}

// Validate returns an error that wraps ErrInvalid if p is not well formed:
// blocks of order zero, lengths that disagree, indices out of range, entries
// off the diagonal of a diagonal block, values that are not finite.
func (p *Problem) Validate() error {
	if len(p.Blocks) == 0 {
		return fmt.Errorf("%w: no blocks", ErrInvalid)
	}
	for k, n := range p.Blocks {
		if n == 0 || n == math.MinInt {
			return fmt.Errorf("%w: block %d has order %d", ErrInvalid, k, n)
		}
	}
	if len(p.A) != len(p.B) {
		return fmt.Errorf("%w: %d matrices and %d right sides", ErrInvalid, len(p.A), len(p.B))
	}
	for i, b := range p.B {
		if !finite(b) {
			return fmt.Errorf("%w: right side %d is %v", ErrInvalid, i, b)
		}
	}
	if err := p.validateMatrix(p.C); err != nil {
		return fmt.Errorf("%w: cost: %v", ErrInvalid, err)
	}
	for i, a := range p.A {
		if err := p.validateMatrix(a); err != nil {
			return fmt.Errorf("%w: row %d: %v", ErrInvalid, i, err)
		}
	}
	for k, f := range p.Free {
		if !finite(f.Cost) {
			return fmt.Errorf("%w: free variable %d has cost %v", ErrInvalid, k, f.Cost)
		}
		for _, t := range f.Terms {
			if t.Row < 0 || t.Row >= len(p.A) || !finite(t.Value) {
				return fmt.Errorf("%w: free variable %d has the term %v in row %d of %d", ErrInvalid, k, t.Value, t.Row, len(p.A))
			}
		}
	}
	return nil
}

func (p *Problem) validateMatrix(a SparseSym) error {
	for _, e := range a {
		if e.Block < 0 || e.Block >= len(p.Blocks) {
			return fmt.Errorf("block %d of %d", e.Block, len(p.Blocks))
		}
		n := p.Blocks[e.Block]
		if n < 0 {
			n = -n
			if e.Row != e.Col {
				return fmt.Errorf("entry (%d, %d) in diagonal block %d", e.Row, e.Col, e.Block)
			}
		}
		if e.Row < 0 || e.Row >= n || e.Col < 0 || e.Col >= n {
			return fmt.Errorf("entry (%d, %d) in block %d of order %d", e.Row, e.Col, e.Block, n)
		}
		if !finite(e.Value) {
			return fmt.Errorf("entry (%d, %d) of block %d is %v", e.Row, e.Col, e.Block, e.Value)
		}
	}
	return nil
}

// memory estimates the bytes that Solve takes for p. It is a float so that it
// cannot overflow.
func (p *Problem) memory() float64 {
	const copies = 24 // Iterates, directions, residuals, scratch, the result.
	var cells float64
	for _, n := range p.Blocks {
		cells += copies * float64(n) * float64(n)
	}
	m, f := float64(len(p.A)), float64(len(p.Free))
	cells += 4*m*m + 3*m*f + 2*f*f + 30*m
	for _, a := range p.A {
		cells += 15 * float64(len(a))
	}
	return 8 * cells
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
