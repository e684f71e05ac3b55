// Package limit evaluates the energy of smooth approximations u_eps of a
// function with creases, for a falling sequence of eps, and compares it with
// the energy of the creases.
//
// # Approximations
//
// Let the sharp function be the maximum (sign +) or minimum (sign -) of
// branches u_i.
//
//   - Front is ±2 eps log Σ exp(±u_i/(2 eps)). With the weights w_i
//     proportional to exp(±u_i/(2 eps)) its gradient is Σ w_i ∇u_i and its
//     Hessian Σ w_i ∇²u_i ± Cov_w(∇u_i)/(2 eps). For R = u_z - |∇u|²/2 and
//     L = Δu in the remaining coordinates exp(u/(2 eps)) obeys the heat
//     equation where R = eps L (Hopf, The partial differential equation
//     u_t + u u_x = mu u_xx, Comm. Pure Appl. Math. 3 (1950) 201–230), so the
//     front of affine branches on the well solves R = ± eps L.
//   - Mollifier is the combined function, whose maxima and minima may be nested,
//     convolved in space with the kernel proportional to (1 - |y|²/δ²)⁴ on the
//     ball |y| < δ = width eps. It does not depend on the order of the branches,
//     equals an affine branch wherever the ball meets no other, and has a finite
//     energy at the tip of a cone.
//   - Wall is the one-dimensional transition between two affine functions with
//     gradients p⁻ and p⁺, q = p⁺ - p⁻, ν = q/|q|:
//     ∇u = p⁻ + S(t/eps) q at the signed distance t from the wall. Optimal
//     takes S from the first integral |R(p⁻ + s q)| = eps |L(q ⊗ ν)| ds/dt, for
//     which both parts of the energy are equal at every point (Modica and
//     Mortola, Un esempio di Γ-convergenza, Boll. Un. Mat. Ital. B 14 (1977)
//     285–299); any other S may be given.
//
// # Quadrature
//
// The domain is a box of parameters and a map of it. Where fibres along the
// parameter with the most crossings have the same branches in the same order, or
// begin and end on the same two and come back to none, as a grid of them shows,
// the integral is one over these fibres: no crease is tangent to one, and none
// leaves the domain through one of their ends. Otherwise, or where half of
// the budget does not do, it is split into shares w_k, which add up to 1, one for
// each parameter: the share of parameter k is integrated along fibres in its
// direction, where
//
//	w_k = W_k/Σ W_j,  W_j = (b_j V_j)³,
//
// V_j is the variance of the derivative by parameter j among the branches near
// to the sharp function, and b_j = 4 t (1 - t), t in [0, 1] along the range of
// the parameter. So a share vanishes to high order where its fibres become
// tangent to a crease, and where a crease leaves the box through one of its two
// faces; otherwise both were singularities of the outer integrands. A partition
// of unity by squared components of the normal alone leaves the first at order
// one half. A small constant in one of the W keeps the shares smooth where the
// branches do not differ, and away from the crease gives all to one direction.
//
// On a fibre the crossings of branches are located, and the fibre is cut at them
// and at multiples of the width eps/|d(u_i - u_j)/ds| of the layer; on the panels
// Gauss–Kronrod pairs with global bisection are used. The ranges of the other
// parameters are cut where the sequence of crossings on the fibre changes, at
// tangents, at edges and where creases meet, and bisected from there. Where all
// branches are affine and the domain is a box, these places are the vertices of the
// arrangement of the planes in which two branches agree and of the faces, as far as
// they are on the crease. Otherwise they are searched for: between 16 pieces of a
// range, so that what begins and ends within one of them is missed. The number
// of nodes grows like log(1/eps), where a grid would need a power of 1/eps. The
// sharp energy is integrated with the same shares of the jumps: a crossing with
// direction t_k = ∂x/∂s_k of the fibre has the area |det ∂x/∂s|/|ν·t_k|.
//
// Shares are integrated with falling tolerances until that asked for is met, or until
// the next stage would cost more than the budget; or more than a tenth of it,
// where the estimate is 2e-5 of the energy or less. What is returned is the last
// stage that was finished.
//
// Energies are measured by at least 1e-8 of a natural one, the volume times R²/2
// for gradients half-way between two branches, so that those which are as good
// as 0 are not computed to digits of their own. Beside the budget of evaluations
// there may be one of work, counted in evaluations of branches, which bounds the
// time it takes and is the same on any machine.
//
// The error of a panel is estimated from the distance of the two rules of a
// pair, as in QUADPACK (Piessens, de Doncker-Kapenga, Überhuber, Kahaner, 1983)
// but no more than twice that distance, with the errors of the inner integrals.
// Every other stage takes the outer parameters in the opposite order and looks
// for changes between other pieces, so that what one stage misses is not missed by
// the next in the same way. From the second stage on the estimate is twice the
// distance from the stage before where that is less, but no less than a thirtieth
// of the sum of the panels' estimates; where the distance is more than both stages
// have estimated, one of them has missed something, and it is twice the distance,
// however small the estimates are (common practice, no source). It is an estimate
// and no enclosure; the first stage by itself has no such control.
// Crossings are looked for in 48 pieces of a fibre, and where the distance of
// two branches has a minimum; what lies within one piece otherwise is missed by
// the sharp energy. The energy of the approximation is only found faster where
// the crossings are known.
//
// An energy is called infinite where the contributions of panels that shrink to
// a place do not fall: over twelve halvings by less than a factor of two. A
// function with a logarithmic or stronger divergence is recognised; a
// convergent integral of |x|^a with a < -0.92 would be, too.
//
// # Convolution
//
// The derivatives of a mollified function are ρ*∇u and ∇ρ*∇u, so that gradients
// of branches are all that is needed. Which branches may be active in the ball
// follows from their values and gradients at its centre and at the ends of its
// axes; the bound that is used for branches that are not affine is one for
// quadratic ones, times 3/2, and no enclosure.
//
//   - Branches that are all affine, with differences of gradients that span r
//     dimensions, are convolved in these alone, with the kernel proportional to
//     (1 - |y|²)^(4+(n-r)/2), along lines in closed form. For r = 1, as at a wall,
//     that is all; for r = 2 the lines are summed by Gauss rules between the lines
//     through triple points and the ends of creases.
//   - One branch is integrated by a product rule on the ball.
//   - Of two branches, one is on the ball, and to it the difference of both is
//     added on the cap where the other is active: along lines across the crease
//     from the place where it is crossed, over a disc that ends where the crease
//     leaves the ball.
//   - Otherwise lines are cut where two branches are equal, and summed by Gauss
//     rules between those at which the order of branches on a line changes. Where
//     a branch is not smooth, found by the growth of its second derivatives, the
//     lines are rays from that place, or from that axis in space.
//
// One jet in 37 is computed again by finer rules; the difference of the densities
// goes into the error of the energy, twice. The tolerance of the integrals is
// 1e-8 in the plane, and 1e-6 (affine branches), 1e-5 (two) or 1e-4 in space, where it would
// otherwise follow the errors of the jets; across a single wall it is that of the
// other approximations.
//
// # Limit and rate
//
// The rate is the slope of log|gap| against log eps by least squares over the
// energies whose gap is well above the error of the integrals, with its
// standard error. Where the gap at the smallest eps is not above that error
// there is no rate: the gap is below rounding. The limit is extrapolated by a
// polynomial in eps (Richardson; Neville's scheme), with the distance of the
// last two orders as the estimate of its error; more where the same estimate from
// all energies but the last would have been wrong.
//
// All of it is floating-point arithmetic and proves nothing.
package limit
