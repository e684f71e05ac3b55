// Package formula reads and prints formulas and claims as mathematics is
// written on one line.
//
// # Grammar
//
//	claim    = expr ( "=" | "<=" | ">=" ) expr
//	         | FIELD "in" "L" "^" exponent
//	         | "entropy" "(" FIELD ")"
//	         | "span" "(" FIELD { "," FIELD } ")" "=" FIELD .
//	expr     = [ "+" | "-" ] term { ( "+" | "-" ) term } .
//	term     = jx { ( "*" | "/" | "·" ) jx } .
//	jx       = power { power } .
//	power    = primary [ ( "." | "·" ) "nu" ] [ "^" exponent ] .
//	exponent = [ "+" | "-" ] NUM | "(" ratio ")" | "{" ratio "}" | SUPERSCRIPTS .
//	ratio    = [ "-" ] NUM [ "/" [ "-" ] NUM ] .
//	primary  = NUM
//	         | NAME [ "_" sub ]
//	         | FIELD [ "(" expr ")" ] [ "_" sub ]
//	         | "nu" "_" sub
//	         | "d" "_" sub "(" expr ")"
//	         | FUNCTION "(" expr { "," expr } ")"
//	         | "(" expr ")" | "[" expr "]" | "{" expr "}"
//	         | "\frac" "{" expr "}" "{" expr "}" | "\sqrt" "{" expr "}" | "√" "(" expr ")" .
//	sub      = WORD | "{" WORD { WORD } "}" .
//	NUM      = DIGITS [ "." DIGITS ] [ ( "e" | "E" ) [ "+" | "-" ] DIGITS ] .
//	NAME     = a letter, then letters and digits; letters are ASCII or Greek .
//	FUNCTION = "sin" | "cos" | "tan" | "sinh" | "cosh" | "tanh" | "exp" | "log" | "sqrt"
//	         | "erf" | "abs" | "norm" | "div" | "grad" | "euler" | "sup" .
//
// Factors side by side bind tighter than * and /, and * and / are applied from
// left to right. A Greek letter, its ASCII name and its TeX command are one
// name; epsilon is "eps" in all its forms. The TeX commands for brackets,
// spacing, relations, functions, \cdot, \times, \mathit, \mathrm and
// \operatorname are read too. −, ×, ⋅, ≤, ≥, ∈ and superscript digits stand for
// their ASCII spellings.
//
// # Refusals
//
// What has two readings is refused, and the message names both: 1/2 x, x^y^z,
// x^1/2, u^2_x, sin x, sin^2(x), |a|, x 2, x(2), .5, 2e-3 where e is a declared
// name, and d_x(f) where d is an unknown or a named formula. So is a name that is not declared, with the names it may be
// made of.
//
// A WORD in a subscript is split into coordinates and frame axes. NewScope
// refuses sets of them over which a subscript could be split in two ways,
// decided by the algorithm of Sardinas and Patterson (1953).
//
// Limits: a formula has at most 1 MiB and 500 brackets within brackets, a
// number at most 1000 digits, an exponent a numerator and a denominator of at
// most 1000000.
//
// # Printing
//
// Text and TeX print what parses to an equal tree (Same), with two exceptions:
// a total derivative where d is a declared name, and a formula nested so
// deeply that the brackets added pass the limit. MathML prints a
// whole math element with the elements of MathML Core only.
package formula
