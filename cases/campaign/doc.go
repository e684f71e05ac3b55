// Package campaign holds tests only: they try to get a false claim proved.
//
// Every true inequality and identity of the built-in cases is changed in many
// small ways: a coefficient by a relative 1e-6 to 1, a sign, an exponent, a
// dropped term, in the claim itself or in the named formulas and fields that it
// uses. Each mutant is decided by the program, from the text of a case file,
// and on its own by a sampler in exact rational arithmetic.
//
// The sampler shares the parser with the program and nothing else. It takes an
// unknown as a truncated Taylor polynomial with rational coefficients, so that a
// formula becomes a truncated power series and a total derivative, along a
// coordinate or an axis of the frame, is the derivative of a series; the first
// variation of a formula is the derivative by one more variable. Roots that are
// irrational are enclosed between rationals closer than 2^-80; a sign is taken only
// where the enclosure has one.
//
// A mutant counts as false where the sampler finds a point at which it fails.
// The points are random ones of several sizes, and jets of equality of the
// original claim, which are found by minimising its gap exactly along one
// variable after the other: a change that is negative to first order at such
// a jet is false by construction. A proved mutant is evaluated at thousands of
// points, and a violation at any of them is an error.
package campaign
