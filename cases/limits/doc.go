// Package limits integrates the energy of the smooth approximations of a case
// at falling eps, and compares it with the jump energy.
//
// A limit of a case file names an approximation (the one-dimensional profile of
// a planar wall, the smooth front of branches, a combination of branches
// mollified in space), a domain and some eps. This package compiles the branches, the
// density R²/(2 eps) + eps L²/2 or that of the model, and the domain, for package
// quadrature/limit. Branches off the well are refused, by exact arithmetic or,
// where that does not decide it, by the residual at a few points.
//
// The gap to the jump energy, the order in eps at which it falls and the energy
// extrapolated to eps = 0 follow from the energies. All of it is floating-point
// arithmetic with estimates of the errors, and proves nothing.
package limits
