package gram

import (
	"errors"

	"creaseproof/entropy/algebra"
)

// Problem is Target >= 0 where all Positive hold and Reduce is the normal form.
type Problem struct {
	Target   algebra.Poly
	Positive []Constraint
	// Reduce is the normal form modulo the equations; nil where there are none.
	Reduce func(algebra.Poly) algebra.Poly
	// Zeros are exact zeros of Target at which all Positive hold.
	Zeros []Point
	// Groups are sets of variables whose joint degrees bound the monomials,
	// such as the second derivatives. They need not cover all.
	Groups [][]algebra.Var
	// Beside are variables that a certificate may hold although the target does
	// not: the sines beside cosines, whose squares bound these, or the other way.
	Beside []algebra.Var
}

// Constraint is Poly >= 0, or Poly > 0.
type Constraint struct {
	Poly   algebra.Poly
	Strict bool
}

// Point gives values to variables.
type Point map[algebra.Var]algebra.Rat

// Square is Weight · Π Positive[Factors] · Base².
type Square struct {
	Weight  algebra.Rat
	Factors []int
	Base    algebra.Poly
}

// Proof is Multiplier · Target = Squares modulo the equations; an empty
// multiplier is 1.
type Proof struct {
	Multiplier []Square
	Squares    []Square
}

// Effort bounds the work: how many forms of certificate are tried, and how
// large they may be. A greater effort tries all that a smaller one tries, in
// the same order, so it never loses a proof.
type Effort struct {
	Rows       int // equations of one semidefinite program
	Order      int // of one block
	Degree     int // added to the degree of the squares
	Multiplier int // greatest half degree of a multiplier
	Iterations int // of the interior-point method, for one program
}

// Efforts are the named budgets.
func Efforts(name string) (Effort, bool) {
	switch name {
	case "low":
		return Effort{Rows: 250, Order: 40, Degree: 0, Multiplier: 0, Iterations: 60}, true
	case "normal":
		return Effort{Rows: 700, Order: 80, Degree: 2, Multiplier: 1, Iterations: 80}, true
	case "high":
		return Effort{Rows: 1800, Order: 150, Degree: 4, Multiplier: 2, Iterations: 120}, true
	}
	return Effort{}, false
}

// ErrNotFound says that no proof was found within the effort.
var ErrNotFound = errors.New("no sum-of-squares certificate was found")

// Picture is what was seen numerically where no proof was found.
type Picture struct {
	Tried    int     // forms of certificate
	Feasible bool    // a numerical solution existed for one of them
	Kernel   int     // dimension of the numerical kernel that stayed irrational
	Least    float64 // least eigenvalue at the last numerical solution
	// Points are where the dual solution, or a vector of the kernel, looks like
	// the monomials at one point: where a counterexample would be.
	Points []map[algebra.Var]float64
}

func (p *Problem) reduce(q algebra.Poly) algebra.Poly {
	if p.Reduce == nil {
		return q
	}
	return p.Reduce(q)
}
