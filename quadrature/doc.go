// Package quadrature integrates the energy of jumps of a gradient over
// surfaces in space and curves in the plane.
//
// # What is integrated
//
// A function u is smooth on both sides of a surface S with unit normal nu, its
// gradients p+ (on the side nu points to) and p- (on the other) lie on the
// well, the zero set of a residual R, and u is continuous across S, so that
// p+ - p- is parallel to nu. A Density f(x, p+, p-, nu) is the energy per area
// of that jump and
//
//	E = ∫_S f(x, p+, p-, nu) dA
//
// is computed together with the area of S. With x(s1, s2) a parametrisation,
// dA = |x_1 × x_2| ds1 ds2; for a curve in the plane dA = |x'| ds.
//
// For the layered model, R = u_z - |grad_perp u|²/2, the sharp density is
// |q_perp|⁴/(12 |q|) with q = p+ - p-, and the same energy is the integral of
// |q_perp|³/12 over the length of the horizontal slices and over z. Slice
// computes that second form without normals or area elements, so that the two
// numbers check each other.
//
// # Surfaces
//
// Patch is a parametrised curve or surface, Polygon a flat polygon in space or
// a chain of segments in the plane, Graph the graph of a function over an
// Interval, Rectangle, Triangle or Disc. A polygon is cut into triangles with
// exact orientation tests; triangles are collapsed squares and discs are in
// polar coordinates, so all of them come down to rectangles of parameters.
//
// # Method
//
// The integral over a rectangle is iterated: package adaptive integrates in one
// direction at every node of the other. This follows kinks and singularities
// along curves oblique to the parameters at logarithmic cost, where cutting
// rectangles would need a number of cells like the inverse tolerance. A
// parameter at the two ends of which positions and tangents agree is treated
// as periodic, by the trapezoidal rule, and taken as the inner one; the grids
// of neighbouring rows are shifted against each other so that what one misses
// shows as roughness in the other direction. Once a row has shown a kink, rows
// begin with more panels the finer the other direction is cut, like the root of
// its fineness, for a row almost tangent to a kink crosses it twice close
// together.
//
// # What is guaranteed
//
//   - Energy, Area: floating-point quadrature. Nothing here is an enclosure.
//   - Error, AreaError: estimates, meant to be at least the true error. They
//     are the estimates of package adaptive, of both directions, plus a floor
//     for rounding: a few units in the last place of the sum of the absolute
//     contributions, more where positions are far from the origin compared
//     with the extent of the surface or where p+ and p- nearly cancel. Where the
//     density at some 256 places spread over the surface is beyond the densities
//     at the nodes, by more than a quarter of what these vary by, the integral is
//     begun again with panels of an eighth and, if need be, a 64th of the range.
//     What can still be missed altogether, so that the estimate is wrong: a ridge
//     narrower than about 1/256 of a parameter's range, a peak in both directions
//     on less than about 1/256 of the area, and one that stays within the values
//     met elsewhere.
//   - Checks: made at every node used and at some 256 places spread over the
//     surface, with a relative tolerance (that of continuity is tied to
//     rounding), hence not a proof that the conditions hold on the surface. A refusal names a place at which they do not hold, to
//     the tolerance. It is wider where positions are far from the origin
//     compared with the extent of the surface, but at most 1e-7. Where u is
//     known, its gradients at those places are compared with those at two small
//     distances on their own sides, which shows a kink of u on the surface.
//   - Evaluations: exact count of evaluations of the density at nodes, to which
//     those at the further places do not belong.
//
// Results are deterministic and do not depend on the number of cores.
package quadrature
