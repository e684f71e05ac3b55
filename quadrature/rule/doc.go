// Package rule holds the quadrature rules on [-1, 1] that the adaptive
// integrators are built on.
//
// # Gauss–Kronrod pairs
//
// The n-point Gauss–Legendre rule is exact for polynomials of degree 2n-1.
// Its Kronrod extension adds n+1 nodes, the zeros of the Stieltjes polynomial
// E of degree n+1 defined by
//
//	∫ P_n(x) E(x) x^k dx = 0    for k = 0, …, n,
//
// and is exact to degree 3n+1 (n even) or 3n+2 (n odd). The pairs 7-15, 10-21
// and 15-31 are tabulated to 33 significant digits; they were computed from
// this definition in 120-digit arithmetic and agree with
// Piessens, de Doncker-Kapenga, Überhuber, Kahaner, QUADPACK (1983), and with
// the NIST Digital Library of Mathematical Functions, section 3.5(v).
//
// # Decay of the Legendre coefficients
//
// The coefficients c_j = (2j+1)/2 ∫ f P_j of a function analytic in the
// Bernstein ellipse of parameter r fall like r^-j; those of a function with a
// kink or a jump inside fall only algebraically. A Kronrod rule of degree d
// computes c_j without aliasing from the part of f of degree at most d - j, so
// the eight coefficients below d/2 are at hand for the price of eight dot
// products. The ratio of neighbouring pairs tells a resolved function from an
// unresolved one. This is the idea of null rules: Berntsen and Espelid,
// Error estimation in automatic quadrature routines, ACM TOMS 17 (1991).
//
// # Double exponential rule
//
// TanhSinh gives the nodes of the substitution x = tanh(π/2 sinh t) of
// Takahasi and Mori, Double exponential formulas for numerical integration,
// Publ. RIMS 9 (1974), with the distance from the end as its own number, so
// that nothing cancels next to an end.
package rule
