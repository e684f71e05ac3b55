// Package run decides the claims and integrates over the surfaces of cases, in
// parallel, and writes down the results in the order of the files.
//
// What is proved and what is not is settled by package identity alone; this
// package adds nothing to a verdict but two reasons to be open: that the time
// given was over, and that the decision failed inside the program.
//
// CheckDocument and EnergyDocument are the documents of results that
// `creaseproof check --json` and `creaseproof energy --json` print.
package run
