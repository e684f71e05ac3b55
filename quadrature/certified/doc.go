// Package certified encloses integrals over an interval or a rectangle: the
// result is an interval that contains the integral, by outward-rounded
// arithmetic (package interval) and a bound of the remainder of the rule.
//
// # Method
//
// The integrand is a Tape of operations in one or two parameters in [0, 1].
// On a cell of length h Gauss–Legendre quadrature with n nodes has the
// remainder
//
//	h^(2n+1) (n!)^4 / ((2n+1) ((2n)!)^3) · f^(2n)(ξ)  =  h γ_n · h^(2n) f^(2n)(ξ)/(2n)!,
//	γ_n = (n!)^4 / ((2n+1) ((2n)!)^2),
//
// for some ξ in the cell (P. J. Davis and P. Rabinowitz, Methods of Numerical
// Integration, 2nd ed., Academic Press 1984, section 2.7; the general form is
// in the NIST Digital Library of Mathematical Functions, section 3.5(v)). Nodes
// and weights are enclosed: the nodes by changes of sign of the Legendre
// polynomial at rational points in exact arithmetic, of which there are as many
// as it has zeros, the weights from them with 160 bits. The values at the nodes
// and the Taylor coefficient f^(2n)/(2n)! on the whole cell are enclosed by
// interval arithmetic on Taylor series (R. E. Moore, Methods and Applications
// of Interval Analysis, SIAM 1979, section 3.4), which also shows that f is
// smooth on the cell: where an operation is not differentiable on the cell the
// coefficients are the whole line. Beside the rule the product of h and the range
// of f encloses the integral too, smooth or not; the intersection of both is
// taken.
//
// In two dimensions the rule is iterated: for each node in the first parameter
// the rule in the second one with its remainder, and the remainder in the first
// one, enclosed on the cell and integrated over the second. Cells are
// bisected, the widest enclosure first, across the direction whose remainder is
// the larger. At a point where the integrand is bounded but not smooth the cells
// shrink geometrically and the range takes over.
//
// # Guarantees
//
// Operations have the semantics of sets: the integral that is enclosed is that
// of the integrand where it is defined. That roots and logarithms are defined on
// all of the domain is a statement of its own; NonNegative and Positive prove it
// for their arguments. An integrand that cannot be bounded on some cell has an
// unbounded enclosure. Results do not depend on the machine.
package certified
