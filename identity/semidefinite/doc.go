// Package semidefinite solves semidefinite programs in floating point.
//
// The primal and the dual program are
//
//	(P)  minimise <C, X> + c'z    subject to  <A_i, X> + (F z)_i = b_i,  X ⪰ 0,
//	(D)  maximise b'y             subject to  C - Σ y_i A_i = S ⪰ 0,  F'y = c,
//
// where X, S, C and A_i are symmetric and block diagonal, <A, X> = trace(A X),
// a block is dense or diagonal, and the free variables z are optional. The
// matrices C and A_i are lists of entries. Programs that come from sums of
// squares are of this form: X is the Gram matrix of a polynomial and each row
// matches one coefficient.
//
// # Method
//
// An infeasible primal–dual interior-point method follows the central path
// X S = mu I with the direction of Helmberg, Rendl, Vanderbei and Wolkowicz
// (SIAM J. Optim. 6, 1996), Kojima, Shindoh and Hara (SIAM J. Optim. 7, 1997)
// and Monteiro (SIAM J. Optim. 7, 1997),
//
//	dX = mu S⁻¹ - X - sym(X dS S⁻¹),  dS = R - Σ dy_i A_i,  R = C - Σ y_i A_i - S,
//
// and with the predictor and corrector of Mehrotra (SIAM J. Optim. 2, 1992).
// Eliminating dX and dS leaves the Schur complement system
//
//	M dy = r,  M_ij = <A_i, X A_j S⁻¹>,
//
// which is positive definite where the A_i are independent. M is formed from
// the entries of the A_i, with the choice between a dense and an entrywise
// product made for each row from the counts of entries, after Fujisawa, Kojima
// and Nakata (Math. Programming 79, 1997). The cost of an iteration is
// O(m² · entries + m³ + n³) and a dense product of order n³ for each row is
// made only for rows that are dense themselves. M is factorised by Cholesky; a
// factorisation that breaks down is repeated with a small multiple of the
// diagonal added, and the solution refined against M. The starting point is
// that of Toh, Todd and Tütüncü (Optim. Methods Softw. 11, 1999). Rows are
// scaled to norm one, b and C to norm at most one. Step lengths are exact: they
// come from the least eigenvalue of L⁻¹ dX L⁻ᵀ, X = L Lᵀ.
//
// With free variables the system is
//
//	M dy + F dz = r,  F'dy = s.
//
// A multiple of F times the second equation is added to the first, which
// changes nothing and makes the leading block definite also where a row has
// free variables only; then dz is found from the Schur complement of that
// block. Free variables are not split into differences.
//
// Rows that are linear combinations of others are found beforehand by a
// pivoted Cholesky factorisation of their Gram matrix. They are left out where
// they are consistent, and otherwise give a ray at once.
//
// Where C and c are zero, a primal feasible point is optimal: the dual iterate is
// then a direction of feasible points and is scaled until the gap is within its
// tolerance, so that the run ends with feasibility. X is only as close to the
// central path as it was then; what is asked for more should be asked with a
// smaller tolerance, or in the mode AnalyticCentre.
//
// # Rays
//
// A dual ray is y with b'y = 1, F'y = 0 and -Σ y_i A_i ⪰ -eta I. Every feasible
// X then satisfies 1 = b'y <= eta trace X: with eta = 0 there is none, and with
// eta > 0 there is none of trace less than 1/eta (F'y = 0 holds to within the
// same tolerance). A primal ray is X ⪰ 0 and z with <C, X> + c'z = -1, and
// <A_i, X> + (F z)_i of norm at most eta: then every feasible y of the dual
// has norm at least 1/eta. Programs that are weakly infeasible have no ray;
// they end as Stalled or with a ray of small positive eta.
//
// # Analytic centre
//
// In the mode AnalyticCentre the objective is replaced by zero and mu is kept
// at one, so that the iterates converge to
//
//	maximise log det X  subject to  <A_i, X> + (F z)_i = b_i,
//
// by the same direction. This is the analytic centre of the feasible set if
// that set is bounded and has a positive definite point. If it is unbounded
// there is no centre, and the run ends as DualInfeasible (with a recession
// direction as ray), Stalled or IterationLimit. If the feasible set lies in a
// proper face of the cone, as the set of Gram matrices of a polynomial does that has
// real zeros, the iterates converge to a point of that face whose rank is the
// largest in practice: eigenvalues on the complement of the face decrease with
// the residual, and those on the face stay centred. There is no central point then, and such a
// run ends as NearOptimal, or Stalled where rounding prevails; NumericalKernel then separates the
// two groups of eigenvalues and reports the gap between them.
//
// # What is not claimed
//
// Nothing in this package is rigorous. All results are floating-point
// proposals: solutions, kernels and rays alike. Whoever decides something from
// them must do so in exact arithmetic. For equal input on one machine the
// results are equal.
//
// ReadSDPA and WriteSDPA exchange programs in the sparse SDPA format of the
// collection SDPLIB (Borchers, Optim. Methods Softw. 11, 1999), which other
// solvers, CSDP (Borchers, ibid.) among them, read.
package semidefinite
