// Package levelset integrates over curves in the plane and surfaces in space
// that are given as the zero set of a function, {phi = 0}, in a box.
//
// # Mathematics
//
// On a box where the derivative of phi by one coordinate, the height, has one
// sign the zero set is a graph over the other coordinates, and
//
//	∫_S f dA = ∫ f(x, h(x)) |grad phi| / |phi_h| dx
//
// over those x for which phi has different signs on the two faces of the box.
// That is a domain of one dimension less, bounded by zero sets of phi restricted
// to the faces, to which the same is done again, down to a segment. This is the
// recursive dimension reduction of R. I. Saye, High-order quadrature methods
// for implicitly defined surfaces and volumes in hyperrectangles, SIAM J. Sci.
// Comput. 37 (2015) A993–A1019. On the segment all zeros of the restricted
// functions become break points; between them the integrand is smooth, and
// tensor products of Gauss–Legendre rules are used.
//
// Trims, functions that have to be non-negative on the surface, are restricted
// to it as functions of the base, psi(x, h(x)), with the gradient
// psi_x - psi_h phi_x/phi_h, and join the functions that bound the domain; where
// the zeros of two of them cross there is a further break point.
//
// # Cells
//
// The box is cut until in each cell a height, and in the base an inner
// direction, are certain, by intervals. A cut is placed at a critical point where
// one is found: next to a point s at which the derivative changes sign the cell
// is cut at s - h and s + h, h about 2^-45 of the box. The two outer parts then
// have certain signs, and the surface is nearly parallel to the height only at
// their ends, where it is integrated after a substitution that is quadratic in
// the distance; this turns roots of the distance, and their inverses, into
// smooth functions. So a closed convex surface takes a few cells instead of a
// graded multitude. The area in the slab is bounded, with the slab's own
// derivatives, and left out; the bound is part of the error. Elsewhere cells are
// cut off their centres, so that surfaces placed symmetrically do not lie on
// faces.
//
// # Components
//
// Graphs of neighbouring cells belong to one component of the surface where they
// have a point in common at which every condition holds strictly. Points on the
// edges of graphs are looked at, several on each edge while there is more than
// one component. In a cell there is one graph, cut into parts that do not
// overlap, so that such a point belongs to every part whose cell and outer range
// it lies in. Across a thin slab it does where the surface crosses the slab at an
// angle of at least 2^-10. In IntegrateUnion parts of different systems are
// joined where a condition vanishes and the opposite one does.
//
// # What is guaranteed
//
//   - Cells are discarded only where outward-rounded intervals show that phi is
//     not zero, or a trim negative. Together with the certain signs
//     of derivatives, no component of the surface is missed, however small,
//     except in the cells that Result counts as undecided: Resolution is the
//     diameter of the largest, 0 if there is none. This rests on the
//     enclosures that the caller supplies.
//   - Break points: the zeros on segments are isolated with intervals; two zeros
//     closer than 1e-12 of the segment are not told apart. Only between trims,
//     in cells below 1/32 of the box, zeros that resist 500 enclosures (zero
//     sets that nearly coincide) are looked for at 64 places instead.
//   - Value, Area: floating-point quadrature. Nothing here is an enclosure. Zeros
//     are found to rounding by Newton's method in a bracket.
//   - Error, AreaError: estimates, meant to be at least the true error. They are
//     made of the decay of the Legendre coefficients in both directions, with
//     half of the gain that the decay promises; of how the range
//     of the inner parameter leaves its polynomial next to the ends of the outer one; of rounding, which grows where the
//     surface is parallel to the height; and of the bounds of the area left out,
//     times twice the density at the centres of the cells left out, or the
//     largest met. In thin slabs a density that is much larger on less than a
//     thousandth of the surface counts by how much of a slab may lie there. Where a refinement moves a value by more
//     than the estimate allowed, the estimates of the parts are enlarged. A
//     density with a peak between all nodes is not seen.
//   - Components: the points on edges are floating-point numbers, and a condition
//     within 2^-38 of the box of its zero, by its gradient, counts as zero. A
//     bridge between two parts narrower than 1e-6 of the edges it crosses, or a
//     gap narrower than 2^-42 of the box, may go unseen; so may a curve on which
//     a condition vanishes without a change of sign. Undecided cells may hold
//     further components, or join those found: Result.Settled says that there are
//     none, but for cells in which thin slabs cross.
//   - Singular points, where grad phi vanishes on the surface, as at the tip of a
//     cone, end in undecided cells so small that their share is within
//     the tolerance; that each of these holds at most two sheets is assumed, not
//     proved. Lines of singular points, where sheets cross, cannot be closed in
//     on in this way: ErrResolution says what was reached.
//   - Nodes: exact count of evaluations of the density. Budgets count work, and
//     results are deterministic.
package levelset
