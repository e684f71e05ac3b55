// Package jet is the differential ring in which every exact decision is made.
//
// A jet of unknowns u^1, …, u^m over coordinates x_1, …, x_n is the list of
// their values and derivatives at a point, taken as independent coordinates
// u^a_J, J a multi-index. Formulas become rational functions over Q in these,
// in the coordinates, in symbolic constants, and in kernels: cos, sin, roots,
// exp, log and erf of other such rational functions. A kernel carries
//
//   - a relation, where it is algebraic over what came before it:
//     s² = 1 - c² for a sine, r^q = a for a root, the minimal polynomial for
//     cos(π/n) up to n = 60, σ² = 1 for an orientation. Values are kept reduced by
//     the relations, so that cos² + sin² = 1 and sqrt(a)² = a hold literally;
//   - a derivation rule: D cos a = -sin a · Da, D r = r Da/(q a),
//     D exp a = exp a · Da, D log a = Da/a, D erf a = 2/√π · exp(-a²) · Da.
//
// The total derivative is D_i = ∂_i + Σ u^a_{J+i} ∂/∂u^a_J, the Euler operator
// E_a(f) = Σ_J (-D)_J ∂f/∂u^a_J (Olver, Applications of Lie Groups to
// Differential Equations, 2nd ed., Springer 1993, section 4.1). E_a(f) = 0 for
// every a exactly where f is locally a divergence (loc. cit., theorem 4.7).
//
// # What is guaranteed
//
// A value that is zero here is zero as a function wherever it is defined
// under the recorded conditions: every rewriting is an identity. The converse
// is not claimed: kernels may be algebraically dependent in ways the relations
// do not show. A value that is not zero here is therefore no refutation; a
// refutation is a rational point at which Sign finds, in exact arithmetic or
// with outward rounding, that the value is not zero.
//
// Values lost to a limit (see package algebra) are never zero.
package jet
