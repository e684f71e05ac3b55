// Package certificate checks proofs of polynomial inequalities by finite exact
// arithmetic. It imports the standard library only, and none of the search that
// finds such proofs: what it accepts follows from this package alone.
//
// A Claim says: for all real values of the variables with g_i > 0 (or >= 0) and
// h_k = 0, the target p is >= 0. A Certificate proves it by an identity between
// polynomials with rational coefficients,
//
//	M p = Σ w · g_a g_b … · q²  +  Σ t_k h_k,      M = Σ w · g_a g_b … · q²,
//
// in which every weight w is a positive rational. Where all g_i >= 0 and all
// h_k = 0 the right side is >= 0, and so is M; hence p >= 0 wherever M > 0.
//
// If some term of M is a positive constant times a product of strictly positive
// g_i, that is everywhere. Otherwise p >= 0 follows, by continuity, on the closure of
// the set where M does not vanish, and Check makes sure that this is the whole
// set of the claim: it asks that
//
//   - every g_i >= 0 that is not strict bounds one variable, and the bounds
//     of each variable leave it an interval of positive length;
//   - every h_k is c² + s² - 1 for variables c, s of its own, not bounded;
//   - M is not zero once every s² is written as 1 - c².
//
// The set of the claim is then an open part of a product of intervals, lines
// and circles, on which a polynomial that is not identically zero vanishes on
// a set without interior points.
//
// The second way out, where these do not hold: one of the squares on the right
// is w · p^2k, without factors. Where M vanishes the identity then says
// 0 >= p^2k, so p = 0 there. This is the form of the Positivstellensatz for
// p >= 0 (Stengle, Mathematische Annalen 207 (1974) 87).
//
// A certificate may also be a squaring: x >= y follows from x² >= y² where x is
// a sum Σ w · g_a g_b … · q², which is how roots are removed.
//
// Numbers are written in decimal digits without leading zeros, as "-3/2", and
// each monomial of a polynomial stands once. The work is bounded: what takes
// more than some seconds, or some hundred megabytes, is refused.
package certificate
