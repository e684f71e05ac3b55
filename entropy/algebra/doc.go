// Package algebra computes exactly with rational numbers, polynomials in any
// number of indeterminates and rational functions.
//
// # Rational numbers
//
// Rat is an element of Q: a quotient of two int64 in lowest terms as long as it
// fits, a big.Rat beyond. The overflow of every machine operation is checked.
//
// # Polynomials
//
// Poly is an element of Q[x1, x2, ...], a finite sum of coefficients times
// monomials. The terms are sorted in graded lexicographic order and none has
// coefficient zero, so that two polynomials are equal exactly when their
// representations are; deciding equality and zero is exact and immediate.
// Exponents are packed into machine words, in fields as wide as the total degree
// needs.
//
// # Rational functions
//
// Fraction is an element of Q(x1, x2, ...), a polynomial over a product of
// powers of polynomials. Sums are taken over the least common multiple of the
// denominators as they are written, and the numerator is divided by the bases of
// the denominator where that goes without remainder. A fraction is zero exactly
// when its numerator is, which does not depend on how far it has been reduced.
//
// # What is guaranteed
//
// No operation rounds. Work and size are bounded by the constants MaxTerms,
// MaxProducts, MaxExponent and MaxBits; an operation that would go beyond gives a
// poisoned value, from which only poisoned values follow, and whose Err says why.
// A polynomial lost to a limit is never zero and never equal to another, so a
// limit cannot prove anything. Neither does a false of a predicate prove the
// contrary unless Err is nil.
package algebra
