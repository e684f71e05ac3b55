// Package profile makes the profile cost of a model into a density that can be
// integrated over a surface.
//
// Where the residual and the bending are polynomial in the gradient the cost
// is a closed form (see entropy.ProfileProgram). Elsewhere the integral
//
//	∫_0^1 |R(p⁻ + s q)| |L(q ⊗ ν)| ds
//
// is computed by adaptive quadrature with an estimate of its error. All of it
// is floating-point arithmetic and proves nothing.
package profile

import (
	"context"
	"errors"
	"fmt"
	"math"

	"creaseproof/entropy"
	"creaseproof/quadrature"
	"creaseproof/quadrature/adaptive"
)

// tolerance is the relative tolerance of the quadrature along a segment, well
// below that of integrals over surfaces.
const tolerance = 1e-13

// budget bounds the evaluations along one segment.
const budget = 200000

// Cost is the cost at the point x for the traces plus and minus and the unit
// normal nu, and an estimate of its absolute error apart from rounding. Every
// slice has one element for each coordinate. If the tolerance is not met the
// values come with an error that wraps adaptive.ErrTolerance. Zeros of the
// residual inside the segment are kinks of the integrand; they cost
// evaluations, not accuracy.
func Cost(ctx context.Context, p *entropy.ProfileProgram, x, plus, minus, nu []float64) (cost, estimate float64, err error) {
	if p.Polynomial() {
		cost, estimate = p.Cost(x, plus, minus, nu)
		if math.IsNaN(cost) || math.IsInf(cost, 0) {
			return cost, estimate, fmt.Errorf("profile cost: %w", adaptive.ErrNotFinite)
		}
		return cost, estimate, nil
	}
	f := func(s float64) float64 { return p.Integrand(s, x, plus, minus, nu) }
	cost, estimate, _, err = adaptive.Integrate(ctx, f, 0, 1, tolerance, budget)
	if err != nil {
		err = fmt.Errorf("profile cost: %w", err)
	}
	return cost, estimate, err
}

// Uncertainty is the relative error that the values of Density may have beside
// rounding: 0 where the cost is a closed form.
func Uncertainty(p *entropy.ProfileProgram) float64 {
	if p.Polynomial() {
		return 0
	}
	return 10 * tolerance
}

// Density is the cost as a density over surfaces. It is NaN where the cost is
// not known to a relative 1e-12, so that an integral over it is refused there
// instead of being wrong. It is not safe for concurrent use.
func Density(ctx context.Context, p *entropy.ProfileProgram) quadrature.Density {
	return func(x, plus, minus, nu []float64) float64 {
		cost, estimate, err := Cost(ctx, p, x, plus, minus, nu)
		accurate := errors.Is(err, adaptive.ErrTolerance) && estimate <= Uncertainty(p)*math.Abs(cost)
		if err != nil && !accurate {
			return math.NaN()
		}
		return cost
	}
}
