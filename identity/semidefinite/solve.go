package semidefinite

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

// ErrBreakdown is wrapped by the errors of runs that left the range of
// floating-point numbers.
var ErrBreakdown = errors.New("semidefinite: numerical breakdown")

// Solve solves p. An error is returned if p or opt is not well formed
// (ErrInvalid), if p is too large (ErrTooLarge), if the numbers in p are beyond
// floating-point arithmetic (ErrBreakdown), or if ctx is done (its error,
// wrapped). How the run ended otherwise is the Status of the solution.
func Solve(ctx context.Context, p Problem, opt Options) (*Solution, error) {
	opt, err := opt.withDefaults()
	if err != nil {
		return nil, err
	}
	if err := p.Validate(); err != nil {
		return nil, err
	}
	if need := p.memory(); need > opt.MemoryLimit {
		return nil, fmt.Errorf("%w: %.0f MB needed, the limit is %.0f MB", ErrTooLarge, need/1e6, opt.MemoryLimit/1e6)
	}
	q, f := p.merged()
	if !q.finiteSums(f) {
		return nil, fmt.Errorf("%w: the sum or the norm of given numbers is not finite", ErrBreakdown)
	}
	keep, ray, err := independent(ctx, &q, f, opt)
	if err != nil {
		return nil, fmt.Errorf("semidefinite: %w", err)
	}
	if ray != nil {
		s := newSolver(ctx, compile(&q, f, nil, opt), opt)
		s.start()
		return report(&q, s, PrimalInfeasible, ray)
	}
	s := newSolver(ctx, compile(&q, f, keep, opt), opt)
	status, err := s.run()
	if err != nil {
		return nil, err
	}
	return report(&q, s, status, nil)
}

// finiteSums reports whether p, which is merged, and the rows of F have finite norms.
func (p *Problem) finiteSums(f [][]float64) bool {
	ok := finite(p.C.norm()) && finite(floats.Norm(p.B, 2))
	for i, a := range p.A {
		ok = ok && finite(a.norm()) && finite(floats.Norm(f[i], 2))
	}
	return ok
}

// report converts the iterate of s to the units of p and measures it anew.
func report(p *Problem, s *solver, status Status, ray []float64) (*Solution, error) {
	g := s.program
	x, sl := s.x, s.s
	x.scale(g.beta)
	sl.scale(g.gamma)
	z := slices.Clone(s.z)
	floats.Scale(g.beta, z)
	sol := &Solution{Status: status, Iterations: s.iterations, Gap: s.best.gap}
	sol.Y = make([]float64, len(p.A))
	for row, i := range g.rows {
		sol.Y[i] = g.gamma * s.y[row] / g.norm[row]
	}
	if ray != nil {
		sol.Y = ray
	}
	sol.Z = z
	switch status {
	case PrimalInfeasible:
		if ray == nil {
			floats.Scale(1/floats.Dot(p.B, sol.Y), sol.Y)
		}
		sol.Ray = p.rayError(sol.Y)
		for k := range sl {
			clear(sl[k])
		}
		for i, a := range p.A {
			p.addMatrix(sl, -sol.Y[i], a)
		}
	case DualInfeasible:
		t := s.recession(x, z)
		x.scale(1 / t)
		floats.Scale(1/t, z)
		sol.Ray = floats.Norm(p.image(x, z), 2)
	}

	sol.PrimalObjective = p.inner(p.C, x) + p.freeCost(z)
	sol.DualObjective = floats.Dot(p.B, sol.Y)
	r := p.image(x, z)
	floats.Sub(r, p.B)
	sol.PrimalInfeasibility = floats.Norm(r, 2) / g.primalScale
	sol.DualInfeasibility = p.dualResidual(sl, sol.Y, s.opt.Mode) / g.dualScale
	if s.target == 0 {
		sol.Gap = relativeGap(x.dot(sl), sol.PrimalObjective, sol.DualObjective)
	}
	sol.X, sol.S = g.matrices(x), g.matrices(sl)
	ok := x.finite() && sl.finite() && allFinite(sol.Y) && allFinite(z) && allFinite([]float64{
		sol.PrimalObjective, sol.DualObjective, sol.PrimalInfeasibility, sol.DualInfeasibility, sol.Gap, sol.Ray})
	if !ok {
		return nil, fmt.Errorf("%w: the result is not finite", ErrBreakdown)
	}
	return sol, nil
}

// image returns <A_i, X> + (F z)_i.
func (p *Problem) image(x element, z []float64) []float64 {
	r := make([]float64, len(p.A))
	for i, a := range p.A {
		r[i] = p.inner(a, x)
	}
	for k, v := range p.Free {
		for _, t := range v.Terms {
			r[t.Row] += t.Value * z[k]
		}
	}
	return r
}

func (p *Problem) freeCost(z []float64) float64 {
	var sum float64
	for k, v := range p.Free {
		sum += v.Cost * z[k]
	}
	return sum
}

// dualResidual returns the norm of (C - Σ y_i A_i - S, c - F'y), without the
// cost in the mode AnalyticCentre.
func (p *Problem) dualResidual(s element, y []float64, mode Mode) float64 {
	d := shape(p.Blocks).zero()
	r := p.freeAdjoint(y)
	if mode != AnalyticCentre {
		p.addMatrix(d, 1, p.C)
		for k, v := range p.Free {
			r[k] -= v.Cost
		}
	}
	for i, a := range p.A {
		p.addMatrix(d, -y[i], a)
	}
	d.add(-1, s)
	return math.Hypot(d.norm(), floats.Norm(r, 2))
}

func relativeGap(complementarity, primal, dual float64) float64 {
	return max(math.Abs(complementarity), math.Abs(primal-dual)) / (1 + math.Abs(primal) + math.Abs(dual))
}

func (s shape) matrices(e element) []*mat.SymDense {
	out := make([]*mat.SymDense, len(s))
	for k, n := range s {
		if n > 0 {
			out[k] = mat.NewSymDense(n, slices.Clone(e[k]))
			continue
		}
		out[k] = mat.NewSymDense(-n, nil)
		for i, v := range e[k] {
			out[k].SetSym(i, i, v)
		}
	}
	return out
}
