// Package export writes proofs in forms that people outside this program can
// read and check: TeX for a paper, and files for the Coq proof assistant that
// need nothing but Coq's standard library.
//
// # What a Coq file says
//
// A Statement is an Inequality with its certificate, an Identity, or one of the
// two that follow. Each becomes one theorem over the real numbers. An inequality reads
//
//	forall x y eps : R,  0 < eps -> g(x, y) = 0 -> 0 <= target
//
// with the assumptions and equations of the claim as premises, and, where the
// caller gives both sides as trees, `left <= right` in place of `0 <= target`.
// An identity reads `left = right` under its relations and under the premise
// that its denominators do not vanish; several equations form one conjunction.
// For the best values of a constant a Group holds an Inequality for each end and
// a Beyond, which says that the sides compare the other way for all values beyond
// the end at a point, and that the assumptions hold at the point.
// Trees are printed as they are given, not normalised, so that the theorem can
// be compared with the claim by eye.
//
// # How it is proved
//
// The identity of the certificate is multiplied by a positive integer that
// clears all denominators, and is then left to Coq's `ring`. That the right
// side is nonnegative follows term by term from lemmas proved in the same file.
// Identities between trees are left to `field`, after the relations have been
// added with cofactors found here by division.
//
// A multiplier M > 0 is divided out. Where M may vanish, the file contains a
// proof that continuity removes it. From a point x that meets the assumptions
// go along the line x + t (y - x) to a fixed rational point y with M(y) ≠ 0
// that meets the bounds which are not strict. For small t > 0 the strict
// assumptions hold since polynomials are continuous, and the bounds hold since
// intervals are convex; hence M >= 0 and M p >= 0 there. As a function of t, M is
// a polynomial with M ≠ 0 at t = 1, so it has no zeros for small t > 0, and so
// p >= 0 for small t > 0 and, in the limit, at x. Variables that occur in
// equations or in other assumptions are kept fixed; where M(y) then depends on
// them, the export fails with ErrUnsupported.
//
// A squaring, x - y >= 0 from x >= 0 and x² - y² >= 0, becomes a lemma on the
// squares, proved by the certificate inside, and a theorem that rests on it. Roots
// are variables r with r² = a and r >= 0 as premises.
//
// # What is rigorous
//
// The writer verifies nothing that Coq verifies: a wrong certificate gives a
// file that coqc rejects. What a reader has to compare is the statement of the
// theorem with the claim; every name that had to be changed is listed beside it.
// The files state no axioms and leave no proof unfinished; Coq's real numbers
// are those of its standard library. Output depends on the input alone.
package export
