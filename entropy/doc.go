// Package entropy gives formulas their meaning: it holds what a case declares
// (coordinates, unknowns, constants, a rotated frame, named formulas, entropy
// fields and the model) and evaluates formulas in it, exactly or compiled.
//
// A frame turns a coordinate plane by an angle θ; a field given by components
// along its axes is a family of fields, one for each θ:
//
//	Σ = Σ_xi xi + Σ_eta eta + Σ_z e_z,   xi = (cos θ, sin θ), eta = (-sin θ, cos θ).
//
// For the Aviles–Giga functional such fields are the Jin–Kohn entropies (Jin
// and Kohn, Singular perturbation and the energy of folds, J. Nonlinear Sci.
// 10 (2000) 355–390). The model of a case is its residual R, its bending L and
// its energy density e; the well is the zero set of R. At a jump with traces
// p⁺, p⁻ on the well and normal ν parallel to q = p⁺ - p⁻, [Σ]·ν is the
// production, and
//
//	∫_0^1 |R(p⁻ + s q)| |L(q ⊗ ν)| ds
//
// is the cost of the one-dimensional transition profile for the energy
// R²/(2 eps) + eps L²/2.
//
// Exact evaluation is in the ring of package jet and says what that package
// says. Compiled evaluation is in float64, and proves nothing.
package entropy
