// Package statement writes decided claims as statements for export: formulas as
// trees in the jets, as they stand in the case and not multiplied out, with
// total derivatives carried out by the rules of calculus.
//
// An identity becomes its two sides; an equation up to a divergence becomes its
// Euler expression, which has to vanish; a span becomes one equation for each
// component; an inequality becomes its reduced form with its certificate.
//
// Kernels (roots, cosine and sine of an angle, exponentials) become variables;
// what holds between them is stated beside the equations, and their total
// derivatives are those of package jet. Everything else is left to the prover
// that reads the file.
package statement
