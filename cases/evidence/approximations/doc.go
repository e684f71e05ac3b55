// Package approximations writes down the energies of a smooth approximation at
// falling eps, so that another person can repeat the computation: one JSON file
// for each limit of a case and choice of its values, which holds the case itself.
//
// All of it is floating-point arithmetic. It is no proof, and an audit makes it
// none: it shows that the numbers are those that the computation gives.
//
// # The audit
//
// Audit reads the case in the file again, makes the approximation from it, and
// integrates its energy anew at the values and the eps that the file names.
//
//   - Energy, compression, bending and eps ∫K at each eps agree to the sum of two
//     errors, the one in the file and the one computed here, which are alike (see
//     package agree); so does the jump energy, to which rounding of 1e-14 is added.
//   - What follows from these numbers (gap, rate, extrapolated limit, equipartition,
//     outcome, reason) is what follows from those in the file, but for rounding.
//   - The outcome is also the one that the numbers computed here have.
//
// Where the run was interrupted the file holds the eps that were done, is marked
// unfinished, and has no outcome.
package approximations
