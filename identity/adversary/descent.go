package adversary

import (
	"math/rand/v2"

	"gonum.org/v1/gonum/optimize"
)

// descend minimises over the variables of v from y by a method of gonum, and
// returns the best y met and the number of iterations. A failure of the method (a
// line search that stalls, say) is an end like another: the best point stands.
func descend(v *view, y []float64, method optimize.Method, iterations int) (best []float64, n int) {
	best = append([]float64(nil), y...)
	least := v.at(y)
	problem := optimize.Problem{
		Func: func(y []float64) float64 {
			f := v.at(y)
			if f < least {
				least = f
				copy(best, y)
			}
			return f
		},
		Grad: v.gradientAt,
		Status: func() (optimize.Status, error) {
			if err := v.ctx.Err(); err != nil {
				return optimize.Failure, err
			}
			return optimize.NotTerminated, nil
		},
	}
	settings := &optimize.Settings{
		MajorIterations: iterations,
		FuncEvaluations: 40 * iterations,
		Converger:       &optimize.FunctionConverge{Absolute: 1e-15, Relative: 1e-9, Iterations: 12},
	}
	result, _ := optimize.Minimize(problem, y, settings, method)
	if result != nil {
		n = result.MajorIterations
	}
	return best, n
}

// gradientMethod returns BFGS, or its variant of limited memory in many variables.
func gradientMethod(dim int) optimize.Method {
	if dim > 60 {
		return &optimize.LBFGS{}
	}
	return &optimize.BFGS{}
}

// evolution returns the derivative-free global method, with its own stream of
// random numbers for each start.
func evolution(seed uint64, start int) optimize.Method {
	return &optimize.CmaEsChol{
		InitStepSize: 0.5,
		Population:   0,
		Src:          rand.NewPCG(seed, uint64(start)),
	}
}
