// Package statement writes decided claims as statements for export: formulas as
// trees in the jets, as they stand in the case and not multiplied out, with
// total derivatives carried out by the rules of calculus.
//
// An identity becomes its two sides; an equation up to a divergence becomes its
// Euler expression, which has to vanish; a span becomes one equation for each
// component; an inequality becomes left <= right, with the certificate of its
// reduced form. Where the sides cannot be written in its variables it is the
// reduced form, 0 <= target, with a sentence on how that comes from the gap: on
// wells that determine no derivative, with most roots at a jump, and where a
// denominator that is no monomial has no visible sign. A denominator that may
// vanish is assumed not to. Where the frame angle was removed, the sides are those
// at angle 0, in the derivatives along the axes.
//
// An inequality up to a divergence becomes left <= right + N at every jet, and
// the identity N = D_1 P_1 + ... + D_n P_n for the potential P. That the integral
// of such an N is a boundary term is said beside them and not proved in the file.
//
// For the best values of a constant there is one inequality for each end, one
// statement that the inequality fails beyond it, and that all assumptions hold at
// the jet that shows it, where that jet is rational, and the sign of the slope on a side without an end.
//
// Kernels (roots, cosine and sine of an angle, exponentials) become variables;
// what holds between them is stated beside the equations, and their total
// derivatives are those of package jet. Everything else is left to the prover
// that reads the file.
package statement
