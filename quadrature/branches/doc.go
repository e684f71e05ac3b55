// Package branches finds where a function combined of branches by maxima and
// minima has a crease.
//
// # What a crease is here
//
// Let u be an expression in branches u_1, …, u_n of a class C¹, each used once,
// built with max and min: a Tree, such as max(min(1, 2), 3). At a point where
// u_i = u_j and no other branch has that value, put every other branch to -∞
// where it is below and +∞ where it is above. The tree then reduces to one of:
// a constant, one of the two branches, or their maximum or minimum. Only in the
// last two cases does the gradient of u jump, from that of one of the two to
// that of the other. The sheet of the pair (i, j) is the closure of these
// points.
//
// # Affine branches
//
// Faces finds the sheets of branches a·x + c with rational coefficients on a box
// with rational ends as convex polygons (in the plane, segments) in exact
// rational arithmetic: the part of the plane u_i = u_j inside the box is cut by
// the planes of the other branches, as far as the tree depends on which side of
// them it is. Other branches that coincide with the two on all of their plane
// are compared beside it, where u_k - u_i = c (u_i - u_j) with a rational c. The
// result is a proof up to the correctness of this program: floating-point
// numbers choose the order of the cuts, and decide a comparison only beyond a
// bound of their error.
//
// The energy is that of the jumps inside the open box. A sheet in a side of it is
// refused: u jumps there if it is continued, and does not if it is not.
//
// Where a cut ends that does not matter in the end, two faces of a pair share an
// edge. Connected puts together those that do.
//
// The area of a face is a rational multiple of the length of the jump of the
// gradient, hence the root of a rational number; the energy of a density that
// is homogeneous with the opposite power of that length is rational.
//
// # Other branches
//
// Cells gives the conditions under which a pair has a sheet as a disjoint union
// of systems of inequalities u_k < u_i, u_k > u_i, from which implicit surfaces
// with trims are made. Pairs says which pairs may have one on a box, by interval
// enclosures of the branches on finer and finer boxes: a pair it leaves out
// certainly has none.
package branches
