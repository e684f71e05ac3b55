// Package enclosure computes with outward-rounded intervals of multiprecision
// numbers. It decides signs rigorously at rational points where a formula has
// transcendental parts.
//
// An [Interval] is a closed interval [lo, hi] whose ends are binary numbers of
// a [big.Float]; either end may be infinite. A [Context] holds the precision
// and carries the operations. The one promise is containment: if every operand
// contains the true value of its expression, so does the result. It holds
// because every lower end is rounded toward minus infinity, every upper end
// toward plus infinity, and every truncated series is widened by a proved bound
// of its tail.
//
// # Undefined values
//
// An operation that is undefined somewhere on its argument (the logarithm of an
// interval that touches a number ≤ 0, an even root of one that touches a
// number < 0, division by an interval that contains 0, the tangent across a
// pole) yields [Entire], the whole line. Entire is absorbing: any operation on
// it yields Entire again, even multiplication by zero, so an undefined part of
// an expression is never lost. No result is empty and no operation panics.
// Conversely a result other than Entire shows that the expression is defined on
// all of its argument.
//
// # Range
//
// A finite end has a binary exponent of at most 2^29 in absolute value. Beyond
// it an end is moved outward: to an infinity, to zero, or to the nearest power
// of two within the range. The exponential is evaluated for |x| ≤ 2,500,000
// (values up to about 10^1085736); beyond, it gives the one-sided bounds
// [exp(2500000), +Inf] and [0, exp(-2500000)]. Sine and cosine of a number of
// absolute value 2^4096 or more are only known to lie in [-1, 1], and their
// quotient is Entire. No input takes long: a tower of exponentials returns at
// once.
//
// # Series
//
// Arguments are reduced exactly as the comments beside each function say; then
// a power series is summed in interval arithmetic with more precision than
// asked for. Every series used has |t[j+1]| ≤ |t[j]|/2 from the index at which
// it is cut, n, on. So its tail is at most
//
//	|t[n]| (1 + 1/2 + 1/4 + ...) = 2 |t[n]|,
//
// which is added on both sides. Where an end turns out too loose (a value near
// a zero of the sine, say) the evaluation is repeated with more precision.
// Results are within a few units in the last place, not always the tightest
// possible.
//
// The expansions are those of the NIST Digital Library of Mathematical
// Functions: 4.2.19 (exponential), 4.6.4 (logarithm), 4.19.1 and 4.19.2 (sine,
// cosine), 4.33.1 (hyperbolic sine), 7.6.2 (error function), 7.8.2 (bounds of
// its complement).
package enclosure
