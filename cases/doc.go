// Package cases makes case files work: it gives the formulas of a casefile.File
// their meaning. Parse turns one file into a Case: an entropy.Setting, in which
// every formula has been read in the scope of the names it may use, and one
// claim.Claim for each claim. A key of a claim that would be without effect on
// it is an error rather than ignored.
//
// Errors about a file are source.Errors, with the place, the line it stands on
// and what to write instead.
//
// Package cases/run decides the claims and integrates over the surfaces.
package cases
