// Package run decides the claims, integrates over the surfaces and evaluates the
// limits of cases, in parallel, and writes down the results in the order of the
// files.
//
// What is proved and what is not is settled by packages identity and creases
// alone; this package adds nothing to a verdict but two reasons to be open: that
// the time given was over, and that the decision failed inside the program.
//
// CheckDocument, EnergyDocument and LimitDocument are the documents of results
// that `creaseproof check --json`, `creaseproof energy --json` and
// `creaseproof limit --json` print.
package run
