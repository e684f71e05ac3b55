package semidefinite

import (
	"fmt"

	"gonum.org/v1/gonum/mat"
)

// Mode says which point of the feasible set is looked for.
type Mode int

const (
	// Optimum looks for a minimiser of the cost.
	Optimum Mode = iota
	// AnalyticCentre ignores the cost and maximises log det X.
	AnalyticCentre
	// CentralPoint minimises <C, X> + c'z - Options.Barrier log det X.
	CentralPoint
)

// Options are the tolerances and limits of Solve. A field that is zero has the
// default value given with it.
type Options struct {
	Mode Mode
	// Barrier is the parameter mu > 0 of CentralPoint.
	Barrier float64
	// Feasibility bounds the relative residuals of both programs (1e-8), see
	// Solution.
	Feasibility float64
	// Gap bounds the relative gap (1e-8). In the modes with a fixed barrier it
	// bounds the relative distance to the central path.
	Gap float64
	// Infeasibility is the largest eta of a ray that ends the run (1e-8).
	Infeasibility float64
	// MaxIterations is the work budget (100).
	MaxIterations int
	// MemoryLimit in bytes (2 GiB): programs estimated to need more are an error.
	MemoryLimit float64
}

func (o Options) withDefaults() (Options, error) {
	for _, f := range []struct {
		name  string
		value *float64
		def   float64
	}{
		{"Feasibility", &o.Feasibility, 1e-8},
		{"Gap", &o.Gap, 1e-8},
		{"Infeasibility", &o.Infeasibility, 1e-8},
		{"MemoryLimit", &o.MemoryLimit, 1 << 31},
	} {
		if *f.value == 0 {
			*f.value = f.def
		}
		if !finite(*f.value) || *f.value < 0 {
			return o, fmt.Errorf("semidefinite: option %s is %v", f.name, *f.value)
		}
	}
	if o.MaxIterations == 0 {
		o.MaxIterations = 100
	}
	switch {
	case o.MaxIterations < 0:
		return o, fmt.Errorf("semidefinite: option MaxIterations is %d", o.MaxIterations)
	case o.Mode < Optimum || o.Mode > CentralPoint:
		return o, fmt.Errorf("semidefinite: unknown mode %d", o.Mode)
	case o.Mode == CentralPoint && !(o.Barrier > 0 && finite(o.Barrier)):
		return o, fmt.Errorf("semidefinite: option Barrier is %v", o.Barrier)
	}
	return o, nil
}

// Status says how a run ended.
type Status int

const (
	// Unknown is the zero value; Solve does not return it.
	Unknown Status = iota
	// Optimal: all tolerances are met.
	Optimal
	// NearOptimal: no more progress; all tolerances are met with a factor 1000.
	// In the modes with a fixed barrier this is asked of the feasibility only,
	// with a distance to the central path less than one: so it is on a face.
	NearOptimal
	// PrimalInfeasible: Solution.Y is a dual ray.
	PrimalInfeasible
	// DualInfeasible: Solution.X and Z are a primal ray.
	DualInfeasible
	// IterationLimit: the budget was spent; the best iterate is returned.
	IterationLimit
	// Stalled: no more progress in this arithmetic; the best iterate is returned.
	Stalled
)

func (s Status) String() string {
	switch s {
	case Optimal:
		return "optimal"
	case NearOptimal:
		return "near optimal"
	case PrimalInfeasible:
		return "primal infeasible"
	case DualInfeasible:
		return "dual infeasible"
	case IterationLimit:
		return "iteration limit"
	case Stalled:
		return "stalled"
	}
	return "unknown"
}

// Solution is what Solve found. All numbers in it are finite. X and S have one
// matrix per block, those of diagonal blocks are diagonal.
//
// With PrimalInfeasible, Y is the ray, S = -Σ Y_i A_i, and X is that of the
// last iterate; with DualInfeasible, X and Z are the ray and Y, S are those of
// the last iterate. Ray has the eta of the ray, see the documentation of the
// package.
type Solution struct {
	X, S []*mat.SymDense
	Y    []float64
	// Z has the free variables.
	Z      []float64
	Status Status

	// PrimalObjective is <C, X> + c'z and DualObjective is b'y, with the cost
	// of the program also where the mode ignores it for the search.
	PrimalObjective, DualObjective float64
	// PrimalInfeasibility is |<A_i, X> + (F z)_i - b_i| / (1 + |b|) and
	// DualInfeasibility is (|C - Σ y_i A_i - S|² + |c - F'y|²)^½ / (1 + |(C, c)|),
	// in Euclidean and Frobenius norms.
	PrimalInfeasibility, DualInfeasibility float64
	// Gap is max(|<X, S>|, |primal - dual objective|) / (1 + |primal| + |dual|).
	// In the modes with a fixed barrier mu it is |Lᵀ S L - mu I| / (mu n^½),
	// where X = L Lᵀ, the distance to the central path.
	Gap float64
	// Ray is the eta of the ray.
	Ray        float64
	Iterations int
}
