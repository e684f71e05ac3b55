// Package gram searches for exact sum-of-squares certificates of polynomial
// inequalities.
//
// A polynomial p is to be shown non-negative where g_i >= 0 and h_k = 0. With
// products m_S = Π_{i in S} g_i and vectors b_S of monomials, one looks for
// positive semidefinite matrices Q_S, and where that is needed for a multiplier
// M = b' Q_M b, such that
//
//	M p = Σ_S m_S · b_S' Q_S b_S   modulo the h_k,
//
// a semidefinite program (Parrilo 2003; Putinar 1993 for the products with one
// g_i). The monomials are bounded by the degrees of p, by every grading for
// which p is homogeneous, and by removing those whose square can be cancelled
// by nothing (Reznick 1978 for the Newton polytope that this stands for). Sign
// symmetries of p split the matrices into blocks (Gatermann and Parrilo 2004).
//
// # Exactness
//
// Sharp inequalities touch zero, so every feasible Q is singular and rounding a
// numerical solution fails. Hence facial reduction before rounding: at a zero z
// of p with m_S(z) > 0 the vector b_S(z) lies in the kernel of Q_S. Zeros are
// given exactly by the caller, or found numerically, many at a time; the span
// of the vectors they give, and the kernel of the numerical solution at the
// analytic centre, are brought to reduced row echelon form, whose entries are
// recognised as rationals. The matrices are restricted to the complement and
// the program is solved again, until the solution is well inside the cone.
// Then it is rounded, projected on the linear equations in exact arithmetic,
// and split by an exact LDLᵀ (Peyrl and Parrilo 2008; Monniaux and Corbineau
// 2011; Kaltofen, Li, Yang and Zhi 2012).
//
// # What is guaranteed
//
// Nothing here needs to be believed: restrictions and roundings are guesses,
// and a proof is returned only after its identity was multiplied out. Where
// none is found, nothing follows.
package gram
