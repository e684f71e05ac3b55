// Package identity decides claims about entropy fields.
//
// Claims that are equations, spans, entropies and integrability statements are
// decided by package exact. An inequality A <= B is decided here. Its gap B - A
// is brought to a polynomial that is to be non-negative; then, in this order,
//
//   - squares are completed with symbolic coefficients (package squares), which
//     proves many Young-type bounds and refutes many false ones, however thin
//     the set on which they fail;
//   - even powers and products are read off the formula as it is written, before a
//     long gap is expanded into squares, and targets that divide an assumption are
//     recognised;
//   - a sum-of-squares certificate is searched for (package gram), roots are
//     squared away, and what is found is checked by package certificate, which
//     imports none of the search;
//   - random jets are drawn (package sample) and the margin is minimised
//     (package adversary); where nothing is found, Newton's method in rationals of
//     many digits runs along the boundary of the assumptions, which meets
//     violations far below the resolution of floating point.
//
// Up to a divergence, minors and terms integrated by parts are added to the gap.
//
// # Verdicts
//
// Proved and Refuted rest on exact arithmetic, or on enclosures with outward
// rounding at a rational point, and on nothing else: floating point proposes
// points and matrices, and settles no sign. Supported counts what was tried.
// Open gives the reason. Budgets count work, so the same seed gives the same
// verdict on any machine and any number of cores; a greater effort tries all
// that a smaller one tries, and can only turn Supported or Open into Proved or
// Refuted.
package identity
