package gram

import (
	"context"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/identity/semidefinite"
)

// Fit looks, numerically, for numbers x_k such that Target + Σ x_k Free_k is a
// sum of squares in the sense of Prove, without a multiplier: a point well
// inside the set of them where cost is nil, else one that minimises Σ cost_k
// x_k. The numbers are guesses, to be recognised and then proved exactly; ok is
// false where the program has no solution, or none that is bounded.
func Fit(ctx context.Context, p *Problem, free []algebra.Poly, cost []float64, e Effort) (x []float64, ok bool) {
	all := p.Target
	// A generic combination has the support of all of them.
	for i, f := range free {
		all = all.Add(f.Scale(algebra.Frac64(int64(997+i), 1009)))
	}
	generic := *p
	generic.Target = all
	generic.Zeros = nil
	onlySigns := true
	for i := range p.Positive {
		if _, isSign := p.sign(i); !isSign && p.relevant(i) {
			onlySigns = false
		}
	}
	a, ok := generic.build(e, nil, !onlySigns, 0)
	if !ok {
		return nil, false
	}
	rows := a.rows() // of the generic combination: they hold all monomials
	eq := a.equations()
	index := map[algebra.Monomial]int{}
	for i, m := range rows {
		index[m] = i
		eq.right[i] = algebra.Rat{}
	}
	for m, c := range p.reduce(p.Target).Terms() {
		eq.right[index[m]] = c
	}
	sdp := semidefinite.Problem{}
	for _, b := range a.blocks {
		sdp.Blocks = append(sdp.Blocks, b.order())
	}
	for r, cells := range eq.cells {
		var m semidefinite.SparseSym
		for _, c := range cells {
			m = append(m, semidefinite.Entry{Block: c.block, Row: c.i, Col: c.k, Value: c.value.Float64()})
		}
		sdp.A = append(sdp.A, m)
		sdp.B = append(sdp.B, eq.right[r].Float64())
	}
	for k := range free {
		f := p.reduce(free[k])
		v := semidefinite.FreeVariable{}
		if cost != nil {
			v.Cost = cost[k]
		}
		for m, c := range f.Terms() {
			v.Terms = append(v.Terms, semidefinite.FreeTerm{Row: index[m], Value: -c.Float64()})
		}
		slices.SortFunc(v.Terms, func(a, b semidefinite.FreeTerm) int { return a.Row - b.Row })
		sdp.Free = append(sdp.Free, v)
	}
	mode := semidefinite.Optimum
	if cost == nil {
		mode = semidefinite.AnalyticCentre
	}
	sol, err := semidefinite.Solve(ctx, sdp, semidefinite.Options{Mode: mode, MaxIterations: e.Iterations})
	if err != nil || sol.PrimalInfeasibility > 1e-4 {
		return nil, false
	}
	switch sol.Status {
	case semidefinite.PrimalInfeasible, semidefinite.DualInfeasible:
		return nil, false
	}
	return sol.Z, true
}

// Recognise lists rationals near a numerical value, simplest tolerance last:
// candidates for what it stands for.
func Recognise(x float64) []algebra.Rat {
	var out []algebra.Rat
	for _, tol := range []float64{1e-2, 1e-3, 1e-4, 1e-6, 1e-8} {
		r, ok := recognise(x, tol)
		if ok && !slices.ContainsFunc(out, r.Equal) {
			out = append(out, r)
		}
	}
	slices.Reverse(out)
	return out
}
