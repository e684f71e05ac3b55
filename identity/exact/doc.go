// Package exact makes a claim exact and decides what exact arithmetic decides.
//
// A Problem evaluates the formulas of a claim in a ring of jets (package jet),
// on the jets that the claim is about: all of them, those of a restriction or a
// closed form, those on the zeros of equations and of their total derivatives,
// or the traces of admissible jumps. Then
//
//   - A = B holds where the difference is zero in normal form, or modulo the
//     equations; it fails at a rational point where the difference is certainly
//     not zero;
//   - A = B up to a divergence is decided by the Euler operator;
//   - constants are found by linear algebra over the rational functions of the
//     other constants;
//   - entropies are decided by exact division by the residual, spans by linear
//     algebra over the trigonometric polynomials, integrability by Hölder's
//     inequality on monomials.
//
// For an inequality it gives the gap, the polynomial inequality on a set given
// by polynomials that the gap reduces to (what a certificate is about), and
// exact tests of counterexamples. It contains no search for proofs, no sampling
// and no floating-point decision, so that a recorded proof or witness can be
// verified with this package and package certificate alone.
package exact
