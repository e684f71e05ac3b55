// Package energies writes down how the energy of a surface is known, so that
// another person can verify it: one JSON file for each surface and choice of its
// values, which holds the case itself.
//
// What the file states rests on one of these kinds of evidence:
//
//   - "enclosure": an interval that contains the energy, by arithmetic with
//     outward rounding, from which the verdict follows;
//   - "exact": branches that are affine, with the energy in exact arithmetic;
//   - "numerical": quadrature in floating point. Such a verdict is supported or
//     open, and no proof of anything.
//
// # The audit
//
// Audit reads the case in the file again, makes the surface from it, and computes
// all of it anew at the values that the file names. What is required:
//
//   - The enclosure in the file contains the one computed here, and is at most
//     three times as wide: so it contains the energy because of what is computed
//     here, not because it says so. Verdict, expectation and reason of the file
//     are those that follow from the enclosure in the file. Another machine may
//     compute an enclosure that sticks out by its last digit; it then refuses the
//     file, which has to be written anew.
//   - What is exact (the energy as a rational number, the radicands of the area,
//     the claimed energy, rounded once) is the same, and so are all numbers of a
//     surface of exact energy.
//   - Of what is floating point (energy, error and area of surfaces that are not
//     exact) the energy agrees to the sum of the two errors, the one in the file
//     and the one computed here, which are alike (see package agree); and the area
//     agrees to 1e-6 and the relative error of the energy. Numbers in a
//     reason agree likewise, or to a unit of the last digit that is written.
//     That is a repetition of a computation and shows that it was done; it does
//     not prove its result.
//   - Kind and verdict are what all that gives.
//
// The name of the case, comments in its text and anything in it that the surface
// does not depend on are as free as they are in the case itself.
//
// None of the search for proofs and counterexamples is used, nor linked.
package energies
