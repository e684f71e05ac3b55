// Package adaptive integrates functions of one variable to a tolerance and
// says how far off the value may be. Integrals over surfaces nest it.
//
// # Method
//
// On a plain interval nested Gauss–Kronrod pairs (7-15, 10-21, 15-31) are used
// with global adaptive bisection, worst panel first, as in Piessens, de
// Doncker-Kapenga, Überhuber, Kahaner, QUADPACK (1983). Where the Legendre
// coefficients of a panel fall geometrically a pair of higher order is tried
// before the panel is halved. Where bisection clusters at an end of the
// interval the end panel [a, a+h] is integrated
//
//   - after the substitution s = a + h v², which turns half-integer powers of
//     the distance from the end into polynomials and never comes near the end,
//     and, if that does not help,
//   - by the double exponential rule of Takahasi and Mori (1974), the levels
//     nested, which copes with every integrable power and with logarithms.
//
// On a period the trapezoidal rule is doubled until it settles; its nodes are
// nested. If it does not settle geometrically the integral falls back to the
// bisection. See Trefethen and Weideman, The exponentially convergent
// trapezoidal rule, SIAM Review 56 (2014).
//
// # What the error is
//
// Error is an estimate, not an enclosure: a function can hide from any finite
// set of nodes. It is meant to be at least the true error. For a Gauss–Kronrod
// pair it is the distance of the two rules, although the Kronrod rule is far
// better than that, reduced only where the measured geometric decay of the
// Legendre coefficients justifies it, and enlarged tenfold and bounded below
// by the last coefficients where they do not fall geometrically, that is,
// where the pair might agree by accident. For the other rules it is the
// distance of the last two levels. Aliasing of the trapezoidal rule is watched
// for by comparing its trigonometric interpolant with the function at nodes
// off the grid. A kink between the outermost node of a panel and its end is seen
// by no rule; therefore neighbouring panels have to extrapolate to the same
// value at their common end, and at the two ends of the interval the
// extrapolation has to meet the integrand, before the result is accepted; a
// misfit becomes an estimate and the panel is cut. To this are added the uncertainties that the integrand states
// of its own values (rounding, or the error of an inner integral), integrated,
// and near an end the effect of rounding on the distance from it.
//
// Bisection ends early where the estimate is small but does not fall any more:
// the integrand is then noisier than it says, and Converged is false.
//
// Sums are compensated (Neumaier 1974). Everything is sequential, so results
// do not depend on the number of cores.
package adaptive
