// Creaseproof decides claims about entropy fields and integrates the energy of
// creases, the surfaces on which a gradient jumps.
//
//	creaseproof check [CASE...]    decide every claim
//	creaseproof energy [CASE...]   integrate over every surface
//	creaseproof limit [CASE...]    energies of smooth approximations as eps falls
//	creaseproof audit EVIDENCE...  verify what --evidence has written
//	creaseproof cases list         the built-in cases
//	creaseproof cases show NAME    the text of one
//	creaseproof cases new FILE     a case to start from
//
// A CASE is a file, a folder (all files *.toml in it), the name of a built-in
// case, or - for standard input; without one, every built-in case is taken.
// `creaseproof COMMAND --help` shows an example of each command.
//
// Results are on standard output; with --json they are one document. Mistakes
// in a file, and progress, are on standard error.
//
// The exit status is 0 where every expectation of the files is met, 1 where
// one is not, 2 where the input or the call is wrong, and 3 where the run was
// interrupted; what was decided by then is printed.
package main
