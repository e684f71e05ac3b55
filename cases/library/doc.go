// Package library holds the built-in cases: the layered model and the planar
// eikonal model with their entropy fields, Young bounds and sharp densities;
// conservation laws and null Lagrangians from the literature; inequalities for
// the Hessian, forms that are nonnegative and no sums of squares, bounds that hold
// on a box or on the well only, inequalities between norms and between means;
// claims that are false; and the crease surfaces whose energy is a closed form. Each is one
// TOML file with the published source beside the check it supports.
//
// Every crease of a model appears as it is, with its traces exchanged, turned
// about the z axis (by the rational angle of the 3-4-5 triangle) and after the
// Galilean map u(x_perp + a z, z) + a·x_perp + |a|^2 z/2, for several values of
// its parameters; none of these changes the energy.
package library
