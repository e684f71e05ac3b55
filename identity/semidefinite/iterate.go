package semidefinite

import (
	"context"
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/floats"
)

const (
	// patience is the count of iterations without progress that end a run.
	patience = 20
	// smallestStep is a step length that counts as none.
	smallestStep = 1e-7
	// nearby is the factor on the tolerances of NearOptimal.
	nearby = 1e3
	// rayLength bounds |y| / b'y for a dual ray in scaled units: beyond, the
	// rounding errors of Σ y_i A_i hide what is claimed of it.
	rayLength = 1e7
)

// measures of an iterate in units of the Problem.
type measures struct{ primal, dual, gap float64 }

// solver holds an iterate and the scratch of one run.
type solver struct {
	*program
	ctx    context.Context
	opt    Options
	target float64 // The fixed mu, or zero.

	x, s element
	y, z []float64

	sys                *schur
	lx, ls, inv        element // Factors of X and S, S⁻¹.
	rd                 element
	rp, rf, rhs        []float64
	dx, ds             element
	dy, dz             []float64
	second, prod, temp element
	eigen              eigenWork

	iterations int
	best       measures
	bestMerit  float64
	bestAt     int
	bx, bs     element
	by, bz     []float64
}

func newSolver(ctx context.Context, g *program, opt Options) *solver {
	m, nf := len(g.b), len(g.freeCost)
	s := &solver{program: g, ctx: ctx, opt: opt, sys: newSchur(g)}
	for _, e := range []*element{&s.x, &s.s, &s.lx, &s.ls, &s.inv, &s.rd, &s.dx, &s.ds, &s.second, &s.prod, &s.temp, &s.bx, &s.bs} {
		*e = g.zero()
	}
	for _, v := range []*[]float64{&s.y, &s.rp, &s.rhs, &s.dy, &s.by} {
		*v = make([]float64, m)
	}
	for _, v := range []*[]float64{&s.z, &s.rf, &s.dz, &s.bz} {
		*v = make([]float64, nf)
	}
	switch opt.Mode {
	case AnalyticCentre:
		s.target = 1 / (g.beta * g.gamma)
	case CentralPoint:
		s.target = opt.Barrier / (g.beta * g.gamma)
	}
	s.bestMerit = math.Inf(1)
	return s
}

// start sets the first iterate.
func (s *solver) start() {
	for k, n := range s.shape {
		order := float64(max(n, -n))
		xi := max(10, math.Sqrt(order))
		if n > 0 {
			var b float64
			for _, v := range s.b {
				b = max(b, math.Abs(v))
			}
			xi = max(xi, order*(1+b)/2)
		}
		eta := max(10, math.Sqrt(order), floats.Norm(s.c[k], 2))
		if s.target > 0 {
			eta = s.target / xi
		}
		block := shape{n}
		block.setIdentity(s.x[k:k+1], xi)
		block.setIdentity(s.s[k:k+1], eta)
	}
	clear(s.y)
	clear(s.z)
}

// run iterates to an end and leaves the iterate to be reported in x, s, y, z.
func (s *solver) run() (Status, error) {
	s.start()
	for ; ; s.iterations++ {
		if err := s.ctx.Err(); err != nil {
			return 0, fmt.Errorf("semidefinite: %w", err)
		}
		if !s.cholesky(s.lx, s.x) || !s.cholesky(s.ls, s.s) {
			return s.finish(Stalled)
		}
		s.inverse(s.inv, s.ls)
		s.residuals()
		now := s.measure()
		if s.withoutCost(now) {
			now = s.measure()
		}
		merit := s.merit(now)
		if math.IsNaN(merit) || math.IsInf(merit, 0) {
			return s.finish(Stalled)
		}
		if merit < s.bestMerit {
			if merit < 0.9*s.bestMerit {
				s.bestAt = s.iterations
			}
			s.keep(now, merit)
		}
		switch {
		case now.primal <= s.opt.Feasibility && now.dual <= s.opt.Feasibility && now.gap <= s.opt.Gap:
			return Optimal, nil
		case s.dualRay():
			return PrimalInfeasible, nil
		case s.primalRay():
			return DualInfeasible, nil
		case s.iterations >= s.opt.MaxIterations:
			return s.finish(IterationLimit)
		case s.iterations-s.bestAt >= s.patience():
			return s.finish(Stalled)
		}
		moved, err := s.step()
		if err != nil {
			return 0, err
		}
		if !moved {
			return s.finish(Stalled)
		}
	}
}

// withoutCost scales the dual iterate if there is no cost and the point is
// feasible: all multiples of y and S by a positive factor are then feasible, and
// the gap is a matter of the factor.
func (s *solver) withoutCost(now measures) bool {
	if s.target > 0 || s.dualScale != 1 || max(now.primal, now.dual) > s.opt.Feasibility || now.gap <= s.opt.Gap {
		return false
	}
	size := s.beta * s.gamma * max(s.x.dot(s.s), math.Abs(floats.Dot(s.b, s.y)))
	factor := min(1, 0.5*s.opt.Gap/size)
	if !(factor > 0) {
		return false
	}
	s.s.scale(factor)
	floats.Scale(factor, s.y)
	if !s.cholesky(s.ls, s.s) {
		return false
	}
	s.inverse(s.inv, s.ls)
	s.residuals()
	return true
}

func (s *solver) patience() int {
	if s.target > 0 && s.best.primal <= s.opt.Feasibility && s.best.dual <= s.opt.Feasibility {
		return 6
	}
	return patience
}

// keep remembers the iterate.
func (s *solver) keep(now measures, merit float64) {
	s.best, s.bestMerit = now, merit
	s.bx.copyFrom(s.x)
	s.bs.copyFrom(s.s)
	copy(s.by, s.y)
	copy(s.bz, s.z)
}

// finish restores the best iterate.
func (s *solver) finish(status Status) (Status, error) {
	if math.IsInf(s.bestMerit, 1) {
		return 0, fmt.Errorf("%w in iteration %d", ErrBreakdown, s.iterations)
	}
	s.x.copyFrom(s.bx)
	s.s.copyFrom(s.bs)
	copy(s.y, s.by)
	copy(s.z, s.bz)
	b, o := s.best, s.opt
	near := b.primal <= nearby*o.Feasibility && b.dual <= nearby*o.Feasibility
	if s.target > 0 {
		near = near && b.gap < 1
	} else {
		near = near && b.gap <= nearby*o.Gap
	}
	if status == Stalled && near {
		status = NearOptimal
	}
	return status, nil
}

// residuals sets rp, rd and rf.
func (s *solver) residuals() {
	copy(s.rp, s.b)
	s.apply(s.rp, -1, s.x)
	s.applyFree(s.rp, -1, s.z)
	s.rd.copyFrom(s.c)
	s.adjoint(s.rd, -1, s.y)
	s.rd.add(-1, s.s)
	copy(s.rf, s.freeCost)
	s.adjointFree(s.rf, -1, s.y)
}

func (s *solver) measure() measures {
	var m measures
	for i, v := range s.rp {
		m.primal = math.Hypot(m.primal, v*s.norm[i])
	}
	m.primal *= s.beta / s.primalScale
	m.dual = s.gamma * math.Hypot(s.rd.norm(), floats.Norm(s.rf, 2)) / s.dualScale
	if s.target > 0 {
		m.gap = s.centrality()
		return m
	}
	unit := s.beta * s.gamma
	primal := unit * (s.c.dot(s.x) + floats.Dot(s.freeCost, s.z))
	dual := unit * floats.Dot(s.b, s.y)
	m.gap = relativeGap(unit*s.x.dot(s.s), primal, dual)
	return m
}

// centrality returns |Lᵀ S L - mu I| / (mu n^½) with X = L Lᵀ, from
// trace (X S)² and trace X S.
func (s *solver) centrality() float64 {
	s.mul(s.prod, s.x, s.s, 0)
	var square float64
	for k, n := range s.shape {
		a := s.prod[k]
		for i := 0; i < n; i++ {
			a[i*n+i] -= s.target
		}
		for i := 0; i < n; i++ {
			for j := 0; j < n; j++ {
				square += a[i*n+j] * a[j*n+i]
			}
		}
		if n < 0 {
			for _, v := range a {
				square += (v - s.target) * (v - s.target)
			}
		}
	}
	return math.Sqrt(math.Abs(square)/float64(s.order())) / s.target
}

// merit is small for good iterates. With a fixed barrier feasibility comes
// first: on a face of the cone no point is central.
func (s *solver) merit(m measures) float64 {
	feasible := max(m.primal, m.dual) / s.opt.Feasibility
	if s.target > 0 {
		return max(1, feasible) + m.gap
	}
	return max(feasible, m.gap/s.opt.Gap)
}

// dualRay reports whether y is a dual ray.
func (s *solver) dualRay() bool {
	by := floats.Dot(s.b, s.y)
	if !(by > 0) || floats.Norm(s.y, 2) > rayLength*by {
		return false
	}
	eta := s.opt.Infeasibility * s.beta * by
	f := make([]float64, len(s.z))
	s.adjointFree(f, 1, s.y)
	if floats.Norm(f, 2) > eta {
		return false
	}
	s.setIdentity(s.temp, 0.99*eta)
	s.adjoint(s.temp, -1, s.y)
	return s.cholesky(s.prod, s.temp)
}

// recession returns -<C, X> - c'z, or the trace of X where there is no cost, in
// the units of its arguments times those of C.
func (s *solver) recession(x element, z []float64) float64 {
	if s.opt.Mode != AnalyticCentre {
		return -s.gamma * (s.c.dot(x) + floats.Dot(s.freeCost, z))
	}
	id := s.temp
	s.setIdentity(id, 1)
	return id.dot(x)
}

// primalRay reports whether x and z are a primal ray.
func (s *solver) primalRay() bool {
	t := s.recession(s.x, s.z)
	if !(t > 0) {
		return false
	}
	var image float64
	for i, v := range s.rp {
		image = math.Hypot(image, (s.b[i]-v)*s.norm[i])
	}
	return image <= 0.99*s.opt.Infeasibility*t
}

// step moves the iterate and reports whether it could.
func (s *solver) step() (bool, error) {
	if err := s.sys.form(s.ctx, s.x, s.inv); err != nil {
		return false, fmt.Errorf("semidefinite: %w", err)
	}
	if err := s.sys.factorise(s.ctx); err != nil {
		if errors.Is(err, errFactor) {
			return false, nil
		}
		return false, fmt.Errorf("semidefinite: %w", err)
	}
	n := float64(s.order())
	mu := s.x.dot(s.s) / n
	if s.target > 0 {
		s.direction(s.target, false)
	} else {
		s.direction(0, false)
		ap, ad := s.lengths(1)
		if math.IsNaN(ap) || math.IsNaN(ad) {
			return false, nil
		}
		s.prod.copyFrom(s.x)
		s.prod.add(ap, s.dx)
		s.temp.copyFrom(s.s)
		s.temp.add(ad, s.ds)
		ratio := max(0, s.prod.dot(s.temp)/n/mu)
		exponent := max(1, 3*min(ap, ad)*min(ap, ad))
		sigma := min(1, math.Pow(ratio, exponent))
		if mu > 1e-6 {
			sigma = max(sigma, 1e-6)
		}
		s.mul(s.second, s.dx, s.ds, 0)
		s.direction(sigma*mu, true)
	}
	ap, ad := s.lengths(0)
	if math.IsNaN(ap) || math.IsNaN(ad) || max(ap, ad) < smallestStep {
		return false, nil
	}
	moved := s.move(s.x, s.dx, s.z, s.dz, ap) && s.move(s.s, s.ds, s.y, s.dy, ad)
	return moved, nil
}

// move adds a step, shortened where rounding would leave the cone.
func (s *solver) move(x, dx element, y, dy []float64, a float64) bool {
	for ; a > smallestStep/100; a *= 0.8 {
		s.temp.copyFrom(x)
		s.temp.add(a, dx)
		if s.cholesky(s.prod, s.temp) {
			x.copyFrom(s.temp)
			floats.AddScaled(y, a, dy)
			return allFinite(y)
		}
	}
	return false
}

// lengths returns the primal and the dual step length, for the fraction of the
// way to the boundary, or one that grows with the lengths if it is zero.
func (s *solver) lengths(fraction float64) (primal, dual float64) {
	primal, dual = s.reach(s.lx, s.dx), s.reach(s.ls, s.ds)
	if fraction == 0 {
		fraction = 0.9 + 0.09*min(1, primal, dual)
	}
	return min(1, fraction*primal), min(1, fraction*dual)
}

// reach returns the largest a with L Lᵀ + a d ⪰ 0.
func (s *solver) reach(l, d element) float64 {
	s.temp.copyFrom(d)
	s.congruence(s.temp, l)
	least := s.least(s.temp, &s.eigen)
	if least >= 0 {
		return math.Inf(1)
	}
	return -1 / least
}

// direction sets dx, ds, dy, dz for the target mu; corrected subtracts the
// second-order term dx ds of the predictor, which is in second.
func (s *solver) direction(mu float64, corrected bool) {
	s.mul(s.prod, s.x, s.rd, 0)
	if corrected {
		s.prod.add(1, s.second)
	}
	s.mul(s.temp, s.prod, s.inv, 0)
	s.symmetrise(s.temp)
	s.temp.add(-mu, s.inv)
	copy(s.rhs, s.b)
	s.applyFree(s.rhs, -1, s.z)
	s.apply(s.rhs, 1, s.temp)
	s.sys.solve(s.dy, s.dz, s.rhs, s.rf)

	s.ds.copyFrom(s.rd)
	s.adjoint(s.ds, -1, s.dy)
	s.mul(s.prod, s.x, s.ds, 0)
	if corrected {
		s.prod.add(1, s.second)
	}
	s.mul(s.dx, s.prod, s.inv, 0)
	s.symmetrise(s.dx)
	s.dx.scale(-1)
	s.dx.add(mu, s.inv)
	s.dx.add(-1, s.x)
}
