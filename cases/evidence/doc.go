// Package evidence writes down how the verdict on a claim is known, so that
// another person can verify it: one JSON file for each decided claim, which holds
// the case itself, and what the verdict rests on. Energies and approximations have
// files of their own, see packages energies and approximations.
//
// Audit verifies such a file. It reads the case again and makes the claim exact
// again (package identity/exact), and then
//
//   - for an inequality proved by a certificate, requires that the polynomial
//     inequality of the file is the one that the claim reduces to, and has
//     package identity/certificate check the certificate;
//   - for a counterexample, puts the point into the claim and settles the
//     assumptions and the failure in exact arithmetic or with outward rounding;
//   - for anything else, whose evidence is the exact computation itself,
//     computes it once more and compares.
//
// What describes a proof in words is not verified: the method and the details
// of an inequality, and when equality holds in it.
//
// None of the search for proofs and counterexamples is used, nor linked.
//
// A digest guards a file against accidental change; no verdict rests on it.
package evidence
