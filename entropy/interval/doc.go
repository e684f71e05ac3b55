// Package interval is outward-rounded interval arithmetic in float64.
//
// An [Interval] is a closed, connected set of real numbers, possibly empty or
// unbounded. Semantics and names of operations follow the set-based flavour of
// IEEE Std 1788.1-2017 (the simplified form of IEEE Std 1788-2015): the result of
// an operation contains the value at every tuple of elements at which it is
// defined, and where it is defined nowhere the result is empty. So the root of
// [-1, 4] is [0, 2], and the root of [-2, -1] is empty. To learn whether an
// operation was defined and continuous on all of its operands, keep a
// [Decoration], as the evaluation of compiled formulas in package program can.
//
// No bound is ever NaN. The numeric functions Mid, Rad, Wid, Mag and Mig are NaN
// for the empty set, as in the standard, and only there.
//
// # Guarantees
//
// Every result contains the exact range. For numbers as operands (that is,
// singletons; for others the same holds of each bound):
//
//	Neg, Abs, Sign, Min, Max          exact
//	Add, Sub, Mul, Div, Recip, Sqr,   each bound is the nearest float64 outward,
//	Sqrt, Fma                         so a representable result is a singleton
//	Pown                              as above if x^n and the powers on the way
//	                                  need at most 53 bits; else as below
//	Rootn, Cbrt                       a singleton where the root is a float64
//	                                  (n < 2048); else as below
//	Exp, Sinh, Cosh, Tanh, Log, Sin,  a bound is the nearest float64 outward
//	Cos, Tan, Atan, Erf, Pown,        unless the value is within about 2^-80 of
//	Rootn, Cbrt                       it, relatively; then it may be the next one
//	Pow, PowRat                       the same within about 2^-75
//
// The values exp(0), log(1), sin(0), cos(0) and their like are exact. The
// relations 0 <= exp, -1 <= sin, cos, tanh, erf <= 1 and 1 <= cosh always hold.
// Erf and PowRat are not in the standard.
//
// # Method
//
// Arithmetic rounds to nearest and obtains the sign of the rounding error by
// error-free transformations, with math.FMA, which is exact on every
// architecture; the rounding mode is never changed. Functions are evaluated
// in pairs of float64 numbers with a bound of the error that is propagated
// along with them, from argument reductions and series of this package: nothing
// of package math with an unproved bound is used. Arguments of sine, cosine and
// tangent above 2^20 in absolute value are left to package enclosure. Results
// are the same on every architecture.
//
// # Left out
//
// Of the operations that the standard requires: the functions exp2, exp10,
// log2, log10, asin, acos, atan2, asinh, acosh, atanh, ceil, floor, trunc and
// the reverse operations, and text input.
package interval
