// Package creases computes the jump energy over the surfaces of a case.
//
// A surface of a case file says where a gradient jumps (a polygon, a patch or
// a graph) and what the traces are on its two sides: u itself, its gradients,
// or nothing but a density. For every combination of the listed values
//
//   - the assumptions of the case are decided for the values by exact
//     arithmetic or an enclosure, and refuse the surface where they do not hold
//     or cannot be decided; those about coordinates are enclosed at a few points
//     of the surface;
//   - the traces are compiled together with their gradients, and for u in
//     closed form the residual is brought to exact normal form: a residual
//     that is exactly zero settles that the trace is on the well, one that an
//     outward-rounded enclosure shows not to vanish at a point of the surface
//     refuses it there. So does a jump of u, however small. On a patch or a
//     graph u is continuous where the jump vanishes identically once the
//     formulas of the positions are put for the coordinates. What remains is
//     checked numerically at every node and at some further places (package
//     quadrature), as are continuity of u and direction of the jump;
//   - the parts of formulas without variables are evaluated to 200 bits and
//     rounded once, so that the difference of two close constants costs nothing;
//   - the density is the one given, or the profile cost of the model (package
//     entropy, type Profile) where the energy is R²/(2 eps) + eps L²/2;
//   - the integral is computed with an error estimate and compared with the
//     claimed energy, which is enclosed with 200 bits and rounded once;
//   - for the layered model the energy is computed a second time by
//     horizontal slices, from which neither normals nor areas are needed.
//
// # Verdicts
//
// An energy that agrees with the claim within the error, and the relative
// difference that the case allows (within), is supported; nothing
// here is a proof, and a float never refutes. Disagreement, a failed check and
// an accuracy that was not reached leave the claim open, with the reason. A
// surface that fails a check has no energy.
package creases
