// Package casefile reads a case: one TOML file that declares a space of jets,
// named formulas, a model, entropy fields, claims about them and surfaces on
// which a gradient jumps.
//
// The package settles the shape of the file and nothing else. A formula stays
// text, together with the line and column at which it stands in the file; a
// number stays the literal that was written, so that 0.1 is one tenth and not
// a float near it. What the formulas mean is for the reader of the File.
//
// Whatever the input, Decode returns a File or an error, never both. The
// error is a list of problems, each with its place, the line it stands on and
// what to write instead; unknown keys are among them, with the nearest known
// key. The list is short (at most ten problems and at most 2500 bytes of
// text) so that a broken file does not flood a terminal.
package casefile
