// Package sample draws reproducible random jets and evaluates an inequality on
// them, looking for points of small or negative margin.
//
// A [Layout] says what the columns of a point are: free numbers, numbers of one
// sign or in an interval, the cosine and sine of an angle, and which of them
// are derivatives of which unknown. A [Law] fills blocks of points. Inequalities
// between polynomials in derivatives fail on sets that no single distribution
// meets: at balanced magnitudes, at extreme ratios, at small integers, near the
// zero set of a residual, on degenerate Hessians. Hence several laws, taken in
// turn block by block. Angles are points of the circle
//
//	cos θ = ±(1 - t²)/(1 + t²),  sin θ = 2t/(1 + t²)
//
// with dyadic t of at most 24 bits in [-1, 1], so that the rational point
// behind a drawn one is recovered from t = sin θ/(1 + |cos θ|); the axes and
// diagonals occur often.
//
// [Run] evaluates a compiled program that yields the gap and the sum of the
// absolute values of its expanded monomials. Their quotient is the margin, in
// [-1, 1] up to rounding; it is 0 where the sum is 0 or not finite.
//
// # Reproducibility
//
// Block k of a run is drawn from a generator seeded from the seed and k only
// (PCG with DXSM output, from math/rand/v2; M. O'Neill, PCG, Harvey Mudd
// College report HMC-CS-2014-0905), so the points do not depend on the number of
// goroutines or their timing, and neither do the results: points of equal
// margin are ordered by block and lane. Drawing uses additions,
// multiplications, divisions and bit operations, which are the same on every
// machine; only the tail of the Gaussian law, about one value in four hundred,
// and programs with transcendental functions call functions of package math,
// which may differ in the last place between architectures.
//
// # What is rigorous
//
// Nothing. A negative margin in floating point may be rounding, and a
// non-negative least margin is no proof. The points that Run keeps are
// candidates, to be settled in exact arithmetic by the caller: each coordinate
// is a float64 and so a rational number.
package sample
