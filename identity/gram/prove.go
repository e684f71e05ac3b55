package gram

import (
	"context"
	"fmt"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/identity/semidefinite"

	"gonum.org/v1/gonum/mat"
)

// Prove searches for a proof within the effort. Where it finds none, the error
// wraps ErrNotFound or is that of ctx, and the picture says what was seen.
func Prove(ctx context.Context, p *Problem, e Effort) (*Proof, *Picture, error) {
	pic := &Picture{}
	vars := p.allVars()
	var zeros [][]float64
	looked := false
	try := func(multiplier []Square, others bool, extra int) *Proof {
		a, ok := p.build(e, multiplier, others, extra)
		if !ok || ctx.Err() != nil {
			return nil
		}
		pic.Tried++
		proof, feasible := a.prove(ctx, e, nil, pic)
		if proof != nil || !feasible || ctx.Err() != nil {
			return proof
		}
		// The kernel at the centre was not enough: start from numerical zeros.
		if !looked {
			zeros, looked = p.numericalZeros(ctx, vars, 3*len(vars)+24), true
		}
		if a, ok = p.build(e, multiplier, others, extra); !ok || len(zeros) == 0 {
			return nil
		}
		proof, _ = a.prove(ctx, e, zeros, pic)
		return proof
	}
	constrained := slices.ContainsFunc(p.Positive, func(c Constraint) bool {
		v := c.Poly.Vars()
		return slices.ContainsFunc(v, p.holds)
	})
	onlySigns := true
	for i := range p.Positive {
		if _, ok := p.sign(i); !ok && p.relevant(i) {
			onlySigns = false
		}
	}
	if proof := try(nil, false, 0); proof != nil {
		return proof, pic, nil
	}
	if constrained && !onlySigns {
		for extra := 0; extra <= e.Degree; extra += 2 {
			if proof := try(nil, true, extra); proof != nil {
				return proof, pic, nil
			}
		}
	}
	for half := 1; half <= e.Multiplier; half++ {
		for _, m := range p.multipliers(vars, half) {
			if proof := try(m, !onlySigns, 0); proof != nil {
				return proof, pic, nil
			}
		}
	}
	if err := ctx.Err(); err != nil {
		return nil, pic, err
	}
	return nil, pic, fmt.Errorf("%w: %d forms of certificate tried", ErrNotFound, pic.Tried)
}

// multipliers are sums of squares of monomials of one half degree: of all
// variables that are no positive constants, of each group, with and without 1.
func (p *Problem) multipliers(vars []algebra.Var, half int) [][]Square {
	isSign := func(v algebra.Var) bool {
		for i := range p.Positive {
			if w, ok := p.sign(i); ok && w == v {
				return true
			}
		}
		return false
	}
	free := slices.DeleteFunc(slices.Clone(vars), isSign)
	sets := [][]algebra.Var{free}
	for _, g := range p.Groups {
		s := slices.DeleteFunc(slices.Clone(g), func(v algebra.Var) bool { return isSign(v) || !slices.Contains(vars, v) })
		if len(s) > 0 && len(s) < len(free) {
			sets = append(sets, s)
		}
	}
	one := algebra.Int(1)
	homogeneous := len(gradings(support(p.Target, vars), len(vars))) > 0
	var out [][]Square
	if half == 1 {
		out = p.positiveMultipliers()
	}
	for _, s := range sets {
		var sum []Square
		for _, v := range s {
			sum = append(sum, Square{Weight: one, Base: algebra.Variable(v).Pow(half)})
		}
		withOne := append(slices.Clone(sum), Square{Weight: one, Base: algebra.Const(one)})
		if homogeneous {
			out = append(out, sum, withOne)
		} else {
			out = append(out, withOne, sum)
		}
	}
	return out
}

// positiveMultipliers are single strict constraints that share a variable with
// the target, and the sum of the variables that are assumed positive.
func (p *Problem) positiveMultipliers() [][]Square {
	one := algebra.Int(1)
	unit := algebra.Const(one)
	var sum []Square
	var out [][]Square
	for i, g := range p.Positive {
		switch _, ok := p.sign(i); {
		case ok:
			sum = append(sum, Square{Weight: one, Factors: []int{i}, Base: unit})
		case g.Strict && p.relevant(i):
			out = append(out, []Square{{Weight: one, Factors: []int{i}, Base: unit}})
		}
	}
	if len(sum) > 1 {
		out = append(out, sum)
	}
	return out
}

const maxFaces = 8 // rounds of facial reduction

// prove is facial reduction, rounding and the final check of one ansatz. It
// reports whether the program had a numerical solution at all.
func (a *ansatz) prove(ctx context.Context, e Effort, zeros [][]float64, pic *Picture) (proof *Proof, feasible bool) {
	for _, z := range a.p.Zeros {
		for _, b := range a.blocks {
			b.atZero(z)
		}
	}
	a.atNumericalZeros(zeros)
	eq := a.equations()
	for range maxFaces {
		a.dropEmpty(eq)
		if len(a.blocks) == 0 {
			return nil, feasible
		}
		rows, right, ok := a.onFaces(eq)
		if !ok {
			return nil, feasible
		}
		sol, err := semidefinite.Solve(ctx, a.program(rows, right), semidefinite.Options{Mode: semidefinite.AnalyticCentre, MaxIterations: e.Iterations})
		if err != nil {
			return nil, feasible
		}
		if sol.Status == semidefinite.PrimalInfeasible {
			for n, s := range sol.S { // the moments of what separates the target from the cone
				a.suggest(pic, n, s, true)
			}
			return nil, feasible
		}
		feasible = true
		kernels, inside, least := a.numericalKernels(sol.X)
		for n, x := range sol.X {
			a.suggest(pic, n, x, false)
		}
		pic.Least = least
		if sol.Status == semidefinite.Optimal || sol.Status == semidefinite.NearOptimal {
			pic.Feasible = true
		}
		if mult, squares, ok := a.round(sol.X, rows, right); ok {
			if proof := a.finish(mult, squares); proof != nil {
				return proof, true
			}
		}
		if inside {
			return nil, true
		}
		progress := false
		pic.Kernel = 0
		for n, k := range kernels {
			if len(k) == 0 {
				continue
			}
			span, ok := a.recogniseKernel(k)
			if !ok {
				pic.Kernel += len(k)
				continue
			}
			progress = true
			a.blocks[n].restrict(span)
		}
		if !progress {
			return nil, true
		}
	}
	return nil, true
}

// recogniseKernel tries from sharp to loose tolerances.
func (a *ansatz) recogniseKernel(k [][]float64) ([][]algebra.Rat, bool) {
	for _, tol := range []float64{1e-7, 1e-5, 1e-4, 1e-3} {
		if span, ok := rationalSpan(k, 1e-3, tol); ok && len(span) == len(k) {
			return span, true
		}
	}
	return nil, false
}

// dropEmpty removes blocks of order zero, and their cells.
func (a *ansatz) dropEmpty(eq *equations) {
	keep := make([]int, len(a.blocks))
	var blocks []*block
	for n, b := range a.blocks {
		keep[n] = -1
		if b.order() > 0 {
			keep[n] = len(blocks)
			blocks = append(blocks, b)
		}
	}
	if len(blocks) == len(a.blocks) {
		return
	}
	a.blocks = blocks
	for r, cells := range eq.cells {
		var out []cell
		for _, c := range cells {
			if keep[c.block] >= 0 {
				c.block = keep[c.block]
				out = append(out, c)
			}
		}
		eq.cells[r] = out
	}
}

// numericalKernels are, for each block, the eigenvectors whose eigenvalues are
// small against the largest of all, at a gap in the spectrum; inside is true
// where there are none.
func (a *ansatz) numericalKernels(ys []*mat.SymDense) (kernels [][][]float64, inside bool, least float64) {
	largest := 0.0
	type spectrum struct {
		values  []float64
		vectors *mat.Dense
	}
	specs := make([]spectrum, len(ys))
	for n, y := range ys {
		values, vectors, ok := eigen(y)
		if !ok {
			continue
		}
		specs[n] = spectrum{values, vectors}
		largest = max(largest, values[len(values)-1])
	}
	inside = true
	least = 1
	kernels = make([][][]float64, len(ys))
	if largest == 0 {
		return kernels, inside, 0
	}
	for n, s := range specs {
		if s.vectors == nil {
			continue
		}
		count := 0
		for i, v := range s.values {
			least = min(least, v/largest)
			if v > 1e-3*largest {
				break
			}
			next := largest
			if i+1 < len(s.values) {
				next = s.values[i+1]
			}
			if v < 1e-9*largest || v < 1e-5*largest && next > 30*v || v < 1e-3*largest && next > 300*v {
				count = i + 1
			}
		}
		for c := range count {
			vec := make([]float64, len(s.values))
			for r := range vec {
				vec[r] = s.vectors.At(r, c)
			}
			kernels[n] = append(kernels[n], vec)
			inside = false
		}
	}
	return kernels, inside, least
}

// finish multiplies the identity out.
func (a *ansatz) finish(mult, squares []Square) *Proof {
	if len(a.fixed) > 0 {
		mult = a.fixed
	}
	left := a.p.Target
	if len(mult) > 0 {
		left = a.p.expand(mult).Mul(left)
	}
	rest := a.p.reduce(left.Sub(a.p.expand(squares)))
	if !rest.IsZero() {
		return nil
	}
	return &Proof{Multiplier: mult, Squares: squares}
}
