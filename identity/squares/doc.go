// Package squares proves polynomial inequalities by completing squares with
// symbolic coefficients.
//
// A polynomial p that is quadratic in an indeterminate v, or in a power of it,
//
//	p = a v² + b v + c,   4 a p = (2 a v + b)² + (4 a c - b²),
//
// is non-negative where a > 0 and 4 a c - b² >= 0. The rest has one
// indeterminate less and is treated in the same way; what is left in the end
// must show its sign term by term from the assumed signs of its
// indeterminates (even powers, powers of positive constants). Where a vanishes
// the inequality follows by continuity: a is a non-zero polynomial with
// non-negative terms, so its zeros are nowhere dense.
//
// A proof is a list of terms weight·base², the weights visibly non-negative.
// It is multiplied out in exact arithmetic before it is returned. Where no
// proof is found, the polynomials that were left over are returned with the
// minimisers that led to them: a point where such a rest is negative, with
// these minimisers put in, is a counterexample to the inequality.
package squares
