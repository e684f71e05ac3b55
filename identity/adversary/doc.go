// Package adversary looks for a counterexample of an inequality by minimising
// its margin from many starts, and proves what it finds: a witness is returned
// only where the caller's exact check accepts it.
//
// The margin of an inequality A ≤ B is the gap B - A divided by the sum of the
// absolute values of its expanded monomials. It lies in [-1, 1], is negative
// where the inequality fails, and its rounding error in double precision is a
// small multiple of 1e-16 whatever the size of the point. So a violation of
// margin -1e-12 is visible, and a true sharp bound, whose descents end at ±2e-16,
// is told from a false one by exact arithmetic alone.
//
// # Method
//
// From each start:
//
//   - a descent by BFGS (Nocedal and Wright, Numerical Optimization, chapter 6),
//     in variables scaled by the start; on every fourth start the covariance
//     matrix adaptation evolution strategy instead, which needs no derivative
//     (Krause, Arbonès and Igel, NIPS 2016), both from gonum/optimize;
//   - Newton steps, with the Hessian from differences of the gradient and
//     |eigenvalues| in its place, which settle on the floor of a thin valley to
//     nearly full precision (Nocedal and Wright, section 3.4);
//   - snapping: one coordinate after the other is set to a simple rational
//     (0, then ±1, small integers and halves, at last continued-fraction
//     approximations of its value), the others being optimised again each time,
//     and the setting is kept while the margin stays as negative as a tenth of
//     the best. A violation around a manifold of codimension k then leaves k
//     coordinates to be approximated and the others small;
//   - roundings of the whole point with growing denominators, with the optional
//     exact minimisation in one coordinate, where snapping has not led to an
//     accepted point;
//   - simplification of the witness, each step checked exactly.
//
// Floating point only proposes. Nothing here shows that an inequality holds.
//
// # Reproducibility
//
// Starts run in batches of fixed size, budgets count evaluations, and of several
// successes in a batch the one of the lowest index is taken. The result depends on
// the problem and on the options except Jobs.
package adversary
