// Package cases makes case files work: it gives the formulas of a casefile.File
// their meaning, decides the claims, and writes down the results.
//
// Parse turns one file into a Case: an entropy.Setting, in which every formula
// has been read in the scope of the names it may use, and one identity.Claim
// for each claim. A key of a claim that would be without effect on it is an
// error rather than ignored.
//
// Check decides the claims of a list of cases in parallel and hands the
// results on in the order of the files. What is proved and what is not is
// settled by package identity alone; this package adds nothing to a verdict
// but two reasons to be open: that the time given was over, and that the
// decision failed inside the program.
//
// Energy integrates over the surfaces in the same manner, by package
// cases/creases.
//
// CheckDocument and EnergyDocument are the documents of results that
// `creaseproof check --json` and `creaseproof energy --json` print.
//
// Errors about a file are source.Errors, with the place, the line it stands on
// and what to write instead.
package cases
